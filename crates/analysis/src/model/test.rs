//! A whole test: the recording, and what was true behind it.

use std::collections::BTreeMap;

use super::breathing::{Breath, breaths};
use super::mean::Response;
use super::plan::{Noise, Plan};
use crate::breaths::{Breaths, Column};
use crate::decisions::PhaseStarts;
use crate::quantity::Quantity;
use crate::recording::{Ambient, Recording, RowKind, Trace};

/// What is known because it was put in.
#[derive(Clone, Debug, PartialEq)]
pub struct Truth {
    /// The same breaths without noise: functionals of it are what an estimate aims at.
    pub noise_free: Recording,
    /// True boundaries.
    pub phases: PhaseStarts,
    /// V̇O₂ at which the simulated muscle's V-slope turns, mL/min, if exercise got there.
    pub vt1_vo2: Option<f64>,
    /// Time at which the lung's V̇O₂ passes it, s.
    pub vt1_s: Option<f64>,
    /// V̇O₂ at the lung when V̇E turns, mL/min, if exercise got there.
    pub vt2_vo2: Option<f64>,
    /// Its time, s.
    pub vt2_s: Option<f64>,
    /// Highest mean V̇O₂ over 30 s of load, mL/min.
    pub vo2_peak_30s: f64,
    /// Mean HR over the same 30 s, /min.
    pub hr_at_peak: f64,
    /// Start of the abrupt bend, s.
    pub bend_s: Option<f64>,
    /// Slope of ln(V̇O₂/HR) over the 3.0 min that end 20 s before load end, %/min.
    pub late_slope: f64,
    /// Rise of the demand, mL/min per W.
    pub gain: f64,
}

/// The recording of `plan` and its truth.
#[must_use]
pub fn generate(plan: &Plan) -> (Recording, Truth) {
    let response = plan.response();
    let measured = breaths(plan, &response);
    let silent = breaths(&Plan { noise: Noise::SILENT, ..*plan }, &response);
    let clean: Vec<Breath> = measured.iter().map(|b| noise_free(&silent, b)).collect();
    let recording = recording(plan, &measured, libm::round);
    let noise_free = self::recording(plan, &clean, |x| x);
    let truth = truth(plan, &response, noise_free);
    (recording, truth)
}

/// The silent breaths at the middle of a measured one: with the gas that a changing lung store
/// gives or takes, without noise.
fn noise_free(silent: &[Breath], breath: &Breath) -> Breath {
    let mid = |b: &Breath| b.end_s - 0.5 * b.duration_s;
    let t = mid(breath);
    let after = silent.partition_point(|b| mid(b) <= t).clamp(1, silent.len() - 1);
    let (a, b) = (&silent[after - 1], &silent[after]);
    let w = ((t - mid(a)) / (mid(b) - mid(a))).clamp(0.0, 1.0);
    let mix = |f: fn(&Breath) -> f64| f(a) + w * (f(b) - f(a));
    Breath {
        end_s: breath.end_s,
        duration_s: breath.duration_s,
        vo2: mix(|b| b.vo2),
        vco2: mix(|b| b.vco2),
        ve: mix(|b| b.ve),
        vt: mix(|b| b.vt),
        peto2: mix(|b| b.peto2),
        petco2: mix(|b| b.petco2),
        hr: mix(|b| b.hr),
        spo2: mix(|b| b.spo2),
    }
}

/// As a table; `displayed` is what the monitor makes of HR and SpO₂.
fn recording(plan: &Plan, breaths: &[Breath], displayed: fn(f64) -> f64) -> Recording {
    let column = |f: &dyn Fn(&Breath) -> Option<f64>| -> Column { breaths.iter().map(f).collect() };
    let gap = plan.noise.spo2_gap;
    let in_gap = |t: f64| gap.is_some_and(|(from, to)| t >= from && t < to);
    let columns: BTreeMap<Quantity, Column> = [
        (Quantity::WorkRate, column(&|b| Some(plan.schedule.load(b.end_s - 0.5 * b.duration_s)))),
        (Quantity::Vo2, column(&|b| Some(b.vo2))),
        (Quantity::Vco2, column(&|b| Some(b.vco2))),
        (Quantity::Ve, column(&|b| Some(b.ve))),
        (Quantity::Vt, column(&|b| Some(b.vt))),
        (Quantity::Fr, column(&|b| Some(60.0 / b.duration_s))),
        (Quantity::Hr, column(&|b| Some(displayed(b.hr)))),
        (Quantity::Peto2, column(&|b| Some(b.peto2))),
        (Quantity::Petco2, column(&|b| Some(b.petco2))),
        (Quantity::Spo2, column(&|b| (!in_gap(b.end_s)).then(|| displayed(b.spo2)))),
    ]
    .into();
    let end_s: Vec<f64> = breaths.iter().map(|b| b.end_s).collect();
    let durations = breaths.iter().map(|b| b.duration_s).collect();
    let breaths = Breaths::new(end_s, Some(durations), columns).unwrap_or_default();
    Recording {
        breaths,
        row_kind: RowKind::Breath,
        load: load_trace(plan),
        gaps: Vec::new(),
        ambient: Ambient::default(),
    }
}

/// The set work rate, one point per second.
fn load_trace(plan: &Plan) -> Trace {
    let t_s: Vec<f64> =
        (0..libm::ceil(plan.schedule.total_s()) as usize).map(|i| i as f64).collect();
    let value = t_s.iter().map(|t| plan.schedule.load(*t)).collect();
    Trace { t_s, value }
}

/// First second of load at which `f` reaches `level`.
fn first_at(
    plan: &Plan,
    response: &Response,
    level: f64,
    f: fn(&super::mean::Instant) -> f64,
) -> Option<f64> {
    let from = plan.schedule.ramp_at() as usize;
    let to = libm::floor(plan.schedule.end_at()) as usize;
    (from..to).find(|i| f(&response.seconds[*i]) >= level).map(|i| i as f64)
}

fn truth(plan: &Plan, response: &Response, noise_free: Recording) -> Truth {
    let s = &plan.schedule;
    let m = &plan.metabolism;
    let end = libm::floor(s.end_at()) as usize;
    let mean = |from: usize, f: fn(&super::mean::Instant) -> f64| {
        response.seconds[from..from + 30].iter().map(f).sum::<f64>() / 30.0
    };
    let first = libm::ceil(s.warm_up_at()) as usize;
    let at = (first..=end - 30)
        .max_by(|a, b| mean(*a, |i| i.vo2).total_cmp(&mean(*b, |i| i.vo2)))
        .unwrap_or(first);
    let vt1_s =
        (m.v_slope_rise > 0.0).then(|| first_at(plan, response, m.vt1_vo2, |i| i.vo2)).flatten();
    let vt2_s = (plan.ventilation.vt2_factor > 1.0)
        .then(|| plan.ventilation.vt2_vo2.and_then(|v| first_at(plan, response, v, |i| i.vo2)))
        .flatten();
    Truth {
        noise_free,
        phases: PhaseStarts {
            rest: Some(0.0),
            warm_up: Some(s.warm_up_at()),
            ramp: Some(s.ramp_at()),
            recovery: Some(s.end_at()),
        },
        vt1_vo2: vt1_s.map(|_| m.vt1_vo2),
        vt1_s,
        vt2_vo2: vt2_s.map(|t| response.at(t).vo2),
        vt2_s,
        vo2_peak_30s: mean(at, |i| i.vo2),
        hr_at_peak: mean(at, |i| i.hr),
        bend_s: plan.circulation.bend.map(|b| s.end_at() - b.before_end_s),
        late_slope: late_slope(response, s.end_at()),
        gain: m.gain,
    }
}

/// Least-squares slope of ln(V̇O₂/HR) over the 180 s ending 20 s before `end_s`, %/min.
fn late_slope(response: &Response, end_s: f64) -> f64 {
    let points: Vec<(f64, f64)> = (0..=180)
        .map(|k| {
            let t = end_s - 200.0 + f64::from(k);
            let now = response.at(t);
            (t / 60.0, libm::log(now.vo2 / now.hr))
        })
        .collect();
    let n = points.len() as f64;
    let mx = points.iter().map(|p| p.0).sum::<f64>() / n;
    let my = points.iter().map(|p| p.1).sum::<f64>() / n;
    let sxy: f64 = points.iter().map(|p| (p.0 - mx) * (p.1 - my)).sum();
    let sxx: f64 = points.iter().map(|p| (p.0 - mx) * (p.0 - mx)).sum();
    100.0 * sxy / sxx
}
