//! Finding the program under test and running what it is tested with.

use std::path::PathBuf;
use std::process::{Command, Output};

/// The program as `cargo test` built it, beside this test's own executable.
pub fn rampcrest() -> PathBuf {
    let here = std::env::current_exe().expect("own path");
    let folder = here.parent().and_then(|deps| deps.parent()).expect("target folder");
    let program = folder.join("rampcrest");
    assert!(program.is_file(), "the program is not built: run `cargo test --workspace` first");
    program
}

/// Runs `command` to its end; fails with its output when it does not succeed.
pub fn run(command: &mut Command) -> Output {
    let output = command.output().unwrap_or_else(|e| panic!("{command:?}: {e}"));
    assert!(
        output.status.success(),
        "{command:?}: {}\n{}\n{}",
        output.status,
        String::from_utf8_lossy(&output.stdout),
        String::from_utf8_lossy(&output.stderr)
    );
    output
}
