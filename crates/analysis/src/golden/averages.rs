//! Means over windows, against the interpolated integral of the same staircase.

use super::{golden, near};
use crate::averaging::Means;
use crate::breaths::Breaths;
use crate::quantity::Quantity;

#[test]
fn window_means_and_the_highest_agree_with_numpy() {
    let (series, table) = (golden!("series.csv"), golden!("window-means-py.csv"));
    let (end, d) = (series.column("end_s"), series.column("d_s"));
    let within = (end[0] - d[0], end[end.len() - 1]);
    let column = series.column("x").into_iter().map(Some).collect();
    let steps: Vec<(f64, f64)> = end.iter().zip(&d).map(|(e, d)| (e - d, *e)).collect();
    let breaths = Breaths::new(end, Some(d), [(Quantity::Vo2, column)].into()).unwrap();
    let means = Means::new(&breaths, &[]);
    for row in &table.rows {
        near(means.over(Quantity::Vo2, (row[0], row[0] + 30.0)).unwrap(), row[1], 1e-10);
    }
    // The same grid of 1 s, without the last window that ends exactly with the record.
    let last = table.rows[table.rows.len() - 1][0] + 30.0;
    let highest = table.rows.iter().map(|row| row[1]).fold(f64::MIN, f64::max);
    let found = means.highest(Quantity::Vo2, 30.0, (within.0, last)).unwrap();
    near(found.0, highest, 1e-10);
    let lowest = table.rows.iter().map(|row| row[1]).fold(f64::MAX, f64::min);
    near(means.lowest(Quantity::Vo2, 30.0, (within.0, last)).unwrap().0, lowest, 1e-10);
    // A breath counts where any part of it lies in the window.
    for window in [(100.0, 130.0), (within.0, within.1), (steps[9].0, steps[19].1)] {
        let reach = steps.iter().filter(|(s, e)| *e > window.0 + 1e-9 && *s < window.1 - 1e-9);
        assert_eq!(means.breaths_in(window), reach.count(), "{window:?}");
    }
}
