//! Lung volumes in exercise from total lung capacity and inspiratory-capacity manoeuvres.

use analysis::decisions::Decisions;
use analysis::derive;
use analysis::facts::{Event, EventKind, Facts, Mode, Rhythm};
use analysis::model::plan::Plan;
use analysis::model::test::generate;
use analysis::quantity::Quantity;
use analysis::recording::Recording;
use analysis::results::{At, Results};
use analysis::settings::Settings;

/// Manoeuvres of 2.9 L at rest and 2.3 L under load, at `taken`.
fn read(recording: &Recording, tlc_l: Option<f64>, taken: [f64; 2]) -> Results {
    let mut facts = Facts::default();
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    facts.subject.tlc_l = tlc_l;
    facts.events = taken
        .into_iter()
        .zip([2.9, 2.3])
        .map(|(t_s, ic)| Event { t_s, kind: EventKind::IcManoeuvre(Some(ic)) })
        .collect();
    derive(recording, &facts, &Decisions::default(), &Settings::default())
}

/// One at rest, one a minute before load end.
fn times(recording: &Recording) -> [f64; 2] {
    let settings = Settings::default();
    let plain = derive(recording, &Facts::default(), &Decisions::default(), &settings);
    let (from, to) = plain.phases.ramp().expect("a ramp");
    [from - 240.0, to - 60.0]
}

/// Mean tidal volume from 35 to 5 s before `t`, by the share of each breath in that time.
fn tidal_volume_before(recording: &Recording, t: f64) -> f64 {
    let breaths = &recording.breaths;
    let (mut litres, mut seconds) = (0.0, 0.0);
    for (i, (end, long)) in breaths.end_s().iter().zip(breaths.duration_s()).enumerate() {
        let inside = (end.min(t - 5.0) - (end - long).max(t - 35.0)).max(0.0);
        litres += inside * breaths.value(Quantity::Vt, i).unwrap_or_default();
        seconds += inside;
    }
    litres / seconds
}

#[test]
fn end_expiratory_volume_is_tlc_less_ic_and_end_inspiratory_that_plus_a_breath() {
    let (recording, _) = generate(&Plan::healthy(3));
    let taken = times(&recording);
    let results = read(&recording, Some(6.5), taken);
    // 6.5 − 2.9 and 6.5 − 2.3.
    for (at, t, expected) in [(At::Rest, taken[0], 3.6), (At::Peak, taken[1], 4.2)] {
        let low = results.number("eelv", at).unwrap();
        assert!((low - expected).abs() < 1e-12, "{at:?} {low}");
        let breath = results.number("eilv", at).unwrap() - low;
        let mean = tidal_volume_before(&recording, t);
        // A breath set aside as errant may move the mean a little.
        assert!((breath / mean - 1.0).abs() < 0.05, "{at:?}: {breath} for {mean}");
    }
}

#[test]
fn what_is_missing_or_impossible_is_a_reason() {
    let (recording, _) = generate(&Plan::healthy(3));
    let taken = times(&recording);
    let why = |tlc, taken| {
        let results = read(&recording, tlc, taken);
        results.primary("eelv", At::Rest).and_then(|o| o.reason.clone()).map(|r| r.code)
    };
    assert_eq!(why(None, taken), Some("fact-missing"));
    assert_eq!(why(Some(2.9), taken), Some("ic-above-tlc"));
    assert_eq!(why(Some(6.5), [taken[1], taken[1]]), Some("fact-missing"));
}
