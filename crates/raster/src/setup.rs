//! From egui's corners in points to corners in whole sub-pixels.

use egui::epaint::Vertex;

/// Sub-pixel steps per pixel and axis, as on common graphics hardware.
pub const SUB: i64 = 256;
/// Coordinates beyond this many pixels go through the guard border first.
pub const GUARD: f64 = 1_048_576.0;

/// A corner in sub-pixels, with its colour and texture coordinates.
#[derive(Clone, Copy, Debug)]
pub struct Corner {
    pub x: i64,
    pub y: i64,
    /// Premultiplied `0xAARRGGBB`.
    pub colour: u32,
    /// Texture coordinates in 0..=1.
    pub uv: [f32; 2],
}

impl Corner {
    /// `None` where a coordinate is no number or lies outside the guard border.
    #[inline]
    pub fn new(vertex: &Vertex, pixels_per_point: f32) -> Option<Self> {
        let x = f64::from(vertex.pos.x * pixels_per_point);
        let y = f64::from(vertex.pos.y * pixels_per_point);
        // A comparison with NaN is false.
        let inside = x.abs() <= GUARD && y.abs() <= GUARD;
        inside.then(|| Self {
            x: sub_pixels(x),
            y: sub_pixels(y),
            colour: crate::blend::pack(vertex.color),
            uv: [vertex.uv.x, vertex.uv.y],
        })
    }
}

/// Pixels to the nearest sub-pixel, halves up; `|pixels| <= GUARD`.
#[inline]
pub fn sub_pixels(pixels: f64) -> i64 {
    const SHIFT: i64 = 1 << 30;
    (pixels * SUB as f64 + (SHIFT as f64 + 0.5)) as i64 - SHIFT
}

/// First pixel whose centre is at or right of (below) the sub-pixel coordinate `s`.
#[inline]
pub fn first_centre(s: i64) -> i64 {
    (s + SUB / 2 - 1) >> 8
}
