//! Frames without a window, as `rampcrest bench-frame` measures them: a boundary is dragged, and
//! everything is derived anew for each frame.

use std::path::Path;

use serde_json::Value;

use super::{Figure, heavy};
use crate::display::Result;
use crate::program;

/// Runs one frame bench; `session` is a table or a session, none the demo test.
fn frame(binary: &Path, args: &[&str]) -> Result<Value> {
    let verb = [&["bench-frame", "--json"], args].concat();
    let text = program::output(binary, &verb).ok_or("the frame bench failed")?;
    Ok(serde_json::from_str(&text)?)
}

fn number(report: &Value, part: &str, which: &str) -> f64 {
    report[part][which].as_f64().unwrap_or(f64::NAN)
}

/// Prints the figures of frames without a window.
pub fn measure(binary: &Path, tell: &dyn Fn(&Figure)) -> Result<()> {
    let view = ["--view", "time-course", "--size", "1920x1080"];
    let normal = frame(binary, &[&view[..], &["--threads", "2"]].concat())?;
    let p50 = |report: &Value, part| number(report, part, "p50");
    tell(&Figure::free(
        "triangles of a frame",
        normal["triangles"].as_f64().unwrap_or(f64::NAN),
        "",
    ));
    tell(&Figure::at_most(
        "raster, time course 1920×1080, 2 threads, p50",
        p50(&normal, "raster_ms"),
        "ms",
        10.0,
    ));
    let cpu = normal["raster_cpu_ms"].as_f64().unwrap_or(f64::NAN);
    tell(&Figure::free("  processor time of that raster, both threads", cpu, "ms"));
    tell(&Figure::free(
        "  only what changed since the frame before, p50",
        p50(&normal, "changed_ms"),
        "ms",
    ));
    tell(&Figure::free("  user interface with derivation, p50", p50(&normal, "ui_ms"), "ms"));
    tell(&Figure::free("  tessellation, p50", p50(&normal, "tessellate_ms"), "ms"));
    tell(&Figure::at_most("drag frame with derivation, p50", p50(&normal, "total_ms"), "ms", 16.7));
    tell(&Figure::at_most(
        "drag frame with derivation, p99",
        number(&normal, "total_ms", "p99"),
        "ms",
        20.0,
    ));
    let one = frame(binary, &[&view[..], &["--threads", "1"]].concat())?;
    tell(&Figure::free("raster on 1 thread, p50", p50(&one, "raster_ms"), "ms"));
    let other = ["--view", "circulation", "--size", "1920x1080"];
    let other = frame(binary, &other)?;
    tell(&Figure::at_most("drag frame of Circulation, p50", p50(&other, "total_ms"), "ms", 16.7));
    let large = ["--view", "time-course", "--size", "3840x2160", "--scale", "2"];
    let large = frame(binary, &large)?;
    tell(&Figure::at_most(
        "drag frame at 3840×2160, 2 pixels per point, p50",
        p50(&large, "total_ms"),
        "ms",
        33.0,
    ));
    long(binary, &view, &normal, tell)
}

/// The same on a record of 20,000 breaths.
fn long(binary: &Path, view: &[&str], normal: &Value, tell: &dyn Fn(&Figure)) -> Result<()> {
    let folder = tempfile::tempdir()?;
    let table = folder.path().join("long.csv");
    heavy::write(&table)?;
    let facts = crate::root().join("demo-sessions/kittiwake/facts.json");
    let files = [&*table.to_string_lossy(), "--facts", &*facts.to_string_lossy()].map(String::from);
    let files = files.each_ref().map(String::as_str);
    let long = frame(binary, &[&files[..], view, &["--frames", "60"]].concat())?;
    let drawing = |report: &Value| {
        number(report, "tessellate_ms", "p50") + number(report, "raster_ms", "p50")
    };
    let ratio = drawing(&long) / drawing(normal);
    tell(&Figure::at_most(
        "20,000 breaths: tessellation and raster, times the normal record",
        ratio,
        "",
        1.5,
    ));
    let p50 = |report: &Value| number(report, "total_ms", "p50");
    tell(&Figure::at_most(
        "20,000 breaths: whole drag frame, times the normal record",
        p50(&long) / p50(normal),
        "",
        1.5,
    ));
    tell(&Figure::free("20,000 breaths: whole drag frame, p50", p50(&long), "ms"));
    Ok(())
}
