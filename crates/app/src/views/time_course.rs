//! Time course: what happened? Left what was delivered, right how it was breathed.

use egui::{Rect, Ui};

use super::time_charts as charts;
use crate::chart::column::{self, Side};
use crate::chart::interact::Geometry;
use crate::chart::layout::columns;
use crate::command::Outbox;
use crate::context::Context;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let places = columns(rect, 2, cx.grid.gap);
    let left = vec![
        (3.0, charts::gas(cx)),
        (3.0, charts::o2_pulse(cx)),
        (2.0, charts::heart_rate(cx)),
        (2.0, charts::saturation(cx)),
    ];
    let right = vec![
        (3.0, charts::ventilation(cx)),
        (3.0, charts::equivalents(cx)),
        (2.0, charts::end_tidal(cx)),
        (2.0, charts::exchange_ratio(cx)),
    ];
    vec![
        column::show(ui, cx, out, places[0], 0, Side::Heart, left),
        column::show(ui, cx, out, places[1], 1, Side::Breath, right),
    ]
}
