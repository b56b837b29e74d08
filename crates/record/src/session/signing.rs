//! What a reader is told before signing. Nothing here blocks: one confirmation, then it is signed,
//! and the page prints "not stated".

use super::Session;
use super::findings::Status;

/// Something that is not there yet.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Missing {
    /// A minimal fact is not stated: its path and label.
    Fact {
        /// Path in `rampcrest-facts/1`.
        path: &'static str,
        /// Code of its label in the catalogue.
        label: &'static str,
    },
    /// Statements that the reader neither accepted nor declined.
    Undecided(Vec<String>),
    /// Accepted statements under which a value changed.
    Stale(Vec<String>),
    /// Columns about which a question is open.
    Questions(Vec<String>),
}

/// The minimal facts (clinical rules 1): path, and code of the label.
pub const MINIMAL: &[(&str, &str)] = &[
    ("test.question", "fact-question"),
    ("test.diagnoses", "fact-diagnoses"),
    ("test.devices", "fact-devices"),
    ("test.rhythm", "fact-rhythm"),
    ("test.rate_slowing_drug.taken", "fact-drug"),
    ("subject.age_years", "fact-age"),
    ("subject.sex", "fact-sex"),
    ("subject.height_cm", "fact-height"),
    ("subject.mass_kg", "fact-mass"),
    ("subject.hb", "fact-hb"),
    ("subject.fev1_l", "fact-fev1"),
    ("test.mode", "fact-mode"),
    ("test.protocol", "fact-protocol"),
    ("test.fio2", "fact-fio2"),
    ("test.stop_reason", "fact-stop"),
    ("test.limiting_symptom", "fact-symptom"),
    ("test.borg", "fact-borg"),
    ("test.ecg.change", "fact-ecg"),
    ("test.ecg.read_by", "fact-ecg-reader"),
];

/// Everything that is missing, in the order of the page.
#[must_use]
pub fn missing_for_signing(session: &Session) -> Vec<Missing> {
    let facts = &session.judgement().facts;
    let mut out: Vec<Missing> = MINIMAL
        .iter()
        .filter(|(path, _)| facts.get(path).is_none())
        .map(|(path, label)| Missing::Fact { path, label })
        .collect();
    let bp = facts.events.iter().any(|e| e.sys_mmhg.is_some());
    if !bp && !session.recording().has(analysis::quantity::Quantity::SysBp) {
        out.push(Missing::Fact { path: "events", label: "fact-bp" });
    }
    let findings = session.findings(session.results());
    let ids = |wanted: &dyn Fn(&super::findings::FindingShown) -> bool| -> Vec<String> {
        findings.iter().filter(|f| wanted(f)).map(|f| f.id.clone()).collect()
    };
    let undecided = ids(&|f| f.status == Status::Draft);
    let stale = ids(&|f| f.status == Status::Accepted && f.stale);
    let questions: Vec<String> =
        session.recipe().questions.iter().map(|q| q.column.clone()).collect();
    if !undecided.is_empty() {
        out.push(Missing::Undecided(undecided));
    }
    if !stale.is_empty() {
        out.push(Missing::Stale(stale));
    }
    if !questions.is_empty() {
        out.push(Missing::Questions(questions));
    }
    out
}
