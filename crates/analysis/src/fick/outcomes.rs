//! Outcomes of the Fick reasoning, each under the name of its assumption.

use super::bound::spo2_error;
use super::detail::{FickDetail, Model, Ranged};
use super::{deficit_at_peak, own_rate_at_peak, spo2_usable};
use crate::quantity::Quantity;
use crate::results::{At, Interval, Kind, Note, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Everything, absent ones with their reason.
pub(crate) fn all(stage: &Stage<'_>, detail: &FickDetail) -> Vec<Outcome> {
    let mut outcomes = vec![forward_bound(stage, detail), arterial(stage, detail)];
    outcomes.extend(changes(stage, detail));
    outcomes.push(rate(stage));
    outcomes.extend(own_rate(stage));
    outcomes.push(content_share(stage));
    outcomes.push(shunt(stage, detail));
    outcomes
}

fn withheld(detail: &FickDetail) -> Option<Note> {
    detail.withheld.first().cloned()
}

fn forward_bound(stage: &Stage<'_>, detail: &FickDetail) -> Outcome {
    let (id, method, unit) = ("fick-forward-sv-bound", "cautious-inputs", Unit::Millilitre);
    let reason = withheld(detail).or_else(|| detail.no_bound.clone());
    match (&detail.bound, reason) {
        (Some(bound), None) => {
            let outcome = Outcome::quantity(id, At::Peak, method, unit, bound.stroke_volume);
            let outcome = match stage.peak_window() {
                Some(window) => outcome.based_on(window, stage.breaths_in(window)),
                None => outcome,
            };
            bound.assumptions.iter().cloned().fold(outcome, Outcome::doubting)
        }
        (_, reason) => {
            let reason = reason.unwrap_or_else(|| stage.no_ramp());
            Outcome::absent(id, At::Peak, method, reason).in_unit(unit)
        }
    }
}

fn arterial(stage: &Stage<'_>, detail: &FickDetail) -> Outcome {
    let (id, method, unit) = ("fick-arterial-content", "hb-and-saturation", Unit::MlPerDl);
    let absent = |reason| Outcome::absent(id, At::Peak, method, reason).in_unit(unit);
    if let Some(reason) = withheld(detail) {
        return absent(reason);
    }
    if !detail.hb_stated {
        return absent(Note::missing_fact("hb"));
    }
    match detail.arterial_content {
        Some(band) => {
            let outcome = Outcome::quantity(id, At::Peak, method, unit, band.low);
            if spo2_usable(stage) {
                outcome
            } else {
                outcome.doubting(Note::new("saturation-assumed"))
            }
        }
        None => absent(stage.no_ramp()),
    }
}

/// Changes of stroke volume and extraction between the two points: A1 is the primary row only
/// because one must be; the rows are read together.
fn changes(stage: &Stage<'_>, detail: &FickDetail) -> Vec<Outcome> {
    let unit = Unit::Percent;
    let ids = ["fick-sv-change", "fick-extraction-change"];
    let Some(table) = &detail.table else {
        let course = stage.results.course.as_ref().and_then(|c| c.withheld.first().cloned());
        let reason = withheld(detail)
            .or(course)
            .or_else(|| reason_of(stage, "o2-pulse-course"))
            .unwrap_or_else(|| stage.no_ramp());
        return ids
            .map(|id| Outcome::absent(id, At::Ramp, "a1", reason.clone()).in_unit(unit))
            .to_vec();
    };
    let mut outcomes = Vec::new();
    for row in &table.rows {
        for (id, value) in ids.iter().zip([row.stroke_volume, row.content]) {
            let method = match row.model {
                Model::A1 => "a1",
                Model::A2 => "a2",
                Model::A3 => "a3",
                Model::B => "b",
            };
            let outcome = ranged(id, At::Ramp, method, unit, value)
                .based_on(table.between_s, stage.breaths_in(table.between_s));
            let outcome = if row.stroke_volume_assumed && *id == "fick-sv-change" {
                outcome.doubting(Note::new("assumed-not-derived"))
            } else {
                outcome
            };
            outcomes.push(if row.model == Model::A1 { outcome } else { outcome.alternative() });
        }
    }
    outcomes
}

fn ranged(id: &'static str, at: At, method: &'static str, unit: Unit, value: Ranged) -> Outcome {
    Outcome::quantity(id, at, method, unit, value.value)
        .recorded_within(Some(value.interval))
        .repeated_within(None)
}

fn reason_of(stage: &Stage<'_>, id: &str) -> Option<Note> {
    stage.results.primary(id, At::Ramp).and_then(|o| o.reason.clone())
}

fn rate(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("fick-hr-deficit", "rest-to-predicted-peak", Unit::PerMin);
    match deficit_at_peak(stage) {
        Some(deficit) => ranged(id, At::Peak, method, unit, deficit),
        None => {
            let reason = stage
                .missing(&[Quantity::Vo2, Quantity::Hr])
                .unwrap_or_else(|| Note::new("no-predicted-rate-line"));
            Outcome::absent(id, At::Peak, method, reason).in_unit(unit)
        }
    }
}

/// Share of the rate and the O₂ pulse at the rate of the own earlier test.
fn own_rate(stage: &Stage<'_>) -> [Outcome; 2] {
    let method = "own-earlier-test";
    let ids = [("fick-rate-share", Unit::Percent), ("fick-pulse-at-own-rate", Unit::MlPerBeat)];
    match own_rate_at_peak(stage) {
        Err(reason) => {
            ids.map(|(id, u)| Outcome::absent(id, At::Peak, method, reason.clone()).in_unit(u))
        }
        Ok(own) => [
            ranged(ids[0].0, At::Peak, method, ids[0].1, own.share),
            ranged(ids[1].0, At::Peak, method, ids[1].1, own.pulse),
        ],
    }
}

/// Share of the O₂ pulse that the fall of saturation alone explains, %: from rest to the last 30 s
/// of the increments, which may lie after the window of peak V̇O₂.
fn content_share(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("fick-content-share", "ln-saturation", Unit::Percent);
    let absent = |reason| Outcome::absent(id, At::Ramp, method, reason).in_unit(unit);
    if !spo2_usable(stage) {
        let reason = stage
            .missing(&[Quantity::Spo2])
            .filter(|_| stage.results.number("spo2", At::Peak).is_none());
        return absent(reason.unwrap_or_else(|| Note::new("spo2-not-confirmed")));
    }
    let number = |at| stage.results.number("spo2", at);
    let first = number(At::Rest).or_else(|| number(At::WarmUp));
    let Some((first, last)) = first.zip(last_saturation(stage)) else {
        return absent(Note::new("spo2-not-at-both"));
    };
    if first <= 0.0 || last <= 0.0 {
        return absent(Note::new("spo2-not-at-both"));
    }
    // The stated error of an oximeter is read as its 90 % interval.
    let (a, b) = (spo2_error(first) / first, spo2_error(last) / last);
    let (ln, half) = (libm::log(last / first), (a * a + b * b).sqrt());
    let percent = |x: f64| 100.0 * libm::expm1(x);
    Outcome::quantity(id, At::Ramp, method, unit, percent(ln))
        .recorded_within(Some(Interval { low: percent(ln - half), high: percent(ln + half) }))
        .repeated_within(None)
}

/// SpO₂ over the last 30 s of the increments, else at peak.
fn last_saturation(stage: &Stage<'_>) -> Option<f64> {
    let end = stage.results.phases.ramp()?.1;
    let last = stage.window_mean(Quantity::Spo2, (end - 30.0, end));
    last.or_else(|| stage.results.number("spo2", At::Peak))
}

fn shunt(stage: &Stage<'_>, detail: &FickDetail) -> Outcome {
    let (id, method) = ("fick-shunt-signature", "simultaneous-step");
    let needed = [Quantity::Petco2, Quantity::Peto2, Quantity::Vco2, Quantity::Vo2];
    if let Some(reason) = stage.missing(&needed) {
        return Outcome::absent(id, At::Ramp, method, reason).of_kind(Kind::Reading);
    }
    if stage.results.phases.ramp().is_none() {
        return Outcome::absent(id, At::Ramp, method, stage.no_ramp()).of_kind(Kind::Reading);
    }
    let Some(step) = detail.shunt else {
        return Outcome::reading(id, At::Ramp, method, "absent");
    };
    // The gas step alone is also what voluntary or pain hyperventilation and a leak look like.
    let (word, doubt) = match step.spo2 {
        Some(change) if change <= -2.0 => ("present", "shunt-published-in-pulmonary-hypertension"),
        Some(_) => ("indeterminate", "shunt-without-desaturation"),
        None => ("indeterminate", "spo2-not-confirmed"),
    };
    Outcome::reading(id, At::Ramp, method, word)
        .doubting(Note::new(doubt))
        .based_on((step.t_s - 40.0, step.t_s + 75.0), 0)
}
