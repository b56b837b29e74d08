//! How a headless verb ends when it does not succeed: an exit code and one problem.

use record::Problem;
use serde::Serialize;

/// Exit codes of the command line.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
#[repr(u8)]
pub enum Exit {
    /// Done.
    Ok = 0,
    /// The command line was not understood.
    Usage = 2,
    /// A file was refused.
    Refused = 3,
    /// A question is open; the output was written without that column.
    Question = 4,
    /// A signature or digest does not hold.
    NotVerified = 5,
    /// A window was asked for, and there is no display.
    NoDisplay = 6,
    /// The output cannot be written.
    CannotWrite = 7,
}

/// An exit code and its cause.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Failure {
    /// Exit code.
    pub exit: Exit,
    /// What, where, what to do.
    pub problem: Problem,
}

#[derive(Serialize)]
struct Told<'a> {
    problem: Parts<'a>,
}

#[derive(Serialize)]
struct Parts<'a> {
    code: &'a str,
    #[serde(rename = "where")]
    where_: &'a str,
    what: &'a str,
    #[serde(rename = "do")]
    todo: &'a str,
}

impl Failure {
    /// The command line was not understood.
    pub fn usage(what: impl std::fmt::Display) -> Self {
        let todo = "See rampcrest --help.";
        Self::new(Exit::Usage, "usage", "command line", format!("{what}."), todo)
    }

    /// A failure from its parts.
    pub fn new(
        exit: Exit,
        code: &'static str,
        where_: impl Into<String>,
        what: impl Into<String>,
        todo: impl Into<String>,
    ) -> Self {
        Self { exit, problem: Problem::new(code, where_, what, todo) }
    }

    /// A file was refused.
    #[must_use]
    pub fn refused(problem: Problem) -> Self {
        Self { exit: Exit::Refused, problem }
    }

    /// A file cannot be read.
    pub fn unreadable(path: &std::path::Path, error: &std::io::Error) -> Self {
        let todo = "Check the name and whether you may read it.";
        let what = format!("It cannot be read: {error}.");
        Self::new(Exit::Refused, "file-unreadable", path.display().to_string(), what, todo)
    }

    /// A file cannot be written.
    pub fn unwritable(path: &std::path::Path, error: &std::io::Error) -> Self {
        let todo = "Choose another place, or make room there.";
        let what = format!("It cannot be written: {error}.");
        Self::new(Exit::CannotWrite, "file-unwritable", path.display().to_string(), what, todo)
    }

    /// A verb of a later version.
    #[must_use]
    pub fn not_yet(verb: &str) -> Self {
        let what = "This is not available yet.";
        Self::new(Exit::Usage, "not-available", verb, what, "See rampcrest --help.")
    }

    /// The problem as JSON.
    #[must_use]
    pub fn json(&self) -> String {
        let Problem { code, where_, what, todo } = &self.problem;
        let told = Told { problem: Parts { code, where_, what, todo } };
        serde_json::to_string(&told).unwrap_or_default()
    }
}
