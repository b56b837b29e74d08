//! Acceptance checks: from the file to the screen to the page, published values, architecture.
//!
//! The checks themselves are in `tests/` and `outside/`.
