//! Parameters of the model of a normal response: all of them visible and editable.

use analysis::settings::OverlaySettings;
use egui::Ui;
use record::presentation::choices::parameters;
use record::presentation::{values, wording};
use record::session::Edit;

use super::{Form, foot, line_of};
use crate::command::{Command, Outbox};
use crate::context::Context;

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    let now = parameters(&cx.settings.overlay);
    if form.begin("overlay") {
        for (path, _, value, _) in now {
            *form.field(path) = format!("{value}");
        }
    }
    ui.label(wording::plain_text("overlay-dialog-intro"));
    for (path, word, default, unit) in parameters(&OverlaySettings::default()) {
        let name = wording::plain_text(&format!("word-{word}"));
        let label = match unit.shown() {
            "" => name,
            unit => format!("{name}, {unit}"),
        };
        let value = values::joined(&format!("{default}"), unit.shown());
        let hover = wording::with("overlay-dialog-default", &[("value", value)]);
        line_of(ui, form, path, &label, (360.0, 120.0)).on_hover_text(hover);
    }
    for note in cx.results.overlay.model.iter().flat_map(|m| &m.doubts) {
        ui.label(crate::words::note(note, cx.results));
    }
    let typed: Vec<Option<f64>> =
        now.iter().map(|(path, ..)| form.get(path).trim().parse().ok()).collect();
    let ready = typed.iter().all(Option::is_some) && !cx.signed;
    if foot(ui, out, &wording::plain_text("overlay-dialog-use"), ready) {
        let edits: Vec<Edit> = now
            .iter()
            .zip(typed)
            .filter_map(|((path, _, before, _), now)| Some((path, *before, now?)))
            .filter(|(_, before, now)| before != now)
            .map(|(path, _, now)| Edit::SetSetting { path: (*path).to_owned(), value: now.into() })
            .collect();
        out.push(Command::Edits(edits));
        out.push(Command::CloseDialog);
    }
}
