//! Which parts of a window differ from an earlier frame: every triangle leaves its mark on the
//! tiles it may touch, in painting order, and a tile with the same marks shows the same pixels.

use egui::epaint::{Primitive, Vertex};

use crate::blend::pack;
use crate::canvas::PixelRect;
use crate::paint::Frame;

/// Width and height of a tile, pixels.
const TILE: [usize; 2] = [64, 32];

/// What a frame shows in each tile of a window, as one number per tile.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Tiles {
    size: [usize; 2],
    columns: usize,
    sums: Vec<u64>,
}

impl Tiles {
    /// The marks of `frame` on a target of `size`; `textures` changes whenever what was sent
    /// before no longer looks the same.
    pub(crate) fn of(frame: &Frame<'_>, size: [usize; 2], textures: u64) -> Self {
        let [columns, rows] = [0, 1].map(|axis| size[axis].div_ceil(TILE[axis]));
        let background = frame.background.map_or(0, |colour| 1 << 32 | u64::from(pack(colour)));
        let scale = u64::from(frame.pixels_per_point.to_bits());
        let start = [background, scale].into_iter().fold(textures, mixed);
        let mut tiles = Self { size, columns, sums: vec![start; columns * rows] };
        for primitive in frame.primitives {
            let Primitive::Mesh(mesh) = &primitive.primitive else {
                continue;
            };
            let clip = crate::band::pixel_rect(primitive.clip_rect, frame.pixels_per_point);
            let clip = clip.intersect(PixelRect { x0: 0, y0: 0, x1: size[0], y1: size[1] });
            if clip.is_empty() {
                continue;
            }
            let corners = [clip.x0, clip.y0, clip.x1, clip.y1].map(|edge| edge as u64);
            let texture = match mesh.texture_id {
                egui::TextureId::Managed(id) => id << 1,
                egui::TextureId::User(id) => id << 1 | 1,
            };
            let start = corners.into_iter().fold(texture, mixed);
            let marks: Vec<u64> = mesh.vertices.iter().map(mark).collect();
            for triangle in mesh.indices.as_chunks::<3>().0 {
                let at = |index: u32| {
                    Some((mesh.vertices.get(index as usize)?, *marks.get(index as usize)?))
                };
                if let [Some(a), Some(b), Some(c)] = triangle.map(at) {
                    let sum = mixed(mixed(mixed(start, a.1), b.1), c.1);
                    tiles.leave(sum, [a.0, b.0, c.0], clip, frame.pixels_per_point);
                }
            }
        }
        tiles
    }

    /// Marks every tile within `clip` that the triangle's bounding box reaches.
    #[inline]
    fn leave(&mut self, sum: u64, [a, b, c]: [&Vertex; 3], clip: PixelRect, scale: f32) {
        let reach = |a: f32, b: f32, c: f32, from: usize, to: usize| {
            // A pixel to spare; casts stop at 0 and at the largest number.
            let low = (a.min(b).min(c) * scale - 1.0) as usize;
            let high = (a.max(b).max(c) * scale + 2.0) as usize;
            (low.max(from), high.min(to))
        };
        let (x0, x1) = reach(a.pos.x, b.pos.x, c.pos.x, clip.x0, clip.x1);
        let (y0, y1) = reach(a.pos.y, b.pos.y, c.pos.y, clip.y0, clip.y1);
        if x0 >= x1 || y0 >= y1 {
            return;
        }
        for row in y0 / TILE[1]..=(y1 - 1) / TILE[1] {
            let from = row * self.columns;
            for tile in &mut self.sums[from + x0 / TILE[0]..=from + (x1 - 1) / TILE[0]] {
                *tile = mixed(*tile, sum);
            }
        }
    }

    /// The rectangles, free of overlap, outside which nothing has changed since `earlier`.
    #[must_use]
    pub fn changed_since(&self, earlier: &Self) -> Vec<PixelRect> {
        if self.size != earlier.size {
            return vec![PixelRect { x0: 0, y0: 0, x1: self.size[0], y1: self.size[1] }];
        }
        let mut all: Vec<PixelRect> = Vec::new();
        if self.columns == 0 {
            return all;
        }
        let rows = self.sums.chunks(self.columns).zip(earlier.sums.chunks(self.columns));
        for (row, (now, before)) in rows.enumerate() {
            let differs: Vec<bool> = now.iter().zip(before).map(|(a, b)| a != b).collect();
            let mut column = 0;
            for run in differs.chunk_by(|a, b| a == b) {
                let ends = [column, column + run.len()];
                column = ends[1];
                if run[0] {
                    self.add(&mut all, ends, row);
                }
            }
        }
        all
    }

    /// Adds a run of tiles, to the rectangle above it if that is as wide.
    fn add(&self, all: &mut Vec<PixelRect>, ends: [usize; 2], row: usize) {
        let [x0, x1] = ends.map(|end| (end * TILE[0]).min(self.size[0]));
        let [y0, y1] = [row, row + 1].map(|end| (end * TILE[1]).min(self.size[1]));
        match all.iter_mut().rev().find(|r| r.y1 == y0 && (r.x0, r.x1) == (x0, x1)) {
            Some(above) => above.y1 = y1,
            None => all.push(PixelRect { x0, y0, x1, y1 }),
        }
    }
}

fn mark(vertex: &Vertex) -> u64 {
    let pair = |a: f32, b: f32| u64::from(a.to_bits()) << 32 | u64::from(b.to_bits());
    let place = pair(vertex.pos.x, vertex.pos.y);
    let texel = pair(vertex.uv.x, vertex.uv.y);
    mixed(mixed(place, texel), u64::from(pack(vertex.color)))
}

/// A number in which every bit of both is felt (the finaliser of SplitMix64, Steele et al.,
/// OOPSLA 2014).
#[inline]
fn mixed(sum: u64, value: u64) -> u64 {
    let mut x = sum.rotate_left(5) ^ value.wrapping_mul(0x9e37_79b9_7f4a_7c15);
    x = (x ^ (x >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    x ^ (x >> 27)
}
