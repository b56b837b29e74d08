//! One run of the model: V̇O₂ against time on a ramp, and everything else against V̇O₂.

use crate::note::Note;
use crate::settings::OverlaySettings;

/// What the model takes from the person and the test.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Inputs {
    /// V̇O₂ at rest, mL/min.
    pub rest_vo2: f64,
    /// V̇O₂ of unloaded pedalling, mL/min.
    pub unloaded_vo2: f64,
    /// Predicted peak V̇O₂, mL/min.
    pub vo2_peak: f64,
    /// HR at rest and predicted at peak, /min.
    pub hr: Option<(f64, f64)>,
    /// Predicted V̇E–V̇CO₂ slope.
    pub ve_slope: Option<f64>,
    /// Length of the warm-up, s.
    pub warm_up_s: f64,
    /// Work rate of the warm-up, W.
    pub warm_up_watts: f64,
    /// Rise of the load, W/min; not a number where there is none.
    pub rate_w_per_min: f64,
}

/// The values of one moment; times of the model run from the start of the increments.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Moment {
    /// Work rate, W.
    pub work_rate: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// V̇CO₂, mL/min.
    pub vco2: f64,
    /// HR, /min.
    pub hr: Option<f64>,
    /// V̇E, L/min.
    pub ve: Option<f64>,
}

/// One run of the model.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Response {
    /// What it was run with.
    pub inputs: Inputs,
    /// Time constant, s.
    pub tau_s: f64,
    /// Gain, mL/min per W.
    pub gain: f64,
    /// V̇O₂ at VT1, mL/min.
    pub vt1_vo2: f64,
    /// V̇CO₂ at VT1, mL/min.
    pub vt1_vco2: f64,
    /// ΔV̇CO₂/ΔV̇O₂ above VT1.
    pub s2: f64,
    /// V̇O₂ at VT2, mL/min.
    pub vt2_vo2: f64,
    /// Time of predicted peak from the start of the increments, s.
    pub peak_s: Option<f64>,
    /// Work rate at that time, W.
    pub peak_watts: Option<f64>,
    settings: OverlaySettings,
}

impl Response {
    /// Runs the model with `gain`.
    ///
    /// # Errors
    /// The reason when the predicted peak does not lie above rest and warm-up.
    pub fn new(inputs: Inputs, settings: &OverlaySettings, gain: f64) -> Result<Self, Note> {
        let low = Note::new("overlay-peak-below-warm-up");
        let top = inputs.vo2_peak;
        let vt1_vo2 = settings.vt1_fraction * top;
        let floor = inputs.rest_vo2.max(inputs.unloaded_vo2 + gain * inputs.warm_up_watts);
        let numbers = [top, floor, gain, settings.tau_s];
        if numbers.iter().any(|x| !x.is_finite() || *x <= 0.0) || top <= floor || top <= vt1_vo2 {
            return Err(low);
        }
        let rest_vco2 = settings.rer_rest * inputs.rest_vo2;
        let vt1_vco2 = rest_vco2 + settings.s1 * (vt1_vo2 - inputs.rest_vo2);
        let mut response = Self {
            inputs,
            tau_s: settings.tau_s,
            gain,
            vt1_vo2,
            vt1_vco2,
            s2: (settings.rer_peak * top - vt1_vco2) / (top - vt1_vo2),
            vt2_vo2: settings.vt2_fraction * top,
            peak_s: None,
            peak_watts: None,
            settings: *settings,
        };
        if inputs.rate_w_per_min > 0.0 {
            let peak_s = response.time_of_peak();
            response.peak_s = Some(peak_s);
            response.peak_watts = Some(response.work_rate(peak_s));
        }
        Ok(response)
    }

    /// Work rate at `u` s from the start of the increments, W.
    #[must_use]
    pub fn work_rate(&self, u: f64) -> f64 {
        self.inputs.warm_up_watts + self.inputs.rate_w_per_min / 60.0 * u.max(0.0)
    }

    /// V̇O₂ at `u` s without the plateau at the predicted peak, mL/min.
    fn rising_vo2(&self, u: f64) -> f64 {
        let i = &self.inputs;
        let since_warm_up = (u + i.warm_up_s).max(0.0);
        let unloaded = i.unloaded_vo2 + self.gain * i.warm_up_watts;
        let kinetics = |t: f64| 1.0 - libm::exp(-t / self.tau_s);
        let warm = i.rest_vo2 + (unloaded - i.rest_vo2) * kinetics(since_warm_up);
        if u <= 0.0 {
            return warm;
        }
        warm + self.gain * i.rate_w_per_min / 60.0 * (u - self.tau_s * kinetics(u))
    }

    /// Time at which V̇O₂ reaches the predicted peak, s: by halving, it rises throughout.
    fn time_of_peak(&self) -> f64 {
        let i = &self.inputs;
        let per_s = self.gain * i.rate_w_per_min / 60.0;
        let late_form = (i.vo2_peak - i.rest_vo2) / per_s + self.tau_s;
        let (mut low, mut high) = (0.0, late_form + 10.0 * self.tau_s);
        for _ in 0..48 {
            let middle = 0.5 * (low + high);
            if self.rising_vo2(middle) < i.vo2_peak { low = middle } else { high = middle }
        }
        0.5 * (low + high)
    }

    /// The values at `u` s from the start of the increments; beyond the predicted peak V̇O₂ and
    /// what follows from it stay.
    #[must_use]
    pub fn at(&self, u: f64) -> Moment {
        let beyond = self.peak_s.is_some_and(|peak| u >= peak);
        let vo2 = if beyond { self.inputs.vo2_peak } else { self.rising_vo2(u) };
        Moment { work_rate: self.work_rate(u), ..self.at_vo2(vo2) }
    }

    /// The values at this V̇O₂; work rate is not a number.
    #[must_use]
    pub fn at_vo2(&self, vo2: f64) -> Moment {
        let vco2 = self.vco2(vo2);
        Moment { work_rate: f64::NAN, vo2, vco2, hr: self.hr(vo2), ve: self.ve(vo2, vco2) }
    }

    fn vco2(&self, vo2: f64) -> f64 {
        if vo2 <= self.vt1_vo2 {
            let rest = self.inputs.rest_vo2;
            self.settings.rer_rest * rest + self.settings.s1 * (vo2 - rest)
        } else {
            self.vt1_vco2 + self.s2 * (vo2 - self.vt1_vo2)
        }
    }

    fn hr(&self, vo2: f64) -> Option<f64> {
        let (rest, peak) = self.inputs.hr?;
        Some(rest + (peak - rest) * self.share(vo2))
    }

    /// Share of the way from rest to predicted peak V̇O₂.
    #[must_use]
    pub fn share(&self, vo2: f64) -> f64 {
        (vo2 - self.inputs.rest_vo2) / (self.inputs.vo2_peak - self.inputs.rest_vo2)
    }

    fn ve(&self, vo2: f64, vco2: f64) -> Option<f64> {
        let slope = self.inputs.ve_slope?;
        let litres = |v: f64| v / 1000.0;
        let intercept = self.settings.ve_intercept;
        if vo2 <= self.vt2_vo2 {
            return Some(intercept + slope * litres(vco2));
        }
        let at_vt2 = self.vco2(self.vt2_vo2);
        let late = self.settings.late_ve * slope * litres(vco2 - at_vt2);
        Some(intercept + slope * litres(at_vt2) + late)
    }
}
