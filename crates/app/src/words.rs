//! The bridge to the catalogue of texts: notes in words.

use analysis::results::{Note, Results};
use record::presentation::wording;

/// A doubt or reason in words.
#[must_use]
pub fn note(note: &Note, results: &Results) -> String {
    wording::text(note, results)
}
