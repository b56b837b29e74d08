//! Taste: theme and folders, in an own small file; never part of a session.

use egui::Theme;

/// Preferences of the person at the desk.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Preferences {
    /// Light or dark.
    pub theme: Theme,
}

impl Default for Preferences {
    fn default() -> Self {
        Self { theme: Theme::Light }
    }
}
