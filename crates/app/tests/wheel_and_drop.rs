//! What else a hand does to the window: the wheel, a file dropped on it, a mark, a long record.

#[path = "support/drag.rs"]
mod drag;
mod support;
#[path = "support/window.rs"]
mod window_harness;

use std::path::{Path, PathBuf};
use std::sync::Arc;

use app::App;
use egui::{Event, Modifiers, MouseWheelUnit, TouchPhase, pos2, vec2};
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;

fn window() -> Harness<'static, App> {
    window_harness::open(App::on_demo(), [1920.0, 1080.0])
}

fn demo(file: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../demo-sessions").join(file)
}

#[test]
fn the_wheel_zooms_around_the_pointer_and_back() {
    let mut h = window();
    let whole = h.state().view.geometry[0].scale;
    // In the frame of HR, at a third of its width.
    let x = whole.px.0 + (whole.px.1 - whole.px.0) / 3.0;
    let under = whole.value_at(x);
    h.hover_at(pos2(x, 720.0));
    h.run();
    let wheel = |h: &mut Harness<'_, App>, notches: f32| {
        h.event(Event::MouseWheel {
            unit: MouseWheelUnit::Line,
            delta: vec2(0.0, notches),
            phase: TouchPhase::Move,
            source: egui::MouseWheelSource::Wheel,
            modifiers: Modifiers::NONE,
        });
        // The wheel is smoothed over some frames.
        h.run_steps(20);
    };
    wheel(&mut h, 3.0);
    let near = h.state().view.geometry[0].scale;
    let span = |scale: &app::chart::layout::Scale| scale.value.1 - scale.value.0;
    assert!(span(&near) < 0.9 * span(&whole), "{near:?}");
    assert!((near.value_at(x) - under).abs() < 1.0, "what is under the pointer stays there");
    wheel(&mut h, -30.0);
    assert_eq!(h.state().view.geometry[0].scale.value, whole.value);
}

#[derive(Debug)]
struct Dropped(PathBuf);

impl egui::DroppedFile for Dropped {
    fn path(&self) -> &Path {
        &self.0
    }

    fn bytes(&self) -> Result<Vec<u8>, String> {
        std::fs::read(&self.0).map_err(|error| error.to_string())
    }
}

#[test]
fn a_file_dropped_on_the_window_opens() {
    let mut h = window();
    assert_eq!(h.state().document.label(), "Kittiwake");
    h.input_mut().dropped_files = vec![Arc::new(Dropped(demo("dunlin/session.json")))];
    h.run();
    assert_eq!(h.state().document.label(), "Dunlin");
}

#[test]
fn a_mark_is_dragged_like_a_boundary() {
    let mut h = window();
    let decided = |h: &Harness<'_, App>| h.state().document.decisions().vt1_s;
    assert_eq!(decided(&h), None);
    let slider = h.get_by_role_and_label(egui::accesskit::Role::Slider, "VT1").rect().center();
    drag::whole(&mut h, slider, vec2(40.0, 0.0));
    assert!(decided(&h).is_some(), "the mark is the reader's now");
}

#[test]
fn a_record_longer_than_any_test_is_derived_beside_the_drag() {
    let text = String::from_utf8_lossy(app::demo::TABLE).into_owned();
    let lines: Vec<&str> = text.lines().collect();
    let (head, rows) = lines.split_at(3);
    // Each row ten times, at a tenth of its distance.
    let mut table = head.join("\n") + "\n";
    let mut before = 0.0;
    for row in rows {
        let (end, values) = row.split_once(',').expect("a row");
        let end: f64 = end.parse().expect("a time");
        for k in 1..=10 {
            table += &format!("{:.3},{values}\n", before + (end - before) * f64::from(k) / 10.0);
        }
        before = end;
    }
    let mut long = App::new();
    long.open_table(table.as_bytes(), "long.csv", app::demo::facts());
    let mut h = window_harness::open(long, [1920.0, 1080.0]);
    let shown = |h: &Harness<'_, App>| h.state().derived.shown().phases.ramp().expect("a ramp").0;
    let (was, at) = (shown(&h), h.get_by_label("Ramp start").rect().center());
    drag::hold(&mut h, at, vec2(30.0, 0.0));
    let wanted = h.state().view.drag.expect("a drag").t_s;
    assert!(wanted > was + 20.0, "the handle itself follows at once");
    let start = std::time::Instant::now();
    while shown(&h) != wanted && start.elapsed().as_secs() < 60 {
        std::thread::sleep(std::time::Duration::from_millis(10));
        h.step();
    }
    assert_eq!(shown(&h), wanted, "what follows from it comes a little later");
    h.drop_at(at + vec2(30.0, 0.0));
    h.run();
    assert_eq!(h.state().derived.committed().phases.ramp().map(|r| r.0), Some(wanted));
}
