//! Straight lines, polynomials, long-run variance, hinges at given knots, the normal distribution.

use super::{all_near, golden, near};
use crate::hinge::{self, Points};
use crate::{long_run, o2_pulse, regression};

#[test]
fn lines_and_explained_variance_agree_with_r() {
    let series = golden!("series.csv");
    let (x, y) = (series.column("x"), series.column("y"));
    for row in golden!("lines-r.csv").rows {
        let n = row[0] as usize;
        let line = regression::line(&x[..n], &y[..n]).unwrap();
        near(line.slope, row[1], 1e-11);
        near(line.intercept, row[2], 1e-11);
        near(regression::r_squared(&line, &x[..n], &y[..n]), row[3], 1e-12);
        near(line.sxx, row[4], 1e-12);
        assert_eq!(line.n, n);
    }
}

#[test]
fn residuals_of_polynomials_agree_with_r() {
    let (series, expected) = (golden!("series.csv"), golden!("polynomial-r.csv"));
    for (degree, name) in [(1, "degree1"), (3, "degree3")] {
        let mut y = series.column("y");
        regression::remove_polynomial(&series.column("mid_s"), &mut y, degree);
        all_near(&y, &expected.column(name), 1e-9);
    }
}

#[test]
fn the_long_run_variance_agrees_with_plain_numpy() {
    let series = golden!("series.csv");
    let residual = golden!("polynomial-r.csv").column("degree3");
    for row in golden!("long-run-py.csv").rows {
        near(long_run::variance(&series.column("mid_s"), &residual, row[0], 10.0), row[1], 1e-9);
    }
}

#[test]
fn hinges_agree_with_r_and_never_leave_a_larger_sum() {
    let series = golden!("series.csv");
    let (t, x, y) = (series.column("mid_s"), series.column("level"), series.column("y"));
    let weighted = series.column("w");
    for (w, table) in
        [(&[][..], golden!("hinge-r.csv")), (&weighted[..], golden!("hinge-weighted-r.csv"))]
    {
        let points = Points { t_s: &t, x: &x, y: &y, w };
        let fits = hinge::fits(&points, &table.column("knot"));
        for (fit, row) in fits.iter().zip(&table.rows) {
            near(fit.before, row[1], 1e-9);
            near(fit.change, row[2], 1e-9);
            near(fit.gain, row[3], 1e-8);
            let residual = hinge::weighted_residual(&points, fit, row[0]);
            let sum: f64 = residual.iter().map(|r| r * r).sum();
            assert!(sum <= row[4] * (1.0 + 1e-10), "{sum} above {}", row[4]);
        }
    }
}

#[test]
fn the_normal_distribution_agrees_with_scipy() {
    for row in golden!("normal-py.csv").rows {
        let found = o2_pulse::normal_cdf(row[0]);
        assert!((found / row[1] - 1.0).abs() < 1e-12, "{found} against {}", row[1]);
    }
}

#[test]
fn candidate_knots_are_equally_spaced_in_time() {
    let times = hinge::candidate_times(100.0, 340.0);
    // 121 of them, 2 s apart.
    let expected: Vec<f64> = (0..121).map(|k| 100.0 + 2.0 * f64::from(k)).collect();
    all_near(&times, &expected, 1e-14);
}
