//! Robust 10-s bins of breaths (step 2 of the recipe).

use super::detail::Bin;
use super::linalg::{Cholesky, Square};

/// Length of a bin, s.
pub(crate) const BIN_S: f64 = 10.0;
/// The fit begins this long after the start of the increments, s.
pub(crate) const LEAD_S: f64 = 120.0;
/// The fit ends this long before load end, s.
pub(crate) const TRIM_S: f64 = 20.0;

/// Bins with the smooth level at each.
#[derive(Clone, Debug, Default)]
pub(crate) struct Binned {
    /// The bins, rising in time.
    pub bins: Vec<Bin>,
    /// Smooth V̇O₂ at the bins, mL/min.
    pub vo2_level: Vec<f64>,
    /// Smooth HR at the bins, /min.
    pub hr_level: Vec<f64>,
}

/// A quartic in time, fitted by iteratively re-weighted least squares.
struct Quartic {
    centre: f64,
    half: f64,
    beta: [f64; 5],
}

impl Quartic {
    fn powers(&self, t: f64) -> [f64; 5] {
        let x = (t - self.centre) / self.half;
        [1.0, x, x * x, x * x * x, x * x * x * x]
    }

    fn at(&self, t: f64) -> f64 {
        self.powers(t).iter().zip(self.beta).map(|(p, b)| p * b).sum()
    }

    fn solve(&mut self, t: &[f64], y: &[f64], weight: &[f64]) -> Option<()> {
        let mut normal = Square::zeros(5);
        let mut right = [0.0; 5];
        for ((&t, &y), &w) in t.iter().zip(y).zip(weight) {
            let p = self.powers(t);
            for i in 0..5 {
                right[i] += w * p[i] * y;
                for j in 0..5 {
                    normal.set(i, j, normal.at(i, j) + w * p[i] * p[j]);
                }
            }
        }
        let beta = Cholesky::new(&normal)?.solve(&right);
        self.beta.copy_from_slice(&beta);
        Some(())
    }
}

/// Fits the quartic and returns it with the values clipped at ± 2.5 robust SD.
fn clip(t: &[f64], y: &[f64]) -> Option<(Quartic, Vec<f64>)> {
    let (from, to) = (*t.first()?, *t.last()?);
    let mut fit =
        Quartic { centre: 0.5 * (from + to), half: (0.5 * (to - from)).max(1.0), beta: [0.0; 5] };
    let mut weight = vec![1.0; t.len()];
    let mut residual = vec![0.0; t.len()];
    let mut scale = 0.0;
    for _ in 0..4 {
        fit.solve(t, y, &weight)?;
        for i in 0..t.len() {
            let level = fit.at(t[i]);
            if level <= 0.0 {
                return None;
            }
            residual[i] = (y[i] - level) / level.sqrt();
        }
        scale = 1.4826 * median_abs(&residual);
        for (w, r) in weight.iter_mut().zip(&residual) {
            *w = if r.abs() > 1.5 * scale && scale > 0.0 { 1.5 * scale / r.abs() } else { 1.0 };
        }
    }
    let limit = 2.5 * scale;
    let clipped = (0..t.len())
        .map(|i| {
            let level = fit.at(t[i]);
            level + residual[i].clamp(-limit, limit) * level.sqrt()
        })
        .collect();
    Some((fit, clipped))
}

fn median_abs(x: &[f64]) -> f64 {
    let mut sorted: Vec<f64> = x.iter().map(|v| v.abs()).collect();
    sorted.sort_by(f64::total_cmp);
    let n = sorted.len();
    if n % 2 == 1 { sorted[n / 2] } else { 0.5 * (sorted[n / 2 - 1] + sorted[n / 2]) }
}

/// Bins the breaths (s, mL/min, /min) between 2 min into the ramp and 20 s before load end,
/// counted back from the latter. `None` with too few breaths for a quartic.
pub(crate) fn bin(t: &[f64], vo2: &[f64], hr: &[f64], start_s: f64, end_s: f64) -> Option<Binned> {
    let (from, to) = (start_s + LEAD_S, end_s - TRIM_S);
    let keep: Vec<usize> = (0..t.len()).filter(|&i| t[i] >= from && t[i] < to).collect();
    if keep.len() < 10 {
        return None;
    }
    let pick = |x: &[f64]| -> Vec<f64> { keep.iter().map(|&i| x[i]).collect() };
    let (t, vo2, hr) = (pick(t), pick(vo2), pick(hr));
    let (vo2_fit, vo2) = clip(&t, &vo2)?;
    let (hr_fit, hr) = clip(&t, &hr)?;
    let count = libm::floor((to - from) / BIN_S) as usize;
    let mut binned = Binned::default();
    for k in (0..count).rev() {
        let upper = to - BIN_S * k as f64;
        let lower = upper - BIN_S;
        let (first, last) = (t.partition_point(|&x| x < lower), t.partition_point(|&x| x < upper));
        if last == first {
            continue;
        }
        let mean = |x: &[f64]| x[first..last].iter().sum::<f64>() / (last - first) as f64;
        let centre = lower + 0.5 * BIN_S;
        binned.bins.push(Bin {
            t_s: centre,
            vo2: mean(&vo2),
            hr: mean(&hr),
            breaths: last - first,
        });
        binned.vo2_level.push(vo2_fit.at(centre));
        binned.hr_level.push(hr_fit.at(centre));
    }
    Some(binned)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bins_count_back_from_the_trim_and_skip_gaps() {
        // Breaths every 2 s over a 600-s ramp; a gap of 40 s from 300 s on.
        let t: Vec<f64> =
            (0..300).map(|i| 2.0 * f64::from(i)).filter(|t| !(300.0..340.0).contains(t)).collect();
        let vo2: Vec<f64> = t.iter().map(|t| 500.0 + 2.0 * t).collect();
        let hr: Vec<f64> = t.iter().map(|t| 90.0 + 0.1 * t).collect();
        let b = bin(&t, &vo2, &hr, 0.0, 600.0).unwrap();
        // 120 to 580 s is 46 bins; [300, 340) empties four.
        assert_eq!(b.bins.len(), 42);
        assert_eq!(b.bins.last().unwrap().t_s, 575.0);
        // The bin [570, 580) holds 570, 572 … 578: mean 574 s, 1648 mL/min, 147.4 /min.
        assert!((b.bins.last().unwrap().vo2 - 1648.0).abs() < 1e-6);
        assert!((b.bins.last().unwrap().hr - 147.4).abs() < 1e-6);
        assert!((b.vo2_level[0] - (500.0 + 2.0 * b.bins[0].t_s)).abs() < 1e-6);
    }

    #[test]
    fn a_cough_is_clipped() {
        let t: Vec<f64> = (0..300).map(|i| 2.0 * f64::from(i)).collect();
        let wiggle = |i: usize| if i.is_multiple_of(2) { 10.0 } else { -10.0 };
        let mut vo2: Vec<f64> = (0..300).map(|i| 1500.0 + wiggle(i)).collect();
        vo2[200] = 4000.0;
        let hr = vec![120.0; 300];
        let b = bin(&t, &vo2, &hr, 0.0, 600.0).unwrap();
        // Robust SD of ± 10 is 14.8, clipped at 2.5 of them: at most 37 + 10 off in one of five.
        let worst = b.bins.iter().map(|b| (b.vo2 - 1500.0).abs()).fold(0.0, f64::max);
        assert!(worst < 12.0, "{worst}");
    }
}
