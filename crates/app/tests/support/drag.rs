//! A drag by hand.

use app::App;
use egui::{Pos2, Vec2};
use egui_kittest::Harness;

/// Takes what lies at `at` and holds it `by` points away; the button stays down.
pub fn hold(h: &mut Harness<'_, App>, at: Pos2, by: Vec2) {
    h.hover_at(at);
    h.run();
    h.drag_at(at);
    h.step();
    h.hover_at(at + by);
    h.step();
}

/// The same, and lets go there.
pub fn whole(h: &mut Harness<'_, App>, at: Pos2, by: Vec2) {
    hold(h, at, by);
    h.drop_at(at + by);
    h.run();
}
