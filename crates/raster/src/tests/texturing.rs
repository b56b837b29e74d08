//! Textures: glyph copies, interpolation, partial updates.

use egui::epaint::{ImageData, ImageDelta, Mesh, Vertex};
use egui::{Color32, ColorImage, Rect, TextureOptions, TexturesDelta, pos2, vec2};

use super::{FONT, clipped, with_texture};
use crate::{Canvas, Frame, Rasteriser};

/// 4 × 2 texels: a white one for plain shapes, then coverages 0, 64, 128 and so on.
fn glyphs() -> ColorImage {
    let levels = [255, 0, 64, 128, 192, 255, 32, 16];
    ColorImage::new([4, 2], levels.map(|a| Color32::from_rgba_premultiplied(a, a, a, a)).to_vec())
}

fn glyph(at: [f32; 2], size: [f32; 2], uv: Rect, colour: Color32) -> Mesh {
    let mut mesh = Mesh::with_texture(FONT);
    mesh.add_rect_with_uv(Rect::from_min_size(at.into(), size.into()), uv, colour);
    mesh
}

fn show(rasteriser: &Rasteriser, mesh: Mesh, size: [usize; 2]) -> Canvas {
    let mut canvas = Canvas::new(size[0], size[1], Color32::BLACK);
    let primitives = [clipped(mesh, Rect::EVERYTHING)];
    rasteriser.paint(&mut canvas.target(), &Frame::new(&primitives, 1.0));
    canvas
}

#[test]
fn a_glyph_on_whole_pixels_copies_texel_times_colour() {
    // Columns 2 and 3 of the first row: coverage 64 and 128 of (200, 100, 0):
    // 200·64/255 = 50.2 -> 50, 100·64/255 = 25.1 -> 25; 200·128/255 = 100.4, 100·128/255 = 50.2.
    let uv = Rect::from_min_max(pos2(0.5, 0.0), pos2(1.0, 0.5));
    let mesh = glyph([3.0, 1.0], [2.0, 1.0], uv, Color32::from_rgb(200, 100, 0));
    let canvas = show(&with_texture(glyphs()), mesh, [8, 3]);
    assert_eq!(canvas.pixel(3, 1), Some([50, 25, 0, 255]));
    assert_eq!(canvas.pixel(4, 1), Some([100, 50, 0, 255]));
    assert_eq!(canvas.pixel(5, 1), Some([0, 0, 0, 255]));
    assert_eq!(canvas.pixel(3, 0), Some([0, 0, 0, 255]));
}

#[test]
fn a_glyph_between_pixels_interpolates() {
    // Half a pixel to the right: each pixel is the mean of two texels of the second row,
    // 192 255 32 16: (192 + 255)/2 = 223.5 -> 224 and (255 + 32)/2 = 143.5 -> 144.
    let uv = Rect::from_min_max(pos2(0.0, 0.5), pos2(1.0, 1.0));
    let mesh = glyph([1.5, 0.0], [4.0, 1.0], uv, Color32::WHITE);
    let canvas = show(&with_texture(glyphs()), mesh, [8, 1]);
    assert_eq!(canvas.pixel(2, 0), Some([224, 224, 224, 255]));
    assert_eq!(canvas.pixel(3, 0), Some([144, 144, 144, 255]));
}

#[test]
fn a_mirrored_picture_takes_the_general_road() {
    let uv = Rect::from_min_max(pos2(1.0, 0.5), pos2(0.0, 1.0));
    let mesh = glyph([0.0, 0.0], [4.0, 1.0], uv, Color32::WHITE);
    let canvas = show(&with_texture(glyphs()), mesh, [4, 1]);
    let row: Vec<_> = (0..4).filter_map(|x| canvas.pixel(x, 0)).map(|p| p[0]).collect();
    assert_eq!(row, [16, 32, 255, 192]);
}

#[test]
fn a_partial_update_changes_only_its_texels() {
    let mut rasteriser = with_texture(glyphs());
    let mut delta = TexturesDelta::default();
    let patch = ColorImage::filled([2, 1], Color32::RED);
    delta.push(
        FONT,
        ImageDelta::partial([1, 1], ImageData::Color(patch.into()), TextureOptions::LINEAR),
    );
    rasteriser.set_textures(&mut delta);
    assert!(delta.is_empty());
    let uv = Rect::from_min_size(pos2(0.0, 0.5), vec2(1.0, 0.5));
    let canvas = show(&rasteriser, glyph([0.0, 0.0], [4.0, 1.0], uv, Color32::WHITE), [4, 1]);
    let row: Vec<_> = (0..4).filter_map(|x| canvas.pixel(x, 0)).collect();
    let (red, left, right) = ([255, 0, 0, 255], [192, 192, 192, 255], [16, 16, 16, 255]);
    assert_eq!(row, [left, red, red, right]);
}

#[test]
fn a_freed_texture_paints_nothing() {
    let mut rasteriser = with_texture(glyphs());
    let mut delta = TexturesDelta::default();
    delta.free(FONT);
    rasteriser.free_textures(&mut delta);
    assert!(delta.is_empty());
    let mesh = glyph([0.0, 0.0], [4.0, 1.0], Rect::ZERO, Color32::WHITE);
    let canvas = show(&rasteriser, mesh, [4, 1]);
    assert_eq!(canvas.pixel(0, 0), Some([0, 0, 0, 255]));
}

#[test]
fn plain_shapes_take_the_white_texel() {
    let mut mesh = Mesh::with_texture(FONT);
    mesh.vertices = [(0.0, 0.0), (4.0, 0.0), (0.0, 4.0)]
        .map(|(x, y)| Vertex::untextured(pos2(x, y), Color32::BLUE))
        .to_vec();
    mesh.indices = vec![0, 1, 2];
    let canvas = show(&with_texture(glyphs()), mesh, [4, 4]);
    assert_eq!(canvas.pixel(0, 0), Some([0, 0, 255, 255]));
}
