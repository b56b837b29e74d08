//! The score against both of its lines: the reader sees how near a word was, not only the word.

use analysis::results::At;
use egui::{Align, Pos2, Stroke, Ui, pos2, vec2};

use crate::context::Context;
use crate::shown;
use crate::theme::size;
use crate::widgets::text::{self, Key, Run};

/// Scores shown; what lies beyond stands at the end.
const SPAN: (f64, f64) = (-8.0, 6.0);

/// Draws number and scale, `wide` px, the top left at `at`; about 46 px high.
pub fn show(ui: &mut Ui, cx: &Context<'_>, at: Pos2, wide: f32) {
    let Some(numbers) = cx.results.course.as_ref().and_then(|c| c.numbers) else {
        return;
    };
    let Some(s) = shown::primary(cx.results, "o2-pulse-score", At::Ramp) else {
        return;
    };
    let t = cx.tokens;
    let runs = [
        Run::new("score ", size::BODY, t.ink2),
        Run::new(s.value.clone(), size::SECTION, t.ink),
        Run::new("  log odds of levelling", size::BODY, t.ink2),
    ];
    let runs = if text::width(ui, &runs) > wide { &runs[..2] } else { &runs[..] };
    let key = Key { cx, id: &s.key, name: "Score of the O₂-pulse course", value: &s.value };
    text::number(ui, pos2(at.x, at.y + 11.0), Align::Min, runs, &key);
    let y = at.y + 24.0;
    let x = |score: f64| {
        let share = ((score - SPAN.0) / (SPAN.1 - SPAN.0)).clamp(0.0, 1.0);
        at.x + wide * share as f32
    };
    let ink = Stroke::new(1.2, t.ink2);
    ui.painter().hline(at.x..=(at.x + wide), y, ink);
    let (lower, upper) = (x(numbers.line_lower), x(numbers.line_upper));
    for line in [lower, upper] {
        ui.painter().vline(line, (y - 6.0)..=(y + 6.0), Stroke::new(1.5, t.ink));
    }
    let base = y + 18.0;
    let mut name = |at: f32, align, words: &str| {
        text::plain(ui, pos2(at, base), align, words, size::BODY, t.ink2);
    };
    name(at.x, Align::Min, "rising");
    name(0.5 * (lower + upper), Align::Center, "slowed");
    name(at.x + wide, Align::Max, "flat");
    let place = pos2(x(numbers.score), y);
    let corners = [vec2(0.0, 0.0), vec2(5.5, -9.0), vec2(-5.5, -9.0)].map(|d| place + d);
    let fill = egui::Shape::convex_polygon(corners.to_vec(), t.ink, Stroke::NONE);
    ui.painter().add(fill);
}
