//! The model's curves and bands on a grid.

use super::response::{Moment, Response};
use crate::quantity::Quantity;

/// Step of the grid, s; twice that for a long test.
const STEP_S: f64 = 5.0;
const LONG_S: f64 = 1500.0;
/// Points over V̇O₂.
const VO2_POINTS: usize = 60;
/// Chronotropic index that bounds the HR band (Wilkoff et al. 1989).
const CHRONOTROPIC: (f64, f64) = (0.8, 1.3);
/// Lower limit of the O₂ pulse as a share (common practice, ATS/ACCP 2003).
const O2_PULSE_SHARE: f64 = 0.8;
/// Upper limit of the V̇E–V̇CO₂ slope (common practice).
const VE_SLOPE_LIMIT: f64 = 34.0;
/// Resting PETCO₂, mmHg, its rise to VT1 (from memory), and its fall from VT2 to peak (modelling
/// choice).
const PETCO2: (f64, f64) = (36.0, 42.0);
const PETCO2_RISE: (f64, f64) = (3.0, 8.0);
const PETCO2_FALL: f64 = 4.0;
/// Half-width of the diastolic band, mmHg.
const DIASTOLIC: f64 = 10.0;

/// What a curve stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    /// The normal response.
    Normal,
    /// Heart rate as predicted on a beta-blocker.
    BetaBlocked,
}

/// One quantity: its middle and its band, in the quantity's canonical unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Curve {
    /// Which.
    pub quantity: Quantity,
    /// What for.
    pub role: Role,
    /// The middle at each x; empty where only a band is drawn.
    pub middle: Vec<f64>,
    /// Lower edge at the first [`Curves::normal`] x; empty without one.
    pub low: Vec<f64>,
    /// Upper edge at the first [`Curves::normal`] x; empty without one.
    pub high: Vec<f64>,
}

/// Curves over one x.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Curves {
    /// Time, s, or V̇O₂, mL/min, rising.
    pub x: Vec<f64>,
    /// So many of the x lie up to the predicted peak; beyond, the middle is drawn dashed and there
    /// is no band.
    pub normal: usize,
    /// The curves.
    pub curves: Vec<Curve>,
}

impl Curves {
    /// The normal curve of `quantity`.
    #[must_use]
    pub fn of(&self, quantity: Quantity) -> Option<&Curve> {
        self.curves.iter().find(|c| c.quantity == quantity && c.role == Role::Normal)
    }

    /// HR as predicted on a beta-blocker.
    #[must_use]
    pub fn beta_blocked(&self) -> Option<&Curve> {
        self.curves.iter().find(|c| c.role == Role::BetaBlocked)
    }
}

/// Pressure at rest, mmHg, and its rise with work rate, mmHg/W.
#[derive(Clone, Copy, Debug)]
pub struct Pressure {
    /// Systolic at rest.
    pub systolic: Option<f64>,
    /// Diastolic at rest.
    pub diastolic: Option<f64>,
    /// Rise of the systolic one, mmHg/W.
    pub slope: f64,
    /// Its standard deviation.
    pub slope_sd: f64,
}

/// The runs that make a picture.
#[derive(Clone, Copy, Debug)]
pub struct Runs {
    /// The run in the middle.
    pub middle: Response,
    /// Run at the lower limits of peak V̇O₂ and gain.
    pub low: Option<Response>,
    /// Run at the upper limits.
    pub high: Option<Response>,
    /// Blood pressure, where both its parts are known.
    pub pressure: Option<Pressure>,
    /// Predicted peak HR on a beta-blocker, /min.
    pub hr_beta_blocked: Option<f64>,
}

/// The three runs at one x.
#[derive(Clone, Copy)]
struct At {
    middle: Moment,
    low: Option<Moment>,
    high: Option<Moment>,
}

/// The curves over time from `from` to `to`, s from the start of the increments at `start`.
#[must_use]
pub fn over_time(runs: &Runs, start: f64, from: f64, to: f64) -> Curves {
    let peak = runs.middle.peak_s.unwrap_or(to);
    let step = if to - from > LONG_S { 2.0 * STEP_S } else { STEP_S };
    let count = ((to - from) / step).ceil().clamp(1.0, 4000.0) as usize;
    let mut u: Vec<f64> = (0..=count).map(|i| (from + step * i as f64).min(to)).collect();
    u.push(peak);
    u.push(0.0);
    u.sort_by(f64::total_cmp);
    u.dedup();
    let normal = u.iter().filter(|x| **x <= peak).count();
    let at: Vec<At> = u
        .iter()
        .map(|u| At {
            middle: runs.middle.at(*u),
            low: runs.low.map(|r| r.at(*u)),
            high: runs.high.map(|r| r.at(*u)),
        })
        .collect();
    let mut curves = from_moments(runs, &at, normal);
    curves.extend(with_load(runs, &at, normal));
    Curves { x: u.iter().map(|u| start + u).collect(), normal, curves }
}

/// The curves over V̇O₂ from rest to the predicted peak.
#[must_use]
pub fn over_vo2(runs: &Runs) -> Curves {
    let (rest, peak) = (runs.middle.inputs.rest_vo2, runs.middle.inputs.vo2_peak);
    let step = (peak - rest) / (VO2_POINTS - 1) as f64;
    let x: Vec<f64> = (0..VO2_POINTS).map(|i| rest + step * i as f64).collect();
    let at: Vec<At> =
        x.iter().map(|v| At { middle: runs.middle.at_vo2(*v), low: None, high: None }).collect();
    let mut curves = from_moments(runs, &at, x.len());
    curves.retain(|c| c.quantity != Quantity::Vo2);
    Curves { normal: x.len(), x, curves }
}

/// A band from the two limit runs: the lowest and highest of the three at each x.
fn spread(
    quantity: Quantity,
    at: &[At],
    normal: usize,
    value: impl Fn(&Moment) -> Option<f64>,
) -> Option<Curve> {
    let middle: Vec<f64> = at.iter().map_while(|a| value(&a.middle)).collect();
    if middle.len() < at.len() {
        return None;
    }
    let edge = |pick: fn(f64, f64) -> f64, both: fn(&At) -> bool| -> Vec<f64> {
        let held = at.iter().take(normal).all(both);
        let edge = at.iter().take(normal).map(|a| {
            let others = [a.low.as_ref(), a.high.as_ref()].into_iter().flatten();
            let values = others.filter_map(&value);
            values.fold(value(&a.middle).unwrap_or(f64::NAN), pick)
        });
        if held { edge.collect() } else { Vec::new() }
    };
    let any = |a: &At| a.low.is_some() || a.high.is_some();
    let (low, high) = (edge(f64::min, any), edge(f64::max, any));
    Some(Curve { quantity, role: Role::Normal, middle, low, high })
}

fn from_moments(runs: &Runs, at: &[At], normal: usize) -> Vec<Curve> {
    let per_litre = |ve: Option<f64>, gas: f64| ve.map(|ve| 1000.0 * ve / gas);
    let mut curves: Vec<Curve> = [
        spread(Quantity::Vo2, at, normal, |m| Some(m.vo2)),
        spread(Quantity::Vco2, at, normal, |m| Some(m.vco2)),
        spread(Quantity::Ve, at, normal, |m| m.ve),
        spread(Quantity::Rer, at, normal, |m| Some(m.vco2 / m.vo2)),
        spread(Quantity::EqO2, at, normal, |m| per_litre(m.ve, m.vo2)),
        spread(Quantity::EqCo2, at, normal, |m| per_litre(m.ve, m.vco2)),
    ]
    .into_iter()
    .flatten()
    .collect();
    // The published upper line instead of the spread of the runs.
    if let Some(curve) = curves.iter_mut().find(|c| c.quantity == Quantity::EqCo2) {
        let upper = |a: &At| VE_SLOPE_LIMIT + 4000.0 / a.middle.vco2;
        curve.low.clear();
        curve.high = at.iter().take(normal).map(upper).collect();
    }
    curves.extend(heart(runs, at, normal));
    curves.push(petco2(runs, at, normal));
    curves
}

/// HR with the band of the chronotropic index, O₂ pulse with its lower line, HR on a beta-blocker.
fn heart(runs: &Runs, at: &[At], normal: usize) -> Vec<Curve> {
    let Some((rest, peak)) = runs.middle.inputs.hr else { return Vec::new() };
    let rate = |share: f64, top: f64, vo2: f64| {
        rest + share * (top - rest) * runs.middle.share(vo2).max(0.0)
    };
    let line = |share: f64, top: f64| move |a: &At| rate(share, top, a.middle.vo2);
    let first = |f: &dyn Fn(&At) -> f64| at.iter().take(normal).map(f).collect::<Vec<f64>>();
    let hr: Vec<f64> = at.iter().filter_map(|a| a.middle.hr).collect();
    let pulse: Vec<f64> = at.iter().zip(&hr).map(|(a, hr)| a.middle.vo2 / hr).collect();
    let pulse_low = pulse.iter().take(normal).map(|p| O2_PULSE_SHARE * p).collect();
    let mut curves = vec![
        Curve {
            quantity: Quantity::Hr,
            role: Role::Normal,
            low: first(&line(CHRONOTROPIC.0, peak)),
            high: first(&line(CHRONOTROPIC.1, peak)),
            middle: hr,
        },
        Curve {
            quantity: Quantity::O2Pulse,
            role: Role::Normal,
            middle: pulse,
            low: pulse_low,
            high: Vec::new(),
        },
    ];
    if let Some(top) = runs.hr_beta_blocked.filter(|top| *top > rest) {
        curves.push(Curve {
            quantity: Quantity::Hr,
            role: Role::BetaBlocked,
            middle: at.iter().map(line(1.0, top)).collect(),
            low: Vec::new(),
            high: Vec::new(),
        });
    }
    curves
}

/// A band, no curve: up to VT1, level to VT2, down to peak.
fn petco2(runs: &Runs, at: &[At], normal: usize) -> Curve {
    let r = &runs.middle;
    let change = |vo2: f64, rise: f64| {
        let up = (vo2 - r.inputs.rest_vo2) / (r.vt1_vo2 - r.inputs.rest_vo2);
        let down = (vo2 - r.vt2_vo2) / (r.inputs.vo2_peak - r.vt2_vo2);
        rise * up.clamp(0.0, 1.0) - PETCO2_FALL * down.clamp(0.0, 1.0)
    };
    let edge = |rest: f64, rise: f64| {
        at.iter().take(normal).map(|a| rest + change(a.middle.vo2, rise)).collect::<Vec<f64>>()
    };
    Curve {
        quantity: Quantity::Petco2,
        role: Role::Normal,
        middle: Vec::new(),
        low: edge(PETCO2.0, PETCO2_RISE.0),
        high: edge(PETCO2.1, PETCO2_RISE.1),
    }
}

/// Work rate, and pressure where it was read at rest.
fn with_load(runs: &Runs, at: &[At], normal: usize) -> Vec<Curve> {
    let curve = |quantity, middle: Vec<f64>, low, high| Curve {
        quantity,
        role: Role::Normal,
        middle,
        low,
        high,
    };
    let work: Vec<f64> = at.iter().map(|a| a.middle.work_rate).collect();
    if work.iter().any(|w| !w.is_finite()) {
        return Vec::new();
    }
    let mut curves = vec![curve(Quantity::WorkRate, work.clone(), Vec::new(), Vec::new())];
    let Some(pressure) = runs.pressure else { return curves };
    if let Some(rest) = pressure.systolic {
        let line = |slope: f64| work.iter().map(|w| rest + slope * w).collect::<Vec<f64>>();
        let edge = |sd: f64| {
            let mut edge = line(pressure.slope + sd * pressure.slope_sd);
            edge.truncate(normal);
            edge
        };
        curves.push(curve(Quantity::SysBp, line(pressure.slope), edge(-1.0), edge(1.0)));
    }
    if let Some(rest) = pressure.diastolic {
        let flat = |x: f64, n: usize| vec![x; n];
        let (low, high) = (flat(rest - DIASTOLIC, normal), flat(rest + DIASTOLIC, normal));
        curves.push(curve(Quantity::DiaBp, flat(rest, work.len()), low, high));
    }
    curves
}

/// Curves over the time of a treadmill, from V̇O₂ estimated at each instant.
pub(super) fn estimated(runs: &Runs, t_s: Vec<f64>, vo2: &[f64]) -> Curves {
    let top = runs.middle.inputs.vo2_peak;
    let normal = vo2.iter().take_while(|v| **v <= top).count();
    let at: Vec<At> = vo2
        .iter()
        .map(|v| At { middle: runs.middle.at_vo2(v.min(top)), low: None, high: None })
        .collect();
    Curves { curves: from_moments(runs, &at, normal), x: t_s, normal }
}
