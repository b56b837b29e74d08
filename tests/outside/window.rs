//! The real window under a virtual display, with real mouse moves and keys.

use std::io::{BufRead, BufReader};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, Stdio};
use std::time::{Duration, Instant};

use crate::tools::{rampcrest, run};

/// A virtual display that ends with the test.
struct Display {
    server: Child,
    name: String,
    size: String,
}

impl Display {
    fn start(size: &str) -> Self {
        let mut server = Command::new("Xvfb")
            .args(["-displayfd", "1", "-screen", "0", &format!("{size}x24"), "-nolisten", "tcp"])
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .expect("Xvfb is installed");
        let mut line = String::new();
        BufReader::new(server.stdout.take().expect("its output"))
            .read_line(&mut line)
            .expect("a display number");
        Self { server, name: format!(":{}", line.trim()), size: size.to_owned() }
    }

    fn tool(&self, program: &str) -> Command {
        let mut command = Command::new(program);
        command.env("DISPLAY", &self.name).env_remove("WAYLAND_DISPLAY");
        command
    }

    fn picture(&self, to: &Path) -> Vec<u8> {
        run(self.tool("scrot").arg("-o").arg(to));
        let decoder =
            png::Decoder::new(BufReader::new(std::fs::File::open(to).expect("the picture")));
        let mut reader = decoder.read_info().expect("a PNG");
        let mut pixels = vec![0; reader.output_buffer_size().expect("a size")];
        reader.next_frame(&mut pixels).expect("pixels");
        pixels
    }
}

impl Drop for Display {
    fn drop(&mut self) {
        let _ = self.server.kill();
        let _ = self.server.wait();
    }
}

/// The program in a window, ended with the test.
struct Window {
    program: Child,
    id: String,
    _home: tempfile::TempDir,
}

impl Window {
    fn open(display: &Display, renderer: &str, file: Option<&Path>) -> Self {
        let home = tempfile::tempdir().expect("temporary folder");
        let mut command = display.tool(rampcrest().to_str().expect("a path"));
        command.env("XDG_CONFIG_HOME", home.path()).args(["--renderer", renderer]);
        if let Some(file) = file {
            command.arg(file);
        }
        let program = command.spawn().expect("the program starts");
        let deadline = Instant::now() + Duration::from_secs(60);
        let id = loop {
            let found = display
                .tool("xdotool")
                .args(["search", "--onlyvisible", "--name", "Rampcrest"])
                .output()
                .expect("xdotool is installed");
            let text = String::from_utf8_lossy(&found.stdout).into_owned();
            if let Some(id) = text.lines().next() {
                break id.to_owned();
            }
            assert!(Instant::now() < deadline, "no window appeared");
            std::thread::sleep(Duration::from_millis(100));
        };
        run(display.tool("xdotool").args(["windowmove", &id, "0", "0", "windowfocus", &id]));
        let (width, height) = display.size.split_once('x').expect("a size");
        run(display.tool("xdotool").args(["windowsize", &id, width, height]));
        std::thread::sleep(Duration::from_secs(2));
        Self { program, id, _home: home }
    }
}

impl Drop for Window {
    fn drop(&mut self) {
        let _ = self.program.kill();
        let _ = self.program.wait();
    }
}

fn differing(a: &[u8], b: &[u8]) -> usize {
    assert_eq!(a.len(), b.len());
    a.chunks(3).zip(b.chunks(3)).filter(|(x, y)| x != y).count()
}

/// Centre of the node whose name begins with `name`, from the accessibility tree.
fn centre_of(session: &Path, size: &str, name: &str) -> (i32, i32) {
    let out = run(Command::new(rampcrest()).arg("describe").arg(session).args([
        "--view",
        "time-course",
        "--json",
        "--size",
        size,
    ]));
    let tree: serde_json::Value = serde_json::from_slice(&out.stdout).expect("JSON");
    let node = tree["nodes"]
        .as_array()
        .expect("nodes")
        .iter()
        .find(|n| n["name"].as_str().is_some_and(|x| x.starts_with(name)))
        .unwrap_or_else(|| panic!("no node is named “{name}…”"));
    let rect: Vec<f64> =
        node["rect"].as_array().expect("rect").iter().filter_map(|v| v.as_f64()).collect();
    ((rect[0] + rect[2] / 2.0) as i32, (rect[1] + rect[3] / 2.0) as i32)
}

fn demo(case: &str) -> PathBuf {
    xtask::root().join("demo-sessions").join(case).join("session.json")
}

fn drag_in_window(renderer: &str) {
    let size = "1920x1080";
    let display = Display::start(size);
    let folder = tempfile::tempdir().expect("temporary folder");
    let session = demo("dunlin");
    let window = Window::open(&display, renderer, Some(&session));
    let shot = |name: &str| display.picture(&folder.path().join(name));
    let before = shot("before.png");
    let distinct: std::collections::BTreeSet<&[u8]> = before.chunks(3).collect();
    assert!(distinct.len() > 16, "the window is blank");

    let (x, y) = centre_of(&session, size, "Ramp start");
    let at = |x: i32| [x.to_string(), y.to_string()];
    let xdotool = |args: &[String]| run(display.tool("xdotool").args(args));
    let step = |x: i32| {
        let [x, y] = at(x);
        xdotool(&["mousemove".into(), x, y]);
        std::thread::sleep(Duration::from_millis(30));
    };
    step(x);
    std::thread::sleep(Duration::from_millis(300));
    xdotool(&["mousedown".into(), "1".into()]);
    for k in 1..=12 {
        step(x + 4 * k);
    }
    std::thread::sleep(Duration::from_millis(300));
    let during = shot("during.png");
    assert!(differing(&before, &during) > 2_000, "the drag moved nothing");
    xdotool(&["mouseup".into(), "1".into()]);
    std::thread::sleep(Duration::from_millis(300));
    run(display.tool("xdotool").args(["windowfocus", &window.id, "key", "ctrl+z"]));
    xdotool(&["mousemove".into(), "5".into(), "5".into()]);
    std::thread::sleep(Duration::from_millis(600));
    let undone = shot("undone.png");
    assert!(
        differing(&before, &undone) < differing(&before, &during) / 2,
        "undo did not bring the boundary back"
    );
}

#[test]
fn a_boundary_dragged_in_the_gpu_shell_moves_and_is_undone() {
    drag_in_window("gpu");
}

#[test]
fn a_boundary_dragged_in_the_cpu_shell_moves_and_is_undone() {
    drag_in_window("cpu");
}
