//! A frame without data: what is missing, what follows, what to do.

use egui::{Align, Rect, Ui, pos2, vec2};

use super::button;
use super::text;
use crate::chart::spec::Chart;
use crate::command::Outbox;
use crate::context::Context;
use crate::theme::size;

/// Says in `frame` what `chart` lacks, if it lacks anything.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, frame: Rect, chart: &Chart) {
    let Some(missing) = &chart.missing else {
        return;
    };
    let (x, wide) = (frame.left() + 14.0, (frame.width() - 24.0).max(10.0));
    let mut y = frame.top() + 14.0_f32.min(frame.height() * 0.2);
    y = text::block(ui, pos2(x, y), wide, &missing.what, size::BODY, cx.tokens.ink).rect.bottom();
    y = text::block(ui, pos2(x, y + 3.0), wide, &missing.then, size::BODY, cx.tokens.ink2)
        .rect
        .bottom();
    if let Some(todo) = &missing.todo {
        let label = todo.label();
        let wide = button::width(ui, todo);
        let rect = Rect::from_min_size(pos2(x, y + 6.0), vec2(wide, 24.0));
        if rect.bottom() <= frame.bottom() {
            button::at(ui, cx, out, rect, todo, &label);
        }
    }
    let _ = Align::Min;
}
