//! Inputs of the stroke-volume sentence: every assumption listed and adjustable.

use egui::Ui;
use record::session::Edit;

use super::{Form, foot, line};
use crate::command::{Command, Outbox};
use crate::context::Context;

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    let f = &cx.settings.fick;
    let fields = [
        ("fick.extraction_limit", "Cautious limit of extraction", f.extraction_limit),
        ("fick.extraction_usual", "Usual ceiling of extraction", f.extraction_usual),
        ("fick.haemoconcentration", "Rise of Hb in exercise", f.haemoconcentration),
        ("fick.calibration", "Allowance for gas calibration", f.calibration),
        ("fick.sao2_upper", "Upper limit of SaO₂", f.sao2_upper),
        ("fick.hufner", "O₂ bound per gram of Hb, mL/g", f.hufner),
    ];
    if form.begin("inputs") {
        for (path, _, value) in fields {
            *form.field(path) = format!("{value}");
        }
    }
    if let Some(bound) = &cx.results.fick.bound {
        for note in &bound.assumptions {
            ui.label(crate::words::note(note, cx.results));
        }
        ui.separator();
    }
    for (path, label, _) in fields {
        line(ui, form, path, label);
    }
    let values: Vec<Option<f64>> =
        fields.iter().map(|(path, ..)| form.get(path).trim().parse().ok()).collect();
    if foot(ui, out, "Use these inputs", values.iter().all(Option::is_some)) {
        let edits: Vec<Edit> = fields
            .iter()
            .zip(values)
            .filter_map(|((path, _, before), now)| Some((path, *before, now?)))
            .filter(|(_, before, now)| before != now)
            .map(|(path, _, now)| Edit::SetSetting { path: (*path).to_owned(), value: now.into() })
            .collect();
        out.push(Command::Edits(edits));
        out.push(Command::CloseDialog);
    }
}
