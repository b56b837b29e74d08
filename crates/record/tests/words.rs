//! Everything that the demo tests can show has words.

mod support;

use std::collections::BTreeSet;

use record::presentation::key_table::set_names;
use record::presentation::{labels, values, wording};

use support::{CASES, demo};

#[test]
fn every_code_that_a_demo_emits_has_its_text_and_every_result_its_label() {
    let (mut codes, mut ids) = (BTreeSet::new(), BTreeSet::new());
    for case in CASES {
        let results = demo(case).derive();
        let mut note = |note: &analysis::note::Note| {
            let text = wording::text(note, &results);
            if text.starts_with('[') || text.contains('{') {
                codes.insert(format!("{case}: {text}"));
            }
        };
        for outcome in &results.outcomes {
            outcome.doubts.iter().chain(&outcome.reason).for_each(&mut note);
            if !labels::known(&outcome.id) {
                ids.insert(outcome.id.to_string());
            }
        }
        results.doubts.iter().for_each(&mut note);
        results.flags.iter().for_each(|f| note(&f.note));
        for s in &results.statements {
            note(&s.note);
            let evidence = s.supports.iter().chain(&s.contradicts).chain(&s.open);
            evidence.for_each(|e| note(&e.note));
        }
    }
    assert!(codes.is_empty(), "codes without text: {codes:#?}");
    assert!(ids.is_empty(), "results without label: {ids:#?}");
}

#[test]
fn no_label_or_method_of_a_demo_is_a_code_without_its_dashes() {
    let (mut labels_raw, mut methods_raw) = (BTreeSet::new(), BTreeSet::new());
    for case in CASES {
        let session = demo(case);
        let settings = &session.judgement().settings;
        for outcome in &session.derive().outcomes {
            let label = values::shown(outcome).label;
            // Exactly: "Breathing reserve" is a name although its id has the same words.
            if label.starts_with(&outcome.id.replace('-', " ")) {
                labels_raw.insert(format!("{}: {label}", outcome.id));
            }
            let name = set_names(&outcome.method, settings);
            if name == outcome.method.replace('-', " ") || name == *outcome.method {
                methods_raw.insert(name);
            }
        }
    }
    assert!(labels_raw.is_empty(), "{labels_raw:#?}");
    assert!(methods_raw.is_empty(), "{methods_raw:#?}");
}
