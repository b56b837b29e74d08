//! The broken line with a free knot against R's `segmented`.

use super::{golden, near};
use crate::hinge::{self, Points};
use crate::regression;
use crate::two_segments::Design;

#[test]
fn the_broken_line_is_that_of_segmented_and_never_leaves_a_larger_sum() {
    let series = golden!("series.csv");
    let (x, y) = (series.column("level"), series.column("clear"));
    let theirs = &golden!("segmented-r.csv").rows[0];
    let fit = Design::new(&x, 10).unwrap().fit(&y).unwrap();
    // x rises by 2.9 per second: 1e-6 of 1500 is half a millisecond.
    near(fit.knot, theirs[0], 1e-6);
    near(fit.before, theirs[1], 1e-6);
    near(fit.after, theirs[2], 1e-6);
    near(fit.rss, theirs[3], 1e-7);
    assert!(fit.rss <= theirs[3] * (1.0 + 1e-10), "{} above {}", fit.rss, theirs[3]);
    let sum: f64 = x.iter().zip(&y).map(|(x, y)| (y - fit.at(*x)) * (y - fit.at(*x))).sum();
    near(fit.rss, sum, 1e-9);
}

#[test]
fn no_knot_of_a_fine_grid_does_better() {
    let series = golden!("series.csv");
    let x = series.column("level");
    // A clear bend and a noisy one; the hinge at a given knot is checked against R elsewhere.
    for name in ["clear", "y", "x"] {
        let y = series.column(name);
        let fit = Design::new(&x, 10).unwrap().fit(&y).unwrap();
        let (from, to) = (x[9], x[x.len() - 10]);
        let knots: Vec<f64> = (0..=4000).map(|k| from + (to - from) * k as f64 / 4000.0).collect();
        let points = Points { t_s: &x, x: &x, y: &y, w: &[] };
        let gains = hinge::fits(&points, &knots).into_iter().map(|f| f.gain);
        let line = regression::line(&x, &y).unwrap();
        let squares: f64 = x.iter().zip(&y).map(|(x, y)| y - line.at(*x)).map(|r| r * r).sum();
        let least = squares - gains.fold(0.0, f64::max);
        assert!(fit.rss <= least * (1.0 + 1e-10), "{name}: {} above {least}", fit.rss);
        assert!(fit.rss > least * (1.0 - 1e-3), "{name}: {} far below {least}", fit.rss);
    }
}
