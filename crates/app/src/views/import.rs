//! Import: what did the file mean? Every column as it was understood.

use egui::{Rect, RichText, ScrollArea, Ui, UiBuilder, pos2};
use record::provenance::{Decided, LeftOut};

use crate::command::Outbox;
use crate::context::Context;
use crate::theme::size;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, _out: &mut Outbox, rect: Rect) {
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
                ui.label(RichText::new(c.reading.target.code()).size(size::STATEMENT));
                ui.label(c.reading.unit.shown());
                ui.label(decided(&c.decided));
                ui.label(c.samples.join("  "));
                ui.end_row();
            }
        });
        ui.add_space(10.0);
        for q in &recipe.questions {
            ui.label(format!("Open question: {}: {}?", q.column, q.readings.join(" or ")));
        }
        if recipe.left_out.is_empty() {
            ui.label("Nothing was left out.");
        }
        for left in &recipe.left_out {
            ui.label(left_out(left));
        }
    });
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
