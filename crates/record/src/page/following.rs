//! The pages after the first: findings with their evidence, every result, methods, source, history.

use analysis::decisions::{Mark, Phase};
use analysis::quantity::{Quantity, TABLE};
use analysis::results::{At, Outcome};

use super::first::{heading, number, square};
use super::html::Html;
use super::model::Model;
use crate::clock;
use crate::presentation::key_table::set_names;
use crate::presentation::wording::{method, plain_text as t, text, with};
use crate::presentation::{choices, values};
use crate::session::findings::{EvidenceShown, FindingShown, SECTIONS};
use crate::session::history::Action;

/// Writes the following pages.
pub(super) fn write(h: &mut Html, m: &Model<'_>) {
    findings(h, m);
    all_results(h, m);
    methods(h, m);
    source(h, m);
    history(h, m);
}

fn findings(h: &mut Html, m: &Model<'_>) {
    h.open("section", "sheet");
    heading(h, "page-findings", "page-conclusion-key");
    for section in SECTIONS {
        let list: Vec<&FindingShown> = m.of(section).collect();
        if list.is_empty() {
            continue;
        }
        h.element("h3", "", &t(&format!("section-{}", section.code())));
        for finding in list {
            one(h, m, finding);
        }
    }
    h.close("section");
}

fn one(h: &mut Html, m: &Model<'_>, f: &FindingShown) {
    h.open("article", "");
    h.open("p", "said");
    square(h, f);
    h.text(&f.text);
    for (yes, code) in [
        (f.edited && !f.id.starts_with("own-"), "page-edited"),
        (f.id.starts_with("own-"), "page-own"),
    ] {
        if yes {
            h.raw(" <span class=\"quiet\">");
            h.text(&t(code));
            h.raw("</span>");
        }
    }
    if f.stale {
        h.raw(" <strong class=\"stale\">");
        h.text(&t("page-out-of-date"));
        h.raw("</strong>");
    }
    h.close("p");
    if let Some(now) = f.draft_now.as_ref().filter(|_| f.stale) {
        h.element("p", "quiet now", &with("page-draft-now", &[("text", now.clone())]));
    }
    h.open("dl", "evidence");
    for (code, list) in
        [("page-for", &f.supports), ("page-against", &f.contradicts), ("page-unmeasured", &f.open)]
    {
        evidence(h, m, code, list, &f.keys);
    }
    h.close("dl");
    h.close("article");
}

fn evidence(h: &mut Html, m: &Model<'_>, code: &str, list: &[EvidenceShown], own: &[String]) {
    if list.is_empty() {
        return;
    }
    h.element("dt", "", &t(code));
    h.open("dd", "");
    for (i, e) in list.iter().enumerate() {
        if i > 0 {
            h.raw(" · ");
        }
        h.text(&e.text);
        // The statement's own values stand in it already.
        for key in e.keys.iter().filter(|k| !own.contains(k)) {
            let shown = m.primaries().map(values::shown).find(|s| s.key == *key);
            if let Some(s) = shown.filter(|s| !e.text.contains(&s.value)) {
                h.raw(" (");
                h.text(&s.label);
                h.raw("\u{a0}");
                h.keyed("v", &s.key, &s.with_unit());
                h.raw(")");
            }
        }
    }
    h.close("dd");
}

fn all_results(h: &mut Html, m: &Model<'_>) {
    h.open("section", "break");
    heading(h, "page-all", "page-all-note");
    phases(h, m);
    h.raw("<table class=\"all\"><thead><tr>");
    for (class, code) in [
        ("name", "page-col-result"),
        ("number value", "page-col-value"),
        ("number", "page-col-recording"),
        ("number", "page-col-repeat"),
        ("basis", "page-col-method"),
    ] {
        h.raw(&format!("<th scope=\"col\" class=\"{class}\">"));
        h.text(&t(code));
        h.raw("</th>");
    }
    h.raw("</tr></thead><tbody>\n");
    let given = |o: &&Outcome| o.value.is_some() && Quantity::from_code(&o.id).is_none();
    for outcome in m.primaries().filter(given) {
        let shown = values::shown(outcome);
        h.raw("<tr><th scope=\"row\">");
        h.text(&shown.label);
        h.raw("</th>");
        if outcome.word().is_some() {
            h.raw("<td colspan=\"3\" class=\"word\">");
            h.keyed("v", &shown.key, &shown.value);
            h.raw("</td><td class=\"basis\">");
            h.text(&basis(outcome, m));
            h.raw("</td></tr>\n");
            continue;
        }
        h.raw("<td class=\"number\">");
        number(h, &shown);
        h.raw("</td>");
        for interval in [&shown.recording, &shown.repeat] {
            h.raw("<td class=\"number\">");
            if let Some(i) = interval {
                h.keyed("i", &shown.key, i);
            }
            h.raw("</td>");
        }
        h.raw("<td class=\"basis\">");
        h.text(&basis(outcome, m));
        h.raw("</td></tr>\n");
    }
    h.raw("</tbody></table>\n");
    withheld(h, m);
    doubts(h, m);
    h.close("section");
}

/// Means of the phases: a quantity a row.
fn phases(h: &mut Html, m: &Model<'_>) {
    const PLACES: [At; 6] = [At::Rest, At::WarmUp, At::Vt1, At::Vt2, At::Peak, At::Recovery1Min];
    let cell = |id: &str, at: At| m.results.primary(id, at).map(values::shown);
    h.element("h3", "", &t("page-phases"));
    h.raw("<table class=\"phases means\"><thead><tr><th scope=\"col\">");
    h.text(&t("page-quantity"));
    h.raw("</th>");
    for at in PLACES {
        h.raw("<th scope=\"col\">");
        h.text(&t(&format!("at-{}", at.code())));
        h.raw("</th>");
    }
    h.raw("</tr></thead><tbody>\n");
    for row in TABLE {
        let cells: Vec<_> = PLACES.iter().map(|at| cell(row.code, *at)).collect();
        let Some(some) = cells.iter().flatten().find(|s| s.value != values::NONE) else { continue };
        h.raw("<tr><th scope=\"row\">");
        h.text(row.symbol);
        h.raw(" <span class=\"u\">");
        h.text(&some.unit);
        h.raw("</span></th>");
        for cell in cells {
            h.raw("<td>");
            match cell {
                Some(s) => h.keyed("v", &s.key, &s.value),
                None => h.text(values::NONE),
            }
            h.raw("</td>");
        }
        h.raw("</tr>\n");
    }
    h.raw("</tbody></table>\n");
}

/// Method, window and breaths.
fn basis(outcome: &Outcome, m: &Model<'_>) -> String {
    let settings = &m.session.judgement().settings;
    let mut out = set_names(&outcome.method, settings);
    if let Some((from, to)) = outcome.basis.window_s {
        out.push_str(&format!(", {}–{}", values::time(from), values::time(to)));
    }
    if outcome.basis.breaths > 0 {
        out.push_str(&format!(", {}", outcome.basis.breaths));
    }
    out
}

/// Labels gathered under the sentence that holds for all of them.
type Gathered = Vec<(String, Vec<String>)>;

fn gather(list: &mut Gathered, words: String, label: String) {
    match list.iter_mut().find(|(w, _)| *w == words) {
        Some((_, labels)) => labels.push(label),
        None => list.push((words, vec![label])),
    }
}

fn gathered(h: &mut Html, title: &str, list: &Gathered) {
    if list.is_empty() {
        return;
    }
    h.element("h3", "", &t(title));
    h.open("ul", "doubts");
    for (words, labels) in list {
        h.open("li", "");
        h.text(words);
        h.raw(" <span class=\"quiet\">");
        h.text(&labels.join(" · "));
        h.raw("</span>");
        h.close("li");
    }
    h.close("ul");
}

fn withheld(h: &mut Html, m: &Model<'_>) {
    let mut list = Gathered::new();
    for outcome in m.primaries() {
        if let Some(reason) = &outcome.reason {
            gather(&mut list, text(reason, &m.results), values::shown(outcome).label);
        }
    }
    gathered(h, "page-withheld", &list);
}

fn doubts(h: &mut Html, m: &Model<'_>) {
    let mut list: Gathered =
        m.results.doubts.iter().map(|n| (text(n, &m.results), Vec::new())).collect();
    for outcome in m.primaries() {
        for note in outcome.doubts.iter().filter(|n| shown_here(n.code)) {
            gather(&mut list, text(note, &m.results), values::shown(outcome).label);
        }
    }
    gathered(h, "page-doubts", &list);
}

fn methods(h: &mut Html, m: &Model<'_>) {
    h.open("section", "");
    heading(h, "page-methods", "");
    h.open("ul", "runin");
    let mut seen: Vec<&str> = Vec::new();
    for outcome in m.primaries().filter(|o| o.value.is_some()) {
        let code = outcome.method.as_ref();
        if seen.contains(&code) {
            continue;
        }
        seen.push(code);
        let Some(how) = analysis::methods::describe(code) else { continue };
        let source = analysis::methods::find(code).map_or("", |method| method.source);
        entry(h, &method(code), &how, source);
    }
    let used = |id: &str| {
        m.primaries().any(|o| o.value.is_some() && o.method.split('/').any(|part| part == id))
    };
    for set in m.session.judgement().settings.sets.iter().filter(|s| used(&s.id)) {
        entry(h, &set.name, &set.population, &set.citation);
    }
    h.close("ul");
    h.close("section");
}

/// A method: its code, how, and its source.
fn entry(h: &mut Html, name: &str, how: &str, source: &str) {
    h.open("li", "");
    h.element("strong", "", &format!("{name}:"));
    h.text(how);
    if !source.is_empty() {
        h.raw(" <span class=\"quiet\">");
        h.text(source);
        h.raw("</span>");
    }
    h.close("li");
}

fn source(h: &mut Html, m: &Model<'_>) {
    let source = m.session.source();
    h.open("section", "");
    heading(h, "page-source", "");
    h.open("dl", "methods");
    let line =
        with("page-file-line", &[("name", source.name.clone()), ("size", source.size.to_string())]);
    for (label, words) in [
        ("page-file", line),
        ("page-sha", source.sha256.clone()),
        ("page-engine", m.version()),
        ("page-decisions", decisions(m).join("; ")),
    ] {
        h.element("dt", "", &t(label));
        h.element("dd", if label == "page-sha" { "hash" } else { "" }, &words);
    }
    h.close("dl");
    h.close("section");
}

fn decisions(m: &Model<'_>) -> Vec<String> {
    let j = m.session.judgement();
    let mut out = Vec::new();
    for phase in Phase::ALL {
        if let Some(at) = j.decisions.phases.get(phase) {
            let args =
                [("phase", t(&format!("phase-{}", phase.code()))), ("time", values::time(at))];
            out.push(with("page-boundary", &args));
        }
    }
    for mark in [Mark::Vt1, Mark::Vt2] {
        if let Some(at) = j.decisions.mark(mark) {
            let args = [("mark", mark.code().to_uppercase()), ("time", values::time(at))];
            out.push(with("page-mark", &args));
        }
    }
    for (e, reason) in j.decisions.excluded.iter().zip(&j.exclusion_reasons) {
        let args = [
            ("from", values::time(e.from_s)),
            ("to", values::time(e.to_s)),
            ("reason", reason.clone()),
        ];
        out.push(with("page-excluded", &args));
    }
    out.extend(choices::changed(&j.settings));
    if out.is_empty() {
        out.push(t("page-none-made"));
    }
    out
}

fn history(h: &mut Html, m: &Model<'_>) {
    h.open("section", "");
    h.element("h3", "", &t("page-history"));
    h.raw("<ol class=\"history\">\n");
    for entry in m.session.history() {
        let settings = &m.session.judgement().settings;
        let edit = entry.edit.as_ref().map(|e| choices::edit(e, settings)).unwrap_or_default();
        let words = match entry.action {
            Action::Imported => t("page-imported"),
            Action::Edited => with("page-edited-entry", &[("edit", edit)]),
            Action::Undone => with("page-undone", &[("edit", edit)]),
            Action::Redone => with("page-redone", &[("edit", edit)]),
        };
        h.open("li", "");
        h.raw("<span class=\"quiet\">");
        h.text(&clock::shown(&entry.at));
        h.raw("</span> ");
        h.text(&words);
        for change in &entry.changed {
            let args = [
                ("label", m.label(&change.key)),
                ("from", change.from.clone()),
                ("to", change.to.clone()),
            ];
            h.raw("; ");
            h.text(&with("page-history-changed", &args));
        }
        h.close("li");
    }
    h.raw("</ol>\n");
    h.close("section");
}

/// Whether a doubt stands in the list: "not published" stands in the tables, and the inputs of the
/// stroke-volume bound stand under its statement.
fn shown_here(code: &str) -> bool {
    code != "no-published-repeatability" && !code.starts_with("bound-")
}
