//! Texts of the engine: quality, phases, averages, thresholds, slopes, recovery, gases.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[];
