//! Drafted statements and their evidence.

use crate::stage::Stage;

/// Drafts the statements; runs last.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
