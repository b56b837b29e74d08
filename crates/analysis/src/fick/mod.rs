//! Stroke volume and extraction: what the O₂ pulse allows to be said.

use crate::stage::Stage;

/// Chart data of the Fick reasoning.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct FickDetail {}

/// Derives the Fick outcomes; runs after the course and the predictions.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
