//! Two short cuts: rectangles of one colour, and glyphs whose texels fall on pixels one to one.

use egui::epaint::Vertex;

use crate::blend::{modulate, over, pack};
use crate::canvas::PixelRect;
use crate::setup::{Point, first_centre};
use crate::shade::solid;
use crate::texture::Texture;

/// An axis-aligned rectangle of one colour, made of the triangles (a, b, c) and (c, b, d).
pub struct Quad {
    /// Left, top, right, bottom in sub-pixels.
    edges: [i64; 4],
    /// Texture coordinates at left top and right bottom.
    uv: [[f32; 2]; 2],
    pub colour: u32,
}

impl Quad {
    /// Recognises egui's rectangles and glyphs: left top, right top, left bottom, right bottom.
    /// The caller has seen that the sides run along the axes.
    #[inline]
    pub fn new(corners: [&Vertex; 4], pixels_per_point: f32) -> Option<Self> {
        let [a, b, c, d] = corners;
        let same = a.color == b.color && a.color == c.color && a.color == d.color;
        let mapped = a.uv.x == c.uv.x && b.uv.x == d.uv.x && a.uv.y == b.uv.y && c.uv.y == d.uv.y;
        if !same || !mapped {
            return None;
        }
        let from = Point::new(a, pixels_per_point)?;
        let to = Point::new(d, pixels_per_point)?;
        (from.x < to.x && from.y < to.y).then(|| Self {
            edges: [from.x, from.y, to.x, to.y],
            uv: [[a.uv.x, a.uv.y], [d.uv.x, d.uv.y]],
            colour: pack(a.color),
        })
    }

    /// The pixels whose centres lie inside, cut to `clip`.
    #[inline]
    fn pixels(&self, clip: PixelRect) -> PixelRect {
        let [x0, y0, x1, y1] = self.edges.map(|s| first_centre(s).max(0) as usize);
        PixelRect { x0, y0, x1, y1 }.intersect(clip)
    }

    /// Whether the texture has the same colour all over the rectangle.
    #[inline]
    pub fn is_plain(&self) -> bool {
        self.uv[0] == self.uv[1]
    }

    /// Paints one colour; `pixels` starts with row `top`.
    #[inline]
    pub fn fill(&self, clip: PixelRect, colour: u32, pixels: &mut [u32], width: usize, top: usize) {
        let area = self.pixels(clip);
        if area.is_empty() {
            return;
        }
        for y in area.y0..area.y1 {
            let start = (y - top) * width;
            solid(&mut pixels[start + area.x0..start + area.x1], colour);
        }
    }

    /// Left top texel, if each pixel of the rectangle shows exactly one texel.
    #[inline]
    pub fn texels(&self, texture: &Texture) -> Option<[i64; 2]> {
        // Sixteenths of a texel absorb what normalising the coordinates to 0..=1 costs.
        const SIXTEENTH: f64 = 0.0625;
        let size = [texture.width as f64, texture.height as f64];
        let mut origin = [0; 2];
        for axis in 0..2 {
            let pixels = (self.edges[axis] as f64, self.edges[axis + 2] as f64);
            let from = f64::from(self.uv[0][axis]) * size[axis];
            let to = f64::from(self.uv[1][axis]) * size[axis];
            let whole = (from + 0.5) as i64;
            let length = (pixels.1 - pixels.0) / 256.0;
            let on_texel = (from - whole as f64).abs() < SIXTEENTH;
            let on_pixel = self.edges[axis] & 255 == 0 && self.edges[axis + 2] & 255 == 0;
            if !on_texel || !on_pixel || (to - from - length).abs() >= SIXTEENTH {
                return None;
            }
            origin[axis] = whole - (self.edges[axis] >> 8);
        }
        Some(origin)
    }

    /// Copies texels times colour; `offset` is texel minus pixel.
    #[inline]
    pub fn blit(
        &self,
        clip: PixelRect,
        texture: &Texture,
        offset: [i64; 2],
        rows: (&mut [u32], usize, usize),
    ) {
        let (pixels, width, top) = rows;
        let area = self.pixels(clip);
        if area.is_empty() {
            return;
        }
        let [dx, dy] = offset;
        for y in area.y0..area.y1 {
            let (u0, u1) = (area.x0 as i64 + dx, area.x1 as i64 + dx);
            let v = y as i64 + dy;
            if u0 < 0 || v < 0 {
                continue;
            }
            let Some(texels) = texture.row(v as usize, u0 as usize, u1 as usize) else {
                continue;
            };
            let start = (y - top) * width;
            let row = &mut pixels[start + area.x0..start + area.x1];
            for (pixel, &texel) in row.iter_mut().zip(texels) {
                if texel != 0 {
                    *pixel = over(modulate(self.colour, texel), *pixel);
                }
            }
        }
    }
}
