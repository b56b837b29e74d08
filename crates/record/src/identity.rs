//! Who the test is of. Lives from this crate outward, never reaches the engine, and hides itself
//! from debug output, so that no panic or log text can carry it.

use std::fmt;

use serde::{Deserialize, Serialize};

/// Identity of the person and the test. Every field may be unknown.
#[derive(Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Identity {
    /// Name or pseudonym.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub label: Option<String>,
    /// Patient or study number.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub number: Option<String>,
    /// Date of birth, `YYYY-MM-DD`.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub birth_date: Option<String>,
    /// Time of the test.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub test_time: Option<String>,
    /// Laboratory.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lab: Option<String>,
    /// Who asked for the test.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub referrer: Option<String>,
}

impl Identity {
    /// Whether nothing is stated.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        *self == Self::default()
    }
}

impl fmt::Debug for Identity {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("Identity(hidden)")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn debug_output_holds_no_identity() {
        let identity = Identity { label: Some("A. Person".into()), ..Identity::default() };
        let shown = format!("{identity:?} {:?}", Some(&identity));
        assert!(!shown.contains("Person"), "{shown}");
        assert!(!identity.is_empty());
    }
}
