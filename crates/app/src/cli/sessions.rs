//! Verbs on sessions: derive, edit, import, page.

use std::path::Path;

use analysis::results::{At, Outcome, Results};
use record::presentation::{labels, values, wording};
use record::results_json;
use record::session::{ENGINE, Session, read_edits};
use serde_json::json;

use super::args::Args;
use super::failure::{Exit, Failure};
use super::{files, open};

/// `rampcrest derive`.
pub fn derive(args: &Args) -> Result<Exit, Failure> {
    let session = open::session(&args.files[0], args)?;
    if args.json {
        files::print(results(&session).trim_end());
    } else {
        files::print(text(&session).trim_end());
    }
    Ok(open::exit(Some(&session)))
}

/// `rampcrest-results/1`; of a signed session the results that were signed.
#[must_use]
pub fn results(session: &Session) -> String {
    if let Some(signed) = session.signed() {
        let mut text = serde_json::to_string_pretty(&signed.results).unwrap_or_default();
        text.push('\n');
        return text;
    }
    results_json::to_json(session.results(), ENGINE, &session.recipe().questions)
}

/// Every primary outcome on a line, for people.
fn text(session: &Session) -> String {
    let results = session.results();
    let mut lines = Vec::new();
    for at in At::ALL {
        let here = results.outcomes.iter().filter(|outcome| outcome.at == at && outcome.primary);
        lines.extend(here.map(|outcome| line(outcome, results)));
    }
    lines.push(wording::plain_text("caution"));
    lines.join("\n")
}

fn line(outcome: &Outcome, results: &Results) -> String {
    let label = labels::plain(&labels::label(&outcome.id, outcome.at));
    let value = match &outcome.reason {
        Some(reason) => wording::text(reason, results),
        None => values::shown(outcome).with_unit(),
    };
    format!("{}@{}\t{label}\t{value}", outcome.id, outcome.at.code())
}

/// `rampcrest edit`.
pub fn edit(args: &Args) -> Result<Exit, Failure> {
    let out = out(args)?;
    let mut session = open::session(&args.files[0], args)?;
    let edits = files::read_text(&args.files[1])?;
    let edits = read_edits(edits.as_bytes()).map_err(Failure::refused)?;
    session.apply_together(&edits, &now(args)).map_err(Failure::refused)?;
    save(&session, out, args)
}

/// `rampcrest page`.
pub fn page(args: &Args) -> Result<Exit, Failure> {
    let out = out(args)?;
    let session = open::session(&args.files[0], args)?;
    files::write(out, rendered(&session, args).as_bytes())?;
    Ok(open::exit(Some(&session)))
}

/// The findings page.
#[must_use]
pub fn rendered(session: &Session, args: &Args) -> String {
    record::page::render(session, session.results(), &now(args))
}

/// `rampcrest import`.
pub fn import(args: &Args) -> Result<Exit, Failure> {
    let out = out(args)?;
    let session = open::session(&args.files[0], args)?;
    save(&session, out, args)
}

fn save(session: &Session, out: &Path, args: &Args) -> Result<Exit, Failure> {
    let written = session.save(out);
    written.map_err(|problem| Failure { exit: Exit::CannotWrite, problem })?;
    if args.json {
        let questions = &session.recipe().questions;
        files::print(&json!({ "written": out, "questions": questions }).to_string());
    }
    Ok(open::exit(Some(session)))
}

/// The file named by `-o`.
pub fn out(args: &Args) -> Result<&Path, Failure> {
    args.out.as_deref().ok_or_else(|| Failure::usage("“-o” is missing"))
}

/// The fixed clock, else the time of the desk.
#[must_use]
pub fn now(args: &Args) -> String {
    args.now.clone().unwrap_or_else(crate::document::now)
}
