//! Import: what did the file mean? Every column as it was understood.

use egui::{Rect, RichText, ScrollArea, Ui, UiBuilder, pos2};
use record::presentation::wording;
use record::provenance::{Decided, LeftOut, Question, Reading, Target};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let Some(session) = cx.session else {
        return;
    };
    let inner = Rect::from_min_max(
        rect.min + egui::vec2(16.0, 8.0),
        pos2(rect.right() - 16.0, rect.bottom()),
    );
    let ui = &mut ui.new_child(UiBuilder::new().max_rect(inner).id_salt("import"));
    let (source, recipe) = (session.source(), session.recipe());
    ui.label(format!("{}  ·  {} bytes  ·  SHA-256 {}", source.name, source.size, source.sha256));
    ui.add_space(6.0);
    ScrollArea::both().auto_shrink(false).show(ui, |ui| {
        egui::Grid::new("columns").num_columns(6).spacing([24.0, 6.0]).show(ui, |ui| {
            for head in
                ["column", "unit in the file", "understood as", "in", "decided by", "first values"]
            {
                ui.label(RichText::new(head).color(cx.tokens.ink2));
            }
            ui.end_row();
            for c in &recipe.columns {
                ui.label(&c.header);
                ui.label(&c.unit_text);
                ui.label(RichText::new(target(c.reading.target)).size(size::STATEMENT));
                ui.label(c.reading.unit.shown());
                ui.label(decided(&c.decided));
                ui.label(c.samples.join("  "));
                ui.end_row();
            }
        });
        ui.add_space(10.0);
        for q in &recipe.questions {
            question(ui, cx, out, q);
        }
        if recipe.left_out.is_empty() {
            ui.label("Nothing was left out.");
        }
        for left in &recipe.left_out {
            ui.label(left_out(left));
        }
    });
}

/// An open question with a button per reading.
fn question(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, q: &Question) {
    ui.horizontal(|ui| {
        ui.label(wording::with("import-question", &[("column", q.column.clone())]));
        for r in &q.readings {
            let command = Command::Answer(q.column.clone(), r.clone());
            let enabled = command.available(cx);
            let button = ui.add_enabled(enabled, egui::Button::new(reading(r)));
            if button.accessible_name(command.label()).clicked() {
                out.push(command);
            }
        }
    });
}

/// A possible answer in words, such as "V̇O₂ in mL/min".
#[must_use]
pub fn reading(text: &str) -> String {
    match text.parse::<Reading>() {
        Ok(Reading { target: Target::LeaveOut, .. }) => target(Target::LeaveOut),
        Ok(r) => wording::with(
            "import-reading",
            &[("what", target(r.target)), ("unit", r.unit.shown().to_owned())],
        ),
        Err(_) => text.to_owned(),
    }
}

/// What a column is read as, in words.
fn target(target: Target) -> String {
    match target {
        Target::Quantity(quantity) => quantity.row().symbol.to_owned(),
        other => wording::plain_text(&format!("import-target-{}", other.code())),
    }
}

fn decided(by: &Decided) -> String {
    match by {
        Decided::Header => "its header".into(),
        Decided::UnitRow => "the row of units".into(),
        Decided::Values { figures } => format!("the values: {figures}"),
        Decided::Profile => "the lab’s profile".into(),
        Decided::Answer => "the reader’s answer".into(),
    }
}

fn left_out(left: &LeftOut) -> String {
    match left {
        LeftOut::Rows { from, to, why, .. } if from == to => {
            format!("Left out, line {from}: {why}")
        }
        LeftOut::Rows { from, to, why, .. } => format!("Left out, lines {from} to {to}: {why}"),
        LeftOut::Column { header, why, .. } => format!("Left out, column {header}: {why}"),
    }
}
