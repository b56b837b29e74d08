//! From egui's corners in points to corners in whole sub-pixels.

use egui::epaint::Vertex;

/// Sub-pixel steps per pixel and axis, as on common graphics hardware.
pub const SUB: i64 = 256;
/// Coordinates beyond this many pixels go through the guard border first.
pub const GUARD: f64 = 1_048_576.0;

/// A place in sub-pixels, at most `GUARD` pixels from the origin on each axis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Point {
    pub x: i64,
    pub y: i64,
}

impl Point {
    /// `None` where a coordinate is no number or lies outside the guard border.
    #[inline]
    pub fn new(vertex: &Vertex, pixels_per_point: f32) -> Option<Self> {
        let x = f64::from(vertex.pos.x * pixels_per_point);
        let y = f64::from(vertex.pos.y * pixels_per_point);
        // A comparison with NaN is false.
        if x.abs() <= GUARD && y.abs() <= GUARD {
            return Some(Self { x: sub_pixels(x), y: sub_pixels(y) });
        }
        None
    }
}

/// What is interpolated between corners.
#[derive(Clone, Copy, Debug)]
pub struct Paint {
    /// Premultiplied `0xAARRGGBB`.
    pub colour: u32,
    /// Texture coordinates in 0..=1.
    pub uv: [f32; 2],
}

impl Paint {
    #[inline]
    pub fn new(vertex: &Vertex) -> Self {
        Self { colour: crate::blend::pack(vertex.color), uv: [vertex.uv.x, vertex.uv.y] }
    }
}

/// Pixels to the nearest sub-pixel; `|pixels| <= GUARD`.
#[inline]
pub fn sub_pixels(pixels: f64) -> i64 {
    i64::from(round(pixels * SUB as f64))
}

/// The nearest whole number, halves to even, for `|x| < 2^31`: adding 1.5 · 2^52 leaves it in the
/// low bits of the sum, by the rounding of the addition itself. The same on every machine, and
/// without the branches of a cast.
#[inline]
pub fn round(x: f64) -> i32 {
    const SHIFT: f64 = 6_755_399_441_055_744.0;
    (x + SHIFT).to_bits() as i32
}

/// First pixel whose centre is at or right of (below) the sub-pixel coordinate `s`.
#[inline]
pub fn first_centre(s: i64) -> i64 {
    s.wrapping_add(SUB / 2 - 1) >> 8
}
