//! `cargo xtask bench --baseline DIR`: the engine against a general-purpose Python pipeline on the
//! same tables, one core, CPU time, both in one run.
//!
//! DIR holds `analyst_py.py` and `data/*.csv`; `PYTHON` names an interpreter that has numpy, scipy
//! and pandas. Both sides read the table, clean breaths, form 30-s means, find both thresholds and
//! fit the slopes; then both fit the broken line of O₂ pulse on time to the same points and draw
//! the same number of block replicates. No facts are stated, so that the engine leaves out what the
//! baseline does not have either (the O₂-pulse course, predicted values); its time still holds
//! phases, closed-form intervals, recovery, quality and statements.

use std::fs;
use std::hint::black_box;
use std::path::{Path, PathBuf};
use std::process::{Command, ExitCode};

use analysis::decisions::Decisions;
use analysis::facts::Facts;
use analysis::settings::Settings;
use analysis::two_segments::{Design, Replicate};
use record::import::{Answers, import, recording_from};
use serde_json::Value;

mod pulse;

use pulse::Pulse;

/// Replicates of the broken line, as in the baseline's own figures.
const REPLICATES: usize = 500;
/// Breaths per block and least points beside a knot, as in the baseline.
const BLOCK: usize = 10;
/// Runs of the baseline of which the median counts.
const RUNS: usize = 41;
/// CPU time over which the engine's mean is taken, ns.
const LONG_NS: u64 = 300_000_000;

/// CPU times, ms.
#[derive(Clone, Copy, Debug, Default)]
struct Times {
    load: f64,
    values: f64,
    replicates: f64,
}

impl Times {
    fn total(self) -> f64 {
        self.load + self.values + self.replicates
    }
}

/// Runs the race and prints a table in Markdown.
#[must_use]
pub fn run(folder: &Path) -> ExitCode {
    match race(folder) {
        Ok(()) => ExitCode::SUCCESS,
        Err(why) => {
            eprintln!("{why}");
            ExitCode::from(3)
        }
    }
}

fn race(folder: &Path) -> Result<(), String> {
    let files = tables(&folder.join("data"))?;
    println!("| table | n | side | load | values | {REPLICATES} replicates | total |");
    println!("|---|---|---|---|---|---|---|");
    let mut ratios = Vec::new();
    let mut sums = [Times::default(); 2];
    for file in &files {
        let (theirs, result) = baseline(folder, file)?;
        let (ours, pulse) = engine(file)?;
        pulse.agree(&result).map_err(|why| format!("{}: {why}", file.display()))?;
        let name = file.file_stem().unwrap_or_default().to_string_lossy();
        for (side, t) in [("numpy", theirs), ("engine", ours)] {
            let (n, total) = (pulse.x.len(), t.total());
            let Times { load, values, replicates } = t;
            println!(
                "| {name} | {n} | {side} | {load:.3} | {values:.3} | {replicates:.3} | {total:.3} |"
            );
        }
        ratios.push(theirs.total() / ours.total());
        for (sum, t) in sums.iter_mut().zip([theirs, ours]) {
            sum.load += t.load;
            sum.values += t.values;
            sum.replicates += t.replicates;
        }
    }
    ratios.sort_by(f64::total_cmp);
    let [numpy, engine] = sums;
    println!(
        "\nms of CPU of one core, one thread. numpy: fastest form (gemm), median of {RUNS} runs."
    );
    println!(
        "Ratio of the sums: {:.1} in all; {:.1} load, {:.1} values, {:.1} replicates. Per table: {:.1} to {:.1}.",
        numpy.total() / engine.total(),
        numpy.load / engine.load,
        numpy.values / engine.values,
        numpy.replicates / engine.replicates,
        ratios[0],
        ratios[ratios.len() - 1],
    );
    Ok(())
}

fn tables(folder: &Path) -> Result<Vec<PathBuf>, String> {
    let entries = fs::read_dir(folder).map_err(|e| format!("{}: {e}", folder.display()))?;
    let mut files: Vec<PathBuf> = entries.flatten().map(|e| e.path()).collect();
    files.retain(|f| f.extension().is_some_and(|e| e == "csv"));
    files.sort();
    if files.is_empty() { Err(format!("{}: no table", folder.display())) } else { Ok(files) }
}

/// The baseline's own median CPU times and its result.
fn baseline(folder: &Path, file: &Path) -> Result<(Times, Value), String> {
    let python = std::env::var_os("PYTHON").unwrap_or_else(|| "python3".into());
    let output = Command::new(&python)
        .env("OPENBLAS_NUM_THREADS", "1")
        .env("PYTHONDONTWRITEBYTECODE", "1")
        .arg(folder.join("analyst_py.py"))
        .args(["--engine", "gemm", "--boot", &REPLICATES.to_string()])
        .args(["--repeat", &RUNS.to_string()])
        .arg(file)
        .output()
        .map_err(|e| format!("{}: {e}", python.display()))?;
    if !output.status.success() {
        return Err(String::from_utf8_lossy(&output.stderr).into_owned());
    }
    let read: Value = serde_json::from_slice(&output.stdout).map_err(|e| e.to_string())?;
    let stage = |name: &str| {
        read["ms_cpu_med"][name].as_f64().ok_or_else(|| format!("no time of stage {name}"))
    };
    let times = Times {
        load: stage("load")?,
        values: stage("clean")? + stage("average30s")? + stage("breaks")? + stage("slopes")?,
        replicates: stage("o2pulse_boot")?,
    };
    Ok((times, read["result"].clone()))
}

/// The engine's mean CPU times, and the points of its broken line.
fn engine(file: &Path) -> Result<(Times, Pulse), String> {
    let bytes = fs::read(file).map_err(|e| format!("{}: {e}", file.display()))?;
    // As the baseline is told the columns, the engine is: by the recipe of an earlier import.
    let read = import(&bytes, "", &Answers::none(), None).map_err(|problem| problem.to_string())?;
    let (facts, decisions, settings) =
        (Facts::default(), Decisions::default(), Settings::default());
    let pulse = Pulse::read(&bytes).ok_or_else(|| format!("{}: no ramp", file.display()))?;
    let times = Times {
        load: mean_ms(|| {
            let bytes = fs::read(file).unwrap_or_default();
            black_box(recording_from(black_box(&bytes), &read.recipe).is_ok());
        })?,
        values: mean_ms(|| {
            black_box(analysis::derive(black_box(&read.recording), &facts, &decisions, &settings));
        })?,
        replicates: mean_ms(|| {
            black_box(replicates(black_box(&pulse)));
        })?,
    };
    Ok((times, pulse))
}

fn replicates(pulse: &Pulse) -> Option<Vec<Replicate>> {
    let design = Design::new(&pulse.x, BLOCK)?;
    let fit = design.fit(&pulse.y)?;
    Some(design.replicates(&pulse.y, &fit, REPLICATES, BLOCK, 1))
}

/// CPU time of this thread per call, ms.
fn mean_ms(mut work: impl FnMut()) -> Result<f64, String> {
    work();
    let (start, mut calls) = (cpu_ns()?, 0);
    loop {
        work();
        calls += 1;
        let spent = cpu_ns()? - start;
        if spent > LONG_NS {
            return Ok(spent as f64 / 1e6 / f64::from(calls));
        }
    }
}

fn cpu_ns() -> Result<u64, String> {
    let path = "/proc/thread-self/schedstat";
    let text = fs::read_to_string(path).map_err(|e| format!("{path}: {e}"))?;
    text.split(' ').next().and_then(|ns| ns.parse().ok()).ok_or_else(|| format!("{path}: {text}"))
}
