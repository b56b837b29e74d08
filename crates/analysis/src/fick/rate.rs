//! HR against the line from rest to the predicted peak: a deficit of rate, and nothing about
//! stroke volume.

use super::detail::RatePoint;
use super::factors::Point;

/// SD of the predicted peak HR, /min (common figure of such equations).
pub(crate) const EXPECTED_SD: f64 = 12.0;
/// Deficit from which an O₂ pulse is "not reassuring": one and a half SD, /min.
pub(crate) const NOTABLE: f64 = 18.0;

/// Straight line of expected HR on V̇O₂.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ExpectedRate {
    /// V̇O₂ (mL/min) and HR (/min) at rest.
    pub rest: (f64, f64),
    /// Predicted V̇O₂ and HR at peak.
    pub peak: (f64, f64),
}

impl ExpectedRate {
    /// Expected HR at a V̇O₂, /min.
    pub fn at(&self, vo2: f64) -> f64 {
        let share = (vo2 - self.rest.0) / (self.peak.0 - self.rest.0);
        self.rest.1 + share * (self.peak.1 - self.rest.1)
    }

    /// SD of the expected HR: the error of the predicted peak, in proportion.
    pub fn sd(&self, vo2: f64) -> f64 {
        EXPECTED_SD * ((vo2 - self.rest.0) / (self.peak.0 - self.rest.0)).abs()
    }
}

/// The deficit over the ramp.
pub(crate) fn points(line: &ExpectedRate, points: &[Point]) -> Vec<RatePoint> {
    points
        .iter()
        .map(|p| RatePoint {
            t_s: p.t_s,
            vo2: p.vo2,
            hr: p.vo2 / p.pulse,
            expected: line.at(p.vo2),
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Line from (300, 70) to (2300, 170): 0.05 /min per mL/min, so 145 at 1800; HR 110 is 35 short.
    #[test]
    fn deficit_by_hand() {
        let line = ExpectedRate { rest: (300.0, 70.0), peak: (2300.0, 170.0) };
        assert!((line.at(1800.0) - 145.0).abs() < 1e-9);
        assert!((line.sd(1800.0) - 9.0).abs() < 1e-9);
        let p = Point { t_s: 0.0, vo2: 1800.0, pulse: 1800.0 / 110.0, fraction_content: None };
        let r = points(&line, &[p])[0];
        assert!((r.expected - r.hr - 35.0).abs() < 1e-9);
    }
}
