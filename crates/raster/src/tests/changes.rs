//! What is told to have changed is all that has changed.

use egui::epaint::ClippedPrimitive;
use egui::{Color32, Rect, pos2};
use proptest::prelude::*;

use super::hostile::any_mesh;
use super::{clipped, mesh, vertex, white};
use crate::{Canvas, Frame, PixelRect};

const SIZE: [usize; 2] = [200, 100];

/// Two frames that share most of what they show.
fn frames() -> impl Strategy<Value = [Vec<ClippedPrimitive>; 2]> {
    let some = || prop::collection::vec(any_mesh(), 0..4);
    (some(), any_mesh(), any_mesh(), some(), -3.0f32..3.0).prop_map(
        |(below, a, b, above, shift)| {
            let clip = Rect::from_min_max(pos2(-20.0, -20.0), pos2(180.0, 90.0));
            [(a, 0.0), (b, shift)].map(|(mut changed, shift)| {
                for vertex in &mut changed.vertices {
                    vertex.pos.x += shift;
                }
                let all = below.iter().cloned().chain([changed]).chain(above.iter().cloned());
                all.map(|mesh| clipped(mesh, clip)).collect()
            })
        },
    )
}

fn frame(primitives: &[ClippedPrimitive]) -> Frame<'_> {
    Frame { background: Some(Color32::GRAY), ..Frame::new(primitives, 1.0) }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn painting_what_changed_gives_the_new_frame([before, after] in frames()) {
        let rasteriser = white();
        let mut window = Canvas::new(SIZE[0], SIZE[1], Color32::BLACK);
        rasteriser.paint(&mut window.target(), &frame(&before));
        let changed = rasteriser
            .tiles(&frame(&after), SIZE)
            .changed_since(&rasteriser.tiles(&frame(&before), SIZE));
        let damage = Frame { damage: Some(&changed), threads: 2, ..frame(&after) };
        rasteriser.paint(&mut window.target(), &damage);
        let mut wanted = Canvas::new(SIZE[0], SIZE[1], Color32::BLACK);
        rasteriser.paint(&mut wanted.target(), &frame(&after));
        // As where painting in pieces is checked: one level for each shape that covers the pixel.
        for (a, b) in window.to_rgba().iter().zip(wanted.to_rgba()) {
            prop_assert!(a.abs_diff(b) <= 7);
        }
    }
}

fn square(x: f32, y: f32) -> ClippedPrimitive {
    let corners = [(x, y), (x + 10.0, y), (x, y + 10.0)];
    let vertices = corners.map(|(x, y)| vertex(x, y, Color32::RED)).to_vec();
    clipped(mesh(vertices), Rect::EVERYTHING)
}

#[test]
fn a_moved_shape_changes_the_tiles_it_left_and_the_tiles_it_reached() {
    // Tiles are 64 × 32: from tile (0, 0) to tile (2, 1); the other square stays.
    let rasteriser = white();
    let tiles = |x, y| rasteriser.tiles(&frame(&[square(70.0, 70.0), square(x, y)]), SIZE);
    let first = PixelRect { x0: 0, y0: 0, x1: 64, y1: 32 };
    let second = PixelRect { x0: 128, y0: 32, x1: 192, y1: 64 };
    assert_eq!(tiles(140.0, 40.0).changed_since(&tiles(10.0, 10.0)), [first, second]);
    assert_eq!(tiles(10.0, 10.0).changed_since(&tiles(10.0, 10.0)), []);
}

#[test]
fn tiles_one_above_the_other_are_one_rectangle_and_a_new_size_is_all() {
    let rasteriser = white();
    let tiles = |primitives: &[ClippedPrimitive], size| rasteriser.tiles(&frame(primitives), size);
    let (nothing, tall) = (tiles(&[], SIZE), tiles(&[square(10.0, 28.0)], SIZE));
    let both = PixelRect { x0: 0, y0: 0, x1: 64, y1: 64 };
    assert_eq!(tall.changed_since(&nothing), [both]);
    let other = tiles(&[], [100, 100]);
    let all = PixelRect { x0: 0, y0: 0, x1: 100, y1: 100 };
    assert_eq!(other.changed_since(&nothing), [all]);
}

#[test]
fn shapes_that_change_places_change_what_is_seen() {
    let rasteriser = white();
    let mut blue = square(10.0, 10.0);
    if let egui::epaint::Primitive::Mesh(mesh) = &mut blue.primitive {
        mesh.vertices.iter_mut().for_each(|vertex| vertex.color = Color32::BLUE);
    }
    let [one, two] = [[square(10.0, 10.0), blue.clone()], [blue, square(10.0, 10.0)]]
        .map(|primitives| rasteriser.tiles(&frame(&primitives), SIZE));
    assert_eq!(one.changed_since(&two).len(), 1);
}
