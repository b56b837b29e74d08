//! A number on paper is the number on screen: page 1's key table against the findings view.

use app::App;
use app::describe::{Described, describe};
use app::headless::{Headless, Screen};
use app::opening::{self, Reading};
use app::view_state::View;
use record::presentation::labels::plain;

const NOW: &str = "2026-11-24T10:51:00+01:00";

fn open(case: &str) -> App {
    let folder = format!("{}/../../demo-sessions/{case}", env!("CARGO_MANIFEST_DIR"));
    let path = std::path::PathBuf::from(folder).join("session.json");
    let bytes = std::fs::read(&path).expect("the session");
    let reading = Reading { clock: Some(NOW.into()), ..Reading::default() };
    let mut app = App::new();
    app.show(opening::bytes(&bytes, &path, reading).expect("opens"));
    app.view.view = View::Findings;
    app
}

/// The nodes of the findings view that bear a key.
fn window(app: &mut App) -> Vec<Described> {
    let mut headless = Headless::new(Screen::default(), |ctx| app.setup(ctx));
    headless.ctx().enable_accesskit();
    let output = headless.settle(|ui| app.ui(ui));
    let update = output.platform_output.accesskit_update.expect("a tree");
    let nodes = describe(&update, "findings", [1920, 1080]).nodes;
    nodes.into_iter().filter(|n| n.key.is_some()).collect()
}

fn between<'a>(text: &'a str, open: &str, close: &str) -> Option<(&'a str, &'a str)> {
    let from = text.find(open)? + open.len();
    let to = from + text[from..].find(close)?;
    Some((&text[from..to], &text[to..]))
}

/// Class, `ID@AT` and text of every keyed number of page 1's key table.
fn paper(page: &str) -> Vec<(String, String, String)> {
    let (table, _) = between(page, "<table class=\"key\">", "</table>").expect("the key table");
    let mut rest = table;
    let mut out = Vec::new();
    while let Some((span, after)) = between(rest, "<span class=\"", "</span>") {
        rest = after;
        let Some((id, _)) = between(span, "data-id=\"", "\"") else { continue };
        let (at, _) = between(span, "data-at=\"", "\"").expect("a place");
        let class = span.split('"').next().unwrap_or_default().to_owned();
        let text = span.split_once('>').expect("a text").1.replace("&#39;", "'");
        out.push((class, format!("{id}@{at}"), text));
    }
    out
}

/// Value and both intervals of a node's text `VALUE UNIT, this recording [a, b], if repeated [c, d]`.
fn strings(spoken: &str) -> (String, Vec<String>) {
    let mut parts = spoken.split(", this recording ");
    let (head, tail) = (parts.next().unwrap_or_default(), parts.next());
    let (head, repeat) = match (head.split_once(", if repeated "), tail) {
        (Some((head, repeat)), None) => (head, Some(repeat)),
        (_, Some(tail)) => (head, tail.split_once(", if repeated ").map(|(_, r)| r)),
        _ => (head, None),
    };
    let recording = tail.map(|t| t.split(", if repeated ").next().unwrap_or_default());
    (plain(head), recording.into_iter().chain(repeat).map(plain).collect())
}

#[test]
fn every_number_of_the_key_table_on_page_1_stands_the_same_in_the_findings_view() {
    for case in ["kittiwake", "dunlin", "curlew"] {
        let mut app = open(case);
        let nodes = window(&mut app);
        let session = app.document.session().expect("open");
        let page = record::page::render(session, app.derived.committed(), NOW);
        let numbers = paper(&page);
        assert!(numbers.len() > 15, "{case}: only {} numbers", numbers.len());
        let mut intervals: Vec<String> = Vec::new();
        let mut last = String::new();
        for (class, key, text) in numbers {
            let of_key: Vec<_> = nodes.iter().filter(|n| n.key.as_deref() == Some(&key)).collect();
            assert_eq!(of_key.len(), 1, "{case}: {key} stands {} times", of_key.len());
            let (value, left) = strings(of_key[0].value.as_deref().unwrap_or_default());
            if key != last {
                assert!(intervals.is_empty(), "{case}: {last} lacks {intervals:?} on paper");
                (intervals, last) = (left, key.clone());
            }
            if class == "v" {
                let same = value == text
                    || value.starts_with(&format!("{text} "))
                    || (text == "–" && value.starts_with("–"));
                assert!(same, "{case}: {key} is {text} on paper, {value} in the window");
                // A word and a withheld value bear no interval on paper.
                if text == "–" || text.chars().all(|c| !c.is_ascii_digit()) {
                    intervals.clear();
                }
            } else {
                assert!(!intervals.is_empty(), "{case}: {key} has {text} on paper only");
                assert_eq!(intervals.remove(0), text, "{case}: {key}");
            }
        }
        assert!(intervals.is_empty(), "{case}: {last} lacks {intervals:?} on paper");
    }
}
