//! Local lines, prediction bands, medians, the middle five of seven and the low-pass filter.

use super::{all_near, golden, near};
use crate::breaths::Breaths;
use crate::quantity::Quantity;
use crate::{errant, filters, robust, smooth};

#[test]
fn local_lines_agree_with_statsmodels_and_r() {
    let series = golden!("series.csv");
    let found = smooth::local_line(&series.column("mid_s"), &series.column("x"), smooth::HALF_S);
    all_near(&found, &golden!("local-line-py.csv").column("value"), 1e-9);
    all_near(&found, &golden!("local-line-r.csv").column("value"), 1e-9);
}

#[test]
fn errant_breaths_are_those_outside_the_bands_of_r() {
    let series = golden!("series.csv");
    let bands = golden!("bands-r.csv").column("second");
    let (end, d, x) = (series.column("end_s"), series.column("d_s"), series.column("x"));
    let phase = (0.0, end[end.len() - 1] + 1.0);
    let column = x.iter().map(|x| Some(*x)).collect();
    let breaths = Breaths::new(end, Some(d), [(Quantity::Vo2, column)].into()).unwrap();
    // Two passes at k = 4: the two wild breaths of the series, and no other.
    let found = errant::flag(&breaths, &[phase], 4.0);
    let expected: Vec<bool> = bands.iter().map(|b| b.abs() > 4.0).collect();
    assert_eq!(found, expected);
    assert!(found[70] && found[131] && found.iter().filter(|f| **f).count() == 2);
}

#[test]
fn the_first_pass_flags_what_r_puts_outside_any_band() {
    let series = golden!("series.csv");
    let bands = golden!("bands-r.csv").column("first");
    let (t, x) = (series.column("mid_s"), series.column("x"));
    for k in [1.0, 1.5, 2.0, 2.5, 3.0, 4.0, 6.0] {
        let found = errant::outside(&t, &x, &vec![false; x.len()], k);
        let expected: Vec<bool> = bands.iter().map(|b| b.abs() > k).collect();
        assert_eq!(found, expected, "k = {k}");
    }
}

#[test]
fn medians_and_scales_agree_with_r() {
    let x = golden!("series.csv").column("x");
    for row in golden!("scale-r.csv").rows {
        let n = row[0] as usize;
        near(robust::median(&mut x[..n].to_vec()), row[1], 1e-14);
        let mut off: Vec<f64> = x[..n].iter().map(|x| x - 1000.0).collect();
        near(robust::scale(&mut off), row[2], 1e-13);
    }
}

#[test]
fn the_middle_five_of_seven_are_a_trimmed_mean() {
    let x = golden!("series.csv").column("x");
    let found = filters::middle_five_of_seven(&x, &x);
    assert_eq!(found.iter().filter(|m| m.is_none()).count(), 6);
    let found: Vec<f64> = found.into_iter().flatten().collect();
    all_near(&found, &golden!("middle-five-py.csv").column("value"), 1e-13);
}

#[test]
fn the_low_pass_filter_agrees_with_scipy() {
    let table = golden!("low-pass-py.csv");
    let found = filters::low_pass(&table.column("input"), 0.04);
    all_near(&found, &table.column("value"), 1e-10);
}
