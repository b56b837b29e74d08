//! Checks that need something from outside the repository: open data, a display, a browser.
//!
//! They fail when it is missing; nothing here is skipped.

mod browser;
mod libraries;
mod open_data;
mod real_ramps;
mod renderers;
mod tools;
mod window;
