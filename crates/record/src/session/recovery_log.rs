//! The recovery log: the edits since the last save, one line each, in a file beside the session.
//! It is removed on save; what is found on opening is work that was lost.

use std::fs::{self, File};
use std::io::Write;
use std::path::{Path, PathBuf};

use serde::{Deserialize, Serialize};

use super::{Edit, Session, problems, sha256};
use crate::json;
use crate::problem::Problem;

/// One line of the log.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Line {
    /// When the edit was made.
    pub at: String,
    /// The edit; `None` = the step before was taken back.
    pub edit: Option<Edit>,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct Head {
    schema: String,
    /// SHA-256 of the session file that the edits follow.
    session: String,
}

const SCHEMA: &str = "rampcrest-recovery/1";

/// The log that belongs to the session at `session`.
#[must_use]
pub fn path(session: &Path) -> PathBuf {
    let name = session.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    session.with_file_name(format!(".{name}.recovery"))
}

/// Adds a line. The first line of a new log names the saved session it follows.
///
/// # Errors
/// The log cannot be written.
pub fn add(session: &Path, line: &Line) -> Result<(), Problem> {
    let log = path(session);
    let failed = |e: std::io::Error| problems::cannot_write("the recovery log", format!("{e}."));
    let mut text = String::new();
    if !log.exists() {
        let saved = fs::read(session).map_err(failed)?;
        text.push_str(&to_line(&Head { schema: SCHEMA.into(), session: sha256(&saved) }));
    }
    text.push_str(&to_line(line));
    let mut file = File::options().create(true).append(true).open(&log).map_err(failed)?;
    file.write_all(text.as_bytes()).and_then(|()| file.sync_data()).map_err(failed)
}

fn to_line<T: Serialize>(value: &T) -> String {
    let mut text = serde_json::to_string(value).unwrap_or_default();
    text.push('\n');
    text
}

/// The lines that follow the session saved at `session`; empty where there is no log or it belongs
/// to another state of the file. A last line that was cut off is left out.
#[must_use]
pub fn read(session: &Path) -> Vec<Line> {
    let (Ok(text), Ok(saved)) = (fs::read_to_string(path(session)), fs::read(session)) else {
        return Vec::new();
    };
    let mut lines = text.lines();
    let head: Option<Head> = lines.next().and_then(|l| json::read(l).ok());
    if !head.is_some_and(|h| h.schema == SCHEMA && h.session == sha256(&saved)) {
        return Vec::new();
    }
    lines.map_while(|l| json::read(l).ok()).collect()
}

/// Carries out what was lost.
///
/// # Errors
/// A line cannot be carried out; those before it are.
pub fn replay(session: &mut Session, lines: &[Line]) -> Result<(), Problem> {
    for line in lines {
        match &line.edit {
            Some(edit) => session.apply(edit, &line.at)?,
            None => {
                session.undo(&line.at)?;
            }
        }
    }
    Ok(())
}

/// Removes the log, as after saving.
pub fn remove(session: &Path) {
    let _ = fs::remove_file(path(session));
}
