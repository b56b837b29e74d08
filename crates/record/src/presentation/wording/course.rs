//! Texts of the O₂-pulse course and the Fick reasoning.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[];
