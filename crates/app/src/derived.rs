//! What follows from the session: the one caller of `derive`.

use std::sync::Arc;

use analysis::decisions::Decisions;
use analysis::results::Results;
use record::session::findings::FindingShown;

use crate::document::Document;

/// Results of the committed session, and of the preview while a handle moves.
#[derive(Debug, Default)]
pub struct Derived {
    revision: Option<u64>,
    committed: Arc<Results>,
    preview: Option<(Decisions, Results)>,
    findings: Vec<FindingShown>,
    /// How often anything was derived.
    runs: u64,
}

impl Derived {
    /// Brings the results up to date. `moving` are the decisions as a moving handle would have them.
    pub fn update(&mut self, document: &Document, moving: Option<&Decisions>) {
        let Some(session) = document.session() else {
            return;
        };
        let mut changed = false;
        if self.revision != Some(document.revision()) {
            self.runs += 1;
            self.committed = Arc::clone(session.results());
            self.revision = Some(document.revision());
            self.preview = None;
            changed = true;
        }
        match moving {
            None => changed |= self.preview.take().is_some(),
            Some(moving) if self.preview.as_ref().is_some_and(|(d, _)| d == moving) => {}
            Some(moving) => {
                self.runs += 1;
                let results = analysis::derive(
                    session.recording(),
                    document.facts(),
                    moving,
                    document.settings(),
                );
                self.preview = Some((moving.clone(), results));
                changed = true;
            }
        }
        if changed {
            self.findings = session.findings(self.shown());
        }
    }

    /// What panels show: the preview while a handle moves, else the committed results.
    #[must_use]
    pub fn shown(&self) -> &Results {
        self.preview.as_ref().map_or(&*self.committed, |(_, results)| results)
    }

    /// The committed results: what page, export and description read.
    #[must_use]
    pub fn committed(&self) -> &Results {
        &self.committed
    }

    /// Statements under the results shown.
    #[must_use]
    pub fn findings(&self) -> &[FindingShown] {
        &self.findings
    }

    /// Whether what is shown is provisional.
    #[must_use]
    pub fn provisional(&self) -> bool {
        self.preview.is_some()
    }

    /// How often anything was derived.
    #[must_use]
    pub fn runs(&self) -> u64 {
        self.runs
    }
}
