//! What is said, and what is withheld, on a simulated normal test.

use crate::facts::{Device, Diagnosis, Facts, Haemoglobin, HbTime, Rhythm};
use crate::model::{demo::case, plan::Plan, test::generate};
use crate::recording::Recording;
use crate::results::{At, Results};

fn stated() -> Facts {
    let mut facts = Facts::default();
    facts.subject.height_cm = Some(178.0);
    facts.subject.mass_kg = Some(78.0);
    facts.subject.hb = Some(Haemoglobin { g_per_l: 148.0, at: Some(HbTime::Rest) });
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.spo2_confirmed = Some(true);
    facts
}

fn derived(recording: &Recording, facts: &Facts) -> Results {
    crate::derive(recording, facts, &Default::default(), &Default::default())
}

#[test]
fn without_hb_a_band_is_drawn_and_the_bound_is_withheld() {
    let recording = generate(&Plan::healthy(5)).0;
    let mut facts = stated();
    facts.subject.hb = None;
    let results = derived(&recording, &facts);
    let bound = results.primary("fick-forward-sv-bound", At::Peak).unwrap();
    assert_eq!(bound.reason.as_ref().unwrap().code, "fact-missing");
    let region = results.fick.region.unwrap();
    assert!(region.content_limit.high > 1.8 * region.content_limit.low);
    assert!(results.fick.bound.is_none());
    // Without Hb there is no A3.
    assert_eq!(results.fick.paths.len(), 3);
}

#[test]
fn the_bound_lists_its_assumptions_and_lies_below_the_usual_figure() {
    let results = derived(&generate(&Plan::healthy(5)).0, &stated());
    let bound = results.fick.bound.as_ref().unwrap();
    assert!(bound.stroke_volume < bound.usual);
    let codes: Vec<&str> = bound.assumptions.iter().map(|n| n.code).collect();
    for code in [
        "bound-pulse",
        "bound-calibration",
        "bound-hb",
        "bound-haemoconcentration",
        "bound-sao2",
        "bound-cohb",
        "bound-extraction",
        "bound-hufner",
    ] {
        assert!(codes.contains(&code), "{code}");
    }
    assert_eq!(results.fick.paths.len(), 4);
}

#[test]
fn devices_shunt_pregnancy_and_inspired_gas_withhold_everything() {
    type Change = fn(&mut Facts);
    let cases: [(&str, Change); 5] = [
        ("withheld-lvad", |f| f.test.devices = Some(vec![Device::Lvad])),
        ("withheld-fontan", |f| f.test.diagnoses = Some(vec![Diagnosis::Fontan])),
        ("withheld-shunt", |f| f.test.diagnoses = Some(vec![Diagnosis::Shunt])),
        ("withheld-pregnancy", |f| f.test.diagnoses = Some(vec![Diagnosis::Pregnancy])),
        ("withheld-inspired-gas", |f| f.test.fio2 = Some(0.4)),
    ];
    let recording = generate(&Plan::healthy(5)).0;
    for (code, change) in cases {
        let mut facts = stated();
        change(&mut facts);
        let results = derived(&recording, &facts);
        for (id, at) in [("fick-forward-sv-bound", At::Peak), ("fick-sv-change", At::Ramp)] {
            let reason = &results.primary(id, at).unwrap().reason;
            assert_eq!(reason.as_ref().unwrap().code, code, "{id}");
        }
        assert!(results.fick.region.is_none() && results.fick.paths.is_empty());
    }
}

#[test]
fn the_readers_two_points_are_used_in_either_order() {
    let recording = generate(&Plan::healthy(5)).0;
    let decisions =
        crate::decisions::Decisions { two_factor_s: Some((860.0, 600.0)), ..Default::default() };
    let results = crate::derive(&recording, &stated(), &decisions, &Default::default());
    assert_eq!(results.fick.table.unwrap().between_s, (600.0, 860.0));
}

#[test]
fn saturation_enters_only_when_confirmed_and_the_shunt_is_seen_where_it_opens() {
    let plan = (case("knot").unwrap().plan)();
    let opens = plan.schedule.end_at() - plan.circulation.shunt.unwrap().before_end_s;
    let recording = generate(&plan).0;
    let results = derived(&recording, &stated());
    let step = results.fick.shunt.unwrap();
    assert!((step.t_s - opens).abs() <= 30.0, "{} {opens}", step.t_s);
    let signature = results.primary("fick-shunt-signature", At::Ramp).unwrap();
    assert_eq!(signature.word(), Some("present"));
    assert!(results.number("fick-content-share", At::Ramp).unwrap() < -4.0);
    let mut facts = stated();
    facts.test.spo2_confirmed = None;
    let unconfirmed = derived(&recording, &facts);
    let signature = unconfirmed.primary("fick-shunt-signature", At::Ramp).unwrap();
    assert_eq!(signature.word(), Some("indeterminate"));
    assert_eq!(unconfirmed.number("fick-content-share", At::Ramp), None);
}
