//! Predicted sets and parameters of the model as the reader chose them: kept in the session, named
//! on the page and in the history.

mod support;

use analysis::results::At;
use record::page::render;
use record::predicted_sets::default_settings;
use record::session::{Edit, Session};
use serde_json::json;

use support::{NOW, demo};

const OWN: &str = include_str!("../../../assets/predicted/kleber-1997.json");

fn own_text() -> String {
    OWN.replace("kleber-1997", "our-lab-2024").replace("Kleber 1997", "Saltmarrow, invented")
}

fn setting(path: &str, value: serde_json::Value) -> Edit {
    Edit::SetSetting { path: path.into(), value }
}

/// The session as another program with the bundled sets alone reads it.
fn read_again(session: &Session) -> Session {
    Session::read(&session.write(), &default_settings()).expect("reads")
}

#[test]
fn a_laboratory_s_own_set_stands_in_the_session_and_speaks_after_it_was_read_again() {
    let mut session = demo("kittiwake");
    session.apply(&Edit::AddPredictedSet { text: own_text() }, NOW).expect("added");
    let choose = |code: &str, id: &str| Edit::SetPredicted {
        vo2: None,
        hr: None,
        others: [(code.to_owned(), id.to_owned())].into(),
    };
    session.apply(&choose("ve-vco2-slope-to-vt2", "our-lab-2024"), NOW).expect("chosen");
    let again = read_again(&session);
    let settings = &again.judgement().settings;
    assert_eq!(settings.sets, session.judgement().settings.sets);
    assert_eq!(settings.predicted, session.judgement().settings.predicted);
    let results = again.derive();
    let predicted = results.primary("predicted-ve-vco2-slope-to-vt2", At::Ramp).expect("predicted");
    assert!(predicted.method == "our-lab-2024" && predicted.number().is_some(), "{predicted:?}");
    assert!(render(&again, &results, NOW).contains("Saltmarrow, invented"));
    let refused = |edit: &Edit| session.clone().apply(edit, NOW).expect_err("refused").code;
    assert_eq!(refused(&Edit::AddPredictedSet { text: own_text() }), "set-known");
    assert_eq!(refused(&Edit::AddPredictedSet { text: "{}".into() }), "predicted-set-refused");
    assert_eq!(refused(&choose("ve-vco2-slope-to-vt2", "hansen-1984")), "set-unknown");
    assert_eq!(refused(&choose("shoe-size", "hansen-1984")), "set-unknown");
}

#[test]
fn an_override_is_an_edit_named_on_the_page_and_in_the_history() {
    let mut session = demo("kittiwake");
    let edit = setting("predicted.overridden", json!(["blackie-1989"]));
    session.apply(&edit, NOW).expect("overridden");
    let page = render(&session, session.results(), NOW);
    let name =
        default_settings().sets.iter().find(|s| s.id == "blackie-1989").unwrap().name.clone();
    let history = page.split("class=\"history\"").nth(1).expect("a history");
    let before = page.split("class=\"history\"").next().expect("what stands before");
    for part in [history, before] {
        assert!(part.contains(&format!("Used although out of range: {name}")), "{part}");
    }
    session.undo(NOW).expect("a time");
    assert!(session.judgement().settings.predicted.overridden.is_empty());
}

#[test]
fn a_parameter_of_the_model_is_saved_and_printed_when_changed_only() {
    let mut session = demo("kittiwake");
    let printed = |session: &Session| {
        render(session, session.results(), NOW).contains("RER at rest: 0.88 instead of 0.85")
    };
    assert!(!printed(&session));
    session.apply(&setting("overlay.rer_rest", json!(0.88)), NOW).expect("set");
    assert!(printed(&session));
    let again = read_again(&session);
    assert_eq!(again.judgement().settings.overlay, session.judgement().settings.overlay);
    let far = session.apply(&setting("overlay.s1", json!(9.0)), NOW).expect_err("refused");
    assert_eq!(far.code, "setting-range");
}

#[test]
fn a_session_written_before_these_settings_reads_with_their_defaults() {
    let session = demo("kittiwake");
    let mut file: serde_json::Value = serde_json::from_slice(&session.write()).expect("JSON");
    let overlay = file["settings"]["overlay"].as_object_mut().expect("an object");
    for name in ["rest_per_kg", "unloaded_per_kg", "unloaded_added", "rer_rest", "s1", "late_ve"] {
        assert!(overlay.remove(name).is_some(), "{name}");
    }
    let old = Session::read(file.to_string().as_bytes(), &default_settings()).expect("reads");
    assert_eq!(old.judgement().settings, session.judgement().settings);
}
