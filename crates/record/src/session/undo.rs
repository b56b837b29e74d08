//! The undo stack: memory only, one step per edit (or per group of edits made together).

use std::sync::Arc;

use super::edit::Edit;
use super::judgement::Judgement;

/// Longest stack; the oldest step falls off.
const DEPTH: usize = 500;

/// One step: the edits, and the judgement on the other side of them.
#[derive(Clone, Debug)]
pub(crate) struct Step {
    /// What was done.
    pub edits: Vec<Edit>,
    /// The judgement to go to.
    pub judgement: Arc<Judgement>,
}

/// Steps that can be taken back, and steps that can be made again.
#[derive(Clone, Debug, Default)]
pub(crate) struct UndoStack {
    before: Vec<Step>,
    after: Vec<Step>,
}

impl UndoStack {
    /// Remembers what was before `edits`; what could be made again is gone.
    pub fn push(&mut self, edits: Vec<Edit>, before: Arc<Judgement>) {
        if self.before.len() == DEPTH {
            self.before.remove(0);
        }
        self.before.push(Step { edits, judgement: before });
        self.after.clear();
    }

    /// Takes a step back from `now`.
    pub fn back(&mut self, now: Arc<Judgement>) -> Option<Step> {
        let step = self.before.pop()?;
        self.after.push(Step { edits: step.edits.clone(), judgement: now });
        Some(step)
    }

    /// Makes a step again from `now`.
    pub fn forth(&mut self, now: Arc<Judgement>) -> Option<Step> {
        let step = self.after.pop()?;
        self.before.push(Step { edits: step.edits.clone(), judgement: now });
        Some(step)
    }

    /// The edit that would be taken back.
    pub fn last(&self) -> Option<&Edit> {
        self.before.last().and_then(|s| s.edits.first())
    }

    /// The edit that would be made again.
    pub fn next(&self) -> Option<&Edit> {
        self.after.last().and_then(|s| s.edits.first())
    }

    /// Forgets everything, as after signing.
    pub fn clear(&mut self) {
        self.before.clear();
        self.after.clear();
    }
}
