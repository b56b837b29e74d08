//! The program itself, as chores and checks from outside start it.

use std::io::Read as _;
use std::os::unix::process::CommandExt as _;
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};

use crate::display::Display;

/// Builds the program in release and says where it stands; errors are printed.
#[must_use]
pub fn built() -> Option<PathBuf> {
    let build = ["build", "--release", "--quiet", "--package", "app"];
    let status = Command::new("cargo").args(build).current_dir(crate::root()).status();
    if !status.is_ok_and(|status| status.success()) {
        eprintln!("the program was not built");
        return None;
    }
    Some(crate::root().join("target/release/rampcrest"))
}

/// What a headless verb prints; errors are printed.
#[must_use]
pub fn output(binary: &Path, args: &[&str]) -> Option<String> {
    match Command::new(binary).args(args).stderr(Stdio::inherit()).output() {
        Ok(output) if output.status.success() => {
            Some(String::from_utf8_lossy(&output.stdout).into_owned())
        }
        Ok(output) => {
            eprintln!("{} {args:?}: {}", binary.display(), output.status);
            None
        }
        Err(error) => {
            eprintln!("{}: {error}", binary.display());
            None
        }
    }
}

/// The session of a demo test.
#[must_use]
pub fn demo(name: &str) -> PathBuf {
    crate::root().join("demo-sessions").join(name).join("session.json")
}

/// Centre, in points, of the node of a view's accessibility tree whose name begins with `name`, in
/// a window of `size` points.
#[must_use]
pub fn centre_of(binary: &Path, session: &Path, size: [u16; 2], name: &str) -> Option<[f64; 2]> {
    let size = format!("{}x{}", size[0], size[1]);
    let session = session.to_str()?;
    let verb = ["describe", session, "--view", "time-course", "--json", "--size", &size];
    let tree: serde_json::Value = serde_json::from_str(&output(binary, &verb)?).ok()?;
    let nodes = tree["nodes"].as_array()?;
    let node = nodes.iter().find(|n| n["name"].as_str().is_some_and(|n| n.starts_with(name)))?;
    let side = |i: usize| node["rect"][i].as_f64();
    Some([side(0)? + side(2)? / 2.0, side(1)? + side(3)? / 2.0])
}

/// The program in a window on a display; it ends with this value.
pub struct Program {
    child: Child,
}

impl Program {
    /// Starts `command`, which is the program with its arguments, on `display`; settings are kept
    /// below `home`.
    ///
    /// # Errors
    /// It cannot be started.
    pub fn start(mut command: Command, display: &Display, home: &Path) -> std::io::Result<Self> {
        command.env("DISPLAY", display.name()).env_remove("WAYLAND_DISPLAY");
        command.env_remove("WAYLAND_SOCKET").env("XDG_CONFIG_HOME", home);
        // A group of its own: the program may start itself again in a child.
        Ok(Self { child: command.process_group(0).spawn()? })
    }

    /// Whether it still runs.
    pub fn is_running(&mut self) -> bool {
        matches!(self.child.try_wait(), Ok(None))
    }

    /// Resident memory, KiB.
    #[must_use]
    pub fn resident_kib(&self) -> Option<u64> {
        let status = std::fs::read_to_string(self.proc("status")).ok()?;
        let line = status.lines().find_map(|line| line.strip_prefix("VmRSS:"))?;
        line.split_whitespace().next()?.parse().ok()
    }

    /// Processor time so far, all threads, in ticks of 10 ms.
    #[must_use]
    pub fn ticks(&self) -> Option<u64> {
        let stat = std::fs::read_to_string(self.proc("stat")).ok()?;
        // Fields 14 and 15 (proc(5)); the second field, the name, may itself hold spaces.
        let mut fields = stat.rsplit_once(')')?.1.split_whitespace().skip(11);
        Some(fields.next()?.parse::<u64>().ok()? + fields.next()?.parse::<u64>().ok()?)
    }

    /// Ends it and all it started, and returns what it has written on standard error, if that was
    /// piped.
    pub fn end_and_read(&mut self) -> String {
        let group = format!("-{}", self.child.id());
        let _ = Command::new("kill").args(["-KILL", "--", &group]).status();
        let _ = self.child.wait();
        let mut text = String::new();
        if let Some(mut pipe) = self.child.stderr.take() {
            let _ = pipe.read_to_string(&mut text);
        }
        text
    }

    fn proc(&self, file: &str) -> String {
        format!("/proc/{}/{file}", self.child.id())
    }
}

impl Drop for Program {
    fn drop(&mut self) {
        self.end_and_read();
    }
}
