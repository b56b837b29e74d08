//! `cargo xtask references score`: the engine against a table from outside whose truth is known.
//!
//! Arguments: `TABLE TRUTH [FACTS]`, or folders that each hold `table.csv`, `truth.json` and, where
//! there are facts, `facts.json`. The truth is `rampcrest-truth/1` as `demo-sessions` shows it: of
//! its fields those of [`FIELDS`] are scored. `null` says that there is no such thing in the test, so
//! that a value is a false one; a field that is absent is not scored. `phases_s` (start times, s)
//! sets the boundaries, unless the facts do.
//!
//! The truth of a threshold is that of the muscle; the 90 % interval promises what the same
//! procedure gives without noise, so that it holds this truth somewhat less often.

use std::fmt::Write as _;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::ExitCode;

use analysis::decisions::{Decisions, Phase};
use analysis::results::Outcome;
use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, import};
use record::predicted_sets;
use serde_json::Value;

use super::binomial::Count;

/// Field of the truth, and the outcome it is the truth of.
const FIELDS: [(&str, &str); 4] = [
    ("vt1_vo2_ml_min", "vt1-vo2"),
    ("vt2_vo2_ml_min", "vt2-vo2"),
    ("vo2_peak_30s_ml_min", "vo2-peak"),
    ("o2_pulse_at_peak_ml", "o2-pulse-at-peak"),
];

/// The files of one test.
struct Files {
    table: PathBuf,
    truth: PathBuf,
    facts: Option<PathBuf>,
}

/// What became of one field of one test.
#[derive(Clone, Debug, PartialEq)]
struct Line {
    id: &'static str,
    /// `None`: there is no such thing.
    truth: Option<f64>,
    /// The engine's value, or the code of its reason.
    found: Result<f64, String>,
    interval: Option<(f64, f64)>,
}

impl Line {
    fn covered(&self) -> Option<bool> {
        let (truth, (low, high)) = self.truth.zip(self.interval)?;
        Some(low <= truth && truth <= high)
    }

    fn error_pct(&self) -> Option<f64> {
        let (truth, found) = (self.truth?, *self.found.as_ref().ok()?);
        Some(100.0 * (found - truth) / truth)
    }
}

/// Scores the tests at `paths`; 3 if one cannot be read.
pub(super) fn run(paths: &[String]) -> ExitCode {
    let Some(tests) = files(paths) else {
        eprintln!("cargo xtask references score TABLE TRUTH [FACTS] | DIR…");
        return ExitCode::from(2);
    };
    match tests.iter().map(score).collect::<Result<Vec<_>, _>>() {
        Ok(scored) => {
            print!("{}", text(&tests, &scored));
            ExitCode::SUCCESS
        }
        Err(why) => {
            eprintln!("{why}");
            ExitCode::from(3)
        }
    }
}

fn files(paths: &[String]) -> Option<Vec<Files>> {
    let paths: Vec<&Path> = paths.iter().map(Path::new).collect();
    match paths[..] {
        [] => None,
        [table, truth] | [table, truth, _] if table.is_file() => Some(vec![Files {
            table: table.into(),
            truth: truth.into(),
            facts: paths.get(2).map(PathBuf::from),
        }]),
        _ => {
            let folder = |p: &&Path| Files {
                table: p.join("table.csv"),
                truth: p.join("truth.json"),
                facts: Some(p.join("facts.json")).filter(|f| f.is_file()),
            };
            Some(paths.iter().map(folder).collect())
        }
    }
}

fn score(files: &Files) -> Result<Vec<Line>, String> {
    let named = |path: &Path, why: &dyn std::fmt::Display| format!("{}: {why}", path.display());
    let read = |path: &Path| fs::read(path).map_err(|e| named(path, &e));
    let truth: Value =
        serde_json::from_slice(&read(&files.truth)?).map_err(|e| named(&files.truth, &e))?;
    if truth["schema"] != "rampcrest-truth/1" {
        return Err(named(&files.truth, &"its schema is not rampcrest-truth/1"));
    }
    let facts = match &files.facts {
        None => FactsFile::default(),
        Some(path) => {
            let text = String::from_utf8(read(path)?).map_err(|e| named(path, &e))?;
            FactsFile::read(&text).map_err(|p| named(path, &p.what))?
        }
    };
    let table = read(&files.table)?;
    let name = files.table.file_name().map_or_else(String::new, |n| n.display().to_string());
    let imported = import(&table, &name, &Answers::default(), None)
        .map_err(|p| named(&files.table, &p.what))?;
    let (facts, _, mut phases) = facts.to_analysis();
    for phase in Phase::ALL {
        let start = truth["phases_s"][phase.code().replace('-', "_")].as_f64();
        if phases.get(phase).is_none() {
            phases.set(phase, start);
        }
    }
    let decisions = Decisions { phases, ..Decisions::default() };
    let settings = Settings { sets: predicted_sets::bundled(), ..Settings::default() };
    let results = analysis::derive(&imported.recording, &facts, &decisions, &settings);
    let line = |(field, id): (&str, &'static str)| {
        let truth = truth.get(field)?.as_f64();
        let outcome = results.outcomes.iter().find(|o| o.id == id && o.primary)?;
        Some(Line {
            id,
            truth,
            found: outcome.number().ok_or_else(|| reason(outcome)),
            interval: outcome.recording.map(|i| (i.low, i.high)),
        })
    };
    Ok(FIELDS.into_iter().filter_map(line).collect())
}

fn reason(outcome: &Outcome) -> String {
    outcome.reason.as_ref().map_or_else(String::new, |r| r.code.to_string())
}

/// A line per field of each test, then a line per outcome over all tests.
fn text(tests: &[Files], scored: &[Vec<Line>]) -> String {
    let mut out = String::from(
        "| test | outcome | truth | found | error, % | in the 90 % interval |\n|---|---|---|---|---|---|\n",
    );
    let number = |x: Option<f64>| x.map_or_else(|| String::from("none"), |x| format!("{x:.1}"));
    for (files, lines) in tests.iter().zip(scored) {
        for line in lines {
            let found =
                line.found.as_ref().map_or_else(|code| format!("`{code}`"), |x| format!("{x:.1}"));
            let error = line.error_pct().map_or_else(|| String::from("–"), |e| format!("{e:+.1}"));
            let covered = line.covered().map_or("–", |yes| if yes { "yes" } else { "no" });
            let (id, truth) = (line.id, number(line.truth));
            let test = files.table.display();
            let _ = writeln!(out, "| {test} | `{id}` | {truth} | {found} | {error} | {covered} |");
        }
    }
    let _ = writeln!(
        out,
        "\n| outcome | found where there is one | found where there is none | median size of error, % | \
         90th centile | covered |\n|---|---|---|---|---|---|"
    );
    for (_, id) in FIELDS {
        let lines: Vec<&Line> = scored.iter().flatten().filter(|l| l.id == id).collect();
        let found = |there: bool| {
            let of = lines.iter().filter(|l| l.truth.is_some() == there);
            Count::of(of.map(|l| l.found.is_ok())).percent()
        };
        let mut errors: Vec<f64> =
            lines.iter().filter_map(|l| l.error_pct()).map(f64::abs).collect();
        errors.sort_by(f64::total_cmp);
        let centile = |p: usize| match errors.len() {
            0 => String::from("–"),
            n => format!("{:.1}", errors[(n - 1) * p / 100]),
        };
        let covered = Count::of(lines.iter().filter_map(|l| l.covered())).percent();
        let _ = writeln!(
            out,
            "| `{id}` | {} | {} | {} | {} | {covered} |",
            found(true),
            found(false),
            centile(50),
            centile(90)
        );
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    fn demo(case: &str) -> Vec<String> {
        vec![crate::root().join("demo-sessions").join(case).display().to_string()]
    }

    /// A committed demo test is an outside table like any other: its true peak lies near what is
    /// found, and the phases of the truth are used.
    #[test]
    fn a_table_with_its_truth_is_scored() {
        let tests = files(&demo("kittiwake")).unwrap();
        let lines = score(&tests[0]).unwrap();
        let peak = lines.iter().find(|l| l.id == "vo2-peak").unwrap();
        assert!(peak.error_pct().unwrap().abs() < 6.0, "{peak:?}");
        assert!(peak.interval.is_some());
        let text = text(&tests, &[lines]);
        assert!(text.contains("| `vt1-vo2` |"), "{text}");
    }

    #[test]
    fn a_value_where_there_is_none_counts_as_false() {
        let line =
            |truth, found| Line { id: "vt1-vo2", truth, found, interval: Some((90.0, 110.0)) };
        let lines = vec![
            line(None, Ok(100.0)),
            line(None, Err(String::from("vt1-no-bend"))),
            line(Some(95.0), Ok(100.0)),
        ];
        assert_eq!(lines[0].covered(), None);
        assert_eq!(lines[2].covered(), Some(true));
        assert!((lines[2].error_pct().unwrap() - 100.0 * 5.0 / 95.0).abs() < 1e-12);
        let text = text(&files(&demo("avocet")).unwrap(), &[lines]);
        // 1 of 2 found where there is none: Clopper–Pearson 1.3 to 98.7 % (0.975 = (1 − p)²).
        assert!(text.contains("| `vt1-vo2` | 100.0 [2.5, 100.0] | 50.0 [1.3, 98.7] |"), "{text}");
    }

    #[test]
    fn a_truth_of_another_schema_is_refused() {
        let folder = demo("avocet").remove(0);
        let files =
            files(&[format!("{folder}/table.csv"), format!("{folder}/facts.json")]).unwrap();
        assert!(score(&files[0]).unwrap_err().contains("rampcrest-truth/1"));
    }
}
