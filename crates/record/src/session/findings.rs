//! Statements: drafted by the engine, decided by the reader, never silently rewritten.

use analysis::results::{Evidence, Results, Section, Statement};
use serde::{Deserialize, Serialize};

use crate::presentation::{values, wording};

/// What the reader did with a statement.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Status {
    /// Nothing yet: hollow square.
    #[default]
    Draft,
    /// Accepted: solid square.
    Accepted,
    /// Declined: not on the page.
    Declined,
}

/// A rounded value under a statement when the reader took the statement up.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Under {
    /// `id@at`.
    pub key: String,
    /// Value with unit as shown then.
    pub shown: String,
}

/// The reader's side of a statement, as kept in the session.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Finding {
    /// Id of the drafted statement, or `own-N` for the reader's own.
    pub id: String,
    /// Section code.
    pub section: String,
    /// What the reader did.
    pub status: Status,
    /// The text taken up: the reader's own, or the draft as it read then.
    pub text: String,
    /// Whether the text is the reader's.
    pub edited: bool,
    /// The draft as it read then; empty for the reader's own statement.
    pub drafted: String,
    /// Rounded values under it then.
    pub under: Vec<Under>,
}

/// A piece of evidence in words.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct EvidenceShown {
    /// The text.
    pub text: String,
    /// Keys `id@at` of the outcomes it rests on.
    pub keys: Vec<String>,
}

/// A statement as sheet and page show it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct FindingShown {
    /// Id.
    pub id: String,
    /// Section.
    pub section: Section,
    /// What the reader did.
    pub status: Status,
    /// The text.
    pub text: String,
    /// Whether the text is the reader's.
    pub edited: bool,
    /// Whether a rounded value, class or reading under it changed since it was taken up.
    pub stale: bool,
    /// What the draft says now, where that differs from the text.
    pub draft_now: Option<String>,
    /// Keys `id@at` of the outcomes it rests on.
    pub keys: Vec<String>,
    /// Evidence for.
    pub supports: Vec<EvidenceShown>,
    /// Evidence against.
    pub contradicts: Vec<EvidenceShown>,
    /// Not measured, would matter.
    pub open: Vec<EvidenceShown>,
}

/// The sections in their order.
pub const SECTIONS: [Section; 6] = [
    Section::Safety,
    Section::Effort,
    Section::Capacity,
    Section::Circulation,
    Section::Breathing,
    Section::Separate,
];

/// The section of this code.
#[must_use]
pub fn section(code: &str) -> Option<Section> {
    SECTIONS.into_iter().find(|s| s.code() == code)
}

/// Rounded values under a statement now.
#[must_use]
pub fn under(statement: &Statement, results: &Results) -> Vec<Under> {
    let one = |id: &str, at| {
        let key = values::key(id, at);
        let shown = results
            .primary(id, at)
            .map_or_else(|| values::NONE.to_owned(), |o| values::shown(o).with_unit());
        Under { key, shown }
    };
    statement.rests_on.iter().map(|(id, at)| one(id, *at)).collect()
}

/// What the reader takes up when touching `statement` now.
pub(crate) fn taken_up(statement: &Statement, results: &Results) -> Finding {
    let drafted = wording::text(&statement.note, results);
    Finding {
        id: statement.id.to_owned(),
        section: statement.section.code().to_owned(),
        status: Status::Draft,
        text: drafted.clone(),
        edited: false,
        drafted,
        under: under(statement, results),
    }
}

/// Every statement in the order of the sheet, the reader's own last in their section.
#[must_use]
pub fn list(findings: &[Finding], results: &Results) -> Vec<FindingShown> {
    let mut out: Vec<FindingShown> = results
        .statements
        .iter()
        .map(|s| drafted(s, findings.iter().find(|f| f.id == s.id), results))
        .collect();
    let gone = findings.iter().filter(|f| !results.statements.iter().any(|s| s.id == f.id));
    out.extend(gone.filter_map(kept));
    out.sort_by_key(|f| f.section);
    out
}

fn drafted(statement: &Statement, found: Option<&Finding>, results: &Results) -> FindingShown {
    let now = wording::text(&statement.note, results);
    let shown = |list: &[Evidence]| list.iter().map(|e| evidence(e, results)).collect();
    let touched = found.filter(|f| f.status != Status::Draft || f.edited);
    let stale = touched.is_some_and(|f| f.under != under(statement, results) || f.drafted != now);
    let text = touched.map_or_else(|| now.clone(), |f| f.text.clone());
    FindingShown {
        id: statement.id.to_owned(),
        section: statement.section,
        status: found.map_or(Status::Draft, |f| f.status),
        edited: touched.is_some_and(|f| f.edited),
        stale,
        draft_now: (text != now).then_some(now),
        text,
        keys: statement.rests_on.iter().map(|(id, at)| values::key(id, *at)).collect(),
        supports: shown(&statement.supports),
        contradicts: shown(&statement.contradicts),
        open: shown(&statement.open),
    }
}

/// A finding without a draft under it: the reader's own, or one whose draft is no longer made.
fn kept(finding: &Finding) -> Option<FindingShown> {
    let own = finding.drafted.is_empty();
    if !own && finding.status == Status::Draft && !finding.edited {
        return None;
    }
    Some(FindingShown {
        id: finding.id.clone(),
        section: section(&finding.section)?,
        status: finding.status,
        text: finding.text.clone(),
        edited: finding.edited,
        stale: !own,
        draft_now: None,
        keys: finding.under.iter().map(|u| u.key.clone()).collect(),
        supports: Vec::new(),
        contradicts: Vec::new(),
        open: Vec::new(),
    })
}

fn evidence(evidence: &Evidence, results: &Results) -> EvidenceShown {
    EvidenceShown {
        text: wording::text(&evidence.note, results),
        keys: evidence.rests_on.iter().map(|(id, at)| values::key(id, *at)).collect(),
    }
}
