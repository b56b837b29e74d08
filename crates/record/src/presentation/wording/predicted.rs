//! Texts of predicted values, the overlay and published classes.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[];
