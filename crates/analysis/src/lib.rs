//! The engine: from a recording and the reader's judgement to every number of the report.
//!
//! Pure by construction: no file, clock, environment, thread, randomness from outside, hash map or
//! serialisation. Start at [`analyse::derive`].

pub mod analyse;
mod averaging;
pub mod breaths;
mod clean;
pub mod decisions;
mod effort;
mod errant;
pub mod facts;
pub mod fick;
pub mod filters;
pub mod gas;
#[cfg(test)]
mod golden;
mod hinge;
mod irregularity;
mod long_run;
pub mod methods;
pub mod model;
pub mod note;
pub mod o2_pulse;
pub mod oscillation;
mod peak;
mod peak_interval;
mod phases;
pub mod predicted;
mod protocol;
pub mod quality;
pub mod quantity;
mod ramp_series;
pub mod reasoning;
pub mod recording;
mod recovery;
pub mod regression;
mod repeatability;
mod reserve;
mod response_time;
pub mod results;
pub mod robust;
mod samples;
pub mod settings;
pub mod slopes;
mod smooth;
mod stage;
pub mod table;
pub mod thresholds;
pub mod two_segments;
pub mod unit;

pub use analyse::derive;
