//! Cuts triangles that reach far outside the picture, so that edge functions fit into 64 bits
//! without bending the edges that remain visible.

use egui::epaint::Vertex;

use crate::blend::pack;
use crate::setup::{GUARD, Paint, Point, sub_pixels};

/// A corner in pixels while it is being cut: x, y, u, v, then the four colour channels.
type Mixed = [f64; 8];

/// The triangle as a fan of corners inside the guard border: none or at least three.
pub fn cut(vertices: [&Vertex; 3], pixels_per_point: f32) -> Vec<(Point, Paint)> {
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

fn point(vertex: &Vertex, scale: f64) -> Mixed {
    let [b, g, r, a] = pack(vertex.color).to_le_bytes().map(f64::from);
    let (x, y) = (f64::from(vertex.pos.x) * scale, f64::from(vertex.pos.y) * scale);
    let (u, v) = (f64::from(vertex.uv.x), f64::from(vertex.uv.y));
    [x, y, u, v, b, g, r, a]
}

fn corner(mixed: &Mixed) -> (Point, Paint) {
    let channel = |i: usize| (mixed[i] + 0.5).clamp(0.0, 255.0) as u8;
    let point = Point {
        x: sub_pixels(mixed[0].clamp(-GUARD, GUARD)),
        y: sub_pixels(mixed[1].clamp(-GUARD, GUARD)),
    };
    let paint = Paint {
        colour: u32::from_le_bytes([channel(4), channel(5), channel(6), channel(7)]),
        uv: [mixed[2] as f32, mixed[3] as f32],
    };
    (point, paint)
}

/// One step of Sutherland–Hodgman: what lies on the inner side of one border.
fn keep(polygon: &[Mixed], axis: usize, side: f64) -> Vec<Mixed> {
    let mut kept = Vec::with_capacity(polygon.len() + 1);
    for (i, &end) in polygon.iter().enumerate() {
        let start = polygon[(i + polygon.len() - 1) % polygon.len()];
        let (before, after) = (GUARD - side * start[axis], GUARD - side * end[axis]);
        if (before >= 0.0) != (after >= 0.0) {
            let t = before / (before - after);
            let mut crossing: Mixed = std::array::from_fn(|k| start[k] + (end[k] - start[k]) * t);
            crossing[axis] = side * GUARD;
            kept.push(crossing);
        }
        if after >= 0.0 {
            kept.push(end);
        }
    }
    kept
}
