//! Pictures small enough to check by arithmetic, and inputs chosen to break things.

mod changes;
mod coverage;
mod hostile;
mod texturing;

use egui::epaint::{ClippedPrimitive, ImageData, ImageDelta, Mesh, Primitive, Vertex};
use egui::{Color32, ColorImage, Rect, TextureId, TextureOptions, TexturesDelta, pos2};

use crate::{Canvas, Frame, Rasteriser};

/// The texture egui keeps its white texel and its glyphs in.
const FONT: TextureId = TextureId::Managed(0);

fn vertex(x: f32, y: f32, color: Color32) -> Vertex {
    Vertex::untextured(pos2(x, y), color)
}

fn mesh(vertices: Vec<Vertex>) -> Mesh {
    Mesh { indices: (0..vertices.len() as u32).collect(), vertices, texture_id: FONT }
}

fn clipped(mesh: Mesh, clip_rect: Rect) -> ClippedPrimitive {
    ClippedPrimitive { clip_rect, primitive: Primitive::Mesh(mesh) }
}

fn with_texture(image: ColorImage) -> Rasteriser {
    let mut delta = TexturesDelta::default();
    delta.push(FONT, ImageDelta::full(ImageData::Color(image.into()), TextureOptions::LINEAR));
    let mut rasteriser = Rasteriser::new();
    rasteriser.set_textures(&mut delta);
    rasteriser
}

fn white() -> Rasteriser {
    with_texture(ColorImage::filled([1, 1], Color32::WHITE))
}

fn paint(meshes: Vec<Mesh>, size: [usize; 2]) -> Canvas {
    let primitives: Vec<_> =
        meshes.into_iter().map(|mesh| clipped(mesh, Rect::EVERYTHING)).collect();
    let mut canvas = Canvas::new(size[0], size[1], Color32::BLACK);
    white().paint(&mut canvas.target(), &Frame::new(&primitives, 1.0));
    canvas
}

/// Columns painted (not black) in one row.
fn painted(canvas: &Canvas, y: usize) -> Vec<usize> {
    (0..canvas.width()).filter(|&x| canvas.pixel(x, y) != Some([0, 0, 0, 255])).collect()
}
