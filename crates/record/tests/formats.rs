//! What is written keeps to the committed schemas.

mod support;

use std::collections::BTreeSet;

use record::session::{ENGINE, Session};
use record::{results_json, session};
use serde_json::Value;

use support::{CASES, NOW, demo};

fn schema(name: &str) -> jsonschema::Validator {
    let path = format!("{}/../../assets/schemas/{name}", env!("CARGO_MANIFEST_DIR"));
    let text = std::fs::read_to_string(path).expect("the schema");
    let value: Value = serde_json::from_str(&text).expect("JSON");
    jsonschema::validator_for(&value).expect("a schema")
}

#[test]
fn results_of_every_demo_keep_to_schema_and_contract() {
    let schema = schema("results.schema.json");
    for case in CASES {
        let session = demo(case);
        let text = results_json::to_json(&session.derive(), ENGINE, &[]);
        assert_eq!(text, results_json::to_json(&session.derive(), ENGINE, &[]), "{case}");
        let value: Value = serde_json::from_str(&text).expect("JSON");
        let errors: Vec<String> =
            schema.iter_errors(&value).map(|e| format!("{}: {e}", e.instance_path())).collect();
        assert!(errors.is_empty(), "{case}: {errors:#?}");
        let (mut keys, mut primaries) = (BTreeSet::new(), BTreeSet::new());
        for o in value["outcomes"].as_array().expect("a list") {
            let of = |name: &str| o[name].as_str().unwrap_or_default().to_owned();
            assert!(keys.insert((of("id"), of("at"), of("method"))), "{case}: {o} stands twice");
            if o["primary"] == true {
                assert!(primaries.insert((of("id"), of("at"))), "{case}: two primaries of {o}");
            }
            let unit = o["unit"].as_str();
            assert!(unit.is_none_or(|u| analysis::unit::Unit::from_ucum(u).is_some()), "{o}");
            for (low, high) in [("low", "high"), ("repeat_low", "repeat_high")] {
                let (low, high) = (o[low].as_f64(), o[high].as_f64());
                let predicted = of("id").starts_with("predicted-");
                assert!(predicted || low.is_some() == high.is_some(), "{case}: {o}");
                assert!(low.is_none() || high.is_none() || low <= high, "{case}: {o}");
            }
        }
        for (id, at, _) in &keys {
            assert!(primaries.contains(&(id.clone(), at.clone())), "{case}: no primary {id}@{at}");
        }
    }
}

#[test]
fn a_mutated_result_fails_the_schema() {
    let schema = schema("results.schema.json");
    let good = results_json::to_value(&demo("kittiwake").derive(), ENGINE, &[]);
    assert!(schema.is_valid(&good));
    let broken = |change: &dyn Fn(&mut Value)| {
        let mut value = good.clone();
        change(&mut value);
        !schema.is_valid(&value)
    };
    assert!(broken(&|v| v["outcomes"][0]["value"] = Value::Null), "no value and no reason");
    assert!(broken(&|v| v["outcomes"][0]["at"] = "summit".into()));
    assert!(broken(&|v| v["outcomes"][0]["level"] = 0.95.into()));
    assert!(broken(&|v| v["phases"][0]["id"] = "sprint".into()));
    assert!(broken(&|v| v["notice"] = "".into()));
}

#[test]
fn the_edits_of_a_history_keep_to_schema_and_rebuild_the_session() {
    let schema = schema("edits.schema.json");
    let text = r#"{"schema":"rampcrest-edits/1","edits":[
        {"edit":"set-boundary","phase":"ramp","t_s":372},
        {"edit":"set-averaging","method":"rolling-s","n":20},
        {"edit":"set-fact","path":"test.rhythm","value":"sinus"},
        {"edit":"exclude-breaths","from_s":400,"to_s":410,"reason":"cough"},
        {"edit":"set-mark","mark":"vt1","t_s":600},
        {"edit":"set-overlay-shown","shown":false},
        {"edit":"finding-status","id":"effort-state","status":"accepted"},
        {"edit":"finding-add","section":"effort","text":"Good cooperation."},
        {"edit":"sign","name":"n","role":"r","registration":"1","meaning":"m"}]}"#;
    assert!(schema.is_valid(&serde_json::from_str(text).expect("JSON")));
    let mut first = demo("dunlin");
    let edits = session::read_edits(text.as_bytes()).expect("edits");
    first.apply_together(&edits, NOW).expect("carried out");
    let made: Vec<&session::Edit> =
        first.history().iter().filter_map(|e| e.edit.as_ref()).collect();
    let again = serde_json::json!({"schema": "rampcrest-edits/1", "edits": made});
    assert!(schema.is_valid(&again), "{again}");
    let mut second = demo("dunlin");
    let edits = session::read_edits(again.to_string().as_bytes()).expect("edits");
    second.apply_together(&edits, NOW).expect("carried out");
    assert_eq!(first.write(), second.write());
    let back = Session::read(&first.write(), &analysis::settings::Settings::default());
    assert_eq!(back.expect("reads").write(), first.write());
}
