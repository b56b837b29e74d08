//! What a reader needs to choose a set: who was studied, how this person fits, what it would give.

use super::candidates::{candidates, provenance};
use super::evaluate::{Prediction, evaluate};
use super::sets::{Formula, Person, PredictedSet, Predicts, Provenance};
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

/// Whether the sets of peak V̇O₂ and peak HR come from different families, although that of V̇O₂
/// has an own HR.
#[must_use]
pub fn mixes_families(settings: &Settings) -> bool {
    family_hr(settings, &settings.predicted.vo2).is_some_and(|hr| hr != settings.predicted.hr)
}

/// The HR set that comes along when `vo2` is chosen: that of its family, as long as the sets that
/// stand now belong together too.
#[must_use]
pub fn hr_along(settings: &Settings, vo2: &str) -> Option<String> {
    let own = family_hr(settings, vo2)?;
    (!mixes_families(settings)).then(|| own.to_owned())
}

/// The HR set of the family to which the set `vo2` belongs.
fn family_hr<'a>(settings: &'a Settings, vo2: &str) -> Option<&'a str> {
    let family = &settings.sets.iter().find(|s| s.id == vo2)?.family;
    let found = |s: &&PredictedSet| s.family == *family && s.equation(Predicts::HrPeak).is_some();
    settings.sets.iter().find(found).map(|s| s.id.as_str())
}

/// The factor from FEV₁ to MVV of a set that has only that.
#[must_use]
pub fn mvv_factor(set: &PredictedSet) -> Option<f64> {
    let arm = set.equation(Predicts::Mvv)?.male.as_ref()?;
    match &arm.formula {
        Formula::Sum(terms) if terms.len() == 1 => Some(terms[0].times),
        _ => None,
    }
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
