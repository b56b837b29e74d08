//! The binary: the window, and the headless verbs.

fn main() {
    std::process::exit(app::cli::run(std::env::args_os().skip(1)));
}
