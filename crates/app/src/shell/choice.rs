//! Which shell: the reader's word, or a child process that looks for a graphics card.

use std::ffi::OsString;
use std::path::PathBuf;
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};

/// How the window is painted.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Renderer {
    /// Graphics card where there is a real one, else processor.
    #[default]
    Auto,
    /// Graphics card (OpenGL).
    Gpu,
    /// Processor.
    Cpu,
}

impl Renderer {
    /// `auto`, `gpu` or `cpu`.
    #[must_use]
    pub fn from_name(name: &str) -> Option<Self> {
        match name {
            "auto" => Some(Self::Auto),
            "gpu" => Some(Self::Gpu),
            "cpu" => Some(Self::Cpu),
            _ => None,
        }
    }
}

/// A probe that takes longer means no.
const PATIENCE: Duration = Duration::from_secs(5);

/// Asks the cache, else the probe. In doubt no.
#[must_use]
pub fn gpu_is_present() -> bool {
    if let Some(known) = remembered() {
        return known;
    }
    let present = probe_child().unwrap_or(false);
    remember(present);
    present
}

/// Runs `rampcrest probe`; a crash, a wrong answer or a long silence are `None`.
fn probe_child() -> Option<bool> {
    let mut child = Command::new(std::env::current_exe().ok()?)
        .arg("probe")
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .stderr(Stdio::null())
        .spawn()
        .ok()?;
    let start = Instant::now();
    let status = loop {
        if let Some(status) = child.try_wait().ok()? {
            break status;
        }
        if start.elapsed() > PATIENCE {
            child.kill().ok();
            child.wait().ok();
            return None;
        }
        std::thread::sleep(Duration::from_millis(2));
    };
    let output = child.wait_with_output().ok()?;
    let answer = String::from_utf8_lossy(&output.stdout).into_owned();
    (status.success() && answer.starts_with("gpu: ")).then(|| answer.starts_with("gpu: yes"))
}

/// Folder of small settings, which may not exist yet.
#[must_use]
pub fn preferences_dir() -> Option<PathBuf> {
    let folder =
        |name: &str| std::env::var_os(name).filter(|value| !value.is_empty()).map(PathBuf::from);
    let base = if cfg!(windows) {
        folder("APPDATA")?
    } else if cfg!(target_os = "macos") {
        folder("HOME")?.join("Library/Application Support")
    } else {
        folder("XDG_CONFIG_HOME").or_else(|| Some(folder("HOME")?.join(".config")))?
    };
    Some(base.join("rampcrest"))
}

/// What the answer depends on: another display, driver or version is asked anew.
fn circumstances() -> String {
    let display = ["DISPLAY", "WAYLAND_DISPLAY"]
        .map(|name| std::env::var(name).unwrap_or_default())
        .join(" ");
    let drivers = super::probe::drivers().join(" ");
    format!("{} | {display} | {drivers}", env!("CARGO_PKG_VERSION"))
}

fn remembered() -> Option<bool> {
    let text = std::fs::read_to_string(preferences_dir()?.join("renderer")).ok()?;
    let (answer, rest) = text.split_once('\n')?;
    if rest.trim_end() != circumstances() {
        return None;
    }
    match answer {
        "gpu" => Some(true),
        "cpu" => Some(false),
        _ => None,
    }
}

/// Keeps the answer for the next start; a folder that cannot be written only costs time then.
pub fn remember(gpu: bool) {
    let Some(folder) = preferences_dir() else {
        return;
    };
    let answer = if gpu { "gpu" } else { "cpu" };
    let text = format!("{answer}\n{}\n", circumstances());
    if std::fs::create_dir_all(&folder).is_ok() {
        std::fs::write(folder.join("renderer"), text).ok();
    }
}

/// Replaces this process by the same one with `--renderer cpu`.
pub fn start_again_without_gpu() -> ! {
    let mut arguments: Vec<OsString> = vec!["--renderer".into(), "cpu".into()];
    let mut given = std::env::args_os().skip(1);
    while let Some(argument) = given.next() {
        if argument == "--renderer" {
            given.next();
        } else if !argument.to_string_lossy().starts_with("--renderer=") {
            arguments.push(argument);
        }
    }
    let program = std::env::current_exe().unwrap_or_else(|_| "rampcrest".into());
    let status = Command::new(program).args(arguments).status();
    std::process::exit(status.ok().and_then(|status| status.code()).unwrap_or(101))
}
