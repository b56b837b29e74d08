//! "Forward stroke volume at peak was probably not below …": every input at its cautious end.

use super::content::{PAO2_ASSUMED, arterial_content, effective_hb};
use super::detail::{Bound, Ranged, equal_pulse_sv};
use super::extraction::stringer;
use crate::facts::{Haemoglobin, HbTime};
use crate::results::{Arg, Note};
use crate::settings::FickSettings;
use crate::unit::Unit;

/// Blood as it enters the bound and the plane.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Blood {
    /// Hb as stated, g/dL.
    pub hb: f64,
    /// Hb in exercise, g/dL, at its cautious (upper) end.
    pub hb_upper: f64,
    /// Whether it was raised for haemoconcentration.
    pub raised: bool,
    /// COHb, fraction; 0 unless measured.
    pub cohb: f64,
    /// Saturation at its upper limit, fraction.
    pub sao2_upper: f64,
    /// Usual saturation, fraction.
    pub sao2: f64,
}

impl Blood {
    /// From the stated haemoglobin; `spo2` = confirmed saturation at peak, %.
    pub fn new(hb: Haemoglobin, cohb: Option<f64>, spo2: Option<f64>, s: &FickSettings) -> Self {
        let g_dl = hb.g_per_l / 10.0;
        let raised = hb.at != Some(HbTime::Peak);
        let factor = if raised { 1.0 + s.haemoconcentration } else { 1.0 };
        Self {
            hb: g_dl,
            hb_upper: g_dl * factor,
            raised,
            cohb: cohb.unwrap_or(0.0),
            sao2_upper: spo2.map_or(s.sao2_upper, |x| ((x + spo2_error(x)) / 100.0).min(1.0)),
            sao2: spo2.map_or(0.98, |x| x / 100.0),
        }
    }

    /// Content at its cautious end, mL/dL.
    pub fn content_upper(&self, s: &FickSettings) -> f64 {
        arterial_content(
            s.hufner,
            effective_hb(self.hb_upper, self.cohb),
            self.sao2_upper,
            PAO2_ASSUMED,
        )
    }

    /// Usual content, mL/dL.
    pub fn content(&self, s: &FickSettings) -> f64 {
        arterial_content(s.hufner, effective_hb(self.hb, self.cohb), self.sao2, PAO2_ASSUMED)
    }
}

/// Error of a pulse oximeter, points: ± 2, below 90 % ± 4.
pub(crate) fn spo2_error(spo2: f64) -> f64 {
    if spo2 < 90.0 { 4.0 } else { 2.0 }
}

/// The bound at an O₂ pulse (mL/beat) with the 90 % interval of this recording.
pub(crate) fn bound(pulse: Ranged, blood: &Blood, s: &FickSettings) -> Bound {
    let low = pulse.interval.low * (1.0 - s.calibration);
    let content = s.extraction_limit * blood.content_upper(s);
    let usual_content = s.extraction_usual * blood.content(s);
    let percent = |x: f64| Arg::Number(100.0 * x, Unit::Percent);
    let mut assumptions = vec![
        Note::new("bound-pulse").with("value", Arg::Number(pulse.interval.low, Unit::MlPerBeat)),
        Note::new("bound-calibration").with("value", percent(s.calibration)),
        Note::new("bound-hb").with("value", Arg::Number(10.0 * blood.hb, Unit::GramPerL)),
    ];
    if blood.raised {
        assumptions.push(
            Note::new("bound-haemoconcentration").with("value", percent(s.haemoconcentration)),
        );
    }
    assumptions.push(Note::new("bound-sao2").with("value", percent(blood.sao2_upper)));
    assumptions.push(Note::new("bound-cohb").with("value", percent(blood.cohb)));
    assumptions.push(Note::new("bound-extraction").with("value", percent(s.extraction_limit)));
    assumptions.push(
        Note::new("bound-hufner").with("value", Arg::Name(format!("{:.2}", s.hufner).into())),
    );
    Bound {
        stroke_volume: equal_pulse_sv(low, content),
        usual: equal_pulse_sv(pulse.value, usual_content),
        at_normal_extraction: (
            equal_pulse_sv(pulse.value, 13.0),
            equal_pulse_sv(pulse.value, stringer(100.0)),
            equal_pulse_sv(pulse.value, 18.0),
        ),
        content,
        pulse: low,
        assumptions,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::results::Interval;

    fn exact(pulse: f64) -> Ranged {
        Ranged { value: pulse, interval: Interval { low: pulse, high: pulse } }
    }

    fn settings() -> FickSettings {
        FickSettings { calibration: 0.0, ..FickSettings::default() }
    }

    fn hb(at: HbTime) -> Haemoglobin {
        Haemoglobin { g_per_l: 150.0, at: Some(at) }
    }

    /// Before any interval: 100 P ÷ (0.92 (1.34 · 16.5 · 1.00 + 0.31)) = 100 P ÷ 20.63 →
    /// P 8: 39, 10: 48, 12.5: 61, 16.7: 81 mL; usual: 800 ÷ (0.85 · 20.01) = 47 mL.
    #[test]
    fn worked_bounds() {
        let blood = Blood::new(hb(HbTime::Rest), None, None, &settings());
        for (pulse, expected, normal) in [
            (8.0, 39.0, (62.0, 49.0, 44.0)),
            (10.0, 48.0, (77.0, 62.0, 56.0)),
            (12.5, 61.0, (96.0, 77.0, 69.0)),
            (16.7, 81.0, (129.0, 103.0, 93.0)),
        ] {
            let b = bound(exact(pulse), &blood, &settings());
            assert!((b.stroke_volume - expected).abs() < 0.55, "{pulse}: {}", b.stroke_volume);
            let (a, m, z) = b.at_normal_extraction;
            for (got, want) in [(a, normal.0), (m, normal.1), (z, normal.2)] {
                assert!((got - want).abs() < 0.9, "{got} {want}");
            }
        }
        assert!((bound(exact(8.0), &blood, &settings()).usual - 47.0).abs() < 0.5);
    }

    /// Every cautious input lowers the bound.
    #[test]
    fn each_input_at_its_cautious_end_lowers_the_bound() {
        let s = FickSettings::default();
        let base = Blood::new(hb(HbTime::Rest), None, None, &s);
        let wide = Ranged { value: 12.0, interval: Interval { low: 11.0, high: 13.0 } };
        let b = bound(wide, &base, &s).stroke_volume;
        assert!(b < bound(exact(12.0), &base, &s).stroke_volume);
        assert!(b < bound(wide, &base, &settings()).stroke_volume);
        let at_peak = Blood::new(hb(HbTime::Peak), None, None, &s);
        assert!(b < bound(wide, &at_peak, &s).stroke_volume);
        let smoker = Blood::new(hb(HbTime::Rest), Some(0.08), None, &s);
        assert!(b < bound(wide, &smoker, &s).stroke_volume);
        let desaturated = Blood::new(hb(HbTime::Rest), None, Some(88.0), &s);
        assert_eq!(desaturated.sao2_upper, 0.92);
        assert!(b < bound(wide, &desaturated, &s).stroke_volume);
    }

    #[test]
    fn oximeter_error_widens_below_90() {
        assert_eq!((spo2_error(89.0), spo2_error(90.0)), (4.0, 2.0));
    }
}
