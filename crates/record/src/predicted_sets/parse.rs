//! The parser: from text to a set, or the line and the reason why not.

use analysis::predicted::evaluate;
use analysis::predicted::sets::{Equation, Expected, PredictedSet};

use super::schema::SetV1;
use crate::problem::Problem;

/// Largest file, bytes.
pub const LARGEST: usize = 1 << 20;

/// Reads one set. `file` is the name shown in messages.
///
/// # Errors
/// A [`Problem`] with the line and the reason: not JSON, an unknown field, unit, input or quantity,
/// a range upside down, a coefficient that is not finite, or a worked value that the formula does
/// not give.
pub fn parse(text: &str, file: &str) -> Result<PredictedSet, Problem> {
    let refused = |line: usize, what: String| {
        Problem::new(
            "predicted-set-refused",
            format!("{file}, line {line}"),
            what,
            "Correct the file and open it again; the sets in use stay as they are.",
        )
    };
    if text.len() > LARGEST {
        return Err(refused(1, format!("The file is larger than {LARGEST} bytes.")));
    }
    let set: SetV1 = serde_json::from_str(text).map_err(|e| {
        let whole = e.to_string();
        let reason = whole.rsplit_once(" at line ").map_or(whole.as_str(), |(reason, _)| reason);
        refused(e.line(), format!("The set cannot be read: {reason}."))
    })?;
    let set = PredictedSet::from(set);
    for (index, equation) in set.equations.iter().enumerate() {
        let start = start_of_equation(text, index);
        if set.equations[..index].iter().any(|e| e.predicts == equation.predicts) {
            let code = equation.predicts.code();
            let what = format!("`{code}` is predicted twice in this set.");
            return Err(refused(line_of(text, start), what));
        }
        // Each worked example has the key `origin` once.
        check_worked(&set, equation).map_err(|(i, what)| {
            let at = text[start..].match_indices("\"origin\"").nth(i).map_or(0, |(at, _)| at);
            refused(line_of(text, start + at), what)
        })?;
    }
    Ok(set)
}

/// Reads a laboratory's own set, which keeps its text.
///
/// # Errors
/// As [`parse`].
pub fn own(text: &str) -> Result<PredictedSet, Problem> {
    let set = parse(text, "the set of the laboratory")?;
    Ok(PredictedSet { own: Some(text.into()), ..set })
}

/// Place of the n-th `"predicts"` key, which each equation has once.
fn start_of_equation(text: &str, index: usize) -> usize {
    text.match_indices("\"predicts\"").nth(index).map_or(0, |(at, _)| at)
}

fn line_of(text: &str, at: usize) -> usize {
    1 + text[..at].matches('\n').count()
}

/// Every worked value of the file must come out of the formula of the file.
fn check_worked(set: &PredictedSet, equation: &Equation) -> Result<(), (usize, String)> {
    for (i, worked) in equation.worked.iter().enumerate() {
        let got = evaluate(set, equation.predicts, &worked.person, worked.overridden);
        let said = match (&worked.expected, &got) {
            (Expected::Refused(code), Err(note)) if note.code == code => continue,
            (Expected::Value { value, within }, Ok(prediction)) => {
                let mass = worked.person.mass_kg;
                let expected = equation.canonical(*value, mass);
                let allowed = equation.canonical(*within, mass);
                match (expected, allowed) {
                    (Some(e), Some(a)) if (prediction.value - e).abs() <= a => continue,
                    _ => format!("{}", prediction.value),
                }
            }
            (_, Ok(prediction)) => format!("{}", prediction.value),
            (_, Err(note)) => format!("the refusal `{}`", note.code),
        };
        let unit = equation.predicts.unit().ucum();
        let code = equation.predicts.code();
        let what = format!(
            "Worked value {} of `{code}` does not come out: the formula gives {said} ({unit}).",
            i + 1,
        );
        return Err((i, what));
    }
    Ok(())
}
