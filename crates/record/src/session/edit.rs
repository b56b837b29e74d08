//! What can be changed in a session: `rampcrest-edits/1`. The window makes the same edits.

use std::collections::BTreeMap;

use analysis::decisions::{Mark, Phase};
use analysis::predicted::sets::Predicts;
use analysis::settings::Averaging;
use serde::{Deserialize, Serialize};
use serde_json::Value;

use super::codes::{self, AveragingMethod};
use super::findings::Status;
use super::problems;
use crate::json;
use crate::problem::Problem;

/// One change of a session.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "edit", rename_all = "kebab-case", deny_unknown_fields)]
pub enum Edit {
    /// A phase starts here; snaps to the end of a breath.
    SetBoundary {
        /// Which phase.
        #[serde(with = "codes::phase")]
        phase: Phase,
        /// Start, s, the file's own time.
        t_s: f64,
    },
    /// The start of a phase goes back to the proposal.
    ClearBoundary {
        /// Which phase.
        #[serde(with = "codes::phase")]
        phase: Phase,
    },
    /// Averaging of charts and value strip.
    SetAveraging {
        /// Method.
        method: AveragingMethod,
        /// Seconds or breaths.
        n: u32,
    },
    /// A fact by its path, such as `test.rhythm`; `null` makes it "not stated".
    SetFact {
        /// Path in `rampcrest-facts/1`.
        path: String,
        /// Its value.
        value: Value,
    },
    /// Leaves breaths out of every number.
    ExcludeBreaths {
        /// From, s.
        from_s: f64,
        /// To, s.
        to_s: f64,
        /// Why.
        reason: String,
    },
    /// Takes breaths in again that were left out with these ends.
    IncludeBreaths {
        /// From, s.
        from_s: f64,
        /// To, s.
        to_s: f64,
    },
    /// The reader's threshold.
    SetMark {
        /// Which.
        #[serde(with = "codes::mark")]
        mark: Mark,
        /// Time, s.
        t_s: f64,
    },
    /// The threshold goes back to the proposal.
    ClearMark {
        /// Which.
        #[serde(with = "codes::mark")]
        mark: Mark,
    },
    /// Chooses predicted sets.
    SetPredicted {
        /// Set of peak V̇O₂.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        vo2: Option<String>,
        /// Set of peak HR.
        #[serde(default, skip_serializing_if = "Option::is_none")]
        hr: Option<String>,
        /// Sets of other quantities by their code, such as `work-rate`.
        #[serde(default, skip_serializing_if = "BTreeMap::is_empty")]
        others: BTreeMap<String, String>,
    },
    /// Adds a laboratory's own set, the text of a file `rampcrest-predicted/1`.
    AddPredictedSet {
        /// The text.
        text: String,
    },
    /// Shows or hides the model of a normal response.
    SetOverlayShown {
        /// Whether it is shown.
        shown: bool,
    },
    /// The two instants of the two-factor table; without them, the ends of the late window.
    SetTwoFactor {
        /// From, s.
        #[serde(default)]
        from_s: Option<f64>,
        /// To, s.
        #[serde(default)]
        to_s: Option<f64>,
    },
    /// A setting by its path, such as `fick.extraction_limit`.
    SetSetting {
        /// Path in the settings of the session file.
        path: String,
        /// Its value.
        value: Value,
    },
    /// A timed event, as in `rampcrest-facts/1`.
    AddEvent {
        /// The event.
        event: Value,
    },
    /// Removes the event at this place of the list.
    RemoveEvent {
        /// Place, from 0.
        index: usize,
    },
    /// The reader's own text of a statement.
    FindingText {
        /// Which.
        id: String,
        /// The text.
        text: String,
    },
    /// Accepts or declines a statement, or makes it a draft again.
    FindingStatus {
        /// Which.
        id: String,
        /// What becomes of it.
        status: Status,
    },
    /// A statement of the reader's own.
    FindingAdd {
        /// Section code.
        section: String,
        /// The text.
        text: String,
    },
    /// Signs: the results are frozen, the session is locked.
    Sign {
        /// Typed name.
        name: String,
        /// Role.
        role: String,
        /// Registration.
        registration: String,
        /// Meaning of the signature.
        meaning: String,
    },
}

impl Edit {
    /// The edit that chooses `averaging`.
    #[must_use]
    pub fn averaging(averaging: Averaging) -> Self {
        let (method, n) = AveragingMethod::of(averaging);
        Edit::SetAveraging { method, n }
    }

    /// The edit that chooses the set `id` for `quantity`.
    #[must_use]
    pub fn choose_set(quantity: Predicts, id: &str) -> Self {
        let (mut vo2, mut hr, mut others) = (None, None, BTreeMap::new());
        match quantity {
            Predicts::Vo2Peak => vo2 = Some(id.to_owned()),
            Predicts::HrPeak => hr = Some(id.to_owned()),
            other => {
                others.insert(other.code().to_owned(), id.to_owned());
            }
        }
        Edit::SetPredicted { vo2, hr, others }
    }

    /// Stable code, as in the file.
    #[must_use]
    pub fn code(&self) -> &'static str {
        match self {
            Edit::SetBoundary { .. } => "set-boundary",
            Edit::ClearBoundary { .. } => "clear-boundary",
            Edit::SetAveraging { .. } => "set-averaging",
            Edit::SetFact { .. } => "set-fact",
            Edit::ExcludeBreaths { .. } => "exclude-breaths",
            Edit::IncludeBreaths { .. } => "include-breaths",
            Edit::SetMark { .. } => "set-mark",
            Edit::ClearMark { .. } => "clear-mark",
            Edit::SetPredicted { .. } => "set-predicted",
            Edit::AddPredictedSet { .. } => "add-predicted-set",
            Edit::SetOverlayShown { .. } => "set-overlay-shown",
            Edit::SetTwoFactor { .. } => "set-two-factor",
            Edit::SetSetting { .. } => "set-setting",
            Edit::AddEvent { .. } => "add-event",
            Edit::RemoveEvent { .. } => "remove-event",
            Edit::FindingText { .. } => "finding-text",
            Edit::FindingStatus { .. } => "finding-status",
            Edit::FindingAdd { .. } => "finding-add",
            Edit::Sign { .. } => "sign",
        }
    }

    /// What it does in two words, for the undo button and the history.
    #[must_use]
    pub fn label(&self) -> String {
        crate::presentation::wording::plain_text(&format!("edit-{}", self.code()))
    }
}

/// Reads a list of edits, `rampcrest-edits/1`.
///
/// # Errors
/// It is not such a list; `where_` names the index of the first edit that cannot be read.
pub fn read_edits(bytes: &[u8]) -> Result<Vec<Edit>, Problem> {
    let text = std::str::from_utf8(bytes)
        .map_err(|_| problems::edits("the edits", "It is not UTF-8 text."))?;
    let value: Value = json::read(text)
        .map_err(|e| problems::edits(format!("the edits {}", e.path), format!("{}.", e.what)))?;
    let object = value.as_object().ok_or_else(|| problems::edits("the edits", "Not an object."))?;
    if object.get("schema").and_then(Value::as_str) != Some("rampcrest-edits/1") {
        return Err(problems::edits("schema", "It is not “rampcrest-edits/1”."));
    }
    if let Some(key) = object.keys().find(|k| !matches!(k.as_str(), "schema" | "edits")) {
        return Err(problems::edits(key.clone(), "This field is not known."));
    }
    let list = object
        .get("edits")
        .and_then(Value::as_array)
        .ok_or_else(|| problems::edits("edits", "There is no list of edits."))?;
    list.iter()
        .enumerate()
        .map(|(i, edit)| {
            json::from_value(edit.clone())
                .map_err(|e| problems::edits(format!("edits[{i}]"), format!("{}.", e.what)))
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The example of the contract, word for word apart from its ellipses.
    const EXAMPLE: &str = r#"{"schema":"rampcrest-edits/1","edits":[
        {"edit":"set-boundary","phase":"ramp","t_s":372},
        {"edit":"set-averaging","method":"rolling-s","n":30},
        {"edit":"set-fact","path":"test.rhythm","value":"sinus"},
        {"edit":"exclude-breaths","from_s":1,"to_s":2,"reason":"cough"},
        {"edit":"set-mark","mark":"vt1","t_s":600},
        {"edit":"set-predicted","vo2":"a","hr":"b"},
        {"edit":"finding-text","id":"x","text":"y"},
        {"edit":"finding-status","id":"x","status":"accepted"},
        {"edit":"finding-add","section":"effort","text":"y"},
        {"edit":"sign","name":"n","role":"r","registration":"1","meaning":"m"}]}"#;

    #[test]
    fn the_contracts_example_is_read_and_written_alike() {
        let edits = read_edits(EXAMPLE.as_bytes()).expect("reads");
        assert_eq!(edits.len(), 10);
        assert_eq!(edits[0], Edit::SetBoundary { phase: Phase::Ramp, t_s: 372.0 });
        for edit in edits {
            let text = serde_json::to_string(&edit).expect("writes");
            assert!(text.starts_with(&format!("{{\"edit\":\"{}\"", edit.code())), "{text}");
            assert_eq!(serde_json::from_str::<Edit>(&text).expect("reads"), edit);
        }
    }

    #[test]
    fn a_bad_edit_is_named_by_its_index() {
        let bad = r#"{"schema":"rampcrest-edits/1","edits":[
            {"edit":"set-overlay-shown","shown":true},{"edit":"set-boundary","phase":"sprint","t_s":1}]}"#;
        assert_eq!(read_edits(bad.as_bytes()).expect_err("no such phase").where_, "edits[1]");
        let unknown = r#"{"schema":"rampcrest-edits/1","edits":[{"edit":"sign","name":"n","role":"r",
            "registration":"1","meaning":"m","extra":1}]}"#;
        assert_eq!(read_edits(unknown.as_bytes()).expect_err("extra field").where_, "edits[0]");
        let twice = r#"{"schema":"rampcrest-edits/1","edits":[],"edits":[]}"#;
        assert!(read_edits(twice.as_bytes()).expect_err("key twice").what.contains("twice"));
    }
}
