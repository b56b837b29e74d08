//! From bytes to an open test.

use record::facts_file::FactsFile;
use record::import::{Answers, import};
use record::problem::Problem;

use crate::document::Document;

/// Opens a breath table with `facts`.
///
/// # Errors
/// The table is refused.
pub fn table(bytes: &[u8], name: &str, facts: FactsFile) -> Result<Document, Problem> {
    let imported = import(bytes, name, &Answers::none(), None)?;
    Ok(Document::opened(imported.recording, facts, name))
}
