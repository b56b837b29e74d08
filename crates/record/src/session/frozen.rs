//! Results frozen by a signature, shown again: the values stand as they were signed.

use std::borrow::Cow;

use analysis::results::{At, Interval, Outcome, Results, Value as Held};
use serde_json::Value;

use crate::presentation::values;
use crate::results_json::at_from_code;

/// `now` with the outcomes of the signed `frozen` results, and the keys of those that differ. Where
/// nothing differs, `now` itself.
#[must_use]
pub fn shown<'a>(frozen: &Value, now: &'a Results) -> (Cow<'a, Results>, Vec<String>) {
    let list = frozen["outcomes"].as_array().map(Vec::as_slice).unwrap_or_default();
    let mut results = now.clone();
    let mut differing = Vec::new();
    for signed in list {
        let Some((id, at)) = place(signed) else { continue };
        let same = |o: &Outcome| o.id == id && o.at == at && o.method == text(signed, "method");
        match results.outcomes.iter_mut().find(|o| same(o)) {
            Some(outcome) => {
                let mut held = outcome.clone();
                put(&mut held, signed);
                if held != *outcome {
                    differing.push(values::key(id, at));
                    *outcome = held;
                }
            }
            None => differing.push(values::key(id, at)),
        }
    }
    let is_signed = |o: &Outcome| {
        list.iter().any(|s| {
            place(s) == Some((o.id.as_ref(), o.at)) && text(s, "method") == o.method.as_ref()
        })
    };
    let before = results.outcomes.len();
    results.outcomes.retain(is_signed);
    if differing.is_empty() && results.outcomes.len() == before {
        return (Cow::Borrowed(now), differing);
    }
    differing.dedup();
    (Cow::Owned(results), differing)
}

fn text<'v>(signed: &'v Value, name: &str) -> &'v str {
    signed[name].as_str().unwrap_or_default()
}

fn place(signed: &Value) -> Option<(&str, At)> {
    Some((signed["id"].as_str()?, at_from_code(signed["at"].as_str()?)?))
}

/// Puts the signed value and intervals into `outcome`.
fn put(outcome: &mut Outcome, signed: &Value) {
    outcome.value = match &signed["value"] {
        Value::Number(n) => n.as_f64().map(Held::Number),
        Value::String(word) => Some(Held::Word(word.clone().into())),
        _ => None,
    };
    let interval = |low: &str, high: &str| {
        let end = |name: &str, open: f64| signed[name].as_f64().unwrap_or(open);
        let either = signed[low].is_number() || signed[high].is_number();
        if !either {
            return None;
        }
        Some(Interval { low: end(low, f64::NEG_INFINITY), high: end(high, f64::INFINITY) })
    };
    outcome.recording = interval("low", "high");
    outcome.repeat = interval("repeat_low", "repeat_high");
    if outcome.value.is_some() {
        outcome.reason = None;
    }
}
