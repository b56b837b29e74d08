//! Outcomes as shown: rounded once, with both intervals, reason and doubts in words.

use analysis::results::{At, Outcome, Results};
use record::presentation::{values, wording};

/// An outcome as strings.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Shown {
    /// `ID@AT`.
    pub key: String,
    /// Its name.
    pub label: String,
    /// The value, or the dash of a withheld one.
    pub value: String,
    /// Its unit.
    pub unit: String,
    /// *This recording*, in brackets.
    pub recording: Option<String>,
    /// *If repeated*, in brackets.
    pub repeat: Option<String>,
    /// Why there is no value.
    pub reason: Option<String>,
    /// Doubts in words.
    pub doubts: Vec<String>,
}

impl Shown {
    /// Value, unit, both intervals and the reason in one line, as assistive technology reads it.
    #[must_use]
    pub fn spoken(&self) -> String {
        let mut parts = vec![format!("{} {}", self.value, self.unit).trim().to_owned()];
        let said = |code, interval: &String| wording::with(code, &[("interval", interval.clone())]);
        parts.extend(self.recording.iter().map(|i| said("spoken-recording", i)));
        parts.extend(self.repeat.iter().map(|i| said("spoken-repeat", i)));
        parts.extend(self.reason.clone());
        parts.join(", ")
    }
}

/// The primary outcome (id, at) as shown; `None` where the engine gives none.
#[must_use]
pub fn primary(results: &Results, id: &str, at: At) -> Option<Shown> {
    results.primary(id, at).map(|o| outcome(o, results))
}

/// An outcome as shown.
#[must_use]
pub fn outcome(o: &Outcome, results: &Results) -> Shown {
    let shown = values::shown(o);
    Shown {
        key: shown.key,
        label: shown.label,
        value: shown.value,
        unit: shown.unit,
        recording: shown.recording,
        repeat: shown.repeat,
        reason: o.reason.as_ref().map(|n| wording::text(n, results)),
        doubts: o.doubts.iter().map(|n| wording::text(n, results)).collect(),
    }
}
