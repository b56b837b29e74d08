//! The eframe (glow) shell.

use crate::App;

struct Shell(App);

impl eframe::App for Shell {
    fn ui(&mut self, ui: &mut egui::Ui, _frame: &mut eframe::Frame) {
        self.0.ui(ui);
    }
}

/// Runs the window until it is closed.
///
/// # Errors
/// What eframe says when no window or no GL can be had; its `Debug` text names the library.
pub fn run(app: App) -> Result<(), eframe::Error> {
    let viewport = egui::ViewportBuilder::default()
        .with_title("Rampcrest")
        .with_app_id("rampcrest")
        .with_inner_size([1440.0, 900.0])
        .with_min_inner_size([960.0, 600.0])
        .with_drag_and_drop(true);
    let options = eframe::NativeOptions {
        viewport,
        renderer: eframe::Renderer::Glow,
        dithering: false,
        ..eframe::NativeOptions::default()
    };
    eframe::run_native(
        "Rampcrest",
        options,
        Box::new(|cc| {
            app.setup(&cc.egui_ctx);
            Ok(Box::new(Shell(app)))
        }),
    )
}
