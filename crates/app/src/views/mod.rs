//! One file per view, named by it.

pub mod circulation;
pub mod comparison;
pub mod data;
pub mod empty;
pub mod events;
pub mod findings;
pub mod gas_exchange;
pub mod import;
pub mod nine_panels;
pub mod outcome_list;
pub mod overlay;
pub mod recovery;
pub mod series;
pub mod thresholds;
pub mod time_charts;
pub mod time_course;
pub mod ventilation;
pub mod xy;

use egui::{Rect, Ui};

use crate::chart::interact::Geometry;
use crate::command::Outbox;
use crate::context::Context;
use crate::view_state::View;

/// Draws the chosen view; returns where its time columns stood.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    match cx.view.view {
        View::TimeCourse => time_course::show(ui, cx, out, rect),
        View::Circulation => circulation::show(ui, cx, out, rect),
        View::Thresholds => thresholds::show(ui, cx, out, rect),
        View::Ventilation => ventilation::show(ui, cx, out, rect),
        View::GasExchange => gas_exchange::show(ui, cx, out, rect),
        View::Recovery => recovery::show(ui, cx, out, rect),
        View::NinePanels => nine_panels::show(ui, cx, out, rect),
        other => {
            without_time(ui, cx, out, rect, other);
            Vec::new()
        }
    }
}

/// Views without a time axis.
fn without_time(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect, view: View) {
    match view {
        View::Data => data::show(ui, cx, out, rect),
        View::Events => events::show(ui, cx, out, rect),
        View::Import => import::show(ui, cx, out, rect),
        View::Comparison => comparison::show(ui, cx, rect),
        _ => findings::show(ui, cx, out, rect),
    }
}
