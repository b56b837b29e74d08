//! The strip of all values at the time cursor.

use analysis::facts::EventKind;
use analysis::quantity::Quantity;
use egui::{Align, NumExt as _, Rect, Stroke, StrokeKind, Ui, pos2, vec2};

use crate::chart::ticks::clock;
use crate::context::Context;
use crate::theme::{Family, size};
use crate::values;
use crate::widgets::text::{self, Run};

/// A cell of the strip.
pub struct Cell {
    /// Name above.
    pub name: String,
    /// Value below.
    pub value: String,
    /// Its unit.
    pub unit: String,
    /// Colour of the name.
    pub color: egui::Color32,
}

/// Draws the strip.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect(rect, 0.0, t.panel, Stroke::new(1.0, t.frame), StrokeKind::Inside);
    let cursor = cx.cursor();
    let tile_wide = if cx.grid.narrow { 55.0 } else { 72.0 };
    let tile = Rect::from_min_size(rect.min, vec2(tile_wide, rect.height()));
    let edge = Stroke::new(1.5, t.movable_edge);
    ui.painter().rect(tile, 2.0, t.movable, edge, StrokeKind::Inside);
    let (top, bottom) = baselines(rect, cx.grid.narrow);
    let mid = tile.center().x;
    text::plain(ui, pos2(mid, top), Align::Center, "cursor", size::BODY, t.on_movable);
    let (big, down) = if cx.grid.narrow { (size::SECTION, 0.0) } else { (size::TITLE, 1.5) };
    text::plain(ui, pos2(mid, bottom + down), Align::Center, clock(cursor), big, t.on_movable);
    place(ui, cx, rect, tile.right(), &cells(cx, cursor));
}

fn baselines(rect: Rect, narrow: bool) -> (f32, f32) {
    if narrow {
        (rect.top() + 15.5, rect.bottom() - 8.5)
    } else {
        (rect.top() + 18.0, rect.bottom() - 9.5)
    }
}

fn place(ui: &mut Ui, cx: &Context<'_>, rect: Rect, left: f32, cells: &[Cell]) {
    let t = cx.tokens;
    let runs: Vec<(Vec<Run>, Vec<Run>)> = cells
        .iter()
        .map(|cell| {
            let mut value = vec![Run::new(cell.value.clone(), size::SECTION, t.ink)];
            if !cell.unit.is_empty() && !cx.grid.narrow {
                value.push(Run::new(format!("\u{a0}{}", cell.unit), size::BODY, t.ink2));
            }
            (vec![Run::new(cell.name.clone(), size::BODY, cell.color)], value)
        })
        .collect();
    let widths: Vec<f32> =
        runs.iter().map(|(n, v)| text::width(ui, n).max(text::width(ui, v))).collect();
    let free = rect.right() - left - 12.0;
    let mut count = widths.len();
    let gap_min = if cx.grid.narrow { 9.0 } else { 14.0 };
    while count > 1 && widths[..count].iter().sum::<f32>() + gap_min * (count + 1) as f32 > free {
        count -= 1;
    }
    let used: f32 = widths[..count].iter().sum();
    let gap = ((free - used) / (count + 1) as f32).at_most(40.0).at_least(gap_min);
    let (top, bottom) = baselines(rect, cx.grid.narrow);
    let mut x = left + gap;
    for ((name, value), wide) in runs.iter().zip(&widths).take(count) {
        text::line(ui, pos2(x, top), Align::Min, name);
        text::line(ui, pos2(x, bottom), Align::Min, value);
        x += wide + gap;
    }
}

/// Quantities of the strip, in order.
const STRIP: [Quantity; 13] = [
    Quantity::Vo2,
    Quantity::Vco2,
    Quantity::Rer,
    Quantity::Hr,
    Quantity::O2Pulse,
    Quantity::Ve,
    Quantity::Vt,
    Quantity::Fr,
    Quantity::EqO2,
    Quantity::EqCo2,
    Quantity::Peto2,
    Quantity::Petco2,
    Quantity::Spo2,
];

fn cells(cx: &Context<'_>, cursor: f64) -> Vec<Cell> {
    let t = cx.tokens;
    let mut all = Vec::new();
    if let Some((from, to)) = cx.results.phases.ramp() {
        let (name, value) = if cursor < from {
            ("before ramp", clock(from - cursor))
        } else if cursor <= to {
            ("ramp", clock(cursor - from))
        } else {
            ("recovery", clock(cursor - to))
        };
        all.push(Cell { name: name.into(), value, unit: String::new(), color: t.ink2 });
    }
    if let Some(w) = cx.recording.load.at(cursor) {
        let value = format!("{w:.0}");
        all.push(Cell { name: "work rate".into(), value, unit: "W".into(), color: t.ink2 });
    }
    for quantity in STRIP.into_iter().filter(|q| values::present(cx, *q)) {
        let (value, unit) = values::at(cx, quantity, cursor);
        let color = t.text(Family::of(quantity));
        all.push(Cell { name: quantity.row().symbol.into(), value, unit, color });
    }
    all.extend(blood_pressure(cx, cursor));
    all
}

/// The last reading at or before the cursor; never interpolated.
fn blood_pressure(cx: &Context<'_>, cursor: f64) -> Option<Cell> {
    let last = cx
        .facts
        .events
        .iter()
        .filter(|e| e.t_s <= cursor && matches!(e.kind, EventKind::Bp { .. }))
        .max_by(|a, b| a.t_s.total_cmp(&b.t_s))?;
    Some(Cell {
        name: format!("BP at {}", clock(last.t_s)),
        value: crate::widgets::notes::words(&last.kind, true),
        unit: "mmHg".into(),
        color: cx.tokens.text(Family::Circulation),
    })
}
