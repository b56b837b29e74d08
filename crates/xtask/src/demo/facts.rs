//! `facts.json` of a demo test.

use analysis::model::demo::Case;
use record::facts_file::FactsFile;
use serde_json::{Map, Value, json};

use super::people::{Person, person};

/// `rampcrest-facts/1` of a case.
///
/// # Panics
/// When the case has no person in the table, or facts that the format refuses (tests forbid it).
#[must_use]
pub fn text(case: &Case) -> String {
    let person = person(case.name).expect("every case has a person");
    let file = FactsFile::from_value(facts(case, person))
        .unwrap_or_else(|p| panic!("{}: {} {}", case.name, p.where_, p.what));
    file.write()
}

fn facts(case: &Case, p: &Person) -> Value {
    json!({
        "schema": "rampcrest-facts/1",
        "identity": {
            "label": label(case.name),
            "number": format!("INVENTED-{}", (case.plan)().seed),
            "test_time": p.test_time,
            "lab": "Saltmarrow Exercise Laboratory (invented)",
            "referrer": "invented referrer",
        },
        "subject": subject(p),
        "test": test(p, case),
        "events": events(p),
    })
}

/// The bird's name as shown.
fn label(name: &str) -> String {
    let mut letters = name.chars();
    letters.next().map(|c| c.to_uppercase().chain(letters).collect()).unwrap_or_default()
}

fn subject(p: &Person) -> Value {
    let mut subject = Map::new();
    subject.insert("age_years".into(), json!(p.age_years));
    subject.insert("sex".into(), json!(p.sex));
    subject.insert("height_cm".into(), json!(p.height_cm));
    subject.insert("mass_kg".into(), json!(p.mass_kg));
    if let Some(hb) = p.hb_g_per_l {
        subject.insert("hb".into(), json!({"value": hb, "unit": "g/L", "at": "rest"}));
    }
    subject.insert("fev1_l".into(), json!(p.fev1_l));
    Value::Object(subject)
}

fn test(p: &Person, case: &Case) -> Value {
    let plan = (case.plan)();
    let mut drug = Map::new();
    drug.insert("taken".into(), json!(p.drug.is_some()));
    if let Some((name, hours)) = p.drug {
        drug.insert("name".into(), json!(name));
        drug.insert("last_dose_h".into(), json!(hours));
        drug.insert("beta_blocker".into(), json!(true));
    }
    let diagnoses: Vec<Value> =
        p.diagnoses.iter().map(|(code, text)| json!({"code": code, "text": text})).collect();
    let mut test = json!({
        "question": p.question,
        "indication": p.indication,
        "diagnoses": diagnoses,
        "devices": [],
        "rhythm": p.rhythm,
        "frequent_ectopy": false,
        "rate_slowing_drug": drug,
        "mode": "cycle",
        "protocol": {"kind": "ramp", "w_per_min": plan.schedule.w_per_min},
        "fio2": 0.2093,
        "stop_reason": p.stop_reason,
        "stop_kind": p.stop,
        "limiting_symptom": p.symptom,
        "borg": {"scale": "0-10", "breathlessness": p.borg.0, "legs": p.borg.1},
        "spo2_confirmed": true,
        "recovery_mode": "active",
        "ecg": {"change": p.ecg_change, "read_by": "supervising physician (invented)"},
    });
    if let (Some(urgent), Value::Object(fields)) = (p.urgent, &mut test) {
        fields.insert(
            "urgent".into(),
            json!({
                "fact": urgent,
                "told_to": "duty cardiologist (invented)",
                "by": "supervising physician (invented)",
                "at": "10:42",
            }),
        );
    }
    test
}

fn events(p: &Person) -> Vec<Value> {
    let bp = p.bp.iter().map(|(t, sys, dia)| {
        (*t, json!({"t_s": t, "kind": "bp", "sys_mmhg": sys, "dia_mmhg": dia}))
    });
    let notes =
        p.notes.iter().map(|(t, kind, text)| (*t, json!({"t_s": t, "kind": kind, "text": text})));
    let mut all: Vec<(f64, Value)> = bp.chain(notes).collect();
    all.sort_by(|a, b| a.0.total_cmp(&b.0));
    all.into_iter().map(|(_, value)| value).collect()
}
