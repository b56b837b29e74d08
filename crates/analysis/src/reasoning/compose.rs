//! Building a statement step by step.

use crate::results::{Arg, At, Evidence, Note, Section, Statement};

/// A statement under construction.
pub(crate) struct Draft(Statement);

impl Draft {
    /// An empty statement.
    pub fn new(id: &'static str, section: Section, note: Note) -> Self {
        Self(Statement {
            id,
            section,
            note,
            rests_on: Vec::new(),
            supports: Vec::new(),
            contradicts: Vec::new(),
            open: Vec::new(),
        })
    }

    /// Rests on one more outcome.
    pub fn resting_on(mut self, id: &'static str, at: At) -> Self {
        let key = (id.into(), at);
        if !self.0.rests_on.contains(&key) {
            self.0.rests_on.push(key);
        }
        self
    }

    /// One more piece of evidence for it.
    pub fn supported_by(mut self, evidence: Evidence) -> Self {
        if !self.0.supports.contains(&evidence) {
            self.0.supports.push(evidence);
        }
        self
    }

    /// One more piece of evidence against it.
    pub fn contradicted_by(mut self, evidence: Evidence) -> Self {
        self.0.contradicts.push(evidence);
        self
    }

    /// One more thing that was not measured.
    pub fn open(mut self, evidence: Evidence) -> Self {
        self.0.open.push(evidence);
        self
    }

    /// The statement.
    pub fn done(self) -> Statement {
        self.0
    }
}

/// Names of the places in a list message.
const PLACES: [&str; 5] = ["a", "b", "c", "d", "e"];

/// A list message of one to five words: code `<family>-<n>` with arguments `a` to `e`; `None` for
/// an empty list. One whole sentence per length, so that nothing is glued from fragments.
pub(crate) fn words(family: &'static str, list: &[&'static str]) -> Option<Note> {
    let code = match (family, list.len()) {
        ("explanations", 1) => "explanations-1",
        ("explanations", 2) => "explanations-2",
        ("explanations", 3) => "explanations-3",
        ("explanations", 4) => "explanations-4",
        ("explanations", 5) => "explanations-5",
        ("information", 1) => "information-1",
        ("information", 2) => "information-2",
        ("information", 3) => "information-3",
        ("information", 4) => "information-4",
        ("information", 5) => "information-5",
        _ => return None,
    };
    Some(
        PLACES
            .iter()
            .zip(list)
            .fold(Note::new(code), |note, (place, word)| note.with(place, Arg::Word(word))),
    )
}
