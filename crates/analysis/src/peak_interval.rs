//! The highest 30-s mean is too high by noise: its correction and interval.
//!
//! s30 = peak·s_rel/√n30 is the noise of a 30-s mean; the steeper V̇O₂ rises (θ: 30-s rise in units
//! of s30), the fewer windows compete for the highest. Factors calibrated by simulation.

use crate::note::{Arg, Note};
use crate::repeatability::{self, CV_PEAK_VO2, Z90};
use crate::results::{Interval, Outcome};
use crate::stage::Stage;

/// Bias = 0.9·s30/(1 + 1.6·θ).
const BIAS: f64 = 0.9;
const BIAS_THETA: f64 = 1.6;
/// Calibrated factor, and the one for exports averaged over a few breaths.
const F: f64 = 0.72;
const F_PRE_SMOOTHED: f64 = 0.84;
/// The only window for which the correction was calibrated, s.
const WINDOW_S: f64 = 30.0;

/// Peak V̇O₂ with its interval, corrected where that was calibrated; the raw mean beside it.
pub(crate) fn vo2(stage: &Stage<'_>, raw: Outcome) -> Vec<Outcome> {
    let Some(value) = raw.number() else { return vec![raw] };
    let repeat =
        |value: f64, recording| Some(repeatability::widen(value, recording, &[CV_PEAK_VO2]));
    if !stage.intervals_hold() {
        let raw = raw.repeated_within(repeat(value, None));
        return vec![stage.doubt_interval(raw.doubting(Note::new("peak-bias-not-corrected")))];
    }
    match correction(stage, value).filter(|_| stage.settings.peak_window_s == WINDOW_S) {
        None => {
            let raw = raw.repeated_within(repeat(value, None));
            vec![raw.doubting(Note::new("peak-bias-not-corrected"))]
        }
        Some((bias, half)) => {
            let corrected = value - bias;
            let interval = Some(Interval::around(corrected, half));
            let mut outcome = Outcome::quantity(
                raw.id.clone(),
                raw.at,
                "highest-30s-corrected",
                unit(&raw),
                corrected,
            )
            .recorded_within(interval)
            .repeated_within(repeat(corrected, interval))
            .doubting(Note::new("peak-bias-corrected").with("bias", Arg::Number(bias, unit(&raw))));
            outcome.basis = raw.basis.clone();
            vec![stage.doubt_interval(outcome), raw.alternative()]
        }
    }
}

fn unit(outcome: &Outcome) -> crate::unit::Unit {
    outcome.unit.unwrap_or(crate::unit::Unit::MlPerMin)
}

/// Bias and half width of the interval, mL/min.
fn correction(stage: &Stage<'_>, peak: f64) -> Option<(f64, f64)> {
    let series = stage.ramp_series.as_ref()?;
    let end = series.ramp.1;
    let last = series.until(end - 60.0)..series.len();
    let durations = &series.d_s[last];
    if durations.len() < 3 {
        return None;
    }
    let breath_s = crate::regression::mean(durations);
    let s30 = peak * series.vo2_noise()? / (WINDOW_S / breath_s).sqrt();
    bias_and_half(s30, series.vo2_rise()?, series.pre_smoothed)
}

/// From the noise of a 30-s mean (mL/min) and the rise of V̇O₂ (mL/min per s).
fn bias_and_half(s30: f64, rise: f64, pre_smoothed: bool) -> Option<(f64, f64)> {
    let theta = (WINDOW_S * rise / s30).max(0.0);
    let f = if pre_smoothed { F_PRE_SMOOTHED } else { F };
    let bias = BIAS * s30 / (1.0 + BIAS_THETA * theta);
    (bias.is_finite() && s30 > 0.0).then_some((bias, Z90 * f * s30))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bias_by_the_published_form() {
        // s30 = 40, rise 200 mL/min per min = 3.333 per s: θ = 100/40 = 2.5, bias 36/5 = 7.2.
        let (bias, half) = bias_and_half(40.0, 200.0 / 60.0, false).unwrap();
        assert!((bias - 7.2).abs() < 1e-9);
        assert!((half - 1.645 * 0.72 * 40.0).abs() < 1e-9);
        // Without a rise every window competes.
        assert_eq!(bias_and_half(40.0, 0.0, false).unwrap().0, 36.0);
        assert_eq!(bias_and_half(0.0, 1.0, false), None);
    }
}
