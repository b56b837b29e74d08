//! The rules of the layout.

use app::chart::layout::{Grid, LEAST, Parts};
use egui::{Color32, Rect};

use super::painted::{Painted, Plate, Text, overlap, within};

/// Least ratio of contrast of text (WCAG 2.2, success criterion 1.4.3).
const CONTRAST: f64 = 4.5;

/// A rule broken: which, and by what.
pub type Broken = (&'static str, String);

/// Everything in a frame that breaks a rule.
///
/// `parted` where nothing lies over the parts of the window, and each has its own text.
pub fn broken(painted: &Painted, screen: Rect, parted: bool) -> Vec<Broken> {
    let seen = painted.seen();
    let mut all = Vec::new();
    for (i, a) in seen.iter().enumerate() {
        for b in seen[i + 1..].iter().filter(|b| b.of != a.of) {
            if overlap(a.visible(), b.visible()) {
                all.push(("overlap", format!("{} × {}", told(a), told(b))));
            }
        }
        if cut_sideways(a, screen) && !in_a_field(painted, a) {
            all.push(("cut", format!("{} at {:?}", told(a), a.clip)));
        }
        if !within(screen, a.visible()) {
            all.push(("off the screen", told(a)));
        }
        if a.elided {
            all.push(("shortened", told(a)));
        }
        if let Some(part) = left_part(a, screen).filter(|_| parted) {
            all.push(("left its part", format!("{} {part:?}", told(a))));
        }
        if let Some(ground) = painted.ground(a) {
            if !within(ground.rect, a.visible()) {
                all.push(("left its plate", format!("{} {:?}", told(a), ground.rect)));
            }
            let ratio = contrast(a.color, ground.fill);
            if ratio < CONTRAST {
                all.push(("contrast", format!("{} {ratio:.2}", told(a))));
            }
        }
    }
    for (text, plate) in painted.half_covered() {
        all.push(("half covered", format!("{} by {:?}", told(text), plate.rect)));
    }
    all
}

fn told(text: &Text) -> String {
    let r = text.ink;
    format!("“{}” {:.1},{:.1} {:.1}×{:.1}", text.words, r.left(), r.top(), r.width(), r.height())
}

/// A list that scrolls may cut its first and last line, never the side of one; and a window too
/// small for the layout shows a part of it.
fn cut_sideways(text: &Text, screen: Rect) -> bool {
    let whole = screen.size() == screen.size().max(LEAST);
    whole
        && (text.ink.left() < text.clip.left() - 1.0 || text.ink.right() > text.clip.right() + 1.0)
}

/// A field of one line scrolls what is typed into it.
fn in_a_field(painted: &Painted, text: &Text) -> bool {
    let field = |p: &&Plate| p.rect.height() < 30.0 && p.rect.contains_rect(text.clip);
    painted.plates.iter().rev().find(field).is_some_and(|p| p.order < text.order)
}

/// The part of the window in which a text begins, if it does not end there too.
fn left_part(text: &Text, screen: Rect) -> Option<Rect> {
    let window = Rect::from_min_size(screen.min, screen.size().max(LEAST));
    let parts = Parts::of(window, &Grid::of(window.width()));
    let all = [parts.top_bar, parts.view_row, parts.strip, parts.view, parts.sheet, parts.caution];
    let ink = text.visible();
    let part = all.into_iter().find(|p| p.contains(ink.left_center()))?;
    (!within(part, ink)).then_some(part)
}

/// Ratio of contrast as WCAG 2.2 defines it; colours are opaque or laid over `ground`.
fn contrast(ink: Color32, ground: Color32) -> f64 {
    let (a, b) = (luminance(ground.blend(ink)), luminance(ground));
    (a.max(b) + 0.05) / (a.min(b) + 0.05)
}

/// Relative luminance (WCAG 2.2, from sRGB as IEC 61966-2-1 has it).
fn luminance(color: Color32) -> f64 {
    let linear = |c: u8| {
        let c = f64::from(c) / 255.0;
        if c <= 0.040_45 { c / 12.92 } else { ((c + 0.055) / 1.055).powf(2.4) }
    };
    0.2126 * linear(color.r()) + 0.7152 * linear(color.g()) + 0.0722 * linear(color.b())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn black_on_white_has_a_contrast_of_21() {
        // WCAG 2.2, definition of contrast ratio: from 1 to 21.
        assert!((contrast(Color32::BLACK, Color32::WHITE) - 21.0).abs() < 1e-9);
        assert!((contrast(Color32::WHITE, Color32::WHITE) - 1.0).abs() < 1e-9);
    }
}
