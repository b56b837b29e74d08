//! Whole files through the importer.

use analysis::quantity::Quantity;
use analysis::recording::RowKind;

use super::*;
use crate::provenance::Decided;

fn import(text: &str) -> Result<Imported, Problem> {
    super::import(text.as_bytes(), "table.csv", &Answers::none(), None)
}

fn with_answers(text: &str, answers: &[&str]) -> Result<Imported, Problem> {
    let mut parsed = Answers::none();
    for answer in answers {
        parsed.add(answer)?;
    }
    super::import(text.as_bytes(), "table.csv", &parsed, None)
}

/// 40 breaths, 3 s and a little each; `row` writes time (s), V̇O₂ (mL/min) and HR (/min).
fn table(head: &str, row: impl Fn(f64, f64, f64) -> String) -> String {
    let rows = (1..=40).map(|i| {
        let x = f64::from(i);
        row(3.0 * x + 0.1 * (x % 2.0), 400.0 + 10.0 * x, 80.0 + x) + "\n"
    });
    head.to_owned() + &rows.collect::<String>()
}

fn comma(x: f64) -> String {
    format!("{x}").replace('.', ",")
}

#[test]
fn header_unit_row_and_decimal_comma() {
    let text = table("Zeit;V'O2;HF;Last\ns;L/min;1/min;W\n", |t, v, h| {
        format!("{};{};{};{}", comma(t), comma(v / 1000.0), comma(h), 20)
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recipe.decimal, Decimal::Comma);
    assert_eq!(read.recipe.separator, Separator::Semicolon);
    assert_eq!(read.recipe.unit_line, Some(2));
    assert!(read.columns().iter().skip(1).all(|c| c.decided == Decided::UnitRow));
    let breaths = &read.recording.breaths;
    assert_eq!(breaths.len(), 40);
    assert!((breaths.value(Quantity::Vo2, 0).unwrap() - 410.0).abs() < 1e-9);
    assert_eq!(breaths.value(Quantity::Hr, 39), Some(120.0));
    assert!((breaths.end_s()[0] - 3.1).abs() < 1e-12);
    assert_eq!(read.recording.row_kind, RowKind::Breath);
    assert_eq!(read.recording.load.at(50.0), Some(20.0));
    assert!(read.questions().is_empty() && read.issues.is_empty(), "{:?}", read.issues);
}

#[test]
fn the_recipe_repeats_the_import_and_survives_json() {
    let text = table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{v},{h}"));
    let read = import(&text).unwrap();
    let json = serde_json::to_string(&read.recipe).unwrap();
    let recipe: Recipe = serde_json::from_str(&json).unwrap();
    assert_eq!(recipe, read.recipe);
    assert_eq!(recording_from(text.as_bytes(), &recipe).unwrap(), read.recording);
    let other = text.replace("410", "411");
    assert_eq!(recording_from(other.as_bytes(), &recipe).unwrap_err().code, "import-recipe");
}
