//! Readers of single fields.

use analysis::predicted::sets::{Caveat, Input, Predicts, PrintedUnit};
use analysis::unit::Unit;
use serde::{Deserialize, Deserializer, de::Error as _};

const SCHEMA: &str = "rampcrest-predicted/1";

pub(super) fn yes() -> bool {
    true
}

pub(super) fn schema<'de, D: Deserializer<'de>>(d: D) -> Result<(), D::Error> {
    let text = String::deserialize(d)?;
    if text == SCHEMA { Ok(()) } else { Err(D::Error::custom(format!("`schema` is not {SCHEMA}"))) }
}

pub(super) fn filled<'de, D: Deserializer<'de>>(d: D) -> Result<String, D::Error> {
    let text = String::deserialize(d)?;
    if text.trim().is_empty() { Err(D::Error::custom("the text is empty")) } else { Ok(text) }
}

pub(super) fn id<'de, D: Deserializer<'de>>(d: D) -> Result<String, D::Error> {
    let text = String::deserialize(d)?;
    let good = |c: char| c.is_ascii_lowercase() || c.is_ascii_digit() || c == '-';
    if text.is_empty() || text.len() > 64 || !text.chars().all(good) {
        return Err(D::Error::custom("an id is lower-case letters, digits and hyphens"));
    }
    Ok(text)
}

pub(super) fn some<'de, D: Deserializer<'de>, T: Deserialize<'de>>(
    d: D,
) -> Result<Vec<T>, D::Error> {
    let list = Vec::deserialize(d)?;
    if list.is_empty() { Err(D::Error::custom("the list is empty")) } else { Ok(list) }
}

pub(super) fn input_code<'de, D: Deserializer<'de>>(d: D) -> Result<Input, D::Error> {
    let code = String::deserialize(d)?;
    Input::from_code(&code).ok_or_else(|| D::Error::custom(format!("unknown input `{code}`")))
}

pub(super) fn predicts<'de, D: Deserializer<'de>>(d: D) -> Result<Predicts, D::Error> {
    let code = String::deserialize(d)?;
    let unknown = || D::Error::custom(format!("unknown quantity `{code}`"));
    Predicts::from_code(&code).ok_or_else(unknown)
}

pub(super) fn printed_unit<'de, D: Deserializer<'de>>(d: D) -> Result<PrintedUnit, D::Error> {
    let code = String::deserialize(d)?;
    if code == "kpm/min" {
        return Ok(PrintedUnit::KpmPerMin);
    }
    let unknown = || D::Error::custom(format!("unknown unit `{code}`"));
    Unit::from_ucum(&code).map(PrintedUnit::Table).ok_or_else(unknown)
}

/// `age_years`, or `height_m^2.7`.
pub(super) fn factors<'de, D: Deserializer<'de>>(d: D) -> Result<Vec<(Input, f64)>, D::Error> {
    let texts: Vec<String> = Vec::deserialize(d)?;
    let read = |text: &String| {
        let (code, power) = text.split_once('^').unwrap_or((text, "1"));
        let input = Input::from_code(code)?;
        let power = power.parse::<f64>().ok().filter(|p| p.is_finite())?;
        Some((input, power))
    };
    texts
        .iter()
        .map(|t| read(t).ok_or_else(|| D::Error::custom(format!("unknown factor `{t}`"))))
        .collect()
}

pub(super) fn caveats<'de, D: Deserializer<'de>>(d: D) -> Result<Vec<Caveat>, D::Error> {
    let codes: Vec<String> = Vec::deserialize(d)?;
    let read = |code: &String| {
        Caveat::from_code(code).ok_or_else(|| D::Error::custom(format!("unknown caveat `{code}`")))
    };
    codes.iter().map(read).collect()
}
