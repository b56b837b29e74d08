//! Statements on safety, effort, capacity and breathing, from outcomes derived before.

use super::compose::Draft;
use super::seen::low_in;
use crate::facts::{EventKind, StopKind};
use crate::fick::spo2_usable;
use crate::predicted::sets::Predicts;
use crate::results::{Arg, At, Evidence, Note, Outcome, Section, Statement, Text};
use crate::stage::Stage;

fn evidence(code: &'static str, id: &'static str, at: At) -> Evidence {
    Evidence {
        note: Note::new(code).with("value", Arg::Outcome(id, at)),
        rests_on: vec![(Text::from(id), at)],
    }
}

fn fact(code: &'static str) -> Evidence {
    Evidence { note: Note::new(code), rests_on: Vec::new() }
}

/// Safety: what was recorded, and the prompt where a fact may be urgent. The absence of a record
/// is never "none".
pub(crate) fn safety(stage: &Stage<'_>) -> Vec<Statement> {
    let urgent = urgent(stage);
    let recorded: Vec<Evidence> = stage
        .facts
        .events
        .iter()
        .filter_map(|e| {
            let code = match e.kind {
                EventKind::Arrhythmia => "event-arrhythmia",
                EventKind::Symptom => "event-symptom",
                EventKind::Ecg => "event-ecg",
                EventKind::Treatment => "event-treatment",
                _ => return None,
            };
            let note = Note::new(code).with("time", Arg::Instant(e.t_s));
            Some(Evidence { note, rests_on: Vec::new() })
        })
        .collect();
    let mut statements = Vec::new();
    if !urgent.is_empty() {
        let draft =
            Draft::new("safety-urgent", Section::Safety, Note::new("safety-may-need-action"));
        statements.push(urgent.into_iter().fold(draft, Draft::supported_by).done());
    }
    let code = if recorded.is_empty() { "safety-none-recorded" } else { "safety-events-recorded" };
    let note = Note::new(code).with("count", Arg::Count(recorded.len()));
    let draft = Draft::new("safety-events", Section::Safety, note);
    statements.push(recorded.into_iter().fold(draft, Draft::supported_by).done());
    statements
}

/// Facts that may be urgent; the program never decides that a test is not.
fn urgent(stage: &Stage<'_>) -> Vec<Evidence> {
    let facts = stage.facts;
    let mut list = Vec::new();
    if facts.test.ecg.change == Some(true) {
        list.push(fact("urgent-ecg-change"));
    }
    match facts.test.stop {
        Some(StopKind::Ischaemia) => list.push(fact("urgent-stop-ischaemia")),
        Some(StopKind::BloodPressure) => list.push(fact("urgent-stop-pressure")),
        Some(StopKind::Rhythm) => list.push(fact("urgent-stop-rhythm")),
        _ => {}
    }
    if facts.events.iter().any(|e| e.kind == EventKind::Treatment) {
        list.push(fact("urgent-treatment"));
    }
    let pressure = |at| stage.results.number("sys-bp", at);
    if let (Some(rest), Some(peak)) = (pressure(At::Rest), pressure(At::Peak))
        && peak < rest - 10.0
    {
        list.push(evidence("urgent-pressure-fall", "sys-bp", At::Peak));
    }
    let lowest = stage.results.number("spo2-lowest", At::Ramp);
    if spo2_usable(stage) && lowest.is_some_and(|x| x < 80.0) {
        list.push(evidence("urgent-desaturation", "spo2-lowest", At::Ramp));
    }
    list
}

/// Effort in three states.
pub(crate) fn effort(stage: &Stage<'_>) -> Option<Statement> {
    let outcome = stage.results.primary("effort", At::Test)?;
    let note = match outcome.word() {
        Some("maximal-metabolic") => Note::new("effort-maximal-metabolic"),
        Some("stopped-at-limit") => Note::new("effort-stopped-at-limit"),
        Some(_) => Note::new("effort-submaximal-without-limit"),
        None => Note::new("effort-not-judged"),
    };
    let note = note
        .with("rer", Arg::Outcome("rer-peak", At::Peak))
        .with("hr", Arg::Outcome("hr-peak", At::Peak));
    let mut draft = Draft::new("effort-state", Section::Effort, note)
        .resting_on("effort", At::Test)
        .resting_on("rer-peak", At::Peak)
        .resting_on("hr-peak", At::Peak);
    let signs = [
        ("effort-rer", "criterion-rer", "criterion-rer-not-met"),
        ("effort-hr", "criterion-hr", "criterion-hr-not-met"),
        ("effort-lactate", "criterion-lactate", "criterion-lactate-not-met"),
        ("vo2-plateau", "criterion-plateau", "criterion-plateau-not-met"),
    ];
    for (id, met, not_met) in signs {
        let Some(criterion) = stage.results.primary(id, At::Peak) else { continue };
        let piece =
            |code| Evidence { note: Note::new(code), rests_on: vec![(id.into(), At::Peak)] };
        draft = match criterion.word() {
            Some("met" | "present") => draft.supported_by(piece(met)),
            Some(_) => draft.contradicted_by(piece(not_met)),
            None => {
                let why = criterion.reason.as_ref().map(|why| why.code);
                let note = match why {
                    Some("rate-prediction-does-not-hold") => Note::new("criterion-hr-not-judged"),
                    _ => Note::new("not-measured").with("sign", Arg::Word(met)),
                };
                draft.open(Evidence { note, rests_on: Vec::new() })
            }
        };
    }
    for limit in &outcome.doubts {
        draft = draft.supported_by(Evidence {
            note: limit.clone(),
            rests_on: vec![("effort".into(), At::Test)],
        });
    }
    Some(draft.done())
}

/// Peak V̇O₂ against every set in range; not graded where effort does not allow it.
pub(crate) fn capacity(stage: &Stage<'_>) -> Option<Statement> {
    let value = stage.results.number("vo2-peak", At::Peak)?;
    let effort = stage.results.primary("effort", At::Test).and_then(Outcome::word);
    let (low, all) = low_in(stage, Predicts::Vo2Peak, value);
    let code = match (effort, low, all) {
        (Some("submaximal-without-limit"), _, _) => "capacity-not-graded",
        (_, _, 0) => "capacity-without-prediction",
        (_, 0, _) => "capacity-within-limits",
        (_, low, all) if low == all => "capacity-below-limits",
        _ => "capacity-below-in-some",
    };
    let note = Note::new(code)
        .with("vo2", Arg::Outcome("vo2-peak", At::Peak))
        .with("low", Arg::Count(low))
        .with("sets", Arg::Count(all));
    let mut draft =
        Draft::new("capacity-peak", Section::Capacity, note).resting_on("vo2-peak", At::Peak);
    if all > 0 {
        draft = draft.resting_on("predicted-vo2-peak", At::Peak).supported_by(evidence(
            "predicted-peak",
            "predicted-vo2-peak",
            At::Peak,
        ));
    }
    if stage.results.number("vt1-vo2", At::Vt1).is_some() {
        draft = draft.resting_on("vt1-vo2", At::Vt1).supported_by(evidence(
            "first-threshold",
            "vt1-vo2",
            At::Vt1,
        ));
    }
    Some(draft.done())
}

/// Is breathing the limit, is it efficient, does the lung pass gas?
pub(crate) fn breathing(stage: &Stage<'_>) -> Vec<Statement> {
    let results = &stage.results;
    let mut statements = Vec::new();
    let settings = stage.settings;
    if let Some(reserve) = results.number("breathing-reserve", At::Peak) {
        let absolute = results.number("breathing-reserve-absolute", At::Peak);
        let low = reserve < settings.breathing_reserve_pct
            || absolute.is_some_and(|x| x < settings.breathing_reserve_l_min);
        let code = if low { "breathing-limit-shown" } else { "breathing-no-limit-shown" };
        let note = Note::new(code).with("reserve", Arg::Outcome("breathing-reserve", At::Peak));
        statements.push(
            Draft::new("breathing-reserve", Section::Breathing, note)
                .resting_on("breathing-reserve", At::Peak)
                .done(),
        );
    }
    if let Some(slope) = results.number("ve-vco2-slope-full", At::Ramp) {
        let code = if slope > 34.0 { "ventilation-inefficient" } else { "ventilation-efficient" };
        let note = Note::new(code).with("slope", Arg::Outcome("ve-vco2-slope-full", At::Ramp));
        statements.push(
            Draft::new("ventilatory-efficiency", Section::Breathing, note)
                .resting_on("ve-vco2-slope-full", At::Ramp)
                .done(),
        );
    }
    if results.primary("oscillatory-ventilation", At::Ramp).and_then(Outcome::word)
        == Some("present")
    {
        statements.push(
            Draft::new("oscillation", Section::Breathing, Note::new("oscillation-present"))
                .resting_on("oscillatory-ventilation", At::Ramp)
                .done(),
        );
    }
    statements.extend(saturation(stage));
    statements
}

fn saturation(stage: &Stage<'_>) -> Option<Statement> {
    let results = &stage.results;
    let lowest = results.number("spo2-lowest", At::Ramp)?;
    let fell = results.number("spo2", At::Rest).map(|rest| rest - lowest >= 4.0);
    let code = match (spo2_usable(stage), fell) {
        (false, _) => "saturation-unconfirmed",
        (true, Some(true)) => "saturation-fell",
        (true, _) => "saturation-held",
    };
    let note = Note::new(code).with("lowest", Arg::Outcome("spo2-lowest", At::Ramp));
    let draft =
        Draft::new("saturation", Section::Breathing, note).resting_on("spo2-lowest", At::Ramp);
    Some(match code {
        "saturation-fell" => draft.contradicted_by(fact("low-perfusion-possible")).done(),
        _ => draft.done(),
    })
}
