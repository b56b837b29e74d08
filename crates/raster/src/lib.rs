//! A CPU rasteriser for the meshes that egui emits, in safe Rust.
//!
//! egui tessellates everything it draws into triangles with one colour per corner, and does its
//! own anti-aliasing by fading a one-pixel border of each shape to transparent. What remains for
//! a renderer is small: find the pixels whose centre lies in a triangle, interpolate colour and
//! texture there, and blend premultiplied colours in gamma space. That is all this crate does,
//! with the same rules as a graphics card (256 sub-pixel steps, top-left fill rule, pixel
//! centres), so that a picture is the same wherever it is made.
//!
//! Reading order: [`Rasteriser::paint`] → `band` (one horizontal strip of the target) → `setup`
//! (corners to sub-pixels) → `triangle` (spans) → `shade` (one row of one span) → `blend`.
//! Axis-aligned rectangles and glyphs leave that road early, in `quad`. A window that shows almost
//! the same again asks `changes` what has to be painted at all.
//!
//! Every coordinate is allowed: corners that are not numbers drop their triangle, and far-away
//! ones are cut at a guard border. Nothing here panics on what egui can be made to emit.

mod band;
mod blend;
mod canvas;
mod changes;
mod guard;
mod paint;
mod quad;
mod setup;
mod shade;
mod texture;
mod triangle;

#[cfg(test)]
mod tests;

pub use canvas::{Canvas, PixelRect, Target};
pub use changes::Tiles;
pub use paint::{Frame, Rasteriser};
