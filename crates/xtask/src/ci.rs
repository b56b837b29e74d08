//! `cargo xtask ci`: all checks but installs and those that need something from outside.

use std::process::{Command, ExitCode};

/// The steps, in order: what fails fastest and cheapest comes first.
const STEPS: &[&[&str]] = &[
    &["fmt", "--all", "--check"],
    &["xtask", "tidy"],
    &["test", "--workspace"],
    &["clippy", "--workspace", "--all-targets", "--", "-D", "warnings"],
];

/// Runs every step and stops at the first that fails.
#[must_use]
pub fn run() -> ExitCode {
    for step in STEPS {
        println!("cargo {}", step.join(" "));
        let ok = Command::new("cargo")
            .args(*step)
            .current_dir(crate::root())
            .status()
            .is_ok_and(|status| status.success());
        if !ok {
            eprintln!("failed: cargo {}", step.join(" "));
            return ExitCode::FAILURE;
        }
    }
    ExitCode::SUCCESS
}
