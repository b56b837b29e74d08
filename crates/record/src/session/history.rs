//! The history: an audit list to which entries are only ever added.

use analysis::results::{Kind, Results};
use serde::{Deserialize, Serialize};

use super::edit::Edit;
use crate::presentation::values;

/// What happened.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Action {
    /// The table was imported.
    Imported,
    /// An edit was made.
    Edited,
    /// The edit was taken back.
    Undone,
    /// The edit was made again.
    Redone,
}

/// One entry.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Entry {
    /// When, RFC 3339 with offset.
    pub at: String,
    /// What happened.
    pub action: Action,
    /// The edit, as made.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub edit: Option<Edit>,
    /// Readings and classes that it changed.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub changed: Vec<Change>,
}

/// A reading or class that an edit changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Change {
    /// `id@at`.
    pub key: String,
    /// As it was.
    pub from: String,
    /// As it became.
    pub to: String,
}

/// Readings and classes that differ between two derivations, as shown.
#[must_use]
pub fn changes(before: &Results, after: &Results) -> Vec<Change> {
    let readings = |results: &Results| -> Vec<(String, String)> {
        results
            .outcomes
            .iter()
            .filter(|o| o.primary && o.kind != Kind::Quantity)
            .map(|o| {
                let shown = values::shown(o);
                (shown.key, shown.value)
            })
            .collect()
    };
    let (old, new) = (readings(before), readings(after));
    let absent = || values::NONE.to_owned();
    let find = |list: &[(String, String)], key: &str| {
        list.iter().find(|(k, _)| k == key).map_or_else(absent, |(_, v)| v.clone())
    };
    let mut keys: Vec<&String> = old.iter().map(|(k, _)| k).collect();
    keys.extend(new.iter().map(|(k, _)| k).filter(|k| !old.iter().any(|(o, _)| o == *k)));
    keys.into_iter()
        .map(|key| Change { key: key.clone(), from: find(&old, key), to: find(&new, key) })
        .filter(|c| c.from != c.to)
        .collect()
}
