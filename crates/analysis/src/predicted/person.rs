//! The person and the ergometer as the equations need them.

use super::sets::Person;
use crate::facts::{Facts, Mode};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::recording::Recording;
use crate::stage::Stage;

/// The person of this test, with the doubt that stands where the ergometer was read from the file.
pub(super) fn of(stage: &Stage<'_>) -> (Person, Option<Note>) {
    from(stage.facts, stage.recording)
}

pub(super) fn from(facts: &Facts, recording: &Recording) -> (Person, Option<Note>) {
    let subject = &facts.subject;
    let stated = facts.test.mode;
    let mode = stated.or_else(|| from_columns(recording));
    let doubt = match (stated, mode) {
        (None, Some(Mode::Cycle)) => Some(Note::new("mode-read-from-load")),
        (None, Some(Mode::Treadmill)) => Some(Note::new("mode-read-from-belt")),
        _ => None,
    };
    let person = Person {
        age_years: subject.age_years,
        sex: subject.sex,
        height_cm: subject.height_cm,
        mass_kg: subject.mass_kg,
        fev1_l: subject.fev1_l,
        mode,
    };
    (person, doubt)
}

/// A belt with speed is a treadmill; a load in watts without one is a cycle.
fn from_columns(recording: &Recording) -> Option<Mode> {
    let has = |q| recording.has(q);
    if has(Quantity::Speed) || has(Quantity::Grade) {
        Some(Mode::Treadmill)
    } else {
        has(Quantity::WorkRate).then_some(Mode::Cycle)
    }
}
