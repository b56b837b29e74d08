//! The layout of every view at every size, scale and theme: no text touches another, none leaves
//! its place.

mod painted;
mod rules;

use std::collections::BTreeMap;
use std::path::Path;

use analysis::predicted::sets::Predicts;
use app::App;
use app::command::Command;
use app::headless::{Headless, Screen};
use app::view_state::{Dialog, View};
use egui::{Rect, Theme, vec2};

use painted::Painted;

/// Width, height in pixels, and pixels per point.
const SCREENS: [(usize, usize, f32); 9] = [
    (1240, 660, 1.0),
    (1280, 800, 1.0),
    (1920, 1080, 1.0),
    (3840, 2160, 2.0),
    (1920, 1080, 1.5),
    (2560, 1600, 2.0),
    (3840, 2160, 1.5),
    (1280, 800, 1.5),
    (1280, 800, 2.0),
];

fn session(case: &str) -> App {
    let path = format!("../../demo-sessions/{case}/session.json");
    let path = Path::new(&path);
    let bytes = std::fs::read(path).expect("the demonstration session");
    let document =
        app::opening::bytes(&bytes, path, app::opening::Reading::default()).expect("opens");
    let mut app = App::new();
    app.show(document);
    app
}

fn all_views() -> impl Iterator<Item = View> {
    View::TABS.into_iter().chain([View::Findings])
}

/// Rules broken, with the screens on which they were.
#[derive(Default)]
struct Report(BTreeMap<String, Vec<String>>);

impl Report {
    fn check(&mut self, app: &mut App, what: &str, screen: Screen) {
        app.set_theme(screen.theme);
        let mut headless = Headless::new(screen, |ctx| app.setup(ctx));
        let output = headless.settle(|ui| app.ui(ui));
        let size = vec2(screen.width as f32, screen.height as f32) / screen.scale;
        let whole = Rect::from_min_size(egui::Pos2::ZERO, size);
        let dialog = app.view.dialog.is_some();
        let over = app.view.view == View::Findings || app.view.wide_findings || dialog;
        let parted = !over && app.document.recording().is_some();
        let mut painted = Painted::of(&output.shapes);
        if dialog {
            painted.only_from(app::theme::Tokens::of(screen.theme).panel);
        }
        assert!(painted.texts.len() > 2, "{what} has hardly any text");
        let Screen { width, height, scale, theme } = screen;
        for (rule, by) in rules::broken(&painted, whole, parted) {
            let at = format!("{width}×{height}@{scale} {theme:?}: {by}");
            self.0.entry(format!("{what}: {rule}")).or_default().push(at);
        }
    }

    fn settle(self) {
        let mut words = String::new();
        for (what, at) in &self.0 {
            words.push_str(&format!("\n{what} ({} times)\n", at.len()));
            for one in at.iter().take(12) {
                words.push_str(&format!("    {one}\n"));
            }
        }
        assert!(self.0.is_empty(), "{words}");
    }
}

fn check_case(case: &str) {
    let mut report = Report::default();
    let mut app = session(case);
    for (i, (width, height, scale)) in SCREENS.into_iter().enumerate() {
        for (j, view) in all_views().enumerate() {
            app.view.view = view;
            // The theme moves no text: one of them for each view and size is enough for the
            // places, and both come by for the contrast.
            let theme = if (i + j) % 2 == 0 { Theme::Light } else { Theme::Dark };
            let screen = Screen { width, height, scale, theme };
            report.check(&mut app, view.code(), screen);
        }
    }
    report.settle();
}

/// What can lie over a view, at every size.
fn check_over(case: &str) {
    let mut report = Report::default();
    for (i, (width, height, scale)) in SCREENS.into_iter().enumerate() {
        let theme = if i % 2 == 0 { Theme::Dark } else { Theme::Light };
        let screen = Screen { width, height, scale, theme };
        let mut app = session(case);
        app.view.wide_findings = true;
        report.check(&mut app, "wide findings", screen);
        app.view.wide_findings = false;
        for dialog in dialogs() {
            let what = format!("{dialog:?}");
            app.view.dialog = Some(dialog);
            report.check(&mut app, &what, screen);
        }
        report.check(&mut App::new(), "no test", screen);
    }
    report.settle();
}

fn dialogs() -> Vec<Dialog> {
    vec![
        Dialog::Open,
        Dialog::Save,
        Dialog::Export,
        Dialog::Facts,
        Dialog::Sign,
        Dialog::Keys,
        Dialog::Event,
        Dialog::Exclude(None),
        Dialog::Sets(Predicts::Vo2Peak),
        Dialog::Sets(Predicts::HrPeak),
        Dialog::Sets(Predicts::O2Pulse),
        Dialog::Sets(Predicts::WorkRate),
        Dialog::Overlay,
        Dialog::Inputs,
        Dialog::Unsaved(Box::new(Command::Quit)),
    ]
}

#[test]
fn what_lies_over_a_view() {
    check_over("dunlin");
}

#[test]
fn dunlin() {
    check_case("dunlin");
}

#[test]
fn kittiwake() {
    check_case("kittiwake");
}

#[test]
fn bittern() {
    check_case("bittern");
}

#[test]
fn redshank() {
    check_case("redshank");
}

#[test]
fn knot() {
    check_case("knot");
}

#[test]
fn turnstone() {
    check_case("turnstone");
}

#[test]
fn wagtail() {
    check_case("wagtail");
}

/// The rules broken by what `draw` paints on a window of 1280 × 800.
fn broken_by(mut draw: impl FnMut(&mut egui::Ui)) -> Vec<&'static str> {
    let screen = Screen { width: 1280, height: 800, scale: 1.0, theme: Theme::Light };
    let mut headless = Headless::new(screen, app::theme::install);
    let output = headless.settle(|ui| {
        ui.painter().rect_filled(ui.ctx().content_rect(), 0.0, egui::Color32::WHITE);
        draw(ui);
    });
    let whole = Rect::from_min_size(egui::Pos2::ZERO, vec2(1280.0, 800.0));
    let painted = Painted::of(&output.shapes);
    rules::broken(&painted, whole, false).into_iter().map(|(rule, _)| rule).collect()
}

#[test]
fn the_rules_see_what_is_wrong() {
    use egui::{Align2, Color32, FontId, pos2};
    let font = || FontId::proportional(12.0);
    let set = |ui: &egui::Ui, x: f32, y: f32, words: &str, color| {
        ui.painter().text(pos2(x, y), Align2::LEFT_TOP, words, font(), color);
    };
    let black = Color32::BLACK;
    assert!(broken_by(|ui| set(ui, 20.0, 20.0, "alone", black)).is_empty());
    let two = broken_by(|ui| {
        set(ui, 20.0, 20.0, "one", black);
        set(ui, 30.0, 24.0, "two", black);
    });
    assert_eq!(two, ["overlap"]);
    assert_eq!(broken_by(|ui| set(ui, 1260.0, 20.0, "too far right", black)), ["cut"]);
    assert_eq!(broken_by(|ui| set(ui, 20.0, 20.0, "pale", Color32::LIGHT_GRAY)), ["contrast"]);
    let covered = broken_by(|ui| {
        set(ui, 20.0, 20.0, "half under a plate", black);
        let plate = Rect::from_min_max(pos2(50.0, 10.0), pos2(200.0, 60.0));
        ui.painter().rect_filled(plate, 0.0, Color32::WHITE);
    });
    assert_eq!(covered, ["half covered"]);
}
