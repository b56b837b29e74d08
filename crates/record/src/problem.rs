//! What went wrong, in the same words in the window, on the command line and in JSON.

use std::fmt;

/// One problem: a stable code, where it is, what it is, and what the reader can do about it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Problem {
    /// Stable kebab-case code.
    pub code: &'static str,
    /// Where: a file name, a row, a column, a path inside JSON.
    pub where_: String,
    /// What is wrong.
    pub what: String,
    /// What to do about it.
    pub todo: String,
}

impl Problem {
    /// A problem from its four parts.
    #[must_use]
    pub fn new(
        code: &'static str,
        where_: impl Into<String>,
        what: impl Into<String>,
        todo: impl Into<String>,
    ) -> Self {
        Self { code, where_: where_.into(), what: what.into(), todo: todo.into() }
    }
}

impl fmt::Display for Problem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {} {} [{}]", self.where_, self.what, self.todo, self.code)
    }
}

impl std::error::Error for Problem {}
