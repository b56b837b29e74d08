//! The key table: which results stand on page 1 and on the findings sheet, and what each is held
//! against.

use analysis::predicted::sets::Predicts;
use analysis::results::{At, Outcome, Results};
use analysis::settings::Settings;
use analysis::unit::Unit;

use super::values::{self, Shown};
use super::wording;

/// One row.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Row {
    /// The result as shown.
    pub shown: Shown,
    /// What it is held against; empty where there is nothing.
    pub against: String,
    /// Stands under the row above as a part of it.
    pub indented: bool,
    /// Why there is no value.
    pub reason: Option<String>,
    /// Whether a repeatability is published for it.
    pub is_word: bool,
}

/// The rows' ids, place, and whether they are indented.
const ROWS: &[(&str, At, bool)] = &[
    ("vo2-peak", At::Peak, false),
    ("vo2-peak-per-kg", At::Peak, false),
    ("o2-pulse-at-peak", At::Peak, false),
    ("o2-pulse-course", At::Ramp, false),
    ("o2-pulse-late-slope", At::Ramp, true),
    ("o2-pulse-deficit", At::Ramp, true),
    ("vt1-vo2", At::Vt1, false),
    ("vt2-vo2", At::Vt2, false),
    ("ve-vco2-slope-to-vt2", At::Ramp, false),
    ("hr-peak", At::Peak, false),
    ("breathing-reserve", At::Peak, false),
];

/// Place of a result among the rows of page 1, if it is one of them.
#[must_use]
pub fn place(id: &str, at: At) -> Option<usize> {
    ROWS.iter().position(|(row, place, _)| *row == id && *place == at)
}

/// Rows of the results that the engine gives.
#[must_use]
pub fn rows(results: &Results, settings: &Settings) -> Vec<Row> {
    ROWS.iter()
        .filter_map(|(id, at, indented)| {
            let outcome = results.primary(id, *at)?;
            // Parts of a course that is withheld say nothing more than the course.
            if *indented && outcome.value.is_none() {
                return None;
            }
            let mut shown = values::shown(outcome);
            if outcome.method == "reader-mark" {
                shown.label = wording::with("page-readers", &[("label", shown.label)]);
            }
            Some(Row {
                shown,
                against: against(outcome, results, settings),
                indented: *indented,
                reason: outcome.reason.as_ref().map(|n| wording::text(n, results)),
                is_word: outcome.word().is_some(),
            })
        })
        .collect()
}

fn against(outcome: &Outcome, results: &Results, settings: &Settings) -> String {
    let shown = |id: &str, at| results.primary(id, at).map(|o| values::shown(o).with_unit());
    let predicted = of_predicted(outcome, results, settings);
    let said = match outcome.id.as_ref() {
        "o2-pulse-course" => shown_onset(results),
        "o2-pulse-late-slope" => shown("o2-pulse-early-slope", At::Ramp)
            .map(|slope| wording::with("page-own-early", &[("slope", slope)])),
        "o2-pulse-deficit" => shown("o2-pulse-deficit-vo2-part", At::Ramp)
            .zip(shown("o2-pulse-deficit-hr-part", At::Ramp))
            .map(|(vo2, hr)| wording::with("page-parts", &[("vo2", vo2), ("hr", hr)])),
        "vt1-vo2" | "vt2-vo2" => {
            let id = if outcome.at == At::Vt1 { "vt1-vo2-of-peak" } else { "vt2-vo2-of-peak" };
            shown(id, outcome.at).map(|p| wording::with("page-of-peak", &[("percent", p)]))
        }
        "breathing-reserve" => {
            outcome.doubts.iter().find(|n| n.code == "mvv-used").map(|n| wording::text(n, results))
        }
        _ => None,
    };
    predicted.or(said).unwrap_or_default()
}

fn shown_onset(results: &Results) -> Option<String> {
    let onset = results.primary("o2-pulse-onset", At::Ramp).filter(|o| o.value.is_some())?;
    let shown = values::shown(onset);
    let interval = shown.recording.clone().unwrap_or_default();
    Some(wording::with("page-onset", &[("time", shown.value), ("interval", interval)]))
}

/// "92 % of Hansen 1984, limit 83 %" where the quantity has a prediction.
fn of_predicted(outcome: &Outcome, results: &Results, settings: &Settings) -> Option<String> {
    if outcome.id == "vt1-vo2" {
        // Against predicted peak, as practice has it; not against the mean of a threshold table.
        let share = results.primary("vt1-vo2-percent-predicted", At::Vt1)?;
        share.number()?;
        let percent = values::shown(share).with_unit();
        let set = short_names(&share.method, settings);
        return Some(wording::with("page-vt1-of-predicted", &[("percent", percent), ("set", set)]));
    }
    let row = Predicts::all().find(|p| p.measured_id() == Some(outcome.id.as_ref()))?;
    let predicted = results.primary(row.predicted_id(), outcome.at)?;
    let (value, of) = (outcome.number()?, predicted.number()?);
    let percent = values::in_unit(100.0 * value / of, Unit::Percent);
    let mut args = vec![("percent", percent), ("set", short_names(&predicted.method, settings))];
    let limit = predicted.recording.map(|i| if i.low.is_finite() { i.low } else { i.high });
    let Some(limit) = limit else { return Some(wording::with("page-of-predicted", &args)) };
    args.push(("limit", values::in_unit(100.0 * limit / of, Unit::Percent)));
    Some(wording::with("page-of-predicted-limit", &args))
}

/// The name of a method: of the sets behind one such as `hansen-1984/hansen-hr`, else its own.
#[must_use]
pub fn set_names(method: &str, settings: &Settings) -> String {
    names(method, settings, str::to_owned)
}

/// The same where room is short: first author and year, or the formula alone.
#[must_use]
pub fn short_names(method: &str, settings: &Settings) -> String {
    names(method, settings, |name| {
        let last = name.rsplit(' ').next().unwrap_or_default();
        match (name.split_once(": "), name.split_once(", ")) {
            (Some((_, formula)), _) => formula.to_owned(),
            (None, Some((first, _))) if last.len() == 4 => format!("{first} {last}"),
            _ => name.to_owned(),
        }
    })
}

fn names(method: &str, settings: &Settings, form: impl Fn(&str) -> String) -> String {
    let set = |id: &str| settings.sets.iter().find(|s| s.id == id).map(|s| form(&s.name));
    let name = |id: &str| {
        let on_ramp = || set(id.strip_suffix("-on-this-ramp")?);
        set(id)
            .or_else(|| Some(wording::with("method-on-this-ramp", &[("set", on_ramp()?)])))
            .unwrap_or_else(|| wording::method(id))
    };
    let parts: Vec<String> = method.split('/').map(name).collect();
    match parts.as_slice() {
        // A formula with operators needs its brackets when it divides.
        [one, other] if other.contains(' ') && other.contains('−') => {
            format!("{one} ÷ ({other})")
        }
        _ => parts.join(" ÷ "),
    }
}
