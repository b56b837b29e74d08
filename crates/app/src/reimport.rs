//! An open question about a column, answered in the window: the file is read anew with the answer.

use std::sync::Arc;

use record::import::{Answers, Imported, import};
use record::problem::Problem;
use record::provenance::{Decided, LeftOut, Reading, Target};
use record::session::history::Action;
use record::session::{Edit, Session};

use crate::opening::settings;

/// What came of reading anew.
#[derive(Debug)]
pub struct Anew {
    /// The session with the column as answered.
    pub session: Session,
    /// The reader's changes that could not be made again on it.
    pub lost: Vec<Edit>,
}

/// Reads the file of `session` anew, `column` read as `reading`. Facts and events are kept; the
/// reader's changes are made again.
///
/// # Errors
/// The answer is no reading, the file is refused with it, or `now` is not RFC 3339.
pub fn answered(
    session: &Session,
    column: &str,
    reading: &str,
    now: &str,
) -> Result<Anew, Problem> {
    let mut answers = given(session);
    answers.add(&format!("{column}={reading}"))?;
    let bytes = session.source().unpack()?;
    let name = session.source().name.clone();
    let Imported { recording, recipe, .. } = import(&bytes, &name, &answers, None)?;
    let facts = session.judgement().facts.clone();
    let recording = Arc::new(recording);
    let mut anew = Session::from_import(&bytes, &name, recipe, recording, facts, settings(), now)?;
    let lost = made(session).into_iter().filter(|edit| anew.apply(edit, now).is_err()).collect();
    Ok(Anew { session: anew, lost })
}

/// The answers that the session's recipe already holds.
fn given(session: &Session) -> Answers {
    let recipe = session.recipe();
    let mut answers = Answers::none();
    answers.decimal = Some(recipe.decimal);
    let headers: Vec<&str> = recipe
        .columns
        .iter()
        .map(|c| c.header.as_str())
        .chain(recipe.left_out.iter().filter_map(|left| match left {
            LeftOut::Column { header, .. } => Some(header.as_str()),
            LeftOut::Rows { .. } => None,
        }))
        .collect();
    let name = |index: usize, header: &str| {
        let own = !header.is_empty() && headers.iter().filter(|h| **h == header).count() == 1;
        if own { header.to_owned() } else { format!("#{}", index + 1) }
    };
    for c in &recipe.columns {
        if matches!(c.decided, Decided::Answer | Decided::Profile) {
            answers.set(name(c.index, &c.header), c.reading);
        }
    }
    for left in &recipe.left_out {
        if let LeftOut::Column { index, header, code, .. } = left
            && code == "answered"
        {
            let leave = Reading { target: Target::LeaveOut, unit: analysis::unit::Unit::One };
            answers.set(name(*index, header), leave);
        }
    }
    answers
}

/// The changes that stand, in their order; facts and events are in the facts already.
fn made(session: &Session) -> Vec<Edit> {
    let mut stand: Vec<&Edit> = Vec::new();
    for entry in session.history() {
        match (entry.action, &entry.edit) {
            (Action::Edited | Action::Redone, Some(edit)) => stand.push(edit),
            (Action::Undone, Some(edit)) => {
                if let Some(last) = stand.iter().rposition(|e| *e == edit) {
                    stand.remove(last);
                }
            }
            _ => {}
        }
    }
    let in_facts = |e: &Edit| {
        matches!(e, Edit::SetFact { .. } | Edit::AddEvent { .. } | Edit::RemoveEvent { .. })
    };
    stand.into_iter().filter(|e| !in_facts(e)).cloned().collect()
}
