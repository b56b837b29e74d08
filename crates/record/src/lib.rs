//! From a file to a session and a page: import, facts, the session document, presentation.

pub mod import;
pub mod problem;
pub mod provenance;

pub use problem::Problem;
