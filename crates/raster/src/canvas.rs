//! The picture being painted, and a view of somebody else's pixel buffer.

/// A rectangle of whole pixels: `x0..x1` by `y0..y1`, empty where an end does not exceed its start.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PixelRect {
    /// First column.
    pub x0: usize,
    /// First row.
    pub y0: usize,
    /// Column after the last.
    pub x1: usize,
    /// Row after the last.
    pub y1: usize,
}

impl PixelRect {
    /// Whether no pixel lies inside.
    #[must_use]
    pub fn is_empty(self) -> bool {
        self.x0 >= self.x1 || self.y0 >= self.y1
    }

    /// The pixels in both rectangles.
    #[must_use]
    pub fn intersect(self, other: Self) -> Self {
        Self {
            x0: self.x0.max(other.x0),
            y0: self.y0.max(other.y0),
            x1: self.x1.min(other.x1),
            y1: self.y1.min(other.y1),
        }
    }

    /// The smallest rectangle around both.
    #[must_use]
    pub fn union(self, other: Self) -> Self {
        if self.is_empty() {
            return other;
        }
        if other.is_empty() {
            return self;
        }
        Self {
            x0: self.x0.min(other.x0),
            y0: self.y0.min(other.y0),
            x1: self.x1.max(other.x1),
            y1: self.y1.max(other.y1),
        }
    }
}

/// A borrowed pixel buffer, row by row from the top, each pixel premultiplied `0xAARRGGBB`.
///
/// This is also what window systems take, where they ignore the top byte.
pub struct Target<'a> {
    pub(crate) pixels: &'a mut [u32],
    pub(crate) width: usize,
    pub(crate) height: usize,
}

impl<'a> Target<'a> {
    /// A view of `pixels` as `width` × `height`; a buffer too short for that loses its last rows.
    pub fn new(pixels: &'a mut [u32], width: usize, height: usize) -> Self {
        let height = match width {
            0 => 0,
            _ => height.min(pixels.len() / width),
        };
        let length = width * height;
        Self { pixels: &mut pixels[..length], width, height }
    }

    /// Sets the pixels of `area` to one colour, replacing what was there.
    pub fn fill(&mut self, area: PixelRect, colour: egui::Color32) {
        let area = area.intersect(self.bounds());
        if area.is_empty() {
            return;
        }
        let value = crate::blend::pack(colour);
        for row in
            self.pixels[area.y0 * self.width..area.y1 * self.width].chunks_exact_mut(self.width)
        {
            row[area.x0..area.x1].fill(value);
        }
    }

    /// The whole target.
    #[must_use]
    pub fn bounds(&self) -> PixelRect {
        PixelRect { x0: 0, y0: 0, x1: self.width, y1: self.height }
    }
}

/// An owned picture of `width` × `height` pixels.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Canvas {
    width: usize,
    height: usize,
    pixels: Vec<u32>,
}

impl Canvas {
    /// A picture filled with one colour.
    #[must_use]
    pub fn new(width: usize, height: usize, background: egui::Color32) -> Self {
        Self { width, height, pixels: vec![crate::blend::pack(background); width * height] }
    }

    /// Width in pixels.
    #[must_use]
    pub fn width(&self) -> usize {
        self.width
    }

    /// Height in pixels.
    #[must_use]
    pub fn height(&self) -> usize {
        self.height
    }

    /// The pixels as `0xAARRGGBB`, row by row from the top.
    #[must_use]
    pub fn pixels(&self) -> &[u32] {
        &self.pixels
    }

    /// Red, green, blue, alpha of one pixel; `None` outside.
    #[must_use]
    pub fn pixel(&self, x: usize, y: usize) -> Option<[u8; 4]> {
        if x >= self.width {
            return None;
        }
        let [a, r, g, b] = self.pixels.get(y * self.width + x)?.to_be_bytes();
        Some([r, g, b, a])
    }

    /// Replaces one pixel; outside nothing happens.
    pub fn set(&mut self, x: usize, y: usize, colour: egui::Color32) {
        if x < self.width
            && let Some(pixel) = self.pixels.get_mut(y * self.width + x)
        {
            *pixel = crate::blend::pack(colour);
        }
    }

    /// Bytes in the order red, green, blue, alpha, as image files want them.
    #[must_use]
    pub fn to_rgba(&self) -> Vec<u8> {
        let mut bytes = Vec::with_capacity(self.pixels.len() * 4);
        for pixel in &self.pixels {
            let [a, r, g, b] = pixel.to_be_bytes();
            bytes.extend_from_slice(&[r, g, b, a]);
        }
        bytes
    }

    /// The picture as a place to paint on.
    pub fn target(&mut self) -> Target<'_> {
        Target::new(&mut self.pixels, self.width, self.height)
    }
}
