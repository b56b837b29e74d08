//! Opens what stands where a session may stand.

use std::path::Path;

use record::facts_file::FactsFile;
use record::import::{Answers, Profile};
use record::session::{Edit, Session};

use super::args::Args;
use super::failure::{Exit, Failure};
use super::files;
use crate::App;
use crate::demo;
use crate::document::Document;
use crate::opening::{self, Reading};

/// Largest file read, bytes: a session holds its original file packed, in base64.
const MOST: usize = 96 << 20;

/// The test in a file, a breath table or a session.
///
/// # Errors
/// Unreadable or refused (3).
pub fn document(path: &Path, args: &Args) -> Result<Document, Failure> {
    let bytes = files::read(path, MOST)?;
    let is_session = record::session::is_session(&bytes);
    let reading = reading(args)?;
    let facts = if is_session { Some(reading.facts.clone()) } else { None };
    let mut document = opening::bytes(&bytes, path, reading).map_err(Failure::refused)?;
    if let (Some(facts), Some(_)) = (facts, &args.facts) {
        state(&mut document, &facts).map_err(Failure::refused)?;
    }
    Ok(document)
}

/// The session in a file.
///
/// # Errors
/// As [`document`].
pub fn session(path: &Path, args: &Args) -> Result<Session, Failure> {
    let document = document(path, args)?;
    document.session().cloned().ok_or_else(|| Failure::usage("there is no test in it"))
}

/// The window's state on a file.
///
/// # Errors
/// As [`document`].
pub fn app(path: &Path, args: &Args) -> Result<App, Failure> {
    let mut app = App::new();
    app.show(document(path, args)?);
    Ok(app)
}

/// The window's state on the first file, or on the demonstration test.
///
/// # Errors
/// As [`document`].
pub fn app_or_demo(args: &Args) -> Result<App, Failure> {
    match args.files.first() {
        Some(path) => app(path, args),
        None => demo(args),
    }
}

/// The window's state on the demonstration test.
///
/// # Errors
/// None is known; a damaged program would be refused here (3).
pub fn demo(args: &Args) -> Result<App, Failure> {
    let reading = Reading { facts: demo::facts(), clock: args.now.clone(), ..Reading::default() };
    let document = opening::table(demo::TABLE, demo::NAME, reading).map_err(Failure::refused)?;
    let mut app = App::new();
    app.show(document);
    Ok(app)
}

/// States the facts of a file in a session that is open, as the reader would.
fn state(document: &mut Document, facts: &FactsFile) -> Result<(), record::Problem> {
    let edits: Vec<Edit> = facts
        .paths()
        .into_iter()
        .filter_map(|path| {
            let value = facts.get(&path)?;
            Some(Edit::SetFact { path, value })
        })
        .collect();
    document.apply(&edits)
}

/// 4 where a question about a column is open, which is told on standard error.
#[must_use]
pub fn exit(session: Option<&Session>) -> Exit {
    let questions = session.map_or(&[][..], |session| &session.recipe().questions);
    for question in questions {
        let readings = question.readings.join(" | ");
        eprintln!("rampcrest: --answer \"{}=…\" is open: {readings}", question.column);
    }
    if questions.is_empty() { Exit::Ok } else { Exit::Question }
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
