//! `cargo xtask references noise|coverage|errors [--seeds A..B]`: simulations and data behind the
//! calibrated figures. Tables go to standard output and to `assets/references`. `references score`
//! compares the engine with tables from outside whose truth is known.

pub mod bends;
pub mod binomial;
pub mod coverage;
pub mod errors;
pub mod noise;
mod pool;
pub mod score;

use std::fs;
use std::ops::Range;
use std::process::ExitCode;

/// Seeds from here on are for reporting; those below serve for tuning.
const REPORTED_FROM: u64 = 10_000;

/// Runs `references` with the arguments after the verb.
#[must_use]
pub fn run(args: &[String]) -> ExitCode {
    if let [what, paths @ ..] = args
        && what == "score"
    {
        return score::run(paths);
    }
    let Some((what, seeds)) = parse(args) else {
        eprintln!("cargo xtask references noise|coverage|errors [--seeds A..B] | score PATH…");
        return ExitCode::from(2);
    };
    let tuning = seeds.start < REPORTED_FROM;
    let text = match what {
        "coverage" => coverage::report(seeds),
        "noise" => match noise::report(seeds) {
            Ok(text) => text,
            Err(why) => {
                eprintln!("{why}");
                return ExitCode::from(3);
            }
        },
        "errors" => errors::report(seeds),
        other => {
            eprintln!("{other}: noise, coverage or errors");
            return ExitCode::from(2);
        }
    };
    print!("{text}");
    if tuning {
        eprintln!("seeds below 10,000 serve for tuning: printed, not written");
        return ExitCode::SUCCESS;
    }
    let folder = crate::root().join("assets").join("references");
    let written = fs::create_dir_all(&folder)
        .and_then(|()| fs::write(folder.join(format!("{what}.md")), text.as_bytes()));
    match written {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("{}: {error}", folder.display());
            ExitCode::from(7)
        }
    }
}

/// The table asked for, and the seeds (ones that served for no tuning when none are given).
fn parse(args: &[String]) -> Option<(&str, Range<u64>)> {
    match args {
        [what] if what == "coverage" => Some((what, 20_000..24_000)),
        [what] => Some((what, 20_000..22_000)),
        [what, flag, seeds] if flag == "--seeds" => {
            let (a, b) = seeds.split_once("..")?;
            let range = a.parse().ok()?..b.parse().ok()?;
            (range.start < range.end).then_some((what.as_str(), range))
        }
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn seeds_are_parsed_and_refused() {
        let args = |s: &str| s.split(' ').map(String::from).collect::<Vec<_>>();
        assert_eq!(parse(&args("errors")), Some(("errors", 20_000..22_000)));
        assert_eq!(parse(&args("coverage")), Some(("coverage", 20_000..24_000)));
        assert_eq!(parse(&args("errors --seeds 5..9")), Some(("errors", 5..9)));
        assert_eq!(parse(&args("errors --seeds 9..5")), None);
        assert_eq!(parse(&args("errors --seeds x")), None);
    }
}
