//! The reader's judgement: all that edits change, and all that undo brings back.

use std::collections::BTreeSet;

use analysis::decisions::Decisions;
use analysis::facts::Facts;
use analysis::settings::Settings;

use super::findings::Finding;
use crate::facts_file::{FactsFile, Source};

/// Facts, decisions, settings and findings.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Judgement {
    /// Facts of the person and the test, with events and identity.
    pub facts: FactsFile,
    /// Paths of the facts that the reader set; all others came with a file.
    pub by_reader: BTreeSet<String>,
    /// Where each event of `facts` came from, in the same order.
    pub event_sources: Vec<Source>,
    /// Boundaries, exclusions, marks.
    pub decisions: Decisions,
    /// Why each stretch of `decisions.excluded` was left out, in the same order.
    pub exclusion_reasons: Vec<String>,
    /// Settings.
    pub settings: Settings,
    /// What the reader did with statements, and the reader's own.
    pub findings: Vec<Finding>,
}

impl Judgement {
    /// The judgement with which a test opens: the facts as given, the boundaries they state, and
    /// nothing decided.
    #[must_use]
    pub fn opening(facts: FactsFile, settings: Settings) -> Self {
        let (_, _, phases) = facts.to_analysis();
        let event_sources = vec![Source::File; facts.events.len()];
        let decisions = Decisions { phases, ..Decisions::default() };
        Self { facts, event_sources, decisions, settings, ..Self::default() }
    }

    /// The facts as the engine reads them.
    #[must_use]
    pub fn engine_facts(&self) -> Facts {
        self.facts.to_analysis().0
    }
}
