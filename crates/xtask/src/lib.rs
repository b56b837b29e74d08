//! The project's own chores, as functions: each verb of `cargo xtask` is one module.

pub mod bench;
pub mod ci;
pub mod demo;
pub mod display;
pub mod drag;
pub mod mutants;
pub mod program;
pub mod race;
pub mod references;
pub mod sheet;
pub mod tidy;

use std::path::PathBuf;

/// The root of the repository.
#[must_use]
pub fn root() -> PathBuf {
    let here = PathBuf::from(env!("CARGO_MANIFEST_DIR"));
    here.ancestors().nth(2).map_or(here.clone(), PathBuf::from)
}
