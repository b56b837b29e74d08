//! Views without a window: as a picture, and as a screen reader finds them.

use super::args::Args;
use super::failure::{Exit, Failure};
use super::{files, open, sessions};
use crate::App;
use crate::describe::{Description, describe as walk};
use crate::headless::{Headless, Screen};
use crate::view_state::View;

/// The view's state and a window for it.
fn prepared(args: &Args) -> Result<(App, Headless, View), Failure> {
    let view = view(args)?;
    let mut app = open::app_or_demo(args)?;
    app.view.view = view;
    let default = Screen::default();
    let [width, height] = args.size.unwrap_or([default.width, default.height]);
    let theme = args.theme.unwrap_or(default.theme);
    let screen = Screen { width, height, scale: args.scale.unwrap_or(1.0), theme };
    app.set_theme(theme);
    let headless = Headless::new(screen, |ctx| app.setup(ctx));
    Ok((app, headless, view))
}

/// The view asked for; the bench may leave it open.
fn view(args: &Args) -> Result<View, Failure> {
    let code = match &args.view {
        Some(code) => code,
        None => return Err(Failure::usage("“--view” is missing")),
    };
    View::from_code(code).ok_or_else(|| Failure::usage(format!("“{code}” is not a view")))
}

/// `rampcrest picture`.
pub fn picture(args: &Args) -> Result<Exit, Failure> {
    let out = sessions::out(args)?;
    let (mut app, headless, _) = prepared(args)?;
    files::write(out, &png(&mut app, headless)?)?;
    Ok(open::exit(app.document.session()))
}

fn png(app: &mut App, mut headless: Headless) -> Result<Vec<u8>, Failure> {
    let mut output = headless.settle(|ui| app.ui(ui));
    let canvas = headless.paint(&mut output, 2);
    crate::picture::png(&canvas).map_err(Failure::usage)
}

/// The time course of the test that is open, as an image.
pub fn window_png(app: &mut App) -> Result<Vec<u8>, Failure> {
    let headless = Headless::new(Screen::default(), |ctx| app.setup(ctx));
    png(app, headless)
}

/// `rampcrest describe`.
pub fn describe(args: &Args) -> Result<Exit, Failure> {
    let (mut app, mut headless, view) = prepared(args)?;
    headless.ctx().enable_accesskit();
    let output = headless.settle(|ui| app.ui(ui));
    let size = args.size.unwrap_or([Screen::default().width, Screen::default().height]);
    let description = match &output.platform_output.accesskit_update {
        Some(update) => walk(update, view.code(), size),
        None => Description {
            schema: "rampcrest-describe/1",
            view: view.code().to_owned(),
            size,
            nodes: Vec::new(),
        },
    };
    if args.json {
        files::print(&serde_json::to_string_pretty(&description).unwrap_or_default());
    } else {
        for node in &description.nodes {
            let key = node.key.as_deref().unwrap_or("-");
            let value = node.value.as_deref().unwrap_or("-");
            let [x, y, w, h] = node.rect;
            files::print(&format!("{}\t{key}\t{}\t{value}\t{x},{y} {w}x{h}", node.role, node.name));
        }
    }
    Ok(open::exit(app.document.session()))
}
