//! Recovery: how does it settle?

use egui::{Rect, Ui};

use super::{outcome_list, time_charts as charts};
use crate::chart::column::{self, Side};
use crate::chart::interact::Geometry;
use crate::chart::layout::columns;
use crate::command::Outbox;
use crate::context::Context;
use crate::view_state::ViewState;

/// Draws the view: the last two minutes of load and all of recovery.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let places = columns(rect, 2, cx.grid.gap);
    let end = cx.committed.phases.ramp().map(|r| r.1);
    let view = ViewState {
        zoom_s: cx.view.zoom_s.or(end.map(|end| {
            let whole = cx.whole();
            ((end - 120.0).max(whole.0), whole.1)
        })),
        ..cx.view.clone()
    };
    let cx = &Context { view: &view, ..cx.copied() };
    let time = vec![
        (3.0, charts::heart_rate(cx)),
        (3.0, charts::gas(cx)),
        (2.0, charts::o2_pulse(cx)),
        (2.0, charts::exchange_ratio(cx)),
    ];
    let geometry = column::show(ui, cx, out, places[0], 0, Side::Heart, time);
    let list = Rect::from_min_max(
        places[1].min + egui::vec2(16.0, 0.0),
        places[1].max - egui::vec2(40.0, 0.0),
    );
    outcome_list::show(ui, cx, list, "Recovery", |id| {
        ["recovery", "half-time", "overshoot"].iter().any(|part| id.contains(part))
    });
    vec![geometry]
}
