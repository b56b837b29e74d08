//! Long-run variance of breath residuals: what white noise of the same slow drift would show.
//!
//! Bins of fixed length from the ramp start; their variance times the breaths per bin, raised for
//! the correlation of neighbouring bins, and never below the plain residual variance.

/// Parameters taken off the residuals (line and knot).
const PARAMETERS: f64 = 4.0;
/// Small-sample bias of the lag-1 correlation that is added back, times the number of bins.
const BIAS: f64 = 2.5;
/// Highest correlation allowed for.
const RHO_MAX: f64 = 0.7;

/// Long-run variance per breath of the residuals `r` at times `t_s`, bins of `bin_s` counted from
/// `origin_s`. NaN with fewer than six residuals.
#[must_use]
pub fn variance(t_s: &[f64], r: &[f64], origin_s: f64, bin_s: f64) -> f64 {
    let n = r.len();
    if n < 6 {
        return f64::NAN;
    }
    let plain = r.iter().map(|r| r * r).sum::<f64>() / (n as f64 - PARAMETERS);
    let mut bins: Vec<(f64, f64)> = Vec::new();
    let mut current = f64::NAN;
    for (t, r) in t_s.iter().zip(r) {
        let bin = ((t - origin_s) / bin_s).floor();
        if bin != current {
            bins.push((0.0, 0.0));
            current = bin;
        }
        if let Some((sum, count)) = bins.last_mut() {
            *sum += r;
            *count += 1.0;
        }
    }
    let count = bins.len() as f64;
    if count <= PARAMETERS + 1.0 {
        return plain;
    }
    let per_bin = n as f64 / count;
    let mut x: Vec<f64> = bins.iter().map(|(sum, c)| sum / c * (c / per_bin).sqrt()).collect();
    let middle = x.iter().sum::<f64>() / count;
    for x in &mut x {
        *x -= middle;
    }
    let squares: f64 = x.iter().map(|x| x * x).sum();
    let pairs: f64 = x.windows(2).map(|p| p[0] * p[1]).sum();
    let rho = if squares > 0.0 { pairs / squares + BIAS / count } else { 0.0 };
    let rho = rho.clamp(0.0, RHO_MAX);
    let binned = squares / (count - PARAMETERS) * per_bin * (1.0 + rho) / (1.0 - rho);
    binned.max(plain)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn alternating_noise_keeps_its_plain_variance() {
        // +1, −1, …: bins of two cancel, so the plain variance n/(n − 4) stands.
        let t: Vec<f64> = (0..100).map(|k| 5.0 * f64::from(k)).collect();
        let r: Vec<f64> = (0..100).map(|k| if k % 2 == 0 { 1.0 } else { -1.0 }).collect();
        assert!((variance(&t, &r, 0.0, 10.0) - 100.0 / 96.0).abs() < 1e-12);
    }

    #[test]
    fn slow_blocks_raise_it_by_hand_arithmetic() {
        // 12 bins of 2 breaths, +1 in six, −1 in six, in blocks of three bins:
        // Σx² = 12, pairs +1 within blocks (8 of them), −1 across (3): ρ = 5/12 + 2.5/12 = 0.625.
        // LR = 12/8 · 2 · 1.625/0.375 = 13.
        let t: Vec<f64> = (0..24).map(|k| 5.0 * f64::from(k)).collect();
        let r: Vec<f64> = (0..24).map(|k| if k / 6 % 2 == 0 { 1.0 } else { -1.0 }).collect();
        assert!((variance(&t, &r, 0.0, 10.0) - 13.0).abs() < 1e-12);
    }

    #[test]
    fn too_few_residuals_have_none() {
        assert!(variance(&[0.0; 5], &[1.0; 5], 0.0, 10.0).is_nan());
    }
}
