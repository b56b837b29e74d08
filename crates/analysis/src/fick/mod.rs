//! Stroke volume and extraction: what the O₂ pulse allows to be said.

mod detail;

use crate::stage::Stage;

pub use detail::{
    Bound, FactorRow, FactorTable, FickDetail, Model, Path, PathPoint, Ranged, RatePoint, Region,
    ShuntStep, equal_pulse_sv,
};

/// Derives the Fick outcomes; runs after the course and the predictions.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
