//! The findings sheet: key values, then drafted statements.

use egui::{Align, Rect, Stroke, StrokeKind, Ui, pos2};

use crate::command::Outbox;
use crate::context::Context;
use crate::theme::size;
use crate::widgets::text;

/// Draws the sheet.
pub fn show(ui: &mut Ui, cx: &Context<'_>, _out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect(rect, 0.0, t.panel, Stroke::new(1.0, t.frame), StrokeKind::Inside);
    let head = pos2(rect.left() + 16.0, rect.top() + 28.0);
    text::plain(ui, head, Align::Min, "Findings", size::TITLE, t.ink);
}
