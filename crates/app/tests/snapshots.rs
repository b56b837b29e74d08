//! Pictures of the window as they were when last looked at: references for what changes unseen,
//! not for numbers. `UPDATE_SNAPSHOTS=1 cargo test --workspace --test snapshots` renews them.

use app::App;
use app::command::Command;
use app::headless::{Headless, Screen};
use app::view_state::{Dialog, View};
use egui::Theme;
use egui_kittest::{SnapshotOptions, image_snapshot_options};

/// Paints `app` and compares the part `left, top, width, height` (pixels) with its reference.
fn part(name: &str, app: &mut App, screen: Screen, [left, top, width, height]: [usize; 4]) {
    app.set_theme(screen.theme);
    let mut headless = Headless::new(screen, |ctx| app.setup(ctx));
    let mut output = headless.settle(|ui| app.ui(ui));
    let canvas = headless.paint(&mut output, 2);
    let mut image = image::RgbaImage::new(width as u32, height as u32);
    for (x, y, pixel) in image.enumerate_pixels_mut() {
        let from = canvas.pixel(left + x as usize, top + y as usize).expect("within the picture");
        *pixel = image::Rgba(from);
    }
    // The rasteriser is exact: the same code gives the same pixels everywhere.
    let options = SnapshotOptions::new().threshold(0.0).output_path("tests/snapshots");
    image_snapshot_options(&image, name, &options);
}

fn screen(theme: Theme, scale: f32) -> Screen {
    let (width, height) = ((1280.0 * scale) as usize, (800.0 * scale) as usize);
    Screen { width, height, scale, theme }
}

fn demo(view: View) -> App {
    let mut app = App::on_demo();
    app.view.view = view;
    app
}

#[test]
fn a_window_without_a_test() {
    part("empty", &mut App::new(), screen(Theme::Light, 1.0), [0, 0, 800, 180]);
}

#[test]
fn the_lowest_frame_with_ribbon_and_notes() {
    let mut app = demo(View::TimeCourse);
    part("ribbon", &mut app, screen(Theme::Light, 1.0), [12, 580, 480, 200]);
}

#[test]
fn the_same_at_twice_the_scale_in_the_dark() {
    let mut app = demo(View::TimeCourse);
    part("ribbon-dark-2x", &mut app, screen(Theme::Dark, 2.0), [24, 1400, 500, 160]);
}

#[test]
fn the_top_of_the_window() {
    let mut app = demo(View::Ventilation);
    part("top", &mut app, screen(Theme::Light, 1.0), [0, 0, 700, 72]);
}

#[test]
fn the_list_of_keys() {
    let mut app = App::new();
    app.view.dialog = Some(Dialog::Keys);
    part("keys", &mut app, screen(Theme::Dark, 1.0), [323, 100, 634, 500]);
}

#[test]
fn the_question_before_work_is_lost() {
    let mut app = App::new();
    app.view.dialog = Some(Dialog::Unsaved(Box::new(Command::Quit)));
    part("unsaved", &mut app, screen(Theme::Light, 1.0), [323, 340, 634, 130]);
}
