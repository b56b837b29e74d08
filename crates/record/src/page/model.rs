//! What stands on the page, before any markup.

use std::borrow::Cow;

use analysis::results::{Outcome, Results, Section};

use super::facts_lines;
use crate::presentation::key_table::{self, Row};
use crate::presentation::{values, wording};
use crate::session::findings::{FindingShown, Status};
use crate::session::{ENGINE, Session, frozen};

/// Lines that question, person, test, safety and conclusion may take together on page 1; what does
/// not fit stands on the next page.
const LINES: usize = 18;

/// Letters in one line of the conclusion.
const LINE: usize = 116;

/// Letters in one line beside a label.
const BESIDE: usize = 104;

/// Letters of a comparison that fit in its column.
const AGAINST: usize = 34;

/// Letters of a reason that fit in one line of the key table.
const REASON: usize = 62;

/// Drafts that give way to all others on page 1: they list what follows from the rest.
const GIVE_WAY: &[&str] = &["circulation-explanations", "fick-forward-bound"];

/// The page's content.
pub(super) struct Model<'a> {
    pub session: &'a Session,
    /// Results on the page: frozen ones where the session is signed.
    pub results: Cow<'a, Results>,
    pub now: &'a str,
    pub identity: Vec<String>,
    pub question: String,
    pub person: Vec<String>,
    pub test: Vec<String>,
    pub safety: Vec<String>,
    pub findings: Vec<FindingShown>,
    /// Indices of `findings` that stand on page 1.
    pub conclusion: Vec<usize>,
    /// Statements left for the next page.
    pub further: usize,
    pub rows: Vec<Row>,
    /// Keys whose signed value the present engine does not give.
    pub differing: Vec<String>,
}

impl<'a> Model<'a> {
    pub fn new(session: &'a Session, results: &'a Results, now: &'a str) -> Self {
        let (results, differing) = match session.signed() {
            Some(signed) => frozen::shown(&signed.results, results),
            None => (Cow::Borrowed(results), Vec::new()),
        };
        let facts = &session.judgement().facts;
        let findings: Vec<FindingShown> = session
            .findings(&results)
            .into_iter()
            .filter(|f| f.status != Status::Declined)
            .collect();
        let question = facts_lines::stated(facts.test.question.as_deref());
        let person = facts_lines::person(facts);
        let test = facts_lines::test(facts, &results, session.recording());
        let safety = facts_lines::safety(facts);
        let rows = key_table::rows(&results, &session.judgement().settings);
        let above = lines(&question, BESIDE)
            + lines(&person.join("  ·  "), BESIDE)
            + lines(&test.join("  ·  "), BESIDE)
            + lines(&safety.join(" "), BESIDE)
            + rows.iter().map(wrapped).sum::<usize>();
        let (conclusion, further) = conclusion(&findings, LINES.saturating_sub(above));
        Self {
            session,
            now,
            identity: facts_lines::identity(facts),
            question,
            person,
            test,
            safety,
            rows,
            findings,
            conclusion,
            further,
            results,
            differing,
        }
    }

    /// Findings of `section`.
    pub fn of(&self, section: Section) -> impl Iterator<Item = &FindingShown> {
        self.findings.iter().filter(move |f| f.section == section)
    }

    /// Primary outcomes, in the order of the engine.
    pub fn primaries(&self) -> impl Iterator<Item = &Outcome> {
        self.results.outcomes.iter().filter(|o| o.primary)
    }

    /// Version line.
    pub fn version(&self) -> String {
        let engine = self.session.signed().map_or(ENGINE, |s| s.engine.as_str());
        wording::with("page-version", &[("version", engine.to_owned())])
    }

    /// Label of an outcome's key.
    pub fn label(&self, key: &str) -> String {
        self.results
            .outcomes
            .iter()
            .map(values::shown)
            .find(|s| s.key == key)
            .map_or_else(|| key.to_owned(), |s| s.label)
    }
}

/// Further lines that a row of the key table takes.
fn wrapped(row: &Row) -> usize {
    match &row.reason {
        Some(reason) => lines(reason, REASON) - 1,
        None if row.is_word => 0,
        None => lines(&row.against, AGAINST) - 1,
    }
}

/// Lines that `text` takes.
fn lines(text: &str, letters: usize) -> usize {
    text.chars().count().div_ceil(letters).max(1)
}

/// Statements of page 1: accepted ones first come in, then drafts, in the order of the sheet.
/// Safety has its box, and what would separate the explanations its own line.
fn conclusion(findings: &[FindingShown], room: usize) -> (Vec<usize>, usize) {
    let concerns = |f: &FindingShown| {
        !matches!(f.section, Section::Safety | Section::Separate) && f.id != "circulation-caveat"
    };
    let candidates: Vec<usize> = (0..findings.len()).filter(|i| concerns(&findings[*i])).collect();
    let mut room = room;
    let mut taken = Vec::new();
    let gives_way = |f: &FindingShown| GIVE_WAY.contains(&f.id.as_str());
    let rank = |f: &FindingShown| match f.status {
        Status::Accepted => 0,
        _ if !gives_way(f) => 1,
        _ => 2,
    };
    for wanted in 0..3 {
        for i in candidates.iter().copied().filter(|i| rank(&findings[*i]) == wanted) {
            let lines = lines(&findings[i].text, LINE);
            if lines <= room {
                room -= lines;
                taken.push(i);
            }
        }
    }
    taken.sort_unstable();
    let further = candidates.len() - taken.len();
    (taken, further)
}
