//! `cargo xtask demo`: writes the demo tests from the seeded model, the same bytes on any machine.

mod facts;
mod people;
mod table;
mod truth;

use std::fs;
use std::path::{Path, PathBuf};
use std::process::ExitCode;

use analysis::model::demo::{CASES, Case};
use analysis::model::test::generate;

/// First line of every table.
pub const NOTICE: &str =
    "# Invented data from the project's own seeded model. No person, no patient, no laboratory.";

/// One file of a demo test.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DemoFile {
    /// Path below `demo-sessions`.
    pub path: PathBuf,
    /// Its bytes.
    pub bytes: Vec<u8>,
}

/// Writes every demo test below `demo-sessions`.
#[must_use]
pub fn run() -> ExitCode {
    let folder = crate::root().join("demo-sessions");
    for file in CASES.iter().flat_map(build) {
        if let Err(error) = write(&folder, &file) {
            eprintln!("{}: {error}", file.path.display());
            return ExitCode::FAILURE;
        }
    }
    ExitCode::SUCCESS
}

fn write(folder: &Path, file: &DemoFile) -> std::io::Result<()> {
    let path = folder.join(&file.path);
    if let Some(parent) = path.parent() {
        fs::create_dir_all(parent)?;
    }
    fs::write(path, &file.bytes)
}

/// The files of one case.
#[must_use]
pub fn build(case: &Case) -> Vec<DemoFile> {
    let plan = (case.plan)();
    let (recording, truth) = generate(&plan);
    let file = |name: &str, text: String| DemoFile {
        path: Path::new(case.name).join(name),
        bytes: text.into_bytes(),
    };
    vec![
        file("table.csv", table::text(case, &recording)),
        file("facts.json", facts::text(case)),
        file("truth.json", truth::text(case, &plan, &truth)),
    ]
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Built with `libm` and integer counters only, so a rebuild gives the committed bytes.
    #[test]
    fn committed_demo_tests_are_those_that_are_built() {
        let folder = crate::root().join("demo-sessions");
        for file in CASES.iter().flat_map(build) {
            let committed = fs::read(folder.join(&file.path)).unwrap_or_default();
            assert!(committed == file.bytes, "{}: run `cargo xtask demo`", file.path.display());
        }
    }

    #[test]
    fn every_case_has_a_person() {
        for case in CASES {
            assert!(people::person(case.name).is_some(), "{}", case.name);
        }
    }
}
