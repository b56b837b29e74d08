//! `cargo xtask bench`: what frames cost, beside what they may cost.
//!
//! Nothing here is a test: times depend on what else the machine does, which is printed with them.
//! `chrt -r 1 cargo xtask bench` (root) takes precedence over other programs on a shared machine.

mod frames;
mod heavy;
mod window;

use std::process::ExitCode;

use serde_json::json;

/// One measured figure.
pub struct Figure {
    what: String,
    value: f64,
    unit: &'static str,
    /// The most it may be.
    bar: Option<f64>,
}

impl Figure {
    fn free(what: impl Into<String>, value: f64, unit: &'static str) -> Self {
        Self { what: what.into(), value, unit, bar: None }
    }

    fn at_most(what: impl Into<String>, value: f64, unit: &'static str, bar: f64) -> Self {
        Self { what: what.into(), value, unit, bar: Some(bar) }
    }

    fn text(&self) -> String {
        let Self { what, value, unit, bar } = self;
        let beside = bar.map_or(String::new(), |bar| {
            format!("  bar {bar:7.1}  {}", if *value <= bar { "met" } else { "MISSED" })
        });
        format!("{what:66}{value:10.2} {unit:9}{beside}")
    }

    fn json(&self) -> String {
        let met = self.bar.map(|bar| self.value <= bar);
        let (what, value, unit, bar) = (&self.what, self.value, self.unit, self.bar);
        json!({"what": what, "value": value, "unit": unit, "bar": bar, "met": met}).to_string()
    }
}

/// Measures and prints; `--json` gives one object per line, `--quick` a shorter drag.
#[must_use]
pub fn run(args: &[String]) -> ExitCode {
    let has = |name: &str| args.iter().any(|arg| arg == name);
    let Some(binary) = crate::program::built() else {
        return ExitCode::FAILURE;
    };
    let tell = |figure: &Figure| {
        println!("{}", if has("--json") { figure.json() } else { figure.text() });
    };
    let threads = std::thread::available_parallelism().map_or(1, usize::from);
    tell(&Figure::free("processor threads", threads as f64, ""));
    tell(&Figure::free("load average before", load(), ""));
    let moves = if has("--quick") { 1_000 } else { 10_000 };
    let measured =
        frames::measure(&binary, &tell).and_then(|()| window::measure(&binary, moves, &tell));
    tell(&Figure::free("load average after", load(), ""));
    match measured {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("{error}");
            ExitCode::FAILURE
        }
    }
}

/// Programs that want a processor, mean of the last minute; Linux only.
fn load() -> f64 {
    let text = std::fs::read_to_string("/proc/loadavg").unwrap_or_default();
    text.split_whitespace().next().and_then(|n| n.parse().ok()).unwrap_or(f64::NAN)
}
