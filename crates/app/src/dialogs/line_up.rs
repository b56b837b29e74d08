//! The measured course among eleven simulated ones of people without disease.

use analysis::o2_pulse::{COURSES, LineUp, line_up};
use egui::{Align2, FontId, Rect, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2, vec2};
use record::presentation::wording;

use super::Form;
use crate::context::Context;
use crate::theme::{Family, size};

const COLUMNS: usize = 4;
const CELL: egui::Vec2 = vec2(146.0, 104.0);
const GUESS: &str = "guess";

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form) {
    form.begin("line-up");
    ui.label(wording::plain_text("line-up-about"));
    let Some(lines) = cx.results.course.as_ref().and_then(line_up) else {
        ui.label(wording::plain_text("line-up-none"));
        return;
    };
    let guess: Option<usize> = form.get(GUESS).parse().ok();
    ui.add_space(6.0);
    let range = range(&lines);
    for row in 0..COURSES / COLUMNS {
        ui.horizontal(|ui| {
            for place in row * COLUMNS..(row + 1) * COLUMNS {
                if cell(ui, cx, &lines, place, range, guess) && guess.is_none() {
                    *form.field(GUESS) = place.to_string();
                }
            }
        });
    }
    ui.add_space(4.0);
    ui.label(match guess {
        None => wording::plain_text("line-up-ask"),
        Some(guess) => {
            let code = if guess == lines.own { "line-up-found" } else { "line-up-missed" };
            let number = |n: usize| (n + 1).to_string();
            wording::with(code, &[("own", number(lines.own)), ("picked", number(guess))])
        }
    });
    if guess.is_some() && ui.button(wording::plain_text("line-up-hide")).clicked() {
        form.field(GUESS).clear();
    }
}

/// Lowest and highest O₂ pulse over all courses.
fn range(lines: &LineUp) -> (f64, f64) {
    lines.courses.iter().flatten().fold((f64::INFINITY, 0.0_f64), |(low, high), (_, pulse)| {
        (low.min(*pulse), high.max(*pulse))
    })
}

/// One course; `true` when it was picked.
fn cell(
    ui: &mut Ui,
    cx: &Context<'_>,
    lines: &LineUp,
    place: usize,
    range: (f64, f64),
    guess: Option<usize>,
) -> bool {
    let t = cx.tokens;
    let (rect, response) = ui.allocate_exact_size(CELL, Sense::CLICK);
    let name = wording::with("line-up-course", &[("number", (place + 1).to_string())]);
    response.widget_info(|| WidgetInfo::labeled(egui::Role::Button, true, &name));
    let own = guess.is_some() && place == lines.own;
    let edge = if own {
        Stroke::new(2.5, t.ink)
    } else if guess == Some(place) || response.hovered() || response.has_focus() {
        Stroke::new(1.8, t.movable_edge)
    } else {
        Stroke::new(1.0, t.frame)
    };
    ui.painter().rect(rect, 0.0, t.plot, edge, StrokeKind::Inside);
    let course = &lines.courses[place];
    let (from, to) = match (course.first(), course.last()) {
        (Some(a), Some(b)) => (a.0, b.0),
        _ => return false,
    };
    let inner = Rect::from_min_max(rect.min + vec2(8.0, 20.0), rect.max - vec2(8.0, 8.0));
    let at = |(t_s, pulse): (f64, f64)| {
        let x = ((t_s - from) / (to - from)) as f32;
        let y = ((pulse - range.0) / (range.1 - range.0).max(1e-9)) as f32;
        pos2(inner.left() + x * inner.width(), inner.bottom() - y * inner.height())
    };
    let points: Vec<egui::Pos2> = course.iter().map(|p| at(*p)).collect();
    let stroke = Stroke::new(1.6, t.line(Family::Circulation));
    ui.painter().line(points, stroke);
    let font = FontId::proportional(size::BODY);
    let number = (place + 1).to_string();
    ui.painter().text(rect.min + vec2(7.0, 4.0), Align2::LEFT_TOP, number, font.clone(), t.ink2);
    if own {
        let words = wording::plain_text("line-up-this");
        let corner = pos2(rect.right() - 7.0, rect.top() + 4.0);
        ui.painter().text(corner, Align2::RIGHT_TOP, words, font, t.ink);
    }
    response.clicked()
}
