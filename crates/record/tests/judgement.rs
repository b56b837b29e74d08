//! Findings that go out of date, and the history that keeps what edits changed.

mod support;

use analysis::decisions::Phase;
use record::session::findings::{FindingShown, Status};
use record::session::{Edit, Missing, Session, missing_for_signing};

use support::{NOW, demo};

fn finding(session: &Session, id: &str) -> FindingShown {
    let list = session.findings(session.results());
    list.into_iter().find(|f| f.id == id).expect("the finding")
}

fn exclude(session: &Session, seconds: f64) -> Edit {
    let end = session.results().phases.ramp().expect("a ramp").1;
    Edit::ExcludeBreaths { from_s: end - seconds, to_s: end, reason: "leak".into() }
}

#[test]
fn an_accepted_statement_keeps_its_text_and_is_stale_when_a_rounded_value_changes() {
    let mut session = demo("kittiwake");
    let id = "effort-state";
    let accept = Edit::FindingStatus { id: id.into(), status: Status::Accepted };
    session.apply(&accept, NOW).expect("accepted");
    let before = finding(&session, id);
    assert!(before.status == Status::Accepted && !before.stale && before.draft_now.is_none());
    // The overlay changes no value.
    session.apply(&Edit::SetOverlayShown { shown: false }, NOW).expect("hidden");
    assert!(!finding(&session, id).stale);
    // Without the last minute of load, peak RER and HR are others.
    session.apply(&exclude(&session, 60.0), NOW).expect("left out");
    let after = finding(&session, id);
    assert!(after.stale && after.text == before.text, "{after:?}");
    assert!(after.draft_now.is_some_and(|now| now != before.text));
    session.undo(NOW).expect("a time");
    assert!(!finding(&session, id).stale, "the value is back");
    session.redo(NOW).expect("a time");
    session.apply(&accept, NOW).expect("accepted again");
    let again = finding(&session, id);
    assert!(!again.stale && again.text != before.text);
}

#[test]
fn the_readers_own_words_are_never_rewritten() {
    let mut session = demo("kittiwake");
    let text = "Peak reached with good effort.";
    let edit = Edit::FindingText { id: "effort-state".into(), text: text.into() };
    session.apply(&edit, NOW).expect("edited");
    let add = Edit::FindingAdd { section: "effort".into(), text: "Cooperative.".into() };
    session.apply(&add, NOW).expect("added");
    session.apply(&exclude(&session, 60.0), NOW).expect("left out");
    let edited = finding(&session, "effort-state");
    assert!(edited.text == text && edited.edited && edited.stale);
    let own = finding(&session, "own-1");
    assert!(own.text == "Cooperative." && !own.stale);
    let accept = Edit::FindingStatus { id: "effort-state".into(), status: Status::Accepted };
    session.apply(&accept, NOW).expect("accepted");
    let accepted = finding(&session, "effort-state");
    assert!(accepted.text == text && !accepted.stale);
}

#[test]
fn the_history_names_readings_that_a_boundary_changed() {
    let mut session = demo("dunlin");
    let before = session.results().primary("o2-pulse-course", analysis::results::At::Ramp);
    assert_eq!(before.and_then(|o| o.word()), Some("flattened"));
    // A ramp of four minutes is too short for a course (clinical rules 2).
    let (_, end) = session.results().phases.ramp().expect("a ramp");
    let edit = Edit::SetBoundary { phase: Phase::Ramp, t_s: end - 240.0 };
    session.apply(&edit, NOW).expect("moved");
    let entry = session.history().last().expect("an entry");
    let change = entry.changed.iter().find(|c| c.key == "o2-pulse-course@ramp");
    let change = change.expect("the course changed");
    assert_eq!((change.from.as_str(), change.to.as_str()), ("flattened", "–"));
}

#[test]
fn what_is_missing_is_listed_and_does_not_block() {
    let mut session = demo("dunlin");
    let rhythm = |s: &Session| {
        missing_for_signing(s)
            .iter()
            .any(|m| matches!(m, Missing::Fact { path, .. } if *path == "test.rhythm"))
    };
    assert!(!rhythm(&session));
    let unstate = Edit::SetFact { path: "test.rhythm".into(), value: serde_json::Value::Null };
    session.apply(&unstate, NOW).expect("not stated");
    assert!(rhythm(&session));
    assert!(missing_for_signing(&session).iter().any(|m| matches!(m, Missing::Undecided(_))));
    let sign = Edit::Sign {
        name: "N. Reader".into(),
        role: String::new(),
        registration: String::new(),
        meaning: "reviewed".into(),
    };
    session.apply(&sign, NOW).expect("signed all the same");
}
