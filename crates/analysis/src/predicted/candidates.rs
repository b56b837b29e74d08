//! Every set that predicts a quantity, evaluated for this person, the chosen one marked.

use super::evaluate::{Prediction, evaluate};
use super::sets::{Person, PredictedSet, Predicts, Provenance};
use super::validity::Fit;
use crate::note::{Arg, Note};
use crate::settings::{PredictedChoice, Settings};

/// One set for one quantity.
#[derive(Clone, Debug, PartialEq)]
pub struct Candidate<'a> {
    /// The set.
    pub set: &'a PredictedSet,
    /// Whether it stands on the page.
    pub chosen: bool,
    /// Shown beside the others, never graded.
    pub information_only: bool,
    /// The prediction, or why not.
    pub result: Result<Prediction, Note>,
}

impl Candidate<'_> {
    /// Whether every input lies in range or near it, without an override.
    #[must_use]
    pub fn in_range(&self) -> bool {
        self.result
            .as_ref()
            .is_ok_and(|p| p.fits.iter().all(|f| matches!(f.fit, Fit::In | Fit::Near)))
    }
}

/// Where the coefficients for this person come from: an equation may be confirmed for one sex only.
#[must_use]
pub fn provenance(set: &PredictedSet, predicts: Predicts, person: &Person) -> Provenance {
    let Some(equation) = set.equation(predicts) else { return Provenance::Unconfirmed };
    let arms = [&equation.male, &equation.female];
    let own = person.sex.map_or_else(
        || arms.iter().find_map(|a| a.as_ref()),
        |sex| equation.arm(sex).or_else(|| arms.iter().find_map(|a| a.as_ref())),
    );
    own.map_or(Provenance::Unconfirmed, |arm| arm.provenance)
}

/// The sets that predict `predicts`, in the order in which they were loaded, exactly one chosen if
/// there is any. A set whose coefficients are unconfirmed appears only when unlocked or chosen.
#[must_use]
pub fn candidates<'a>(
    settings: &'a Settings,
    predicts: Predicts,
    person: &Person,
) -> Vec<Candidate<'a>> {
    let choice = &settings.predicted;
    let mut all: Vec<Candidate<'a>> =
        settings.sets.iter().filter_map(|set| candidate(set, choice, predicts, person)).collect();
    let chosen = index_of_chosen(&all, choice, predicts);
    if let Some(chosen) = chosen {
        all[chosen].chosen = true;
    }
    all.retain(|c| c.chosen || !matches!(&c.result, Err(note) if note.code == "set-unconfirmed"));
    all
}

fn candidate<'a>(
    set: &'a PredictedSet,
    choice: &PredictedChoice,
    predicts: Predicts,
    person: &Person,
) -> Option<Candidate<'a>> {
    let equation = set.equation(predicts)?;
    let locked = provenance(set, predicts, person) == Provenance::Unconfirmed;
    let overridden = choice.overridden.contains(&set.id);
    let named = |code| Note::new(code).with("set", Arg::Name(set.name.clone().into()));
    let result = if locked && !choice.unconfirmed {
        Err(named("set-unconfirmed"))
    } else {
        evaluate(set, predicts, person, overridden).map(|mut prediction| {
            if locked {
                prediction.doubts.push(named("coefficients-unconfirmed"));
            }
            prediction
        })
    };
    let information_only = equation.information_only;
    Some(Candidate { set, chosen: false, information_only, result })
}

/// The reader's choice; without one, for work rate the set of V̇O₂ where it has one, otherwise the first set that holds for this person, else the first.
fn index_of_chosen(
    all: &[Candidate<'_>],
    choice: &PredictedChoice,
    predicts: Predicts,
) -> Option<usize> {
    let with_id = |id: &str| all.iter().position(|c| c.set.id == id);
    let own = choice.others.get(&predicts).and_then(|id| with_id(id));
    if let Some(own) = own.filter(|i| !all[*i].information_only) {
        return Some(own);
    }
    match predicts {
        Predicts::Vo2Peak => with_id(&choice.vo2),
        Predicts::HrPeak => with_id(&choice.hr),
        // The derived quotient stands there.
        Predicts::O2Pulse => None,
        // Without an equation of the chosen set the value derived from its V̇O₂ stands there.
        Predicts::WorkRate => with_id(&choice.vo2),
        _ => all
            .iter()
            .position(|c| c.result.is_ok() && c.in_range())
            .or_else(|| all.iter().position(|c| c.result.is_ok()))
            .or(if all.is_empty() { None } else { Some(0) }),
    }
}
