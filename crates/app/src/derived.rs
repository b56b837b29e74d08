//! What follows from the session: the one caller of `derive`.

use analysis::decisions::Decisions;
use analysis::results::Results;

use crate::document::Document;

/// Results of the committed session, and of the preview while a handle moves.
#[derive(Debug, Default)]
pub struct Derived {
    revision: Option<u64>,
    committed: Results,
    preview: Option<(Decisions, Results)>,
    /// How often `derive` ran.
    runs: u64,
}

impl Derived {
    /// Brings the results up to date. `moving` are the decisions as a moving handle would have them.
    pub fn update(&mut self, document: &Document, moving: Option<&Decisions>) {
        let Some(recording) = document.recording() else {
            return;
        };
        if self.revision != Some(document.revision()) {
            let known = self.preview.take().filter(|(d, _)| d == document.decisions());
            // A released handle leaves exactly the decisions of its last preview; nothing else can
            // have changed while the pointer was down.
            self.committed = match known {
                Some((_, results)) => results,
                None => {
                    self.runs += 1;
                    analysis::derive(
                        recording,
                        document.facts(),
                        document.decisions(),
                        document.settings(),
                    )
                }
            };
            self.revision = Some(document.revision());
        }
        match moving {
            None => self.preview = None,
            Some(moving) if self.preview.as_ref().is_some_and(|(d, _)| d == moving) => {}
            Some(moving) => {
                self.runs += 1;
                let results =
                    analysis::derive(recording, document.facts(), moving, document.settings());
                self.preview = Some((moving.clone(), results));
            }
        }
    }

    /// What panels show: the preview while a handle moves, else the committed results.
    #[must_use]
    pub fn shown(&self) -> &Results {
        self.preview.as_ref().map_or(&self.committed, |(_, results)| results)
    }

    /// The committed results: what page, export and description read.
    #[must_use]
    pub fn committed(&self) -> &Results {
        &self.committed
    }

    /// Whether what is shown is provisional.
    #[must_use]
    pub fn provisional(&self) -> bool {
        self.preview.is_some()
    }

    /// How often `derive` has run.
    #[must_use]
    pub fn runs(&self) -> u64 {
        self.runs
    }
}
