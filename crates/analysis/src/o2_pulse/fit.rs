//! The joint fit of one variable (V̇O₂ or HR): load, natural bend, late breaks (steps 4 to 6).

use super::design::Design;
use super::detail::Bin;
use super::linalg::{Cholesky, Square, dot};
use super::noise::{self, BEND_EVEN, BEND_ODD, COLUMNS, CONSTANT, NoiseShape, Prior, Whitened};

/// Which of the two variables.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Variable {
    /// V̇O₂, mL/min.
    Vo2,
    /// HR, /min.
    Hr,
}

impl Variable {
    /// Size of the rise over the bins on which bends are scaled, never less than what noise makes.
    fn rise(self, slope: f64) -> f64 {
        slope.abs().max(match self {
            Variable::Vo2 => 200.0,
            Variable::Hr => 10.0,
        })
    }

    /// Prior of the natural bend, scaled to the rise `r` of this variable over the bins.
    pub fn prior(self, r: f64) -> Prior {
        let (mean, sd) = match self {
            Variable::Vo2 => ((0.0, -0.12), (0.18, 0.30)),
            Variable::Hr => ((-0.18, -0.04), (0.27, 0.35)),
        };
        Prior { mean: (mean.0 * r, mean.1 * r), sd: (sd.0 * r, sd.1 * r), break_sd: 0.45 * r }
    }

    fn noise(self, bins: &[Bin], y: &[f64], level: &[f64]) -> NoiseShape {
        match self {
            Variable::Vo2 => vo2_noise(bins, y, level),
            Variable::Hr => hr_noise(level),
        }
    }
}

fn vo2_noise(bins: &[Bin], y: &[f64], level: &[f64]) -> NoiseShape {
    let n = level.len();
    let tail = &level[n.saturating_sub(6)..];
    let late = tail.iter().sum::<f64>() / tail.len() as f64;
    let white: Vec<f64> = bins.iter().map(|b| late / (b.breaths as f64).sqrt()).collect();
    let mean_square = white.iter().map(|w| w * w).sum::<f64>() / n as f64;
    let s0 = sd_of_differences(y) / core::f64::consts::SQRT_2 / mean_square.sqrt();
    // A noiseless record must not make the covariance singular.
    let s0 = s0.max(1e-4);
    NoiseShape {
        drift: vec![late; n],
        tau_s: 25.0,
        white,
        d_range: (0.002, 0.04),
        d_prior: (libm::log(0.008), 0.8),
        w_grid: [0.6, 0.75, 0.9, 1.05, 1.25].iter().map(|f| f * s0).collect(),
    }
}

fn hr_noise(level: &[f64]) -> NoiseShape {
    let (first, last) = (level[0], level[level.len() - 1]);
    let rise = last - first;
    let unit: Vec<f64> = level
        .iter()
        .map(|f| {
            let phi = ((f - first + 0.2 * rise) / (1.2 * rise.max(15.0))).clamp(0.0, 1.0);
            3.3 - 2.6 * libm::pow(phi, 1.5)
        })
        .collect();
    NoiseShape {
        white: unit.iter().map(|u| 0.5 * u).collect(),
        drift: unit,
        tau_s: 30.0,
        d_range: (0.4, 3.5),
        d_prior: (libm::log(1.1), 0.5),
        w_grid: vec![0.25, 0.6, 1.2],
    }
}

fn sd_of_differences(y: &[f64]) -> f64 {
    let steps: Vec<f64> = y.windows(2).map(|w| w[1] - w[0]).collect();
    let mean = steps.iter().sum::<f64>() / steps.len() as f64;
    (steps.iter().map(|s| (s - mean) * (s - mean)).sum::<f64>() / steps.len() as f64).sqrt()
}

/// Weights whose product with `y` is the ordinary least-squares slope on `x` over `keep`; zero
/// elsewhere.
pub(crate) fn slope_weights(x: &[f64], keep: impl Fn(usize) -> bool) -> Vec<f64> {
    let used: Vec<usize> = (0..x.len()).filter(|&i| keep(i)).collect();
    let mean = used.iter().map(|&i| x[i]).sum::<f64>() / used.len() as f64;
    let square: f64 = used.iter().map(|&i| (x[i] - mean) * (x[i] - mean)).sum();
    let mut weights = vec![0.0; x.len()];
    for i in used {
        weights[i] = (x[i] - mean) / square;
    }
    weights
}

/// Weights of the mean over `keep`.
pub(crate) fn mean_weights(n: usize, keep: impl Fn(usize) -> bool) -> Vec<f64> {
    let count = (0..n).filter(|&i| keep(i)).count() as f64;
    (0..n).map(|i| if keep(i) { 1.0 / count } else { 0.0 }).collect()
}

/// A linear functional of the fitted curve: its value, and its weights on the coefficients.
#[derive(Clone, Debug)]
pub(crate) struct Functional {
    /// Value.
    pub value: f64,
    /// Weights on the coefficients of the fit.
    pub on_theta: [f64; 7],
}

/// The fit of one variable.
#[derive(Clone, Debug)]
pub(crate) struct Fit {
    /// Fitted curve at the bins.
    pub curve: Vec<f64>,
    /// Inner products of the whitened columns.
    pub white: Whitened,
    /// Prior used.
    pub prior: Prior,
    /// Even and odd bend less their prior means, as fractions of the rise of this variable.
    pub bend: (f64, f64),
    rows: Vec<[f64; 7]>,
    covariance: Square,
}

impl Fit {
    /// Fits `y` (bin means) with its smooth `level`; `None` where the algebra is degenerate.
    pub fn new(
        variable: Variable,
        bins: &[Bin],
        y: &[f64],
        level: &[f64],
        design: &Design,
    ) -> Option<Self> {
        let rise = variable.rise(dot(&slope_weights(&design.u, |_| true), y));
        let prior = variable.prior(rise);
        let columns = noise::columns(y, design, &prior);
        let white = noise::choose(bins, &variable.noise(bins, y, level), &prior, &columns)?;
        let (index, precision) = noise::terms(&prior);
        let (factor, right) = noise::normal(&white.gram, &index, &precision)?;
        let theta = factor.solve(&right);
        let rows: Vec<[f64; 7]> =
            (0..y.len()).map(|k| index.map(|column| columns[column][k])).collect();
        let mean = noise::prior_mean(design, &prior);
        let curve = rows.iter().zip(mean).map(|(row, m)| m + dot(row, &theta)).collect();
        let bend = (theta[2] / rise, theta[3] / rise);
        Some(Self { curve, white, prior, bend, rows, covariance: factor.inverse() })
    }

    /// The functional with `weights` on the bins.
    pub fn functional(&self, weights: &[f64]) -> Functional {
        let mut on_theta = [0.0; 7];
        for (row, weight) in self.rows.iter().zip(weights) {
            for (sum, x) in on_theta.iter_mut().zip(row) {
                *sum += weight * x;
            }
        }
        Functional { value: dot(&self.curve, weights), on_theta }
    }

    /// Variance of a combination of coefficients.
    pub fn variance(&self, on_theta: &[f64]) -> f64 {
        self.covariance.form(on_theta, on_theta)
    }

    /// Standard error of the curve at bin `k`.
    pub fn se_at(&self, k: usize) -> f64 {
        self.variance(&self.rows[k]).max(0.0).sqrt()
    }

    /// Inner products under noise and natural bend only, with the constant projected out.
    pub fn centred(&self) -> Option<Square> {
        let gram = &self.white.gram;
        let index = [CONSTANT, BEND_EVEN, BEND_ODD];
        let of = |sd: f64| 1.0 / (sd * sd);
        let precision = [0.0, of(self.prior.sd.0), of(self.prior.sd.1)];
        let factor: Cholesky = noise::normal(gram, &index, &precision)?.0;
        let solved: Vec<Vec<f64>> = (0..COLUMNS)
            .map(|b| factor.solve(&index.iter().map(|&i| gram.at(i, b)).collect::<Vec<_>>()))
            .collect();
        let mut out = Square::zeros(COLUMNS);
        for a in 0..COLUMNS {
            for (b, solved) in solved.iter().enumerate() {
                let shared: f64 = index.iter().zip(solved).map(|(&i, s)| gram.at(i, a) * s).sum();
                out.set(a, b, gram.at(a, b) - shared);
            }
        }
        Some(out)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slope_and_mean_weights_by_hand() {
        let x = [0.0, 1.0, 2.0, 9.0];
        // Slope of (1, 3, 5) on (0, 1, 2) is 2; the fourth point is not used.
        let w = slope_weights(&x, |i| i < 3);
        assert!((dot(&w, &[1.0, 3.0, 5.0, 100.0]) - 2.0).abs() < 1e-12);
        assert!((dot(&mean_weights(4, |i| i > 1), &[0.0, 0.0, 3.0, 5.0]) - 4.0).abs() < 1e-12);
    }
}
