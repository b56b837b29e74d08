//! Results as JSON: `rampcrest-results/1`.

use analysis::results::{At, Interval, Kind, LEVEL, Note, Outcome, Results, Value as Shown};
use serde_json::{Map, Value, json};

use crate::presentation::wording;
use crate::provenance::Question;

/// Name and version of the format.
pub const SCHEMA: &str = "rampcrest-results/1";

/// The results as JSON. Keys keep the order of the contract; numbers are finite.
#[must_use]
pub fn to_value(results: &Results, engine: &str, questions: &[Question]) -> Value {
    let phases: Vec<Value> = results
        .phases
        .spans
        .iter()
        .map(|s| json!({"id": s.phase.code(), "from": s.from_s, "to": s.to_s}))
        .collect();
    let outcomes: Vec<Value> = results.outcomes.iter().map(|o| outcome(o, results)).collect();
    let doubts: Vec<Value> = results.doubts.iter().map(|n| note(n, results)).collect();
    object([
        ("schema", SCHEMA.into()),
        ("engine", engine.into()),
        ("notice", wording::plain_text("caution").into()),
        ("phases", phases.into()),
        ("outcomes", outcomes.into()),
        ("questions", serde_json::to_value(questions).unwrap_or_default()),
        ("doubts", doubts.into()),
    ])
}

/// The results as text, one trailing line end.
#[must_use]
pub fn to_json(results: &Results, engine: &str, questions: &[Question]) -> String {
    let mut text =
        serde_json::to_string_pretty(&to_value(results, engine, questions)).unwrap_or_default();
    text.push('\n');
    text
}

fn outcome(o: &Outcome, results: &Results) -> Value {
    let value = match &o.value {
        Some(Shown::Number(x)) => Value::from(*x),
        Some(Shown::Word(word)) => Value::from(word.as_ref()),
        None => Value::Null,
    };
    let ends = |i: Option<Interval>| {
        i.map_or((Value::Null, Value::Null), |i| (i.low.into(), i.high.into()))
    };
    let (low, high) = ends(o.recording);
    let (repeat_low, repeat_high) = ends(o.repeat);
    let doubts: Vec<Value> = o.doubts.iter().map(|n| note(n, results)).collect();
    let window = o.basis.window_s.map_or(Value::Null, |(a, b)| json!([a, b]));
    object([
        ("id", o.id.as_ref().into()),
        ("at", o.at.code().into()),
        ("method", o.method.as_ref().into()),
        ("primary", o.primary.into()),
        ("kind", kind(o.kind).into()),
        ("value", value),
        // A reading or class has no unit, even where it is drawn from a quantity.
        (
            "unit",
            o.unit.filter(|_| o.kind == Kind::Quantity).map_or(Value::Null, |u| u.ucum().into()),
        ),
        ("low", low),
        ("high", high),
        ("level", LEVEL.into()),
        ("repeat_low", repeat_low),
        ("repeat_high", repeat_high),
        (
            "basis",
            object([
                ("method", o.method.as_ref().into()),
                ("window", window),
                ("breaths", o.basis.breaths.into()),
            ]),
        ),
        ("doubts", doubts.into()),
        ("reason", o.reason.as_ref().map_or(Value::Null, |n| note(n, results))),
    ])
}

fn kind(kind: Kind) -> &'static str {
    match kind {
        Kind::Quantity => "quantity",
        Kind::Reading => "reading",
        Kind::Class => "class",
    }
}

fn note(note: &Note, results: &Results) -> Value {
    json!({"code": note.code, "text": wording::text(note, results)})
}

fn object<const N: usize>(fields: [(&str, Value); N]) -> Value {
    Value::Object(fields.into_iter().map(|(k, v)| (k.to_owned(), v)).collect::<Map<_, _>>())
}

/// The place of this code.
#[must_use]
pub fn at_from_code(code: &str) -> Option<At> {
    At::ALL.into_iter().find(|at| at.code() == code)
}
