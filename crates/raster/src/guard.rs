//! Cuts triangles that reach far outside the picture, so that edge functions fit into 64 bits
//! without bending the edges that remain visible.

use egui::epaint::Vertex;

use crate::blend::pack;
use crate::setup::{Corner, GUARD, sub_pixels};

/// A corner in pixels while it is being cut: x, y, u, v, then the four colour channels.
type Point = [f64; 8];

/// The triangle as a fan of corners inside the guard border: none or at least three.
pub fn cut(vertices: [&Vertex; 3], pixels_per_point: f32) -> Vec<Corner> {
    let points = vertices.map(|vertex| point(vertex, f64::from(pixels_per_point)));
    if points.iter().flatten().any(|x| !x.is_finite()) {
        return Vec::new();
    }
    let mut polygon = points.to_vec();
    for axis in 0..2 {
        for side in [1.0, -1.0] {
            polygon = keep(&polygon, axis, side);
        }
    }
    if polygon.len() < 3 {
        return Vec::new();
    }
    polygon.iter().map(corner).collect()
}

fn point(vertex: &Vertex, scale: f64) -> Point {
    let [b, g, r, a] = pack(vertex.color).to_le_bytes().map(f64::from);
    let (x, y) = (f64::from(vertex.pos.x) * scale, f64::from(vertex.pos.y) * scale);
    let (u, v) = (f64::from(vertex.uv.x), f64::from(vertex.uv.y));
    [x, y, u, v, b, g, r, a]
}

fn corner(point: &Point) -> Corner {
    let channel = |i: usize| (point[i] + 0.5).clamp(0.0, 255.0) as u8;
    Corner {
        x: sub_pixels(point[0].clamp(-GUARD, GUARD)),
        y: sub_pixels(point[1].clamp(-GUARD, GUARD)),
        colour: u32::from_le_bytes([channel(4), channel(5), channel(6), channel(7)]),
        uv: [point[2] as f32, point[3] as f32],
    }
}

/// One step of Sutherland–Hodgman: what lies on the inner side of one border.
fn keep(polygon: &[Point], axis: usize, side: f64) -> Vec<Point> {
    let mut kept = Vec::with_capacity(polygon.len() + 1);
    for (i, &end) in polygon.iter().enumerate() {
        let start = polygon[(i + polygon.len() - 1) % polygon.len()];
        let (before, after) = (GUARD - side * start[axis], GUARD - side * end[axis]);
        if (before >= 0.0) != (after >= 0.0) {
            let t = before / (before - after);
            let mut crossing: Point = std::array::from_fn(|k| start[k] + (end[k] - start[k]) * t);
            crossing[axis] = side * GUARD;
            kept.push(crossing);
        }
        if after >= 0.0 {
            kept.push(end);
        }
    }
    kept
}
