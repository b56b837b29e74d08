//! Each rule's positive and negative case, precedence, and the message codes.

use super::circulation::candidates;
use super::rules::{RULES, matches};
use super::seen::Seen;
use super::signs::{Answer, Sign};
use crate::facts::{Diagnosis, Facts};

fn first(seen: &Seen) -> Option<&'static str> {
    matches(seen).first().map(|m| m.rule.code)
}

fn flat() -> Seen {
    Seen {
        course: Some("flattened"),
        pulse_low: Some(false),
        vo2_slowed: Some(true),
        hr_accelerated: Some(true),
        rate_low: Some(false),
        terminal: Some(false),
        ..Seen::default()
    }
}

fn rising() -> Seen {
    Seen {
        course: Some("rising"),
        pulse_low: Some(false),
        rate_low: Some(false),
        low_from_start: Some(false),
        terminal: Some(false),
        ..Seen::default()
    }
}

/// A case reads as `with` and, with one thing changed, no longer does.
#[test]
fn every_rule_has_its_positive_and_its_negative_case() {
    let low = || Seen { pulse_low: Some(true), ..rising() };
    let cases: Vec<(&str, Seen, Seen)> = vec![
        ("pattern-usual", rising(), Seen { course: None, ..rising() }),
        ("pattern-low-normal-shape", low(), rising()),
        (
            "pattern-level-early",
            Seen { course: Some("indeterminate"), low_from_start: Some(true), ..low() },
            Seen { course: Some("indeterminate"), ..low() },
        ),
        ("pattern-both-slowed", flat(), Seen { hr_accelerated: Some(false), ..flat() }),
        ("pattern-vo2-part", Seen { hr_accelerated: Some(false), ..flat() }, flat()),
        ("pattern-hr-part", Seen { vo2_slowed: Some(false), ..flat() }, flat()),
        (
            "pattern-pulmonary-vascular",
            Seen {
                ve_vco2: Some(44.0),
                petco2_low: Some(true),
                spo2_fall: Some(1.0),
                work_slope: Some(7.0),
                ecg_change: Some(false),
                pressure_rise: Some(40.0),
                hr_accelerated: Some(false),
                ..flat()
            },
            Seen {
                ve_vco2: Some(28.0),
                petco2_low: Some(true),
                hr_accelerated: Some(false),
                ..flat()
            },
        ),
        (
            "pattern-ventilatory",
            Seen { reserve_low: Some(true), hr_accelerated: Some(false), ..flat() },
            Seen { reserve_low: Some(false), hr_accelerated: Some(false), ..flat() },
        ),
        (
            "pattern-desaturation",
            Seen { spo2_fall: Some(8.0), ..flat() },
            Seen { spo2_fall: Some(1.0), ..flat() },
        ),
        (
            "pattern-shunt",
            Seen { shunt: Some(true), spo2_fall: Some(8.0), ..flat() },
            Seen { shunt: Some(false), spo2_fall: Some(8.0), ..flat() },
        ),
        ("pattern-terminal", Seen { terminal: Some(true), ..flat() }, flat()),
        (
            "pattern-rate-limited",
            Seen { rate_low: Some(true), ..rising() },
            Seen { rate_low: Some(true), submaximal: Some(true), ..rising() },
        ),
        (
            "pattern-rate-limited-drug",
            Seen { rate_low: Some(true), rate_drug: Some(true), ..rising() },
            Seen { rate_drug: Some(true), ..rising() },
        ),
        (
            "pattern-content-ceiling",
            Seen { hb_low: Some(true), ..low() },
            Seen { hb_low: Some(false), ..low() },
        ),
        ("pattern-cohb", Seen { cohb: Some(0.08), ..low() }, Seen { cohb: Some(0.01), ..low() }),
    ];
    let mut tested: Vec<&str> = cases.iter().map(|c| c.0).collect();
    for (code, positive, negative) in cases {
        assert_eq!(first(&positive), Some(code));
        assert_ne!(first(&negative), Some(code), "{code}");
    }
    tested.sort_unstable();
    let mut all: Vec<&str> = RULES.iter().map(|r| r.code).collect();
    all.sort_unstable();
    assert_eq!(tested, all);
}

#[test]
fn nothing_is_offered_without_a_course() {
    assert!(matches(&Seen::default()).is_empty());
}

#[test]
fn corroborators_are_sorted_into_met_absent_and_not_measured() {
    let seen = Seen { ecg_change: Some(true), pressure_rise: Some(45.0), ..flat() };
    let m = &matches(&seen)[0];
    assert_eq!(m.met, vec![Sign::EcgChange]);
    assert_eq!(m.absent, vec![Sign::PressureBlunted]);
    assert_eq!(m.open, vec![Sign::WorkSlopeLow, Sign::RecoveryHigher]);
}

#[test]
fn a_recorded_diagnosis_is_never_offered_again() {
    let found = matches(&Seen { course: Some("rising"), pulse_low: Some(true), ..rising() });
    let mut facts = Facts::default();
    assert!(candidates(&facts, &found).contains(&"stable-heart-failure"));
    facts.test.diagnoses = Some(vec![Diagnosis::HeartFailure]);
    assert!(!candidates(&facts, &found).contains(&"stable-heart-failure"));
}

#[test]
fn an_unmeasured_sign_is_neither_for_nor_against() {
    for sign in Sign::ALL {
        assert_eq!(sign.answer(&Seen::default()), Answer::NotMeasured, "{sign:?}");
    }
}
