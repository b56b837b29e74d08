//! Is a late flattening only the plateau of a true maximum?

use super::classify::{CourseInput, classify};
use super::detail::Course;

/// Length of the terminal stretch, s.
const LAST_S: f64 = 75.0;
/// Where the shortened test ends, s before load end.
const SHORTENED_S: f64 = 70.0;
/// RER that goes with a true maximum (common practice).
const RER: f64 = 1.10;

/// Huber line (k = 1.5) of `y` on minutes: its slope per minute. `None` with fewer than 8 points.
fn huber_slope(t_s: &[f64], y: &[f64], from_s: f64, to_s: f64) -> Option<f64> {
    let (first, last) = (t_s.partition_point(|t| *t < from_s), t_s.partition_point(|t| *t < to_s));
    if last < first + 8 {
        return None;
    }
    let (t, y) = (&t_s[first..last], &y[first..last]);
    let mut weight = vec![1.0; t.len()];
    let mut slope = 0.0;
    for _ in 0..8 {
        let sum: f64 = weight.iter().sum();
        let mean = |x: &[f64]| x.iter().zip(&weight).map(|(x, w)| x * w).sum::<f64>() / sum;
        let (mt, my) = (mean(t), mean(y));
        let (mut tt, mut ty) = (0.0, 0.0);
        for i in 0..t.len() {
            tt += weight[i] * (t[i] - mt) * (t[i] - mt);
            ty += weight[i] * (t[i] - mt) * (y[i] - my);
        }
        slope = ty / tt;
        let residual: Vec<f64> =
            (0..t.len()).map(|i| (y[i] - my - slope * (t[i] - mt)).abs()).collect();
        let mut sorted = residual.clone();
        sorted.sort_by(f64::total_cmp);
        let limit = 1.5 * 1.4826 * sorted[sorted.len() / 2];
        for (w, r) in weight.iter_mut().zip(&residual) {
            *w = if *r > limit && limit > 0.0 { limit / r } else { 1.0 };
        }
    }
    Some(60.0 * slope)
}

/// V̇O₂ rises at most half as steeply in the last 75 s as before while HR still rises and RER is
/// high, and without these last seconds the course reads rising.
pub(crate) fn is_terminal(input: &CourseInput<'_>, rer_peak: Option<f64>) -> bool {
    if rer_peak.is_none_or(|r| r < RER) {
        return false;
    }
    let end = input.load_end_s;
    let knot = end - LAST_S;
    let before = huber_slope(input.t_s, input.vo2, input.ramp_start_s + 120.0, knot);
    let (Some(before), Some(last), Some(hr)) = (
        before,
        huber_slope(input.t_s, input.vo2, knot, end),
        huber_slope(input.t_s, input.hr, knot, end),
    ) else {
        return false;
    };
    if last > 0.5 * before || hr <= 0.0 {
        return false;
    }
    let shortened = CourseInput { load_end_s: end - SHORTENED_S, ..*input };
    classify(&shortened).is_ok_and(|d| d.course == Some(Course::Rising))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn huber_slope_of_a_line_with_one_outlier() {
        let t: Vec<f64> = (0..30).map(|i| 3.0 * f64::from(i)).collect();
        let mut y: Vec<f64> = t.iter().map(|t| 1000.0 + 2.0 * t).collect();
        y[25] += 3000.0;
        // 2 mL/min per s is 120 per min.
        assert!((huber_slope(&t, &y, 0.0, 90.0).unwrap() - 120.0).abs() < 1.0);
        assert_eq!(huber_slope(&t, &y, 0.0, 15.0), None);
    }
}
