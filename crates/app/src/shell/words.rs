//! The sentences of the shells, out of the catalogue.

use record::presentation::wording::{plain_text, with};

/// Nothing to show a window on.
#[must_use]
pub fn no_display() -> String {
    plain_text("start-no-display")
}

/// The display is named but does not answer.
#[must_use]
pub fn display_does_not_answer(reason: &str) -> String {
    with("start-display-silent", &[("reason", reason.to_owned())])
}

/// A system library that the window needs is not installed.
#[must_use]
pub fn missing_library(library: &str, debian: &str, fedora: &str) -> String {
    let args = [("library", library), ("debian", debian), ("fedora", fedora)];
    with("start-library-missing", &args.map(|(name, text)| (name, text.to_owned())))
}

/// The window system refused for a reason of its own.
#[must_use]
pub fn no_window(reason: &str) -> String {
    with("start-no-window", &[("reason", reason.to_owned())])
}

/// The graphics card path failed; the other one follows.
#[must_use]
pub fn no_gpu(reason: &str) -> String {
    with("start-no-gpu", &[("reason", reason.to_owned())])
}

/// What was done instead of showing a window.
#[must_use]
pub fn derived_instead(reason: &str, folder: &str) -> String {
    with("start-derived-instead", &[("reason", reason.to_owned()), ("folder", folder.to_owned())])
}

/// A bug: place and version, nothing about the test that was open.
#[must_use]
pub fn bug(version: &str, place: &str) -> String {
    with("start-bug", &[("version", version.to_owned()), ("place", place.to_owned())])
}
