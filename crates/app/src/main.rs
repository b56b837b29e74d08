//! The binary: the window.

fn main() {
    let app = app::App::on_demo();
    if let Err(error) = app::shell_eframe::run(app) {
        eprintln!("No window: {error:?}");
        std::process::exit(6);
    }
}
