//! Straight lines and low polynomials by least squares.

/// A straight line with what its uncertainty needs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Line {
    /// Slope.
    pub slope: f64,
    /// Value at x = 0.
    pub intercept: f64,
    /// Sum of squares of x about its mean.
    pub sxx: f64,
    /// Points.
    pub n: usize,
}

impl Line {
    /// The value at `x`.
    #[must_use]
    pub fn at(&self, x: f64) -> f64 {
        self.intercept + self.slope * x
    }
}

/// Ordinary least squares of `y` on `x`; `None` with fewer than three points or no spread of `x`.
#[must_use]
pub fn line(x: &[f64], y: &[f64]) -> Option<Line> {
    let n = x.len().min(y.len());
    if n < 3 {
        return None;
    }
    let (mx, my) = (mean(&x[..n]), mean(&y[..n]));
    let (mut sxx, mut sxy) = (0.0, 0.0);
    for (x, y) in x.iter().zip(y) {
        sxx += (x - mx) * (x - mx);
        sxy += (x - mx) * (y - my);
    }
    let slope = sxy / sxx;
    let spread = sxx > 1e-18 * mx * mx * n as f64;
    (spread && slope.is_finite()).then_some(Line { slope, intercept: my - slope * mx, sxx, n })
}

/// Share of the variance of `y` that the line explains.
#[must_use]
pub fn r_squared(line: &Line, x: &[f64], y: &[f64]) -> f64 {
    let my = mean(y);
    let (mut rest, mut all) = (0.0, 0.0);
    for (x, y) in x.iter().zip(y) {
        rest += (y - line.at(*x)) * (y - line.at(*x));
        all += (y - my) * (y - my);
    }
    1.0 - rest / all
}

/// Arithmetic mean; NaN of nothing.
#[must_use]
pub fn mean(x: &[f64]) -> f64 {
    x.iter().sum::<f64>() / x.len() as f64
}

/// Replaces `y` by its residual from a polynomial of `degree` in `t`, by orthogonal polynomials
/// (three-term recurrence of Forsythe, J SIAM 1957).
pub fn remove_polynomial(t: &[f64], y: &mut [f64], degree: usize) {
    let n = t.len().min(y.len());
    let mut before = vec![0.0; n];
    let mut now = vec![1.0; n];
    let mut norm_before = 1.0;
    for k in 0..=degree {
        let norm: f64 = now.iter().map(|p| p * p).sum();
        if !(norm > 0.0 && norm.is_finite()) {
            return;
        }
        let share = now.iter().zip(y.iter()).map(|(p, y)| p * y).sum::<f64>() / norm;
        for (y, p) in y.iter_mut().zip(&now) {
            *y -= share * p;
        }
        let shift = now.iter().zip(t).map(|(p, t)| t * p * p).sum::<f64>() / norm;
        let back = if k == 0 { 0.0 } else { norm / norm_before };
        for i in 0..n {
            let next = (t[i] - shift) * now[i] - back * before[i];
            before[i] = now[i];
            now[i] = next;
        }
        norm_before = norm;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_line_is_found() {
        // y = 2x + 1 with residuals +1, −2, +1 at 0, 1, 2: slope and mean are unchanged.
        let line = line(&[0.0, 1.0, 2.0], &[2.0, 1.0, 6.0]).unwrap();
        assert_eq!((line.slope, line.intercept, line.sxx), (2.0, 1.0, 2.0));
    }

    #[test]
    fn no_spread_gives_no_line() {
        assert_eq!(line(&[1.0; 5], &[1.0, 2.0, 3.0, 4.0, 5.0]), None);
        assert_eq!(line(&[1.0, 2.0], &[1.0, 2.0]), None);
        assert_eq!(line(&[], &[]), None);
    }

    #[test]
    fn a_cubic_leaves_nothing_of_a_cubic() {
        let t: Vec<f64> = (0..50).map(|k| 60.0 + 3.0 * f64::from(k)).collect();
        let mut y: Vec<f64> =
            t.iter().map(|t| 5.0 - 0.1 * t + 2e-3 * t * t - 1e-5 * t * t * t).collect();
        remove_polynomial(&t, &mut y, 3);
        assert!(y.iter().all(|r| r.abs() < 1e-9), "{y:?}");
    }

    #[test]
    fn variance_explained_by_arithmetic() {
        // Residual squares 1 + 4 + 1 = 6; about the mean 3: 1 + 4 + 9 = 14.
        let (x, y) = ([0.0, 1.0, 2.0], [2.0, 1.0, 6.0]);
        let r2 = r_squared(&line(&x, &y).unwrap(), &x, &y);
        assert!((r2 - (1.0 - 6.0 / 14.0)).abs() < 1e-12);
    }
}
