//! Predictions as outcomes: the chosen set primary, every other set beside it.

use super::candidates::{Candidate, candidates};
use super::person;
use super::sets::{Person, Predicts};
use crate::facts::Mode;
use crate::note::{Arg, Note};
use crate::results::{At, Interval, Outcome, Text};
use crate::stage::Stage;
use crate::unit::Unit;

/// Share of the predicted O₂ pulse taken as its lower limit (ATS/ACCP 2003, common practice).
pub const O2_PULSE_SHARE: f64 = 0.8;

/// Derives `predicted-…` for every quantity that a loaded set predicts.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let (person, mode_doubt) = person::of(stage);
    let settings = stage.settings;
    let mut outcomes = Vec::with_capacity(64);
    for predicts in Predicts::all() {
        let list = candidates(settings, predicts, &person);
        match predicts {
            Predicts::Vo2Peak if list.iter().all(|c| !c.chosen) => {
                outcomes.push(unknown(predicts, &settings.predicted.vo2));
            }
            Predicts::HrPeak if list.iter().all(|c| !c.chosen) => {
                outcomes.push(unknown(predicts, &settings.predicted.hr));
            }
            Predicts::O2Pulse => outcomes.push(quotient(stage, &person)),
            Predicts::WorkRate => {
                outcomes.extend(work_rate(stage, &person, list.iter().any(|c| c.chosen)));
            }
            _ => {}
        }
        if predicts == Predicts::HrPeakBetaBlocked && !beta_blocked(stage) {
            continue;
        }
        outcomes.extend(list.iter().map(|c| outcome(predicts, c, mode_doubt.as_ref())));
    }
    for outcome in outcomes {
        stage.push(outcome);
    }
}

/// Whether a rate-slowing drug is stated that is, or may be, a beta-blocker.
pub(super) fn beta_blocked(stage: &Stage<'_>) -> bool {
    let drug = &stage.facts.test.rate_slowing_drug;
    drug.beta_blocker == Some(true) || (drug.taken == Some(true) && drug.beta_blocker.is_none())
}

/// One set as an outcome; its limits stand in the interval, an end that is not published is
/// infinite.
fn outcome(predicts: Predicts, candidate: &Candidate<'_>, mode: Option<&Note>) -> Outcome {
    let (id, at, unit) = (predicts.predicted_id(), predicts.at(), predicts.unit());
    let method = Text::from(candidate.set.id.clone());
    let mut outcome = match &candidate.result {
        Err(why) => Outcome::absent(id, at, method, why.clone()).in_unit(unit),
        Ok(prediction) => {
            let mut outcome = Outcome::quantity(id, at, method, unit, prediction.value);
            outcome.recording = limits(prediction.low, prediction.high);
            outcome.doubts.clone_from(&prediction.doubts);
            outcome.doubts.extend(mode.filter(|_| !candidate.set.derived_on.is_empty()).cloned());
            if candidate.information_only {
                outcome.doubts.push(Note::new("information-only"));
            }
            outcome
        }
    };
    outcome.primary = candidate.chosen;
    outcome
}

pub(super) fn limits(low: Option<f64>, high: Option<f64>) -> Option<Interval> {
    (low.is_some() || high.is_some()).then(|| Interval {
        low: low.unwrap_or(f64::NEG_INFINITY),
        high: high.unwrap_or(f64::INFINITY),
    })
}

fn unknown(predicts: Predicts, id: &str) -> Outcome {
    let why = Note::new("set-unknown").with("set", Arg::Name(id.to_owned().into()));
    Outcome::absent(predicts.predicted_id(), predicts.at(), id.to_owned(), why)
        .in_unit(predicts.unit())
}

/// The chosen set's prediction.
pub(super) fn chosen_value(
    stage: &Stage<'_>,
    predicts: Predicts,
    person: &Person,
) -> Result<super::Prediction, Note> {
    let found = candidates(stage.settings, predicts, person).into_iter().find(|c| c.chosen);
    found.map_or_else(|| Err(Note::new("set-none-chosen")), |c| c.result)
}

/// Predicted V̇O₂ divided by predicted heart rate; the method names both sets.
fn quotient(stage: &Stage<'_>, person: &Person) -> Outcome {
    let (predicts, choice) = (Predicts::O2Pulse, &stage.settings.predicted);
    let method = format!("{}/{}", choice.vo2, choice.hr);
    let (id, at, unit) = (predicts.predicted_id(), predicts.at(), predicts.unit());
    let both = chosen_value(stage, Predicts::Vo2Peak, person)
        .and_then(|vo2| Ok((vo2, chosen_value(stage, Predicts::HrPeak, person)?)));
    match both {
        Err(why) => Outcome::absent(id, at, method, why).in_unit(unit),
        Ok((vo2, hr)) => {
            let value = vo2.value / hr.value;
            let mut outcome = Outcome::quantity(id, at, method, unit, value);
            outcome.recording = limits(Some(O2_PULSE_SHARE * value), None);
            outcome.doubts.push(Note::new("limit-by-convention-o2-pulse"));
            if beta_blocked(stage) {
                outcome.doubts.push(Note::new("o2-pulse-looks-high-on-beta-blocker"));
            }
            outcome.doubts.extend(vo2.doubts.into_iter().filter(concerns_fit));
            outcome.doubts.extend(hr.doubts.into_iter().filter(concerns_fit));
            outcome
        }
    }
}

fn concerns_fit(note: &Note) -> bool {
    !matches!(note.code, "limit-by-convention" | "no-limit-published")
}

/// Peak work rate that goes with the predicted peak V̇O₂ on this ramp:
/// (V̇O₂ − unloaded V̇O₂)/gain + rate·τ, with the parameters of the overlay.
fn work_rate(stage: &Stage<'_>, person: &Person, another_chosen: bool) -> Option<Outcome> {
    let predicts = Predicts::WorkRate;
    let vo2_set = &stage.settings.predicted.vo2;
    let method = format!("{vo2_set}-on-this-ramp");
    let value = (|| {
        if person.mode == Some(Mode::Treadmill) {
            return Err(Note::new("work-rate-not-on-treadmill"));
        }
        let vo2 = chosen_value(stage, Predicts::Vo2Peak, person)?.value;
        let mass = person.mass_kg.ok_or_else(|| Note::missing_fact("mass"))?;
        let rate = stage.ramp_rate().ok_or_else(|| stage.no_ramp())?;
        let overlay = &stage.settings.overlay;
        let watts = (vo2 - overlay.unloaded_vo2(mass)) / overlay.gain + rate * overlay.tau_s / 60.0;
        if watts > 0.0 { Ok(watts) } else { Err(Note::new("prediction-implausible-work-rate")) }
    })();
    if another_chosen && value.is_err() {
        return None;
    }
    let (id, at, unit) = (predicts.predicted_id(), At::Peak, Unit::Watt);
    let mut outcome = match value {
        Ok(watts) => Outcome::quantity(id, at, method, unit, watts)
            .doubting(Note::new("from-predicted-vo2"))
            .doubting(Note::new("no-limit-published-work-rate")),
        Err(why) => Outcome::absent(id, at, method, why).in_unit(unit),
    };
    outcome.primary = !another_chosen;
    Some(outcome)
}
