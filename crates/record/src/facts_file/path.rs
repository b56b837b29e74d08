//! One fact by its path, such as `test.rhythm`, `subject.hb` or `events[2].text`.

use serde_json::{Map, Value};

use super::FactsFile;
use crate::problem::Problem;

impl FactsFile {
    /// The fact at `path`; `None` where it is not stated.
    #[must_use]
    pub fn get(&self, path: &str) -> Option<Value> {
        let root = self.to_value();
        let mut at = &root;
        for step in steps(path).ok()? {
            at = match step {
                Step::Field(name) => at.get(name)?,
                Step::Index(i) => at.get(i)?,
            };
        }
        Some(at.clone())
    }

    /// The same facts with one changed. `null` means "not stated" and removes it; an index one past
    /// the end of a list adds to it, and `null` at an index removes that entry.
    ///
    /// # Errors
    /// An unknown path, or a value that the file format refuses; the facts are as before.
    pub fn with(&self, path: &str, value: Value) -> Result<Self, Problem> {
        let mut root = self.to_value();
        let steps = steps(path)?;
        if steps.first() == Some(&Step::Field("schema".into())) {
            return Err(unknown(path));
        }
        put(&mut root, &steps, value).ok_or_else(|| unknown(path))?;
        drop_empty(&mut root);
        Self::from_value(root)
    }

    /// Sets one fact, as [`FactsFile::with`].
    ///
    /// # Errors
    /// As [`FactsFile::with`]; nothing is changed then.
    pub fn set(&mut self, path: &str, value: Value) -> Result<(), Problem> {
        *self = self.with(path, value)?;
        Ok(())
    }

    /// The paths of every stated fact, sorted.
    #[must_use]
    pub fn paths(&self) -> Vec<String> {
        let mut out = Vec::new();
        collect(&self.to_value(), "", &mut out);
        out.retain(|p| p != "schema");
        out.sort();
        out
    }
}

#[derive(Clone, Debug, PartialEq)]
enum Step {
    Field(String),
    Index(usize),
}

fn unknown(path: &str) -> Problem {
    Problem::new(
        "facts-path",
        path,
        "There is no fact at this path.",
        "Use a path of rampcrest-facts/1, such as test.rhythm or subject.hb.",
    )
}

fn steps(path: &str) -> Result<Vec<Step>, Problem> {
    let mut out = Vec::new();
    for part in path.split('.') {
        let (name, rest) = part.split_at(part.find('[').unwrap_or(part.len()));
        if name.is_empty() {
            return Err(unknown(path));
        }
        match name.parse() {
            Ok(index) => out.push(Step::Index(index)),
            Err(_) => out.push(Step::Field(name.to_owned())),
        }
        if !rest.is_empty() {
            let inner = rest.strip_prefix('[').and_then(|r| r.strip_suffix(']'));
            let index = inner.and_then(|i| i.parse().ok()).ok_or_else(|| unknown(path))?;
            out.push(Step::Index(index));
        }
    }
    Ok(out)
}

/// Puts `value` at `steps` below `at`; `None` where the path cannot exist.
fn put(at: &mut Value, steps: &[Step], value: Value) -> Option<()> {
    let (step, rest) = steps.split_first()?;
    match step {
        Step::Field(name) => {
            if at.is_null() {
                *at = Value::Object(Map::new());
            }
            let object = at.as_object_mut()?;
            if !rest.is_empty() {
                let below = object.entry(name.clone()).or_insert(Value::Null);
                put(below, rest, value)?;
                return Some(());
            }
            if value.is_null() {
                object.remove(name);
            } else {
                object.insert(name.clone(), value);
            }
        }
        Step::Index(i) => {
            if at.is_null() {
                *at = Value::Array(Vec::new());
            }
            let list = at.as_array_mut()?;
            if rest.is_empty() && value.is_null() {
                (*i < list.len()).then(|| list.remove(*i))?;
                return Some(());
            }
            if *i == list.len() {
                list.push(Value::Null);
            }
            let slot = list.get_mut(*i)?;
            if rest.is_empty() {
                *slot = value;
            } else {
                put(slot, rest, value)?;
            }
        }
    }
    Some(())
}

/// An object that states nothing is absent; an empty list is a statement and stays.
fn drop_empty(value: &mut Value) {
    match value {
        Value::Object(map) => {
            map.values_mut().for_each(drop_empty);
            map.retain(|_, v| v.as_object().is_none_or(|o| !o.is_empty()));
        }
        Value::Array(list) => list.iter_mut().for_each(drop_empty),
        _ => {}
    }
}

fn collect(value: &Value, path: &str, out: &mut Vec<String>) {
    match value {
        Value::Object(map) => {
            for (key, value) in map {
                let path = if path.is_empty() { key.clone() } else { format!("{path}.{key}") };
                collect(value, &path, out);
            }
        }
        Value::Array(list) if !list.is_empty() => {
            for (i, value) in list.iter().enumerate() {
                collect(value, &format!("{path}[{i}]"), out);
            }
        }
        _ => out.push(path.to_owned()),
    }
}
