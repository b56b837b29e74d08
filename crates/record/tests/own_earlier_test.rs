//! A low O₂ pulse is called hidden behind a low rate only with the person's own earlier test, and
//! only with adequate effort.

use analysis::facts::{Facts, OwnTest, StopKind};
use analysis::model::demo::case;
use analysis::model::test::generate;
use analysis::recording::Recording;
use analysis::results::{At, Results};
use record::facts_file::FactsFile;
use record::predicted_sets::default_settings;

const FACTS: &str = include_str!("../../../demo-sessions/eider/facts.json");

/// The blunted rate on a beta-blocker; the earlier test is invented here.
fn test() -> (Recording, Facts) {
    let recording = generate(&(case("eider").unwrap().plan)()).0;
    let mut facts = FactsFile::read(FACTS).unwrap().to_analysis().0;
    // A stop for blood pressure is a demonstrated limit: effort is adequate.
    facts.test.stop = Some(StopKind::BloodPressure);
    (recording, facts)
}

fn derived(recording: &Recording, facts: &Facts) -> Results {
    analysis::derive(recording, facts, &Default::default(), &default_settings())
}

fn code(results: &Results) -> Option<&'static str> {
    results.statements.iter().find(|s| s.id == "rate-own-test").map(|s| s.note.code)
}

/// An earlier test at whose rate the present V̇O₂ would give `pulse`, mL/beat.
fn giving(results: &Results, pulse: f64) -> OwnTest {
    let vo2 = results.number("vo2-peak", At::Peak).unwrap();
    OwnTest { low: (0.3 * vo2, 70.0), peak: (vo2, vo2 / pulse) }
}

#[test]
fn hidden_only_below_80_percent_of_predicted_at_the_own_rate() {
    let (recording, mut facts) = test();
    let without = derived(&recording, &facts);
    assert_eq!(code(&without), None);
    let measured = without.number("o2-pulse-at-peak", At::Peak).unwrap();
    let limit = 0.8 * without.number("predicted-o2-pulse", At::Peak).unwrap();
    assert!(measured > 1.12 * limit, "{measured} against {limit}");
    for (pulse, expected) in [(0.97 * limit, "rate-hides-low-pulse"), (1.03 * limit, "rate-share")]
    {
        facts.test.own_test = Some(giving(&without, pulse));
        assert_eq!(code(&derived(&recording, &facts)), Some(expected), "{pulse} and {limit}");
    }
}

#[test]
fn without_adequate_effort_nothing_is_called_hidden() {
    let (recording, mut facts) = test();
    let without = derived(&recording, &facts);
    let limit = 0.8 * without.number("predicted-o2-pulse", At::Peak).unwrap();
    facts.test.own_test = Some(giving(&without, 0.9 * limit));
    assert_eq!(code(&derived(&recording, &facts)), Some("rate-hides-low-pulse"));
    // Without the demonstrated limit this test is submaximal.
    facts.test.stop = None;
    let results = derived(&recording, &facts);
    let effort = results.primary("effort", At::Test).and_then(|o| o.word());
    assert_eq!(effort, Some("submaximal-without-limit"));
    assert_eq!(code(&results), Some("rate-share"));
}

#[test]
fn an_earlier_test_is_read_from_the_facts_and_slips_are_refused() {
    let file = |low: &str, peak: &str| {
        let text = format!(
            r#"{{"schema":"rampcrest-facts/1","test":{{"own_test":{{"low":{low},"peak":{peak}}}}}}}"#
        );
        FactsFile::read(&text)
    };
    let good = file(r#"{"vo2_ml_min":600,"hr":90}"#, r#"{"vo2_ml_min":2400,"hr":180}"#).unwrap();
    let own = good.to_analysis().0.test.own_test.unwrap();
    assert_eq!((own.low, own.peak), ((600.0, 90.0), (2400.0, 180.0)));
    let reversed = file(r#"{"vo2_ml_min":2400,"hr":180}"#, r#"{"vo2_ml_min":600,"hr":90}"#);
    assert!(reversed.is_err());
    assert!(file(r#"{"vo2_ml_min":600,"hr":0}"#, r#"{"vo2_ml_min":2400,"hr":180}"#).is_err());
    // One instant alone gives no line.
    let half = file("null", r#"{"vo2_ml_min":2400,"hr":180}"#);
    assert!(half.is_ok_and(|f| f.to_analysis().0.test.own_test.is_none()));
}
