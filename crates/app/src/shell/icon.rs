//! The window's icon, painted by arithmetic: a ramp that bends.

use egui::IconData;

const SIDE: u32 = 64;

/// Dark square, a rising line that flattens.
#[must_use]
pub fn icon() -> IconData {
    let mut rgba = Vec::with_capacity((SIDE * SIDE * 4) as usize);
    for y in 0..SIDE {
        for x in 0..SIDE {
            rgba.extend(pixel(x as f32 + 0.5, y as f32 + 0.5));
        }
    }
    IconData { rgba, width: SIDE, height: SIDE }
}

fn pixel(x: f32, y: f32) -> [u8; 4] {
    const GROUND: [u8; 4] = [28, 52, 74, 255];
    const LINE: [u8; 4] = [245, 247, 249, 255];
    let to_corner = ((x - 32.0).abs() - 22.0).max(0.0).hypot(((y - 32.0).abs() - 22.0).max(0.0));
    if to_corner > 10.0 {
        return [0; 4];
    }
    let ramp = distance([x, y], [10.0, 50.0], [36.0, 22.0]);
    let crest = distance([x, y], [36.0, 22.0], [54.0, 17.0]);
    if ramp.min(crest) < 3.5 { LINE } else { GROUND }
}

/// Distance of a point from a line segment.
fn distance([x, y]: [f32; 2], [ax, ay]: [f32; 2], [bx, by]: [f32; 2]) -> f32 {
    let (dx, dy) = (bx - ax, by - ay);
    let t = (((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy)).clamp(0.0, 1.0);
    (x - ax - t * dx).hypot(y - ay - t * dy)
}
