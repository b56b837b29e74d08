//! Events: what was noted? Timed events and samples, entered at the cursor.

use egui::{Rect, ScrollArea, Ui, UiBuilder, pos2};
use record::session::Edit;

use crate::chart::column::Side;
use crate::chart::ticks::clock;
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::view_state::Dialog;
use crate::widgets::notes;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let inner = Rect::from_min_max(
        rect.min + egui::vec2(16.0, 8.0),
        pos2(rect.right() - 16.0, rect.bottom()),
    );
    let ui = &mut ui.new_child(UiBuilder::new().max_rect(inner).id_salt("events"));
    let enter = Command::Show(Dialog::Event);
    let label = format!("{}  E", enter.label());
    if ui.add_enabled(enter.available(cx), egui::Button::new(label)).clicked() {
        out.push(enter);
    }
    ui.add_space(6.0);
    if cx.facts_file.events.is_empty() {
        ui.label("Nothing was noted. Readings and notes are entered at the cursor.");
        return;
    }
    let mut all = notes::of_side(cx, Side::Heart);
    all.extend(notes::of_side(cx, Side::Breath));
    ScrollArea::vertical().auto_shrink(false).show(ui, |ui| {
        egui::Grid::new("events").num_columns(4).striped(false).spacing([24.0, 6.0]).show(
            ui,
            |ui| {
                for (i, event) in cx.facts_file.events.iter().enumerate() {
                    if ui.link(clock(event.t_s)).on_hover_text("Set the cursor here.").clicked() {
                        out.push(Command::Cursor(event.t_s));
                    }
                    ui.label(event.kind.code());
                    let words = all
                        .iter()
                        .find(|n| n.t_s == event.t_s && n.code == event.kind.code())
                        .map_or_else(String::new, |n| n.text.clone());
                    ui.label(words);
                    let remove = Command::Edit(Edit::RemoveEvent { index: i });
                    let button = ui.add_enabled(remove.available(cx), egui::Button::new("Remove"));
                    if button.clicked() {
                        out.push(remove);
                    }
                    ui.end_row();
                }
            },
        );
    });
}
