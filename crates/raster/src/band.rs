//! One horizontal strip of the target: everything that touches it, in painting order.

use egui::epaint::{Mesh, Primitive, Vertex};
use egui::{ClippedPrimitive, Rect};

use crate::blend::{modulate, pack};
use crate::canvas::PixelRect;
use crate::guard;
use crate::paint::Frame;
use crate::quad::Quad;
use crate::setup::{Paint, Point};
use crate::shade::{Gradient, Textured, solid};
use crate::texture::{Texture, Textures};
use crate::triangle::{Span, Triangle};

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

/// The place of a piece of a mesh, in points: left, top, right, bottom.
type Place = [f32; 4];

/// What all triangles of one mesh share.
struct Job<'a> {
    mesh: &'a Mesh,
    texture: &'a Texture,
    /// The texel of shapes without a picture; egui keeps a white one at the origin.
    plain: u32,
    clip: PixelRect,
    scale: f32,
}

impl Band<'_> {
    /// Paints all primitives, in order. `reaches` are those of [`Reach::of`].
    pub fn paint(&mut self, frame: &Frame<'_>, reaches: &[Reach], textures: &Textures) {
        if let Some(colour) = frame.background {
            self.clear(pack(colour));
        }
        let scale = frame.pixels_per_point;
        if !scale.is_finite() || scale <= 0.0 {
            return;
        }
        for (primitive, reach) in frame.primitives.iter().zip(reaches) {
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
            let plain = texture.row(0, 0, 1).map_or(0, |texels| texels[0]);
            self.mesh(&Job { mesh, texture, plain, clip, scale }, reach);
        }
    }

    fn clear(&mut self, colour: u32) {
        let rows =
            (self.damage.y0 - self.top) * self.width..(self.damage.y1 - self.top) * self.width;
        for row in self.pixels[rows].chunks_exact_mut(self.width) {
            row[self.damage.x0..self.damage.x1].fill(colour);
        }
    }

    fn mesh(&mut self, job: &Job<'_>, reach: &Reach) {
        // In points, with a pixel to spare.
        let [left, top] = [job.clip.x0, job.clip.y0].map(|edge| (edge as f32 - 1.0) / job.scale);
        let [right, bottom] = [job.clip.x1, job.clip.y1].map(|e| (e as f32 + 1.0) / job.scale);
        for (indices, [x0, y0, x1, y1]) in job.mesh.indices.chunks(PIECE).zip(&reach.0) {
            if *y1 >= top && *y0 <= bottom && *x1 >= left && *x0 <= right {
                self.piece(job, indices);
            }
        }
    }

    fn piece(&mut self, job: &Job<'_>, mut rest: &[u32]) {
        let vertices = job.mesh.vertices.as_slice();
        let at = |index: u32| vertices.get(index as usize);
        while let [a, b, c, tail @ ..] = rest {
            rest = tail;
            let (Some(va), Some(vb), Some(vc)) = (at(*a), at(*b), at(*c)) else {
                continue;
            };
            if let [c2, b2, d, after @ ..] = tail
                && (c2, b2) == (c, b)
                // Cheap refusal first: most pairs of triangles are pieces of lines.
                && va.pos.y == vb.pos.y
                && va.pos.x == vc.pos.x
                && let Some(vd) = at(*d)
                && vb.pos.x == vd.pos.x
                && vc.pos.y == vd.pos.y
                && self.quad([va, vb, vc, vd], job)
            {
                rest = after;
                continue;
            }
            self.corners([va, vb, vc], job);
        }
    }

    /// Paints two triangles at once if they form a plain rectangle or a glyph.
    fn quad(&mut self, vertices: [&Vertex; 4], job: &Job<'_>) -> bool {
        let Some(quad) = Quad::new(vertices, job.scale) else {
            return false;
        };
        if quad.is_plain() {
            let colour = modulate(quad.colour, job.texel(vertices[0].uv.into()));
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
    fn corners(&mut self, [a, b, c]: [&Vertex; 3], job: &Job<'_>) {
        let scale = job.scale;
        if let (Some(pa), Some(pb), Some(pc)) =
            (Point::new(a, scale), Point::new(b, scale), Point::new(c, scale))
        {
            if let Some(triangle) = Triangle::new([pa, pb, pc], job.clip) {
                self.triangle(&triangle, [Paint::new(a), Paint::new(b), Paint::new(c)], job);
            }
            return;
        }
        let fan = guard::cut([a, b, c], scale);
        for pair in fan.get(1..).unwrap_or_default().windows(2) {
            let [(pa, a), (pb, b), (pc, c)] = [fan[0], pair[0], pair[1]];
            if let Some(triangle) = Triangle::new([pa, pb, pc], job.clip) {
                self.triangle(&triangle, [a, b, c], job);
            }
        }
    }

    #[inline]
    fn triangle(&mut self, triangle: &Triangle, mut paints: [Paint; 3], job: &Job<'_>) {
        if triangle.flipped {
            paints.swap(1, 2);
        }
        let [a, b, c] = paints;
        let (width, top) = (self.width, self.top);
        let pixels = &mut *self.pixels;
        let row = |span: &Span| {
            let start = (span.y - top) * width;
            start + span.x0..start + span.x1
        };
        if a.uv != b.uv || a.uv != c.uv {
            let shade = Textured::new(triangle, paints, job.texture);
            triangle.spans(|span| shade.paint(&mut pixels[row(&span)], &span));
            return;
        }
        let mut colours = [a.colour, b.colour, c.colour];
        if colours == [0; 3] {
            return;
        }
        let texel = job.texel(a.uv);
        if texel != WHITE {
            colours = colours.map(|colour| modulate(colour, texel));
        }
        if colours[0] == colours[1] && colours[0] == colours[2] {
            triangle.spans(|span| solid(&mut pixels[row(&span)], colours[0]));
        } else {
            let shade = Gradient::new(triangle, colours);
            triangle.spans(|span| shade.paint(&mut pixels[row(&span)], &span));
        }
    }
}

const WHITE: u32 = u32::MAX;

impl Job<'_> {
    /// The one texel of a shape that shows no picture.
    #[inline]
    fn texel(&self, uv: [f32; 2]) -> u32 {
        if uv == [0.0, 0.0] {
            return self.plain;
        }
        let size = [self.texture.width as f64, self.texture.height as f64];
        self.texture.sample(f64::from(uv[0]) * size[0], f64::from(uv[1]) * size[1])
    }
}

/// Indices per piece of a mesh: 32 triangles, an even number so that pairs stay together.
const PIECE: usize = 96;

/// The place of each piece of a mesh: strips skip pieces that do not touch them.
/// Not-a-number is left out, because it drops its triangle.
#[derive(Default)]
pub struct Reach(Vec<Place>);

impl Reach {
    /// Looks at every corner of `primitive` once.
    pub fn of(primitive: &ClippedPrimitive) -> Self {
        let Primitive::Mesh(mesh) = &primitive.primitive else {
            return Self::default();
        };
        let pieces = mesh.indices.chunks(PIECE).map(|indices| {
            let mut place = [f32::INFINITY, f32::INFINITY, f32::NEG_INFINITY, f32::NEG_INFINITY];
            for index in indices {
                if let Some(vertex) = mesh.vertices.get(*index as usize) {
                    place[0] = place[0].min(vertex.pos.x);
                    place[1] = place[1].min(vertex.pos.y);
                    place[2] = place[2].max(vertex.pos.x);
                    place[3] = place[3].max(vertex.pos.y);
                }
            }
            place
        });
        Self(pieces.collect())
    }
}

/// A rectangle in points to the pixels it covers, rounded as egui's own renderers round.
pub fn pixel_rect(rect: Rect, scale: f32) -> PixelRect {
    // The cast of a negative number or NaN gives 0, of a huge one the largest value.
    let edge = |x: f32| (x * scale).round() as usize;
    PixelRect {
        x0: edge(rect.min.x),
        y0: edge(rect.min.y),
        x1: edge(rect.max.x),
        y1: edge(rect.max.y),
    }
}
