//! The reader's own text of a statement.

use egui::Ui;
use record::session::Edit;
use record::session::findings::Status;

use super::{Form, foot};
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::panels::statements::question;

/// Draws the dialog for the statement `id`.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox, id: &str) {
    let Some(finding) = cx.findings.iter().find(|f| f.id == id) else {
        out.push(Command::CloseDialog);
        return;
    };
    let fresh = form.begin(&format!("statement {id}"));
    if fresh {
        *form.field("text") = finding.text.clone();
    }
    let label = ui.label(question(finding.section));
    let field = egui::TextEdit::multiline(form.field("text")).desired_width(600.0).desired_rows(5);
    let field = ui.add(field).labelled_by(label.id);
    if fresh {
        field.request_focus();
    }
    if let Some(draft) = &finding.draft_now {
        ui.label(format!("The draft now reads: {draft}"));
        if ui.button("Take the draft").clicked() {
            *form.field("text") = draft.clone();
        }
    }
    let ready = !form.get("text").trim().is_empty();
    if foot(ui, out, "Accept this text", ready) {
        let id = id.to_owned();
        out.push(Command::Edits(vec![
            Edit::FindingText { id: id.clone(), text: form.get("text").trim().to_owned() },
            Edit::FindingStatus { id, status: Status::Accepted },
        ]));
        out.push(Command::CloseDialog);
    }
}
