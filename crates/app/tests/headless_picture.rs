//! The picture of a small interface, painted through the test harness and without it.

mod support;

use app::headless::{Headless, Screen};
use egui_kittest::Harness;

fn setup(ctx: &egui::Context) {
    let font = include_bytes!("../../../assets/DejaVuSans.ttf");
    let mut fonts = egui::FontDefinitions::empty();
    fonts.font_data.insert("dejavu".to_owned(), egui::FontData::from_static(font).into());
    for family in [egui::FontFamily::Proportional, egui::FontFamily::Monospace] {
        fonts.families.insert(family, vec!["dejavu".to_owned()]);
    }
    ctx.set_fonts(fonts);
}

fn ui(ui: &mut egui::Ui) {
    // At a fixed place, because the harness puts a margin around what it is given.
    egui::Area::new(egui::Id::unique("test")).fixed_pos([20.0, 10.0]).show(ui.ctx(), |ui| {
        ui.heading("Ramp 20 W/min");
        ui.add(egui::Slider::new(&mut 30.0, 0.0..=60.0).text("averaging"));
    });
}

#[test]
fn the_harness_and_the_headless_window_paint_the_same_picture() {
    // The harness runs its first frame while it is being built, before it hands out its context.
    let mut ready = false;
    let with_fonts = move |root: &mut egui::Ui| {
        if std::mem::replace(&mut ready, true) {
            ui(root);
        } else {
            setup(root.ctx());
        }
    };
    let mut harness = Harness::builder()
        .with_size([300.0, 120.0])
        .with_theme(egui::Theme::Dark)
        .renderer(support::CpuRenderer::default())
        .build_ui(with_fonts);
    harness.run();
    let tested = harness.render().expect("paints");
    let screen = Screen { width: 300, height: 120, scale: 1.0, theme: egui::Theme::Dark };
    let mut headless = Headless::new(screen, setup);
    let mut output = headless.settle(ui);
    let picture = headless.paint(&mut output, 2);
    assert_eq!(tested.into_raw(), picture.to_rgba());
    let colours: std::collections::BTreeSet<_> = picture.pixels().iter().collect();
    assert!(colours.len() > 20, "text and slider have smooth edges");
}
