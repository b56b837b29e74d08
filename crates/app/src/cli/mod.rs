//! The command line: a window, or one of the headless verbs, which use the same code.

pub mod args;
mod bench;
mod failure;
mod files;
mod hook;
mod open;
mod sessions;
mod sheet;
mod views;
mod window;

use std::ffi::OsString;

pub use args::{Args, Verb};
pub use failure::{Exit, Failure};

use crate::shell::probe;

const HELP: &str = "\
rampcrest: a workstation for reading finished cardiopulmonary exercise tests

  rampcrest                       the window on the built-in demonstration test
  rampcrest FILE…                 the window on these files (breath tables or sessions)
  rampcrest derive FILE [--json] [--answer COLUMN=READING]… [--profile P]
  rampcrest edit SESSION EDITS.json -o OUT
  rampcrest describe SESSION --view VIEW [--json] [--size WxH]
  rampcrest picture SESSION --view VIEW [--size WxH] [--scale S] [--theme light|dark] -o P.png
  rampcrest page SESSION -o P.html
  rampcrest import FILE [--profile P] [--answer COLUMN=READING]… -o S

A breath table may stand wherever a SESSION may. With every command: --facts F.json,
--now RFC3339 (or SOURCE_DATE_EPOCH). With the window: --renderer auto|gpu|cpu, and
--out DIR for what is written when there is no display.
Views: time-course circulation thresholds ventilation gas-exchange nine-panels recovery
data events findings comparison import.
Exit codes: 0 ok, 2 usage, 3 input refused, 4 a question is open, 5 verification failed,
6 no display, 7 cannot write, 101 a bug.";

/// Runs the program and returns its exit code.
pub fn run(given: impl IntoIterator<Item = OsString>) -> i32 {
    hook::install();
    let given: Vec<OsString> = given.into_iter().collect();
    let json = given.iter().any(|argument| argument == "--json");
    let result = Args::parse(given).and_then(clocked).and_then(|args| carry_out(&args));
    let exit = result.unwrap_or_else(|failure| {
        if json {
            files::print(&failure.json());
        }
        eprintln!("rampcrest: {}", failure.problem);
        failure.exit
    });
    i32::from(exit as u8)
}

/// Checks the fixed clock, or takes it from `SOURCE_DATE_EPOCH`.
fn clocked(mut args: Args) -> Result<Args, Failure> {
    let wrong = |problem: record::Problem| Failure { exit: Exit::Usage, problem };
    if let Some(now) = &args.now {
        record::clock::parse(now).map_err(wrong)?;
    } else if let Ok(seconds) = std::env::var("SOURCE_DATE_EPOCH") {
        args.now = Some(record::clock::from_epoch(&seconds).map_err(wrong)?);
    }
    Ok(args)
}

fn carry_out(args: &Args) -> Result<Exit, Failure> {
    match args.verb {
        Verb::Window => window::show(args),
        Verb::Describe => views::describe(args),
        Verb::Picture => views::picture(args),
        Verb::BenchFrame => bench::frame(args),
        Verb::Sheet => sheet::sheet(args),
        Verb::Probe => {
            files::print(&probe::answer());
            Ok(Exit::Ok)
        }
        Verb::Help => {
            files::print(HELP);
            Ok(Exit::Ok)
        }
        Verb::Version => {
            files::print(concat!("rampcrest ", env!("CARGO_PKG_VERSION")));
            Ok(Exit::Ok)
        }
        Verb::Derive => sessions::derive(args),
        Verb::Edit => sessions::edit(args),
        Verb::Page => sessions::page(args),
        Verb::Import => sessions::import(args),
        Verb::Sign => Err(Failure::not_yet("sign")),
        Verb::Verify => Err(Failure::not_yet("verify")),
        Verb::Batch => Err(Failure::not_yet("batch")),
    }
}
