//! The two-factor table and the conditional sentence on stroke volume.

use analysis::fick::{FactorRow, Model, Ranged};
use egui::{Align, Rect, Sense, Stroke, StrokeKind, Ui, Vec2, pos2, vec2};
use record::presentation::values::fixed;

use crate::chart::ticks::clock;
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::{Family, size};
use crate::view_state::Dialog;
use crate::widgets::text::{self, Run};
use crate::widgets::{button, marks};

/// Draws table and sentence, `size` large or higher where they need it.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, size: Vec2) {
    let rect = Rect::from_min_size(ui.cursor().min, size);
    let bottom = parts(ui, cx, out, rect);
    ui.allocate_rect(Rect::from_min_max(rect.min, pos2(rect.right(), bottom)), Sense::hover());
}

/// Draws them from the top of `rect`; returns where they end.
fn parts(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> f32 {
    let t = cx.tokens;
    let mut head = vec![Run::new("Two-factor table", size::SECTION, t.ink)];
    let fick = &cx.results.fick;
    if let Some(table) = &fick.table {
        let (a, b) = table.between_s;
        let start = cx.results.phases.ramp().map_or(0.0, |r| r.0);
        let which = match (cx.decisions.two_factor_s, cx.provisional) {
            (None, _) => "late window",
            (Some(_), true) => "points 1 and 2, provisional",
            (Some(_), false) => "points 1 and 2",
        };
        let (from, to) = (clock(a - start), clock(b - start));
        let words = if cx.grid.narrow {
            format!("   {from} to {to}")
        } else {
            format!("   ramp {from} to {to}, {which}")
        };
        head.push(Run::new(words, size::BODY, t.ink2));
    }
    text::line(ui, pos2(rect.left(), rect.top() + 14.0), Align::Min, &head);
    let mut y = rect.top() + 24.0;
    let Some(table) = &fick.table else {
        let words = fick
            .withheld
            .first()
            .or(fick.no_bound.as_ref())
            .map(|n| crate::words::note(n, cx.results));
        let words = words.unwrap_or_else(|| "Waits for a course and stated facts.".into());
        let at = pos2(rect.left(), y + 8.0);
        let why = text::block(ui, at, rect.width(), &words, size::STATEMENT, t.ink);
        return why.rect.bottom();
    };
    let compact = cx.grid.narrow;
    let row_height = if compact { 34.0 } else { 44.0 };
    let height = 30.0 + row_height * table.rows.len() as f32;
    let frame = Rect::from_min_size(pos2(rect.left(), y), vec2(rect.width(), height));
    ui.painter().rect(frame, 0.0, t.panel, Stroke::new(1.0, t.frame), StrokeKind::Inside);
    header(ui, cx, frame);
    for (i, row) in table.rows.iter().enumerate() {
        let top = frame.top() + 30.0 + row_height * i as f32;
        let place = Rect::from_min_size(pos2(frame.left(), top), vec2(frame.width(), row_height));
        ui.painter().hline(place.x_range(), top, Stroke::new(1.0, t.grid));
        one_row(ui, cx, place, row);
    }
    y = frame.bottom() + 8.0;
    let change = percent(table.pulse_change.value);
    let words = format!(
        "O₂ pulse {:.1} → {:.1} mL/beat ({change}). 90 % intervals carry the spread of extraction between people.",
        table.pulse.0, table.pulse.1
    );
    y = text::block(ui, pos2(rect.left(), y), rect.width(), &words, size::BODY, t.ink2)
        .rect
        .bottom()
        + 8.0;
    sentences(ui, cx, out, rect, y)
}

fn columns(frame: Rect) -> [f32; 3] {
    let w = frame.width();
    if w < 400.0 {
        return [frame.left() + w * 0.44, frame.left() + w * 0.71, frame.right() - 8.0];
    }
    [frame.left() + w * 0.55, frame.left() + w * 0.785, frame.right() - 10.0]
}

fn header(ui: &mut Ui, cx: &Context<'_>, frame: Rect) {
    let t = cx.tokens;
    let base = frame.top() + 20.0;
    text::plain(ui, pos2(frame.left() + 12.0, base), Align::Min, "If …", size::BODY, t.ink2);
    let names = if cx.grid.narrow {
        ["extr.", "SV", "SV end"]
    } else {
        ["extraction", "stroke volume", "SV at the end"]
    };
    for (x, name) in columns(frame).into_iter().zip(names) {
        text::plain(ui, pos2(x, base), Align::Max, name, size::BODY, t.ink2);
    }
}

/// ln % as a signed per cent.
fn percent(value: f64) -> String {
    let sign = if value.round() > 0.0 {
        "+"
    } else if value.round() < 0.0 {
        "−"
    } else {
        ""
    };
    format!("{sign}{:.0}\u{a0}%", value.abs())
}

fn range(r: &Ranged) -> String {
    format!("[{}, {}]", fixed(r.interval.low, 0), fixed(r.interval.high, 0))
}

fn words(model: Model) -> [&'static str; 2] {
    match model {
        Model::A1 => ["extraction rises with", "% of own peak V̇O₂"],
        Model::A2 => ["output rises with V̇O₂", "as in healthy people"],
        Model::A3 => ["extraction is a rising", "share of content"],
        Model::B => ["stroke volume", "did not change"],
    }
}

fn one_row(ui: &mut Ui, cx: &Context<'_>, rect: Rect, row: &FactorRow) {
    let t = cx.tokens;
    let (first, second) =
        (rect.top() + 17.0, rect.top() + if cx.grid.narrow { 31.0 } else { 34.0 });
    let (mark, _) = super::plane::style(row.model);
    let color = t.line(Family::Circulation);
    marks::at(ui, pos2(rect.left() + 17.0, rect.top() + 13.0), mark, 4.5, color);
    let lead = Run::new(format!("{}  ", row.model.code()), size::BODY, t.ink);
    let [a, b] = words(row.model);
    let x = rect.left() + 30.0;
    if cx.grid.narrow {
        text::line(ui, pos2(x, first), Align::Min, &[lead]);
    } else {
        text::line(ui, pos2(x, first), Align::Min, &[lead, Run::new(a, size::BODY, t.ink)]);
        text::plain(ui, pos2(x, second), Align::Min, b, size::BODY, t.ink);
    }
    let assumed = row.stroke_volume_assumed;
    let cells = [
        (percent(row.content.value), range(&row.content)),
        (
            percent(row.stroke_volume.value),
            if assumed { "assumed".into() } else { range(&row.stroke_volume) },
        ),
        (format!("{:.0}\u{a0}mL", row.stroke_volume_end.value), range(&row.stroke_volume_end)),
    ];
    for (x, (value, interval)) in columns(rect).into_iter().zip(cells) {
        text::plain(ui, pos2(x, first), Align::Max, value, size::SECTION, t.ink);
        text::plain(ui, pos2(x, second), Align::Max, interval, size::BODY, t.ink2);
    }
}

/// The two-sided sentence beside its bar, the bound and its inputs, always together.
fn sentences(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect, top: f32) -> f32 {
    let t = cx.tokens;
    let fick = &cx.results.fick;
    let mut y = top;
    if let Some(sentence) = &fick.sentence {
        let at = pos2(rect.left() + 15.0, y + 4.0);
        let size = if cx.grid.narrow { size::BODY } else { size::SECTION };
        let words = crate::words::note(sentence, cx.results);
        let block = text::block(ui, at, rect.width() - 15.0, &words, size, t.ink);
        let bar = Rect::from_min_max(
            pos2(rect.left(), y),
            pos2(rect.left() + 3.0, block.rect.bottom() + 4.0),
        );
        ui.painter().rect_filled(bar, 0.0, t.ink);
        y = bar.bottom() + 8.0;
    }
    let why = match (&fick.bound, &fick.no_bound) {
        (Some(bound), _) => {
            let inputs: Vec<String> =
                bound.assumptions.iter().map(|n| crate::words::note(n, cx.results)).collect();
            format!(
                "Forward stroke volume at peak was probably not below {:.0}\u{a0}mL. Cautious end of every input: {}.",
                bound.stroke_volume,
                inputs.join(", ")
            )
        }
        (None, Some(why)) => crate::words::note(why, cx.results),
        (None, None) => String::new(),
    };
    if !why.is_empty() {
        let at = pos2(rect.left(), y);
        y = text::block(ui, at, rect.width(), &why, size::BODY, t.ink2).rect.bottom() + 8.0;
    }
    let command = Command::Show(Dialog::Inputs);
    let place = pos2(rect.left(), y.max(rect.bottom() - 24.0));
    let place = Rect::from_min_size(place, vec2(button::width(ui, &command), 24.0));
    button::at(ui, cx, out, place, &command, &command.label());
    place.bottom()
}
