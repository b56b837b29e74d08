//! Outcomes as shown: rounded once, with both intervals.

use analysis::results::{At, Interval, Outcome, Results, Section, Value};

use crate::document::Status;

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

/// A statement as the sheet shows it.
#[derive(Clone, Debug, PartialEq)]
pub struct Finding {
    /// Id.
    pub id: String,
    /// Section.
    pub section: Section,
    /// What the reader did.
    pub status: Status,
    /// The text.
    pub text: String,
    /// Whether a value under it changed since it was taken up.
    pub stale: bool,
    /// Evidence for.
    pub supports: Vec<String>,
    /// Evidence against.
    pub contradicts: Vec<String>,
    /// Not measured, would matter.
    pub open: Vec<String>,
}

impl Finding {
    /// Whether the reader has decided on it.
    #[must_use]
    pub fn decided(&self) -> bool {
        self.status != Status::Draft && !self.stale
    }
}

/// The primary outcome (id, at) as shown; `None` where the engine gives none.
#[must_use]
pub fn primary(results: &Results, id: &str, at: At) -> Option<Shown> {
    results.primary(id, at).map(outcome)
}

/// An outcome as shown.
#[must_use]
pub fn outcome(o: &Outcome) -> Shown {
    let decimals = o.unit.map_or(0, decimals);
    let number = |v: f64| format!("{v:.decimals$}").replace('-', "−");
    let range = |i: Interval| format!("[{}, {}]", number(i.low), number(i.high));
    Shown {
        key: format!("{}@{}", o.id, o.at.code()),
        label: format!("{} {}", o.id.replace('-', " "), o.at.code()),
        value: match &o.value {
            Some(Value::Number(v)) => number(*v),
            Some(Value::Word(w)) => w.to_string(),
            None => "–".into(),
        },
        unit: o.unit.map_or(String::new(), |u| u.shown().to_owned()),
        recording: o.recording.map(range),
        repeat: o.repeat.map(range),
        reason: o.reason.as_ref().map(crate::words::note),
        doubts: o.doubts.iter().map(crate::words::note).collect(),
    }
}

fn decimals(unit: analysis::unit::Unit) -> usize {
    use analysis::unit::Unit as U;
    match unit {
        U::MlPerBeat | U::MlPerKgMin | U::PercentPerMin | U::MlPerMinPerWatt => 1,
        U::One | U::LPerMin => 2,
        _ => 0,
    }
}
