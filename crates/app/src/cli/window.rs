//! The window; without a display, what can be had of it in files.

use std::path::Path;

use super::args::Args;
use super::failure::{Exit, Failure};
use super::{files, open, sessions, views};
use crate::App;
use crate::shell::{self, Content, Paint, StartError, words};

/// Shows the window on the files, or on the demonstration test.
pub fn show(args: &Args) -> Result<Exit, Failure> {
    let app = open::app_or_demo(args)?;
    match shell::run(args.renderer, content(app)) {
        Ok(()) => Ok(Exit::Ok),
        Err(error) if args.files.is_empty() => instead(args, &error),
        Err(error) => Err(Failure::new(
            Exit::NoDisplay,
            "no-display",
            "window",
            error.to_string(),
            "Use a headless command: see rampcrest --help.",
        )),
    }
}

fn content(mut app: App) -> Content {
    app.robustness.beside = true;
    let build = Box::new(move |ctx: &egui::Context| -> Paint {
        app.setup(ctx);
        Box::new(move |ui| app.ui(ui))
    });
    Content { title: "Rampcrest".to_owned(), build }
}

/// The demonstration test derived into a folder, because no window came up.
fn instead(args: &Args, error: &StartError) -> Result<Exit, Failure> {
    let folder = args.out.as_deref().unwrap_or(Path::new("out"));
    std::fs::create_dir_all(folder).map_err(|error| Failure::unwritable(folder, &error))?;
    let mut app = open::demo(args)?;
    files::write(&folder.join("window.png"), &views::window_png(&mut app)?)?;
    if let Some(session) = app.document.session() {
        files::write(&folder.join("results.json"), sessions::results(session).as_bytes())?;
        files::write(&folder.join("session.json"), &session.write())?;
        files::write(&folder.join("page.html"), sessions::rendered(session, args).as_bytes())?;
    }
    let folder = folder.display().to_string();
    files::print(&words::derived_instead(&error.to_string(), &folder));
    Ok(Exit::Ok)
}
