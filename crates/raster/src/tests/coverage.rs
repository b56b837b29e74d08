//! Which pixels, which colours: all expected values follow from the arithmetic beside them.

use egui::{Color32, Rect, pos2};

use super::{clipped, mesh, paint, painted, vertex, white};
use crate::{Canvas, Frame, PixelRect};

#[test]
fn a_triangle_owns_the_pixels_whose_centres_lie_inside() {
    // Corners (0,0), (4,0), (0,4): the centre (x+½, y+½) is inside where x + y + 1 < 4, and the
    // hypotenuse x + y + 1 = 4 is a right edge, which owns none of its centres.
    let w = Color32::WHITE;
    let canvas =
        paint(vec![mesh(vec![vertex(0., 0., w), vertex(4., 0., w), vertex(0., 4., w)])], [6, 6]);
    assert_eq!(painted(&canvas, 0), [0, 1, 2]);
    assert_eq!(painted(&canvas, 1), [0, 1]);
    assert_eq!(painted(&canvas, 2), [0]);
    assert!(painted(&canvas, 3).is_empty());
}

#[test]
fn two_triangles_share_an_edge_without_gap_or_overlap() {
    // Half-transparent white over black: 128 once, 192 twice, 0 never.
    let half = Color32::from_rgba_premultiplied(128, 128, 128, 128);
    for (x, y) in [(5.0, 3.0), (4.5, 4.5), (0.25, 7.75), (7.1, 0.3)] {
        // A fan around an inner point tiles the square whichever way its edges run.
        let ring = [(0., 0.), (8., 0.), (8., 8.), (0., 8.), (0., 0.)];
        let fan = ring
            .windows(2)
            .flat_map(|side| [side[0], side[1], (x, y)].map(|(x, y)| vertex(x, y, half)))
            .collect();
        let canvas = paint(vec![mesh(fan)], [8, 8]);
        for pixel in 0..64 {
            assert_eq!(canvas.pixel(pixel % 8, pixel / 8), Some([128, 128, 128, 255]));
        }
    }
}

#[test]
fn a_wide_row_and_a_narrow_one_follow_the_same_rule() {
    // The same shape, once wide enough for the division and once for testing each pixel.
    let w = Color32::WHITE;
    for width in [10, 40] {
        let right = width as f32;
        let corners = vec![vertex(0., 0., w), vertex(right, 0., w), vertex(0., 10., w)];
        let canvas = paint(vec![mesh(corners)], [48, 12]);
        for y in 0..10 {
            // Inside: (x + ½)/width + (y + ½)/10 < 1, times 20·width.
            let inside = |x: usize| 10 * (2 * x + 1) + width * (2 * y + 1) < 20 * width;
            let expected: Vec<_> = (0..48).filter(|&x| inside(x)).collect();
            assert_eq!(painted(&canvas, y), expected, "row {y} of width {width}");
        }
    }
}

#[test]
fn premultiplied_colours_blend_in_gamma_space() {
    // 200·(255−100)/255 = 121.57 -> 122, plus 60 -> 182; 20·155/255 = 12.16 -> 12, plus 0 -> 12;
    // 255·155/255 = 155, plus 100 -> 255.
    let (under, over) =
        (Color32::from_rgb(200, 20, 255), Color32::from_rgba_premultiplied(60, 0, 100, 100));
    let square = |c| {
        mesh(
            [(0., 0.), (2., 0.), (0., 2.), (0., 2.), (2., 0.), (2., 2.)]
                .map(|(x, y)| vertex(x, y, c))
                .to_vec(),
        )
    };
    let canvas = paint(vec![square(under), square(over)], [2, 2]);
    assert_eq!(canvas.pixel(1, 1), Some([182, 12, 255, 255]));
}

#[test]
fn additive_colours_stop_at_white() {
    // Alpha 0 keeps what is below: 200 + 100 would be 300.
    let square = |c| mesh([(0., 0.), (2., 0.), (0., 2.)].map(|(x, y)| vertex(x, y, c)).to_vec());
    let glow = Color32::from_rgba_premultiplied(100, 0, 55, 0);
    let canvas = paint(vec![square(Color32::from_rgb(200, 10, 200)), square(glow)], [2, 2]);
    assert_eq!(canvas.pixel(0, 0), Some([255, 10, 255, 255]));
}

#[test]
fn corner_colours_interpolate_linearly() {
    // Black at x = 0 to white at x = 10: 255·(x + ½)/10 at each centre, e.g. 12.75 -> 13 at 0,
    // 114.75 -> 115 at 4, 242.25 -> 242 at 9.
    let (b, w) = (Color32::BLACK, Color32::WHITE);
    let quad = [(0., b), (10., w), (0., b), (0., b), (10., w), (10., w)];
    let ys = [0., 0., 4., 4., 0., 4.];
    let canvas = paint(
        vec![mesh(quad.iter().zip(ys).map(|(&(x, c), y)| vertex(x, y, c)).collect())],
        [10, 4],
    );
    for (x, level) in [(0, 13), (4, 115), (9, 242)] {
        for y in 0..4 {
            assert_eq!(canvas.pixel(x, y), Some([level, level, level, 255]));
        }
    }
}

#[test]
fn a_feathered_border_covers_in_proportion() {
    // egui's anti-aliasing: opaque at x = 2, transparent at x = 3. The one centre between, at 2½,
    // gets half of 255 = 127.5 -> 128 of white over black.
    let (w, t) = (Color32::WHITE, Color32::TRANSPARENT);
    let corners = [(2., 0., w), (3., 0., t), (2., 1., w), (2., 1., w), (3., 0., t), (3., 1., t)];
    let canvas = paint(vec![mesh(corners.map(|(x, y, c)| vertex(x, y, c)).to_vec())], [5, 1]);
    assert_eq!(painted(&canvas, 0), [2]);
    assert_eq!(canvas.pixel(2, 0), Some([128, 128, 128, 255]));
}

#[test]
fn clip_rectangles_round_to_whole_pixels_and_damage_limits_the_change() {
    let w = Color32::WHITE;
    let all = mesh(vec![vertex(-9., -9., w), vertex(99., -9., w), vertex(-9., 99., w)]);
    // 1.4 -> 1, 4.6 -> 5 at scale 1; the damage leaves columns 2 to 3.
    let clip = Rect::from_min_max(pos2(1.4, 0.0), pos2(4.6, 2.0));
    let mut canvas = Canvas::new(8, 2, Color32::BLACK);
    let primitives = [clipped(all, clip)];
    white().paint(&mut canvas.target(), &Frame::new(&primitives, 1.0));
    assert_eq!(painted(&canvas, 0), [1, 2, 3, 4]);
    let mut canvas = Canvas::new(8, 2, Color32::BLACK);
    let damage = PixelRect { x0: 2, y0: 1, x1: 4, y1: 2 };
    white().paint(
        &mut canvas.target(),
        &Frame { damage: Some(&[damage]), ..Frame::new(&primitives, 1.0) },
    );
    assert!(painted(&canvas, 0).is_empty());
    assert_eq!(painted(&canvas, 1), [2, 3]);
}

#[test]
fn points_scale_to_pixels() {
    // A square from 1 to 2 points at 2 pixels per point: pixels 2 and 3.
    let w = Color32::WHITE;
    let square = [(1., 1.), (2., 1.), (1., 2.), (1., 2.), (2., 1.), (2., 2.)];
    let primitives =
        [clipped(mesh(square.map(|(x, y)| vertex(x, y, w)).to_vec()), Rect::EVERYTHING)];
    let mut canvas = Canvas::new(6, 6, Color32::BLACK);
    white().paint(&mut canvas.target(), &Frame::new(&primitives, 2.0));
    assert!(painted(&canvas, 1).is_empty());
    assert_eq!(painted(&canvas, 2), [2, 3]);
    assert_eq!(painted(&canvas, 3), [2, 3]);
    assert!(painted(&canvas, 4).is_empty());
}

#[test]
fn a_triangle_cut_at_the_guard_border_keeps_its_visible_edge() {
    // An edge from (0,0) towards (30 million, 30 million): below the diagonal is painted.
    let w = Color32::WHITE;
    let far = 3.0e7;
    let canvas = paint(
        vec![mesh(vec![vertex(0., 0., w), vertex(far, far, w), vertex(0., far, w)])],
        [40, 40],
    );
    for y in 0..40 {
        // Centre (x+½, y+½) with x < y; on the diagonal itself the right edge owns nothing.
        assert_eq!(painted(&canvas, y).len(), y, "row {y}");
    }
}
