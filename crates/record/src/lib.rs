//! From a file to a session and a page: import, facts, the session document, presentation.

pub mod facts_file;
pub mod identity;
pub mod import;
pub mod json;
pub mod problem;
pub mod provenance;

pub use problem::Problem;
