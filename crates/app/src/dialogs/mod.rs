//! Dialogs, one file each; what is typed lives in [`Form`] until it becomes a command.

pub mod event;
pub mod exclude;
pub mod facts;
pub mod files;
pub mod inputs;
pub mod keys;
pub mod line_up;
pub mod overlay;
pub mod sets;
pub mod sign;
pub mod statement;

use std::collections::BTreeMap;

use egui::{Align2, RichText, Ui, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::Dialog;

/// What is typed and not yet carried out.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Form {
    /// The dialog for which it is filled.
    pub of: Option<String>,
    /// Fields by name.
    pub fields: BTreeMap<String, String>,
}

impl Form {
    /// The text of a field.
    pub fn field(&mut self, name: &str) -> &mut String {
        self.fields.entry(name.to_owned()).or_default()
    }

    /// The text of a field, read only.
    #[must_use]
    pub fn get(&self, name: &str) -> &str {
        self.fields.get(name).map_or("", String::as_str)
    }

    /// Starts anew for the dialog `name`, unless it is that dialog's form already; `true` when it
    /// was started anew.
    pub fn begin(&mut self, name: &str) -> bool {
        if self.of.as_deref() == Some(name) {
            return false;
        }
        *self = Self { of: Some(name.to_owned()), fields: BTreeMap::new() };
        true
    }
}

/// Draws the open dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    let Some(dialog) = &cx.view.dialog else {
        form.of = None;
        return;
    };
    let title = match dialog {
        Dialog::Statement(_) => "Edit statement".to_owned(),
        other => Command::Show(other.clone()).label().replace('…', ""),
    };
    let mut open = true;
    let response = egui::Window::new(RichText::new(&title).size(size::SECTION))
        .id(egui::Id::unique("dialog"))
        .collapsible(false)
        .resizable(false)
        .open(&mut open)
        .default_height(ui.ctx().content_rect().height())
        .anchor(Align2::CENTER_CENTER, vec2(0.0, 0.0))
        .show(ui.ctx(), |ui| {
            let room = ui.ctx().content_rect().size();
            let wide = if matches!(dialog, Dialog::Sets(_)) { 780.0_f32 } else { 620.0 };
            ui.set_width(wide.min(room.x - 60.0));
            egui::ScrollArea::vertical().max_height(room.y - 90.0).show(ui, |ui| match dialog {
                Dialog::Open => files::open(ui, cx, form, out),
                Dialog::Save => files::save(ui, cx, form, out),
                Dialog::Export => files::export(ui, cx, form, out),
                Dialog::Facts => facts::show(ui, cx, form, out),
                Dialog::Sign => sign::show(ui, cx, form, out),
                Dialog::Keys => keys::show(ui),
                Dialog::Event => event::show(ui, cx, form, out),
                Dialog::Exclude(stretch) => exclude::show(ui, cx, form, out, *stretch),
                Dialog::Sets(quantity) => sets::show(ui, cx, form, out, *quantity),
                Dialog::Overlay => overlay::show(ui, cx, form, out),
                Dialog::LineUp => line_up::show(ui, cx, form),
                Dialog::Inputs => inputs::show(ui, cx, form, out),
                Dialog::Statement(id) => statement::show(ui, cx, form, out, id),
                Dialog::Unsaved(next) => files::unsaved(ui, out, next),
            });
        });
    let escaped = ui.input_mut(|i| i.consume_key(egui::Modifiers::NONE, egui::Key::Escape));
    if response.is_some() && (!open || escaped) {
        out.push(Command::CloseDialog);
    }
}

/// A labelled line of text; the response is that of the field.
pub fn line(ui: &mut Ui, form: &mut Form, name: &str, label: &str) -> egui::Response {
    line_of(ui, form, name, label, (190.0, 380.0))
}

/// The same with the widths of label and field.
pub fn line_of(
    ui: &mut Ui,
    form: &mut Form,
    name: &str,
    label: &str,
    (label_width, field_width): (f32, f32),
) -> egui::Response {
    ui.horizontal(|ui| {
        let layout = egui::Layout::left_to_right(egui::Align::Center);
        let label = ui.allocate_ui_with_layout(vec2(label_width, 20.0), layout, |ui| {
            ui.set_min_width(label_width);
            ui.label(label)
        });
        let field = egui::TextEdit::singleline(form.field(name)).desired_width(field_width);
        ui.add(field).labelled_by(label.inner.id)
    })
    .inner
}

/// The row of buttons at the foot: what happens, and cancel. `true` when it was pressed.
pub fn foot(ui: &mut Ui, out: &mut Outbox, label: &str, enabled: bool) -> bool {
    ui.add_space(6.0);
    let mut pressed = false;
    ui.horizontal(|ui| {
        pressed = ui.add_enabled(enabled, egui::Button::new(label)).clicked();
        if ui.button("Cancel").clicked() {
            out.push(Command::CloseDialog);
        }
    });
    pressed
}
