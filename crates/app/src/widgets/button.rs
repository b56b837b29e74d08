//! Buttons made from commands.

use egui::{Button, Color32, Rect, Response, RichText, Stroke, Ui};

use super::text::{self, Run};
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;

/// Width of the button of `command` with its key.
#[must_use]
pub fn width(ui: &Ui, command: &Command) -> f32 {
    text::width(ui, &[Run::new(command.label(), size::BODY, Color32::PLACEHOLDER)]) + 22.0
}

/// The button of `command` at `rect`.
pub fn at(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    rect: Rect,
    command: &Command,
    label: &str,
) -> Response {
    styled(ui, cx, out, rect, command, label, false)
}

/// The same, dark where `strong`.
pub fn styled(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    rect: Rect,
    command: &Command,
    label: &str,
    strong: bool,
) -> Response {
    let t = cx.tokens;
    let available = command.available(cx);
    let (fill, ink) = if strong { (t.ink, t.plot) } else { (t.control, t.ink) };
    let words = RichText::new(label).size(size::BODY).color(if available { ink } else { t.ink });
    let mut button = Button::new(words).wrap_mode(egui::TextWrapMode::Truncate);
    if strong && available {
        button = button.fill(fill).stroke(Stroke::new(1.0, t.ink));
    }
    let response = ui
        .add_enabled_ui(available, |ui| {
            ui.spacing_mut().button_padding = egui::vec2(8.0, 0.0);
            ui.put(rect, button.min_size(rect.size()))
        })
        .inner
        .on_hover_text(command.hover())
        .on_disabled_hover_text(command.hover());
    if response.clicked() {
        out.push(command.clone());
    }
    response
}
