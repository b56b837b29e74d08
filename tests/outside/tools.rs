//! Finding the program under test and running what it is tested with.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};
use std::time::Duration;

use xtask::display::Display;
use xtask::program::Program;

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

/// The program's window on a display of its own; both end with this value.
pub struct Open {
    pub window: u32,
    pub program: Program,
    pub display: Display,
    _home: tempfile::TempDir,
}

impl Open {
    /// Shows `session` in a window that fills the display.
    pub fn new(display: Display, renderer: &str, session: &Path) -> Self {
        let mut command = Command::new(rampcrest());
        command.args(["--renderer", renderer]).arg(session);
        Self::with(display, command)
    }

    /// Shows the window that `command` opens.
    pub fn with(display: Display, command: Command) -> Self {
        let home = tempfile::tempdir().expect("temporary folder");
        let program = Program::start(command, &display, home.path()).expect("the program starts");
        let window = display.window().expect("a window");
        let [width, height] = display.size();
        display.place(window, [0, 0, width, height]).expect("a place");
        let open = Self { window, program, display, _home: home };
        open.still();
        open
    }

    /// The screen, once nothing moves on it any more.
    pub fn still(&self) -> Vec<u8> {
        self.display.still(Duration::from_millis(500)).expect("a still screen")
    }
}

/// Pixels, of four bytes, of which a channel differs by more than `levels`.
pub fn differing(a: &[u8], b: &[u8], levels: u8) -> usize {
    assert_eq!(a.len(), b.len());
    let pairs = a.chunks_exact(4).zip(b.chunks_exact(4));
    pairs.filter(|(a, b)| a[..3].iter().zip(&b[..3]).any(|(a, b)| a.abs_diff(*b) > levels)).count()
}
