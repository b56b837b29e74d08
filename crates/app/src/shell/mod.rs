//! What carries the window: a shell owns the event loop and the pixels, and knows nothing of
//! what is shown. A process starts exactly one event loop and never changes its shell.

pub mod choice;
mod cpu;
mod gpu;
pub mod icon;
pub mod libraries;
pub mod probe;
pub mod words;

use std::panic::{AssertUnwindSafe, catch_unwind};

pub use choice::Renderer;

/// Draws one frame of the window.
pub type Paint = Box<dyn FnMut(&mut egui::Ui)>;

/// What is to be shown.
pub struct Content {
    /// Title of the window until the content sets another.
    pub title: String,
    /// Called once with the context of the window, before the first frame.
    pub build: Box<dyn FnOnce(&egui::Context) -> Paint>,
}

/// Why no window came up.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum StartError {
    /// There is no graphical session, or it does not answer.
    NoDisplay(String),
    /// A system library is not installed.
    MissingLibrary(String),
    /// The graphics card cannot be used; another shell may work.
    NoGpu(String),
    /// Anything else the window system says.
    Other(String),
}

impl std::fmt::Display for StartError {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Self::NoDisplay(text) | Self::MissingLibrary(text) | Self::Other(text) => {
                f.write_str(text)
            }
            Self::NoGpu(reason) => f.write_str(&words::no_gpu(reason)),
        }
    }
}

/// Shows the window until it is closed.
///
/// # Errors
/// Why no window came up. With [`Renderer::Gpu`] this never returns on failure of the graphics
/// card: the reason is printed and the program starts itself again without it.
pub fn run(renderer: Renderer, content: Content) -> Result<(), StartError> {
    if !display_is_named() {
        return Err(StartError::NoDisplay(words::no_display()));
    }
    let gpu = match renderer {
        Renderer::Cpu => false,
        Renderer::Gpu => true,
        Renderer::Auto => choice::gpu_is_present(),
    };
    let shell = if gpu { gpu::run } else { cpu::run };
    let result = catch_unwind(AssertUnwindSafe(|| shell(content))).unwrap_or_else(|payload| {
        let text = payload
            .downcast_ref::<String>()
            .map(String::as_str)
            .or_else(|| payload.downcast_ref::<&str>().copied())
            .unwrap_or_default();
        match libraries::missing(text) {
            Some(sentence) => Err(StartError::MissingLibrary(sentence)),
            // Not about a library: a bug, already reported by the panic hook.
            None => std::panic::resume_unwind(payload),
        }
    });
    if let (true, Err(error)) = (gpu, &result) {
        eprintln!("{error}");
        if renderer == Renderer::Auto {
            choice::remember(false);
        }
        choice::start_again_without_gpu();
    }
    result
}

/// Whether the environment names a display at all.
#[must_use]
pub fn display_is_named() -> bool {
    if cfg!(any(windows, target_os = "macos")) {
        return true;
    }
    ["WAYLAND_DISPLAY", "WAYLAND_SOCKET", "DISPLAY"]
        .into_iter()
        .any(|name| std::env::var_os(name).is_some_and(|value| !value.is_empty()))
}

/// The window system's own error, with the missing library named where that is the cause.
fn start_error(error: &impl std::fmt::Debug) -> StartError {
    // Only the debug text names the library.
    let text = format!("{error:?}");
    if let Some(sentence) = libraries::missing(&text) {
        return StartError::MissingLibrary(sentence);
    }
    if text.contains("neither WAYLAND_DISPLAY") {
        return StartError::NoDisplay(words::no_display());
    }
    if text.contains("XOpenDisplayFailed") || text.contains("Connect") {
        return StartError::NoDisplay(words::display_does_not_answer(&text));
    }
    StartError::Other(words::no_window(&text))
}

/// What both shells ask of the window manager.
fn viewport(title: &str) -> egui::ViewportBuilder {
    egui::ViewportBuilder::default()
        .with_title(title)
        .with_app_id("rampcrest")
        .with_inner_size([1440.0, 900.0])
        .with_min_inner_size([960.0, 600.0])
        .with_drag_and_drop(true)
        .with_icon(icon::icon())
}
