//! Page 1: it stands alone.

use analysis::quantity::Quantity;
use analysis::results::{At, Section};

use super::html::Html;
use super::model::Model;
use super::svg::{self, Frame};
use crate::clock;
use crate::presentation::charts;
use crate::presentation::key_table::{Row, short_names};
use crate::presentation::values::{self, Shown};
use crate::presentation::wording::{plain_text as t, with};
use crate::session::findings::{FindingShown, Status};

/// Writes page 1.
pub(super) fn write(h: &mut Html, m: &Model<'_>) {
    h.raw("<main class=\"first\">\n");
    head(h, m);
    facts(h, m);
    safety(h, m);
    conclusion(h, m);
    key_results(h, m);
    phase_table(h, m);
    figures(h, m);
    closing(h, m);
    signature(h, m);
    h.element("p", "caution", &t("caution"));
    h.open("p", "foot");
    h.text(&m.version());
    h.raw("  ·  ");
    h.text(&with("page-printed", &[("time", clock::shown(m.now))]));
    h.close("p");
    h.raw("</main>\n");
}

fn head(h: &mut Html, m: &Model<'_>) {
    h.open("header", "");
    h.element("h1", "", &t("page-title"));
    let state = if m.session.signed().is_some() { "page-signed" } else { "page-draft" };
    h.element("p", "state", &t(state));
    h.element("p", "identity", &m.identity.join("  ·  "));
    h.close("header");
    if !m.differing.is_empty() {
        let keys: Vec<String> = m.differing.iter().map(|k| m.label(k)).collect();
        let engine = m.session.signed().map_or_else(String::new, |s| s.engine.clone());
        let args = [
            ("engine", engine),
            ("now", crate::session::ENGINE.to_owned()),
            ("keys", keys.join(", ")),
        ];
        h.element("p", "boxed", &with("page-frozen", &args));
    }
}

fn facts(h: &mut Html, m: &Model<'_>) {
    h.open("dl", "facts");
    for (label, text) in [
        ("page-question", m.question.clone()),
        ("page-person", m.person.join("  ·  ")),
        ("page-test", m.test.join("  ·  ")),
    ] {
        h.element("dt", "", &t(label));
        h.element("dd", "", &text);
    }
    h.close("dl");
}

fn safety(h: &mut Html, m: &Model<'_>) {
    h.open("section", "safety");
    h.element("h2", "", &t("page-safety"));
    h.element("p", "", &m.safety.join(" "));
    h.close("section");
}

/// The square of a statement: solid = accepted, hollow = draft; its meaning is also text.
pub(super) fn square(h: &mut Html, finding: &FindingShown) {
    let (class, words) = match finding.status {
        Status::Accepted => ("solid", "page-accepted"),
        _ => ("hollow", "page-open"),
    };
    h.raw(&format!("<span class=\"square {class}\" role=\"img\" aria-label=\""));
    h.text(&t(words));
    h.raw("\"></span>");
}

fn conclusion(h: &mut Html, m: &Model<'_>) {
    h.open("section", "conclusion");
    heading(h, "page-conclusion", "page-conclusion-key");
    if m.conclusion.is_empty() {
        h.element("p", "quiet", &t("page-no-statement"));
    }
    h.open("ul", "statements");
    for i in &m.conclusion {
        let finding = &m.findings[*i];
        h.open("li", "");
        square(h, finding);
        h.text(&finding.text);
        if finding.stale {
            h.raw(" ");
            h.element("strong", "stale", &t("page-out-of-date"));
        }
        h.close("li");
    }
    h.close("ul");
    match m.further {
        0 => {}
        1 => h.element("p", "quiet", &t("page-further-one")),
        n => h.element("p", "quiet", &with("page-further", &[("n", n.to_string())])),
    }
    h.close("section");
}

pub(super) fn heading(h: &mut Html, title: &str, note: &str) {
    h.open("div", "heading");
    h.element("h2", "", &t(title));
    if !note.is_empty() {
        h.element("p", "quiet", &t(note));
    }
    h.close("div");
}

fn key_results(h: &mut Html, m: &Model<'_>) {
    h.open("section", "");
    heading(h, "page-key-results", "page-key-note");
    h.open("table", "key");
    h.raw("<thead><tr>");
    for (class, code) in [
        ("name", "page-col-result"),
        ("number", "page-col-value"),
        ("number", "page-col-recording"),
        ("number", "page-col-repeat"),
        ("against", "page-col-against"),
    ] {
        h.raw(&format!("<th scope=\"col\" class=\"{class}\">"));
        h.text(&t(code));
        h.raw("</th>");
    }
    h.raw("</tr></thead>\n<tbody>\n");
    for row in &m.rows {
        key_row(h, row);
    }
    h.raw("</tbody></table>\n");
    h.close("section");
}

fn key_row(h: &mut Html, row: &Row) {
    h.raw("<tr>");
    h.raw(if row.indented { "<th scope=\"row\" class=\"part\">" } else { "<th scope=\"row\">" });
    h.text(&row.shown.label);
    h.raw("</th>");
    if let Some(reason) = &row.reason {
        h.raw("<td class=\"number\">");
        h.keyed("v", &row.shown.key, &row.shown.value);
        h.raw("</td><td colspan=\"3\" class=\"reason\">");
        h.text(reason);
        h.raw("</td></tr>\n");
        return;
    }
    h.raw("<td class=\"number\">");
    number(h, &row.shown);
    h.raw("</td>");
    if row.is_word {
        h.raw("<td colspan=\"3\" class=\"against\">");
        h.text(&row.against);
        h.raw("</td></tr>\n");
        return;
    }
    let absent = ["page-not-given", "page-not-published"];
    for (interval, absent) in [&row.shown.recording, &row.shown.repeat].into_iter().zip(absent) {
        let class = if interval.is_some() { "number" } else { "number quiet" };
        h.raw(&format!("<td class=\"{class}\">"));
        match interval {
            Some(i) => h.keyed("i", &row.shown.key, i),
            None => h.text(&t(absent)),
        }
        h.raw("</td>");
    }
    h.raw("<td class=\"against\">");
    h.text(&row.against);
    h.raw("</td></tr>\n");
}

/// A value with its key, its unit in grey.
pub(super) fn number(h: &mut Html, shown: &Shown) {
    h.keyed("v", &shown.key, &shown.value);
    if !shown.unit.is_empty() {
        h.raw("\u{a0}<span class=\"u\">");
        h.text(&shown.unit);
        h.raw("</span>");
    }
}

/// Columns of the table of phases.
const COLUMNS: &[&str] = &[
    "work-rate",
    "vo2",
    "vco2",
    "hr",
    "o2-pulse",
    "rer",
    "ve",
    "eq-co2",
    "petco2",
    "spo2",
    "sys-bp",
];

fn phase_table(h: &mut Html, m: &Model<'_>) {
    let places = [At::Rest, At::Vt1, At::Vt2, At::Peak];
    let cell = |id: &str, at: At| m.results.primary(id, at).map(values::shown);
    let columns: Vec<&str> = COLUMNS
        .iter()
        .copied()
        .filter(|id| places.iter().any(|at| cell(id, *at).is_some_and(|s| s.value != values::NONE)))
        .collect();
    if columns.is_empty() {
        return;
    }
    h.raw("<table class=\"phases\"><thead><tr><td></td>");
    for id in &columns {
        let unit = places.iter().find_map(|at| cell(id, *at).filter(|s| !s.unit.is_empty()));
        h.raw("<th scope=\"col\">");
        let symbol = Quantity::from_code(id).map_or(*id, |q| q.row().symbol);
        h.text(symbol);
        h.raw("<br><span class=\"u\">");
        h.text(&unit.map(|s| s.unit).unwrap_or_default());
        h.raw("</span></th>");
    }
    h.raw("</tr></thead><tbody>\n");
    for at in places {
        h.raw("<tr><th scope=\"row\">");
        h.text(&t(&format!("at-{}", at.code())));
        h.raw("</th>");
        for id in &columns {
            h.raw("<td>");
            match cell(id, at) {
                Some(s) => h.keyed("v", &s.key, &s.value),
                None => h.text(values::NONE),
            }
            h.raw("</td>");
        }
        h.raw("</tr>\n");
    }
    h.raw("</tbody></table>\n");
}

fn figures(h: &mut Html, m: &Model<'_>) {
    let recording = m.session.recording();
    let settings = &m.session.judgement().settings;
    let overlay = settings.overlay_shown;
    h.open("section", "figures");
    h.open("figure", "pulse");
    h.open("figcaption", "");
    h.text(&t("page-fig-pulse"));
    h.raw(" <span class=\"quiet\">");
    h.text(&with("page-fig-pulse-note", &[("averaging", averaging(settings.averaging))]));
    h.raw("</span>");
    h.close("figcaption");
    match charts::o2_pulse(recording, &m.results, overlay) {
        Some(chart) => {
            let frame = Frame { left: 26.0, top: 4.0, width: 388.0, height: 116.0, x_labels: true };
            h.raw(&svg::drawing(420.0, 138.0, &t("page-fig-pulse"), &[(&chart, frame)]));
        }
        None => h.element("p", "quiet", &t("page-no-pulse")),
    }
    h.close("figure");
    h.open("figure", "work");
    h.element("figcaption", "", &t("page-fig-work"));
    let hr = charts::against_work(recording, &m.results, Quantity::Hr, overlay);
    let vo2 = charts::against_work(recording, &m.results, Quantity::Vo2, overlay);
    let mut list = Vec::new();
    let both = hr.is_some() && vo2.is_some();
    if let Some(hr) = &hr {
        let height = if both { 52.0 } else { 116.0 };
        list.push((hr, Frame { left: 28.0, top: 4.0, width: 236.0, height, x_labels: !both }));
    }
    if let Some(vo2) = &vo2 {
        let (top, height) = if both { (68.0, 52.0) } else { (4.0, 116.0) };
        list.push((vo2, Frame { left: 28.0, top, width: 236.0, height, x_labels: true }));
    }
    if list.is_empty() {
        h.element("p", "quiet", &t("page-no-work"));
    } else {
        h.raw(&svg::drawing(270.0, 138.0, &t("page-fig-work"), &list));
    }
    h.close("figure");
    h.element("p", "quiet key", &figure_key(m));
    h.close("section");
}

/// What the strokes of the figures are, with the sets behind the model where it is drawn.
fn figure_key(m: &Model<'_>) -> String {
    let settings = &m.session.judgement().settings;
    let model = m.results.overlay.model.as_ref().filter(|_| settings.overlay_shown);
    if model.is_none_or(|x| x.over_time.is_none()) || m.results.phases.ramp().is_none() {
        return t("page-fig-key-plain");
    }
    let set = |id| m.results.primary(id, At::Peak).map(|o| short_names(&o.method, settings));
    let sets: Vec<String> =
        ["predicted-vo2-peak", "predicted-hr-peak"].into_iter().filter_map(set).collect();
    with("page-fig-key", &[("sets", sets.join(", "))])
}

/// The averaging in words.
pub(super) fn averaging(a: analysis::settings::Averaging) -> String {
    use analysis::settings::Averaging as A;
    let (code, n) = match a {
        A::RollingSeconds(n) => ("averaging-rolling-s", n),
        A::RollingBreaths(n) => ("averaging-rolling-breaths", n),
        A::BinSeconds(n) => ("averaging-bin-s", n),
    };
    with(code, &[("n", n.to_string())])
}

fn closing(h: &mut Html, m: &Model<'_>) {
    let limit = m.results.primary("o2-pulse-detection-limit", At::Ramp);
    let seen = match limit.map(|o| (o, o.value.is_some())) {
        Some((o, true)) => with("page-seen-limit", &[("limit", values::shown(o).with_unit())]),
        Some((o, false)) => o.reason.as_ref().map_or_else(
            || t("page-seen-unknown"),
            |n| crate::presentation::wording::text(n, &m.results),
        ),
        None => t("page-seen-none"),
    };
    let separate: Vec<&str> = m.of(Section::Separate).map(|f| f.text.as_str()).collect();
    let separate = if separate.is_empty() { t("page-separate-none") } else { separate.join(" ") };
    h.open("dl", "facts closing");
    for (label, text) in [
        ("page-seen", format!("{seen} {}", t("page-seen-healthy"))),
        ("page-separate", separate),
        ("page-limits", t("page-limits-text")),
    ] {
        h.element("dt", "", &t(label));
        h.element("dd", "", &text);
    }
    h.close("dl");
}

fn signature(h: &mut Html, m: &Model<'_>) {
    let signed = m.session.signed();
    let blank = String::new;
    let fields = [
        (
            "page-signed-by",
            signed.map_or_else(
                || t("page-not-signed"),
                |s| format!("{} ({})", s.name, t("page-typed-name")),
            ),
        ),
        ("page-role", signed.map_or_else(blank, |s| s.role.clone())),
        ("page-registration", signed.map_or_else(blank, |s| s.registration.clone())),
        ("page-meaning", signed.map_or_else(blank, |s| s.meaning.clone())),
        ("page-time", signed.map_or_else(blank, |s| clock::shown_with_offset(&s.at))),
    ];
    h.open("dl", "signature");
    for (label, text) in fields {
        h.open("div", "");
        h.element("dt", "", &t(label));
        h.element("dd", "", if text.is_empty() { "\u{a0}" } else { &text });
        h.close("div");
    }
    h.close("dl");
}
