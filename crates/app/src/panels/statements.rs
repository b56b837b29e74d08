//! Statements of the sheet: state square, question, sentence, evidence, what can be done.

use analysis::results::Section;
use egui::{Align, Pos2, Rect, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::Dialog;
use crate::widgets::{button, text};
use record::session::Edit;
use record::session::findings::{FindingShown, Status};

/// The question of a section.
#[must_use]
pub fn question(section: Section) -> &'static str {
    match section {
        Section::Safety => "Safety",
        Section::Effort => "Was the effort sufficient?",
        Section::Capacity => "What is the aerobic capacity?",
        Section::Circulation => "Do output and extraction keep growing?",
        Section::Breathing => "Is breathing the limit?",
        Section::Separate => "Information that would separate",
    }
}

/// State in a word.
#[must_use]
pub fn state_word(finding: &FindingShown) -> &'static str {
    match (finding.stale, finding.status) {
        (true, _) => "out of date",
        (false, Status::Draft) => "draft",
        (false, Status::Accepted) => "accepted",
        (false, Status::Declined) => "declined",
    }
}

/// All statements, `width` wide.
pub fn list(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, width: f32) {
    for finding in cx.findings {
        one(ui, cx, out, width, finding);
    }
    if cx.findings.is_empty() {
        let at = ui.cursor().min + vec2(0.0, 12.0);
        let words = "Statements are drafted once the test has a ramp.";
        text::block(ui, at, width, words, size::STATEMENT, cx.tokens.ink2);
    }
}

fn one(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, width: f32, finding: &FindingShown) {
    let t = cx.tokens;
    let top = ui.cursor().min;
    let indent = 20.0;
    let base = top.y + 19.0;
    square(ui, cx, pos2(top.x + 6.0, base - 4.5), finding);
    let at = pos2(top.x + indent, base);
    text::plain(ui, at, Align::Min, question(finding.section), size::BODY, t.ink2);
    let quiet = finding.status == Status::Accepted && !finding.stale;
    let ink = if quiet { t.ink2 } else { t.ink };
    let at = pos2(top.x + width, base);
    text::plain(ui, at, Align::Max, state_word(finding), size::BODY, ink);
    let mut y = base + 5.0;
    let block = text::block(
        ui,
        pos2(top.x + indent, y),
        width - indent,
        &finding.text,
        size::STATEMENT,
        if finding.status == Status::Declined { t.ink2 } else { t.ink },
    );
    y = block.rect.bottom() + 4.0;
    let hovered = ui.rect_contains_pointer(Rect::from_min_max(top, pos2(top.x + width, y + 30.0)));
    if !quiet || hovered || finding.status == Status::Declined {
        actions(
            ui,
            cx,
            out,
            Rect::from_min_size(pos2(top.x + indent, y), vec2(width - indent, 24.0)),
            finding,
        );
        y += 28.0;
    } else {
        y += 4.0;
    }
    if cx.view.evidence_of.as_deref() == Some(finding.id.as_str()) {
        y = evidence(ui, cx, pos2(top.x + indent, y), width - indent, finding);
    }
    y += 4.0;
    ui.painter().hline(top.x..=(top.x + width), y, Stroke::new(1.0, t.grid));
    ui.allocate_rect(Rect::from_min_max(top, pos2(top.x + width, y + 1.0)), Sense::hover());
}

/// Square of the state: hollow machine, solid reader, triangle out of date.
fn square(ui: &mut Ui, cx: &Context<'_>, at: Pos2, finding: &FindingShown) {
    let t = cx.tokens;
    let ink = Stroke::new(1.5, t.ink);
    let rect = Rect::from_center_size(at, vec2(11.0, 11.0));
    if finding.stale {
        let r = 6.5;
        let corners = vec![at + vec2(0.0, -r), at + vec2(r, 0.8 * r), at + vec2(-r, 0.8 * r)];
        ui.painter().add(egui::Shape::closed_line(corners, ink));
        ui.painter().vline(at.x, (at.y - 2.0)..=(at.y + 2.0), ink);
    } else {
        match finding.status {
            Status::Accepted => {
                ui.painter().rect_filled(rect, 1.5, t.ink);
                let tick = Stroke::new(1.6, t.panel);
                let points = [vec2(-3.0, 0.0), vec2(-0.8, 2.4), vec2(3.0, -2.6)].map(|d| at + d);
                ui.painter().line_segment([points[0], points[1]], tick);
                ui.painter().line_segment([points[1], points[2]], tick);
            }
            Status::Draft => {
                ui.painter().rect_stroke(rect, 1.5, ink, StrokeKind::Inside);
            }
            Status::Declined => {
                ui.painter().rect_stroke(rect, 1.5, ink, StrokeKind::Inside);
                ui.painter().hline((at.x - 3.0)..=(at.x + 3.0), at.y, ink);
            }
        }
    }
    let id = ui.make_persistent_id(("square", &finding.id));
    let response = ui.interact(rect, id, Sense::hover());
    let words = format!("{}: {}", question(finding.section), state_word(finding));
    response.widget_info(|| WidgetInfo::labeled(Role::Image, true, &words));
}

fn actions(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, row: Rect, finding: &FindingShown) {
    let status = |status| Command::Edit(Edit::FindingStatus { id: finding.id.clone(), status });
    let edit = Command::Show(Dialog::Statement(finding.id.clone()));
    let buttons: Vec<(Command, &str)> = if finding.stale {
        vec![(edit, "Update…"), (status(finding.status), "Keep as is")]
    } else if finding.status == Status::Draft {
        vec![
            (status(Status::Accepted), "Accept"),
            (edit, "Edit…"),
            (status(Status::Declined), "Decline"),
        ]
    } else {
        vec![(status(Status::Draft), "Back to draft"), (edit, "Edit…")]
    };
    let mut right = row.right();
    for (command, label) in buttons.iter().rev() {
        let run = [text::Run::new(*label, size::BODY, cx.tokens.ink)];
        let wide = text::width(ui, &run) + 18.0;
        let rect = Rect::from_min_size(pos2(right - wide, row.top()), vec2(wide, 22.0));
        let response = button::at(ui, cx, out, rect, command, label);
        name(ui, &response, label, finding);
        right = rect.left() - 6.0;
    }
    let words = counts(finding);
    if !words.is_empty() {
        let at = pos2(row.left(), row.top() + 15.0);
        let said = text::plain(ui, at, Align::Min, &words, size::BODY, cx.tokens.ink2);
        let id = ui.make_persistent_id(("evidence", &finding.id));
        let hot = ui.interact(said.rect.expand(3.0), id, Sense::click());
        let label = format!("Evidence, {}: {words}", question(finding.section));
        hot.widget_info(|| WidgetInfo::labeled(Role::Button, true, &label));
        if hot.on_hover_text("What speaks for and against, and what was not measured.").clicked() {
            let open = cx.view.evidence_of.as_deref() == Some(finding.id.as_str());
            out.push(Command::Evidence((!open).then(|| finding.id.clone())));
        }
    }
}

/// Tells buttons of the same label apart for assistive technology.
fn name(ui: &Ui, response: &egui::Response, label: &str, finding: &FindingShown) {
    let words = format!("{label} · {}", question(finding.section));
    ui.ctx().accesskit_node_builder(response.id, |node| {
        node.set_description(words);
        node.set_author_id(format!("{label}:{}", finding.id));
    });
}

fn counts(finding: &FindingShown) -> String {
    let mut parts = Vec::new();
    for (name, n) in [
        ("for", finding.supports.len()),
        ("against", finding.contradicts.len()),
        ("open", finding.open.len()),
    ] {
        if n > 0 {
            parts.push(format!("{name} {n}"));
        }
    }
    parts.join("  ·  ")
}

fn evidence(ui: &mut Ui, cx: &Context<'_>, at: Pos2, width: f32, finding: &FindingShown) -> f32 {
    let mut y = at.y;
    for (name, list) in [
        ("for", &finding.supports),
        ("against", &finding.contradicts),
        ("not measured", &finding.open),
    ] {
        for one in list {
            let words = format!("{name}: {}", one.text);
            let t = cx.tokens;
            let block = text::block(ui, pos2(at.x, y), width, &words, size::BODY, t.ink2);
            y = block.rect.bottom() + 3.0;
        }
    }
    y + 2.0
}

/// One line for each statement, where the sheet is narrow.
pub fn short_list(ui: &mut Ui, cx: &Context<'_>, width: f32) {
    for finding in cx.findings {
        let top = ui.cursor().min;
        square(ui, cx, pos2(top.x + 6.0, top.y + 13.5), finding);
        let words = match finding.section {
            Section::Safety => format!("Safety: {}", finding.text),
            _ => finding.text.clone(),
        };
        let at = pos2(top.x + 18.0, top.y + 6.0);
        let words = first_sentence(&words);
        let block = text::block(ui, at, width - 18.0, &words, size::BODY, cx.tokens.ink);
        let y = block.rect.bottom() + 6.0;
        ui.painter().hline(top.x..=(top.x + width), y, Stroke::new(1.0, cx.tokens.grid));
        ui.allocate_rect(Rect::from_min_max(top, pos2(top.x + width, y + 1.0)), Sense::hover());
    }
}

fn first_sentence(text: &str) -> String {
    text.find(". ").map_or_else(|| text.to_owned(), |i| text[..=i].to_owned())
}
