//! `rampcrest-session/1`: how a session is written. These types are the format; the types of the
//! program may change without it.

use std::collections::BTreeSet;
use std::sync::{Arc, OnceLock};

use analysis::decisions::{Decisions, Exclusion, PhaseStarts};
use analysis::settings::Settings;
use serde::{Deserialize, Serialize};
use serde_json::Value;

use super::findings::Finding;
use super::history::Entry;
use super::settings_file::SettingsFile;
use super::undo::UndoStack;
use super::{ENGINE, Judgement, Session, Signed, Source, State, problems};
use crate::facts_file::{self, FactsFile};
use crate::import::{self, Recipe};
use crate::json;
use crate::presentation::wording;
use crate::problem::Problem;

/// Name and version of the format.
pub const SCHEMA: &str = "rampcrest-session/1";

/// Largest session file that is read, bytes: a source of the largest size in base64, uncompressed,
/// and room for the rest.
const MAX_FILE: usize = 64 << 20;

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct SessionFile {
    schema: String,
    engine: String,
    notice: String,
    state: StateFile,
    source: SourceFile,
    recipe: Recipe,
    facts: FactsFile,
    /// Paths of the facts that the reader set; the others came with a file.
    facts_by_reader: BTreeSet<String>,
    /// Where each event of `facts` came from, in the same order.
    event_sources: Vec<facts_file::Source>,
    decisions: DecisionsFile,
    settings: SettingsFile,
    findings: Vec<Finding>,
    history: Vec<Entry>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    signature: Option<SignatureFile>,
    /// Results as they were when signed.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    results: Option<Value>,
}

#[derive(Clone, Copy, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
enum StateFile {
    Draft,
    Signed,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct SourceFile {
    name: String,
    size: usize,
    sha256: String,
    /// Raw deflate, base64.
    deflate: String,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct DecisionsFile {
    phases: PhasesFile,
    excluded: Vec<ExcludedFile>,
    vt1_s: Option<f64>,
    vt2_s: Option<f64>,
    two_factor_s: Option<(f64, f64)>,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct PhasesFile {
    rest: Option<f64>,
    warm_up: Option<f64>,
    ramp: Option<f64>,
    recovery: Option<f64>,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct ExcludedFile {
    from_s: f64,
    to_s: f64,
    reason: String,
}

#[derive(Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct SignatureFile {
    name: String,
    role: String,
    registration: String,
    meaning: String,
    at: String,
    engine: String,
}

impl DecisionsFile {
    fn of(judgement: &Judgement) -> Self {
        let d = &judgement.decisions;
        let reasons = judgement.exclusion_reasons.iter();
        let excluded = d.excluded.iter().zip(reasons).map(|(e, reason)| ExcludedFile {
            from_s: e.from_s,
            to_s: e.to_s,
            reason: reason.clone(),
        });
        let p = d.phases;
        Self {
            phases: PhasesFile {
                rest: p.rest,
                warm_up: p.warm_up,
                ramp: p.ramp,
                recovery: p.recovery,
            },
            excluded: excluded.collect(),
            vt1_s: d.vt1_s,
            vt2_s: d.vt2_s,
            two_factor_s: d.two_factor_s,
        }
    }

    fn into_parts(self) -> (Decisions, Vec<String>) {
        let p = self.phases;
        let decisions = Decisions {
            phases: PhaseStarts {
                rest: p.rest,
                warm_up: p.warm_up,
                ramp: p.ramp,
                recovery: p.recovery,
            },
            excluded: self
                .excluded
                .iter()
                .map(|e| Exclusion { from_s: e.from_s, to_s: e.to_s })
                .collect(),
            vt1_s: self.vt1_s,
            vt2_s: self.vt2_s,
            two_factor_s: self.two_factor_s,
        };
        (decisions, self.excluded.into_iter().map(|e| e.reason).collect())
    }
}

impl Session {
    /// The session as a file. The same session gives the same bytes.
    #[must_use]
    pub fn write(&self) -> Vec<u8> {
        let j = &self.judgement;
        let signed = self.signed();
        let file = SessionFile {
            schema: SCHEMA.to_owned(),
            engine: ENGINE.to_owned(),
            notice: wording::plain_text("caution"),
            state: if signed.is_some() { StateFile::Signed } else { StateFile::Draft },
            source: SourceFile {
                name: self.source.name.clone(),
                size: self.source.size,
                sha256: self.source.sha256.clone(),
                deflate: self.source.packed.to_string(),
            },
            recipe: self.recipe.clone(),
            facts: j.facts.clone(),
            facts_by_reader: j.by_reader.clone(),
            event_sources: j.event_sources.clone(),
            decisions: DecisionsFile::of(j),
            settings: SettingsFile::of(&j.settings),
            findings: j.findings.clone(),
            history: self.history.clone(),
            signature: signed.map(|s| SignatureFile {
                name: s.name.clone(),
                role: s.role.clone(),
                registration: s.registration.clone(),
                meaning: s.meaning.clone(),
                at: s.at.clone(),
                engine: s.engine.clone(),
            }),
            results: signed.map(|s| s.results.clone()),
        };
        let mut bytes = serde_json::to_vec_pretty(&file).unwrap_or_default();
        bytes.push(b'\n');
        bytes
    }

    /// Reads a session file. `given` lends the predicted sets, which a session does not hold.
    ///
    /// # Errors
    /// It is no such session, is damaged, or its source no longer reads as its recipe says.
    pub fn read(bytes: &[u8], given: &Settings) -> Result<Self, Problem> {
        if bytes.len() > MAX_FILE {
            return Err(problems::too_large(bytes.len(), MAX_FILE));
        }
        let text = std::str::from_utf8(bytes)
            .map_err(|_| problems::file("the session", "It is not UTF-8 text."))?;
        let file: SessionFile = json::read(text).map_err(|e| {
            let place = if e.path.is_empty() { "the session".to_owned() } else { e.path };
            problems::file(place, format!("{}.", e.what))
        })?;
        if file.schema != SCHEMA {
            return Err(problems::file("schema", format!("“{}” is not {SCHEMA}.", file.schema)));
        }
        file.into_session(given)
    }
}

/// Whether `bytes` look like a session rather than a table.
#[must_use]
pub fn is_session(bytes: &[u8]) -> bool {
    let head = &bytes[..bytes.len().min(200)];
    bytes.iter().find(|b| !b.is_ascii_whitespace()) == Some(&b'{')
        && String::from_utf8_lossy(head).contains("rampcrest-session/")
}

impl SessionFile {
    fn into_session(self, given: &Settings) -> Result<Session, Problem> {
        // The same checks as for a facts file: ranges, units, order of the phases.
        let facts = FactsFile::from_value(self.facts.to_value())?;
        if self.event_sources.len() != facts.events.len() {
            return Err(problems::file("event_sources", "One stands for each event."));
        }
        let state = match (self.state, self.signature, self.results) {
            (StateFile::Draft, None, None) => State::Draft,
            (StateFile::Signed, Some(s), Some(results)) => State::Signed(Box::new(Signed {
                name: s.name,
                role: s.role,
                registration: s.registration,
                meaning: s.meaning,
                at: s.at,
                engine: s.engine,
                results,
            })),
            _ => {
                let what = "State, signature and frozen results do not go together.";
                return Err(problems::file("state", what));
            }
        };
        let source = Source {
            name: self.source.name,
            size: self.source.size,
            sha256: self.source.sha256,
            packed: self.source.deflate.into(),
        };
        let recording = import::recording_from(&source.unpack()?, &self.recipe)?;
        let (decisions, exclusion_reasons) = self.decisions.into_parts();
        let judgement = Judgement {
            facts,
            by_reader: self.facts_by_reader,
            event_sources: self.event_sources,
            decisions,
            exclusion_reasons,
            settings: self.settings.checked()?.to_engine(given),
            findings: self.findings,
        };
        Ok(Session {
            source,
            recipe: self.recipe,
            recording: Arc::new(recording),
            judgement: Arc::new(judgement),
            history: self.history,
            state,
            undo: UndoStack::default(),
            derived: OnceLock::new(),
        })
    }
}
