//! The open test: its source and the reader's judgement, changed by edits only.

use std::path::{Path, PathBuf};
use std::sync::Arc;

use analysis::decisions::{Decisions, Mark, Phase};
use analysis::facts::Facts;
use analysis::recording::Recording;
use analysis::settings::{Averaging, Settings};

/// A change of the session.
#[derive(Clone, Debug, PartialEq)]
pub enum Edit {
    /// A phase starts here.
    SetBoundary {
        /// Which.
        phase: Phase,
        /// Start, s.
        t_s: f64,
    },
    /// A mark stands here.
    SetMark {
        /// Which.
        mark: Mark,
        /// Time, s.
        t_s: f64,
    },
    /// Average so.
    SetAveraging(Averaging),
    /// Draw the overlay or not.
    ShowOverlay(bool),
}

impl Edit {
    /// What it does, for the undo button.
    #[must_use]
    pub fn label(&self) -> &'static str {
        match self {
            Edit::SetBoundary { .. } => "Move boundary",
            Edit::SetMark { .. } => "Move mark",
            Edit::SetAveraging(_) => "Choose averaging",
            Edit::ShowOverlay(_) => "Predicted overlay",
        }
    }
}

#[derive(Clone, Debug, Default)]
struct Judgement {
    facts: Facts,
    decisions: Decisions,
    settings: Settings,
}

/// The open test.
#[derive(Debug, Default)]
pub struct Document {
    recording: Option<Arc<Recording>>,
    label: String,
    path: Option<PathBuf>,
    now: Judgement,
    before: Vec<Judgement>,
    after: Vec<Judgement>,
    revision: u64,
}

impl Document {
    /// Opens `recording` under `label`.
    pub fn open(&mut self, recording: Recording, facts: Facts, label: impl Into<String>) {
        self.recording = Some(Arc::new(recording));
        self.label = label.into();
        self.path = None;
        self.now = Judgement { facts, ..Judgement::default() };
        self.before.clear();
        self.after.clear();
        self.revision += 1;
    }

    /// Carries out `edit`.
    pub fn apply(&mut self, edit: Edit) {
        let before = self.now.clone();
        match edit {
            Edit::SetBoundary { phase, t_s } => self.now.decisions.phases.set(phase, Some(t_s)),
            Edit::SetMark { mark: Mark::Vt1, t_s } => self.now.decisions.vt1_s = Some(t_s),
            Edit::SetMark { mark: Mark::Vt2, t_s } => self.now.decisions.vt2_s = Some(t_s),
            Edit::SetAveraging(a) => self.now.settings.averaging = a,
            Edit::ShowOverlay(shown) => self.now.settings.overlay_shown = shown,
        }
        self.before.push(before);
        self.after.clear();
        self.revision += 1;
    }

    /// Takes back the last edit.
    pub fn undo(&mut self) {
        if let Some(before) = self.before.pop() {
            self.after.push(std::mem::replace(&mut self.now, before));
            self.revision += 1;
        }
    }

    /// Carries out again what was taken back.
    pub fn redo(&mut self) {
        if let Some(after) = self.after.pop() {
            self.before.push(std::mem::replace(&mut self.now, after));
            self.revision += 1;
        }
    }

    /// Whether there is something to take back.
    #[must_use]
    pub fn can_undo(&self) -> bool {
        !self.before.is_empty()
    }

    /// Whether there is something to carry out again.
    #[must_use]
    pub fn can_redo(&self) -> bool {
        !self.after.is_empty()
    }

    /// The recording, if a test is open.
    #[must_use]
    pub fn recording(&self) -> Option<&Arc<Recording>> {
        self.recording.as_ref()
    }

    /// Facts of person and test.
    #[must_use]
    pub fn facts(&self) -> &Facts {
        &self.now.facts
    }

    /// The reader's decisions.
    #[must_use]
    pub fn decisions(&self) -> &Decisions {
        &self.now.decisions
    }

    /// Settings.
    #[must_use]
    pub fn settings(&self) -> &Settings {
        &self.now.settings
    }

    /// Label of the case.
    #[must_use]
    pub fn label(&self) -> &str {
        &self.label
    }

    /// Whether the session is signed.
    #[must_use]
    pub fn signed(&self) -> bool {
        false
    }

    /// Whether the session stands saved as it is.
    #[must_use]
    pub fn saved(&self) -> bool {
        false
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
