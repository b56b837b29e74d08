//! The course on noiseless and lightly disturbed ramps whose truth is known by construction.

use super::*;
use crate::recording::Trace;

/// A 10-min ramp of breaths every 2 s with a small fixed ripple. `late` changes (V̇O₂ slope, HR
/// slope) from `onset_s` on; before, V̇O₂ = −1500 + 25 HR (note §3.1).
struct Made {
    t: Vec<f64>,
    vo2: Vec<f64>,
    hr: Vec<f64>,
    load: Trace,
}

fn made(onset_s: f64, late: (f64, f64), ripple: f64) -> Made {
    let t: Vec<f64> = (0..=330).map(|i| 2.0 * f64::from(i)).collect();
    let slope = 9.0 / 60.0;
    // A fixed low-discrepancy ripple stands for breath noise: the golden-ratio sequence.
    let noise = |i: usize| (i as f64 * 0.618_033_988_749_895).fract() - 0.5;
    let hr_at = |t: f64| 90.0 + slope * (t.min(onset_s) + late.1 * (t - onset_s).max(0.0));
    let vo2_at = |t: f64| 750.0 + 25.0 * slope * (t.min(onset_s) + late.0 * (t - onset_s).max(0.0));
    let vo2 = t.iter().enumerate().map(|(i, t)| vo2_at(*t) * (1.0 + ripple * noise(i))).collect();
    let hr = t.iter().map(|t| hr_at(*t)).collect();
    let load = Trace {
        t_s: (0..=660).map(f64::from).collect(),
        value: (0..=660).map(|s| f64::from(s) / 3.0).collect(),
    };
    Made { t, vo2, hr, load }
}

fn read(m: &Made) -> CourseDetail {
    classify(&CourseInput {
        t_s: &m.t,
        vo2: &m.vo2,
        hr: &m.hr,
        load: &m.load,
        ramp_start_s: 0.0,
        load_end_s: 600.0,
    })
    .unwrap()
}

#[test]
fn a_straight_line_of_vo2_on_hr_reads_rising_with_the_slope_of_the_algebra() {
    let detail = read(&made(1e9, (1.0, 1.0), 0.15));
    let n = detail.numbers.unwrap();
    assert_eq!(detail.course, Some(Course::Rising));
    // Note §3.1: g = 100 (H'/H)(b/P − 1). At the middle of the late window (490 s) H = 163.5,
    // P = 25 − 1500/163.5 = 15.826, so g = 100 (9/163.5)(25/15.826 − 1) = 3.19 %/min.
    assert!((n.late_slope.value - 3.19).abs() < 0.35, "{}", n.late_slope.value);
    assert!((n.slope_ratio.value - 1.0).abs() < 0.12, "{}", n.slope_ratio.value);
    assert!((n.asymptote.value - 25.0).abs() < 1.0, "{}", n.asymptote.value);
    // rho = b/P.
    assert!((n.rho_late - 25.0 / 15.826).abs() < 0.12, "{}", n.rho_late);
}

#[test]
fn the_deficit_is_the_sum_of_its_parts_and_closes_on_the_slopes() {
    let n = read(&made(400.0, (0.67, 1.4), 0.1)).numbers.unwrap();
    let sum = n.deficit_vo2.value + n.deficit_hr.value;
    assert!((sum - n.deficit.value).abs() < 1e-9);
    assert!((n.early_slope + n.deficit.value - n.late_slope.value).abs() < 1e-9);
    assert!(n.deficit_vo2.value < 0.0 && n.deficit_hr.value < 0.0);
}

#[test]
fn a_steep_loss_over_four_minutes_reads_falling_and_its_onset_is_timed() {
    // V̇O₂ slope × 0.3 and HR slope × 1.6 from 4 min before the end: R = 0.19.
    let detail = read(&made(360.0, (0.3, 1.6), 0.15));
    assert_eq!(detail.course, Some(Course::Falling));
    let onset = detail.onset.unwrap();
    // The fit lags the load by 40 s, so the onset on the load axis is 40 s before this one.
    assert!((onset.t_s - 320.0).abs() < 60.0, "{onset:?}");
    assert!(onset.set_s.low <= onset.t_s && onset.t_s <= onset.set_s.high);
}

#[test]
fn a_level_pulse_over_four_minutes_is_found() {
    // From 360 s on P is held at its value there: V̇O₂ slope = P · HR slope, P = 25 − 1500/144
    // = 14.58, so with HR slope unchanged the V̇O₂ slope is 14.58/25 = 0.583 of the early one.
    let detail = read(&made(360.0, (0.583, 1.0), 0.15));
    assert!(
        matches!(detail.course, Some(Course::RisingSlowed | Course::Flattened)),
        "{:?} {:?}",
        detail.course,
        detail.numbers
    );
}

#[test]
fn the_early_line_carried_on_is_the_ratio_of_two_lines() {
    let detail = read(&made(1e9, (1.0, 1.0), 0.0));
    let (vo2, hr, pulse) = detail.early.unwrap().at(600.0);
    // H = 180, V̇O₂ = 3000, P = 16.67 (note §3.1).
    assert!((hr - 180.0).abs() < 0.5 && (vo2 - 3000.0).abs() < 15.0);
    assert!((pulse - 16.67).abs() < 0.05);
}

#[test]
fn short_ramps_and_few_breaths_are_refused_with_their_reason() {
    let m = made(1e9, (1.0, 1.0), 0.1);
    let input = CourseInput {
        t_s: &m.t,
        vo2: &m.vo2,
        hr: &m.hr,
        load: &m.load,
        ramp_start_s: 0.0,
        load_end_s: 355.0,
    };
    assert_eq!(classify(&input).unwrap_err().code, "course-ramp-too-short");
    let sparse: Vec<usize> = (0..m.t.len()).step_by(3).collect();
    let pick = |x: &[f64]| sparse.iter().map(|&i| x[i]).collect::<Vec<_>>();
    let (t, vo2, hr) = (pick(&m.t), pick(&m.vo2), pick(&m.hr));
    let few =
        classify(&CourseInput { t_s: &t, vo2: &vo2, hr: &hr, load_end_s: 600.0, ..input }).unwrap();
    // 180 s at one breath in 6 s is 30.
    assert_eq!((few.course, few.late_breaths), (None, 30));
    assert_eq!(few.withheld[0].code, "few-late-breaths");
    assert!(few.numbers.is_some());
}
