//! What the program says before, or without, a window: sentences of the shells and of the
//! command line, each whole, so that they can be translated.

/// Nothing to show a window on.
pub const NO_DISPLAY: &str = "No graphical session was found, so no window can be shown.";

/// The display is named but does not answer.
pub fn display_does_not_answer(reason: &str) -> String {
    format!("The display does not answer, so no window can be shown ({reason}).")
}

/// A system library that the window needs is not installed.
pub fn missing_library(library: &str, debian: &str, fedora: &str) -> String {
    format!(
        "The system library {library} is missing, so no window can be shown; it comes with the \
         package {debian} (Debian, Ubuntu) or {fedora} (Fedora)."
    )
}

/// The window system refused for a reason of its own.
pub fn no_window(reason: &str) -> String {
    format!("No window can be shown ({reason}).")
}

/// The graphics card path failed; the other one follows.
pub fn no_gpu(reason: &str) -> String {
    format!("The graphics card cannot be used ({reason}); starting again without it.")
}

/// A bug: place and version, nothing about the test that was open.
pub fn bug(version: &str, place: &str) -> String {
    format!(
        "rampcrest {version}: internal error at {place}. This is a bug in the program; the files \
         that were open have not been changed."
    )
}
