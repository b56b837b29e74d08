//! The signature of a right-to-left shunt that opens in exercise: PETCO₂ steps down, PETO₂ and RER
//! step up at the same moment and stay, then SpO₂ falls.
//!
//! Described by Sun, Hansen, Oudiz, Wasserman 2002 (Circulation 105:54) in people with primary
//! pulmonary hypertension; the limits of the steps are ours.

use super::detail::ShuntStep;
use crate::breaths::Breaths;
use crate::quantity::Quantity;
use crate::robust;

/// Windows before and after the step, s: (start, end) from the step.
const BEFORE: (f64, f64) = (-40.0, -5.0);
const AFTER: (f64, f64) = (10.0, 40.0);
const LATER: (f64, f64) = (40.0, 75.0);
/// Window of RER after the step: CO₂ is washed out at once, then its stores settle.
const AFTER_RER: (f64, f64) = (0.0, 25.0);
/// Window that gives the drift before the step.
const EARLIER: (f64, f64) = (-90.0, -50.0);
/// Smallest steps: PETCO₂ and PETO₂, mmHg; RER.
const STEP: (f64, f64, f64) = (4.0, 4.0, 0.04);
/// Part of the step that must remain a minute later.
const REMAINS: f64 = 0.6;

/// Median of `quantity` over breaths ending in `at_s + window`; `None` with fewer than 4.
fn median(b: &Breaths, q: impl Fn(usize) -> Option<f64>, at_s: f64, w: (f64, f64)) -> Option<f64> {
    let end = b.end_s();
    let (first, last) =
        (end.partition_point(|t| *t < at_s + w.0), end.partition_point(|t| *t < at_s + w.1));
    let mut x: Vec<f64> = (first..last).filter_map(q).collect();
    (x.len() >= 4).then(|| robust::median(&mut x))
}

/// Rise into the window `after`, less what the drift before the step already promised in that
/// direction (a drift the other way is not held in the step's favour).
fn rise(
    b: &Breaths,
    q: &impl Fn(usize) -> Option<f64>,
    at_s: f64,
    after: (f64, f64),
) -> Option<f64> {
    let mid = |w: (f64, f64)| 0.5 * (w.0 + w.1);
    let (earlier, before) = (median(b, q, at_s, EARLIER)?, median(b, q, at_s, BEFORE)?);
    let drift = ((before - earlier) / (mid(BEFORE) - mid(EARLIER))).max(0.0);
    Some(median(b, q, at_s, after)? - before - drift * (mid(after) - mid(BEFORE)))
}

/// Looks for the signature between two times; `None` where a channel is missing or nothing is
/// found. `spo2_usable` = the oximeter trace was confirmed.
pub(crate) fn find(b: &Breaths, window: (f64, f64), spo2_usable: bool) -> Option<ShuntStep> {
    // Upside down, so that all three rise.
    let petco2 = |i: usize| b.value(Quantity::Petco2, i).map(|x| -x);
    let peto2 = |i: usize| b.value(Quantity::Peto2, i);
    let rer = |i: usize| Some(b.value(Quantity::Vco2, i)? / b.value(Quantity::Vo2, i)?);
    let spo2 = |i: usize| b.value(Quantity::Spo2, i);
    let mut best: Option<(f64, ShuntStep)> = None;
    let seconds = (window.1 - LATER.1 - window.0 + EARLIER.0) / 5.0;
    for k in 0..libm::floor(seconds).max(0.0) as usize {
        let t_s = window.0 - EARLIER.0 + 5.0 * k as f64;
        // One channel after the other: almost everywhere the first already refuses.
        let step = |q: &dyn Fn(usize) -> Option<f64>, after, least: f64| {
            rise(b, &q, t_s, after).filter(|rise| *rise >= least)
        };
        let Some(co2) = step(&petco2, AFTER, STEP.0) else { continue };
        let Some(o2) = step(&peto2, AFTER, STEP.1) else { continue };
        let Some(r) = step(&rer, AFTER_RER, STEP.2) else { continue };
        if step(&petco2, LATER, REMAINS * STEP.0).is_none()
            || step(&peto2, LATER, REMAINS * STEP.1).is_none()
        {
            continue;
        }
        let size = co2 / STEP.0 + o2 / STEP.1 + r / STEP.2;
        if best.as_ref().is_none_or(|(top, _)| size > *top) {
            let saturation = spo2_usable
                .then(|| Some(median(b, spo2, t_s, LATER)? - median(b, spo2, t_s, BEFORE)?))
                .flatten();
            let found = ShuntStep { t_s, petco2: -co2, peto2: o2, rer: r, spo2: saturation };
            best = Some((size, found));
        }
    }
    best.map(|(_, found)| ShuntStep { t_s: sharpest(b, petco2, found.t_s), ..found })
}

/// The instant within ± 30 s at which `q` rises most from the 12 s before to the 12 s after:
/// wide windows tell that there is a step, short ones when.
fn sharpest(b: &Breaths, q: impl Fn(usize) -> Option<f64>, near_s: f64) -> f64 {
    let end = b.end_s();
    let mean = |from: f64, to: f64| {
        let (first, last) = (end.partition_point(|t| *t < from), end.partition_point(|t| *t < to));
        let x: Vec<f64> = (first..last).filter_map(&q).collect();
        (!x.is_empty()).then(|| x.iter().sum::<f64>() / x.len() as f64)
    };
    let mut best = (f64::NEG_INFINITY, near_s);
    for k in -15..=15 {
        let t = near_s + 2.0 * f64::from(k);
        if let (Some(before), Some(after)) = (mean(t - 12.0, t), mean(t, t + 12.0))
            && after - before > best.0
        {
            best = (after - before, t);
        }
    }
    best.1
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeMap;

    /// Breaths every 2 s; PETCO₂ 40, PETO₂ 100, RER 1.0, with a step at 300 s times `abrupt`
    /// (spread over `over_s`), SpO₂ 97 falling to 90 over a minute.
    fn breaths(over_s: f64, co2: f64, o2: f64, rer: f64) -> Breaths {
        let end: Vec<f64> = (1..=300).map(|i| 2.0 * f64::from(i)).collect();
        let part = |t: f64| ((t - 300.0) / over_s).clamp(0.0, 1.0);
        let column = |f: &dyn Fn(f64) -> f64| end.iter().map(|t| Some(f(*t))).collect::<Vec<_>>();
        let columns = BTreeMap::from([
            (Quantity::Petco2, column(&|t| 40.0 - co2 * part(t))),
            (Quantity::Peto2, column(&|t| 100.0 + o2 * part(t))),
            (Quantity::Vo2, column(&|_| 1500.0)),
            (Quantity::Vco2, column(&|t| 1500.0 * (1.0 + rer * part(t)))),
            (Quantity::Spo2, column(&|t| 97.0 - 7.0 * ((t - 300.0) / 40.0).clamp(0.0, 1.0))),
        ]);
        Breaths::new(end, None, columns).unwrap()
    }

    #[test]
    fn an_abrupt_step_of_all_three_is_found_where_it_is() {
        let found = find(&breaths(4.0, 6.0, 8.0, 0.12), (0.0, 600.0), true).unwrap();
        assert!((found.t_s - 300.0).abs() <= 10.0, "{found:?}");
        assert!((found.petco2 + 6.0).abs() < 0.5 && (found.peto2 - 8.0).abs() < 0.7);
        assert!((found.rer - 0.12).abs() < 0.01);
        assert!(found.spo2.unwrap() < -4.0);
        let unconfirmed = find(&breaths(4.0, 6.0, 8.0, 0.12), (0.0, 600.0), false).unwrap();
        assert_eq!(unconfirmed.spo2, None);
    }

    #[test]
    fn a_gradual_change_or_one_channel_alone_is_not() {
        assert_eq!(find(&breaths(250.0, 8.0, 12.0, 0.15), (0.0, 600.0), true), None);
        assert_eq!(find(&breaths(4.0, 6.0, 8.0, 0.0), (0.0, 600.0), true), None);
        assert_eq!(find(&breaths(4.0, 0.0, 8.0, 0.12), (0.0, 600.0), true), None);
    }
}
