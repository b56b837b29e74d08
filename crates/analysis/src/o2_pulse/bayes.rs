//! Log Bayes factor of a late break against a smooth natural bend (step 8).

use super::design::ONSETS_MIN;
use super::fit::Fit;
use super::linalg::Square;
use super::noise::{BREAKS, LOAD, OUTCOME};

/// Factors by which the slope of V̇O₂ on HR may change.
const RATIOS: [f64; 4] = [0.6, 0.45, 0.3, 0.15];
/// Shares of the change that V̇O₂ takes.
const SHARES: [f64; 5] = [0.0, 0.25, 0.5, 0.75, 1.0];

/// Evidence for a late break.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Evidence {
    /// Log Bayes factor.
    pub log_bayes_factor: f64,
    /// Mean onset, min before load end.
    pub onset_min: f64,
    /// 10–90 % set of the onset, min before load end.
    pub onset_set_min: (f64, f64),
    /// Mean factor of the slope.
    pub ratio: f64,
}

/// Marginal log likelihood of a load slope that changes by `factor` at the break `onset`.
fn likelihood(gram: &Square, factor: f64, onset: usize) -> f64 {
    let h = BREAKS + onset;
    let f = factor - 1.0;
    let zz = gram.at(LOAD, LOAD) + 2.0 * f * gram.at(LOAD, h) + f * f * gram.at(h, h);
    let zy = gram.at(LOAD, OUTCOME) + f * gram.at(h, OUTCOME);
    0.5 * zy * zy / zz - 0.5 * libm::log(zz)
}

/// The evidence from both variables.
pub(crate) fn evidence(vo2: &Fit, hr: &Fit) -> Option<Evidence> {
    let (v, h) = (vo2.centred()?, hr.centred()?);
    let none = likelihood(&v, 1.0, 0) + likelihood(&h, 1.0, 0);
    let mut terms = Vec::with_capacity(120);
    for r in RATIOS {
        for s in SHARES {
            for onset in 0..ONSETS_MIN.len() {
                let both = likelihood(&v, libm::pow(r, s), onset)
                    + likelihood(&h, libm::pow(r, s - 1.0), onset);
                terms.push((both - none, onset, r));
            }
        }
    }
    let top = terms.iter().map(|t| t.0).fold(f64::NEG_INFINITY, f64::max);
    let mut weight = [0.0; 6];
    let (mut sum, mut ratio) = (0.0, 0.0);
    for (ln, onset, r) in &terms {
        let w = libm::exp(ln - top);
        sum += w;
        weight[*onset] += w;
        ratio += w * r;
    }
    if !sum.is_finite() {
        return None;
    }
    let onset_min = weight.iter().zip(ONSETS_MIN).map(|(w, l)| w * l).sum::<f64>() / sum;
    Some(Evidence {
        log_bayes_factor: top + libm::log(sum / terms.len() as f64),
        onset_min,
        onset_set_min: (quantile(&weight, sum, 0.1), quantile(&weight, sum, 0.9)),
        ratio: ratio / sum,
    })
}

fn quantile(weight: &[f64; 6], sum: f64, p: f64) -> f64 {
    let mut cumulated = 0.0;
    for (w, minutes) in weight.iter().zip(ONSETS_MIN) {
        cumulated += w / sum;
        if cumulated >= p {
            return minutes;
        }
    }
    ONSETS_MIN[ONSETS_MIN.len() - 1]
}

/// Standard normal distribution function.
pub(crate) fn normal_cdf(x: f64) -> f64 {
    0.5 * libm::erfc(-x / core::f64::consts::SQRT_2)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn normal_distribution_at_published_points() {
        // Standard normal table: 0.95 at 1.644854, 0.99 at 2.326348.
        assert!((normal_cdf(1.644_854) - 0.95).abs() < 1e-6);
        assert!((normal_cdf(2.326_348) - 0.99).abs() < 1e-6);
        assert_eq!(normal_cdf(0.0), 0.5);
    }

    #[test]
    fn quantiles_of_a_discrete_set() {
        let weight = [1.0, 1.0, 6.0, 1.0, 0.5, 0.5];
        assert_eq!(quantile(&weight, 10.0, 0.1), 2.0);
        assert_eq!(quantile(&weight, 10.0, 0.9), 3.5);
    }
}
