//! Plausibility of a finished recording: calibration, units, leaks, gaps, protocol.
//!
//! Each finding has a severity and the stretch concerned. Limits are common practice unless a
//! source is named.

use crate::decisions::Phase;
use crate::note::{Arg, Note};
use crate::protocol;
use crate::quantity::Quantity as Q;
use crate::regression;
use crate::results::At;
use crate::stage::Stage;
use crate::unit::Unit;

/// How much a finding matters.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Worth knowing.
    Remark,
    /// Some values may be off.
    Caution,
    /// Values cannot be trusted until it is resolved.
    Serious,
}

impl Severity {
    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Severity::Remark => "remark",
            Severity::Caution => "caution",
            Severity::Serious => "serious",
        }
    }
}

/// One finding.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// What.
    pub note: Note,
    /// How much it matters.
    pub severity: Severity,
    /// Stretch concerned, s; `None` = the whole recording.
    pub window_s: Option<(f64, f64)>,
}

/// Derives the findings; cautions and worse also become doubts about the test.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let mut found = Vec::new();
    unit_slips(stage, &mut found);
    resting(stage, &mut found);
    unloaded(stage, &mut found);
    work_rate(stage, &mut found);
    ventilation(stage, &mut found);
    drift(stage, &mut found);
    leak(stage, &mut found);
    end_tidal(stage, &mut found);
    saturation(stage, &mut found);
    length(stage, &mut found);
    protocol::look(stage, &mut found);
    gaps(stage, &mut found);
    let loud = found.iter().filter(|f| f.severity >= Severity::Caution).map(|f| f.note.clone());
    stage.results.doubts.extend(loud);
    stage.results.quality = found;
}

fn add(found: &mut Vec<Finding>, severity: Severity, window_s: Option<(f64, f64)>, note: Note) {
    found.push(Finding { note, severity, window_s });
}

fn number(code: &'static str, name: &'static str, x: f64, unit: Unit) -> Note {
    Note::new(code).with(name, Arg::Number(x, unit))
}

/// Typical ratios of two channels under load, tight enough that a slip of ten shows.
const RATIOS: [(Q, Q, f64, (f64, f64)); 4] = [
    (Q::Ve, Q::Vo2, 1000.0, (12.0, 80.0)),
    (Q::Ve, Q::Vco2, 1000.0, (12.0, 80.0)),
    (Q::Vco2, Q::Vo2, 1.0, (0.4, 2.0)),
    (Q::Vo2, Q::Hr, 1.0, (1.5, 45.0)),
];

/// A channel that is off by ten or a thousand against another.
fn unit_slips(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some(window) = stage.peak_window() else { return };
    for (a, b, factor, (low, high)) in RATIOS {
        let (Some(x), Some(y)) = (stage.window_mean(a, window), stage.window_mean(b, window))
        else {
            continue;
        };
        let ratio = factor * x / y;
        let slip = [0.001, 0.1, 10.0, 1000.0]
            .into_iter()
            .find(|f| !(low..=high).contains(&ratio) && (low..=high).contains(&(ratio / f)));
        if let Some(slip) = slip {
            let note = number("unit-slip", "factor", slip, Unit::One)
                .with("channel", Arg::Quantity(a))
                .with("against", Arg::Quantity(b));
            add(found, Severity::Serious, Some(window), note);
        }
    }
}

/// RER and V̇O₂ at rest.
fn resting(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some(window) = stage.end_of(Phase::Rest, 60.0) else { return };
    if let Some(rer) = stage.window_mean(Q::Rer, window)
        && !(0.70..=1.00).contains(&rer)
    {
        add(found, Severity::Caution, Some(window), number("rest-rer", "rer", rer, Unit::One));
    }
    let mass = stage.facts.subject.mass_kg.filter(|m| *m > 0.0);
    if let Some((vo2, mass)) = stage.window_mean(Q::Vo2, window).zip(mass) {
        let per_kg = vo2 / mass;
        if !(2.5..=6.0).contains(&per_kg) {
            let note = number("rest-vo2", "vo2", per_kg, Unit::MlPerKgMin);
            add(found, Severity::Caution, Some(window), note);
        }
    }
}

/// V̇O₂ of unloaded cycling: 5.8 per kg + 151 mL/min ± 25 % (from memory of Wasserman's text).
fn unloaded(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let (Some(window), Some(mass)) =
        (stage.end_of(Phase::WarmUp, 60.0), stage.facts.subject.mass_kg)
    else {
        return;
    };
    let idle = stage.window_mean(Q::WorkRate, window).is_some_and(|w| w <= 10.0);
    if let Some(vo2) = stage.window_mean(Q::Vo2, window)
        && idle
        && (vo2 / (5.8 * mass + 151.0) - 1.0).abs() > 0.25
    {
        let note = number("unloaded-vo2", "vo2", vo2, Unit::MlPerMin);
        add(found, Severity::Remark, Some(window), note);
    }
}

/// ΔV̇O₂/ΔWR outside 8.0–12.5 mL/min per W.
fn work_rate(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    if let Some(slope) = stage.results.number("dvo2-dwr", At::Ramp)
        && !(8.0..=12.5).contains(&slope)
    {
        let note = number("vo2-work-implausible", "slope", slope, Unit::MlPerMinPerWatt);
        add(found, Severity::Caution, stage.results.phases.ramp(), note);
    }
}

/// V̇E = VT × fR breath by breath: more than 3 % off in more than 5 % of breaths.
fn ventilation(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let breaths = &stage.recording.breaths;
    let [Some(ve), Some(vt), Some(fr)] = [Q::Ve, Q::Vt, Q::Fr].map(|q| breaths.column(q)) else {
        return;
    };
    let (mut all, mut off) = (0usize, 0usize);
    for ((ve, vt), fr) in ve.iter().zip(vt).zip(fr) {
        if let (Some(ve), Some(vt), Some(fr)) = (ve, vt, fr) {
            all += 1;
            off += usize::from((vt * fr / ve - 1.0).abs() > 0.03);
        }
    }
    if off * 20 > all {
        let share = 100.0 * off as f64 / all as f64;
        let note = number("ventilation-not-vt-times-fr", "share", share, Unit::Percent);
        add(found, Severity::Caution, None, note);
    }
}

/// RER that drifts during the warm-up by more than 0.05 per minute.
fn drift(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some((from, to)) = stage.results.phases.window(Phase::WarmUp) else { return };
    // The first minute follows the onset of exercise.
    let window = (from + 60.0, to);
    let (t, vo2) = stage.points(Q::Vo2, window);
    let (t2, vco2) = stage.points(Q::Vco2, window);
    if t != t2 || t.len() < 15 {
        return;
    }
    let rer: Vec<f64> = vco2.iter().zip(&vo2).map(|(c, o)| c / o).collect();
    if let Some(line) = regression::line(&t, &rer) {
        let per_min = 60.0 * line.slope;
        let off = rer.iter().zip(&t).map(|(r, t)| r - line.at(*t));
        let squares: f64 = off.map(|o| o * o).sum();
        let scatter = (squares / (t.len() as f64 - 2.0) / line.sxx).sqrt();
        if per_min.abs() > 0.05 && line.slope.abs() > 2.0 * scatter {
            let note = number("rer-drift", "per-min", per_min, Unit::One);
            add(found, Severity::Remark, Some(window), note);
        }
    }
}

/// Leak: V̇E, V̇O₂ and V̇CO₂ all at least 20 % under their neighbourhood for 20 s while HR is not.
fn leak(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some((from, to)) = stage.results.phases.ramp() else { return };
    let share = |q: Q, t: f64| {
        let here = stage.window_mean(q, (t, t + 20.0))?;
        let around = (stage.window_mean(q, (t - 60.0, t - 10.0))?
            + stage.window_mean(q, (t + 30.0, t + 80.0))?)
            / 2.0;
        Some(here / around)
    };
    let mut t = from + 60.0;
    while t + 80.0 <= to {
        let low = [Q::Ve, Q::Vo2, Q::Vco2].iter().all(|q| share(*q, t).is_some_and(|s| s < 0.80));
        if low && share(Q::Hr, t).is_none_or(|s| s > 0.95) {
            let note = Note::new("leak-suspected").with("time", Arg::Instant(t));
            add(found, Severity::Caution, Some((t, t + 20.0)), note);
            t += 60.0;
        }
        t += 10.0;
    }
}

/// Mixed expired CO₂ must lie under end-tidal CO₂.
fn end_tidal(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some(window) = stage.peak_window() else { return };
    let means = [Q::Vco2, Q::Ve, Q::Petco2].map(|q| stage.window_mean(q, window));
    if let [Some(vco2), Some(ve), Some(petco2)] = means {
        let share = crate::gas::mixed_expired_mmhg(vco2 / 1000.0, ve) / petco2;
        if !(0.5..=1.0).contains(&share) {
            let note = number("mixed-expired-against-end-tidal", "share", share, Unit::One);
            add(found, Severity::Caution, Some(window), note);
        }
    }
    if let Some(rer) = stage.results.number("rer-peak", At::Peak).filter(|r| *r > 1.5) {
        let note = number("rer-peak-implausible", "rer", rer, Unit::One);
        add(found, Severity::Caution, Some(window), note);
    }
    if let Some(eq) = stage.window_mean(Q::EqO2, window).filter(|e| *e < 15.0) {
        add(
            found,
            Severity::Caution,
            Some(window),
            number("eq-o2-implausible", "eq", eq, Unit::One),
        );
    }
}

/// SpO₂ that falls more than 4 points without a confirmed trace.
fn saturation(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let lowest = stage.results.number("spo2-lowest", At::Ramp);
    let rest = stage.results.number(Q::Spo2.code(), At::Rest);
    if let Some((lowest, rest)) = lowest.zip(rest)
        && (rest - lowest > 4.0 || lowest <= 88.0)
        && stage.facts.test.spo2_confirmed != Some(true)
    {
        let note = number("spo2-fall-unconfirmed", "lowest", lowest, Unit::Percent);
        add(found, Severity::Caution, stage.results.phases.ramp(), note);
    }
}

/// Length of the increments: 8–12 min ideal (Radtke et al., Eur Respir Rev 2019), marked under 6
/// and over 15.
fn length(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some((from, to)) = stage.results.phases.ramp() else { return };
    let minutes = (to - from) / 60.0;
    if !(6.0..=15.0).contains(&minutes) {
        let note = Note::new("ramp-length").with("length", Arg::Duration(to - from));
        add(found, Severity::Caution, Some((from, to)), note);
    }
}

/// Gaps of more than 15 s in the gas values.
fn gaps(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    for gap in stage.recording.gaps.iter().filter(|g| g.to_s - g.from_s > 15.0) {
        let note = Note::new("gap-in-gas")
            .with("time", Arg::Instant(gap.from_s))
            .with("length", Arg::Duration(gap.to_s - gap.from_s));
        add(found, Severity::Remark, Some((gap.from_s, gap.to_s)), note);
    }
}
