//! The short form of facts. Charts never wait for it; what is left empty is "not stated".

use egui::Ui;
use record::session::Edit;
use serde_json::{Value, json};

use super::{Form, foot, line};
use crate::command::{Command, Outbox};
use crate::context::Context;

/// How a fact is asked.
enum Ask {
    Text,
    Number,
    Choice(&'static [(&'static str, &'static str)]),
}

const YES_NO: &[(&str, &str)] = &[("true", "yes"), ("false", "no")];

/// The facts of the form: path, label, how it is asked.
const FACTS: &[(&str, &str, Ask)] = &[
    ("test.question", "Referrer’s question", Ask::Text),
    ("subject.age_years", "Age, years", Ask::Number),
    (
        "subject.sex",
        "Sex for the equations",
        Ask::Choice(&[("male", "male"), ("female", "female")]),
    ),
    ("subject.height_cm", "Height, cm", Ask::Number),
    ("subject.mass_kg", "Body mass, kg", Ask::Number),
    ("hb.value", "Haemoglobin", Ask::Number),
    (
        "hb.unit",
        "Unit of haemoglobin",
        Ask::Choice(&[("g/L", "g/L"), ("g/dL", "g/dL"), ("mmol/L", "mmol/L")]),
    ),
    ("subject.fev1_l", "FEV₁, L", Ask::Number),
    ("subject.tlc_l", "Total lung capacity, L", Ask::Number),
    (
        "test.rhythm",
        "Rhythm",
        Ask::Choice(&[
            ("sinus", "sinus"),
            ("af", "atrial fibrillation"),
            ("paced", "paced"),
            ("other", "other"),
        ]),
    ),
    ("test.rate_slowing_drug.taken", "Rate-slowing drug taken", Ask::Choice(YES_NO)),
    ("test.rate_slowing_drug.last_dose_h", "Last dose, h before the test", Ask::Number),
    (
        "test.indication",
        "Indication",
        Ask::Choice(&[
            ("heart-failure", "heart failure"),
            ("preoperative", "pre-operative"),
            ("pulmonary-hypertension", "pulmonary hypertension"),
            ("chronic-lung", "chronic lung disease"),
            ("unexplained-breathlessness", "unexplained breathlessness"),
            ("athlete", "athlete"),
            ("none", "none of these"),
        ]),
    ),
    (
        "test.operation_kind",
        "Planned operation",
        Ask::Choice(&[
            ("lung-resection", "lung resection"),
            ("major-abdominal", "major abdominal, not colorectal"),
            ("colorectal", "colorectal"),
            ("other", "other"),
        ]),
    ),
    ("test.mode", "Ergometer", Ask::Choice(&[("cycle", "cycle"), ("treadmill", "treadmill")])),
    ("test.protocol.kind", "Protocol", Ask::Choice(&[("ramp", "ramp"), ("steps", "steps")])),
    ("test.protocol.w_per_min", "Rise, W/min", Ask::Number),
    ("test.fio2", "FIO₂, 0 to 1", Ask::Number),
    ("test.stop_reason", "Stop reason", Ask::Text),
    ("test.limiting_symptom", "Limiting symptom", Ask::Text),
    ("test.ecg.change", "ECG change", Ask::Choice(YES_NO)),
    ("test.ecg.read_by", "ECG read by", Ask::Text),
    ("test.own_test.low.vo2_ml_min", "Own earlier test, low: V̇O₂, mL/min", Ask::Number),
    ("test.own_test.low.hr", "Own earlier test, low: HR, /min", Ask::Number),
    ("test.own_test.peak.vo2_ml_min", "Own earlier test, peak: V̇O₂, mL/min", Ask::Number),
    ("test.own_test.peak.hr", "Own earlier test, peak: HR, /min", Ask::Number),
    ("test.spo2_confirmed", "Oximeter trace confirmed", Ask::Choice(YES_NO)),
];

/// Draws the form.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    if form.begin("facts") {
        fill(cx, form);
    }
    ui.label("What is left empty is printed as “not stated”.");
    let height = (ui.ctx().content_rect().height() - 220.0).max(120.0);
    egui::ScrollArea::vertical().max_height(height).show(ui, |ui| {
        for (path, label, ask) in FACTS {
            match ask {
                Ask::Text | Ask::Number => {
                    line(ui, form, path, label);
                }
                Ask::Choice(choices) => choice(ui, form, path, label, choices),
            }
        }
    });
    let edits = edits(cx, form);
    if let Err(label) = &edits {
        ui.label(format!("{label}: this is not a number."));
    }
    if foot(ui, out, "State these facts", edits.as_ref().is_ok_and(|e| !e.is_empty()))
        && let Ok(edits) = edits
    {
        out.push(Command::Edits(edits));
        out.push(Command::CloseDialog);
    }
}

fn choice(
    ui: &mut Ui,
    form: &mut Form,
    path: &str,
    label: &str,
    choices: &[(&'static str, &'static str)],
) {
    ui.horizontal(|ui| {
        ui.add_sized([190.0, 20.0], egui::Label::new(label).halign(egui::Align::Min));
        let now = form.get(path).to_owned();
        let shown = choices.iter().find(|c| c.0 == now).map_or("not stated", |c| c.1);
        egui::ComboBox::from_id_salt(path)
            .selected_text(shown)
            .width(240.0)
            .show_ui(ui, |ui| {
                for (code, name) in [("", "not stated")].iter().chain(choices) {
                    if ui.selectable_label(*code == now, *name).clicked() {
                        *form.field(path) = (*code).to_owned();
                    }
                }
            })
            .response
            .accessible_name(label);
    });
}

/// The path in the facts file under which a field of the form is found.
fn stored(path: &str) -> String {
    path.strip_prefix("hb.").map_or_else(|| path.to_owned(), |p| format!("subject.hb.{p}"))
}

fn text_of(value: &Value) -> String {
    match value {
        Value::String(s) => s.clone(),
        Value::Null => String::new(),
        other => other.to_string().trim_end_matches(".0").to_owned(),
    }
}

fn fill(cx: &Context<'_>, form: &mut Form) {
    for (path, ..) in FACTS {
        let value = cx.facts_file.get(&stored(path));
        *form.field(path) = value.as_ref().map(text_of).unwrap_or_default();
    }
}

/// The edits that bring the session to what the form says.
///
/// # Errors
/// The label of a field that is not a number.
fn edits(cx: &Context<'_>, form: &Form) -> Result<Vec<Edit>, &'static str> {
    let mut edits = Vec::new();
    let before =
        |path: &str| cx.facts_file.get(&stored(path)).as_ref().map(text_of).unwrap_or_default();
    let number = |text: &str| text.replace(',', ".").parse::<f64>().ok();
    for (path, label, ask) in FACTS {
        let text = form.get(path).trim();
        let value = match ask {
            _ if text.is_empty() => Value::Null,
            Ask::Number => number(text).ok_or(*label)?.into(),
            Ask::Choice(c) if std::ptr::eq(*c, YES_NO) => (text == "true").into(),
            _ => text.into(),
        };
        if !path.starts_with("hb.") && text != before(path) {
            edits.push(Edit::SetFact { path: (*path).to_owned(), value });
        }
    }
    let (hb, unit) = (form.get("hb.value").trim(), form.get("hb.unit").trim());
    if hb != before("hb.value") || unit != before("hb.unit") {
        let value = match (number(hb), unit) {
            _ if hb.is_empty() => Value::Null,
            (None, _) => return Err("Haemoglobin"),
            // The unit is asked, never guessed.
            (Some(_), "") => return Ok(edits),
            (Some(value), unit) => json!({ "value": value, "unit": unit }),
        };
        edits.push(Edit::SetFact { path: "subject.hb".into(), value });
    }
    Ok(edits)
}
