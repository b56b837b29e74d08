//! `cargo xtask VERB`: the project's own chores.

use std::process::ExitCode;

const USAGE: &str = "cargo xtask VERB

  bench [--json] [--quick]
          what frames and real windows cost, beside what they may cost; needs Xvfb
  bench --baseline DIR
          the engine against a Python pipeline on the same tables
  ci      everything the repository checks without a display or outside data
  demo    writes the demo tests below demo-sessions
  mutants [--seed N] [--count N]
          how many changes of the engine break a test
  references noise|coverage|errors [--seeds A..B]
          simulations and data behind the calibrated figures
  references score TABLE TRUTH [FACTS] | DIR…
          the engine against outside tables with a truth file (rampcrest-truth/1)
  sheet   contact sheets of all views below target/sheet
  tidy    rules of the tree: file sizes, banned words, stubs";

fn main() -> ExitCode {
    let args: Vec<String> = std::env::args().skip(1).collect();
    match args.first().map(String::as_str) {
        Some("bench") if args.get(1).is_some_and(|a| a == "--baseline") => match args.get(2) {
            Some(folder) => xtask::race::run(folder.as_ref()),
            None => {
                eprintln!("{USAGE}");
                ExitCode::from(2)
            }
        },
        Some("bench") => xtask::bench::run(&args[1..]),
        Some("sheet") => xtask::sheet::run(),
        Some("demo") => xtask::demo::run(),
        Some("mutants") => xtask::mutants::run(&args[1..]),
        Some("references") => xtask::references::run(&args[1..]),
        Some("ci") => xtask::ci::run(),
        Some("tidy") => xtask::tidy::run(),
        _ => {
            eprintln!("{USAGE}");
            ExitCode::from(2)
        }
    }
}
