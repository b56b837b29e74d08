//! The engine: from a recording and the reader's judgement to every number of the report.
//!
//! Pure by construction: no file, clock, environment, thread, randomness from outside, hash map or
//! serialisation. Start at [`analyse::derive`].

pub mod analyse;
mod averaging;
pub mod breaths;
mod clean;
pub mod decisions;
pub mod facts;
pub mod fick;
pub mod model;
pub mod note;
pub mod o2_pulse;
mod peak;
mod phases;
pub mod predicted;
pub mod quantity;
pub mod reasoning;
pub mod recording;
pub mod results;
pub mod settings;
pub mod slopes;
mod stage;
pub mod table;
pub mod thresholds;
pub mod unit;

pub use analyse::derive;
