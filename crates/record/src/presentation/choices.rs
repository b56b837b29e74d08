//! Predicted sets and the parameters of the model as they were chosen, in words: for the page, the
//! history and the window.

use analysis::predicted::sets::Predicts;
use analysis::settings::{OverlaySettings, Settings};
use analysis::unit::Unit;

use super::labels::label;
use super::{values, wording};
use crate::predicted_sets;
use crate::session::Edit;

/// A parameter of the model: path of the setting, its word, value and unit.
pub type Parameter = (&'static str, &'static str, f64, Unit);

/// Every parameter of the model that can be changed.
#[must_use]
pub fn parameters(o: &OverlaySettings) -> [Parameter; 14] {
    [
        ("overlay.gain", "overlay-gain", o.gain, Unit::MlPerMinPerWatt),
        ("overlay.gain_low", "overlay-gain-low", o.gain_band.0, Unit::MlPerMinPerWatt),
        ("overlay.gain_high", "overlay-gain-high", o.gain_band.1, Unit::MlPerMinPerWatt),
        ("overlay.tau_s", "overlay-tau", o.tau_s, Unit::Second),
        ("overlay.rest_per_kg", "overlay-rest-per-kg", o.rest_per_kg, Unit::MlPerKgMin),
        ("overlay.unloaded_per_kg", "overlay-unloaded-per-kg", o.unloaded_per_kg, Unit::MlPerKgMin),
        ("overlay.unloaded_added", "overlay-unloaded-added", o.unloaded_added, Unit::MlPerMin),
        ("overlay.vt1_fraction", "overlay-vt1-fraction", o.vt1_fraction, Unit::One),
        ("overlay.vt2_fraction", "overlay-vt2-fraction", o.vt2_fraction, Unit::One),
        ("overlay.rer_rest", "overlay-rer-rest", o.rer_rest, Unit::One),
        ("overlay.s1", "overlay-s1", o.s1, Unit::One),
        ("overlay.rer_peak", "overlay-rer-peak", o.rer_peak, Unit::One),
        ("overlay.ve_intercept", "overlay-ve-intercept", o.ve_intercept, Unit::LPerMin),
        ("overlay.late_ve", "overlay-late-ve", o.late_ve, Unit::One),
    ]
}

/// The name of a set, or its id where it is not loaded.
#[must_use]
pub fn set_name(id: &str, settings: &Settings) -> String {
    settings.sets.iter().find(|s| s.id == id).map_or_else(|| id.to_owned(), |s| s.name.clone())
}

/// What was chosen otherwise than by default, a line each.
#[must_use]
pub fn changed(settings: &Settings) -> Vec<String> {
    let mut lines = Vec::new();
    let choice = &settings.predicted;
    for (quantity, id) in &choice.others {
        lines.push(chosen(*quantity, id, settings));
    }
    for id in &choice.overridden {
        lines.push(wording::with("choice-overridden", &[("set", set_name(id, settings))]));
    }
    if choice.unconfirmed {
        lines.push(wording::plain_text("choice-unconfirmed"));
    }
    for set in settings.sets.iter().filter(|s| s.own.is_some()) {
        lines.push(wording::with("choice-own", &[("set", set.name.clone())]));
    }
    let before = parameters(&OverlaySettings::default());
    for (now, before) in parameters(&settings.overlay).into_iter().zip(before) {
        if now.2 != before.2 {
            lines.push(parameter(now, before.2));
        }
    }
    lines
}

fn chosen(quantity: Predicts, id: &str, settings: &Settings) -> String {
    let args = [
        ("quantity", label(quantity.predicted_id(), quantity.at())),
        ("set", set_name(id, settings)),
    ];
    wording::with("choice-set", &args)
}

fn parameter((_, word, now, unit): Parameter, before: f64) -> String {
    let name = wording::plain_text(&format!("word-{word}"));
    let shown = |v: f64| values::joined(&format!("{v}"), unit.shown());
    let args = [("name", name), ("now", shown(now)), ("before", shown(before))];
    wording::with("choice-parameter", &args)
}

/// An edit in words, with the sets it names.
#[must_use]
pub fn edit(edit: &Edit, settings: &Settings) -> String {
    let detail = match edit {
        Edit::SetPredicted { vo2, hr, others } => {
            let others =
                others.iter().filter_map(|(code, id)| Some((Predicts::from_code(code)?, id)));
            let all = vo2.iter().map(|id| (Predicts::Vo2Peak, id));
            let all = all.chain(hr.iter().map(|id| (Predicts::HrPeak, id))).chain(others);
            all.map(|(quantity, id)| chosen(quantity, id, settings)).collect::<Vec<_>>().join("; ")
        }
        Edit::SetSetting { path, value } if path == "predicted.overridden" => {
            let ids = value.as_array().into_iter().flatten().filter_map(|v| v.as_str());
            let names: Vec<String> = ids.map(|id| set_name(id, settings)).collect();
            match names.is_empty() {
                true => wording::plain_text("choice-none-overridden"),
                false => wording::with("choice-overridden", &[("set", names.join(", "))]),
            }
        }
        Edit::SetSetting { path, value } if path == "predicted.unconfirmed" => {
            let code = if value == true { "choice-unconfirmed" } else { "choice-only-confirmed" };
            wording::plain_text(code)
        }
        Edit::SetSetting { path, value } => {
            let before = parameters(&OverlaySettings::default());
            let of = before.into_iter().find(|p| p.0 == path);
            match (of, value.as_f64()) {
                (Some((path, word, before, unit)), Some(now)) => {
                    parameter((path, word, now, unit), before)
                }
                _ => format!("{path} {value}"),
            }
        }
        Edit::AddPredictedSet { text } => {
            predicted_sets::own(text).map(|set| set.name).unwrap_or_default()
        }
        _ => String::new(),
    };
    if detail.is_empty() { edit.label() } else { format!("{}: {detail}", edit.label()) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::predicted_sets::default_settings;

    #[test]
    fn the_default_choice_says_nothing_and_every_other_its_name() {
        let mut settings = default_settings();
        assert_eq!(changed(&settings), Vec::<String>::new());
        settings.predicted.overridden = vec!["blackie-1989".into()];
        settings.predicted.others.insert(Predicts::WorkRate, "jones-1989".into());
        settings.overlay.s1 = 0.97;
        let lines = changed(&settings).join("\n");
        for part in ["Blackie", "Jones", "0.97", "0.95"] {
            assert!(lines.contains(part), "{part}: {lines}");
        }
        for p in parameters(&settings.overlay) {
            let word = wording::plain_text(&format!("word-{}", p.1));
            assert!(!word.contains('['), "{word}");
        }
    }

    #[test]
    fn an_override_names_its_set_in_the_history() {
        let settings = default_settings();
        let value = serde_json::json!(["blackie-1989"]);
        let words =
            edit(&Edit::SetSetting { path: "predicted.overridden".into(), value }, &settings);
        assert!(words.contains(&set_name("blackie-1989", &settings)), "{words}");
    }
}
