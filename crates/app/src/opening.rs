//! From bytes to an open test.

use std::path::Path;
use std::sync::Arc;

use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, Imported, import};
use record::problem::Problem;
use record::session::store::read_file;
use record::session::{Session, is_session};

use crate::document::{Document, now};

/// Settings of a new session, with the predicted sets that ship with the program.
#[must_use]
pub fn settings() -> Settings {
    Settings::default()
}

/// Opens a breath table with `facts`.
///
/// # Errors
/// The table is refused.
pub fn table(
    bytes: &[u8],
    name: &str,
    facts: FactsFile,
    answers: &Answers,
    clock: Option<String>,
) -> Result<Document, Problem> {
    let Imported { recording, recipe, .. } = import(bytes, name, answers, None)?;
    let at = clock.clone().unwrap_or_else(now);
    let recording = Arc::new(recording);
    let session = Session::from_import(bytes, name, recipe, recording, facts, settings(), &at)?;
    Ok(Document::of(session, None).at(clock))
}

/// Opens a breath table or a saved session.
///
/// # Errors
/// The file cannot be read, or is refused.
pub fn file(path: &Path) -> Result<Document, Problem> {
    let bytes = read_file(path)?;
    if is_session(&bytes) {
        let session = Session::read(&bytes, &settings())?;
        return Ok(Document::of(session, Some(path.to_owned())));
    }
    let name = path.file_name().map_or_else(String::new, |n| n.to_string_lossy().into_owned());
    let facts = facts_beside(path)?;
    table(&bytes, &name, facts, &Answers::none(), None)
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
