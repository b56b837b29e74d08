//! Strict reading of JSON: duplicate keys are refused, and every error names its path.

use std::collections::BTreeSet;
use std::fmt;

use serde::Deserializer;
use serde::de::{DeserializeOwned, DeserializeSeed, Error, MapAccess, SeqAccess, Visitor};

/// What is wrong with a JSON text, and where.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct JsonError {
    /// Path inside the document, such as `subject.hb.unit`; empty for the document itself.
    pub path: String,
    /// What is wrong.
    pub what: String,
}

/// Reads `text` as `T`.
///
/// # Errors
/// Not JSON, a key twice in one object, or not a `T`; with its path.
pub fn read<T: DeserializeOwned>(text: &str) -> Result<T, JsonError> {
    refuse_duplicates(text)?;
    let mut reader = serde_json::Deserializer::from_str(text);
    let value = serde_path_to_error::deserialize(&mut reader).map_err(|e| located(&e))?;
    reader.end().map_err(|e| JsonError { path: String::new(), what: e.to_string() })?;
    Ok(value)
}

/// Reads a parsed value as `T`.
///
/// # Errors
/// Not a `T`; with its path.
pub fn from_value<T: DeserializeOwned>(value: serde_json::Value) -> Result<T, JsonError> {
    serde_path_to_error::deserialize(value).map_err(|e| located(&e))
}

fn located(error: &serde_path_to_error::Error<serde_json::Error>) -> JsonError {
    let path = error.path().to_string();
    JsonError {
        path: if path == "." { String::new() } else { path },
        what: error.inner().to_string(),
    }
}

/// Refuses a text in which one object has the same key twice.
///
/// # Errors
/// The first such key, or what makes the text no JSON.
pub fn refuse_duplicates(text: &str) -> Result<(), JsonError> {
    let mut doubled = None;
    let mut reader = serde_json::Deserializer::from_str(text);
    let seed = Walk { path: String::new(), doubled: &mut doubled };
    let walked = seed.deserialize(&mut reader).and_then(|()| reader.end());
    match (doubled, walked) {
        (Some(path), _) => Err(JsonError { path, what: "the same key stands here twice".into() }),
        (None, Err(e)) => Err(JsonError { path: String::new(), what: e.to_string() }),
        (None, Ok(())) => Ok(()),
    }
}

/// Walks a value and looks at nothing but keys.
struct Walk<'a> {
    path: String,
    doubled: &'a mut Option<String>,
}

impl<'de> DeserializeSeed<'de> for Walk<'_> {
    type Value = ();

    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<(), D::Error> {
        deserializer.deserialize_any(self)
    }
}

impl<'de> Visitor<'de> for Walk<'_> {
    type Value = ();

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("JSON")
    }

    fn visit_bool<E>(self, _: bool) -> Result<(), E> {
        Ok(())
    }

    fn visit_i64<E>(self, _: i64) -> Result<(), E> {
        Ok(())
    }

    fn visit_u64<E>(self, _: u64) -> Result<(), E> {
        Ok(())
    }

    fn visit_f64<E>(self, _: f64) -> Result<(), E> {
        Ok(())
    }

    fn visit_str<E>(self, _: &str) -> Result<(), E> {
        Ok(())
    }

    fn visit_unit<E>(self) -> Result<(), E> {
        Ok(())
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut seq: A) -> Result<(), A::Error> {
        let mut index = 0_usize;
        let path = self.path;
        while seq
            .next_element_seed(Walk { path: format!("{path}[{index}]"), doubled: self.doubled })?
            .is_some()
        {
            index += 1;
        }
        Ok(())
    }

    fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<(), A::Error> {
        let mut seen = BTreeSet::new();
        while let Some(key) = map.next_key::<String>()? {
            let path =
                if self.path.is_empty() { key.clone() } else { format!("{}.{key}", self.path) };
            if !seen.insert(key) {
                *self.doubled = Some(path);
                return Err(A::Error::custom("duplicate key"));
            }
            map.next_value_seed(Walk { path, doubled: self.doubled })?;
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_key_twice_is_refused_with_its_path() {
        let error = refuse_duplicates(r#"{"a":[{"b":1},{"c":2,"c":3}]}"#).unwrap_err();
        assert_eq!(error.path, "a[1].c");
        assert!(refuse_duplicates(r#"{"a":{"b":1},"b":[1.5,null,true,"x",-3]}"#).is_ok());
        assert!(refuse_duplicates("{").is_err());
        assert!(refuse_duplicates("{} x").is_err());
    }

    #[test]
    fn a_deep_document_is_an_error_and_no_crash() {
        let text = "[".repeat(100_000);
        assert!(refuse_duplicates(&text).is_err());
    }
}
