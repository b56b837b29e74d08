//! Signing: what is missing, one confirmation, a typed name.

use egui::Ui;
use record::presentation::wording;
use record::session::{Edit, Missing, missing_for_signing};

use super::{Form, foot, line};
use crate::command::{Command, Outbox};
use crate::context::Context;

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    if form.begin("sign") {
        *form.field("meaning") = "I have read this test and stand for this interpretation.".into();
    }
    let missing = cx.session.map(missing_for_signing).unwrap_or_default();
    if missing.is_empty() {
        ui.label("All minimal facts are stated and every statement is decided.");
    } else {
        ui.label("Not there yet; the page will print it as “not stated”:");
        egui::ScrollArea::vertical().max_height(180.0).show(ui, |ui| {
            for one in &missing {
                ui.label(format!("–  {}", words(one)));
            }
        });
    }
    for (name, label) in [
        ("name", "Name"),
        ("role", "Role"),
        ("registration", "Registration"),
        ("meaning", "Meaning of the signature"),
    ] {
        line(ui, form, name, label);
    }
    let mut sure = form.get("sure") == "yes" || missing.is_empty();
    if !missing.is_empty() && ui.checkbox(&mut sure, "Sign although this is missing").changed() {
        *form.field("sure") = if sure { "yes" } else { "" }.into();
    }
    ui.label("Signing locks the session and freezes its results.");
    let ready = sure && !form.get("name").trim().is_empty();
    if foot(ui, out, "Sign and lock", ready) {
        let get = |name: &str| form.get(name).trim().to_owned();
        out.push(Command::Edit(Edit::Sign {
            name: get("name"),
            role: get("role"),
            registration: get("registration"),
            meaning: get("meaning"),
        }));
        out.push(Command::CloseDialog);
    }
}

fn words(missing: &Missing) -> String {
    match missing {
        Missing::Fact { label, .. } => wording::plain_text(label),
        Missing::Undecided(ids) => format!("{} statements not decided", ids.len()),
        Missing::Stale(ids) => format!("{} statements out of date", ids.len()),
        Missing::Questions(columns) => format!("open question: {}", columns.join(", ")),
    }
}
