//! A chart mark outside a chart.

use egui::{Color32, Pos2, Ui};

use crate::chart::items;
use crate::chart::spec::Mark;

/// Paints `mark` at a place on screen.
pub fn at(ui: &Ui, place: Pos2, mark: Mark, radius: f32, color: Color32) {
    let mut shapes = Vec::new();
    items::point(place, mark, radius, color, &mut shapes);
    ui.painter().extend(shapes);
}
