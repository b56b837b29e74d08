//! The caution line, always there.

use analysis::results::FlagKind;
use egui::{Align, Rect, Ui, pos2};

use crate::context::Context;
use crate::theme::size;
use crate::widgets::text::{self, Run};

const LONG: &str = "Decision support for qualified readers. Not assessed, certified or cleared as a medical device; whether it may be used in patient care is for the local service and its regulator. Not for use during a test. Local protocols and licensed practice prevail.";
const SHORT: &str = "Decision support for qualified readers. Not assessed, certified or cleared as a medical device; patient care use: local service and regulator decide. Not for use during a test. Local protocols prevail.";

/// Draws the line.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect_filled(rect, 0.0, t.control);
    ui.painter().hline(rect.x_range(), rect.top(), egui::Stroke::new(1.0, t.frame));
    let size = if cx.grid.narrow { size::SMALL } else { size::BODY };
    let base = rect.center().y + 4.0;
    let right = rect.right() - cx.grid.margin;
    let mut tail = if cx.open { tail(cx) } else { "?\u{a0}keys".to_owned() };
    if let Some(status) = &cx.view.status {
        tail = format!("{status}  ·  ?\u{a0}keys");
    }
    let fits = |ui: &Ui, words: &str, tail: &str| {
        let both = [Run::new(words, size, t.ink2), Run::new(tail, size, t.ink2)];
        text::width(ui, &both) + 24.0 < rect.width() - 2.0 * cx.grid.margin
    };
    let words = if fits(ui, LONG, &tail) { LONG } else { SHORT };
    text::plain(ui, pos2(rect.left() + cx.grid.margin, base), Align::Min, words, size, t.ink2);
    if fits(ui, words, &tail) {
        text::plain(ui, pos2(right, base), Align::Max, tail, size, t.ink2);
    }
}

fn tail(cx: &Context<'_>) -> String {
    let count = |kind: &FlagKind| cx.results.flags.iter().filter(|f| f.kind == *kind).count();
    let (left_out, merged) = (count(&FlagKind::LeftOut), count(&FlagKind::Merged));
    let mut words = format!("{} breaths", cx.recording.breaths.len());
    if left_out > 0 {
        words.push_str(&format!("  ·  {left_out} left out, reasons in Data"));
    }
    if merged > 0 {
        words.push_str(&format!("  ·  {merged} merged"));
    }
    words.push_str("  ·  ?\u{a0}keys");
    words
}
