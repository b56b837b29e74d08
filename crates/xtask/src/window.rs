//! `cargo xtask bench` and `cargo xtask sheet`: chores of the window, done by the binary itself.

use std::process::{Command, ExitCode};

/// What the frame bench looks at: view, size in pixels, pixels per point, threads.
const FRAMES: &[[&str; 4]] = &[
    ["time-course", "1920x1080", "1", "2"],
    ["time-course", "1920x1080", "1", "1"],
    ["circulation", "1920x1080", "1", "2"],
    ["time-course", "3840x2160", "2", "2"],
];

/// Prints what a frame costs while a boundary is dragged; `--json` gives one object per line.
#[must_use]
pub fn bench(args: &[String]) -> ExitCode {
    let json = args.iter().any(|arg| arg == "--json");
    for [view, size, scale, threads] in FRAMES {
        if !json {
            println!("{view}, {size} pixels, {scale} per point, {threads} threads");
        }
        let mut verb = vec!["bench-frame", "--view", view, "--size", size];
        verb.extend(["--scale", scale, "--threads", threads]);
        if json {
            verb.push("--json");
        }
        if !binary(&verb) {
            return ExitCode::FAILURE;
        }
    }
    ExitCode::SUCCESS
}

/// Writes contact sheets of all views in both themes below `target/sheet`.
#[must_use]
pub fn sheet() -> ExitCode {
    let folder = crate::root().join("target/sheet");
    if let Err(error) = std::fs::create_dir_all(&folder) {
        eprintln!("{}: {error}", folder.display());
        return ExitCode::FAILURE;
    }
    for (size, scale) in [("1280x800", "1"), ("1920x1080", "1"), ("3840x2160", "2")] {
        let out = folder.join(format!("{size}.png"));
        let out = out.to_string_lossy();
        if !binary(&["sheet", "--size", size, "--scale", scale, "-o", &out]) {
            return ExitCode::FAILURE;
        }
        println!("{out}");
    }
    ExitCode::SUCCESS
}

/// Builds and runs the binary, in release.
fn binary(args: &[&str]) -> bool {
    Command::new("cargo")
        .args(["run", "--release", "--quiet", "--package", "app", "--"])
        .args(args)
        .current_dir(crate::root())
        .status()
        .is_ok_and(|status| status.success())
}
