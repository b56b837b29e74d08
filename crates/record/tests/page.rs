//! The page of every demo: the same strings as everywhere, no script, nothing from outside.

mod support;

use analysis::results::At;
use record::page;
use record::presentation::labels::plain;
use record::presentation::{key_table, values};
use record::session::Edit;
use record::session::findings::Status;

use support::{CASES, NOW, demo};

#[test]
fn every_number_and_interval_is_that_of_the_values() {
    for case in CASES {
        let session = demo(case);
        let results = session.derive();
        let html = page::render(&session, &results, NOW);
        assert_eq!(html, page::render(&session, &results, NOW), "{case}: not the same bytes");
        let mut seen = 0;
        for row in key_table::rows(&results, &session.judgement().settings) {
            let (id, at) = row.shown.key.split_once('@').expect("a key");
            let marked = |class: &str, text: &str| {
                let text = plain(text);
                format!("<span class=\"{class}\" data-id=\"{id}\" data-at=\"{at}\">{text}</span>")
            };
            let at = At::ALL.into_iter().find(|a| a.code() == at).expect("a place");
            let shown = values::shown(results.primary(id, at).expect("an outcome"));
            assert!(html.contains(&marked("v", &shown.value)), "{case}: {}", row.shown.key);
            for interval in [&shown.recording, &shown.repeat].into_iter().flatten() {
                assert!(html.contains(&marked("i", interval)), "{case}: {}", row.shown.key);
                seen += 1;
            }
        }
        assert!(seen >= 2, "{case}: only {seen} intervals");
        if let Some(folder) = std::env::var_os("RAMPCREST_PAGES") {
            let path = std::path::Path::new(&folder).join(format!("{case}.html"));
            std::fs::write(path, &html).expect("written");
        }
    }
}

#[test]
fn the_page_is_self_contained_and_plain() {
    let session = demo("dunlin");
    let html = page::render(&session, &session.derive(), NOW);
    for banned in
        ["<script", "javascript:", "http:", "https:", "url(", "@import", "style=\"", " on"]
    {
        let found = html.match_indices(banned).find(|(i, _)| {
            // " on" only where it begins an attribute such as onload=.
            banned != " on"
                || html[*i..].chars().skip(3).take_while(|c| c.is_ascii_alphabetic()).count() > 2
                    && html[*i + 3..]
                        .trim_start_matches(|c: char| c.is_ascii_alphabetic())
                        .starts_with('=')
        });
        assert!(found.is_none(), "{banned} at {found:?}");
    }
    assert!(!html.chars().any(|c| ('\u{300}'..='\u{36f}').contains(&c)), "a combining mark");
    assert!(html.contains("default-src 'none'"));
    assert!(html.contains("does not exclude ischaemia"));
    assert!(html.contains("Draft, not signed"));
    assert!(html.contains("none recorded (not the same as none)"));
}

#[test]
fn squares_follow_the_reader_and_a_signed_page_names_the_signer() {
    let mut session = demo("kittiwake");
    let results = session.derive();
    let first = results.statements.iter().find(|s| s.id == "effort-state").expect("drafted");
    let count = |html: &str, class: &str| html.matches(&format!("square {class}")).count();
    assert_eq!(count(&page::render(&session, &results, NOW), "solid"), 0);
    let accept = Edit::FindingStatus { id: first.id.into(), status: Status::Accepted };
    session.apply(&accept, NOW).expect("accepted");
    // Once on page 1 and once among the findings.
    assert_eq!(count(&page::render(&session, &results, NOW), "solid"), 2);
    let sign = Edit::Sign {
        name: "N. Reader <invented>".into(),
        role: "physiologist".into(),
        registration: "INVENTED-1".into(),
        meaning: "reviewed".into(),
    };
    session.apply(&sign, NOW).expect("signs");
    let html = page::render(&session, &results, NOW);
    assert!(html.contains("N. Reader &lt;invented&gt; (typed name)"));
    assert!(html.contains("24 Nov 2026, 10:51 h (UTC+01:00)"));
    assert!(!html.contains("Draft, not signed"));
}

#[test]
fn a_signed_page_keeps_its_values_when_the_engine_gives_others() {
    let mut session = demo("kittiwake");
    let sign = Edit::Sign {
        name: "N. Reader".into(),
        role: String::new(),
        registration: String::new(),
        meaning: "reviewed".into(),
    };
    let signed = session.derive();
    session.apply(&sign, NOW).expect("signs");
    let mut newer = signed.clone();
    let changed = newer.outcomes.iter_mut().find(|o| o.primary && o.id == "hr-peak").expect("HR");
    let before = values::shown(changed).value;
    changed.value =
        Some(analysis::results::Value::Number(changed.number().expect("a number") + 20.0));
    let after = values::shown(changed).value;
    let html = page::render(&session, &newer, NOW);
    let marked = |v: &str| format!("data-id=\"hr-peak\" data-at=\"peak\">{v}</span>");
    assert!(html.contains(&marked(&before)) && !html.contains(&marked(&after)));
    assert!(html.contains("gives other values for: HR at peak"), "the difference is named");
    assert!(!page::render(&session, &signed, NOW).contains("gives other values"));
}

#[test]
fn the_model_is_printed_with_its_sets_only_when_it_is_shown() {
    let mut session = demo("dunlin");
    let comb = |html: &str| html.matches("class=\"comb\"").count();
    session.apply(&Edit::SetOverlayShown { shown: true }, NOW).expect("shown");
    let on = page::render(&session, &session.derive(), NOW);
    // Three figures with at least ten teeth each, and three thin lines.
    assert!(comb(&on) >= 30, "{}", comb(&on));
    assert_eq!(on.matches("<polyline class=\"thin\"").count(), 3);
    assert!(on.contains("model of a normal response, for orientation (Hansen 1984"));
    session.apply(&Edit::SetOverlayShown { shown: false }, NOW).expect("hidden");
    let off = page::render(&session, &session.derive(), NOW);
    assert_eq!(comb(&off), 0);
    assert!(!off.contains("<polyline class=\"thin\"") && !off.contains("for orientation ("));
}
