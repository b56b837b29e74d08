//! The session: the original file, how it was read, and the reader's judgement with its history.
//!
//! Changed by [`Edit`]s and by nothing else. Words: *history* is the audit list kept in the file;
//! *recovery log* a side file removed on save; *undo stack* memory only.

mod apply;
pub mod boundary;
pub mod codes;
pub mod edit;
mod file_v1;
pub mod findings;
pub mod frozen;
pub mod history;
mod judgement;
mod problems;
pub mod recovery_log;
mod settings_file;
mod signing;
mod source;
pub mod store;
#[cfg(test)]
mod tests;
mod undo;

use std::fmt;
use std::sync::{Arc, OnceLock};

use analysis::recording::Recording;
use analysis::results::Results;
use analysis::settings::Settings;
use serde_json::Value;

pub use edit::{Edit, read_edits};
pub use file_v1::{SCHEMA, is_session};
pub use judgement::Judgement;
pub use signing::{MINIMAL, Missing, missing_for_signing};
pub use source::{MAX_BYTES, Source, sha256};

use self::findings::FindingShown;
use self::history::{Action, Entry};
use self::undo::UndoStack;
use crate::facts_file::FactsFile;
use crate::import::Recipe;
use crate::problem::Problem;

/// Version of the engine that derives.
pub const ENGINE: &str = env!("CARGO_PKG_VERSION");

/// A typed signature and the results it stands under.
#[derive(Clone, Debug, PartialEq)]
pub struct Signed {
    /// Typed name.
    pub name: String,
    /// Role.
    pub role: String,
    /// Registration.
    pub registration: String,
    /// Meaning of the signature.
    pub meaning: String,
    /// When, RFC 3339 with offset.
    pub at: String,
    /// Version of the engine that derived the frozen results.
    pub engine: String,
    /// The results, frozen: `rampcrest-results/1`.
    pub results: Value,
}

/// Draft, or signed and locked.
#[derive(Clone, Debug, Default, PartialEq)]
pub enum State {
    /// Can be edited.
    #[default]
    Draft,
    /// Locked.
    Signed(Box<Signed>),
}

/// An open test.
#[derive(Clone)]
pub struct Session {
    source: Source,
    recipe: Recipe,
    recording: Arc<Recording>,
    judgement: Arc<Judgement>,
    history: Vec<Entry>,
    state: State,
    undo: UndoStack,
    /// Results of the judgement, derived when first asked for.
    derived: OnceLock<Arc<Results>>,
}

impl Session {
    /// A draft from a table just imported. `settings` hold the predicted sets; `now` is RFC 3339.
    ///
    /// # Errors
    /// The file is too large for a session, or `now` is not a time.
    pub fn from_import(
        bytes: &[u8],
        name: &str,
        recipe: Recipe,
        recording: Arc<Recording>,
        facts: FactsFile,
        settings: Settings,
        now: &str,
    ) -> Result<Self, Problem> {
        crate::clock::parse(now)?;
        let imported =
            Entry { at: now.to_owned(), action: Action::Imported, edit: None, changed: Vec::new() };
        Ok(Self {
            source: Source::pack(bytes, name)?,
            recipe,
            recording,
            judgement: Arc::new(Judgement::opening(facts, settings)),
            history: vec![imported],
            state: State::Draft,
            undo: UndoStack::default(),
            derived: OnceLock::new(),
        })
    }

    /// The original file.
    #[must_use]
    pub fn source(&self) -> &Source {
        &self.source
    }

    /// How it was read.
    #[must_use]
    pub fn recipe(&self) -> &Recipe {
        &self.recipe
    }

    /// What the engine reads.
    #[must_use]
    pub fn recording(&self) -> &Arc<Recording> {
        &self.recording
    }

    /// Facts, decisions, settings, findings.
    #[must_use]
    pub fn judgement(&self) -> &Arc<Judgement> {
        &self.judgement
    }

    /// The audit list.
    #[must_use]
    pub fn history(&self) -> &[Entry] {
        &self.history
    }

    /// Draft or signed.
    #[must_use]
    pub fn state(&self) -> &State {
        &self.state
    }

    /// The signature, where there is one.
    #[must_use]
    pub fn signed(&self) -> Option<&Signed> {
        match &self.state {
            State::Signed(signed) => Some(signed),
            State::Draft => None,
        }
    }

    /// Derives everything, anew.
    #[must_use]
    pub fn derive(&self) -> Results {
        derive(&self.recording, &self.judgement)
    }

    /// The results of the judgement as it stands, derived at most once.
    #[must_use]
    pub fn results(&self) -> &Arc<Results> {
        self.derived.get_or_init(|| Arc::new(self.derive()))
    }

    /// Hands over results that the caller has already derived from this very judgement.
    pub fn know_results(&self, results: Arc<Results>) {
        let _ = self.derived.set(results);
    }

    /// Statements as sheet and page show them.
    #[must_use]
    pub fn findings(&self, results: &Results) -> Vec<FindingShown> {
        findings::list(&self.judgement.findings, results)
    }

    /// Whether there is a step to take back.
    #[must_use]
    pub fn can_undo(&self) -> Option<&Edit> {
        self.undo.last()
    }

    /// Whether there is a step to make again.
    #[must_use]
    pub fn can_redo(&self) -> Option<&Edit> {
        self.undo.next()
    }
}

fn derive(recording: &Recording, judgement: &Judgement) -> Results {
    analysis::derive(
        recording,
        &judgement.engine_facts(),
        &judgement.decisions,
        &judgement.settings,
    )
}

impl fmt::Debug for Session {
    /// Size and digest only: names and facts stay out of logs.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.debug_struct("Session")
            .field("size", &self.source.size)
            .field("entries", &self.history.len())
            .field("signed", &self.signed().is_some())
            .finish_non_exhaustive()
    }
}
