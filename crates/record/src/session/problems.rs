//! What can go wrong with a session, in words.

use crate::problem::Problem;

/// The embedded file cannot be used.
pub(crate) fn source(what: impl Into<String>) -> Problem {
    Problem::new("session-source", "source", what, "Import the original table again.")
}

/// The file is larger than a session embeds.
pub(crate) fn too_large(size: usize, limit: usize) -> Problem {
    let mib = |n: usize| n as f64 / f64::from(1 << 20);
    Problem::new(
        "session-too-large",
        "the file",
        format!("{:.1} MiB; a session embeds at most {:.0} MiB.", mib(size), mib(limit)),
        "Leave out what is not part of the test, or export breaths instead of raw signals.",
    )
}

/// The session file cannot be read.
pub(crate) fn file(where_: impl Into<String>, what: impl Into<String>) -> Problem {
    Problem::new(
        "session-not-readable",
        where_,
        what,
        "Open the last copy that was saved whole, or import the original table again.",
    )
}

/// An edit cannot be carried out.
pub(crate) fn edit(code: &'static str, what: impl Into<String>, todo: &'static str) -> Problem {
    Problem::new(code, "the edit", what, todo)
}

/// The session is signed.
pub(crate) fn signed() -> Problem {
    edit(
        "session-signed",
        "The session is signed and cannot be changed.",
        "Start a new version that names this one.",
    )
}

/// A list of edits cannot be read.
pub(crate) fn edits(where_: impl Into<String>, what: impl Into<String>) -> Problem {
    Problem::new(
        "edits-not-readable",
        where_,
        what,
        "Correct the list of edits; nothing was written.",
    )
}

/// Nothing could be written at `where_`.
pub(crate) fn cannot_write(where_: impl Into<String>, what: impl Into<String>) -> Problem {
    Problem::new(
        "cannot-write",
        where_,
        what,
        "Choose another place or make room; what is open is not lost.",
    )
}
