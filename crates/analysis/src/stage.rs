//! What the steps of the pipeline share: the inputs, and the results as far as they are known.

use crate::breaths::Breaths;
use crate::decisions::Decisions;
use crate::facts::Facts;
use crate::recording::Recording;
use crate::results::{Outcome, Results};
use crate::settings::Settings;

/// One derivation under way.
pub(crate) struct Stage<'a> {
    pub recording: &'a Recording,
    pub facts: &'a Facts,
    pub decisions: &'a Decisions,
    pub settings: &'a Settings,
    /// Breaths used for numbers: left-out ones removed, errant ones merged.
    pub breaths: Breaths,
    /// What is known so far.
    pub results: Results,
}

impl Stage<'_> {
    /// Adds an outcome.
    pub fn push(&mut self, outcome: Outcome) {
        debug_assert!(outcome.value.is_none() == outcome.reason.is_some(), "{}", outcome.id);
        self.results.outcomes.push(outcome);
    }
}
