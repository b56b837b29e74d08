//! Choosing predicted sets in the window.

mod support;
#[path = "support/window.rs"]
mod window_harness;

use app::App;
use egui_kittest::kittest::Queryable;

#[test]
fn the_chooser_tells_the_fit_and_unlocking_is_an_edit_that_can_be_undone() {
    let mut h = window_harness::open(App::on_demo(), [1920.0, 1080.0]);
    h.get_by_label("Predicted sets").click();
    h.run();
    h.get_by_label("Predicted sets and their fit…").click();
    h.run();
    assert!(h.query_all_by(|n| n.value().is_some_and(|l| l.starts_with("● In range"))).count() > 0);
    h.get_by_label("Also offer sets with unconfirmed coefficients").click();
    h.run();
    assert!(h.state().document.settings().predicted.unconfirmed);
    assert!(h.state().document.can_undo().is_some());
}

/// The spread between the sets is one key away.
#[test]
fn one_key_opens_the_sets_with_what_they_give() {
    let mut h = window_harness::open(App::on_demo(), [1280.0, 800.0]);
    h.key_press(egui::Key::N);
    h.run();
    assert!(h.query_all_by(|n| n.value().is_some_and(|l| l.starts_with("● In range"))).count() > 0);
}
