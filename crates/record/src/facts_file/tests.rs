//! The facts file as a whole.

use analysis::decisions::PhaseStarts;
use proptest::prelude::*;
use serde_json::{Value, json};

use super::*;

/// The example of the interface description, its alternatives resolved.
const EXAMPLE: &str = r#"{"schema":"rampcrest-facts/1",
"identity":{"label":"Invented person","number":"0001","birth_date":"1981-02-03"},
"subject":{"age_years":45.0,"sex":"male","height_cm":178,"mass_kg":80.0,
 "hb":{"value":150,"unit":"g/L","date":null,"at":"rest"},"fev1_l":3.9,"mvv_l_min":null},
"test":{"question":"Why breathless?","indication":"unexplained-breathlessness",
 "diagnoses":[{"code":"other","text":"hay fever"}],"devices":[],"rhythm":"sinus",
 "rate_slowing_drug":{"taken":false,"name":null,"last_dose_h":null},"mode":"cycle",
 "protocol":{"kind":"ramp","w_per_min":20},"fio2":0.2093,"operation":null,
 "stop_reason":"legs","stop_kind":"fatigue","limiting_symptom":"leg fatigue",
 "borg":{"scale":"0-10","breathlessness":7,"legs":9},
 "urgent":{"fact":null,"told_to":null,"by":null,"at":null},
 "ecg":{"change":false,"read_by":"Dr Invented"},
 "frequent_ectopy":false,"spo2_confirmed":true,"recovery_mode":"active"},
"events":[{"t_s":540,"kind":"bp","sys_mmhg":182,"dia_mmhg":84},
 {"t_s":-20,"kind":"comment","text":"mouthpiece changed"}],
"phases":{"rest":0,"warm_up":180,"ramp":360,"recovery":960}}"#;

fn example() -> FactsFile {
    FactsFile::read(EXAMPLE).unwrap()
}

#[test]
fn the_example_reaches_the_engine_without_identity_or_text() {
    let (facts, identity, phases) = example().to_analysis();
    assert_eq!(identity.number.as_deref(), Some("0001"));
    assert_eq!(facts.subject.hb.unwrap().g_per_l, 150.0);
    assert_eq!(facts.subject.mvv_l_min, None);
    assert_eq!(facts.test.rhythm, Some(analysis::facts::Rhythm::Sinus));
    assert_eq!(facts.test.devices, Some(vec![]));
    assert_eq!(facts.test.stop, Some(analysis::facts::StopKind::Fatigue));
    assert_eq!(facts.test.borg.unwrap().top, 10.0);
    assert_eq!(facts.events[0].t_s, -20.0, "events are in the order of time");
    assert_eq!(
        phases,
        PhaseStarts {
            rest: Some(0.0),
            warm_up: Some(180.0),
            ramp: Some(360.0),
            recovery: Some(960.0)
        }
    );
    let shown = format!("{facts:?}");
    assert!(!shown.contains("Invented") && !shown.contains("hay fever"));
}

#[test]
fn writing_and_reading_again_changes_nothing() {
    let file = example();
    let text = file.write();
    assert_eq!(FactsFile::read(&text).unwrap(), file);
    assert_eq!(FactsFile::read(&text).unwrap().write(), text);
    assert!(!text.contains("null"), "not stated is absent");
    let empty = FactsFile::default().write();
    assert_eq!(empty.split_whitespace().collect::<String>(), r#"{"schema":"rampcrest-facts/1"}"#);
}

#[test]
fn haemoglobin_in_its_three_units() {
    // 15 g/dL = 150 g/L; 9.31 mmol/L × 16.114 g/mmol = 150.02 g/L.
    for (value, unit, grams) in
        [(150.0, "g/L", 150.0), (15.0, "g/dL", 150.0), (9.31, "mmol/L", 150.02)]
    {
        let hb = json!({"value": value, "unit": unit});
        let (facts, ..) = FactsFile::default().with("subject.hb", hb).unwrap().to_analysis();
        assert!((facts.subject.hb.unwrap().g_per_l - grams).abs() < 0.01, "{unit}");
    }
}

#[test]
fn what_the_format_does_not_know_is_refused_with_its_path() {
    let base: Value = serde_json::from_str(EXAMPLE).unwrap();
    for (pointer, value, path) in [
        ("/subject/weight", json!(80), "subject.weight"),
        ("/test/rhythm", json!("flutter"), "test.rhythm"),
        ("/subject/hb/unit", json!("g/100ml"), "subject.hb.unit"),
        ("/subject/hb/value", json!(13.5), "subject.hb"),
        ("/subject/sex", json!("x"), "subject.sex"),
        ("/subject/age_years", json!("45"), "subject.age_years"),
        ("/subject/age_years", json!(450), "subject.age_years"),
        ("/events/0/kind", json!("pressure"), "events[0].kind"),
        ("/events/0/ic_l", json!(2.1), "events[0].ic_l"),
        ("/events/1/t_s", json!(null), "events[1].t_s"),
        ("/test/fio2", json!(21), "test.fio2"),
        ("/phases/ramp", json!(100), "phases.ramp"),
        ("/schema", json!("rampcrest-facts/2"), "schema"),
        ("/test/diagnoses/0/code", json!("asthma"), "test.diagnoses[0].code"),
    ] {
        let mut changed = base.clone();
        let (parent, key) = pointer.rsplit_once('/').unwrap();
        changed.pointer_mut(parent).unwrap()[key] = value;
        let problem = FactsFile::read(&changed.to_string()).unwrap_err();
        assert_eq!((problem.code, problem.where_.as_str()), ("facts-invalid", path), "{problem}");
    }
}

#[test]
fn a_key_twice_and_a_missing_schema_are_refused() {
    let twice = r#"{"schema":"rampcrest-facts/1","test":{"fio2":0.21,"fio2":0.3}}"#;
    assert_eq!(FactsFile::read(twice).unwrap_err().where_, "test.fio2");
    assert_eq!(FactsFile::read("{}").unwrap_err().where_, "schema");
    assert!(FactsFile::read("").is_err());
    assert!(FactsFile::read("[1]").is_err());
}

#[test]
fn a_fact_is_set_read_and_unset_by_its_path() {
    let mut file = FactsFile::default();
    file.set("test.rhythm", json!("sinus")).unwrap();
    assert_eq!(file.get("test.rhythm"), Some(json!("sinus")));
    assert_eq!(file.paths(), ["test.rhythm"]);
    file.set("test.ecg.change", json!(false)).unwrap();
    file.set("test.ecg.change", Value::Null).unwrap();
    file.set("test.rhythm", Value::Null).unwrap();
    assert_eq!(file, FactsFile::default());
    file.set("events[0]", json!({"t_s": 60, "kind": "spo2", "spo2_pct": 97})).unwrap();
    file.set("events[0].spo2_pct", json!(95)).unwrap();
    assert_eq!(file.get("events[0].spo2_pct"), Some(json!(95.0)));
    file.set("test.devices", json!([])).unwrap();
    assert_eq!(file.get("test.devices"), Some(json!([])), "stated as none");
    file.set("events[0]", Value::Null).unwrap();
    assert!(file.events.is_empty());

    let before = file.clone();
    for (path, value) in [
        ("test.rythm", json!("sinus")),
        ("test.rhythm", json!("flutter")),
        ("subject.hb.value", json!(150)),
        ("events[5].t_s", json!(1)),
        ("schema", json!("x")),
        ("", json!(1)),
        ("test..rhythm", json!("sinus")),
        ("identity.label.x", json!("y")),
    ] {
        assert!(file.set(path, value).is_err(), "{path}");
    }
    assert_eq!(file, before);
}

#[test]
fn the_committed_schema_accepts_what_is_written_and_refuses_what_is_refused() {
    let schema: Value = serde_json::from_str(SCHEMA).unwrap();
    let validator = jsonschema::validator_for(&schema).unwrap();
    let text = example().write();
    let value: Value = serde_json::from_str(&text).unwrap();
    let errors: Vec<String> = validator.iter_errors(&value).map(|e| e.to_string()).collect();
    assert!(errors.is_empty(), "{errors:?}");
    assert!(validator.is_valid(&serde_json::from_str(EXAMPLE).unwrap()), "null is not stated");
    for wrong in [
        json!({}),
        json!({"schema": "rampcrest-facts/1", "subject": {"weight": 1}}),
        json!({"schema": "rampcrest-facts/1", "test": {"rhythm": "flutter"}}),
        json!({"schema": "rampcrest-facts/1", "events": [{"kind": "bp"}]}),
        json!({"schema": "rampcrest-facts/1", "events": [{"t_s": 1, "kind": "bp", "ic_l": 2}]}),
        json!({"schema": "rampcrest-facts/1", "subject": {"hb": {"value": 150}}}),
    ] {
        assert!(!validator.is_valid(&wrong), "{wrong}");
        assert!(FactsFile::read(&wrong.to_string()).is_err(), "{wrong}");
    }
}

#[test]
fn every_code_of_the_schema_is_a_code_of_the_program() {
    let schema: Value = serde_json::from_str(SCHEMA).unwrap();
    let list = |name: &str| -> Vec<String> {
        let codes = schema["$defs"][name]["enum"].as_array().unwrap();
        codes.iter().filter_map(|v| v.as_str().map(str::to_owned)).collect()
    };
    fn codes<T: Copy>(all: &[T], code: fn(T) -> &'static str) -> Vec<String> {
        all.iter().map(|c| code(*c).to_owned()).collect()
    }
    assert_eq!(list("rhythm"), codes(Rhythm::ALL, Rhythm::code));
    assert_eq!(list("indication"), codes(Indication::ALL, Indication::code));
    assert_eq!(list("diagnosis"), codes(DiagnosisCode::ALL, DiagnosisCode::code));
    assert_eq!(list("device"), codes(Device::ALL, Device::code));
    assert_eq!(list("operationKind"), codes(OperationKind::ALL, OperationKind::code));
    assert_eq!(list("stopKind"), codes(StopKind::ALL, StopKind::code));
    assert_eq!(list("recoveryMode"), codes(RecoveryMode::ALL, RecoveryMode::code));
    let kinds: Vec<String> = EventKind::ALL.iter().map(|(_, code)| (*code).to_owned()).collect();
    assert_eq!(list("eventKind"), kinds);
    for (kind, code) in EventKind::ALL {
        assert_eq!(serde_json::to_value(kind).unwrap(), json!(code));
    }
}

/// Values of every shape.
fn any_value() -> impl Strategy<Value = Value> {
    prop_oneof![
        Just(Value::Null),
        any::<bool>().prop_map(Value::from),
        any::<f64>().prop_map(|v| json!(v)),
        "[a-z0-9/-]{0,8}".prop_map(Value::from),
        prop::sample::select(vec![
            json!("sinus"),
            json!("af"),
            json!("g/L"),
            json!([]),
            json!({}),
            json!({"value": 14.0, "unit": "g/dL"}),
            json!([{"t_s": 1.0, "kind": "cough"}]),
        ]),
    ]
}

proptest! {
    #[test]
    fn any_text_is_read_or_refused(text in "[\\[\\]{}:,\"a-z0-9. ]{0,80}") {
        let _ = FactsFile::read(&text);
    }

    #[test]
    fn any_edit_is_taken_whole_or_changes_nothing(
        path in prop_oneof![
            prop::sample::select(vec![
                "test.rhythm", "subject.hb", "subject.age_years", "events", "events[0].t_s",
                "events[2]", "phases.ramp", "test.devices[0]", "identity.label", "test", "test.ecg",
            ]).prop_map(str::to_owned),
            "[a-z.\\[\\]0-9_]{0,16}",
        ],
        value in any_value(),
    ) {
        let mut file = example();
        match file.set(&path, value) {
            Ok(()) => prop_assert_eq!(FactsFile::read(&file.write()).unwrap(), file),
            Err(_) => prop_assert_eq!(file, example()),
        }
    }

    #[test]
    fn numbers_survive_bit_for_bit(bits in any::<u64>()) {
        let t = f64::from_bits(bits);
        prop_assume!(t.is_finite() && t.abs() <= 1e6);
        let mut file = FactsFile::default();
        file.events.push(Event::new(t, EventKind::Cough));
        let again = FactsFile::read(&file.write()).unwrap();
        prop_assert_eq!(again.events[0].t_s.to_bits(), t.to_bits());
    }
}
