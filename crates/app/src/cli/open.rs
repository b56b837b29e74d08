//! Opens what stands where a session may stand.

use std::path::Path;

use record::facts_file::FactsFile;
use record::import::{Answers, MAX_BYTES, Profile};

use super::args::Args;
use super::failure::Failure;
use super::files;
use crate::App;
use crate::opening::{self, Reading};

/// The window's state on a file.
///
/// # Errors
/// Unreadable or refused (3).
pub fn app(path: &Path, args: &Args) -> Result<App, Failure> {
    let bytes = files::read(path, MAX_BYTES)?;
    let document = opening::bytes(&bytes, path, reading(args)?).map_err(Failure::refused)?;
    let mut app = App::new();
    app.show(document);
    Ok(app)
}

/// How a breath table is to be read.
fn reading(args: &Args) -> Result<Reading, Failure> {
    let mut answers = Answers::none();
    for answer in &args.answers {
        answers.add(answer).map_err(Failure::refused)?;
    }
    let profile = match &args.profile {
        Some(path) => {
            let text = files::read_text(path)?;
            Some(Profile::read(&text).map_err(Failure::refused)?)
        }
        None => None,
    };
    Ok(Reading { facts: facts(args)?, answers, profile, clock: args.now.clone() })
}

/// The facts beside the test; nothing stated without `--facts`.
fn facts(args: &Args) -> Result<FactsFile, Failure> {
    let text = match &args.facts {
        Some(path) => files::read_text(path)?,
        None => return Ok(FactsFile::default()),
    };
    FactsFile::read(&text).map_err(Failure::refused)
}
