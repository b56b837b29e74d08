//! Choosing predicted sets: who was studied, how this person fits, what each would give.

use analysis::predicted::chooser::{self, Choice};
use analysis::predicted::sets::Predicts;
use analysis::predicted::validity::{Fit, word_and_unit};
use egui::Ui;
use record::presentation::{values, wording};
use record::session::Edit;

use crate::command::{Command, Outbox};
use crate::context::Context;

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox) {
    ui.label("One family per report by default. What stands on the page is recorded.");
    let mut unlocked = cx.settings.predicted.unconfirmed;
    let words = "Also offer sets with unconfirmed coefficients";
    if ui.checkbox(&mut unlocked, words).changed() {
        out.push(setting("predicted.unconfirmed", serde_json::Value::Bool(unlocked)));
    }
    let person = chooser::person(cx.facts, cx.recording);
    egui::ScrollArea::vertical().max_height(460.0).show(ui, |ui| {
        for (predicts, title) in [(Predicts::Vo2Peak, "Peak V̇O₂"), (Predicts::HrPeak, "Peak HR")]
        {
            ui.separator();
            ui.strong(title);
            for choice in chooser::choices(cx.settings, predicts, &person) {
                row(ui, cx, out, predicts, &choice);
            }
        }
    });
}

fn row(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, predicts: Predicts, choice: &Choice<'_>) {
    let set = choice.set;
    ui.add_space(4.0);
    let name = format!("{} ({})", set.name, set.year);
    let name = if choice.locked { format!("{name}, unconfirmed, locked") } else { name };
    let radio = egui::RadioButton::new(choice.chosen, name);
    if ui.add_enabled(!choice.locked, radio).on_hover_text(&set.citation).clicked() {
        let id = Some(set.id.clone());
        out.push(Command::Edit(match predicts {
            Predicts::Vo2Peak => Edit::SetPredicted { vo2: id, hr: None },
            _ => Edit::SetPredicted { vo2: None, hr: id },
        }));
    }
    ui.indent(("set", &set.id, predicts.predicted_id()), |ui| {
        ui.label(&set.population);
        ui.label(fit(choice));
        if let Err(why) = &choice.result {
            ui.label(crate::words::note(why, cx.results));
        }
        if choice.fit == Some(Fit::Out) || choice.overridden {
            let mut on = choice.overridden;
            let label = format!("Use {} although out of range", set.name);
            if ui.add_enabled(!choice.locked, egui::Checkbox::new(&mut on, label)).changed() {
                let mut ids = cx.settings.predicted.overridden.clone();
                ids.retain(|id| *id != set.id);
                if on {
                    ids.push(set.id.clone());
                }
                out.push(setting("predicted.overridden", serde_json::json!(ids)));
            }
        }
    });
}

/// How the person lies against the set, in words and symbol, range by range.
fn fit(choice: &Choice<'_>) -> String {
    let word = match choice.fit {
        Some(Fit::In) => "● In range",
        Some(Fit::Near) => "△ Near range",
        Some(Fit::Flagged) => "△ Outside the usual size",
        Some(Fit::Out) => "✕ Out of range",
        None => "Not known: a fact is missing, or the set is for the other sex",
    };
    let ranges: Vec<String> = choice
        .fits
        .iter()
        .map(|f| {
            let (word, unit) = word_and_unit(f.range.input);
            let shown = |v: f64| values::in_unit(v, unit);
            let input = wording::plain_text(&format!("word-{word}"));
            let (low, high) = (shown(f.range.low), shown(f.range.high));
            format!("{input} {}, {low} to {high}", shown(f.value))
        })
        .collect();
    if ranges.is_empty() {
        word.to_owned()
    } else {
        format!("{word}  ·  {}", ranges.join("  ·  "))
    }
}

fn setting(path: &str, value: serde_json::Value) -> Command {
    Command::Edit(Edit::SetSetting { path: path.to_owned(), value })
}
