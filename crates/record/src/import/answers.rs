//! The reader's answers about one file, and a laboratory's answers kept for the next file.

use serde::{Deserialize, Serialize};

use super::issue;
use super::number::Decimal;
use super::recipe::Recipe;
use crate::problem::Problem;
use crate::provenance::{Decided, Reading};

/// Answers about the columns of one file.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Answers {
    columns: Vec<(String, Reading)>,
    /// The decimal sign, where the file leaves it open.
    pub decimal: Option<Decimal>,
}

impl Answers {
    /// No answer.
    #[must_use]
    pub fn none() -> Self {
        Self::default()
    }

    /// Adds an answer: `column` is a header as in the file or `#N`.
    pub fn set(&mut self, column: impl Into<String>, reading: Reading) {
        let column = column.into();
        self.columns.retain(|(c, _)| *c != column);
        self.columns.push((column, reading));
    }

    /// Adds an answer written `COLUMN=READING`, such as `RR=rr-interval ms`, `#3=leave-out` or
    /// `decimal=comma`.
    ///
    /// # Errors
    /// The text is no such answer.
    pub fn add(&mut self, text: &str) -> Result<(), Problem> {
        let (column, reading) = text
            .rsplit_once('=')
            .filter(|(c, _)| !c.trim().is_empty())
            .ok_or_else(|| issue::answer_form(text, "it has no column or no “=”"))?;
        match (column.trim(), reading.trim()) {
            ("decimal", "comma") => self.decimal = Some(Decimal::Comma),
            ("decimal", "point") => self.decimal = Some(Decimal::Point),
            (column, reading) => {
                let parsed =
                    reading.parse().map_err(|why: String| issue::answer_form(text, &why))?;
                self.set(column, parsed);
            }
        }
        Ok(())
    }

    /// The answer about the column with this header at this place (from 0); `shared` headers are
    /// reached by `#N` only.
    pub(crate) fn about(&self, header: &str, index: usize, shared: bool) -> Option<Reading> {
        let number = format!("#{}", index + 1);
        let header = header.trim();
        self.columns
            .iter()
            .find(|(c, _)| *c == number || (!shared && !header.is_empty() && c.trim() == header))
            .map(|(_, r)| *r)
    }

    /// The answer about a column of exactly this header, wherever it stands.
    pub(crate) fn named(&self, header: &str) -> Option<Reading> {
        let found = self.columns.iter().find(|(c, _)| !header.is_empty() && c.trim() == header);
        found.map(|(_, r)| *r)
    }

    /// The names of all columns answered about.
    pub(crate) fn names(&self) -> impl Iterator<Item = &str> {
        self.columns.iter().map(|(c, _)| c.as_str())
    }
}

/// A laboratory's answers, kept for its next file: `rampcrest-profile/1`.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Profile {
    schema: ProfileSchema,
    /// What the laboratory calls it.
    pub name: String,
    /// The decimal sign, where the files leave it open.
    #[serde(default)]
    pub decimal: Option<Decimal>,
    /// Columns, by header and unit exactly as the files have them.
    pub columns: Vec<ProfileColumn>,
}

#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize, Deserialize)]
enum ProfileSchema {
    #[default]
    #[serde(rename = "rampcrest-profile/1")]
    V1,
}

/// One kept answer.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ProfileColumn {
    /// Header as in the file.
    pub header: String,
    /// Unit text as in the file; empty where none is stated.
    #[serde(default)]
    pub unit: String,
    /// How it is read.
    pub reading: Reading,
}

impl Profile {
    /// The answers that went into `recipe`, under `name`.
    #[must_use]
    pub fn of(recipe: &Recipe, name: &str) -> Self {
        let kept = recipe
            .columns
            .iter()
            .filter(|c| matches!(c.decided, Decided::Answer | Decided::Profile))
            .map(|c| ProfileColumn {
                header: c.header.clone(),
                unit: c.unit_text.clone(),
                reading: c.reading,
            });
        Self {
            schema: ProfileSchema::V1,
            name: name.to_owned(),
            decimal: None,
            columns: kept.collect(),
        }
    }

    /// Reads a profile file.
    ///
    /// # Errors
    /// Not a profile; the message names the place.
    pub fn read(json: &str) -> Result<Self, Problem> {
        crate::json::read(json).map_err(|e| {
            let place = if e.path.is_empty() { String::new() } else { format!("{}: ", e.path) };
            issue::profile(&format!("{place}{}", e.what))
        })
    }

    /// Writes the profile file.
    #[must_use]
    pub fn write(&self) -> String {
        let mut text = serde_json::to_string_pretty(self).unwrap_or_default();
        text.push('\n');
        text
    }

    pub(crate) fn about(&self, header: &str, unit: &str) -> Option<Reading> {
        let found = self.columns.iter().find(|c| c.header == header && c.unit == unit);
        found.map(|c| c.reading)
    }
}
