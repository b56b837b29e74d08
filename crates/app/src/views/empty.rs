//! The window without a test: one drop line and two buttons.

use egui::{Align, Rect, Ui, pos2, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::Dialog;
use crate::widgets::{button, text};

/// Draws the empty window.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, window: Rect) {
    let left = window.left() + cx.grid.margin + 12.0;
    let top = window.top() + cx.grid.top_bar + 48.0;
    text::plain(ui, pos2(left, top), Align::Min, "No test open", size::TITLE, cx.tokens.ink);
    let words = "Drop a breath table here: CSV, TSV, text, XLSX, ODS, or a saved session. Charts open first; questions come after.";
    text::plain(ui, pos2(left, top + 28.0), Align::Min, words, size::STATEMENT, cx.tokens.ink2);
    let mut x = left;
    for command in [Command::Show(Dialog::Open), Command::OpenDemo] {
        let label = match command.key_text() {
            Some(key) => format!("{}  {key}", command.label()),
            None => command.label(),
        };
        let wide = button::width(ui, &command) + 44.0;
        let rect = Rect::from_min_size(pos2(x, top + 46.0), vec2(wide, 28.0));
        button::at(ui, cx, out, rect, &command, &label);
        x += wide + 16.0;
    }
}
