//! The real window under Xvfb: from the mouse to the pixel, both shells in the same run.

use std::collections::BTreeSet;
use std::path::Path;
use std::process::Command;
use std::time::{Duration, Instant};

use super::Figure;
use crate::display::{Display, Result};
use crate::drag::Drag;
use crate::program::{Program, demo};

/// Moves whose time to the pixel is taken.
const MOVES: usize = 300;

/// Prints the figures of real windows.
pub fn measure(binary: &Path, moves: usize, tell: &dyn Fn(&Figure)) -> Result<()> {
    let cpu = shell(binary, "cpu", [1920, 1080], 1, moves, tell)?;
    let gpu = shell(binary, "gpu", [1920, 1080], 1, 0, tell)?;
    let name = "OpenGL on llvmpipe over CPU shell";
    tell(&Figure::free(format!("{name}: mouse to pixel"), gpu.0 / cpu.0, "times"));
    tell(&Figure::free(format!("{name}: processor time of a drag frame"), gpu.1 / cpu.1, "times"));
    shell(binary, "cpu", [3840, 2160], 2, 0, tell)?;
    Ok(())
}

/// Median milliseconds from mouse to pixel, and processor milliseconds per move.
fn shell(
    binary: &Path,
    renderer: &str,
    size: [u16; 2],
    scale: u16,
    long_drag: usize,
    tell: &dyn Fn(&Figure),
) -> Result<(f64, f64)> {
    let display = Display::start(size)?;
    let home = tempfile::tempdir()?;
    let session = demo("kittiwake");
    let name = format!("{renderer} window {}×{}", size[0], size[1]);
    let open = || {
        let mut command = Command::new(binary);
        command.args(["--renderer", renderer]).arg(&session);
        command.env("WINIT_X11_SCALE_FACTOR", scale.to_string());
        Program::start(command, &display, home.path())
    };
    // Once for the disk; the second start is measured.
    let first = open()?;
    display.window()?;
    drop(first);
    std::thread::sleep(Duration::from_secs(1));
    let area = [0, 100, 600, 1];
    let (before, start) = (display.pixels(area)?, Instant::now());
    let program = open()?;
    let mut shown = before;
    // Text has many shades; an empty window would have one.
    while shown.chunks(4).collect::<BTreeSet<_>>().len() < 8 {
        shown = display.change(area, &shown)?.ok_or("no first frame")?.0;
    }
    let time = ms(start.elapsed());
    tell(&Figure::at_most(format!("{name}: start to first frame"), time, "ms", 200.0));
    let window = display.window()?;
    display.place(window, [0, 0, size[0], size[1]])?;
    display.still(Duration::from_secs(1))?;
    idle(&program, &name, tell)?;
    let drag = Drag::grip(&display, binary, &session, scale)?;
    let ticks = program.ticks().unwrap_or(0);
    let mut times = drag.times(&display, MOVES, Duration::from_millis(5))?;
    let spent = program.ticks().unwrap_or(0).saturating_sub(ticks) as f64 * 10.0 / MOVES as f64;
    times.sort();
    let share = |percent: usize| ms(times[(times.len() * percent / 100).min(times.len() - 1)]);
    let what = format!("{name}: mouse to pixel, p50");
    tell(&match (renderer, size[0]) {
        ("cpu", 1920) => Figure::at_most(what, share(50), "ms", 20.0),
        ("cpu", _) => Figure::at_most(what, share(50), "ms", 33.0),
        _ => Figure::free(what, share(50), "ms"),
    });
    tell(&Figure::free(format!("{name}: mouse to pixel, p99"), share(99), "ms"));
    tell(&Figure::free(format!("{name}: processor time per drag frame"), spent, "ms"));
    if long_drag > 0 {
        let (before, start) = (resident_mb(&program), Instant::now());
        drag.times(&display, long_drag, Duration::ZERO)?;
        let growth = resident_mb(&program) - before;
        let what = format!("{name}: growth over a drag of {long_drag} frames");
        tell(&Figure::at_most(what, growth, "MB", 5.0));
        let each = ms(start.elapsed()) / long_drag as f64;
        tell(&Figure::free(format!("{name}: period of those frames, mean"), each, "ms"));
    }
    let resident = resident_mb(&program);
    let what = format!("{name}: resident memory after the drag");
    tell(&match (renderer, size[0]) {
        ("cpu", 1920) => Figure::at_most(what, resident, "MB", 60.0),
        _ => Figure::free(what, resident, "MB"),
    });
    drag.release(&display)?;
    Ok((share(50), spent))
}

/// Processor time of a window in which nothing happens and no text field is focused.
fn idle(program: &Program, name: &str, tell: &dyn Fn(&Figure)) -> Result<()> {
    std::thread::sleep(Duration::from_secs(2));
    let before = program.ticks().ok_or("no processor time")?;
    std::thread::sleep(Duration::from_secs(5));
    let ticks = program.ticks().ok_or("no processor time")? - before;
    tell(&Figure::at_most(format!("{name}: idle for 5 s"), ticks as f64, "ticks", 0.0));
    Ok(())
}

fn resident_mb(program: &Program) -> f64 {
    program.resident_kib().map_or(f64::NAN, |kib| kib as f64 / 1024.0)
}

fn ms(duration: Duration) -> f64 {
    duration.as_secs_f64() * 1e3
}
