//! What holds for every derivation: keys, intervals, reasons, and what a missing channel takes away.

use std::collections::BTreeSet;

use analysis::decisions::Decisions;
use analysis::derive;
use analysis::facts::{Event, EventKind, Facts, Mode, Rhythm, Sex};
use analysis::model::plan::Plan;
use analysis::model::test::generate;
use analysis::note::Arg;
use analysis::quantity::Quantity;
use analysis::recording::{Recording, Trace};
use analysis::results::{At, Results};
use analysis::settings::Settings;

fn facts() -> Facts {
    let mut facts = Facts::default();
    facts.subject.age_years = Some(45.0);
    facts.subject.sex = Some(Sex::Male);
    facts.subject.height_cm = Some(178.0);
    facts.subject.mass_kg = Some(80.0);
    facts.subject.fev1_l = Some(3.9);
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    facts.events =
        vec![Event { t_s: 900.0, kind: EventKind::Bp { sys: Some(182.0), dia: Some(84.0) } }];
    facts
}

fn results(recording: &Recording) -> Results {
    derive(recording, &facts(), &Decisions::default(), &Settings::default())
}

fn without(recording: &Recording, quantity: Quantity) -> Recording {
    let mut copy = recording.clone();
    copy.breaths = copy.breaths.without(quantity);
    if quantity == Quantity::WorkRate {
        copy.load = Trace::default();
    }
    copy
}

/// Ids of this engine part; the others have tests of their own.
fn ours(id: &str) -> bool {
    !["predicted-", "fick-", "o2-pulse-", "vo2-hr-", "published-", "class-"]
        .iter()
        .any(|p| id.starts_with(p))
        || ["o2-pulse-at-peak", "o2-pulse-highest"].contains(&id)
}

#[test]
fn keys_are_unique_and_each_place_has_one_primary() {
    for seed in 0..12 {
        let results = results(&generate(&Plan::healthy(seed)).0);
        let mut keys = BTreeSet::new();
        let mut primaries = BTreeSet::new();
        let mut places = BTreeSet::new();
        for o in &results.outcomes {
            assert!(keys.insert((o.id.clone(), o.at, o.method.clone())), "{} {:?}", o.id, o.at);
            assert!(!o.primary || primaries.insert((o.id.clone(), o.at)), "{} {:?}", o.id, o.at);
            places.insert((o.id.clone(), o.at));
            assert_eq!(o.value.is_none(), o.reason.is_some(), "{}", o.id);
            if let Some(x) = o.number() {
                assert!(x.is_finite(), "{}", o.id);
                assert!(o.unit.is_some(), "{}", o.id);
            }
            for i in [o.recording, o.repeat].into_iter().flatten() {
                assert!(i.low.is_finite() && i.high.is_finite() && i.low <= i.high, "{}", o.id);
            }
            if let (Some(inner), Some(outer)) = (o.recording, o.repeat) {
                assert!(outer.low <= inner.low && inner.high <= outer.high, "{}", o.id);
            }
        }
        assert_eq!(primaries, places);
    }
}

#[test]
fn a_removed_channel_becomes_reasons_that_name_it() {
    let (recording, _) = generate(&Plan::healthy(3));
    let whole = results(&recording);
    for (quantity, lost) in [
        (Quantity::Vo2, &["vo2-peak", "o2-pulse-at-peak", "oues", "dvo2-dwr", "rer-peak"][..]),
        (Quantity::Vco2, &["ve-vco2-slope-full", "rer-peak", "vco2-peak"][..]),
        (Quantity::Ve, &["ve-peak", "ve-vco2-slope-to-vt2", "oues", "breathing-reserve"][..]),
        (
            Quantity::Hr,
            &["hr-peak", "o2-pulse-highest", "chronotropic-index", "hr-recovery-1min"][..],
        ),
        (Quantity::WorkRate, &["work-rate-peak", "dvo2-dwr"][..]),
        (Quantity::Petco2, &["vt2-vo2"][..]),
    ] {
        let less = results(&without(&recording, quantity));
        for id in lost {
            let outcome = less.outcomes.iter().find(|o| o.primary && o.id == *id).unwrap();
            let reason =
                outcome.reason.as_ref().unwrap_or_else(|| panic!("{id} without {quantity:?}"));
            assert_eq!(reason.code, "channel-missing", "{id} without {quantity:?}");
            assert!(
                reason.args.contains(&("channel", Arg::Quantity(quantity))),
                "{id}: {reason:?}"
            );
        }
        // No outcome disappears: it turns into a reason.
        for o in whole.outcomes.iter().filter(|o| o.primary && ours(&o.id)) {
            let left = less.primary(&o.id, o.at);
            assert!(left.is_some(), "{} {:?} without {quantity:?}", o.id, o.at);
        }
    }
}

#[test]
fn an_unrelated_channel_changes_nothing() {
    let (recording, _) = generate(&Plan::healthy(5));
    let whole = results(&recording);
    let less = results(&without(&recording, Quantity::Spo2));
    for o in whole.outcomes.iter().filter(|o| ours(&o.id) && !o.id.starts_with("spo2")) {
        let other =
            less.outcomes.iter().find(|p| p.id == o.id && p.at == o.at && p.method == o.method);
        assert_eq!(Some(o), other, "{}", o.id);
    }
}

#[test]
fn the_readers_mark_wins_and_the_proposal_stands_beside_it() {
    let (recording, _) = generate(&Plan::healthy(3));
    let (from, to) = results(&recording).phases.ramp().unwrap();
    let t = 0.5 * (from + to);
    let decisions = Decisions { vt1_s: Some(t), ..Decisions::default() };
    let results = derive(&recording, &facts(), &decisions, &Settings::default());
    let primary = results.primary("vt1-vo2", At::Vt1).unwrap();
    assert_eq!(primary.method, "reader-mark");
    assert_eq!(results.number("vt1-time", At::Vt1), Some(t));
    let mut others = results.outcomes.iter().filter(|o| o.id == "vt1-vo2" && !o.primary);
    assert!(others.any(|o| o.method == "v-slope-hinge"));
    // V̇O₂ at the mark is near the 30-s mean around it.
    let mean = results.number("vo2", At::Vt1).unwrap();
    assert!((primary.number().unwrap() / mean - 1.0).abs() < 0.06);
}

#[test]
fn deriving_twice_gives_the_same_bits() {
    let (recording, _) = generate(&Plan::healthy(8));
    assert_eq!(results(&recording), results(&recording));
}

#[test]
fn every_method_says_how_it_computed() {
    let results = results(&generate(&Plan::healthy(3)).0);
    // The reserve used is named after the set that predicts the heart rate.
    for o in results.outcomes.iter().filter(|o| ours(&o.id) && o.id != "hr-reserve-used") {
        let how = analysis::methods::describe(&o.method);
        assert!(how.is_some_and(|h| !h.contains('#')), "{}: {}", o.id, o.method);
    }
}
