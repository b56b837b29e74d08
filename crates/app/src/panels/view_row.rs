//! The row of views, and what concerns all of them: averaging, raw breaths, overlay, sets.

use analysis::predicted::sets::Predicts;
use analysis::settings::Averaging;
use egui::{Align, Rect, Role, Sense, Ui, WidgetInfo, pos2, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::{Dialog, View};
use crate::widgets::text::{self, Run};
use record::session::Edit;

/// Draws the row.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect_filled(rect, 0.0, t.panel);
    ui.painter().hline(rect.x_range(), rect.bottom(), egui::Stroke::new(1.0, t.frame));
    let right = controls(ui, cx, out, rect);
    let mut x = rect.left() + cx.grid.margin;
    for (i, view) in View::TABS.iter().enumerate() {
        let (wide, with_question) = tab_width(ui, cx, *view);
        let room_for_more = if i + 1 < View::TABS.len() { 74.0 } else { 0.0 };
        if x + wide + room_for_more > right || (cx.grid.narrow && i >= 7) {
            more(ui, cx, out, pos2(x, rect.top()), rect.height(), &View::TABS[i..]);
            return;
        }
        let tab = Rect::from_min_size(pos2(x, rect.top()), vec2(wide, rect.height()));
        one_tab(ui, cx, out, tab, *view, with_question);
        x += wide + 4.0;
    }
}

fn pad(cx: &Context<'_>) -> f32 {
    if cx.grid.narrow { 8.0 } else { 10.0 }
}

fn tab_width(ui: &Ui, cx: &Context<'_>, view: View) -> (f32, bool) {
    let name = [Run::new(view.name(), size::STATEMENT, cx.tokens.ink)];
    let mut wide = text::width(ui, &name) + 2.0 * pad(cx);
    let question = view == cx.view.view && !cx.grid.narrow;
    if question {
        let run = [Run::new(view.question(), size::BODY, cx.tokens.ink2)];
        wide += text::width(ui, &run) + 10.0;
    }
    (wide, question)
}

fn one_tab(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    rect: Rect,
    view: View,
    with_question: bool,
) {
    let t = cx.tokens;
    let active = view == cx.view.view;
    let response = ui.interact(rect, egui::Id::unique(("tab", view.code())), Sense::click());
    response.widget_info(|| WidgetInfo::selected(Role::Tab, true, active, view.name()));
    if active {
        ui.painter().rect_filled(rect, 0.0, t.window);
        let bar = Rect::from_min_size(rect.min, vec2(rect.width(), 2.5));
        ui.painter().rect_filled(bar, 0.0, t.ink);
    }
    if response.has_focus() {
        let ring = egui::Stroke::new(2.0, t.ink);
        ui.painter().rect_stroke(rect.shrink(2.0), 2.0, ring, egui::StrokeKind::Inside);
    }
    let ink = if active || response.hovered() { t.ink } else { t.ink2 };
    let mut runs = vec![Run::new(view.name(), size::STATEMENT, ink)];
    if with_question {
        runs.push(Run::new(format!("  {}", view.question()), size::BODY, t.ink2));
    }
    text::paint(ui, pos2(rect.left() + pad(cx), rect.center().y + 5.0), Align::Min, &runs);
    if response.on_hover_text(Command::Go(view).hover()).clicked() {
        out.push(Command::Go(view));
    }
}

fn more(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    at: egui::Pos2,
    height: f32,
    rest: &[View],
) {
    let rect = Rect::from_min_size(at + vec2(0.0, 4.0), vec2(90.0, height - 8.0));
    let ui = &mut ui.new_child(egui::UiBuilder::new().max_rect(rect).id_salt("more views"));
    let label = match rest.iter().find(|v| **v == cx.view.view) {
        Some(view) => format!("{} ▾", view.name()),
        None => "More ▾".to_owned(),
    };
    let words = egui::RichText::new(label).size(size::STATEMENT).color(cx.tokens.ink2);
    let button = egui::Button::new(words).frame(false).wrap_mode(egui::TextWrapMode::Extend);
    egui::containers::menu::MenuButton::from_button(button).ui(ui, |ui| {
        if cx.grid.narrow {
            averaging(ui, cx, out);
            check(ui, out, Command::ToggleOverlay, cx.settings.overlay_shown);
            check(ui, out, Command::ToggleRaw, cx.view.raw);
            choose_sets(ui, out);
            ui.separator();
        }
        for view in rest {
            if ui.button(view.name()).on_hover_text(view.question()).clicked() {
                out.push(Command::Go(*view));
            }
        }
    });
}

/// Averagings offered.
pub const AVERAGINGS: [Averaging; 8] = [
    Averaging::RollingSeconds(10),
    Averaging::RollingSeconds(15),
    Averaging::RollingSeconds(20),
    Averaging::RollingSeconds(30),
    Averaging::RollingSeconds(60),
    Averaging::RollingBreaths(5),
    Averaging::RollingBreaths(8),
    Averaging::BinSeconds(30),
];

/// An averaging in words.
#[must_use]
pub fn averaging_name(averaging: Averaging) -> String {
    match averaging {
        Averaging::RollingSeconds(s) => format!("Rolling mean, {s}\u{a0}s"),
        Averaging::RollingBreaths(n) => format!("Rolling mean, {n}\u{a0}breaths"),
        Averaging::BinSeconds(s) => format!("Means of {s}\u{a0}s"),
    }
}

fn controls(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> f32 {
    let right = rect.right() - cx.grid.margin;
    if cx.grid.narrow || !cx.open {
        return right;
    }
    let corner = pos2(rect.left() + 700.0, rect.top() + 5.0);
    let area = Rect::from_min_max(corner, pos2(right, rect.bottom() - 5.0));
    let builder = egui::UiBuilder::new()
        .max_rect(area)
        .id_salt("view controls")
        .layout(egui::Layout::right_to_left(Align::Center));
    let ui = &mut ui.new_child(builder);
    ui.spacing_mut().item_spacing.x = 12.0;
    sets(ui, cx, out);
    check(ui, out, Command::ToggleOverlay, cx.settings.overlay_shown);
    check(ui, out, Command::ToggleRaw, cx.view.raw);
    averaging(ui, cx, out);
    ui.min_rect().left() - 12.0
}

/// The predicted sets that stand on the page: of peak V̇O₂ and of peak HR.
fn sets(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox) {
    let choice = &cx.settings.predicted;
    let set = |id: &str| cx.settings.sets.iter().find(|s| s.id == id);
    let vo2 = set(&choice.vo2).map_or(choice.vo2.clone(), |s| {
        let first = s.name.split([',', ' ']).next().unwrap_or_default();
        format!("{first} {}", s.year)
    });
    let hr = set(&choice.hr)
        .map_or(choice.hr.clone(), |s| s.name.rsplit(": ").next().unwrap_or_default().to_owned());
    let words = format!("{vo2} · {hr}");
    let response = egui::ComboBox::from_id_salt("predicted sets")
        .selected_text(words)
        .width(210.0)
        .truncate()
        .show_ui(ui, |ui| {
            choose_sets(ui, out);
            ui.separator();
            for (target, now) in [(Predicts::Vo2Peak, &choice.vo2), (Predicts::HrPeak, &choice.hr)]
            {
                let of = |s: &&analysis::predicted::sets::PredictedSet| {
                    s.equations.iter().any(|e| e.predicts == target)
                };
                for set in cx.settings.sets.iter().filter(of) {
                    let label = format!("{} ({})", set.name, set.year);
                    if ui.selectable_label(set.id == *now, label).clicked() {
                        out.push(Command::Edit(Edit::choose_set(target, &set.id)));
                    }
                }
                ui.separator();
            }
        })
        .response;
    response
        .accessible_name("Predicted sets")
        .on_hover_text("Which published equations stand on the page.");
}

/// The dialogs of predicted sets and of the model made from them.
fn choose_sets(ui: &mut Ui, out: &mut Outbox) {
    for choose in [Dialog::Sets(Predicts::Vo2Peak), Dialog::Overlay].map(Command::Show) {
        if ui.button(choose.label()).clicked() {
            out.push(choose);
        }
    }
}

fn check(ui: &mut Ui, out: &mut Outbox, command: Command, on: bool) {
    let mut value = on;
    let label = match (&command, command.key_text()) {
        (Command::ToggleOverlay, Some(key)) => format!("{}  {key}", command.label()),
        _ => command.label(),
    };
    let response = ui
        .checkbox(&mut value, label)
        .accessible_name(command.label())
        .on_hover_text(command.hover());
    if response.changed() {
        out.push(command);
    }
}

/// The averaging choice.
pub fn averaging(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox) {
    let now = cx.settings.averaging;
    let response = egui::ComboBox::from_id_salt("averaging")
        .selected_text(averaging_name(now))
        .width(140.0)
        .show_ui(ui, |ui| {
            for choice in AVERAGINGS {
                if ui.selectable_label(choice == now, averaging_name(choice)).clicked() {
                    out.push(Command::Edit(Edit::averaging(choice)));
                }
            }
        })
        .response;
    response.accessible_name("Averaging").on_hover_text("How breaths are averaged in charts.");
}
