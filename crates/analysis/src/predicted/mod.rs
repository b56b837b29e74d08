//! Predicted-normal values from published sets, and the model of a normal response.

pub mod overlay;
pub mod sets;

use crate::stage::Stage;

/// Derives `predicted-…` outcomes, the overlay and the published classes.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
