//! Two short cuts: rectangles of one colour, and glyphs whose texels fall on pixels one to one.

use crate::blend::{modulate, over};
use crate::canvas::PixelRect;
use crate::setup::{Corner, first_centre};
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
    #[inline]
    pub fn new([a, b, c, d]: [Corner; 4]) -> Option<Self> {
        let aligned =
            a.x == c.x && b.x == d.x && a.y == b.y && c.y == d.y && a.x < b.x && a.y < c.y;
        let same = a.colour == b.colour && a.colour == c.colour && a.colour == d.colour;
        let mapped =
            a.uv[0] == c.uv[0] && b.uv[0] == d.uv[0] && a.uv[1] == b.uv[1] && c.uv[1] == d.uv[1];
        (aligned && same && mapped).then_some(Self {
            edges: [a.x, a.y, d.x, d.y],
            uv: [a.uv, d.uv],
            colour: a.colour,
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

    /// Paints one colour; `rows` yields the pixels of a row.
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
