//! Data: what are the numbers? Breaths with flags, as recorded.

use analysis::quantity::Quantity;
use analysis::results::FlagKind;
use egui::{Align, Rect, ScrollArea, Sense, Stroke, Ui, UiBuilder, pos2, vec2};
use record::presentation::wording;
use record::session::Edit;

use crate::chart::ticks::clock;
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::dialogs::exclude;
use crate::theme::{Family, size};
use crate::values;
use crate::view_state::Dialog;
use crate::widgets::text::{self, Run};

const ROW: f32 = 19.0;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    let columns: Vec<Quantity> = cx.recording.breaths.columns().map(|(q, _)| q).collect();
    let wide = ((rect.width() - 90.0 - 250.0) / columns.len().max(1) as f32).min(96.0);
    let x = |i: usize| rect.left() + 90.0 + wide * (i as f32 + 1.0) - 8.0;
    let base = rect.top() + 15.0;
    text::plain(ui, pos2(rect.left() + 74.0, base), Align::Max, "breath end", size::BODY, t.ink2);
    for (i, q) in columns.iter().enumerate() {
        let runs = [Run::new(q.row().symbol, size::BODY, t.text(Family::of(*q)))];
        text::line(ui, pos2(x(i), base), Align::Max, &runs);
        let unit = values::shown_unit(*q).0.shown();
        text::plain(ui, pos2(x(i), base + 15.0), Align::Max, unit, size::BODY, t.ink2);
    }
    let copy = Rect::from_min_size(pos2(rect.right() - 110.0, rect.top() + 2.0), vec2(100.0, 24.0));
    if ui.put(copy, egui::Button::new("Copy table")).clicked() {
        ui.ctx().copy_text(table(cx, &columns));
    }
    let leave = Rect::from_min_size(copy.left_top() - vec2(146.0, 0.0), vec2(140.0, 24.0));
    let command = Command::Show(Dialog::Exclude(None));
    let button = egui::Button::new(command.label());
    let enabled = command.available(cx);
    let place = &mut ui.new_child(UiBuilder::new().max_rect(leave).id_salt("leave out"));
    if place.add_enabled(enabled, button).on_hover_text(command.hover()).clicked() {
        out.push(command);
    }
    let body = Rect::from_min_max(pos2(rect.left(), rect.top() + 36.0), rect.max);
    ui.painter().hline(rect.x_range(), body.top(), Stroke::new(1.0, t.frame));
    let child = &mut ui.new_child(UiBuilder::new().max_rect(body).id_salt("breaths"));
    child.spacing_mut().item_spacing.y = 0.0;
    let n = cx.recording.breaths.len();
    ScrollArea::vertical().auto_shrink(false).show_rows(child, ROW, n, |ui, range| {
        for i in range {
            row(ui, cx, out, rect, i, &columns, &x);
        }
    });
}

fn row(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    rect: Rect,
    i: usize,
    columns: &[Quantity],
    x: &impl Fn(usize) -> f32,
) {
    let t = cx.tokens;
    let top = ui.cursor().min.y;
    let line = Rect::from_min_size(pos2(rect.left(), top), vec2(rect.width() - 14.0, ROW));
    let response = ui.allocate_rect(line, Sense::click());
    let at = cx.recording.breaths.end_s()[i];
    let near = (at - cx.cursor()).abs() < 0.5 * cx.recording.breaths.duration_s()[i];
    if near || response.hovered() {
        ui.painter().rect_filled(line, 0.0, t.control);
    }
    response.widget_info(|| {
        egui::WidgetInfo::labeled(egui::Role::Row, true, format!("breath at {}", clock(at)))
    });
    if response.clicked() {
        out.push(Command::Cursor(at));
    }
    menu(&response, cx, out, i);
    let base = top + 14.0;
    let run = |s: String, ink| [Run::new(s, size::BODY, ink)];
    text::paint(ui, pos2(rect.left() + 74.0, base), Align::Max, &run(clock(at), t.ink2));
    for (c, q) in columns.iter().enumerate() {
        let (words, ink) = match cx.recording.breaths.value(*q, i) {
            Some(v) => (shown(*q, v), t.ink),
            None => ("–".to_owned(), t.ink2),
        };
        text::paint(ui, pos2(x(c), base), Align::Max, &run(words, ink));
    }
    if let Some(flag) = cx.results.flags.iter().find(|f| f.breath == i) {
        let word = match flag.kind {
            FlagKind::LeftOut => "× left out",
            FlagKind::Merged => "merged",
            FlagKind::Manoeuvre => "manoeuvre",
        };
        let left = x(columns.len().saturating_sub(1)) + 14.0;
        text::paint(ui, pos2(left, base), Align::Min, &run(word.to_owned(), t.ink));
        response.on_hover_text(crate::words::note(&flag.note, cx.results));
    }
}

/// What can be done with breath `i`.
fn menu(response: &egui::Response, cx: &Context<'_>, out: &mut Outbox, i: usize) {
    response.context_menu(|ui| {
        let middle = cx.recording.breaths.mid_s(i);
        let left_out =
            cx.decisions.excluded.iter().find(|e| e.from_s <= middle && middle <= e.to_s);
        let (label, command) = match left_out {
            Some(e) => {
                let edit = Edit::IncludeBreaths { from_s: e.from_s, to_s: e.to_s };
                ("exclude-undo", Command::Edit(edit))
            }
            None => {
                let stretch = exclude::around(&cx.recording.breaths, i);
                ("exclude-breath", Command::Show(Dialog::Exclude(Some(stretch))))
            }
        };
        let button = egui::Button::new(wording::plain_text(label));
        if ui.add_enabled(command.available(cx), button).clicked() {
            out.push(command);
            ui.close();
        }
    });
}

fn shown(q: Quantity, value: f64) -> String {
    record::presentation::values::of_series(q, value).0
}

/// The table as text, with the caution that goes with every output.
fn table(cx: &Context<'_>, columns: &[Quantity]) -> String {
    let mut lines = vec![format!("# {}", record::presentation::wording::plain_text("caution"))];
    let head: Vec<String> =
        columns.iter().map(|q| format!("{} {}", q.code(), q.unit().ucum())).collect();
    lines.push(format!("t s\t{}", head.join("\t")));
    for (i, t) in cx.recording.breaths.end_s().iter().enumerate() {
        let cells: Vec<String> = columns
            .iter()
            .map(|q| cx.recording.breaths.value(*q, i).map_or(String::new(), |v| format!("{v}")))
            .collect();
        lines.push(format!("{t}\t{}", cells.join("\t")));
    }
    lines.join("\n")
}
