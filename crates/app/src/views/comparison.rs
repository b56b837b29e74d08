//! Comparison: what changed since?

use egui::{Rect, Ui, pos2};

use crate::context::Context;
use crate::theme::size;
use crate::widgets::text;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect) {
    let at = pos2(rect.left() + 16.0, rect.top() + 20.0);
    let width = rect.width() - 32.0;
    let what = "No earlier test is open beside this one.";
    let block = text::block(ui, at, width, what, size::STATEMENT, cx.tokens.ink);
    let then = "A change is judged with the intervals “if repeated” of both tests.";
    let at = pos2(at.x, block.rect.bottom() + 4.0);
    text::block(ui, at, width, then, size::BODY, cx.tokens.ink2);
}
