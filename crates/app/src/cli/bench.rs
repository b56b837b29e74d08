//! What a frame costs while a boundary is dragged, without a window: `rampcrest bench-frame`.

use std::time::{Duration, Instant};

use egui::{Event, Modifiers, PointerButton, Pos2};
use raster::{Canvas, Frame};
use serde::Serialize;

use super::args::Args;
use super::failure::{Exit, Failure};
use super::{files, open};
use crate::App;
use crate::headless::{Headless, Screen};
use crate::view_state::View;

/// Costs in milliseconds.
#[derive(Serialize)]
struct Cost {
    p50: f64,
    p99: f64,
}

#[derive(Serialize)]
struct Report {
    schema: &'static str,
    view: String,
    size: [usize; 2],
    scale: f32,
    threads: usize,
    frames: usize,
    triangles: usize,
    first_frame_ms: f64,
    ui_ms: Cost,
    tessellate_ms: Cost,
    /// The whole window.
    raster_ms: Cost,
    /// What differs from the frame before, found and painted, as a window does it.
    changed_ms: Cost,
    /// With the raster of the whole window.
    total_ms: Cost,
    /// Processor time of all threads for the raster of one frame, which other programs do not
    /// lengthen.
    raster_cpu_ms: Option<f64>,
}

#[derive(Default)]
struct Times {
    ui: Vec<Duration>,
    tessellate: Vec<Duration>,
    raster: Vec<Duration>,
    changed: Vec<Duration>,
    raster_cpu_ms: Option<f64>,
    triangles: usize,
}

/// `rampcrest bench-frame`.
pub fn frame(args: &Args) -> Result<Exit, Failure> {
    let mut app = open::app_or_demo(args)?;
    let view = args.view.as_deref().unwrap_or("time-course");
    app.view.view =
        View::from_code(view).ok_or_else(|| Failure::usage(format!("“{view}” is not a view")))?;
    let [width, height] = args.size.unwrap_or([1920, 1080]);
    let scale = args.scale.unwrap_or(1.0);
    let screen = Screen { width, height, scale, ..Screen::default() };
    let threads = args.threads.unwrap_or(2);
    let frames = args.frames.unwrap_or(300).max(2);
    let start = Instant::now();
    let mut headless = Headless::new(screen, |ctx| app.setup(ctx));
    let mut output = headless.settle(|ui| app.ui(ui));
    let _ = headless.paint(&mut output, threads);
    let first = start.elapsed();
    let times = drag(&mut app, &mut headless, screen, frames, threads);
    let total: Vec<Duration> =
        (0..frames).map(|i| times.ui[i] + times.tessellate[i] + times.raster[i]).collect();
    let report = Report {
        schema: "rampcrest-bench-frame/1",
        view: view.to_owned(),
        size: [width, height],
        scale,
        threads,
        frames,
        triangles: times.triangles,
        first_frame_ms: ms(first),
        ui_ms: cost(times.ui),
        tessellate_ms: cost(times.tessellate),
        raster_ms: cost(times.raster),
        changed_ms: cost(times.changed),
        total_ms: cost(total),
        raster_cpu_ms: times.raster_cpu_ms.map(|all| all / frames as f64),
    };
    if args.json {
        files::print(&serde_json::to_string(&report).unwrap_or_default());
    } else {
        let line = |name, c: &Cost| files::print(&format!("{name:12}{:8.2}{:8.2}", c.p50, c.p99));
        files::print(&format!("{} triangles; ms: p50, p99", report.triangles));
        line("ui", &report.ui_ms);
        line("tessellate", &report.tessellate_ms);
        line("raster", &report.raster_ms);
        line("changed", &report.changed_ms);
        line("total", &report.total_ms);
        if let Some(spent) = report.raster_cpu_ms {
            files::print(&format!("processor   {spent:8.2} per raster, all threads"));
        }
    }
    Ok(Exit::Ok)
}

/// Grips the first handle of the time axis and moves it back and forth, one step per frame.
fn drag(
    app: &mut App,
    headless: &mut Headless,
    screen: Screen,
    frames: usize,
    threads: usize,
) -> Times {
    let at = grip(app);
    let button = |pressed| Event::PointerButton {
        pos: at,
        button: PointerButton::Primary,
        pressed,
        modifiers: Modifiers::NONE,
    };
    for events in [vec![Event::PointerMoved(at)], vec![button(true)]] {
        let _ = headless.frame(events, |ui| app.ui(ui));
    }
    let background = headless.ctx().global_style().visuals.panel_fill;
    let new = || Canvas::new(screen.width, screen.height, background);
    let (mut canvas, mut window, mut shown) = (new(), new(), None);
    let mut times = Times { raster_cpu_ms: Some(0.0), ..Times::default() };
    for n in 0..frames {
        let swing = (n % 60) as f32;
        let x = at.x + 2.0 * swing.min(60.0 - swing) + 2.0;
        let moved = Event::PointerMoved(Pos2::new(x, at.y));
        let start = Instant::now();
        let output = headless.frame(vec![moved], |ui| app.ui(ui));
        times.ui.push(start.elapsed());
        let start = Instant::now();
        let primitives = headless.ctx().tessellate(output.shapes, output.pixels_per_point);
        times.tessellate.push(start.elapsed());
        let frame = Frame {
            background: Some(background),
            threads,
            ..Frame::new(&primitives, output.pixels_per_point)
        };
        let (cpu, start) = (cpu_ms(), Instant::now());
        headless.rasteriser().paint(&mut canvas.target(), &frame);
        times.raster.push(start.elapsed());
        times.raster_cpu_ms = times.raster_cpu_ms.and_then(|all| Some(all + cpu_ms()? - cpu?));
        let start = Instant::now();
        let tiles = headless.rasteriser().tiles(&frame, [screen.width, screen.height]);
        let changed = shown.map(|earlier| tiles.changed_since(&earlier));
        let damage = changed.as_deref();
        headless.rasteriser().paint(&mut window.target(), &Frame { damage, ..frame });
        times.changed.push(start.elapsed());
        shown = Some(tiles);
        times.triangles = primitives
            .iter()
            .map(|primitive| match &primitive.primitive {
                egui::epaint::Primitive::Mesh(mesh) => mesh.indices.len() / 3,
                egui::epaint::Primitive::Callback(_) => 0,
            })
            .sum();
    }
    times
}

/// Where the first boundary can be gripped, points.
fn grip(app: &App) -> Pos2 {
    let Some(place) = app.view.geometry.first() else {
        return Pos2::ZERO;
    };
    let start = app.derived.committed().phases.ramp().map_or(0.0, |(from, _)| from);
    Pos2::new(place.scale.place(start), place.span.center().y)
}

/// Processor time of this process so far, all threads; Linux only, in steps of 10 ms.
fn cpu_ms() -> Option<f64> {
    let stat = std::fs::read_to_string("/proc/self/stat").ok()?;
    // Fields 14 and 15 (proc(5)); the second field, the name, may itself hold spaces.
    let mut fields = stat.rsplit_once(')')?.1.split_whitespace().skip(11);
    let user: f64 = fields.next()?.parse().ok()?;
    let system: f64 = fields.next()?.parse().ok()?;
    Some((user + system) * 10.0)
}

fn ms(duration: Duration) -> f64 {
    duration.as_secs_f64() * 1e3
}

fn cost(mut times: Vec<Duration>) -> Cost {
    times.sort();
    let at = |share: usize| times.get(times.len() * share / 100).copied().unwrap_or_default();
    Cost { p50: ms(at(50)), p99: ms(at(99)) }
}
