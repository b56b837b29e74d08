//! The window painted by the graphics card: eframe with OpenGL.

use eframe::glow::HasContext as _;
use eframe::{App, CreationContext, Frame, NativeOptions, Renderer};

use super::{Content, Paint, StartError, start_error, viewport};

struct Window(Paint);

impl App for Window {
    fn ui(&mut self, ui: &mut egui::Ui, _frame: &mut Frame) {
        (self.0)(ui);
    }
}

fn options(title: &str) -> NativeOptions {
    NativeOptions {
        viewport: viewport(title),
        renderer: Renderer::Glow,
        dithering: false,
        ..NativeOptions::default()
    }
}

/// Shows the window until it is closed.
pub fn run(content: Content) -> Result<(), StartError> {
    let Content { title, build } = content;
    let create = |cc: &CreationContext<'_>| -> Result<Box<dyn App>, _> {
        Ok(Box::new(Window(build(&cc.egui_ctx))))
    };
    eframe::run_native(&title, options(&title), Box::new(create)).map_err(
        |error| match start_error(&error) {
            StartError::Other(_) => StartError::NoGpu(error.to_string()),
            known => known,
        },
    )
}

/// Opens a window with an OpenGL context and ends the process as soon as that has worked.
pub fn try_context() -> String {
    let create = |cc: &CreationContext<'_>| -> Result<Box<dyn App>, _> {
        let good = cc.gl.as_ref().is_some_and(|gl| gl.version().major >= 2);
        println!("gpu: {}", if good { "yes" } else { "no (OpenGL older than 2.0)" });
        std::process::exit(0);
    };
    match eframe::run_native("rampcrest probe", options("rampcrest probe"), Box::new(create)) {
        Ok(()) => "gpu: no (the window closed)".to_owned(),
        Err(error) => format!("gpu: no ({error})"),
    }
}
