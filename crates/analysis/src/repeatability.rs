//! What a repeated test would show: published test–retest variation joined with the noise of this
//! recording.

use crate::results::Interval;

/// Half width of a 90 % interval of a Gaussian, in SD.
pub(crate) const Z90: f64 = 1.645;

/// Within-person coefficient of variation between two tests within 30 days (DeCato et al., Med Sci
/// Sports Exerc 2018).
pub(crate) const CV_PEAK_VO2: f64 = 0.049;
/// The same for V̇O₂ at the lactate (first) threshold.
pub(crate) const CV_VT1_VO2: f64 = 0.104;
/// The same for peak O₂ pulse.
pub(crate) const CV_PEAK_O2_PULSE: f64 = 0.046;
/// The same for peak V̇E.
pub(crate) const CV_PEAK_VE: f64 = 0.074;
/// The same for V̇E/V̇CO₂ at the first threshold.
pub(crate) const CV_EQCO2_VT1: f64 = 0.040;
/// The same for V̇E/V̇O₂ at the first threshold.
pub(crate) const CV_EQO2_VT1: f64 = 0.048;
/// Variation between two readers of VT1, SD of their difference 8 % (Kaczmarek et al. 2019); one
/// reader's share is 8 % / √2.
pub(crate) const CV_VT1_READER: f64 = 0.08 * std::f64::consts::FRAC_1_SQRT_2;
/// OUES: coefficient of repeatability 20 % = 1.96·√2·CV.
pub(crate) const CV_OUES: f64 = 0.20 / (1.96 * std::f64::consts::SQRT_2);

/// Widens each arm of `recording` about `value` by the variation `cvs`, in quadrature. Without a
/// recording interval the published variation stands alone.
pub(crate) fn widen(value: f64, recording: Option<Interval>, cvs: &[f64]) -> Interval {
    let extra: f64 = cvs.iter().map(|cv| (Z90 * cv * value) * (Z90 * cv * value)).sum();
    let arm = |a: f64| (a * a + extra).sqrt();
    let (low, high) = recording.map_or((0.0, 0.0), |i| (value - i.low, i.high - value));
    Interval { low: value - arm(low), high: value + arm(high) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn arms_join_in_quadrature() {
        // 1.645 · 0.049 · 2000 = 161.21; with 60 and 80: √(60² + 161.21²) = 172.01, 179.97.
        let wide = widen(2000.0, Some(Interval { low: 1940.0, high: 2080.0 }), &[CV_PEAK_VO2]);
        assert!((2000.0 - wide.low - 172.01).abs() < 0.01, "{wide:?}");
        assert!((wide.high - 2000.0 - 179.97).abs() < 0.01, "{wide:?}");
    }
}
