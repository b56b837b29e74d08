//! The binary: the window, and the headless verbs.

use app::shell::{Content, Renderer};

fn main() {
    let mut app = app::App::on_demo();
    let build = Box::new(move |ctx: &egui::Context| -> app::shell::Paint {
        app.setup(ctx);
        Box::new(move |ui| app.ui(ui))
    });
    let content = Content { title: "Rampcrest".to_owned(), build };
    let mut renderer = Renderer::Auto;
    let mut args = std::env::args().skip(1);
    while let Some(arg) = args.next() {
        if arg == "--renderer" {
            renderer = args.next().and_then(|name| Renderer::from_name(&name)).unwrap_or_default();
        } else if arg == "probe" {
            println!("{}", app::shell::probe::answer());
            return;
        }
    }
    if let Err(error) = app::shell::run(renderer, content) {
        eprintln!("{error}");
        std::process::exit(6);
    }
}
