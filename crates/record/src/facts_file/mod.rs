//! The facts file `rampcrest-facts/1`: reading, writing, and single facts by their path.

mod check;
mod codes;
mod path;
mod to_engine;
mod types;

pub use codes::{
    BorgScale, Device, DiagnosisCode, EventKind, HbTime, HbUnit, Indication, Mode, OperationKind,
    ProtocolKind, RecoveryMode, Rhythm, Sex, StopKind,
};
pub use types::{
    BorgScore, Diagnosis, Drug, Ecg, Event, FactsFile, FactsSchema, Hb, Phases, Protocol, Subject,
    Test, Urgent,
};

use analysis::decisions::PhaseStarts;
use analysis::facts::Facts;

use crate::identity::Identity;
use crate::json::{self, JsonError};
use crate::problem::Problem;

/// The committed JSON Schema of the format.
pub const SCHEMA: &str = include_str!("../../../../assets/schemas/facts.schema.json");

/// Where a fact comes from.
#[derive(
    Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, serde::Serialize, serde::Deserialize,
)]
#[serde(rename_all = "kebab-case")]
pub enum Source {
    /// A file: the facts file or the head of the table.
    File,
    /// The reader.
    Reader,
}

impl FactsFile {
    /// Reads a facts file.
    ///
    /// # Errors
    /// Not JSON, a key twice, an unknown field, code or unit, a number out of its range; the
    /// problem's place is the path.
    pub fn read(text: &str) -> Result<Self, Problem> {
        let value: serde_json::Value =
            json::read(text.trim_start_matches('\u{feff}')).map_err(problem)?;
        if value.get("schema").is_none() {
            return Err(problem(JsonError {
                path: "schema".into(),
                what: "the field is missing; it says “rampcrest-facts/1”".into(),
            }));
        }
        Self::from_value(value)
    }

    /// Reads parsed JSON with the same strictness.
    ///
    /// # Errors
    /// As [`FactsFile::read`].
    pub fn from_value(value: serde_json::Value) -> Result<Self, Problem> {
        let file: Self = json::from_value(value).map_err(problem)?;
        check::check(&file).map_err(|(path, what)| problem(JsonError { path, what }))?;
        Ok(file)
    }

    /// As JSON; what is not stated is absent, the order of fields is that of the format.
    #[must_use]
    pub fn to_value(&self) -> serde_json::Value {
        serde_json::to_value(self).unwrap_or_default()
    }

    /// Writes the facts file.
    #[must_use]
    pub fn write(&self) -> String {
        let mut text = serde_json::to_string_pretty(self).unwrap_or_default();
        text.push('\n');
        text
    }

    /// What the engine reads, the identity it must not see, and the reader's boundaries.
    #[must_use]
    pub fn to_analysis(&self) -> (Facts, Identity, PhaseStarts) {
        (to_engine::facts(self), self.identity.clone(), to_engine::phases(self))
    }
}

fn problem(error: JsonError) -> Problem {
    let place = if error.path.is_empty() { "the facts".to_owned() } else { error.path };
    Problem::new(
        "facts-invalid",
        place,
        format!("{}.", error.what),
        "Correct this field; the closed codes and units are those of rampcrest-facts/1.",
    )
}

#[cfg(test)]
mod tests;
