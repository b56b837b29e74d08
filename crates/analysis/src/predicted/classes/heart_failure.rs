//! What the lens of heart failure shows beside its classes: the criteria for transplantation, and
//! oscillatory breathing and PETCO₂ as facts of the 2012 scientific statement.

use super::{bands, outcome, submaximal};
use crate::facts::{Indication, Sex};
use crate::note::{Arg, Note};
use crate::predicted::outcomes::beta_blocked;
use crate::results::{At, Kind, Outcome};
use crate::stage::Stage;

/// Guazzi et al. 2012, EACPR/AHA scientific statement (limits from memory).
const STATEMENT: &str = "Guazzi M et al. Circulation 2012;126:2261, from memory";
/// PETCO₂ at rest from which it counts as kept, mmHg, and its least rise in exercise.
const PETCO2_REST: f64 = 33.0;
const PETCO2_RISE: f64 = 3.0;
/// Above this RER the criteria call a test maximal.
const MAXIMAL_RER: f64 = 1.05;
/// Below this age, and in women, the criteria add per cent of predicted.
const YOUNG: f64 = 50.0;
/// Above this body mass index, kg/m², they ask for V̇O₂ per kg of lean mass.
const OBESE: f64 = 30.0;

/// Everything that heart failure adds to its classes.
pub(super) fn derive(stage: &Stage<'_>, indication: Indication) -> Vec<Outcome> {
    if indication != Indication::HeartFailure {
        return Vec::new();
    }
    let mut all = transplant(stage);
    all.push(oscillation(stage));
    all.push(end_tidal(stage));
    all
}

/// ISHLT 2016: at most 14 mL/kg/min, 12 on a beta-blocker; below 50 years and in women also at most
/// 50 % of predicted; with RER below 1.05 a slope above 35 may be used; never V̇O₂ alone.
fn transplant(stage: &Stage<'_>) -> Vec<Outcome> {
    let subject = &stage.facts.subject;
    let drug = &stage.facts.test.rate_slowing_drug;
    let class = if beta_blocked(stage) { &bands::ISHLT_BLOCKED } else { &bands::ISHLT };
    let mut vo2 = outcome(stage, class);
    let rer = stage.results.number("rer-peak", At::Peak);
    if vo2.value.is_some() {
        let threshold = stage.results.number("vt1-vo2", At::Vt1).is_some();
        let size = subject.mass_kg.zip(subject.height_cm);
        let obese = size.is_some_and(|(kg, cm)| kg / (0.01 * cm * 0.01 * cm) > OBESE);
        let doubts = [
            (drug.taken.is_none(), "class-drug-not-stated"),
            (rer.is_none_or(|rer| rer <= MAXIMAL_RER) || !threshold, "class-ishlt-not-maximal"),
            (obese, "class-ishlt-lean-mass"),
        ];
        vo2.doubts.extend(doubts.into_iter().filter(|d| d.0).map(|d| Note::new(d.1)));
    }
    let mut all = vec![vo2];
    let young = subject.age_years.is_some_and(|age| age < YOUNG);
    if young || subject.sex == Some(Sex::Female) {
        all.push(outcome(stage, &bands::ISHLT_PERCENT));
    }
    if rer.is_some_and(|rer| rer < MAXIMAL_RER) || submaximal(stage) {
        all.push(outcome(stage, &bands::ISHLT_SLOPE));
    }
    all
}

fn fact(
    id: &'static str,
    at: At,
    method: &'static str,
    word: Result<&'static str, Note>,
) -> Outcome {
    match word {
        Err(why) => Outcome::absent(id, at, method, why).of_kind(Kind::Class),
        Ok(word) => {
            let mut outcome = Outcome::reading(id, at, method, word);
            outcome.kind = Kind::Class;
            outcome
        }
    }
}

fn sourced(mut outcome: Outcome, deciding: &'static str, at: At) -> Outcome {
    if outcome.value.is_some() {
        outcome.doubts.push(
            Note::new("class-decided-by")
                .with("value", Arg::Outcome(deciding, at))
                .with("source", Arg::Name(STATEMENT.into())),
        );
        outcome.doubts.push(Note::new("class-local-pathway-decides"));
    }
    outcome
}

/// Whether breathing oscillated.
fn oscillation(stage: &Stage<'_>) -> Outcome {
    let deciding = "oscillatory-ventilation";
    let found = stage.results.primary(deciding, At::Ramp);
    let word = match found.and_then(Outcome::word) {
        Some("present") => Ok("oscillation-present"),
        Some(_) => Ok("oscillation-absent"),
        None => {
            Err(found.and_then(|o| o.reason.clone()).unwrap_or_else(|| Note::new("not-derived")))
        }
    };
    sourced(fact("class-hf-oscillation", At::Ramp, "guazzi-2012", word), deciding, At::Ramp)
}

/// PETCO₂ at rest and its rise to VT1, or to peak where there is no VT1.
fn end_tidal(stage: &Stage<'_>) -> Outcome {
    let of = |at| stage.results.number("petco2", at);
    let exercise = of(At::Vt1).or_else(|| of(At::Peak));
    let word = match (of(At::Rest), exercise) {
        (Some(rest), Some(exercise)) => {
            Ok(match (rest >= PETCO2_REST, exercise - rest >= PETCO2_RISE) {
                (true, true) => "petco2-kept-and-rising",
                (false, false) => "petco2-low-and-not-rising",
                _ => "petco2-between",
            })
        }
        _ => Err(stage
            .missing(&[crate::quantity::Quantity::Petco2])
            .unwrap_or_else(|| Note::new("not-derived"))),
    };
    sourced(fact("class-hf-petco2", At::Ramp, "guazzi-2012", word), "petco2", At::Rest)
}
