//! What a reader needs to choose a set: who was studied, how this person fits, what it would give.

use super::candidates::{candidates, provenance};
use super::evaluate::{Prediction, evaluate};
use super::sets::{Person, PredictedSet, Predicts, Provenance};
use super::validity::{self, Fit, InputFit};
use crate::facts::{Facts, Sex};
use crate::note::Note;
use crate::recording::Recording;
use crate::settings::Settings;

/// One row of the chooser.
#[derive(Clone, Debug, PartialEq)]
pub struct Choice<'a> {
    /// The set, with citation, population, year and ranges.
    pub set: &'a PredictedSet,
    /// Whether it stands on the page.
    pub chosen: bool,
    /// Whether it is locked because its coefficients are unconfirmed.
    pub locked: bool,
    /// Whether the reader let its ranges pass.
    pub overridden: bool,
    /// How this person lies against each of its ranges.
    pub fits: Vec<InputFit>,
    /// The worst of them; `None` where a fact is missing or the set is for the other sex.
    pub fit: Option<Fit>,
    /// What it gives for this person, or why not.
    pub result: Result<Prediction, Note>,
}

/// The person of a test as the equations need it.
#[must_use]
pub fn person(facts: &Facts, recording: &Recording) -> Person {
    super::person::from(facts, recording).0
}

/// Every loaded set that predicts `predicts`, locked ones included, in the order of loading.
#[must_use]
pub fn choices<'a>(settings: &'a Settings, predicts: Predicts, person: &Person) -> Vec<Choice<'a>> {
    let listed = candidates(settings, predicts, person);
    let choice = &settings.predicted;
    settings
        .sets
        .iter()
        .filter(|set| set.equation(predicts).is_some())
        .map(|set| {
            let listed = listed.iter().find(|c| c.set.id == set.id);
            let locked = provenance(set, predicts, person) == Provenance::Unconfirmed;
            let overridden = choice.overridden.contains(&set.id);
            let sex = person.sex.unwrap_or(Sex::Female);
            let fits = validity::fits(set, person, sex).unwrap_or_default();
            let result = match listed {
                Some(candidate) => candidate.result.clone(),
                None => evaluate(set, predicts, person, overridden),
            };
            let known = set.ranges.is_empty() || !fits.is_empty();
            let for_sex = set
                .equation(predicts)
                .is_some_and(|e| person.sex.is_none_or(|sex| e.arm(sex).is_some()));
            let worst = fits.iter().map(|f| f.fit).max().unwrap_or(Fit::In);
            Choice {
                set,
                chosen: listed.is_some_and(|c| c.chosen),
                locked: locked && !choice.unconfirmed,
                overridden,
                fit: (known && for_sex).then_some(worst),
                fits,
                result,
            }
        })
        .collect()
}
