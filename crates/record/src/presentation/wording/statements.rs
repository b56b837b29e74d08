//! Texts of drafted statements and their evidence.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[];
