//! The two worked vectors of the recipe, computed apart from this program in double precision
//! (Hansen 1984 peak V̇O₂, Kleber 1997 slope, defaults of every parameter, warm-up of 180 s), with
//! the peak heart rate given as 220 − age: 175 and 160.

use super::curves::{Runs, over_time, over_vo2};
use super::{Inputs, Moment, Response};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::settings::OverlaySettings;

fn man_45() -> Inputs {
    Inputs {
        rest_vo2: 3.5 * 80.0,
        unloaded_vo2: OverlaySettings::default().unloaded_vo2(80.0),
        // P = 0.79·178 − 60.7 = 79.92; k = 50.72 − 0.372·45; P·k + 6·(80 − P).
        vo2_peak: 79.92 * (50.72 - 0.372 * 45.0) + 6.0 * (80.0 - 79.92),
        hr: Some((70.0, 175.0)),
        ve_slope: Some(0.13 * 45.0 + 19.9),
        warm_up_s: 180.0,
        warm_up_watts: 0.0,
        rate_w_per_min: 20.0,
    }
}

fn woman_60() -> Inputs {
    Inputs {
        rest_vo2: 3.5 * 85.0,
        unloaded_vo2: OverlaySettings::default().unloaded_vo2(85.0),
        // P = 0.65·163 − 42.8 = 63.15; k = 22.78 − 0.17·60; (P + 43)·k + 6·(85 − P).
        vo2_peak: (63.15 + 43.0) * (22.78 - 0.17 * 60.0) + 6.0 * (85.0 - 63.15),
        hr: Some((75.0, 160.0)),
        ve_slope: Some(0.12 * 60.0 + 24.4),
        warm_up_s: 180.0,
        warm_up_watts: 0.0,
        rate_w_per_min: 10.0,
    }
}

fn run(inputs: Inputs) -> Response {
    let settings = OverlaySettings::default();
    Response::new(inputs, &settings, settings.gain).expect("a normal person has an overlay")
}

/// t, WR, V̇O₂, V̇CO₂, HR, O₂ pulse, V̇E, V̇E/V̇CO₂, RER as printed.
type Row = [f64; 9];

fn check(response: &Response, rows: &[Row]) {
    for row in rows {
        // The last row stands at the predicted peak, whose printed time is rounded.
        let peak = response.peak_s.unwrap();
        let t = if (row[0] - peak).abs() < 0.1 { peak } else { row[0] };
        let m: Moment = response.at(t);
        let (hr, ve) = (m.hr.unwrap(), m.ve.unwrap());
        let got =
            [m.work_rate, m.vo2, m.vco2, hr, m.vo2 / hr, ve, 1000.0 * ve / m.vco2, m.vco2 / m.vo2];
        // Half a unit of the last printed digit.
        let within = [0.051, 0.051, 0.051, 0.051, 0.000_51, 0.051, 0.051, 0.000_51];
        for i in 0..got.len() {
            let off = (got[i] - row[i + 1]).abs();
            assert!(off <= within[i], "t {} column {i}: {} for {}", row[0], got[i], row[i + 1]);
        }
    }
}

#[test]
fn the_man_of_45_comes_out_point_by_point() {
    let r = run(man_45());
    for (got, expected, within) in [
        (r.inputs.unloaded_vo2, 615.0, 0.05),
        (r.inputs.vo2_peak, 2716.2, 0.05),
        (r.vt1_vo2, 1493.9, 0.05),
        (r.vt1_vco2, 1391.19, 0.005),
        (r.s2, 1.41735, 0.000_005),
        (r.vt2_vo2, 2363.1, 0.05),
        (r.peak_s.unwrap(), 651.99, 0.005),
        (r.peak_watts.unwrap(), 217.33, 0.005),
    ] {
        assert!((got - expected).abs() <= within * 1.02, "{got} for {expected}");
    }
    check(
        &r,
        &[
            [-120.0, 0.0, 540.3, 485.2, 81.2, 6.652, 16.5, 34.0, 0.898],
            [0.0, 0.0, 611.3, 552.7, 84.3, 7.253, 18.2, 33.0, 0.904],
            [60.0, 20.0, 713.5, 649.8, 88.7, 8.045, 20.7, 31.9, 0.911],
            [240.0, 80.0, 1302.0, 1208.9, 114.0, 11.416, 35.1, 29.1, 0.928],
            [480.0, 160.0, 2125.7, 2286.6, 149.5, 14.214, 62.9, 27.5, 1.076],
            [652.0, 217.3, 2716.2, 3123.6, 175.0, 15.521, 87.7, 28.1, 1.150],
        ],
    );
}

#[test]
fn the_woman_of_60_comes_out_point_by_point() {
    let r = run(woman_60());
    for (got, expected, within) in [
        (r.inputs.unloaded_vo2, 644.0, 0.05),
        (r.vt1_vo2, 806.6, 0.05),
        (r.vt1_vco2, 736.48, 0.005),
        (r.s2, 1.43953, 0.000_005),
        (r.vt2_vo2, 1275.8, 0.05),
        (r.peak_s.unwrap(), 519.11, 0.005),
        (r.peak_watts.unwrap(), 86.52, 0.005),
    ] {
        assert!((got - expected).abs() <= within * 1.02, "{got} for {expected}");
    }
    check(
        &r,
        &[
            [0.0, 0.0, 640.2, 578.4, 99.9, 6.407, 22.3, 38.5, 0.904],
            [60.0, 10.0, 692.8, 628.4, 103.7, 6.678, 23.9, 38.0, 0.907],
            [240.0, 40.0, 987.5, 996.9, 125.2, 7.889, 35.5, 35.6, 1.010],
            [480.0, 80.0, 1399.3, 1589.8, 155.1, 9.021, 55.6, 35.0, 1.136],
            [519.1, 86.5, 1466.5, 1686.4, 160.0, 9.165, 59.5, 35.3, 1.150],
        ],
    );
}

/// Wilkoff et al. 1989: HR = (220 − A − rest)·(METs − 1)/(peak METs − 1) + rest; worked apart from
/// this program: 45 y, rest 70, 6 of 11 METs gives 122.5; 60 y, rest 75, 4 of 7 METs gives 117.5.
#[test]
fn heart_rate_follows_metabolic_reserve() {
    for (rest, peak, mets, most, expected) in
        [(70.0, 175.0, 6.0, 11.0, 122.5), (75.0, 160.0, 4.0, 7.0, 117.5)]
    {
        let met = 280.0;
        let inputs = Inputs {
            rest_vo2: met,
            unloaded_vo2: 1.5 * met,
            vo2_peak: most * met,
            hr: Some((rest, peak)),
            ..man_45()
        };
        let hr = run(inputs).at_vo2(mets * met).hr.expect("both ends are known");
        assert!((hr - expected).abs() < 1e-9, "{hr} for {expected}");
    }
}

#[test]
fn every_parameter_of_the_model_does_something() {
    let before = run(man_45()).at(480.0);
    let exercise = |change: fn(&mut OverlaySettings)| {
        let mut settings = OverlaySettings::default();
        change(&mut settings);
        Response::new(man_45(), &settings, settings.gain).expect("a model").at(600.0)
    };
    let same = exercise(|_| {});
    for change in [
        (|s| s.s1 = 0.9) as fn(&mut OverlaySettings),
        |s| s.rer_rest = 0.8,
        |s| s.late_ve = 1.5,
        |s| s.rer_peak = 1.2,
        |s| s.ve_intercept = 5.0,
        |s| s.tau_s = 50.0,
    ] {
        assert_ne!(exercise(change), same);
    }
    assert!(before.vo2 < same.vo2);
}

fn runs(inputs: Inputs) -> Runs {
    let s = OverlaySettings::default();
    let at = |share: f64, gain| {
        let inputs = Inputs { vo2_peak: share * inputs.vo2_peak, ..inputs };
        Response::new(inputs, &s, gain).ok()
    };
    Runs {
        middle: run(inputs),
        low: at(0.84, s.gain_band.0),
        high: at(1.0, s.gain_band.1),
        pressure: None,
        hr_beta_blocked: Some(132.5),
    }
}

#[test]
fn bands_hold_the_middle_and_end_at_the_predicted_peak() {
    let curves = over_time(&runs(man_45()), 360.0, -180.0, 800.0);
    let peak = curves.x[curves.normal - 1];
    assert!((peak - (360.0 + 651.99)).abs() < 0.01, "{peak}");
    assert!(curves.x.windows(2).all(|w| w[0] < w[1]));
    for curve in &curves.curves {
        for (edge, sign) in [(&curve.low, 1.0), (&curve.high, -1.0)] {
            assert!(edge.is_empty() || edge.len() == curves.normal, "{:?}", curve.quantity);
            for (m, e) in curve.middle.iter().zip(edge) {
                assert!(sign * (m - e) >= -1e-9, "{:?}: {m} and {e}", curve.quantity);
            }
        }
        assert!(curve.middle.is_empty() || curve.middle.len() == curves.x.len());
    }
    // Beyond the predicted peak nothing rises but the load.
    let vo2 = curves.of(Quantity::Vo2).unwrap();
    assert_eq!(vo2.middle[curves.normal], *vo2.middle.last().unwrap());
    let blocked = curves.beta_blocked().unwrap();
    assert!((blocked.middle[curves.normal - 1] - 132.5).abs() < 1e-6);
}

#[test]
fn relations_need_no_work_rate() {
    let inputs = Inputs { rate_w_per_min: f64::NAN, ..man_45() };
    let mut runs = runs(man_45());
    runs.middle = run(inputs);
    assert_eq!(runs.middle.peak_s, None);
    let curves = over_vo2(&runs);
    assert!(curves.of(Quantity::WorkRate).is_none());
    // HR = a + b·V̇O₂ with the printed a 57.9318 and b 0.043101.
    let hr = curves.of(Quantity::Hr).unwrap();
    for (vo2, hr) in curves.x.iter().zip(&hr.middle) {
        assert!((hr - (57.9318 + 0.043_101 * vo2)).abs() < 0.002, "{vo2}: {hr}");
    }
}

#[test]
fn a_peak_below_the_warm_up_is_refused_with_its_reason() {
    let settings = OverlaySettings::default();
    let heavy = Inputs { warm_up_watts: 300.0, ..man_45() };
    let why = Response::new(heavy, &settings, settings.gain);
    assert_eq!(why, Err(Note::new("overlay-peak-below-warm-up")));
}
