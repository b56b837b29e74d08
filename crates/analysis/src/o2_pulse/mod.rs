//! The course of the O₂ pulse over the ramp.

mod bayes;
mod bins;
mod classify;
mod design;
mod detail;
mod fit;
mod linalg;
mod noise;

use crate::stage::Stage;

pub use classify::{
    CourseInput, FEWEST_LATE_BREATHS, LATE_S, LINE_LOWER, LINE_UPPER, SHORTEST_RAMP_S, classify,
    vo2_fell_late,
};
pub use detail::{Bin, Course, CourseDetail, CourseNumbers, CurvePoint, Estimate, Line, Onset};

/// Derives the O₂-pulse course and magnitude outcomes.
pub(crate) fn derive(_stage: &mut Stage<'_>) {}
