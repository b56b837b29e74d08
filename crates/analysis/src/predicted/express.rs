//! A measured value against what is predicted: per cent, standard score, and one reading over all
//! sets in range.

use super::candidates::{Candidate, candidates};
use super::outcomes::{O2_PULSE_SHARE, beta_blocked, chosen_value};
use super::person;
use super::reading::{self, Limit};
use super::sets::{Direction, Person, Predicts};
use super::size;
use crate::facts::Rhythm;
use crate::note::Note;
use crate::results::{At, Interval, Kind, Outcome, Text};
use crate::stage::Stage;
use crate::unit::Unit;

/// Ids of one comparison.
struct Ids {
    predicts: Predicts,
    percent: Option<&'static str>,
    z: Option<&'static str>,
    reading: Option<&'static str>,
    /// Withheld where effort was submaximal without a demonstrated limit.
    needs_effort: bool,
}

macro_rules! table {
    ($($p:ident $percent:expr, $z:expr, $reading:expr, $effort:literal;)*) => {
        const TABLE: &[Ids] = &[$(Ids {
            predicts: Predicts::$p, percent: $percent, z: $z, reading: $reading,
            needs_effort: $effort,
        }),*];
    };
}

table! {
    Vo2Peak Some("vo2-peak-percent"), Some("vo2-peak-z"), Some("vo2-peak-against-predicted"), true;
    HrPeak Some("hr-peak-percent"), Some("hr-peak-z"), None, true;
    O2Pulse Some("o2-pulse-percent"), Some("o2-pulse-z"), Some("o2-pulse-against-predicted"), true;
    WorkRate Some("work-rate-percent"), Some("work-rate-z"), Some("work-rate-against-predicted"), true;
    VeVco2Nadir Some("ve-vco2-nadir-percent"), None, Some("ve-vco2-nadir-against-predicted"), false;
    VeVco2Slope Some("ve-vco2-slope-to-vt2-percent"), None, None, false;
    Oues Some("oues-percent"), None, None, false;
    SysBp None, Some("sys-bp-z"), None, true;
    ChronotropicIndex None, None, Some("chronotropic-index-against-predicted"), true;
    HrVo2Slope Some("dhr-dvo2-percent"), Some("dhr-dvo2-z"), Some("dhr-dvo2-against-predicted"), false;
    Vo2WrSlope Some("dvo2-dwr-percent"), Some("dvo2-dwr-z"), Some("dvo2-dwr-against-predicted"), false;
}

/// Derives every comparison; effort must be known.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let (person, _) = person::of(stage);
    let mut outcomes = Vec::with_capacity(48);
    for ids in TABLE {
        compare(stage, ids, &person, &mut outcomes);
    }
    outcomes.extend(threshold(stage, &person));
    outcomes.extend(size::derive(stage, &person));
    for outcome in outcomes {
        stage.push(outcome);
    }
}

/// Whether rhythm or a drug alters the rate, so that its prediction does not hold.
fn rate_altered(stage: &Stage<'_>) -> bool {
    stage.facts.test.rhythm.is_some_and(|r| r != Rhythm::Sinus) || beta_blocked(stage)
}

/// Whether effort forbids to grade values at peak.
pub(super) fn submaximal(stage: &Stage<'_>) -> bool {
    let effort = stage.results.primary("effort", At::Test).and_then(Outcome::word);
    effort == Some("submaximal-without-limit")
}

fn compare(stage: &Stage<'_>, ids: &Ids, person: &Person, out: &mut Vec<Outcome>) {
    let predicts = ids.predicts;
    let at = predicts.at();
    let Some(measured) = predicts.measured_id().and_then(|id| stage.results.primary(id, at)) else {
        return;
    };
    let list = candidates(stage.settings, predicts, person);
    let quotient = derived(stage, predicts);
    if list.is_empty() && quotient.is_none() {
        return;
    }
    let Some(value) = measured.number() else {
        let why = measured.reason.clone().unwrap_or_else(|| Note::new("not-derived"));
        let method = measured.method.clone();
        out.extend(
            ids.percent.map(|id| {
                Outcome::absent(id, at, method.clone(), why.clone()).in_unit(Unit::Percent)
            }),
        );
        return;
    };
    if let Some((method, predicted)) = &quotient {
        out.extend(ids.percent.map(|id| {
            let scale = |x: f64| 100.0 * x / predicted;
            doubted(stage, predicts, ratio(id, at, method.clone(), measured, scale))
        }));
    }
    for candidate in &list {
        out.extend(percent(stage, ids, measured, candidate));
        out.extend(score(ids, measured, value, candidate));
    }
    primary_once(out, ids.percent, at);
    primary_once(out, ids.z, at);
    if let Some(id) = ids.reading {
        let limits = limits_of(&list, quotient.as_ref(), predicts);
        let effort = ids.needs_effort && submaximal(stage);
        let mut reading = reading::of(id, at, value, predicts.direction(), &limits, effort);
        let rate_holds = !rate_altered(stage);
        if predicts == Predicts::ChronotropicIndex && !rate_holds {
            let why = Note::new("rate-prediction-does-not-hold");
            reading = Outcome::absent(id, at, reading.method, why).of_kind(Kind::Reading);
        }
        if reading.word().is_some() {
            if predicts == Predicts::O2Pulse && !rate_holds {
                reading.doubts.push(Note::new("rate-altered-pulse"));
            }
            reading.doubts.extend(size::doubts(person, predicts));
        }
        if reading.word() == Some("below-limit") && predicts == Predicts::Vo2Peak {
            out.extend(severity(stage, person, value));
        }
        out.push(reading);
    }
}

/// Prediction derived from the chosen family instead of a set's own equation.
fn derived(stage: &Stage<'_>, predicts: Predicts) -> Option<(Text, f64)> {
    if !matches!(predicts, Predicts::O2Pulse | Predicts::WorkRate) {
        return None;
    }
    let own = stage.results.primary(predicts.predicted_id(), predicts.at())?;
    let derived = own.method.contains('/') || own.method.ends_with("-on-this-ramp");
    own.number().filter(|_| derived).map(|value| (own.method.clone(), value))
}

fn ratio(
    id: &'static str,
    at: At,
    method: Text,
    measured: &Outcome,
    scale: impl Fn(f64) -> f64,
) -> Outcome {
    let interval =
        |i: Option<Interval>| i.map(|i| Interval { low: scale(i.low), high: scale(i.high) });
    let value = measured.number().map_or(f64::NAN, &scale);
    let mut outcome = Outcome::quantity(id, at, method, Unit::Percent, value)
        .recorded_within(interval(measured.recording));
    outcome.repeat = interval(measured.repeat);
    outcome.basis = measured.basis.clone();
    outcome
}

fn percent(
    stage: &Stage<'_>,
    ids: &Ids,
    measured: &Outcome,
    candidate: &Candidate<'_>,
) -> Option<Outcome> {
    let id = ids.percent?;
    let method = Text::from(candidate.set.id.clone());
    let mut outcome = match &candidate.result {
        // Sets that do not hold for this person are listed with the predictions, not here again.
        Err(_) if !candidate.chosen => return None,
        Err(why) => {
            Outcome::absent(id, ids.predicts.at(), method, why.clone()).in_unit(Unit::Percent)
        }
        Ok(prediction) => {
            let scale = |x: f64| 100.0 * x / prediction.value;
            let outcome = ratio(id, ids.predicts.at(), method, measured, scale);
            let mut outcome = doubted(stage, ids.predicts, outcome);
            if !candidate.in_range() {
                outcome.doubts.push(Note::new("prediction-not-in-range"));
            }
            if candidate.information_only {
                outcome.doubts.push(Note::new("information-only"));
            }
            outcome
        }
    };
    outcome.primary = candidate.chosen;
    Some(outcome)
}

fn score(ids: &Ids, measured: &Outcome, value: f64, candidate: &Candidate<'_>) -> Option<Outcome> {
    let id = ids.z?;
    let prediction = candidate.result.as_ref().ok()?;
    let see = prediction.see?;
    let z = |x: f64| (x - prediction.value) / see;
    let interval = |i: Option<Interval>| i.map(|i| Interval { low: z(i.low), high: z(i.high) });
    let method = Text::from(candidate.set.id.clone());
    let mut outcome = Outcome::quantity(id, ids.predicts.at(), method, Unit::One, z(value))
        .recorded_within(interval(measured.recording));
    outcome.repeat = interval(measured.repeat);
    outcome.primary = candidate.chosen;
    Some(outcome)
}

/// Exactly one primary: where the chosen set gives none, the first of the others is not promoted;
/// the absence is said instead.
fn primary_once(out: &mut Vec<Outcome>, id: Option<&'static str>, at: At) {
    let Some(id) = id else { return };
    let mut found = false;
    let mut any = false;
    for outcome in out.iter_mut().filter(|o| o.id == id) {
        any = true;
        outcome.primary &= !found;
        found |= outcome.primary;
    }
    if any && !found {
        let unit = if id.ends_with("-z") { Unit::One } else { Unit::Percent };
        let why = Note::new("no-scatter-published-with-chosen-set");
        out.push(Outcome::absent(id, at, "chosen-set", why).in_unit(unit));
    }
}

fn doubted(stage: &Stage<'_>, predicts: Predicts, mut outcome: Outcome) -> Outcome {
    if rate_altered(stage) {
        let code = match predicts {
            Predicts::HrPeak => Some("rate-prediction-does-not-hold"),
            Predicts::O2Pulse => Some("rate-altered-pulse"),
            _ => None,
        };
        outcome.doubts.extend(code.map(Note::new));
    }
    if predicts == Predicts::Vo2Peak && outcome.number().is_some_and(|p| p > 120.0) {
        outcome.doubts.push(Note::new("consider-athletic-norms"));
    }
    if predicts == Predicts::VeVco2Nadir && outcome.value.is_some() {
        outcome.doubts.push(size::dead_space_bias(stage));
    }
    outcome
}

/// The limits that vote: sets with a published or conventional limit; those in range, or, when
/// none is, all that the reader let pass.
fn limits_of(
    list: &[Candidate<'_>],
    quotient: Option<&(Text, f64)>,
    predicts: Predicts,
) -> Vec<Limit> {
    let of = |c: &Candidate<'_>| -> Option<Limit> {
        let prediction = c.result.as_ref().ok().filter(|_| !c.information_only)?;
        prediction.low.or(prediction.high)?;
        Some(Limit {
            name: c.set.name.clone(),
            prediction: prediction.value,
            low: prediction.low,
            high: prediction.high,
            see: prediction.see,
            chosen: c.chosen,
        })
    };
    let mut limits: Vec<Limit> = list.iter().filter(|c| c.in_range()).filter_map(of).collect();
    if let Some((method, value)) = quotient.filter(|_| predicts == Predicts::O2Pulse) {
        limits.insert(
            0,
            Limit {
                name: method.to_string(),
                prediction: *value,
                low: Some(O2_PULSE_SHARE * value),
                high: None,
                see: None,
                chosen: true,
            },
        );
    }
    if limits.is_empty() { list.iter().filter_map(of).collect() } else { limits }
}

/// Published bands of per cent predicted, only where the value is low by every set.
fn severity(stage: &Stage<'_>, person: &Person, value: f64) -> Option<Outcome> {
    let predicted = chosen_value(stage, Predicts::Vo2Peak, person).ok()?;
    let percent = 100.0 * value / predicted.value;
    let word = match percent {
        p if p < 50.0 => "severe",
        p if p < 70.0 => "moderate",
        p if p < 85.0 => "mild",
        _ => "none",
    };
    let method = "percent-of-predicted-85-70-50";
    Some(Outcome::reading("vo2-peak-severity", At::Peak, method, word))
}

/// V̇O₂ at VT1 as a share of predicted peak V̇O₂: from 40 % within limits, below 33 % low, between
/// them borderline (40 %: Hansen 1984; 33 %: CanCOLD). Valid whatever the effort.
fn threshold(stage: &Stage<'_>, person: &Person) -> Vec<Outcome> {
    let (id, word_id) = ("vt1-vo2-percent-predicted", "vt1-vo2-against-predicted");
    let Some(measured) = stage.results.primary("vt1-vo2", At::Vt1) else { return Vec::new() };
    let method = Text::from(stage.settings.predicted.vo2.clone());
    let predicted = chosen_value(stage, Predicts::Vo2Peak, person);
    let why = measured.reason.clone().or_else(|| predicted.as_ref().err().cloned());
    let (Ok(predicted), None) = (predicted, why.as_ref()) else {
        let why = why.unwrap_or_else(|| Note::new("not-derived"));
        return vec![Outcome::absent(id, At::Vt1, method, why).in_unit(Unit::Percent)];
    };
    let percent = ratio(id, At::Vt1, method, measured, |x| 100.0 * x / predicted.value);
    let word = match percent.number() {
        Some(p) if p < 33.0 => "below-limit",
        Some(p) if p < 40.0 => "borderline",
        _ => "within-limits",
    };
    let mut reading = Outcome::reading(word_id, At::Vt1, "40-and-33-percent", word);
    let doubtful = |cut: f64| percent.repeat.is_some_and(|i| i.low < cut && cut < i.high);
    if doubtful(40.0) || doubtful(33.0) {
        reading.doubts.push(Note::new("interval-crosses-limit"));
    }
    reading.doubts.push(Note::new("vt1-limits-disagree"));
    vec![percent, reading]
}

/// Sets that vote on `predicts`, and how many of them call `value` abnormal.
pub(crate) fn votes(stage: &Stage<'_>, predicts: Predicts, value: f64) -> (usize, usize) {
    let (person, _) = person::of(stage);
    let list = candidates(stage.settings, predicts, &person);
    let quotient = derived(stage, predicts);
    let limits = limits_of(&list, quotient.as_ref(), predicts);
    let beyond = |l: &&Limit| match predicts.direction() {
        Direction::High => l.is_exceeded_by(value),
        _ => l.is_undercut_by(value),
    };
    (limits.iter().filter(beyond).count(), limits.len())
}
