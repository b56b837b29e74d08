//! Every message of the course, the Fick reasoning and the statements has its text, on every
//! demo case and under every fact that changes what is said.

use analysis::facts::{
    Device, Diagnosis, Event, EventKind, Facts, Haemoglobin, HbTime, Mode, Rhythm, Sex, StopKind,
};
use analysis::model::demo::CASES;
use analysis::model::test::generate;
use analysis::recording::Recording;
use analysis::results::{Arg, Evidence, Note, Results};

use super::{catalogue, template, text};

fn stated() -> Facts {
    let mut facts = Facts::default();
    facts.subject.age_years = Some(54.0);
    facts.subject.sex = Some(Sex::Male);
    facts.subject.height_cm = Some(176.0);
    facts.subject.mass_kg = Some(80.0);
    facts.subject.hb = Some(Haemoglobin { g_per_l: 146.0, at: Some(HbTime::Rest) });
    facts.subject.fev1_l = Some(3.2);
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    facts.test.spo2_confirmed = Some(true);
    facts
}

/// Facts that bring out different messages.
fn variants() -> Vec<Facts> {
    type Change = fn(&mut Facts);
    let changes: Vec<Change> = vec![
        |_| {},
        |f| *f = Facts::default(),
        |f| f.test.rhythm = Some(Rhythm::AtrialFibrillation),
        |f| f.test.devices = Some(vec![Device::Lvad]),
        |f| f.test.diagnoses = Some(vec![Diagnosis::HeartFailure, Diagnosis::Copd]),
        |f| {
            f.test.rate_slowing_drug.taken = Some(true);
            f.test.ecg.change = Some(true);
            f.test.stop = Some(StopKind::Ischaemia);
            f.subject.cohb = Some(0.06);
        },
        |f| {
            f.subject.hb = Some(Haemoglobin { g_per_l: 82.0, at: None });
            f.test.ecg.change = Some(false);
            f.test.rate_slowing_drug.taken = Some(false);
            f.test.fio2 = Some(0.2093);
            for (t_s, sys) in [(60.0, 130.0), (900.0, 112.0)] {
                let kind = EventKind::Bp { sys: Some(sys), dia: Some(80.0) };
                f.events.push(Event { t_s, kind });
            }
            f.events.push(Event { t_s: 905.0, kind: EventKind::Symptom });
        },
    ];
    changes
        .into_iter()
        .map(|change| {
            let mut facts = stated();
            change(&mut facts);
            facts
        })
        .collect()
}

fn derived(recording: &Recording, facts: &Facts) -> Results {
    analysis::derive(recording, facts, &Default::default(), &Default::default())
}

/// Notes that belong to this catalogue's files on the circulation.
fn notes(results: &Results) -> Vec<Note> {
    let mut notes: Vec<Note> = Vec::new();
    for s in &results.statements {
        notes.push(s.note.clone());
        let pieces = s.supports.iter().chain(&s.contradicts).chain(&s.open);
        notes.extend(pieces.map(|e: &Evidence| e.note.clone()));
    }
    for o in &results.outcomes {
        let ours = o.method == "joint-bend-score" || o.id.starts_with("fick-");
        if ours {
            notes.extend(o.doubts.iter().cloned().chain(o.reason.clone()));
        }
    }
    notes.extend(results.fick.sentence.clone());
    notes
}

#[test]
fn nothing_that_is_said_of_the_circulation_lacks_a_text() {
    // Codes of the engine at large have their own file and test.
    let elsewhere = [
        "channel-missing",
        "fact-missing",
        "no-published-repeatability",
        "no-ramp",
        "not-incremental",
    ];
    for case in CASES {
        let recording = generate(&(case.plan)()).0;
        for facts in variants() {
            let results = derived(&recording, &facts);
            for note in notes(&results) {
                if elsewhere.contains(&note.code) {
                    continue;
                }
                let shown = text(&note, &results);
                assert!(!shown.contains('['), "{}: {shown}", case.name);
                assert!(!shown.contains('{'), "{}: {shown}", case.name);
                for (_, arg) in &note.args {
                    if let Arg::Word(word) = arg {
                        let code = format!("word-{word}");
                        assert!(template(&code).is_some(), "{}: {code}", note.code);
                    }
                }
            }
        }
    }
}

#[test]
fn phrases_that_must_not_be_printed_are_not_in_the_catalogue() {
    // Clinical rules 3, 7, 10, 11, 17: no claim of fitness, no certainty about stroke volume, no
    // claim of a diagnosis, no order.
    let banned = [
        "fit for surgery",
        "unfit",
        "sv fell",
        "stroke volume fell",
        "ischaemia detected",
        "poor effort",
        "proves",
        "diagnosis of",
        "diagnostic of",
        "diagnosed",
        "verdict",
        "ledger",
        "masked",
        "should be",
        "we recommend",
        "repeat the test",
        "stop the drug",
        "withhold the",
        "refer for",
    ];
    for (code, template) in catalogue() {
        let lower = template.to_lowercase();
        for phrase in banned {
            assert!(!lower.contains(phrase), "{code}: “{phrase}” in “{template}”");
        }
    }
}

#[test]
fn every_page_says_that_a_normal_course_excludes_nothing() {
    for case in CASES.iter().take(3) {
        let results = derived(&generate(&(case.plan)()).0, &stated());
        assert!(results.statements.iter().any(|s| s.note.code == "course-excludes-nothing"));
    }
}
