//! Choices that no publication fixes: visible, editable, saved with the session.

use std::collections::BTreeMap;
use std::sync::Arc;

use crate::predicted::sets::{PredictedSet, Predicts};

/// How breaths are averaged for charts and the value strip.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Averaging {
    /// Rolling mean over this many seconds, duration-weighted.
    RollingSeconds(u32),
    /// Rolling mean over this many breaths.
    RollingBreaths(u32),
    /// Bins of this many seconds from the start of the ramp.
    BinSeconds(u32),
}

impl Default for Averaging {
    fn default() -> Self {
        Averaging::RollingSeconds(30)
    }
}

/// Which predicted sets stand on the page.
#[derive(Clone, Debug, PartialEq)]
pub struct PredictedChoice {
    /// Set of peak V̇O₂, by id.
    pub vo2: String,
    /// Set of peak HR, by id.
    pub hr: String,
    /// Sets of other quantities that the reader chose, by id; the rest follow the order of loading.
    pub others: BTreeMap<Predicts, String>,
    /// Inputs outside a set's range that the reader let pass, by set id.
    pub overridden: Vec<String>,
    /// Whether sets whose coefficients are unconfirmed may be chosen.
    pub unconfirmed: bool,
}

impl Default for PredictedChoice {
    fn default() -> Self {
        Self {
            vo2: "hansen-1984".into(),
            hr: "hansen-hr".into(),
            others: BTreeMap::new(),
            overridden: Vec::new(),
            unconfirmed: false,
        }
    }
}

/// Parameters of the model of a normal response (overlay).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OverlaySettings {
    /// Time constant, s.
    pub tau_s: f64,
    /// Gain, mL/min per W, and its band.
    pub gain: f64,
    /// Band of the gain.
    pub gain_band: (f64, f64),
    /// VT1 as a fraction of predicted peak V̇O₂.
    pub vt1_fraction: f64,
    /// VT2 as a fraction of predicted peak V̇O₂.
    pub vt2_fraction: f64,
    /// Intercept of V̇E on V̇CO₂, L/min.
    pub ve_intercept: f64,
    /// RER at peak.
    pub rer_peak: f64,
    /// V̇O₂ at rest where it was not measured, mL/min per kg (from memory; common practice).
    pub rest_per_kg: f64,
    /// V̇O₂ of unloaded pedalling at 60 rpm, mL/min per kg (from memory; common practice) …
    pub unloaded_per_kg: f64,
    /// … and what is added to it, mL/min.
    pub unloaded_added: f64,
    /// RER at rest (modelling choice).
    pub rer_rest: f64,
    /// ΔV̇CO₂/ΔV̇O₂ below VT1 (modelling choice; slightly below 1 in the literature).
    pub s1: f64,
    /// By how much the V̇E–V̇CO₂ slope steepens above VT2 (modelling choice).
    pub late_ve: f64,
}

impl OverlaySettings {
    /// V̇O₂ of unloaded pedalling at 60 rpm, mL/min.
    #[must_use]
    pub fn unloaded_vo2(&self, mass_kg: f64) -> f64 {
        self.unloaded_per_kg * mass_kg + self.unloaded_added
    }
}

impl Default for OverlaySettings {
    fn default() -> Self {
        Self {
            tau_s: 40.0,
            gain: 10.3,
            gain_band: (8.63, 11.95),
            vt1_fraction: 0.55,
            vt2_fraction: 0.87,
            ve_intercept: 4.0,
            rer_peak: 1.15,
            rest_per_kg: 3.5,
            unloaded_per_kg: 5.8,
            unloaded_added: 151.0,
            rer_rest: 0.85,
            s1: 0.95,
            late_ve: 1.25,
        }
    }
}

/// Assumptions of the Fick reasoning; each is listed beside the sentence that uses it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FickSettings {
    /// Oxygen bound per gram of haemoglobin, mL/g.
    pub hufner: f64,
    /// Usual ceiling of extraction.
    pub extraction_usual: f64,
    /// Cautious limit of extraction.
    pub extraction_limit: f64,
    /// Relative rise of haemoglobin in exercise, unless measured at peak.
    pub haemoconcentration: f64,
    /// Relative allowance for gas calibration.
    pub calibration: f64,
    /// Upper limit of arterial saturation where not measured.
    pub sao2_upper: f64,
}

impl Default for FickSettings {
    fn default() -> Self {
        Self {
            hufner: 1.34,
            extraction_usual: 0.85,
            extraction_limit: 0.92,
            haemoconcentration: 0.10,
            calibration: 0.03,
            sao2_upper: 1.0,
        }
    }
}

/// All settings.
#[derive(Clone, Debug, PartialEq)]
pub struct Settings {
    /// Averaging of charts.
    pub averaging: Averaging,
    /// Window of peak values, s.
    pub peak_window_s: f64,
    /// Factor from FEV₁ to MVV.
    pub mvv_factor: f64,
    /// Width of the prediction band for errant breaths.
    pub errant_k: f64,
    /// Breathing reserve below which a ventilatory limit counts as demonstrated, % (common practice).
    pub breathing_reserve_pct: f64,
    /// The same in L/min (common practice).
    pub breathing_reserve_l_min: f64,
    /// Choice of predicted sets.
    pub predicted: PredictedChoice,
    /// Overlay parameters.
    pub overlay: OverlaySettings,
    /// Whether the overlay is drawn.
    pub overlay_shown: bool,
    /// Fick assumptions.
    pub fick: FickSettings,
    /// The sets themselves, coefficients as data.
    pub sets: Arc<Vec<PredictedSet>>,
}

impl Default for Settings {
    fn default() -> Self {
        Self {
            averaging: Averaging::default(),
            peak_window_s: 30.0,
            mvv_factor: 40.0,
            errant_k: 4.0,
            breathing_reserve_pct: 15.0,
            breathing_reserve_l_min: 11.0,
            predicted: PredictedChoice::default(),
            overlay: OverlaySettings::default(),
            overlay_shown: true,
            fick: FickSettings::default(),
            sets: Arc::new(Vec::new()),
        }
    }
}
