//! The open test: owner of the session, changed by edits only.

use std::path::{Path, PathBuf};
use std::sync::Arc;

use analysis::decisions::Decisions;
use analysis::facts::Facts;
use analysis::recording::Recording;
use analysis::results::Results;
use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::problem::Problem;
use record::session::{Edit, Session};

/// The open test, or none.
#[derive(Debug, Default)]
pub struct Document {
    session: Option<Session>,
    path: Option<PathBuf>,
    facts: Facts,
    settings: Settings,
    revision: u64,
    saved_revision: Option<u64>,
    clock: Option<String>,
}

impl Document {
    /// A test just opened; `path` is that of its session file, if it has one.
    #[must_use]
    pub fn of(session: Session, path: Option<PathBuf>) -> Self {
        let facts = session.judgement().engine_facts();
        let saved_revision = path.as_ref().map(|_| 1);
        let session = Some(session);
        Self { session, path, facts, revision: 1, saved_revision, ..Self::default() }
    }

    /// The same with a fixed clock, RFC 3339.
    #[must_use]
    pub fn at(mut self, now: Option<String>) -> Self {
        self.clock = now;
        self
    }

    /// The same test with its file read anew; nothing of it is saved yet.
    #[must_use]
    pub fn read_anew(&self, session: Session) -> Self {
        let (path, clock) = (self.path.clone(), self.clock.clone());
        let anew = Self::of(session, None);
        Self { path, clock, revision: self.revision + 1, ..anew }
    }

    /// The time that edits bear, RFC 3339 with offset.
    #[must_use]
    pub fn now(&self) -> String {
        self.clock.clone().unwrap_or_else(now)
    }

    /// The session, if a test is open.
    #[must_use]
    pub fn session(&self) -> Option<&Session> {
        self.session.as_ref()
    }

    /// Carries out `edits` as one undo step.
    ///
    /// # Errors
    /// One cannot be carried out, or the session is signed; nothing is changed then.
    pub fn apply(&mut self, edits: &[Edit]) -> Result<(), Problem> {
        let now = self.now();
        let Some(session) = self.session.as_mut() else {
            return Ok(());
        };
        session.apply_together(edits, &now)?;
        self.changed();
        Ok(())
    }

    /// Takes back the last step.
    pub fn undo(&mut self) {
        let now = self.now();
        if let Some(session) = self.session.as_mut()
            && session.undo(&now).unwrap_or(false)
        {
            self.changed();
        }
    }

    /// Makes the last step again.
    pub fn redo(&mut self) {
        let now = self.now();
        if let Some(session) = self.session.as_mut()
            && session.redo(&now).unwrap_or(false)
        {
            self.changed();
        }
    }

    fn changed(&mut self) {
        self.revision += 1;
        if let Some(session) = &self.session {
            self.facts = session.judgement().engine_facts();
        }
    }

    /// Saves the session at `path`.
    ///
    /// # Errors
    /// Nothing could be written; nothing is lost.
    pub fn save(&mut self, path: &Path) -> Result<(), Problem> {
        if let Some(session) = &self.session {
            session.save(path)?;
            self.path = Some(path.to_owned());
            self.saved_revision = Some(self.revision);
        }
        Ok(())
    }

    /// Forgets that anything is unsaved, because the reader said so.
    pub fn forget_changes(&mut self) {
        self.saved_revision = Some(self.revision);
    }

    /// Writes the findings page at `path`, from the committed `results`.
    ///
    /// # Errors
    /// Nothing could be written.
    pub fn export(&self, results: &Results, path: &Path) -> Result<(), Problem> {
        let Some(session) = &self.session else {
            return Ok(());
        };
        let page = record::page::render(session, results, &self.now());
        record::session::store::write_atomic(path, page.as_bytes())
    }

    /// The edit that would be taken back.
    #[must_use]
    pub fn can_undo(&self) -> Option<&Edit> {
        self.session.as_ref().and_then(Session::can_undo)
    }

    /// The edit that would be made again.
    #[must_use]
    pub fn can_redo(&self) -> Option<&Edit> {
        self.session.as_ref().and_then(Session::can_redo)
    }

    /// The recording, if a test is open.
    #[must_use]
    pub fn recording(&self) -> Option<&Arc<Recording>> {
        self.session.as_ref().map(Session::recording)
    }

    /// Facts of person and test, as the engine reads them.
    #[must_use]
    pub fn facts(&self) -> &Facts {
        &self.facts
    }

    /// Facts as the file format holds them, free text included.
    #[must_use]
    pub fn facts_file(&self) -> Option<&FactsFile> {
        self.session.as_ref().map(|s| &s.judgement().facts)
    }

    /// The reader's decisions.
    #[must_use]
    pub fn decisions(&self) -> Decisions {
        self.session.as_ref().map(|s| s.judgement().decisions.clone()).unwrap_or_default()
    }

    /// Settings.
    #[must_use]
    pub fn settings(&self) -> &Settings {
        self.session.as_ref().map_or(&self.settings, |s| &s.judgement().settings)
    }

    /// Label of the case: a pseudonym stated with the facts, else the name of the file.
    #[must_use]
    pub fn label(&self) -> String {
        let Some(session) = &self.session else {
            return String::new();
        };
        let label = session.judgement().facts.identity.label.clone();
        label.unwrap_or_else(|| session.source().name.clone())
    }

    /// Whether the session is signed.
    #[must_use]
    pub fn signed(&self) -> bool {
        self.session.as_ref().is_some_and(|s| s.signed().is_some())
    }

    /// Whether the session stands saved as it is.
    #[must_use]
    pub fn saved(&self) -> bool {
        self.session.is_none() || self.saved_revision == Some(self.revision)
    }

    /// Whether the reader has changed anything that is not saved.
    #[must_use]
    pub fn unsaved_work(&self) -> bool {
        !self.saved() && self.revision > 1
    }

    /// Where the session was saved.
    #[must_use]
    pub fn path(&self) -> Option<&Path> {
        self.path.as_deref()
    }

    /// Rises with each change.
    #[must_use]
    pub fn revision(&self) -> u64 {
        self.revision
    }
}

/// The time of the desk, RFC 3339 with its offset where it can be told.
#[must_use]
pub fn now() -> String {
    let now = time::OffsetDateTime::now_local().unwrap_or_else(|_| time::OffsetDateTime::now_utc());
    record::clock::write(now.replace_nanosecond(0).unwrap_or(now))
}
