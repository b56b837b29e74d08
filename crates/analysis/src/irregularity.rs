//! Irregularity of breathing: approximate entropy of tidal volume and of ventilation under load.

use crate::note::Note;
use crate::quantity::Quantity;
use crate::ramp_series::FROM_S;
use crate::results::{At, Outcome};
use crate::smooth;
use crate::stage::Stage;
use crate::unit::Unit;

/// Length of the compared patterns, breaths, and tolerance in standard deviations (Pincus, PNAS 1991).
const PATTERN: usize = 2;
const TOLERANCE: f64 = 0.2;
/// Breaths looked at: the last of the increments at most, and at least.
const MOST: usize = 150;
const LEAST: usize = 50;

/// Derives the two indices; they are shown, never classified.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    for (id, quantity) in [("vt-irregularity", Quantity::Vt), ("ve-irregularity", Quantity::Ve)] {
        let outcome = match index(stage, quantity) {
            Ok((value, n)) => {
                let mut outcome =
                    Outcome::quantity(id, At::Ramp, "approximate-entropy", Unit::One, value);
                outcome.basis.window_s = stage.results.phases.ramp();
                outcome.basis.breaths = n;
                outcome
            }
            Err(why) => {
                Outcome::absent(id, At::Ramp, "approximate-entropy", why).in_unit(Unit::One)
            }
        };
        stage.push(outcome);
    }
}

fn index(stage: &Stage<'_>, quantity: Quantity) -> Result<(f64, usize), Note> {
    if let Some(why) = stage.missing(&[quantity]) {
        return Err(why);
    }
    if !stage.intervals_hold() && !stage.oscillating {
        return Err(Note::new("averaged-table"));
    }
    let (from, to) = stage.results.phases.ramp().ok_or_else(|| stage.no_ramp())?;
    let (t, x) = stage.points(quantity, (from + FROM_S, to));
    if x.len() < LEAST {
        return Err(Note::new("too-few-breaths"));
    }
    // The rise with exercise is no irregularity: the local line is taken off.
    let hat = smooth::local_line(&t, &x, smooth::HALF_S);
    let off: Vec<f64> = x.iter().zip(&hat).map(|(x, h)| x - h).collect();
    let last = &off[off.len().saturating_sub(MOST)..];
    approximate_entropy(last).map(|v| (v, last.len())).ok_or_else(|| Note::new("too-few-breaths"))
}

/// Approximate entropy of a series (Pincus, PNAS 1991): Φᵐ − Φᵐ⁺¹ with self-matches; `None` when it
/// does not vary.
fn approximate_entropy(x: &[f64]) -> Option<f64> {
    let n = x.len();
    let mean = x.iter().sum::<f64>() / n as f64;
    let variance = x.iter().map(|v| (v - mean) * (v - mean)).sum::<f64>() / n as f64;
    let limit = TOLERANCE * variance.sqrt();
    if n <= PATTERN + 1 || limit <= 0.0 || !limit.is_finite() {
        return None;
    }
    let phi = |length: usize| {
        let count = n + 1 - length;
        let like = |i: usize, j: usize| (0..length).all(|k| (x[i + k] - x[j + k]).abs() <= limit);
        (0..count)
            .map(|i| libm::log((0..count).filter(|j| like(i, *j)).count() as f64 / count as f64))
            .sum::<f64>()
            / count as f64
    };
    Some(phi(PATTERN) - phi(PATTERN + 1))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_alternating_series_is_regular_by_closed_form() {
        // x = +1, −1, …, n = 100: of 99 pairs 50 begin with +1 and 49 with −1; of 98 triples 49
        // each. Φ² = (50 ln(50/99) + 49 ln(49/99))/99, Φ³ = ln(1/2).
        let x: Vec<f64> = (0..100).map(|k| if k % 2 == 0 { 1.0 } else { -1.0 }).collect();
        let two = (50.0 * libm::log(50.0 / 99.0) + 49.0 * libm::log(49.0 / 99.0)) / 99.0;
        let expected = two - libm::log(0.5);
        assert!((approximate_entropy(&x).unwrap() - expected).abs() < 1e-12);
        assert!(expected.abs() < 1e-3);
    }

    #[test]
    fn by_hand_on_five_values() {
        // 0, 0, 0, 10, 0: r = 0.2·4 = 0.8. Pairs 00, 00, 0T, T0: C = 2/4, 2/4, 1/4, 1/4.
        // Triples 000, 00T, 0T0: C = 1/3 each.
        let two = (2.0 * libm::log(0.5) + 2.0 * libm::log(0.25)) / 4.0;
        let expected = two - libm::log(1.0 / 3.0);
        let found = approximate_entropy(&[0.0, 0.0, 0.0, 10.0, 0.0]).unwrap();
        assert!((found - expected).abs() < 1e-12);
        assert_eq!(approximate_entropy(&[3.0; 60]), None);
    }

    #[test]
    fn a_scrambled_series_is_less_regular_than_its_sorted_self() {
        let mut state = 7u64;
        let mut x: Vec<f64> = (0..150)
            .map(|_| {
                state = state.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
                (state >> 40) as f64
            })
            .collect();
        let scrambled = approximate_entropy(&x).unwrap();
        x.sort_by(f64::total_cmp);
        assert!(scrambled > 2.0 * approximate_entropy(&x).unwrap());
    }
}
