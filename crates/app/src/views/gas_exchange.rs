//! Gas exchange: does the lung pass gas?

use egui::{Rect, Ui};

use super::{outcome_list, time_charts as charts};
use crate::chart::column::{self, Side};
use crate::chart::interact::Geometry;
use crate::chart::layout::columns;
use crate::command::Outbox;
use crate::context::Context;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let places = columns(rect, 2, cx.grid.gap);
    let time = vec![
        (3.0, charts::end_tidal(cx)),
        (3.0, charts::equivalents(cx)),
        (2.0, charts::saturation(cx)),
    ];
    let geometry = column::show(ui, cx, out, places[0], 0, Side::Heart, time);
    let list = Rect::from_min_max(
        places[1].min + egui::vec2(16.0, 0.0),
        places[1].max - egui::vec2(40.0, 0.0),
    );
    outcome_list::show(ui, cx, list, "Gas exchange", |id| {
        ["pet", "spo2", "vd-vt", "pa-", "p-a", "paco2", "eq-co2", "a-a"]
            .iter()
            .any(|lead| id.starts_with(lead))
    });
    vec![geometry]
}
