//! Texts of import.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[];
