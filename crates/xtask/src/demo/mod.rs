//! `cargo xtask demo`: writes the demo tests from the seeded model, the same bytes on any machine.

mod facts;
mod people;
mod session;
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
///
/// # Panics
/// When the project's own importer refuses the demo (a test forbids it).
#[must_use]
pub fn build(case: &Case) -> Vec<DemoFile> {
    let plan = (case.plan)();
    let (recording, truth) = generate(&plan);
    let table = table::text(case, &recording);
    let facts = facts::text(case);
    let session = session::bytes(table.as_bytes(), &facts, &truth)
        .unwrap_or_else(|p| panic!("{}: {} {}", case.name, p.where_, p.what));
    let file =
        |name: &str, bytes: Vec<u8>| DemoFile { path: Path::new(case.name).join(name), bytes };
    vec![
        file("table.csv", table.into_bytes()),
        file("facts.json", facts.into_bytes()),
        file("truth.json", truth::text(case, &plan, &truth).into_bytes()),
        file("session.json", session),
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
