//! The draft session of a demo test: its table imported, its facts, and one boundary set.

use std::sync::Arc;

use analysis::decisions::Phase;
use analysis::model::test::Truth;
use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, import};
use record::predicted_sets;
use record::problem::Problem;
use record::session::{Edit, Session};

/// The clock of every demo session, so that a rebuild gives the same bytes.
const IMPORTED_AT: &str = "2026-11-30T10:50:00+00:00";
const EDITED_AT: &str = "2026-11-30T10:51:00+00:00";

/// `session.json` of a case from its table and facts.
///
/// # Errors
/// The table or the facts are refused: a bug in the demo.
pub fn bytes(table: &[u8], facts: &str, truth: &Truth) -> Result<Vec<u8>, Problem> {
    let imported = import(table, "table.csv", &Answers::default(), None)?;
    let facts = FactsFile::read(facts)?;
    let settings = Settings { sets: predicted_sets::bundled(), ..Settings::default() };
    let recording = Arc::new(imported.recording);
    let mut session = Session::from_import(
        table,
        "table.csv",
        imported.recipe,
        recording,
        facts,
        settings,
        IMPORTED_AT,
    )?;
    // Load is zero at rest and in warm-up alike: the start of pedalling is known to who was there.
    if let Some(t_s) = truth.phases.warm_up {
        session.apply(&Edit::SetBoundary { phase: Phase::WarmUp, t_s }, EDITED_AT)?;
    }
    Ok(session.write())
}
