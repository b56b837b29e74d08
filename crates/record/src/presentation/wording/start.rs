//! Texts of the program before, or without, a window.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[
    ("start-no-display", "No graphical session was found, so no window can be shown."),
    ("start-display-silent", "The display does not answer, so no window can be shown ({reason})."),
    (
        "start-library-missing",
        "The system library {library} is missing, so no window can be shown; it comes with the package {debian} (Debian, Ubuntu) or {fedora} (Fedora).",
    ),
    ("start-no-window", "No window can be shown ({reason})."),
    ("start-no-gpu", "The graphics card cannot be used ({reason}); starting again without it."),
    ("start-derived-instead", "{reason} The demonstration test was derived into {folder} instead."),
    (
        "start-bug",
        "rampcrest {version}: internal error at {place}. This is a bug in the program; the files that were open have not been changed.",
    ),
];
