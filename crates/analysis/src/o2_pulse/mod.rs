//! The course of the O₂ pulse over the ramp.

use crate::stage::Stage;

/// Chart data of the course.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct CourseDetail {}

/// Derives the O₂-pulse course and magnitude outcomes.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
