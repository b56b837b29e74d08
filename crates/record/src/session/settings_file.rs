//! Settings as written in a session. The engine's own types know no file.

use std::collections::BTreeMap;
use std::sync::Arc;

use analysis::predicted::sets::{PredictedSet, Predicts};
use analysis::settings::{FickSettings, OverlaySettings, PredictedChoice, Settings};
use serde::{Deserialize, Serialize};
use serde_json::Value;

use super::codes::AveragingMethod;
use super::problems;
use crate::json;
use crate::predicted_sets;
use crate::problem::Problem;

/// The settings of a session.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub(crate) struct SettingsFile {
    averaging: AveragingFile,
    peak_window_s: f64,
    mvv_factor: f64,
    errant_k: f64,
    breathing_reserve_pct: f64,
    breathing_reserve_l_min: f64,
    predicted: PredictedFile,
    overlay: OverlayFile,
    overlay_shown: bool,
    fick: FickFile,
    /// Sets that the laboratory added, word for word.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    own_sets: Vec<String>,
}

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct AveragingFile {
    method: AveragingMethod,
    n: u32,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct PredictedFile {
    vo2: String,
    hr: String,
    #[serde(default, skip_serializing_if = "BTreeMap::is_empty")]
    others: BTreeMap<String, String>,
    overridden: Vec<String>,
    unconfirmed: bool,
}

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields, default)]
struct OverlayFile {
    tau_s: f64,
    gain: f64,
    gain_low: f64,
    gain_high: f64,
    vt1_fraction: f64,
    vt2_fraction: f64,
    ve_intercept: f64,
    rer_peak: f64,
    rest_per_kg: f64,
    unloaded_per_kg: f64,
    unloaded_added: f64,
    rer_rest: f64,
    s1: f64,
    late_ve: f64,
}

impl Default for OverlayFile {
    fn default() -> Self {
        Self::of(&OverlaySettings::default())
    }
}

impl OverlayFile {
    fn of(o: &OverlaySettings) -> Self {
        Self {
            tau_s: o.tau_s,
            gain: o.gain,
            gain_low: o.gain_band.0,
            gain_high: o.gain_band.1,
            vt1_fraction: o.vt1_fraction,
            vt2_fraction: o.vt2_fraction,
            ve_intercept: o.ve_intercept,
            rer_peak: o.rer_peak,
            rest_per_kg: o.rest_per_kg,
            unloaded_per_kg: o.unloaded_per_kg,
            unloaded_added: o.unloaded_added,
            rer_rest: o.rer_rest,
            s1: o.s1,
            late_ve: o.late_ve,
        }
    }

    fn to_engine(self) -> OverlaySettings {
        OverlaySettings {
            tau_s: self.tau_s,
            gain: self.gain,
            gain_band: (self.gain_low, self.gain_high),
            vt1_fraction: self.vt1_fraction,
            vt2_fraction: self.vt2_fraction,
            ve_intercept: self.ve_intercept,
            rer_peak: self.rer_peak,
            rest_per_kg: self.rest_per_kg,
            unloaded_per_kg: self.unloaded_per_kg,
            unloaded_added: self.unloaded_added,
            rer_rest: self.rer_rest,
            s1: self.s1,
            late_ve: self.late_ve,
        }
    }
}

#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
struct FickFile {
    hufner: f64,
    extraction_usual: f64,
    extraction_limit: f64,
    haemoconcentration: f64,
    calibration: f64,
    sao2_upper: f64,
}

impl SettingsFile {
    /// `settings` as written. The predicted sets themselves are not among them.
    pub fn of(settings: &Settings) -> Self {
        let (method, n) = AveragingMethod::of(settings.averaging);
        let (p, f) = (&settings.predicted, &settings.fick);
        let others = p.others.iter().map(|(of, id)| (of.code().to_owned(), id.clone()));
        let own = settings.sets.iter().filter_map(|s| s.own.as_deref().map(str::to_owned));
        Self {
            averaging: AveragingFile { method, n },
            peak_window_s: settings.peak_window_s,
            mvv_factor: settings.mvv_factor,
            errant_k: settings.errant_k,
            breathing_reserve_pct: settings.breathing_reserve_pct,
            breathing_reserve_l_min: settings.breathing_reserve_l_min,
            predicted: PredictedFile {
                vo2: p.vo2.clone(),
                hr: p.hr.clone(),
                others: others.collect(),
                overridden: p.overridden.clone(),
                unconfirmed: p.unconfirmed,
            },
            overlay: OverlayFile::of(&settings.overlay),
            own_sets: own.collect(),
            overlay_shown: settings.overlay_shown,
            fick: FickFile {
                hufner: f.hufner,
                extraction_usual: f.extraction_usual,
                extraction_limit: f.extraction_limit,
                haemoconcentration: f.haemoconcentration,
                calibration: f.calibration,
                sao2_upper: f.sao2_upper,
            },
        }
    }

    /// The engine's settings, with the program's sets of `given` and the laboratory's own.
    pub fn to_engine(&self, given: &Settings) -> Settings {
        let f = &self.fick;
        let others = self.predicted.others.iter();
        Settings {
            averaging: self.averaging.method.over(self.averaging.n),
            peak_window_s: self.peak_window_s,
            mvv_factor: self.mvv_factor,
            errant_k: self.errant_k,
            breathing_reserve_pct: self.breathing_reserve_pct,
            breathing_reserve_l_min: self.breathing_reserve_l_min,
            predicted: PredictedChoice {
                vo2: self.predicted.vo2.clone(),
                hr: self.predicted.hr.clone(),
                others: others
                    .filter_map(|(of, id)| Some((Predicts::from_code(of)?, id.clone())))
                    .collect(),
                overridden: self.predicted.overridden.clone(),
                unconfirmed: self.predicted.unconfirmed,
            },
            overlay: self.overlay.to_engine(),
            overlay_shown: self.overlay_shown,
            fick: FickSettings {
                hufner: f.hufner,
                extraction_usual: f.extraction_usual,
                extraction_limit: f.extraction_limit,
                haemoconcentration: f.haemoconcentration,
                calibration: f.calibration,
                sao2_upper: f.sao2_upper,
            },
            sets: self.sets(given),
        }
    }

    /// The program's sets of `given`, then the laboratory's own.
    fn sets(&self, given: &Settings) -> Arc<Vec<PredictedSet>> {
        let same = given.sets.iter().filter_map(|s| s.own.as_deref()).eq(&self.own_sets);
        if same {
            return Arc::clone(&given.sets);
        }
        let bundled = given.sets.iter().filter(|s| s.own.is_none()).cloned();
        let own = self.own_sets.iter().filter_map(|text| predicted_sets::own(text).ok());
        Arc::new(bundled.chain(own).collect())
    }

    /// The same with a set that the laboratory adds to those of `given`.
    pub fn with_set(mut self, text: &str, given: &Settings) -> Result<Self, Problem> {
        let set = predicted_sets::own(text)?;
        if given.sets.iter().any(|s| s.id == set.id) {
            let what = format!("There is a predicted set “{}” already.", set.id);
            return Err(problems::edit("set-known", what, "Give the set another id."));
        }
        self.own_sets.push(text.to_owned());
        Ok(self)
    }

    /// The first setting outside the range in which the engine means anything, if any.
    fn beyond(&self) -> Option<String> {
        let (o, f) = (&self.overlay, &self.fick);
        let ranges = [
            ("peak_window_s", self.peak_window_s, 5.0, 120.0),
            ("mvv_factor", self.mvv_factor, 20.0, 60.0),
            ("errant_k", self.errant_k, 2.0, 20.0),
            ("breathing_reserve_pct", self.breathing_reserve_pct, 0.0, 60.0),
            ("breathing_reserve_l_min", self.breathing_reserve_l_min, 0.0, 60.0),
            ("overlay.tau_s", o.tau_s, 1.0, 200.0),
            ("overlay.gain", o.gain, 4.0, 20.0),
            ("overlay.gain_low", o.gain_low, 2.0, o.gain),
            ("overlay.gain_high", o.gain_high, o.gain, 30.0),
            ("overlay.vt1_fraction", o.vt1_fraction, 0.2, 0.95),
            ("overlay.vt2_fraction", o.vt2_fraction, o.vt1_fraction, 1.0),
            ("overlay.ve_intercept", o.ve_intercept, -5.0, 20.0),
            ("overlay.rer_peak", o.rer_peak, 0.8, 1.6),
            ("overlay.rest_per_kg", o.rest_per_kg, 1.0, 8.0),
            ("overlay.unloaded_per_kg", o.unloaded_per_kg, 0.0, 15.0),
            ("overlay.unloaded_added", o.unloaded_added, 0.0, 600.0),
            ("overlay.rer_rest", o.rer_rest, 0.6, 1.2),
            ("overlay.s1", o.s1, 0.5, 1.2),
            ("overlay.late_ve", o.late_ve, 1.0, 3.0),
            ("fick.hufner", f.hufner, 1.30, 1.40),
            ("fick.extraction_usual", f.extraction_usual, 0.5, 1.0),
            ("fick.extraction_limit", f.extraction_limit, 0.5, 1.0),
            ("fick.haemoconcentration", f.haemoconcentration, 0.0, 0.3),
            ("fick.calibration", f.calibration, 0.0, 0.2),
            ("fick.sao2_upper", f.sao2_upper, 0.5, 1.0),
        ];
        let out = ranges.into_iter().find(|(_, v, low, high)| !(v >= low && v <= high));
        if let Some((name, v, low, high)) = out {
            return Some(format!("{name}: {v} is not between {low} and {high}."));
        }
        let a = self.averaging;
        (!a.method.allows(a.n)).then(|| format!("averaging: {} is not a sensible window.", a.n))
    }

    /// Refuses what lies outside its range.
    pub fn checked(self) -> Result<Self, Problem> {
        if let Some(problem) = self.own_sets.iter().find_map(|t| predicted_sets::own(t).err()) {
            return Err(problem);
        }
        if let Some(code) = self.predicted.others.keys().find(|c| Predicts::from_code(c).is_none())
        {
            let what = format!("predicted.others: nothing predicts “{code}”.");
            return Err(problems::edit("setting-range", what, "Use the code of a set file."));
        }
        match self.beyond() {
            Some(what) => Err(problems::edit("setting-range", what, "Give a value in the range.")),
            None => Ok(self),
        }
    }

    /// The same with one changed.
    pub fn with(&self, path: &str, value: &Value) -> Result<Self, Problem> {
        let unknown = || {
            problems::edit(
                "setting-unknown",
                format!("There is no setting “{path}”."),
                "Use a path of the settings in the session file, such as fick.extraction_limit.",
            )
        };
        let mut root = serde_json::to_value(self).map_err(|_| unknown())?;
        let mut at = &mut root;
        for step in path.split('.') {
            at = at.get_mut(step).ok_or_else(unknown)?;
        }
        *at = value.clone();
        let file: Self = json::from_value(root).map_err(|e| {
            let what = format!("{path}: {}.", e.what);
            problems::edit("setting-range", what, "Give a value of the kind that stands there.")
        })?;
        file.checked()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_engines_defaults_come_through_unchanged_and_in_range() {
        let given = Settings::default();
        let file = SettingsFile::of(&given).checked().expect("defaults are in range");
        assert_eq!(file.to_engine(&given), given);
    }

    #[test]
    fn one_setting_by_its_path() {
        let file = SettingsFile::of(&Settings::default());
        let changed = file.with("fick.extraction_limit", &Value::from(0.9)).expect("sets");
        let engine = changed.to_engine(&Settings::default());
        assert_eq!(engine.fick.extraction_limit.to_bits(), 0.9_f64.to_bits());
        let refused = |path, value| file.with(path, &value).expect_err("refused").code;
        assert_eq!(refused("fick.extraction_limit", Value::from(1.2)), "setting-range");
        assert_eq!(refused("fick.extraction_limit", Value::from("x")), "setting-range");
        assert_eq!(refused("fick.nothing", Value::from(1.0)), "setting-unknown");
    }
}
