//! The published cycle ramps through the importer, against plain arithmetic on their rows.
//!
//! Chabert C et al., Cardiorespiratory measurement from graded cycloergometer exercise testing,
//! version 1.0.0, PhysioNet 2022, doi:10.13026/2qs3-kh43; Goldberger AL et al., Circulation
//! 2000;101:e215. The folder comes in `RAMPCREST_OPEN_DATA`; nothing made from it is kept.

use std::path::PathBuf;

use analysis::quantity::Quantity;
use analysis::recording::RowKind;
use record::import::{Answers, Imported, import, recording_from};

/// One row per beat: time (s), R–R (ms), V̇O₂ (L/min), power (W).
type Beat = [f64; 4];

/// The nine tests: name, bytes, rows read by nothing but a split at commas.
fn ramps() -> Vec<(String, Vec<u8>, Vec<Beat>)> {
    let folder = std::env::var_os("RAMPCREST_OPEN_DATA").expect("RAMPCREST_OPEN_DATA is set");
    let folder = PathBuf::from(folder).join("cycle-ramps");
    let mut files: Vec<PathBuf> = std::fs::read_dir(&folder)
        .expect("the folder cycle-ramps")
        .map(|entry| entry.expect("an entry").path())
        .filter(|p| p.file_name().is_some_and(|n| n.to_string_lossy().starts_with("test-")))
        .collect();
    files.sort();
    assert_eq!(files.len(), 9, "nine tests");
    files
        .into_iter()
        .map(|path| {
            let bytes = std::fs::read(&path).expect("a readable file");
            let text = String::from_utf8(bytes.clone()).expect("UTF-8");
            let rows = text.lines().skip(1).map(|line| {
                let cells: Vec<f64> = line.split(',').map(|c| c.parse().expect("number")).collect();
                [cells[0], cells[1], cells[2], cells[3]]
            });
            (path.display().to_string(), bytes, rows.collect())
        })
        .collect()
}

fn read(name: &str, bytes: &[u8]) -> Imported {
    import(bytes, name, &Answers::none(), None).unwrap_or_else(|problem| panic!("{problem}"))
}

#[test]
fn every_ramp_is_read_without_an_answer() {
    for (name, bytes, _) in ramps() {
        let read = read(&name, &bytes);
        let readings: Vec<String> = read.columns().iter().map(|c| c.reading.to_string()).collect();
        assert_eq!(readings, ["time s", "rr-interval ms", "vo2 L/min", "work-rate W"], "{name}");
        assert!(read.questions().is_empty() && read.left_out().is_empty(), "{name}");
        assert_eq!(read.recording.row_kind, RowKind::Beat);
        assert_eq!(recording_from(&bytes, &read.recipe).expect("again"), read.recording);
    }
}

#[test]
fn breaths_are_the_runs_of_equal_neighbours() {
    for (name, bytes, rows) in ramps() {
        let read = read(&name, &bytes);
        let breaths = &read.recording.breaths;
        // Every breath's value stands in the file at the beat that ends it.
        let mut row = 0;
        for i in 0..breaths.len() {
            while rows[row][0] < breaths.end_s()[i] - 1e-9 {
                row += 1;
            }
            let vo2 = breaths.value(Quantity::Vo2, i).expect("a value");
            assert!((vo2 - 1000.0 * rows[row][2]).abs() < 1e-6, "{name}: breath {i}");
            assert!(breaths.duration_s()[i] <= 8.0, "{name}: a hold over 8 s is no breath");
        }
        // Nothing is counted twice and nothing disappears: runs = breaths + runs inside gaps.
        let runs = 1 + rows.windows(2).filter(|w| w[0][2] != w[1][2]).count();
        assert!(breaths.len() <= runs && runs - breaths.len() <= 4, "{name}: {runs} runs");
    }
}

#[test]
fn uptake_and_rate_of_the_last_half_minute_agree_with_the_rows() {
    for (name, bytes, rows) in ramps() {
        let read = read(&name, &bytes);
        let peak = rows.iter().map(|r| r[3]).fold(0.0, f64::max);
        let end = rows.iter().filter(|r| r[3] == peak).map(|r| r[0]).fold(f64::MIN, f64::max);
        // By beats: each row weighted with its own interval.
        let window = rows.iter().filter(|r| r[0] > end - 30.0 && r[0] <= end && r[1] <= 2500.0);
        let (mut ms, mut weighted, mut beats) = (0.0, 0.0, 0.0);
        for r in window {
            ms += r[1];
            weighted += r[1] * r[2] * 1000.0;
            beats += 1.0;
        }
        let (vo2_rows, hr_rows) = (weighted / ms, 60_000.0 * beats / ms);
        // By breaths: each breath weighted with its duration.
        let breaths = &read.recording.breaths;
        let (mut s, mut vo2, mut hr) = (0.0, 0.0, 0.0);
        for i in 0..breaths.len() {
            let (t, d) = (breaths.end_s()[i], breaths.duration_s()[i]);
            if t > end - 30.0 && t <= end {
                s += d;
                vo2 += d * breaths.value(Quantity::Vo2, i).expect("a value");
                hr += d * breaths.value(Quantity::Hr, i).expect("a rate");
            }
        }
        let off = |a: f64, b: f64| (a / b - 1.0).abs();
        assert!(off(vo2 / s, vo2_rows) < 0.02, "{name}: {} and {vo2_rows} mL/min", vo2 / s);
        assert!(off(hr / s, hr_rows) < 0.02, "{name}: {} and {hr_rows} per min", hr / s);
        assert_eq!(read.recording.load.at(end), Some(peak), "{name}");
    }
}

#[test]
fn a_pause_between_beats_is_a_gap_and_never_a_beat() {
    let mut pauses = 0;
    for (name, bytes, rows) in ramps() {
        let read = read(&name, &bytes);
        let rates = read.recording.breaths.column(Quantity::Hr).expect("a rate");
        assert!(rates.iter().flatten().all(|hr| *hr > 30.0 && *hr < 240.0), "{name}");
        for pair in rows.windows(2).filter(|w| w[1][0] - w[0][0] > 2.5) {
            let middle = (pair[0][0] + pair[1][0]) / 2.0;
            let gaps = &read.recording.gaps;
            assert!(gaps.iter().any(|g| g.from_s <= middle && g.to_s >= middle), "{name}");
            pauses += 1;
        }
    }
    assert!(pauses > 0, "the check saw no pause");
}
