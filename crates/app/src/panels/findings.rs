//! The findings sheet: key values, then statements by question.

use egui::{Align, Rect, ScrollArea, Stroke, StrokeKind, Ui, UiBuilder, pos2, vec2};

use record::session::findings::Status;

use super::{key_values, statements};
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::widgets::{button, text};

/// Draws the sheet.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect(rect, 0.0, t.panel, Stroke::new(1.0, t.frame), StrokeKind::Inside);
    let pad = if cx.grid.narrow { 12.0 } else { 16.0 };
    let head_height = if cx.grid.narrow { 32.0 } else { 42.0 };
    let base = rect.top() + 0.5 * head_height + 6.0;
    let big = if cx.grid.narrow { 15.0 } else { size::TITLE };
    text::plain(ui, pos2(rect.left() + pad, base), Align::Min, "Findings", big, t.ink);
    let list = cx.findings;
    let decided = list.iter().filter(|f| f.status != Status::Draft && !f.stale).count();
    let mut words = format!("{decided} of {} decided", list.len());
    if !cx.grid.narrow {
        words.push_str("  ·  widen  F");
    }
    let at = pos2(rect.right() - pad, base - 1.0);
    let said = text::plain(ui, at, Align::Max, words, size::BODY, t.ink2);
    let hot = ui.interact(said.rect, egui::Id::unique("widen findings"), egui::Sense::CLICK);
    if hot.on_hover_text(Command::WidenFindings.hover()).clicked() {
        out.push(Command::WidenFindings);
    }
    let line = rect.top() + head_height;
    ui.painter().hline(rect.x_range(), line, Stroke::new(1.0, t.frame));
    let inner = Rect::from_min_max(
        pos2(rect.left() + pad, line + 2.0),
        pos2(rect.right() - pad, rect.bottom() - 6.0),
    );
    let below = key_values::show(ui, cx, inner);
    ui.painter().hline(rect.x_range(), below, Stroke::new(1.0, t.frame));
    let place = Rect::from_min_max(
        pos2(inner.left(), below + 4.0),
        pos2(inner.right() + pad - 4.0, inner.bottom()),
    );
    if cx.grid.narrow {
        narrow(ui, cx, out, place);
    } else {
        scrolled(ui, cx, out, place);
    }
}

fn scrolled(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, place: Rect) {
    let ui = &mut ui.new_child(UiBuilder::new().max_rect(place).id_salt("statements"));
    ScrollArea::vertical().auto_shrink(false).show(ui, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        let width = place.width() - 12.0;
        statements::list(ui, cx, out, width);
    });
}

fn narrow(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, place: Rect) {
    let foot = Rect::from_min_size(
        pos2(place.left(), place.bottom() - 26.0),
        vec2(place.width() - 8.0, 24.0),
    );
    let list = Rect::from_min_max(place.min, pos2(place.right(), foot.top() - 4.0));
    let child = &mut ui.new_child(UiBuilder::new().max_rect(list).id_salt("statements"));
    ScrollArea::vertical().auto_shrink(false).show(child, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        statements::short_list(ui, cx, list.width() - 12.0);
    });
    let command = Command::WidenFindings;
    button::at(ui, cx, out, foot, &command, "Open findings  F");
}

/// The sheet laid over the charts.
pub fn wide(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect(rect, 0.0, t.panel, Stroke::new(1.0, t.frame), StrokeKind::Inside);
    // Nothing under the sheet takes the pointer.
    ui.interact(rect, egui::Id::unique("wide findings"), egui::Sense::CLICK | egui::Sense::DRAG);
    let head = pos2(rect.left() + 16.0, rect.top() + 28.0);
    text::plain(ui, head, Align::Min, "Findings", size::TITLE, t.ink);
    let close =
        Rect::from_min_size(pos2(rect.right() - 130.0, rect.top() + 10.0), vec2(114.0, 24.0));
    button::at(ui, cx, out, close, &Command::WidenFindings, "Back to side  F");
    let split = rect.left() + (rect.width() * 0.5).min(520.0);
    let left = Rect::from_min_max(
        pos2(rect.left() + 16.0, rect.top() + 44.0),
        pos2(split - 16.0, rect.bottom() - 8.0),
    );
    let right = Rect::from_min_max(
        pos2(split, rect.top() + 44.0),
        pos2(rect.right() - 16.0, rect.bottom() - 8.0),
    );
    let table = &mut ui.new_child(UiBuilder::new().max_rect(left).id_salt("key table"));
    ScrollArea::vertical().auto_shrink(false).show(table, |ui| {
        crate::views::findings::all_results(ui, cx, left.width() - 12.0);
    });
    let list = &mut ui.new_child(UiBuilder::new().max_rect(right).id_salt("wide statements"));
    ScrollArea::vertical().auto_shrink(false).show(list, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        statements::list(ui, cx, out, right.width() - 12.0);
    });
}
