//! The time course as a reader uses it, found by role and label.

#[path = "support/drag.rs"]
mod drag;
mod support;
#[path = "support/window.rs"]
mod window_harness;

use app::App;
use egui::{Key, Modifiers, vec2};
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;

fn window(size: [f32; 2]) -> Harness<'static, App> {
    window_harness::open(App::on_demo(), size)
}

fn ramp_start(h: &Harness<'_, App>) -> f64 {
    h.state().derived.shown().phases.ramp().expect("the demo has a ramp").0
}

#[test]
fn a_dragged_boundary_changes_the_phases_in_the_same_step_and_is_one_undo_step() {
    let mut h = window([1920.0, 1080.0]);
    let before = ramp_start(&h);
    let committed = h.state().document.revision();
    let grip = h.get_by_label("Ramp start").rect().center();
    // Anywhere on the line takes it, not only the grip: here in the frame of HR.
    let at = grip - vec2(0.0, 300.0);
    drag::hold(&mut h, at, vec2(30.0, 0.0));
    let moved = ramp_start(&h);
    assert!(moved > before + 20.0, "{before} -> {moved}");
    assert_eq!(h.state().document.revision(), committed, "nothing is committed while it moves");
    // 30 px of 618 px for the whole test, within one breath.
    let span = h.state().document.recording().unwrap().span_s().unwrap();
    let expected = before + 30.0 / 618.0 * (span.1 - span.0);
    assert!((moved - expected).abs() < 8.0, "{moved} for {expected}");
    let ends = h.state().document.recording().unwrap().breaths.end_s().to_vec();
    assert!(ends.contains(&moved), "it snaps to a breath");
    h.drop_at(at + vec2(30.0, 0.0));
    h.run();
    assert_eq!(ramp_start(&h), moved);
    h.get_by_label("Undo").click();
    h.run();
    assert_eq!(ramp_start(&h), before);
    assert!(h.state().document.can_undo().is_none());
}

#[test]
fn escape_cancels_a_drag() {
    let mut h = window([1280.0, 800.0]);
    let before = ramp_start(&h);
    let at = h.get_by_label("Ramp start").rect().center();
    drag::hold(&mut h, at, vec2(40.0, 0.0));
    assert_ne!(ramp_start(&h), before);
    h.key_press(Key::Escape);
    h.step();
    h.drop_at(at + vec2(40.0, 0.0));
    h.run();
    assert_eq!(ramp_start(&h), before);
    assert!(h.state().document.can_undo().is_none());
}

#[test]
fn arrows_move_a_focused_boundary_by_a_breath_and_with_shift_by_ten_seconds() {
    let mut h = window([1920.0, 1080.0]);
    let before = ramp_start(&h);
    h.get_by_label("Ramp start").focus();
    h.run();
    assert_eq!(ramp_start(&h), before, "focus alone moves nothing");
    h.key_press(Key::ArrowRight);
    h.run();
    let ends = h.state().document.recording().unwrap().breaths.end_s().to_vec();
    let next = ends.iter().copied().find(|t| *t > before).expect("a later breath");
    assert_eq!(ramp_start(&h), next);
    h.key_press_modifiers(Modifiers::SHIFT, Key::ArrowRight);
    h.run();
    assert!((ramp_start(&h) - next - 10.0).abs() < 6.0, "{next} -> {}", ramp_start(&h));
}

#[test]
fn idle_frames_neither_derive_nor_edit() {
    let mut h = window([1920.0, 1080.0]);
    let (runs, revision) = (h.state().derived.runs(), h.state().document.revision());
    h.hover_at(egui::pos2(500.0, 400.0));
    h.run_steps(100);
    assert_eq!(h.state().derived.runs(), runs);
    assert_eq!(h.state().document.revision(), revision);
}

#[test]
fn the_overlay_has_a_key() {
    let mut h = window([1920.0, 1080.0]);
    let shown = h.state().document.settings().overlay_shown;
    h.key_press(Key::O);
    h.run();
    assert_eq!(h.state().document.settings().overlay_shown, !shown);
}

#[test]
fn a_click_sets_the_cursor_and_a_drag_in_x_zooms_until_a_double_click() {
    let mut h = window([1920.0, 1080.0]);
    let frame = h.get_by(|n| n.label().is_some_and(|l| l.starts_with("Over time: HR"))).rect();
    let at = frame.left_top() + vec2(150.0, 20.0);
    h.hover_at(at);
    h.run();
    h.drag_at(at);
    h.drop_at(at);
    h.run();
    assert!(h.state().view.cursor_s.is_some());
    drag::whole(&mut h, at, vec2(60.0, 0.0));
    let zoom = h.state().view.zoom_s.expect("zoomed");
    assert!(zoom.1 - zoom.0 > 60.0 && zoom.1 - zoom.0 < 240.0, "{zoom:?}");
    h.key_press(Key::Num0);
    h.run();
    assert_eq!(h.state().view.zoom_s, None);
}
