//! From a file to a session and a page: import, facts, the session document, presentation.

pub mod clock;
pub mod facts_file;
pub mod identity;
pub mod import;
pub mod json;
pub mod page;
pub mod predicted_sets;
pub mod presentation;
pub mod problem;
pub mod provenance;
pub mod results_json;
pub mod session;

pub use problem::Problem;
