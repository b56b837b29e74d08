//! The hinge y = a + b·x + c·(x − k)₊ over a grid of knots.

use crate::long_run;

/// Knots tried, equally spaced in time.
pub(crate) const CANDIDATES: usize = 121;

/// Points of a hinge fit.
pub(crate) struct Points<'a> {
    /// Time of each point, s.
    pub t_s: &'a [f64],
    pub x: &'a [f64],
    pub y: &'a [f64],
    /// Weights; empty = all one.
    pub w: &'a [f64],
}

/// Fit at one knot.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Fit {
    /// Slope before the knot.
    pub before: f64,
    /// Change of slope at the knot.
    pub change: f64,
    /// Drop of the weighted sum of squares against one line.
    pub gain: f64,
}

impl Fit {
    /// Slope after the knot.
    pub fn after(&self) -> f64 {
        self.before + self.change
    }
}

/// The profile over all knots, in units of the long-run variance.
#[derive(Clone, Debug, Default)]
pub(crate) struct Profile {
    /// T(k) = (SSE₀ − SSE(k)) / LR; 0 where the fit is not admissible.
    pub t: Vec<f64>,
    pub fits: Vec<Fit>,
}

impl Profile {
    /// Index of the best knot, if any is admissible.
    pub fn best(&self) -> Option<usize> {
        let (i, t) = self.t.iter().enumerate().max_by(|a, b| a.1.total_cmp(b.1))?;
        (*t > 0.0).then_some(i)
    }
}

/// Times of the candidates: equally spaced from `from_s` to `to_s`.
pub(crate) fn candidate_times(from_s: f64, to_s: f64) -> Vec<f64> {
    let step = (to_s - from_s) / (CANDIDATES - 1) as f64;
    (0..CANDIDATES).map(|k| from_s + step * k as f64).collect()
}

/// Fits at every knot of `knots`.
pub(crate) fn fits(points: &Points<'_>, knots: &[f64]) -> Vec<Fit> {
    let n = points.x.len();
    let w = |i: usize| points.w.get(i).copied().unwrap_or(1.0);
    let total: f64 = (0..n).map(w).sum();
    let mx = (0..n).map(|i| w(i) * points.x[i]).sum::<f64>() / total;
    let my = (0..n).map(|i| w(i) * points.y[i]).sum::<f64>() / total;
    let (mut xx, mut xy) = (0.0, 0.0);
    for i in 0..n {
        let dx = points.x[i] - mx;
        xx += w(i) * dx * dx;
        xy += w(i) * dx * (points.y[i] - my);
    }
    let slope = xy / xx;
    // (x, w, w·x centred, w·residual), sorted so that a knot splits them once.
    let mut rows: Vec<[f64; 4]> = (0..n)
        .map(|i| {
            let dx = points.x[i] - mx;
            [points.x[i], w(i), w(i) * dx, w(i) * (points.y[i] - my - slope * dx)]
        })
        .collect();
    rows.sort_by(|a, b| a[0].total_cmp(&b[0]));
    let suffix = Suffix::new(&rows, mx);
    knots
        .iter()
        .map(|k| {
            let s = suffix.hinge(&rows, *k, mx);
            // Part of the hinge that the line does not already hold.
            let own = s.hh - s.h * s.h / total - s.hx * s.hx / xx;
            if !(own > 1e-9 * s.hh && xx > 0.0) {
                return Fit::default();
            }
            let change = s.hr / own;
            Fit { before: slope - change * s.hx / xx, change, gain: s.hr * s.hr / own }
        })
        .collect()
}

/// Sums over the points beyond a knot.
struct Sums {
    h: f64,
    hh: f64,
    hx: f64,
    hr: f64,
}

/// Suffix sums of w, w·u, w·u², w·r, w·r·u with u = x − mean.
struct Suffix(Vec<[f64; 5]>);

impl Suffix {
    fn new(rows: &[[f64; 4]], mx: f64) -> Self {
        let mut sums = vec![[0.0; 5]; rows.len() + 1];
        for i in (0..rows.len()).rev() {
            let [x, w, wu, wr] = rows[i];
            let u = x - mx;
            let term = [w, wu, wu * u, wr, wr * u];
            for (k, t) in term.into_iter().enumerate() {
                sums[i][k] = sums[i + 1][k] + t;
            }
        }
        Self(sums)
    }

    fn hinge(&self, rows: &[[f64; 4]], knot: f64, mx: f64) -> Sums {
        let [w, wu, wuu, wr, wru] = self.0[rows.partition_point(|r| r[0] <= knot)];
        let c = knot - mx;
        Sums {
            h: wu - c * w,
            hh: wuu - 2.0 * c * wu + c * c * w,
            hx: wuu - c * wu,
            hr: wru - c * wr,
        }
    }
}

/// The profile of T over `knots`, where `admissible` says which fits count. The long-run variance
/// is that of the weighted residual at the best admissible knot, bins from `origin_s`.
pub(crate) fn profile(
    points: &Points<'_>,
    knots: &[f64],
    origin_s: f64,
    admissible: impl Fn(&Fit) -> bool,
) -> Profile {
    if points.x.len() < 6 {
        return Profile::default();
    }
    let fits = fits(points, knots);
    let counts = |f: &Fit| f.gain.is_finite() && f.gain > 0.0 && admissible(f);
    let best = (0..fits.len())
        .filter(|i| counts(&fits[*i]))
        .max_by(|a, b| fits[*a].gain.total_cmp(&fits[*b].gain));
    let Some(best) = best else { return Profile { t: vec![0.0; knots.len()], fits } };
    let residual = weighted_residual(points, &fits[best], knots[best]);
    let lr = long_run::variance(points.t_s, &residual, origin_s, 10.0);
    let t = fits.iter().map(|f| if counts(f) && lr > 0.0 { f.gain / lr } else { 0.0 }).collect();
    Profile { t, fits }
}

pub(crate) fn weighted_residual(points: &Points<'_>, fit: &Fit, knot: f64) -> Vec<f64> {
    let w = |i: usize| points.w.get(i).copied().unwrap_or(1.0);
    let model = |x: f64| fit.before * x + fit.change * (x - knot).max(0.0);
    let n = points.x.len();
    let (mut total, mut sum) = (0.0, 0.0);
    for i in 0..n {
        total += w(i);
        sum += w(i) * (points.y[i] - model(points.x[i]));
    }
    let a = sum / total;
    (0..n).map(|i| w(i).sqrt() * (points.y[i] - a - model(points.x[i]))).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The vector of the V-slope: slope 0.85 to 1.2 L/min, 1.25 beyond.
    fn v_slope(noise: impl Fn(usize) -> f64) -> (Vec<f64>, Vec<f64>, Vec<f64>) {
        let t: Vec<f64> = (0..241).map(|k| 3.0 * k as f64).collect();
        let x: Vec<f64> = t.iter().map(|t| 0.5 + 1.4 * t / 720.0).collect();
        let y = x
            .iter()
            .enumerate()
            .map(|(i, x)| 0.1 + 0.85 * x + 0.4 * (x - 1.2).max(0.0) + noise(i))
            .collect();
        (t, x, y)
    }

    #[test]
    fn the_knot_of_a_noiseless_hinge_is_recovered() {
        let (t, x, y) = v_slope(|_| 0.0);
        let knots: Vec<f64> = (0..CANDIDATES).map(|k| 0.6 + 0.01 * k as f64).collect();
        let fits = fits(&Points { t_s: &t, x: &x, y: &y, w: &[] }, &knots);
        let best = (0..fits.len()).max_by(|a, b| fits[*a].gain.total_cmp(&fits[*b].gain)).unwrap();
        assert!((knots[best] - 1.2).abs() < 1e-9);
        assert!((fits[best].before - 0.85).abs() < 1e-9);
        assert!((fits[best].change - 0.40).abs() < 1e-9);
    }

    #[test]
    fn the_gain_is_the_drop_of_the_sum_of_squares() {
        // Against a direct solution by residual sums at one knot, with weights.
        let (t, x, y) = v_slope(|i| 0.05 * [1.0, -1.0, 0.5, -0.5, 0.0][i % 5]);
        let w: Vec<f64> = x.iter().map(|x| 1.0 / (x * x)).collect();
        let points = Points { t_s: &t, x: &x, y: &y, w: &w };
        let fit = fits(&points, &[1.1])[0];
        let with = weighted_residual(&points, &fit, 1.1);
        let sse: f64 = with.iter().map(|r| r * r).sum();
        // Any other coefficients give a larger sum.
        for (db, dc) in [(0.01, 0.0), (-0.01, 0.0), (0.0, 0.01), (0.0, -0.01)] {
            let other = Fit { before: fit.before + db, change: fit.change + dc, ..fit };
            let worse: f64 = weighted_residual(&points, &other, 1.1).iter().map(|r| r * r).sum();
            assert!(worse > sse);
        }
        let one_line = fits_line_sse(&points);
        assert!((one_line - sse - fit.gain).abs() < 1e-9);
    }

    fn square(x: f64) -> f64 {
        x * x
    }

    fn fits_line_sse(points: &Points<'_>) -> f64 {
        let n = points.x.len();
        let total: f64 = points.w.iter().sum();
        let mx = (0..n).map(|i| points.w[i] * points.x[i]).sum::<f64>() / total;
        let my = (0..n).map(|i| points.w[i] * points.y[i]).sum::<f64>() / total;
        let xx: f64 = (0..n).map(|i| points.w[i] * square(points.x[i] - mx)).sum();
        let xy: f64 = (0..n).map(|i| points.w[i] * (points.x[i] - mx) * (points.y[i] - my)).sum();
        (0..n).map(|i| points.w[i] * square(points.y[i] - my - xy / xx * (points.x[i] - mx))).sum()
    }

    #[test]
    fn a_straight_line_has_no_admissible_knot() {
        let t: Vec<f64> = (0..100).map(f64::from).collect();
        let x = t.clone();
        let y: Vec<f64> = x.iter().map(|x| 2.0 * x).collect();
        let points = Points { t_s: &t, x: &x, y: &y, w: &[] };
        let profile = profile(&points, &[30.0, 50.0, 70.0], 0.0, |f| f.change > 0.1);
        assert_eq!(profile.best(), None);
    }
}
