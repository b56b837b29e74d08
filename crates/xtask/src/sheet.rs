//! `cargo xtask sheet`: contact sheets of all views, made by the program itself.

use std::process::ExitCode;

use crate::program;

/// Writes contact sheets of all views in both themes below `target/sheet`.
#[must_use]
pub fn run() -> ExitCode {
    let folder = crate::root().join("target/sheet");
    if let Err(error) = std::fs::create_dir_all(&folder) {
        eprintln!("{}: {error}", folder.display());
        return ExitCode::FAILURE;
    }
    let Some(binary) = program::built() else {
        return ExitCode::FAILURE;
    };
    for (size, scale) in [("1280x800", "1"), ("1920x1080", "1"), ("3840x2160", "2")] {
        let out = folder.join(format!("{size}.png"));
        let out = out.to_string_lossy();
        let verb = ["sheet", "--size", size, "--scale", scale, "-o", &out];
        if program::output(&binary, &verb).is_none() {
            return ExitCode::FAILURE;
        }
        println!("{out}");
    }
    ExitCode::SUCCESS
}
