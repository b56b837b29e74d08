//! The bridge to the catalogue of texts: notes in words.

use analysis::results::Note;

/// A doubt or reason in words.
#[must_use]
pub fn note(note: &Note) -> String {
    note.code.replace('-', " ")
}
