//! The committed demo tests, opened from their files: each is understood without a question and
//! reads as the truth put into it says.

use std::fs;

use analysis::decisions::Decisions;
use analysis::model::demo::{CASES, Case};
use analysis::model::test::{Truth, generate};
use analysis::results::{Outcome, Results};
use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, import};

fn derived(case: &Case) -> Results {
    let folder = xtask::root().join("demo-sessions").join(case.name);
    let table = fs::read(folder.join("table.csv")).unwrap();
    let imported = import(&table, "table.csv", &Answers::default(), None).unwrap();
    assert!(imported.questions().is_empty(), "{}: {:?}", case.name, imported.questions());
    assert_eq!(imported.left_out().len(), 1, "{}: only the notice", case.name);
    let facts = FactsFile::read(&fs::read_to_string(folder.join("facts.json")).unwrap()).unwrap();
    let (facts, identity, _) = facts.to_analysis();
    let lab = identity.lab.unwrap();
    assert!(lab.contains("(invented)"), "{lab}");
    analysis::derive(&imported.recording, &facts, &Decisions::default(), &Settings::default())
}

fn truth(case: &Case) -> Truth {
    generate(&(case.plan)()).1
}

fn primary<'r>(results: &'r Results, id: &str) -> &'r Outcome {
    results.outcomes.iter().find(|o| o.id == id && o.primary).unwrap()
}

/// The word, or the reason why there is none.
fn word<'r>(results: &'r Results, id: &str) -> &'r str {
    let outcome = primary(results, id);
    outcome.word().or(outcome.reason.as_ref().map(|r| r.code)).unwrap()
}

#[test]
fn peak_vo2_and_load_end_are_those_put_in() {
    for case in CASES {
        let (results, truth) = (derived(case), truth(case));
        let peak = primary(&results, "vo2-peak").number().unwrap();
        let error = peak / truth.vo2_peak_30s - 1.0;
        assert!(error.abs() < 0.05, "{}: {peak} for {}", case.name, truth.vo2_peak_30s);
        let ramp = results.phases.ramp().unwrap();
        let (from, to) = (truth.phases.ramp.unwrap(), truth.phases.recovery.unwrap());
        assert!((ramp.0 - from).abs() < 15.0, "{}: ramp from {} for {from}", case.name, ramp.0);
        assert!((ramp.1 - to).abs() < 6.0, "{}: load end {} for {to}", case.name, ramp.1);
    }
}

/// A true late slope well above nothing reads rising, near nothing after a bend flattened, well
/// below falling; what forbids a course withholds it.
#[test]
fn courses_read_as_intended() {
    for (name, expected, slope) in [
        ("kittiwake", "rising", 2.5..9.0),
        ("turnstone", "rising", 2.5..9.0),
        ("eider", "rising", 2.5..9.0),
        ("bittern", "rising", 2.5..9.0),
        ("redshank", "rising", 2.5..9.0),
        ("dunlin", "flattened", -1.0..0.5),
        ("knot", "falling", -9.0..-2.0),
    ] {
        let case = analysis::model::demo::case(name).unwrap();
        let put_in = truth(case).late_slope;
        assert!(slope.contains(&put_in), "{name}: true late slope {put_in}");
        assert_eq!(word(&derived(case), "o2-pulse-course"), expected, "{name}");
    }
}

#[test]
fn what_forbids_a_course_withholds_it() {
    for (name, reason) in
        [("curlew", "withheld-atrial-fibrillation"), ("avocet", "withheld-oscillation")]
    {
        let results = derived(analysis::model::demo::case(name).unwrap());
        assert_eq!(word(&results, "o2-pulse-course"), reason, "{name}");
        assert!(primary(&results, "o2-pulse-at-peak").number().is_some(), "{name}");
    }
}

#[test]
fn shunt_oscillation_and_effort_are_seen_where_put_in() {
    for case in CASES {
        let results = derived(case);
        let plan = (case.plan)();
        let present = |yes: bool| if yes { "present" } else { "absent" };
        let shunt = plan.circulation.shunt.is_some();
        assert_eq!(word(&results, "fick-shunt-signature"), present(shunt), "{}", case.name);
        let swing = plan.ventilation.oscillation.is_some();
        assert_eq!(word(&results, "oscillatory-ventilation"), present(swing), "{}", case.name);
    }
    let effort = |name| {
        let results = derived(analysis::model::demo::case(name).unwrap());
        word(&results, "effort").to_owned()
    };
    assert_eq!(effort("kittiwake"), "maximal-metabolic");
    assert_eq!(effort("dunlin"), "maximal-metabolic");
    assert_eq!(effort("bittern"), "stopped-at-limit");
    assert_eq!(effort("sanderling"), "submaximal-without-limit");
}
