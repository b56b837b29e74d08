//! What follows from the session: the one caller of `derive`.

use std::sync::Arc;
use std::sync::mpsc::{Receiver, TryRecvError, channel};

use analysis::decisions::Decisions;
use analysis::results::Results;
use record::session::Session;
use record::session::findings::FindingShown;

use crate::document::Document;

/// Breaths beyond which a derivation takes longer than a frame: it then runs beside the frames of
/// a drag, and they show the last one that is done. No exercise test is that long.
const LONG: usize = 3_000;

/// Updates, of which a frame has two, in which frames have the processors to themselves.
const REST: u8 = 4;

/// A derivation under way on another thread.
type Beside = Receiver<(Decisions, Results)>;

/// Results of the committed session, and of the preview while a handle moves.
#[derive(Debug, Default)]
pub struct Derived {
    revision: Option<u64>,
    committed: Arc<Results>,
    preview: Option<(Decisions, Results)>,
    beside: Option<Beside>,
    /// Updates to come before the next derivation beside the frames.
    rest: u8,
    findings: Vec<FindingShown>,
    /// How often anything was derived.
    runs: u64,
}

impl Derived {
    /// Brings the results up to date. `moving` are the decisions as a moving handle would have them;
    /// `wake` is called when a derivation beside the frames is done.
    pub fn update(
        &mut self,
        document: &Document,
        moving: Option<&Decisions>,
        wake: impl FnOnce() + Send + 'static,
    ) {
        let Some(session) = document.session() else {
            return;
        };
        let mut changed = false;
        if self.revision != Some(document.revision()) {
            self.runs += 1;
            self.committed = Arc::clone(session.results());
            self.revision = Some(document.revision());
            (self.preview, self.beside) = (None, None);
            changed = true;
        }
        match moving {
            None => {
                self.beside = None;
                changed |= self.preview.take().is_some();
            }
            Some(moving) if self.preview.as_ref().is_some_and(|(d, _)| d == moving) => {}
            Some(moving) if session.recording().breaths.len() > LONG => {
                if self.receive() {
                    changed = true;
                    self.rest = REST;
                    wake();
                } else if self.rest > 0 {
                    self.rest -= 1;
                    wake();
                } else if self.beside.is_none() {
                    self.runs += 1;
                    self.beside = Some(beside(document, session, moving.clone(), wake));
                }
            }
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

    /// Takes what the other thread has finished.
    fn receive(&mut self) -> bool {
        let done = self.beside.as_ref().map(Receiver::try_recv);
        match done {
            Some(Ok(preview)) => self.preview = Some(preview),
            Some(Err(TryRecvError::Disconnected)) => {}
            Some(Err(TryRecvError::Empty)) | None => return false,
        }
        self.beside = None;
        true
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

fn beside(
    document: &Document,
    session: &Session,
    moving: Decisions,
    wake: impl FnOnce() + Send + 'static,
) -> Beside {
    let (send, receive) = channel();
    let recording = Arc::clone(session.recording());
    let (facts, settings) = (document.facts().clone(), document.settings().clone());
    std::thread::spawn(move || {
        let results = analysis::derive(&recording, &facts, &moving, &settings);
        // The drag may have ended by now; then nobody waits for the results.
        let _ = send.send((moving, results));
        wake();
    });
    receive
}
