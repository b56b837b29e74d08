//! The course of the O₂ pulse over the ramp.

mod detail;

use crate::stage::Stage;

pub use detail::{Bin, Course, CourseDetail, CourseNumbers, CurvePoint, Estimate, Line, Onset};

/// Derives the O₂-pulse course and magnitude outcomes.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
