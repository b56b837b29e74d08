//! `cargo xtask mutants [--seed N] [--count N]`: which changes of the engine break a test.
//!
//! `cargo mutants` lists every change of an operator, a comparison, an arm or a whole function it
//! knows; a sample is chosen by seed and run in two passes: first the engine's quick tests, then,
//! on what they let through, all tests of engine, importer and published values. The simulator
//! (`model`) is not part of the derivation and stays out. Works in a copy of the tree; takes an
//! hour or two of one core. Needs `cargo install cargo-mutants`.

use std::collections::BTreeSet;
use std::fmt::Write as _;
use std::fs;
use std::path::Path;
use std::process::{Command, ExitCode};

use serde_json::Value;

use crate::references::binomial::Count;

/// The passes: packages whose tests run, and arguments of `cargo test`.
const PASSES: [&[&str]; 2] = [
    &["--cargo-test-arg=--lib", "--cargo-test-arg=--test=outcomes"],
    &[
        "--test-package=acceptance,analysis,record,xtask",
        "--cargo-test-arg=--lib",
        "--cargo-test-arg=--tests",
    ],
];

/// Runs the sample and prints counts, the exact interval and what was missed.
#[must_use]
pub fn run(args: &[String]) -> ExitCode {
    let number = |flag: &str, otherwise: u64| {
        let value = args.iter().position(|a| a == flag).and_then(|i| args.get(i + 1));
        value.map_or(Some(otherwise), |v| v.parse().ok())
    };
    let (Some(seed), Some(count)) = (number("--seed", 2026), number("--count", 300)) else {
        eprintln!("cargo xtask mutants [--seed N] [--count N]");
        return ExitCode::from(2);
    };
    match sample_and_run(seed, count as usize) {
        Ok(report) => {
            println!("{report}");
            ExitCode::SUCCESS
        }
        Err(why) => {
            eprintln!("{why}");
            ExitCode::FAILURE
        }
    }
}

fn sample_and_run(seed: u64, count: usize) -> Result<String, String> {
    let listed = cargo_mutants(&["--list", "--json"])?;
    let listed: Vec<Value> = serde_json::from_slice(&listed).map_err(|e| e.to_string())?;
    let mut names: Vec<String> = listed
        .iter()
        .filter(|m| !m["file"].as_str().is_some_and(|f| f.contains("/src/model/")))
        .filter_map(|m| m["name"].as_str().map(String::from))
        .collect();
    let all = names.len();
    names.sort_by_key(|name| rank(name, seed));
    names.truncate(count);
    let mut open: BTreeSet<String> = names.iter().cloned().collect();
    let mut unviable = 0;
    for (pass, tests) in PASSES.iter().enumerate() {
        let folder = crate::root().join("target/mutants").join(pass.to_string());
        fs::create_dir_all(&folder).map_err(|e| e.to_string())?;
        let config = folder.join("sample.toml");
        fs::write(&config, exactly(&open)).map_err(|e| e.to_string())?;
        let (config, folder) = (config.to_string_lossy(), folder.to_string_lossy());
        let mut arguments = vec!["--config", &config, "--output", &folder];
        arguments.extend(["--profile", "mutants", "--timeout", "120", "--no-shuffle"]);
        arguments.extend(tests.iter());
        cargo_mutants(&arguments)?;
        let results = fs::read(Path::new(&*folder).join("mutants.out/outcomes.json"));
        let results: Value = serde_json::from_slice(&results.map_err(|e| e.to_string())?)
            .map_err(|e| e.to_string())?;
        for result in results["outcomes"].as_array().into_iter().flatten() {
            let name = result["scenario"]["Mutant"]["name"].as_str().unwrap_or_default();
            let summary = result["summary"].as_str().unwrap_or_default();
            // The tool runs some struct fields that the sample did not ask for: not counted.
            if summary != "MissedMutant" && open.remove(name) && summary == "Unviable" {
                unviable += 1;
            }
        }
    }
    Ok(report(seed, all, names.len(), unviable, &open))
}

fn report(
    seed: u64,
    all: usize,
    sample: usize,
    unviable: usize,
    missed: &BTreeSet<String>,
) -> String {
    let n = (sample - unviable) as u64;
    let caught = Count { k: n - missed.len() as u64, n };
    let mut text = format!(
        "{} of {n} mutants caught: {} % (exact 95 % limits); seed {seed}, {sample} of {all}, {unviable} did not compile\n",
        caught.k,
        caught.percent(),
    );
    for name in missed {
        let _ = writeln!(text, "missed: {name}");
    }
    text
}

/// Standard output of `cargo mutants`; missed mutants (exit 2) and timeouts (exit 3) are results.
fn cargo_mutants(arguments: &[&str]) -> Result<Vec<u8>, String> {
    let output = Command::new("cargo")
        .args(["mutants", "--package", "analysis"])
        .args(arguments)
        .current_dir(crate::root())
        .output()
        .map_err(|e| format!("cargo mutants: {e}"))?;
    match output.status.code() {
        Some(0 | 2 | 3) => Ok(output.stdout),
        _ => Err(String::from_utf8_lossy(&output.stderr).into_owned()),
    }
}

/// A configuration that selects exactly these.
fn exactly(names: &BTreeSet<String>) -> String {
    let mut text = String::from("examine_re = [\n");
    for name in names {
        let escaped: String = name
            .chars()
            .flat_map(|c| {
                let special = !(c.is_alphanumeric() || " _:/<>='\"&".contains(c));
                special.then_some('\\').into_iter().chain([c])
            })
            .collect();
        let _ = writeln!(text, "  '''^{escaped}$''',");
    }
    text + "]\n"
}

/// Place of a mutant in the order of a seed: its name hashed (FNV-1a), then mixed (splitmix64).
fn rank(name: &str, seed: u64) -> u64 {
    let hash = name
        .bytes()
        .fold(0xcbf2_9ce4_8422_2325, |h: u64, b| (h ^ u64::from(b)).wrapping_mul(0x100_0000_01b3));
    let z = hash.wrapping_add(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15));
    let z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    let z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    z ^ (z >> 31)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_order_depends_on_the_seed_and_on_nothing_else() {
        assert_eq!(rank("a", 1), rank("a", 1));
        assert_ne!(rank("a", 1), rank("a", 2));
        assert_ne!(rank("a", 1), rank("b", 1));
    }

    #[test]
    fn a_selection_matches_names_letter_by_letter() {
        let names = BTreeSet::from([String::from("a.rs:1:2: replace * with + in f")]);
        assert_eq!(
            exactly(&names),
            "examine_re = [\n  '''^a\\.rs:1:2: replace \\* with \\+ in f$''',\n]\n"
        );
    }

    #[test]
    fn a_report_gives_the_exact_interval() {
        let missed = BTreeSet::from([String::from("x")]);
        let text = report(1, 100, 12, 0, &missed);
        // 11 of 12: statsmodels' limits of 1 of 12 mirrored, 61.5 to 99.8 %.
        assert!(text.starts_with("11 of 12 mutants caught: 91.7 [61.5, 99.8] %"), "{text}");
        assert!(text.ends_with("missed: x\n"));
    }
}
