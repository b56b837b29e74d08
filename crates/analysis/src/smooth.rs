//! Smoothed breath series and responses cleaned of the noise they share with another one.

use crate::robust;

/// Half width of the local line, s.
pub(crate) const HALF_S: f64 = 45.0;
/// Relative residuals beyond this many robust SD do not enter the shared-noise slope.
const TRIM: f64 = 4.0;

/// A series, its local mean line and the relative residual.
#[derive(Clone, Debug, Default)]
pub(crate) struct Smoothed {
    pub raw: Vec<f64>,
    pub hat: Vec<f64>,
    /// (raw − hat) / hat.
    pub relative: Vec<f64>,
}

impl Smoothed {
    /// Smooths `raw` at times `t_s` by a straight line over ±45 s, one-sided at the ends.
    pub fn new(t_s: &[f64], raw: Vec<f64>) -> Self {
        let hat = local_line(t_s, &raw, HALF_S);
        let relative =
            raw.iter().zip(&hat).map(|(x, h)| if *h > 0.0 { (x - h) / h } else { 0.0 }).collect();
        Self { raw, hat, relative }
    }
}

/// Value at each point of the straight line through the points within ± `half_s`; running sums.
pub(crate) fn local_line(t_s: &[f64], x: &[f64], half_s: f64) -> Vec<f64> {
    let n = t_s.len();
    let (mut from, mut to) = (0, 0);
    // Sums over [from, to) of 1, t, t², x, t·x, with t counted from the current origin.
    let mut s = [0.0; 5];
    let mut origin = t_s.first().copied().unwrap_or(0.0);
    let mut out = Vec::with_capacity(n);
    for i in 0..n {
        if t_s[i] - origin > 300.0 {
            // Keeps the sums well conditioned in long records.
            origin = t_s[i];
            s = [0.0; 5];
            for k in from..to {
                add(&mut s, t_s[k] - origin, x[k], 1.0);
            }
        }
        while to < n && t_s[to] <= t_s[i] + half_s {
            add(&mut s, t_s[to] - origin, x[to], 1.0);
            to += 1;
        }
        while t_s[from] < t_s[i] - half_s {
            add(&mut s, t_s[from] - origin, x[from], -1.0);
            from += 1;
        }
        let (mt, mx) = (s[1] / s[0], s[3] / s[0]);
        let (tt, tx) = (s[2] - s[0] * mt * mt, s[4] - s[0] * mt * mx);
        let slope = if to - from >= 3 && tt > 1e-9 * s[2] { tx / tt } else { 0.0 };
        out.push(mx + slope * (t_s[i] - origin - mt));
    }
    out
}

fn add(s: &mut [f64; 5], t: f64, x: f64, sign: f64) {
    for (sum, term) in s.iter_mut().zip([1.0, t, t * t, x, t * x]) {
        *sum += sign * term;
    }
}

/// Slope of the residuals `of` on the relative residuals `on`, wild ones left out.
pub(crate) fn shared(of: impl Iterator<Item = f64> + Clone, on: &[f64]) -> f64 {
    let mut copy = on.to_vec();
    let limit = TRIM * robust::scale(&mut copy);
    let (mut xy, mut xx) = (0.0, 0.0);
    for (y, x) in of.zip(on) {
        if x.abs() < limit {
            xy += x * y;
            xx += x * x;
        }
    }
    if xx > 0.0 { xy / xx } else { 0.0 }
}

/// `y` without the noise it shares with `x`: y* = y − β·ŷ·e_x.
pub(crate) fn cleaned(y: &Smoothed, x: &Smoothed) -> Vec<f64> {
    let beta = shared(y.relative.iter().copied(), &x.relative);
    (0..y.raw.len()).map(|i| y.raw[i] - beta * y.hat[i] * x.relative[i]).collect()
}

/// A tension without the part that goes with the relative noise of ventilation.
pub(crate) fn cleaned_tension(p: &[f64], p_hat: &[f64], noise: &[f64]) -> Vec<f64> {
    let slope = shared(p.iter().zip(p_hat).map(|(p, h)| p - h), noise);
    p.iter().zip(noise).map(|(p, e)| p - slope * e).collect()
}

/// Correlation of neighbouring residuals: above 0.3 the export was averaged over a few breaths.
pub(crate) fn lag_one(relative: &[f64]) -> f64 {
    let mut copy = relative.to_vec();
    let limit = TRIM * robust::scale(&mut copy);
    let inside: Vec<f64> = relative.iter().map(|e| e.clamp(-limit, limit)).collect();
    let squares: f64 = inside.iter().map(|e| e * e).sum();
    let pairs: f64 = inside.windows(2).map(|p| p[0] * p[1]).sum();
    if squares > 0.0 { pairs / squares } else { 0.0 }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn times(n: u32) -> Vec<f64> {
        (0..n).map(|k| 3.0 * f64::from(k)).collect()
    }

    #[test]
    fn a_straight_line_is_left_as_it_is() {
        let t = times(300);
        let x: Vec<f64> = t.iter().map(|t| 400.0 + 2.5 * t).collect();
        for (h, x) in local_line(&t, &x, HALF_S).iter().zip(&x) {
            assert!((h - x).abs() < 1e-8);
        }
    }

    #[test]
    fn a_spike_is_spread_over_its_neighbours() {
        // One breath 31 higher among 31 within ±45 s: the centre of the line rises by exactly 1.
        let t = times(101);
        let mut x = vec![100.0; 101];
        x[50] += 31.0;
        assert!((local_line(&t, &x, HALF_S)[50] - 101.0).abs() < 1e-9);
    }

    #[test]
    fn shared_noise_is_removed_and_own_noise_kept() {
        // Noise of V̇CO₂ is half of V̇O₂'s plus an own part orthogonal to it.
        let t = times(200);
        let e = |k: usize| [0.1, 0.1, -0.1, -0.1][k % 4];
        let own = |k: usize| [0.05, -0.05, -0.05, 0.05][k % 4];
        let x = Smoothed {
            raw: (0..200).map(|k| 1000.0 * (1.0 + e(k))).collect(),
            hat: vec![1000.0; 200],
            relative: (0..200).map(e).collect(),
        };
        let relative: Vec<f64> = (0..200).map(|k| 0.5 * e(k) + own(k)).collect();
        let raw = relative.iter().map(|e| 900.0 * (1.0 + e)).collect();
        let y = Smoothed { raw, hat: vec![900.0; 200], relative };
        for (k, y) in cleaned(&y, &x).iter().enumerate() {
            assert!((y - 900.0 * (1.0 + own(k))).abs() < 1e-9);
        }
        assert_eq!(t.len(), 200);
    }

    #[test]
    fn a_running_mean_shows_in_the_lag_one_correlation() {
        // A centred mean of three of independent values has lag-1 correlation 2/3; a fixed
        // pseudo-random sequence (linear congruence) stands for the values.
        let mut state = 1u64;
        let white: Vec<f64> = (0..3000)
            .map(|_| {
                state = state.wrapping_mul(6364136223846793005).wrapping_add(1442695040888963407);
                (state >> 33) as f64 / (1u64 << 31) as f64 - 0.5
            })
            .collect();
        let smooth: Vec<f64> = white.windows(3).map(|w| (w[0] + w[1] + w[2]) / 3.0).collect();
        assert!(lag_one(&white).abs() < 0.06);
        assert!((lag_one(&smooth) - 2.0 / 3.0).abs() < 0.06);
    }
}
