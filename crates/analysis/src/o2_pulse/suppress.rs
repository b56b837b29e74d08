//! Where no course is given, and why; and what makes its error rate unknown.

use super::classify::LATE_S;
use super::detail::CourseDetail;
use crate::decisions::Phase;
use crate::facts::{Device, Diagnosis, EventKind, Facts, Mode, Rhythm};
use crate::quantity::Quantity;
use crate::recording::{RowKind, Trace};
use crate::results::{Arg, At, LoadShape, Note};
use crate::stage::Stage;
use crate::unit::Unit;

/// Room air, as a fraction of oxygen.
pub(crate) const ROOM_AIR: (f64, f64) = (0.20, 0.21);
/// Late rise of HR below which the rate counts as fixed, /min per min.
const FIXED_RATE: f64 = 2.0;

/// Whether the stated diagnoses hold `diagnosis`.
pub(crate) fn diagnosed(facts: &Facts, diagnosis: Diagnosis) -> bool {
    facts.test.diagnoses.as_ref().is_some_and(|d| d.contains(&diagnosis))
}

/// Whether the stated devices hold `device`.
pub(crate) fn has_device(facts: &Facts, device: Device) -> bool {
    facts.test.devices.as_ref().is_some_and(|d| d.contains(&device))
}

/// Facts with which V̇O₂ ÷ HR does not stand for forward stroke volume × extraction.
pub(crate) fn circulation_not_simple(facts: &Facts) -> Vec<Note> {
    let mut notes = Vec::new();
    if has_device(facts, Device::Lvad) {
        notes.push(Note::new("withheld-lvad"));
    }
    for (diagnosis, code) in [
        (Diagnosis::Fontan, "withheld-fontan"),
        (Diagnosis::Shunt, "withheld-shunt"),
        (Diagnosis::Pregnancy, "withheld-pregnancy"),
    ] {
        if diagnosed(facts, diagnosis) {
            notes.push(Note::new(code));
        }
    }
    if let Some(fio2) = facts.test.fio2.filter(|f| *f < ROOM_AIR.0 || *f > ROOM_AIR.1) {
        notes.push(
            Note::new("withheld-inspired-gas")
                .with("fio2", Arg::Number(100.0 * fio2, Unit::Percent)),
        );
    }
    notes
}

/// What forbids the course and all its numbers before anything is fitted.
pub(crate) fn forbidding(stage: &Stage<'_>, ramp: (f64, f64)) -> Vec<Note> {
    let facts = stage.facts;
    let mut notes = Vec::new();
    match facts.test.rhythm {
        Some(Rhythm::Sinus) => {}
        Some(Rhythm::AtrialFibrillation) => notes.push(Note::new("withheld-atrial-fibrillation")),
        Some(Rhythm::Paced) => notes.push(Note::new("withheld-paced")),
        Some(Rhythm::Other) => notes.push(Note::new("withheld-other-rhythm")),
        None => notes.push(Note::new("withheld-rhythm-not-stated")),
    }
    if facts.test.frequent_ectopy == Some(true) {
        notes.push(Note::new("withheld-ectopy"));
    }
    notes.extend(circulation_not_simple(facts));
    let in_ramp = |t: f64| ramp.0 <= t && t <= ramp.1;
    if facts.events.iter().any(|e| e.kind == EventKind::OxygenChange && in_ramp(e.t_s)) {
        notes.push(Note::new("withheld-oxygen-change"));
    }
    if let Some(word) = oscillation(stage)
        && word == "present"
    {
        notes.push(Note::new("withheld-oscillation"));
    }
    if let Some(LoadShape::Constant | LoadShape::Other) = stage.results.phases.load_shape {
        notes.push(Note::new("not-incremental"));
    }
    notes
}

/// The engine's reading of oscillatory ventilation, where there is one.
fn oscillation<'a>(stage: &'a Stage<'_>) -> Option<&'a str> {
    let outcomes = &stage.results.outcomes;
    outcomes.iter().find(|o| o.id == "oscillatory-ventilation").and_then(|o| o.word())
}

/// The rate is fixed: the O₂ pulse merely copies V̇O₂.
pub(crate) fn fixed_rate(detail: &CourseDetail) -> Option<Note> {
    let late = detail.late?;
    (late.hr_per_min < FIXED_RATE).then(|| {
        Note::new("withheld-fixed-rate").with("rise", Arg::Number(late.hr_per_min, Unit::PerMin))
    })
}

/// What forbids the word, though the numbers describe the recording: the work was not as set.
pub(crate) fn work_not_as_set(stage: &Stage<'_>, late: (f64, f64)) -> Vec<Note> {
    let mut notes = Vec::new();
    let inside = |t: f64| late.0 <= t && t <= late.1;
    for (kind, code) in
        [(EventKind::CadenceFade, "withheld-cadence"), (EventKind::RailGrip, "withheld-rail-grip")]
    {
        if stage.facts.events.iter().any(|e| e.kind == kind && inside(e.t_s)) {
            notes.push(Note::new(code));
        }
    }
    if load_fades(&stage.recording.load, late, stage.results.phases.load_shape) {
        notes.push(Note::new("withheld-load-fades"));
    }
    notes
}

/// Load falls, or a continuous ramp stops rising, inside the late window.
pub(crate) fn load_fades(load: &Trace, late: (f64, f64), shape: Option<LoadShape>) -> bool {
    let Some(mut highest) = load.at(late.0) else { return false };
    let start = highest;
    let from = load.t_s.partition_point(|t| *t <= late.0);
    let to = load.t_s.partition_point(|t| *t <= late.1);
    for w in &load.value[from..to] {
        if *w < highest - 5.0 && *w < 0.97 * highest {
            return true;
        }
        highest = highest.max(*w);
    }
    match shape {
        Some(LoadShape::Ramp(rate)) => highest - start < 0.4 * rate * (late.1 - late.0) / 60.0,
        _ => false,
    }
}

/// What was not simulated, so that nobody knows the error rate here.
pub(crate) fn error_rate_unknown(stage: &Stage<'_>, ramp: (f64, f64)) -> Vec<Note> {
    let facts = stage.facts;
    let mut why: Vec<&'static str> = Vec::new();
    match facts.subject.age_years {
        None => why.push("age-not-stated"),
        Some(age) if age < 18.0 => why.push("under-18"),
        Some(_) => {}
    }
    if diagnosed(facts, Diagnosis::Transplant) {
        why.push("transplanted-heart");
    }
    if diagnosed(facts, Diagnosis::Congenital) {
        why.push("congenital-heart-disease");
    }
    match facts.test.mode {
        Some(Mode::Cycle) => {}
        Some(Mode::Treadmill) => why.push("treadmill"),
        None => why.push("mode-not-stated"),
    }
    if stage.recording.load.t_s.is_empty() {
        why.push("load-not-recorded");
    }
    if let Some(LoadShape::Steps { .. }) = stage.results.phases.load_shape {
        why.push("steps");
    }
    let minutes = (ramp.1 - ramp.0) / 60.0;
    if !(7.5..=15.5).contains(&minutes) {
        why.push("ramp-length");
    }
    if let RowKind::Averaged { .. } = stage.recording.row_kind {
        why.push("averaged-table");
    }
    why.into_iter()
        .map(|word| Note::new("error-rate-unknown").with("why", Arg::Word(word)))
        .collect()
}

/// Remarks that always stand with the course.
pub(crate) fn remarks(stage: &Stage<'_>, ramp: (f64, f64)) -> Vec<Note> {
    let mut notes = Vec::new();
    if stage.facts.test.fio2.is_none() {
        notes.push(Note::new("room-air-assumed"));
    }
    if oscillation(stage).is_none() {
        notes.push(Note::new("oscillation-not-checked"));
    }
    let in_ramp = |t: f64| ramp.0 <= t && t <= ramp.1;
    if stage.facts.events.iter().any(|e| e.kind == EventKind::Arrhythmia && in_ramp(e.t_s)) {
        notes.push(Note::new("arrhythmia-noted"));
    }
    notes
}

/// The late window of a ramp, s.
pub(crate) fn late_window(load_end_s: f64) -> (f64, f64) {
    let to = load_end_s - super::bins::TRIM_S;
    (to - LATE_S, to)
}

/// Why there is nothing to fit: a channel or a phase is missing.
pub(crate) fn nothing_to_fit(stage: &Stage<'_>) -> Option<Note> {
    stage
        .missing(&[Quantity::Vo2, Quantity::Hr])
        .or_else(|| stage.results.phases.window(Phase::Ramp).is_none().then(|| stage.no_ramp()))
}

/// Primary number at peak, used by the terminal check.
pub(crate) fn rer_at_peak(stage: &Stage<'_>) -> Option<f64> {
    stage.results.number("rer", At::Peak).or_else(|| stage.results.number("rer-peak", At::Peak))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn trace(f: impl Fn(f64) -> f64) -> Trace {
        let t_s: Vec<f64> = (0..=600).map(f64::from).collect();
        Trace { value: t_s.iter().map(|t| f(*t)).collect(), t_s }
    }

    #[test]
    fn a_fading_or_held_load_is_seen_and_a_rising_one_is_not() {
        let late = (400.0, 580.0);
        let ramp = Some(LoadShape::Ramp(20.0));
        assert!(!load_fades(&trace(|t| t / 3.0), late, ramp));
        assert!(load_fades(&trace(|t| (t / 3.0).min(140.0)), late, ramp));
        assert!(load_fades(&trace(|t| if t > 520.0 { 150.0 } else { t / 3.0 }), late, ramp));
        let steps = Some(LoadShape::Steps { step_w: 60.0, length_s: 180.0 });
        assert!(!load_fades(&trace(|t| 60.0 * libm::floor(t / 180.0)), late, steps));
    }
}
