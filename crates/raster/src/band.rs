//! One horizontal strip of the target: everything that touches it, in painting order.

use egui::Rect;
use egui::epaint::{Mesh, Primitive, Vertex};

use crate::blend::{modulate, pack};
use crate::canvas::PixelRect;
use crate::guard;
use crate::paint::Frame;
use crate::quad::Quad;
use crate::setup::Corner;
use crate::shade::{Gradient, Textured, solid};
use crate::texture::{Texture, Textures};
use crate::triangle::Triangle;

/// A strip of rows starting at `top`.
pub struct Band<'a> {
    pub pixels: &'a mut [u32],
    /// Pixels per row.
    pub width: usize,
    /// Row of the target that `pixels` starts with.
    pub top: usize,
    /// The part of the strip that may change.
    pub damage: PixelRect,
}

/// What all triangles of one mesh share.
struct Job<'a> {
    mesh: &'a Mesh,
    texture: &'a Texture,
    clip: PixelRect,
    scale: f32,
    /// The strip in points, with a pixel to spare, to skip triangles of other strips early.
    reach: (f32, f32),
}

impl Band<'_> {
    /// Paints all primitives, in order.
    pub fn paint(&mut self, frame: &Frame<'_>, textures: &Textures) {
        if let Some(colour) = frame.background {
            self.clear(pack(colour));
        }
        let scale = frame.pixels_per_point;
        if !scale.is_finite() || scale <= 0.0 {
            return;
        }
        for primitive in frame.primitives {
            let Primitive::Mesh(mesh) = &primitive.primitive else {
                continue; // a callback into a graphics card: there is none
            };
            let clip = pixel_rect(primitive.clip_rect, scale).intersect(self.damage);
            let Some(texture) = textures.get(mesh.texture_id) else {
                continue;
            };
            if clip.is_empty() {
                continue;
            }
            let reach = ((clip.y0 as f32 - 1.0) / scale, (clip.y1 as f32 + 1.0) / scale);
            self.mesh(&Job { mesh, texture, clip, scale, reach });
        }
    }

    fn clear(&mut self, colour: u32) {
        for row in self.pixels.chunks_exact_mut(self.width) {
            row[self.damage.x0..self.damage.x1].fill(colour);
        }
    }

    fn mesh(&mut self, job: &Job<'_>) {
        let mut rest = job.mesh.indices.as_slice();
        while let [a, b, c, tail @ ..] = rest {
            rest = tail;
            let vertices = &job.mesh.vertices;
            let (Some(va), Some(vb), Some(vc)) =
                (vertices.get(*a as usize), vertices.get(*b as usize), vertices.get(*c as usize))
            else {
                continue;
            };
            if let [c2, b2, d, after @ ..] = tail
                && (c2, b2) == (c, b)
                && let Some(vd) = vertices.get(*d as usize)
                && self.quad([va, vb, vc, vd], job)
            {
                rest = after;
                continue;
            }
            let (low, high) = job.reach;
            let [ya, yb, yc] = [va.pos.y, vb.pos.y, vc.pos.y];
            if (ya < low && yb < low && yc < low) || (ya > high && yb > high && yc > high) {
                continue;
            }
            self.corners([va, vb, vc], job);
        }
    }

    /// Paints two triangles at once if they form a plain rectangle or a glyph.
    #[inline]
    fn quad(&mut self, vertices: [&Vertex; 4], job: &Job<'_>) -> bool {
        // Cheap refusal first: most pairs of triangles are pieces of lines.
        let [a, b, c, d] = vertices;
        if a.pos.y != b.pos.y || a.pos.x != c.pos.x || b.pos.x != d.pos.x || c.pos.y != d.pos.y {
            return false;
        }
        if c.pos.y < job.reach.0 || a.pos.y > job.reach.1 {
            return a.pos.y <= c.pos.y;
        }
        let [Some(a), Some(b), Some(c), Some(d)] = vertices.map(|v| Corner::new(v, job.scale))
        else {
            return false;
        };
        let Some(quad) = Quad::new([a, b, c, d]) else {
            return false;
        };
        if quad.is_plain() {
            let texel = plain_texel(job.texture, a.uv);
            let colour = modulate(quad.colour, texel);
            quad.fill(job.clip, colour, self.pixels, self.width, self.top);
            return true;
        }
        let Some(offset) = quad.texels(job.texture) else {
            return false;
        };
        let rows = (&mut *self.pixels, self.width, self.top);
        quad.blit(job.clip, job.texture, offset, rows);
        true
    }

    #[inline]
    fn corners(&mut self, vertices: [&Vertex; 3], job: &Job<'_>) {
        if let [Some(a), Some(b), Some(c)] = vertices.map(|v| Corner::new(v, job.scale)) {
            self.triangle([a, b, c], job);
            return;
        }
        let fan = guard::cut(vertices, job.scale);
        for pair in fan.get(1..).unwrap_or_default().windows(2) {
            self.triangle([fan[0], pair[0], pair[1]], job);
        }
    }

    #[inline]
    fn triangle(&mut self, mut corners: [Corner; 3], job: &Job<'_>) {
        let [a, b, c] = corners;
        let plain = a.uv == b.uv && a.uv == c.uv;
        if plain {
            if a.colour | b.colour | c.colour == 0 {
                return;
            }
            let texel = plain_texel(job.texture, a.uv);
            for corner in &mut corners {
                corner.colour = modulate(corner.colour, texel);
            }
        }
        let Some(triangle) = Triangle::new(corners, job.clip) else {
            return;
        };
        let [a, b, c] = triangle.corners;
        let (width, top) = (self.width, self.top);
        let row = |y: usize, x0: usize, x1: usize| {
            let start = (y - top) * width;
            start + x0..start + x1
        };
        let pixels = &mut *self.pixels;
        if !plain {
            let shade = Textured::new(&triangle, job.texture);
            triangle.spans(|span| shade.paint(&mut pixels[row(span.y, span.x0, span.x1)], &span));
        } else if a.colour == b.colour && a.colour == c.colour {
            triangle.spans(|span| solid(&mut pixels[row(span.y, span.x0, span.x1)], a.colour));
        } else {
            let shade = Gradient::new(&triangle);
            triangle.spans(|span| shade.paint(&mut pixels[row(span.y, span.x0, span.x1)], &span));
        }
    }
}

/// The texel of a shape without picture; egui keeps a white one at the origin.
#[inline]
fn plain_texel(texture: &Texture, uv: [f32; 2]) -> u32 {
    if uv == [0.0, 0.0] {
        return texture.row(0, 0, 1).map_or(0, |texels| texels[0]);
    }
    let size = [texture.width as f64, texture.height as f64];
    texture.sample(f64::from(uv[0]) * size[0], f64::from(uv[1]) * size[1])
}

/// A rectangle in points to the pixels it covers, rounded as egui's own renderers round.
fn pixel_rect(rect: Rect, scale: f32) -> PixelRect {
    // The cast of a negative number or NaN gives 0, of a huge one the largest value.
    let edge = |x: f32| (x * scale).round() as usize;
    PixelRect {
        x0: edge(rect.min.x),
        y0: edge(rect.min.y),
        x1: edge(rect.max.x),
        y1: edge(rect.max.y),
    }
}
