//! Which pixel centres lie in a triangle: exact integer edge functions, row by row.

use crate::canvas::PixelRect;
use crate::setup::{Corner, SUB, first_centre};

/// Rows narrower than this are found by testing pixels, wider ones by division.
const NARROW: i64 = 12;

/// A triangle with positive area, its corners in clockwise order on screen.
pub struct Triangle {
    pub corners: [Corner; 3],
    /// Twice the area in square sub-pixels; > 0.
    pub area: i64,
    /// Pixels to visit: the clip rectangle cut to the triangle's bounding box.
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

/// Edge function `a·x + b·y + c` that is ≥ 0 inside.
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
    fn new(from: Corner, to: Corner, x: i64, y: i64) -> Self {
        let (dx, dy) = (to.x - from.x, to.y - from.y);
        let (px, py) = (x * SUB + SUB / 2, y * SUB + SUB / 2);
        let owns = dy < 0 || (dy == 0 && dx > 0);
        Self {
            right: -dy * SUB,
            down: dx * SUB,
            value: dx * (py - from.y) - dy * (px - from.x),
            bias: i64::from(!owns),
        }
    }
}

impl Triangle {
    /// `None` for triangles without area or without a pixel centre in their bounding box.
    #[inline]
    pub fn new(corners: [Corner; 3], clip: PixelRect) -> Option<Self> {
        let [a, b, c] = corners;
        let y0 = first_centre(a.y.min(b.y).min(c.y)).max(clip.y0 as i64);
        let y1 = first_centre(a.y.max(b.y).max(c.y) + 1).min(clip.y1 as i64);
        if y0 >= y1 {
            return None;
        }
        let x0 = first_centre(a.x.min(b.x).min(c.x)).max(clip.x0 as i64);
        let x1 = first_centre(a.x.max(b.x).max(c.x) + 1).min(clip.x1 as i64);
        if x0 >= x1 {
            return None;
        }
        let area = (b.x - a.x) * (c.y - a.y) - (c.x - a.x) * (b.y - a.y);
        let bounds = [x0, y0, x1, y1];
        match area.signum() {
            1 => Some(Self { corners, area, bounds }),
            -1 => Some(Self { corners: [a, c, b], area: -area, bounds }),
            _ => None,
        }
    }

    /// Change of the two weights per pixel to the right.
    #[inline]
    pub fn weight_steps(&self) -> [i64; 2] {
        let [a, b, c] = self.corners;
        [(c.y - a.y) * SUB, (a.y - b.y) * SUB]
    }

    /// Calls `paint` for every row that has pixel centres inside.
    #[inline]
    pub fn spans(&self, mut paint: impl FnMut(Span)) {
        let [x0, y0, x1, y1] = self.bounds;
        let [a, b, c] = self.corners;
        let mut edges = [Edge::new(b, c, x0, y0), Edge::new(c, a, x0, y0), Edge::new(a, b, x0, y0)];
        let narrow = x1 - x0 < NARROW;
        for y in y0..y1 {
            let (from, to) =
                if narrow { tested(&edges, x1 - x0) } else { divided(&edges, x1 - x0) };
            if from < to {
                paint(Span {
                    y: y as usize,
                    x0: (x0 + from) as usize,
                    x1: (x0 + to) as usize,
                    weights: [
                        edges[1].value + from * edges[1].right,
                        edges[2].value + from * edges[2].right,
                    ],
                });
            }
            for edge in &mut edges {
                edge.value += edge.down;
            }
        }
    }
}

/// The pixels `from..to` of a row inside all three edges, by testing each.
#[inline]
fn tested(edges: &[Edge; 3], width: i64) -> (i64, i64) {
    let mut values = edges.map(|edge| edge.value - edge.bias);
    let mut from = width;
    for x in 0..width {
        // The sign bit of the union is set as soon as one edge is negative.
        if values[0] | values[1] | values[2] >= 0 {
            from = from.min(x);
        } else if from < x {
            return (from, x);
        }
        for (value, edge) in values.iter_mut().zip(edges) {
            *value += edge.right;
        }
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
