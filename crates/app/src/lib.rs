//! placeholder
pub mod describe;
pub mod headless;
pub mod picture;
