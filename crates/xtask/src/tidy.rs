//! `cargo xtask tidy`: rules of the tree that no compiler checks.

use std::fs;
use std::path::{Path, PathBuf};
use std::process::ExitCode;

/// Longest source file, lines.
const MAX_LINES: usize = 500;

/// Largest committed file, bytes.
const MAX_BYTES: u64 = 1 << 20;

/// Folders that are not ours or not source.
const SKIPPED: &[&str] = &["target", ".git", "out"];

/// Text that must not stand in a source file, with the reason. Each is written in two halves so
/// that this file passes its own check.
const BANNED: &[(&str, &str, &str)] = &[
    ("#[ig", "nore", "a test that does not run proves nothing"),
    ("tod", "o!(", "no stub is called done"),
    ("unimple", "mented!(", "no stub is called done"),
    ("assert!(tr", "ue", "a test that cannot fail proves nothing"),
    ("/ro", "ot/", "no machine path in the repository"),
    ("/wo", "rk/", "no machine path in the repository"),
    ("/ho", "me/", "no machine path in the repository"),
];

/// One broken rule.
#[derive(Debug)]
pub struct Finding {
    /// File and line.
    pub place: String,
    /// What is wrong and why it matters.
    pub rule: String,
}

/// Prints every broken rule; fails when there is one.
#[must_use]
pub fn run() -> ExitCode {
    let findings = check(&crate::root());
    for finding in &findings {
        eprintln!("{}: {}", finding.place, finding.rule);
    }
    if findings.is_empty() { ExitCode::SUCCESS } else { ExitCode::FAILURE }
}

/// All broken rules below `root`.
#[must_use]
pub fn check(root: &Path) -> Vec<Finding> {
    let mut files = Vec::new();
    collect(root, &mut files);
    files.sort();
    let mut findings = Vec::new();
    for file in files {
        check_file(root, &file, &mut findings);
    }
    findings
}

fn collect(folder: &Path, files: &mut Vec<PathBuf>) {
    let Ok(entries) = fs::read_dir(folder) else { return };
    for entry in entries.flatten() {
        let path = entry.path();
        let name = entry.file_name();
        if SKIPPED.iter().any(|s| name == *s) {
            continue;
        }
        if path.is_dir() {
            collect(&path, files);
        } else {
            files.push(path);
        }
    }
}

fn check_file(root: &Path, file: &Path, findings: &mut Vec<Finding>) {
    let shown = file.strip_prefix(root).unwrap_or(file).display().to_string();
    let mut report = |place: String, rule: String| findings.push(Finding { place, rule });
    if fs::metadata(file).is_ok_and(|m| m.len() > MAX_BYTES) {
        report(shown.clone(), format!("larger than {MAX_BYTES} bytes"));
    }
    let rust = file.extension().is_some_and(|e| e == "rs");
    let text_file =
        rust || file.extension().is_some_and(|e| {
            ["md", "toml", "json", "csv", "txt", "yml", "sh", "html"].iter().any(|x| e == *x)
        }) || shown == ".ci/run";
    if !text_file {
        return;
    }
    let Ok(text) = fs::read_to_string(file) else {
        return report(shown, "is not UTF-8".into());
    };
    let lines = text.lines().count();
    if rust && lines > MAX_LINES {
        report(shown.clone(), format!("{lines} lines; split it by what the reader can see"));
    }
    if rust && !text.starts_with("//!") {
        report(shown.clone(), "does not begin by saying what it is (`//!`)".into());
    }
    for (number, line) in text.lines().enumerate() {
        for (first, second, why) in BANNED {
            if line.find(first).is_some_and(|at| line[at + first.len()..].starts_with(second)) {
                report(format!("{shown}:{}", number + 1), format!("{first}{second}: {why}"));
            }
        }
    }
}
