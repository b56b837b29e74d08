//! How a person lies against a set's ranges: in, near, out. Inputs are never clamped.

use super::evaluate::body_input;
use super::sets::{Beyond, Input, Person, PredictedSet, Range};
use crate::facts::Sex;
use crate::note::{Arg, Note};
use crate::unit::Unit;

/// How one input lies against its range.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Fit {
    /// In range.
    In,
    /// At most 5 years or 5 cm outside: shown, with a doubt.
    Near,
    /// Outside a range that only asks for a doubt.
    Flagged,
    /// Further outside: withheld unless the reader overrides.
    Out,
}

/// One input against one range.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct InputFit {
    /// Which range.
    pub range: Range,
    /// The person's value.
    pub value: f64,
    /// How it lies.
    pub fit: Fit,
}

/// Word of the catalogue and unit of an input that has ranges.
#[must_use]
pub fn word_and_unit(input: Input) -> (&'static str, Unit) {
    match input {
        Input::AgeYears | Input::AgeClass => ("age-years", Unit::One),
        Input::HeightCm | Input::HeightM | Input::HeightIn => ("height", Unit::Centimetre),
        Input::MassKg | Input::MassLb => ("mass", Unit::Kilogram),
        _ => ("bmi", Unit::One),
    }
}

/// How far outside still counts as near: 5 years, 5 cm; size has no such margin.
fn margin(input: Input) -> f64 {
    match input {
        Input::AgeYears | Input::HeightCm => 5.0,
        _ => 0.0,
    }
}

/// Each input of the set's ranges against them.
pub(super) fn fits(set: &PredictedSet, person: &Person, sex: Sex) -> Result<Vec<InputFit>, Note> {
    let mut fits = Vec::with_capacity(set.ranges.len());
    for range in set.ranges.iter().filter(|r| r.sex.is_none_or(|s| s == sex)) {
        let value = match (body_input(range.input, person), range.beyond) {
            (Ok(value), _) => value,
            // A range that only flags does not ask for a fact that the formula does not use.
            (Err(_), Beyond::Flag) => continue,
            (Err(why), Beyond::Withhold) => return Err(why),
        };
        let outside = (range.low - value).max(value - range.high);
        let fit = if outside <= 0.0 {
            Fit::In
        } else if range.beyond == Beyond::Flag {
            Fit::Flagged
        } else if outside <= margin(range.input) {
            Fit::Near
        } else {
            Fit::Out
        };
        fits.push(InputFit { range: *range, value, fit });
    }
    Ok(fits)
}

/// Doubts for what is near, flagged or overridden; the reason where an input is out of range.
pub(super) fn judge(
    set: &PredictedSet,
    fits: &[InputFit],
    overridden: bool,
    doubts: &mut Vec<Note>,
) -> Result<(), Note> {
    for fit in fits {
        let code = match fit.fit {
            Fit::In => continue,
            Fit::Near => "near-range",
            Fit::Flagged => "outside-usual-size",
            Fit::Out if overridden => "out-of-range-overridden",
            Fit::Out => return Err(note("out-of-range", set, fit)),
        };
        doubts.push(note(code, set, fit));
    }
    Ok(())
}

fn note(code: &'static str, set: &PredictedSet, fit: &InputFit) -> Note {
    let (word, unit) = word_and_unit(fit.range.input);
    Note::new(code)
        .with("set", Arg::Name(set.name.clone().into()))
        .with("input", Arg::Word(word))
        .with("value", Arg::Number(fit.value, unit))
        .with("low", Arg::Number(fit.range.low, unit))
        .with("high", Arg::Number(fit.range.high, unit))
}
