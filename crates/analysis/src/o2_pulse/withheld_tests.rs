//! What forbids a course, each with its reason, on a simulated normal test.

use crate::facts::{Device, Diagnosis, Event, EventKind, Facts, Mode, Rhythm};
use crate::model::{plan::Plan, test::generate};
use crate::recording::{Recording, RowKind};
use crate::results::{Arg, At, Outcome, Results};

fn stated() -> Facts {
    let mut facts = Facts::default();
    facts.subject.age_years = Some(45.0);
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    facts.test.fio2 = Some(0.2093);
    facts
}

fn test() -> Recording {
    generate(&Plan::healthy(77)).0
}

fn derived(recording: &Recording, facts: &Facts) -> Results {
    crate::derive(recording, facts, &Default::default(), &Default::default())
}

fn course(results: &Results) -> &Outcome {
    results.primary("o2-pulse-course", At::Ramp).expect("always derived")
}

#[test]
fn a_normal_test_with_its_facts_has_a_course_without_doubts_about_its_error_rate() {
    let results = derived(&test(), &stated());
    assert_eq!(course(&results).word(), Some("rising"));
    assert!(course(&results).doubts.iter().all(|d| d.code != "error-rate-unknown"));
    assert!(results.number("o2-pulse-late-slope", At::Ramp).unwrap() > 0.0);
    assert!(results.course.as_ref().unwrap().numbers.is_some());
}

#[test]
fn every_fact_that_forbids_the_course_does_and_says_so() {
    type Change = fn(&mut Facts);
    let cases: [(&str, Change); 12] = [
        ("withheld-rhythm-not-stated", |f| f.test.rhythm = None),
        ("withheld-atrial-fibrillation", |f| f.test.rhythm = Some(Rhythm::AtrialFibrillation)),
        ("withheld-paced", |f| f.test.rhythm = Some(Rhythm::Paced)),
        ("withheld-other-rhythm", |f| f.test.rhythm = Some(Rhythm::Other)),
        ("withheld-ectopy", |f| f.test.frequent_ectopy = Some(true)),
        ("withheld-inspired-gas", |f| f.test.fio2 = Some(0.28)),
        ("withheld-inspired-gas", |f| f.test.fio2 = Some(0.15)),
        ("withheld-lvad", |f| f.test.devices = Some(vec![Device::Lvad])),
        ("withheld-fontan", |f| f.test.diagnoses = Some(vec![Diagnosis::Fontan])),
        ("withheld-shunt", |f| f.test.diagnoses = Some(vec![Diagnosis::Shunt])),
        ("withheld-pregnancy", |f| f.test.diagnoses = Some(vec![Diagnosis::Pregnancy])),
        ("withheld-oxygen-change", |f| {
            f.events.push(Event { t_s: 600.0, kind: EventKind::OxygenChange });
        }),
    ];
    let recording = test();
    for (code, change) in cases {
        let mut facts = stated();
        change(&mut facts);
        let results = derived(&recording, &facts);
        let outcome = course(&results);
        assert_eq!(outcome.value, None, "{code}");
        assert_eq!(outcome.reason.as_ref().unwrap().code, code);
        // Magnitude only: neither slope nor curve, but the bins and the O₂ pulse itself.
        assert_eq!(results.number("o2-pulse-late-slope", At::Ramp), None, "{code}");
        assert!(results.number("o2-pulse-at-peak", At::Peak).is_some());
        let detail = results.course.as_ref().unwrap();
        assert!(detail.numbers.is_none() && detail.curve.is_empty() && !detail.bins.is_empty());
    }
}

#[test]
fn two_reasons_are_both_told() {
    let mut facts = stated();
    facts.test.rhythm = None;
    facts.test.devices = Some(vec![Device::Lvad]);
    let results = derived(&test(), &facts);
    let outcome = course(&results);
    assert_eq!(outcome.reason.as_ref().unwrap().code, "withheld-rhythm-not-stated");
    assert!(outcome.doubts.iter().any(|d| d.code == "withheld-lvad"));
}

#[test]
fn work_that_was_not_as_set_withholds_the_word_but_not_the_numbers() {
    let end = 920.0;
    for (kind, code) in
        [(EventKind::RailGrip, "withheld-rail-grip"), (EventKind::CadenceFade, "withheld-cadence")]
    {
        let mut facts = stated();
        facts.events.push(Event { t_s: end - 90.0, kind });
        let results = derived(&test(), &facts);
        assert_eq!(course(&results).reason.as_ref().unwrap().code, code);
        assert!(results.number("o2-pulse-late-slope", At::Ramp).is_some());
        // The same event early in the ramp does not touch the course.
        facts.events[0].t_s = 420.0;
        assert_eq!(course(&derived(&test(), &facts)).word(), Some("rising"));
    }
}

#[test]
fn what_was_not_simulated_is_labelled() {
    type Change = fn(&mut Facts, &mut Recording);
    let cases: [(&str, Change); 7] = [
        ("age-not-stated", |f, _| f.subject.age_years = None),
        ("under-18", |f, _| f.subject.age_years = Some(15.0)),
        ("transplanted-heart", |f, _| f.test.diagnoses = Some(vec![Diagnosis::Transplant])),
        ("congenital-heart-disease", |f, _| f.test.diagnoses = Some(vec![Diagnosis::Congenital])),
        ("treadmill", |f, _| f.test.mode = Some(Mode::Treadmill)),
        ("mode-not-stated", |f, _| f.test.mode = None),
        ("averaged-table", |_, r| r.row_kind = RowKind::Averaged { step_s: 2.0 }),
    ];
    for (why, change) in cases {
        let (mut facts, mut recording) = (stated(), test());
        change(&mut facts, &mut recording);
        let results = derived(&recording, &facts);
        let expected = ("why", Arg::Word(why));
        let doubts = &course(&results).doubts;
        assert!(
            doubts.iter().any(|d| d.code == "error-rate-unknown" && d.args.contains(&expected)),
            "{why}: {doubts:?}"
        );
    }
}

#[test]
fn a_missing_channel_is_named_and_nothing_is_invented() {
    use crate::quantity::Quantity;
    for missing in [Quantity::Hr, Quantity::Vo2] {
        let mut recording = test();
        recording.breaths = recording.breaths.without(missing);
        let results = derived(&recording, &stated());
        let reason = course(&results).reason.as_ref().unwrap();
        assert_eq!(reason.code, "channel-missing");
        assert_eq!(reason.args[0].1, Arg::Quantity(missing));
        assert!(results.course.is_none());
    }
}

#[test]
fn a_fixed_rate_gives_magnitude_only() {
    let mut plan = Plan::healthy(78);
    plan.circulation.hr_unloaded = 70.0;
    plan.circulation.hr_peak = 76.0;
    let results = derived(&generate(&plan).0, &stated());
    assert_eq!(course(&results).reason.as_ref().unwrap().code, "withheld-fixed-rate");
    assert!(results.number("o2-pulse-at-peak", At::Peak).is_some());
}
