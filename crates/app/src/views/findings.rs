//! The findings view: the same key table with both intervals as page 1.

use analysis::results::Outcome;
use egui::{Align, Rect, ScrollArea, Sense, Stroke, Ui, UiBuilder, pos2};

use record::presentation::key_table;

use crate::command::Outbox;
use crate::context::Context;
use crate::panels::statements;
use crate::shown::{self, Shown};
use crate::theme::size;
use crate::widgets::text::{self, Key, Run};

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let half = (rect.width() * 0.5).floor();
    let left = Rect::from_min_size(rect.min, egui::vec2(half, rect.height()));
    let right = Rect::from_min_max(pos2(rect.left() + half + 16.0, rect.top()), rect.max);
    let table = &mut ui.new_child(UiBuilder::new().max_rect(left).id_salt("key table"));
    ScrollArea::vertical().auto_shrink(false).show(table, |ui| {
        all_results(ui, cx, left.width() - 12.0);
    });
    let list = &mut ui.new_child(UiBuilder::new().max_rect(right).id_salt("statements of view"));
    ScrollArea::vertical().auto_shrink(false).show(list, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        statements::list(ui, cx, out, right.width() - 12.0);
    });
}

/// Every primary outcome with both intervals.
pub fn all_results(ui: &mut Ui, cx: &Context<'_>, width: f32) {
    let t = cx.tokens;
    let top = ui.cursor().min;
    let x = [0.44, 0.62, 0.81, 1.0].map(|share| top.x + width * share);
    let base = top.y + 16.0;
    for (x, words) in x.into_iter().zip(["value", "", "this recording", "if repeated"]) {
        text::plain(ui, pos2(x, base), Align::Max, words, size::BODY, t.ink2);
    }
    ui.painter().hline(top.x..=(top.x + width), top.y + 23.0, Stroke::new(1.0, t.frame));
    let mut y = top.y + 24.0;
    // The rows of page 1 stand first, in its order.
    let mut all: Vec<&Outcome> = cx.results.outcomes.iter().filter(|o| o.primary).collect();
    all.sort_by_key(|o| key_table::place(&o.id, o.at).unwrap_or(usize::MAX));
    for outcome in all {
        let shown = shown::outcome(outcome, cx.results);
        row(ui, cx, top.x, width, x, y, &shown);
        y += 22.0;
        ui.painter().hline(top.x..=(top.x + width), y, Stroke::new(1.0, t.grid));
    }
    ui.allocate_rect(Rect::from_min_max(top, pos2(top.x + width, y + 4.0)), Sense::hover());
}

fn row(ui: &mut Ui, cx: &Context<'_>, left: f32, width: f32, x: [f32; 4], top: f32, shown: &Shown) {
    let t = cx.tokens;
    let base = top + 15.5;
    text::plain(ui, pos2(left, base), Align::Min, &shown.label, size::BODY, t.ink);
    let runs = [Run::new(shown.value.clone(), size::STATEMENT, t.ink)];
    let intervals = [&shown.recording, &shown.repeat].map(|i| i.clone());
    let rect = text::paint(ui, pos2(x[0], base), Align::Max, &runs);
    let named = Key { id: &shown.key, name: &shown.label, value: &shown.spoken(), cx };
    text::table_number(ui, rect, &named);
    let unit = pos2(x[0] + 6.0, base);
    if let Some(reason) = &shown.reason {
        let room = left + width - x[0] - 12.0;
        let mut words = reason.clone();
        while words.chars().count() > 8
            && text::width(ui, &[Run::new(words.clone(), size::BODY, t.ink2)]) > room
        {
            words = words.chars().take(words.chars().count() - 4).collect::<String>();
            words.push('…');
        }
        text::plain(ui, unit, Align::Min, words, size::BODY, t.ink2).on_hover_text(reason);
        return;
    }
    text::plain(ui, unit, Align::Min, &shown.unit, size::BODY, t.ink2);
    for (x, interval) in [x[2], x[3]].into_iter().zip(intervals) {
        if let Some(i) = interval {
            text::plain(ui, pos2(x, base), Align::Max, i, size::BODY, t.ink);
        }
    }
}
