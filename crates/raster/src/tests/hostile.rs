//! Nothing panics, nothing is written outside, and threads never show.

use egui::epaint::{ImageData, ImageDelta, Mesh, Vertex};
use egui::{Color32, ColorImage, Rect, TextureId, TextureOptions, TexturesDelta, pos2};
use proptest::prelude::*;

use super::{FONT, clipped, mesh, vertex, white, with_texture};
use crate::{Canvas, Frame, PixelRect, Rasteriser, Target};

/// Mostly coordinates near the picture, sometimes ones that no screen has.
fn coordinate() -> impl Strategy<Value = f32> {
    prop_oneof![
        6 => -40.0f32..80.0,
        1 => (-40i32..80).prop_map(|x| x as f32),
        1 => prop::num::f32::ANY,
        1 => prop::sample::select(vec![f32::NAN, f32::INFINITY, f32::NEG_INFINITY, 1e7, -3e38, 3e38]),
    ]
}

fn any_vertex() -> impl Strategy<Value = Vertex> {
    let plain = prop::bool::weighted(0.5);
    (coordinate(), coordinate(), coordinate(), coordinate(), any::<[u8; 4]>(), plain).prop_map(
        |(x, y, u, v, [r, g, b, a], plain)| Vertex {
            pos: pos2(x, y),
            uv: if plain { pos2(0.0, 0.0) } else { pos2(u / 40.0, v / 40.0) },
            color: Color32::from_rgba_premultiplied(r, g, b, a),
        },
    )
}

pub fn any_mesh() -> impl Strategy<Value = Mesh> {
    let vertices = prop::collection::vec(any_vertex(), 0..12);
    // Some indices point at nothing.
    let indices = prop::collection::vec(0u32..14, 0..40);
    (vertices, indices, 0u64..3).prop_map(|(vertices, indices, texture)| Mesh {
        vertices,
        indices,
        texture_id: TextureId::Managed(texture),
    })
}

fn any_rect() -> impl Strategy<Value = Rect> {
    (coordinate(), coordinate(), coordinate(), coordinate())
        .prop_map(|(a, b, c, d)| Rect::from_min_max(pos2(a, b), pos2(c, d)))
}

fn speckled() -> Rasteriser {
    let texels = (0..64u8).map(|i| Color32::from_rgba_premultiplied(i, 255 - i, i * 3, 255));
    with_texture(ColorImage::new([8, 8], texels.collect()))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn any_mesh_paints_without_panic_and_alike_on_any_number_of_threads(
        meshes in prop::collection::vec((any_mesh(), any_rect()), 0..6),
        size in prop::sample::select(vec![[0, 0], [1, 1], [0, 9], [3, 0], [1, 200], [40, 33], [64, 130]]),
        scale in prop::sample::select(vec![1.0, 1.25, 2.0, 0.0, -1.0, f32::NAN, f32::INFINITY, 1e-30, 1e30]),
        threads in 2usize..5,
    ) {
        let primitives: Vec<_> = meshes.into_iter().map(|(mesh, clip)| clipped(mesh, clip)).collect();
        let rasteriser = speckled();
        let mut one = Canvas::new(size[0], size[1], Color32::GRAY);
        rasteriser.paint(&mut one.target(), &Frame::new(&primitives, scale));
        let mut many = Canvas::new(size[0], size[1], Color32::GRAY);
        rasteriser.paint(&mut many.target(), &Frame { threads, ..Frame::new(&primitives, scale) });
        prop_assert_eq!(one.pixels(), many.pixels());
    }

    #[test]
    fn painting_in_pieces_gives_the_whole(
        meshes in prop::collection::vec(any_mesh(), 1..5),
        x in 0usize..50,
        y in 0usize..50,
    ) {
        let primitives: Vec<_> = meshes.into_iter().map(|mesh| clipped(mesh, Rect::EVERYTHING)).collect();
        let rasteriser = speckled();
        let mut whole = Canvas::new(50, 50, Color32::GRAY);
        rasteriser.paint(&mut whole.target(), &Frame::new(&primitives, 1.0));
        let mut pieces = Canvas::new(50, 50, Color32::GRAY);
        for (x0, x1) in [(0, x), (x, 50)] {
            for (y0, y1) in [(0, y), (y, 50)] {
                let part = PixelRect { x0, y0, x1, y1 };
                rasteriser.paint(&mut pieces.target(), &Frame { damage: Some(&[part]), threads: 2, ..Frame::new(&primitives, 1.0) });
            }
        }
        // A span cut at a piece's border starts anew from its exact value, so a channel may round
        // the other way once per shape that covers the pixel.
        for (a, b) in whole.to_rgba().iter().zip(pieces.to_rgba()) {
            prop_assert!(a.abs_diff(b) <= 4);
        }
    }

    #[test]
    fn any_texture_update_is_survived(
        size in [0usize..9, 0usize..9],
        position in prop::option::of([0usize..20, 0usize..20]),
        id in 0u64..2,
    ) {
        let mut rasteriser = speckled();
        let image = ImageData::Color(ColorImage::filled(size, Color32::RED).into());
        let mut delta = TexturesDelta::default();
        let change = ImageDelta { image, options: TextureOptions::NEAREST_REPEAT, pos: position };
        delta.push(TextureId::Managed(id), change);
        rasteriser.set_textures(&mut delta);
        let mut rectangle = Mesh::with_texture(TextureId::Managed(id));
        let (whole, uv) = (Rect::from_min_max(pos2(0., 0.), pos2(9., 9.)), Rect::from_min_max(pos2(-1., -1.), pos2(2., 2.)));
        rectangle.add_rect_with_uv(whole, uv, Color32::WHITE);
        let mut canvas = Canvas::new(9, 9, Color32::BLACK);
        rasteriser.paint(&mut canvas.target(), &Frame::new(&[clipped(rectangle, whole)], 1.0));
        prop_assert_eq!(canvas.pixel(0, 0).map(|p| p[3]), Some(255));
    }
}

#[test]
fn a_picture_16384_pixels_wide_is_painted_to_its_last_column() {
    let (b, w) = (Color32::BLACK, Color32::WHITE);
    let corners =
        [(0., 0., b), (16384., 0., w), (0., 2., b), (0., 2., b), (16384., 0., w), (16384., 2., w)];
    let primitives =
        [clipped(mesh(corners.map(|(x, y, c)| vertex(x, y, c)).to_vec()), Rect::EVERYTHING)];
    let mut canvas = Canvas::new(16384, 2, Color32::RED);
    white().paint(&mut canvas.target(), &Frame { threads: 2, ..Frame::new(&primitives, 1.0) });
    // 255·(x + ½)/16384: 127.5 + 1/128 -> 128 in the middle, 254.99 -> 255 at the end.
    for (x, level) in [(0, 0), (8192, 128), (16383, 255)] {
        assert_eq!(canvas.pixel(x, 1), Some([level, level, level, 255]), "column {x}");
    }
}

#[test]
fn a_buffer_shorter_than_its_size_loses_rows_instead_of_panicking() {
    let mut short = vec![0; 25];
    let mut target = Target::new(&mut short, 10, 10);
    target.fill(PixelRect { x0: 0, y0: 0, x1: 10, y1: 10 }, Color32::WHITE);
    assert!(short[..20].iter().all(|&p| p == 0xffff_ffff));
    assert!(short[20..].iter().all(|&p| p == 0));
}

#[test]
fn a_missing_texture_leaves_the_picture_alone() {
    let mut nothing = mesh(vec![
        vertex(0., 0., Color32::RED),
        vertex(9., 0., Color32::RED),
        vertex(0., 9., Color32::RED),
    ]);
    nothing.texture_id = TextureId::User(7);
    let mut canvas = Canvas::new(4, 4, Color32::BLACK);
    let before = canvas.clone();
    white().paint(&mut canvas.target(), &Frame::new(&[clipped(nothing, Rect::EVERYTHING)], 1.0));
    assert_eq!(canvas, before);
    assert_eq!(FONT, TextureId::default());
}
