//! Which pixel centres lie in a triangle: exact integer edge functions, row by row.
//!
//! Corners lie within 2^28 sub-pixels of the origin, so differences stay below 2^29 and their
//! products below 2^58: nothing here can overflow, and the arithmetic says `wrapping` only to do
//! without checks in the innermost loops.

use crate::canvas::PixelRect;
use crate::setup::{Point, SUB, first_centre};

/// Rows narrower than this are found by testing pixels, wider ones by division.
const NARROW: i64 = 12;

/// A triangle with area, its corners in clockwise order on screen.
pub struct Triangle {
    pub points: [Point; 3],
    /// Whether corners 1 and 2 have changed places to get there.
    pub flipped: bool,
    /// Twice the area in square sub-pixels; > 0.
    pub area: i64,
    /// Left, top, right, bottom: the pixels to visit.
    bounds: [i64; 4],
}

/// A run of pixels in one row.
pub struct Span {
    pub y: usize,
    pub x0: usize,
    pub x1: usize,
    /// Edge functions opposite to corners 1 and 2 at the centre of the first pixel: divided by
    /// the area they are the weights of those corners.
    pub weights: [i64; 2],
}

/// Edge function that is ≥ 0 inside.
#[derive(Clone, Copy)]
struct Edge {
    /// Change per pixel to the right.
    right: i64,
    /// Change per pixel down.
    down: i64,
    /// Value at the centre of the first pixel of the current row.
    value: i64,
    /// 0 on top and left edges, which own the centres they pass through; 1 on the others.
    bias: i64,
}

impl Edge {
    #[inline]
    fn new(from: Point, to: Point, x: i64, y: i64) -> Self {
        let (dx, dy) = (to.x.wrapping_sub(from.x), to.y.wrapping_sub(from.y));
        let px = (x << 8).wrapping_add(SUB / 2).wrapping_sub(from.x);
        let py = (y << 8).wrapping_add(SUB / 2).wrapping_sub(from.y);
        let owns = dy < 0 || (dy == 0 && dx > 0);
        Self {
            right: dy.wrapping_neg() << 8,
            down: dx << 8,
            value: dx.wrapping_mul(py).wrapping_sub(dy.wrapping_mul(px)),
            bias: i64::from(!owns),
        }
    }
}

impl Triangle {
    /// `None` for triangles without area or without a pixel centre in their bounding box.
    #[inline]
    pub fn new([a, b, c]: [Point; 3], clip: PixelRect) -> Option<Self> {
        let y0 = first_centre(a.y.min(b.y).min(c.y)).max(clip.y0 as i64);
        let y1 = first_centre(a.y.max(b.y).max(c.y).wrapping_add(1)).min(clip.y1 as i64);
        if y0 >= y1 {
            return None;
        }
        let x0 = first_centre(a.x.min(b.x).min(c.x)).max(clip.x0 as i64);
        let x1 = first_centre(a.x.max(b.x).max(c.x).wrapping_add(1)).min(clip.x1 as i64);
        if x0 >= x1 {
            return None;
        }
        let (bx, by) = (b.x.wrapping_sub(a.x), b.y.wrapping_sub(a.y));
        let (cx, cy) = (c.x.wrapping_sub(a.x), c.y.wrapping_sub(a.y));
        let area = bx.wrapping_mul(cy).wrapping_sub(cx.wrapping_mul(by));
        if area == 0 {
            return None;
        }
        let flipped = area < 0;
        let points = if flipped { [a, c, b] } else { [a, b, c] };
        Some(Self { points, flipped, area: area.wrapping_abs(), bounds: [x0, y0, x1, y1] })
    }

    /// Change of the two weights per pixel to the right.
    #[inline]
    pub fn weight_steps(&self) -> [i64; 2] {
        let [a, b, c] = self.points;
        [c.y.wrapping_sub(a.y) << 8, a.y.wrapping_sub(b.y) << 8]
    }

    /// Calls `paint` for every row that has pixel centres inside.
    #[inline]
    pub fn spans(&self, mut paint: impl FnMut(Span)) {
        let [x0, y0, x1, y1] = self.bounds;
        let [a, b, c] = self.points;
        let mut edges = [Edge::new(b, c, x0, y0), Edge::new(c, a, x0, y0), Edge::new(a, b, x0, y0)];
        let width = x1.wrapping_sub(x0);
        for y in y0..y1 {
            let (from, to) =
                if width < NARROW { tested(&edges, width) } else { divided(&edges, width) };
            if from < to {
                let at = |edge: &Edge| edge.value.wrapping_add(from.wrapping_mul(edge.right));
                paint(Span {
                    y: y as usize,
                    x0: x0.wrapping_add(from) as usize,
                    x1: x0.wrapping_add(to) as usize,
                    weights: [at(&edges[1]), at(&edges[2])],
                });
            }
            for edge in &mut edges {
                edge.value = edge.value.wrapping_add(edge.down);
            }
        }
    }
}

/// The pixels `from..to` of a row inside all three edges, by testing each.
#[inline]
fn tested(edges: &[Edge; 3], width: i64) -> (i64, i64) {
    let [mut a, mut b, mut c] = [0, 1, 2].map(|i| edges[i].value.wrapping_sub(edges[i].bias));
    let mut from = width;
    for x in 0..width {
        // The sign bit of the union is set as soon as one edge is negative.
        if a | b | c >= 0 {
            from = from.min(x);
        } else if from < x {
            return (from, x);
        }
        a = a.wrapping_add(edges[0].right);
        b = b.wrapping_add(edges[1].right);
        c = c.wrapping_add(edges[2].right);
    }
    (from, width)
}

/// The same by solving each edge for its crossing.
#[inline]
fn divided(edges: &[Edge; 3], width: i64) -> (i64, i64) {
    let (mut from, mut to) = (0, width);
    for edge in edges {
        let value = edge.value - edge.bias;
        if edge.right > 0 {
            if value < 0 {
                from = from.max((-value + edge.right - 1) / edge.right);
            }
        } else if value < 0 {
            return (0, 0);
        } else if edge.right < 0 {
            to = to.min(value / -edge.right + 1);
        }
    }
    (from, to)
}
