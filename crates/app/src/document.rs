//! The open test: its source and the reader's judgement, changed by edits only.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};
use std::sync::Arc;

use analysis::decisions::{Decisions, Mark, Phase};
use analysis::facts::Facts;
use analysis::recording::Recording;
use analysis::results::Results;
use analysis::settings::{Averaging, Settings};
use record::facts_file::FactsFile;

use crate::shown::Finding;

/// What the reader did with a statement.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Status {
    /// Nothing yet.
    #[default]
    Draft,
    /// Accepted.
    Accepted,
    /// Declined.
    Declined,
}

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
    /// Accepts or declines a statement.
    FindingStatus {
        /// Which.
        id: String,
        /// What becomes of it.
        status: Status,
    },
    /// The reader's own text of a statement.
    FindingText {
        /// Which.
        id: String,
        /// The text.
        text: String,
    },
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
            Edit::FindingStatus { .. } => "Decide on statement",
            Edit::FindingText { .. } => "Edit statement",
        }
    }
}

#[derive(Clone, Debug, Default)]
struct Judgement {
    facts: Facts,
    decisions: Decisions,
    settings: Settings,
    findings: BTreeMap<String, (Status, Option<String>)>,
}

/// The open test.
#[derive(Debug, Default)]
pub struct Document {
    recording: Option<Arc<Recording>>,
    label: String,
    path: Option<PathBuf>,
    facts_file: FactsFile,
    now: Judgement,
    before: Vec<Judgement>,
    after: Vec<Judgement>,
    revision: u64,
}

impl Document {
    /// A test just read.
    #[must_use]
    pub fn opened(recording: Recording, facts_file: FactsFile, name: &str) -> Self {
        let (facts, identity, phases) = facts_file.to_analysis();
        let decisions = Decisions { phases, ..Decisions::default() };
        Self {
            recording: Some(Arc::new(recording)),
            label: identity.label.unwrap_or_else(|| name.to_owned()),
            facts_file,
            now: Judgement { facts, decisions, ..Judgement::default() },
            revision: 1,
            ..Self::default()
        }
    }

    /// The facts as the file format holds them, free text included.
    #[must_use]
    pub fn facts_file(&self) -> &FactsFile {
        &self.facts_file
    }

    /// Carries out `edit`.
    pub fn apply(&mut self, edit: Edit) {
        let before = self.now.clone();
        match edit {
            Edit::SetBoundary { phase, t_s } => self.now.decisions.phases.set(phase, Some(t_s)),
            Edit::SetMark { mark: Mark::Vt1, t_s } => self.now.decisions.vt1_s = Some(t_s),
            Edit::SetMark { mark: Mark::Vt2, t_s } => self.now.decisions.vt2_s = Some(t_s),
            Edit::SetAveraging(a) => self.now.settings.averaging = a,
            Edit::FindingStatus { id, status } => {
                self.now.findings.entry(id).or_default().0 = status;
            }
            Edit::FindingText { id, text } => {
                self.now.findings.entry(id).or_default().1 = Some(text);
            }
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

    /// Statements as the sheet shows them.
    #[must_use]
    pub fn findings(&self, results: &Results) -> Vec<Finding> {
        let texts = |list: &[analysis::results::Evidence]| {
            list.iter().map(|e| crate::words::note(&e.note)).collect()
        };
        results
            .statements
            .iter()
            .map(|s| {
                let (status, text) = self.now.findings.get(s.id).cloned().unwrap_or_default();
                Finding {
                    id: s.id.to_owned(),
                    section: s.section,
                    status,
                    text: text.unwrap_or_else(|| crate::words::note(&s.note)),
                    stale: false,
                    supports: texts(&s.supports),
                    contradicts: texts(&s.contradicts),
                    open: texts(&s.open),
                }
            })
            .collect()
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
