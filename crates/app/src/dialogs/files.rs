//! Opening, saving, exporting: a path field that always works, and the desktop's dialog.

use std::path::PathBuf;

use egui::{Key, Ui};

use super::{Form, foot, line};
use crate::command::{Command, Outbox};
use crate::context::Context;

fn path_of(form: &Form) -> Option<PathBuf> {
    let text = form.get("path").trim();
    (!text.is_empty()).then(|| PathBuf::from(text))
}

fn entered(ui: &Ui, response: &egui::Response) -> bool {
    response.lost_focus() && ui.input(|i| i.key_pressed(Key::Enter))
}

/// Open a table or a session.
pub fn open(ui: &mut Ui, _cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    let fresh = form.begin("open");
    ui.label("A breath table (CSV, TSV, text) or a saved session. Drop works too.");
    let field = line(ui, form, "path", "Path of the file");
    if fresh {
        field.request_focus();
    }
    let enter = entered(ui, &field);
    ui.horizontal(|ui| {
        for command in [Command::PickFile, Command::OpenDemo] {
            if ui.button(command.label()).clicked() {
                out.push(command);
            }
        }
    });
    let path = path_of(form);
    if (foot(ui, out, "Open", path.is_some()) || enter)
        && let Some(path) = path
    {
        out.push(Command::OpenPath(path));
    }
}

/// Save the session.
pub fn save(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    if form.begin("save") {
        *form.field("path") = format!("{}.rampcrest.json", file_stem(cx));
    }
    let field = line(ui, form, "path", "Path of the session");
    let enter = entered(ui, &field);
    let path = path_of(form);
    if (foot(ui, out, "Save", path.is_some()) || enter)
        && let Some(path) = path
    {
        out.push(Command::SaveTo(path));
    }
}

/// Write the page.
pub fn export(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    if form.begin("export") {
        *form.field("path") = format!("{}.html", file_stem(cx));
    }
    if !cx.signed {
        ui.label("The session is a draft: the page says so in a box.");
    }
    let field = line(ui, form, "path", "Path of the page");
    let enter = entered(ui, &field);
    let path = path_of(form);
    if (foot(ui, out, "Export", path.is_some()) || enter)
        && let Some(path) = path
    {
        out.push(Command::ExportTo(path));
    }
}

/// A file name without anything a file system minds.
fn file_stem(cx: &Context<'_>) -> String {
    let name: String = cx
        .label
        .chars()
        .map(|c| if c.is_alphanumeric() { c.to_ascii_lowercase() } else { '-' })
        .collect();
    if name.is_empty() { "test".into() } else { name }
}

/// Work would be lost.
pub fn unsaved(ui: &mut Ui, out: &mut Outbox, next: &Command) {
    ui.label("This session has changes that are not saved.");
    ui.horizontal(|ui| {
        if ui.button("Save session").clicked() {
            out.push(Command::Save);
        }
        if ui.button("Discard changes").clicked() {
            out.push(Command::Discard(Box::new(next.clone())));
        }
        if ui.button("Cancel").clicked() {
            out.push(Command::CloseDialog);
        }
    });
}
