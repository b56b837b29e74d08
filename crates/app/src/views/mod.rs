//! One file per view, named by it.

pub mod circulation;
pub mod empty;
pub mod findings;
pub mod gas_exchange;
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

use egui::{Align, Rect, Ui, pos2};

use crate::chart::interact::Geometry;
use crate::command::Outbox;
use crate::context::Context;
use crate::theme::size;
use crate::view_state::View;
use crate::widgets::text;

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
        View::Findings => {
            findings::show(ui, cx, out, rect);
            Vec::new()
        }
        other => {
            let at = pos2(rect.left() + 16.0, rect.top() + 32.0);
            text::plain(ui, at, Align::Min, other.name(), size::TITLE, cx.tokens.ink);
            Vec::new()
        }
    }
}
