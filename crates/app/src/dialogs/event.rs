//! A timed event, entered at the cursor.

use egui::Ui;
use record::session::Edit;
use serde_json::{Map, Value};

use super::{Form, foot, line};
use crate::chart::ticks::clock;
use crate::command::{Command, Outbox};
use crate::context::Context;

/// A kind: its code, its name, the numbers it may hold (field, label with unit).
type Kind = (&'static str, &'static str, &'static [(&'static str, &'static str)]);

/// Kinds offered.
const KINDS: &[Kind] = &[
    ("bp", "Blood pressure", &[("sys_mmhg", "Systolic, mmHg"), ("dia_mmhg", "Diastolic, mmHg")]),
    ("spo2", "SpO₂", &[("spo2_pct", "SpO₂, %")]),
    ("borg", "Perceived exertion", &[("breathlessness", "Breathlessness"), ("legs", "Legs")]),
    ("ecg", "ECG note", &[]),
    ("arrhythmia", "Arrhythmia", &[]),
    ("symptom", "Symptom", &[]),
    (
        "gas-sample",
        "Blood gases",
        &[("pao2_mmhg", "PaO₂, mmHg"), ("paco2_mmhg", "PaCO₂, mmHg"), ("sao2", "SaO₂, 0 to 1")],
    ),
    ("lactate", "Lactate", &[("lactate_mmol_l", "Lactate, mmol/L")]),
    ("ic-manoeuvre", "IC manoeuvre", &[("ic_l", "IC, L")]),
    ("cough", "Cough", &[]),
    ("leak", "Mask leak", &[]),
    ("talking", "Talking", &[]),
    ("cadence-fade", "Cadence fades", &[]),
    ("rail-grip", "Grips the rail", &[]),
    ("oxygen-change", "Inspired oxygen changed", &[("fio2", "FIO₂, 0 to 1")]),
    ("treatment", "Treatment", &[]),
    ("comment", "Comment", &[]),
];

/// Draws the dialog.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    if form.begin("event") {
        *form.field("kind") = "bp".into();
        *form.field("t_s") = format!("{:.0}", cx.cursor());
    }
    let now = form.get("kind").to_owned();
    let known = KINDS.iter().find(|k| k.0 == now).unwrap_or(&KINDS[0]);
    egui::ComboBox::from_id_salt("event kind")
        .selected_text(known.1)
        .width(240.0)
        .show_ui(ui, |ui| {
            for (code, name, _) in KINDS {
                if ui.selectable_label(*code == now, *name).clicked() {
                    *form.field("kind") = (*code).to_owned();
                }
            }
        })
        .response
        .accessible_name("Kind of event");
    line(ui, form, "t_s", "Time of the file, s");
    if let Ok(t) = form.get("t_s").trim().parse::<f64>() {
        ui.label(format!("at {}", clock(t)));
    }
    for (field, label) in known.2 {
        line(ui, form, field, label);
    }
    line(ui, form, "text", "In words");
    let event = event(form, known.0, known.2);
    if foot(ui, out, "Enter", event.is_some())
        && let Some(event) = event
    {
        out.push(Command::Edit(Edit::AddEvent { event }));
        out.push(Command::CloseDialog);
    }
}

/// The event as the facts file writes it; `None` while a number is not one.
fn event(form: &Form, kind: &str, fields: &[(&str, &str)]) -> Option<Value> {
    let mut map = Map::new();
    map.insert("t_s".into(), form.get("t_s").trim().parse::<f64>().ok()?.into());
    map.insert("kind".into(), kind.into());
    for (field, _) in fields {
        let text = form.get(field).trim();
        if !text.is_empty() {
            map.insert((*field).to_owned(), text.replace(',', ".").parse::<f64>().ok()?.into());
        }
    }
    let words = form.get("text").trim();
    if !words.is_empty() {
        map.insert("text".into(), words.into());
    }
    Some(Value::Object(map))
}
