//! From bytes to an open test.

use std::path::Path;
use std::sync::Arc;

use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, Imported, Profile, import};
use record::problem::Problem;
use record::session::store::read_file;
use record::session::{Session, is_session};

use crate::document::{Document, now};

/// Settings of a new session, with the predicted sets that ship with the program.
#[must_use]
pub fn settings() -> Settings {
    Settings { sets: record::predicted_sets::bundled(), ..Settings::default() }
}

/// How a table is to be read.
#[derive(Clone, Debug, Default)]
pub struct Reading {
    /// What is known of person and test.
    pub facts: FactsFile,
    /// Answers to questions about columns.
    pub answers: Answers,
    /// A lab's answers.
    pub profile: Option<Profile>,
    /// A fixed clock, RFC 3339.
    pub clock: Option<String>,
}

/// Opens a breath table.
///
/// # Errors
/// The table is refused.
pub fn table(bytes: &[u8], name: &str, reading: Reading) -> Result<Document, Problem> {
    let Reading { facts, answers, profile, clock } = reading;
    let Imported { recording, recipe, .. } = import(bytes, name, &answers, profile.as_ref())?;
    let at = clock.clone().unwrap_or_else(now);
    let recording = Arc::new(recording);
    let session = Session::from_import(bytes, name, recipe, recording, facts, settings(), &at)?;
    Ok(Document::of(session, None).at(clock))
}

/// Opens a breath table or a saved session from the bytes of the file at `path`.
///
/// # Errors
/// The file is refused.
pub fn bytes(bytes: &[u8], path: &Path, reading: Reading) -> Result<Document, Problem> {
    if is_session(bytes) {
        let session = Session::read(bytes, &settings())?;
        return Ok(Document::of(session, Some(path.to_owned())).at(reading.clock));
    }
    let name = path.file_name().map_or_else(String::new, |n| n.to_string_lossy().into_owned());
    table(bytes, &name, reading)
}

/// Opens a breath table, with the facts beside it, or a saved session.
///
/// # Errors
/// The file cannot be read, or is refused.
pub fn file(path: &Path) -> Result<Document, Problem> {
    let facts = facts_beside(path)?;
    bytes(&read_file(path)?, path, Reading { facts, ..Reading::default() })
}

/// The facts file that stands beside a table under the name `facts.json`, if there is one.
fn facts_beside(path: &Path) -> Result<FactsFile, Problem> {
    let beside = path.with_file_name("facts.json");
    if !beside.is_file() {
        return Ok(FactsFile::default());
    }
    let bytes = read_file(&beside)?;
    FactsFile::read(&String::from_utf8_lossy(&bytes))
}
