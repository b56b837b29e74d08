//! The session through its edits and its file.

use std::sync::Arc;

use analysis::decisions::Phase;
use analysis::settings::Settings;
use proptest::prelude::*;
use serde_json::Value;

use super::history::Action;
use super::*;
use crate::import::{Answers, import};

pub(crate) const NOW: &str = "2026-11-24T10:51:00+01:00";

/// A plain ramp: 1 min rest, 2 min at 10 W, 8 min of 20 W/min, 1 min after.
pub(crate) fn table() -> String {
    let mut text = String::from("t (s),VO2 (mL/min),VCO2 (mL/min),VE (L/min),HR (1/min),WR (W)\n");
    for i in 1..=240 {
        let t = f64::from(i) * 3.0;
        let ramp = ((t - 180.0) / 60.0).clamp(0.0, 8.0);
        let after = (t - 660.0).max(0.0) / 60.0;
        let load = if t <= 60.0 || after > 0.0 { 0.0 } else { 10.0 + 20.0 * ramp };
        let vo2 = 300.0 + 200.0 * ramp + if t > 60.0 { 120.0 } else { 0.0 } - 900.0 * after;
        let hr = 80.0 + 9.0 * ramp - 15.0 * after;
        let wobble = f64::from(i * 37 % 11) - 5.0;
        let vo2 = vo2 + 6.0 * wobble;
        let (vco2, ve) = (vo2 * (0.85 + 0.03 * ramp), 8.0 + vo2 / 40.0);
        text.push_str(&format!("{t},{vo2:.1},{vco2:.1},{ve:.1},{hr:.1},{load:.0}\n"));
    }
    text
}

pub(crate) fn session() -> Session {
    session_of(&table())
}

fn session_of(table: &str) -> Session {
    let read = import(table.as_bytes(), "table.csv", &Answers::none(), None).expect("imports");
    let mut facts = FactsFile::default();
    facts.set("subject.age_years", Value::from(50)).expect("a fact");
    Session::from_import(
        table.as_bytes(),
        "table.csv",
        read.recipe,
        Arc::new(read.recording),
        facts,
        Settings::default(),
        NOW,
    )
    .expect("a session")
}

fn fails(session: &Session, edit: Edit) -> &'static str {
    let mut copy = session.clone();
    let before = copy.write();
    let code = copy.apply(&edit, NOW).expect_err("refused").code;
    assert_eq!(copy.write(), before, "nothing is changed by a refused edit");
    code
}

fn reread(session: &Session) -> Session {
    Session::read(&session.write(), &Settings::default()).expect("reads")
}

#[test]
fn a_boundary_snaps_to_a_breath_keeps_its_distance_and_is_taken_back() {
    let mut s = session();
    let proposed = s.results().phases.ramp().expect("a ramp").0;
    s.apply(&Edit::SetBoundary { phase: Phase::Ramp, t_s: 202.3 }, NOW).expect("moves");
    // Breaths end every 3 s; 201 is nearer to 202.3 than 204.
    assert_eq!(s.judgement().decisions.phases.ramp, Some(201.0));
    assert_eq!(s.results().phases.ramp().expect("a ramp").0, 201.0);
    assert_eq!(
        fails(&s, Edit::SetBoundary { phase: Phase::Recovery, t_s: 205.0 }),
        "boundary-crosses"
    );
    assert_eq!(
        fails(&s, Edit::SetBoundary { phase: Phase::Recovery, t_s: 5000.0 }),
        "boundary-crosses"
    );
    assert_eq!(
        fails(&s, Edit::SetBoundary { phase: Phase::Ramp, t_s: f64::NAN }),
        "boundary-crosses"
    );
    assert!(s.undo(NOW).expect("a time"));
    assert_eq!(s.results().phases.ramp().expect("a ramp").0, proposed);
    assert!(s.redo(NOW).expect("a time"));
    assert_eq!(s.judgement().decisions.phases.ramp, Some(201.0));
    assert!(!s.redo(NOW).expect("a time"));
    let actions: Vec<Action> = s.history().iter().map(|e| e.action).collect();
    assert_eq!(actions, [Action::Imported, Action::Edited, Action::Undone, Action::Redone]);
}

#[test]
fn edits_together_are_one_step_or_none() {
    let mut s = session();
    let good = Edit::SetOverlayShown { shown: false };
    let bad = Edit::IncludeBreaths { from_s: 1.0, to_s: 2.0 };
    let problem = s.apply_together(&[good.clone(), bad], NOW).expect_err("the second is bad");
    assert_eq!((problem.code, problem.where_.as_str()), ("not-excluded", "edits[1]"));
    assert_eq!(s.history().len(), 1);
    let other = Edit::averaging(analysis::settings::Averaging::RollingBreaths(8));
    s.apply_together(&[good, other], NOW).expect("both");
    s.undo(NOW).expect("a time");
    assert_eq!(s.judgement().settings, Settings::default());
}

#[test]
fn each_edit_is_checked() {
    let s = session();
    let leave =
        |from_s, to_s, reason: &str| Edit::ExcludeBreaths { from_s, to_s, reason: reason.into() };
    assert_eq!(fails(&s, leave(9000.0, 9001.0, "cough")), "no-breath");
    assert_eq!(fails(&s, leave(30.0, 60.0, "  ")), "reason-missing");
    assert_eq!(
        fails(&s, Edit::SetMark { mark: analysis::decisions::Mark::Vt1, t_s: -4.0 }),
        "time-outside"
    );
    assert_eq!(fails(&s, Edit::SetTwoFactor { from_s: Some(9.0), to_s: None }), "two-factor-times");
    let fact = |path: &str, value| Edit::SetFact { path: path.into(), value };
    assert_eq!(fails(&s, fact("test.rhythm", Value::from("jazz"))), "facts-invalid");
    assert_eq!(fails(&s, fact("test.tempo", Value::from(1))), "facts-invalid");
    assert_eq!(fails(&s, fact("phases.ramp", Value::from(1))), "fact-is-decision");
    assert_eq!(fails(&s, Edit::RemoveEvent { index: 0 }), "no-event");
    let status = super::findings::Status::Accepted;
    assert_eq!(fails(&s, Edit::FindingStatus { id: "none".into(), status }), "finding-unknown");
    let add =
        |section: &str, text: &str| Edit::FindingAdd { section: section.into(), text: text.into() };
    assert_eq!(fails(&s, add("weather", "x")), "section-unknown");
    assert_eq!(fails(&s, add("effort", " ")), "text-missing");
    let sign = |name: &str, meaning: &str| Edit::Sign {
        name: name.into(),
        role: String::new(),
        registration: String::new(),
        meaning: meaning.into(),
    };
    assert_eq!(fails(&s, sign(" ", "m")), "signature-incomplete");
    assert_eq!(fails(&s, sign("n", "")), "signature-incomplete");
}

#[test]
fn facts_and_events_carry_their_source_through_the_file() {
    let mut s = session();
    let rhythm = Edit::SetFact { path: "test.rhythm".into(), value: Value::from("sinus") };
    s.apply(&rhythm, NOW).expect("a fact");
    let event = serde_json::json!({"t_s": 540, "kind": "bp", "sys_mmhg": 182, "dia_mmhg": 84});
    s.apply(&Edit::AddEvent { event }, NOW).expect("an event");
    let back = reread(&s);
    assert_eq!(back.judgement(), s.judgement());
    assert!(back.judgement().by_reader.contains("test.rhythm"));
    assert!(!back.judgement().by_reader.contains("subject.age_years"));
    assert_eq!(back.judgement().event_sources, [crate::facts_file::Source::Reader]);
    assert_eq!(back.recording(), s.recording());
    assert_eq!(back.write(), s.write(), "saved again, the same bytes");
}

#[test]
fn a_signed_session_is_frozen() {
    let mut s = session();
    let sign = Edit::Sign {
        name: "N. Reader (invented)".into(),
        role: "physiologist".into(),
        registration: "INVENTED-1".into(),
        meaning: "reviewed and approved".into(),
    };
    s.apply(&sign, NOW).expect("signs");
    assert_eq!(fails(&s, Edit::SetOverlayShown { shown: true }), "session-signed");
    assert_eq!(fails(&s, sign), "session-signed");
    assert!(!s.undo(NOW).expect("a time"), "a signature is not taken back");
    let signed = s.signed().expect("a signature");
    assert_eq!((signed.at.as_str(), signed.engine.as_str()), (NOW, ENGINE));
    assert_eq!(signed.results["schema"], "rampcrest-results/1");
    let back = reread(&s);
    assert_eq!(back.state(), s.state());
}

#[test]
fn damaged_files_are_refused_with_their_place() {
    let text = String::from_utf8(session().write()).expect("UTF-8");
    let refused =
        |text: &str| Session::read(text.as_bytes(), &Settings::default()).expect_err("refused");
    assert_eq!(refused(&text.replacen("session/1", "session/2", 1)).where_, "schema");
    let twice =
        text.replacen("\"state\": \"draft\",", "\"state\": \"draft\", \"state\": \"draft\",", 1);
    assert!(refused(&twice).what.contains("twice"), "{}", refused(&twice));
    assert_eq!(
        refused(&text.replacen("\"findings\": []", "\"findings\": [], \"x\": 1", 1)).code,
        "session-not-readable"
    );
    let signed = text.replacen("\"state\": \"draft\"", "\"state\": \"signed\"", 1);
    assert_eq!(refused(&signed).where_, "state");
    let digest = &source::sha256(table().as_bytes());
    assert_eq!(refused(&text.replacen(digest, &"0".repeat(64), 1)).code, "session-source");
    assert_eq!(refused("").code, "session-not-readable");
    assert!(is_session(text.as_bytes()) && !is_session(table().as_bytes()));
}

#[test]
fn debug_output_holds_no_identity() {
    let mut s = session();
    let edit = Edit::SetFact { path: "identity.label".into(), value: Value::from("A. Person") };
    s.apply(&edit, NOW).expect("a fact");
    assert!(!format!("{s:?} {:?}", s.judgement()).contains("Person"));
}

proptest! {
    /// Any finite bits of a decision come back bit for bit.
    #[test]
    fn floats_survive_bit_for_bit(bits in proptest::collection::vec(any::<u64>(), 4)) {
        let floats: Vec<f64> =
            bits.iter().map(|b| f64::from_bits(*b)).filter(|f| f.is_finite()).collect();
        let mut s = session_without_derivation();
        let judgement = Arc::make_mut(&mut s.judgement);
        judgement.decisions.vt1_s = floats.first().copied();
        judgement.decisions.vt2_s = floats.get(1).copied();
        judgement.decisions.phases.rest = floats.get(2).copied();
        let back = reread(&s);
        let bits = |s: &Session| {
            let d = &s.judgement().decisions;
            [d.vt1_s, d.vt2_s, d.phases.rest].map(|f| f.map(f64::to_bits))
        };
        prop_assert_eq!(bits(&back), bits(&s));
    }
}

fn session_without_derivation() -> Session {
    thread_local! {
        static ONE: Session = session();
    }
    ONE.with(Clone::clone)
}
