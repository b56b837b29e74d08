//! Seeded physiological generator with known truth: demo tests and calibration only.
//!
//! No patient is in it. A [`Plan`](plan::Plan) states the true physiology; [`test::generate`]
//! returns what a laboratory would have recorded and the [`test::Truth`] behind it. Nothing in the
//! pipeline calls this module.

pub mod breathing;
pub mod course_sim;
pub mod demo;
pub mod mean;
pub mod plan;
pub mod population;
pub mod rng;
pub mod test;
