//! HR against the line from rest to the predicted peak: a deficit of rate, and nothing about
//! stroke volume. Against the person's own earlier test: the share of the O₂ pulse that is due to
//! the rate.

use super::detail::{Ranged, RatePoint};
use super::factors::Point;
use crate::results::Interval;

/// SD of the predicted peak HR, /min (common figure of such equations).
pub(crate) const EXPECTED_SD: f64 = 12.0;
/// Deficit from which an O₂ pulse is "not reassuring": one and a half SD, /min.
pub(crate) const NOTABLE: f64 = 18.0;

/// SD of HR at one V̇O₂ between two tests of one person, /min (common practice).
pub(crate) const OWN_SD: f64 = 5.0;

/// What the own earlier test says at one instant.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct OwnRate {
    /// Share of the O₂ pulse due to the rate, 100 · ln(expected HR ÷ HR), %.
    pub share: Ranged,
    /// The O₂ pulse at the rate of the own test, V̇O₂ ÷ expected HR, mL/beat.
    pub pulse: Ranged,
}

/// The own line at a V̇O₂ (mL/min) and HR (/min): `None` beyond 10 % outside the span of the own
/// test, where a straight line is not known to hold.
pub(crate) fn own(line: &ExpectedRate, vo2: f64, hr: f64) -> Option<OwnRate> {
    let slack = 0.1 * (line.peak.0 - line.rest.0);
    let within = vo2 >= line.rest.0 - slack && vo2 <= line.peak.0 + slack;
    let expected = line.at(vo2);
    if !within || expected <= 0.0 || hr <= 0.0 {
        return None;
    }
    let share = 100.0 * libm::log(expected / hr);
    let sd = OWN_SD / expected;
    let (value, width) = (vo2 / expected, libm::exp(1.645 * sd));
    Some(OwnRate {
        share: Ranged { value: share, interval: Interval::around(share, 164.5 * sd) },
        pulse: Ranged { value, interval: Interval { low: value / width, high: value * width } },
    })
}

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

    /// V̇O₂ 1800, HR 110, own rate 150 at that V̇O₂: pulse 16.4, at the own rate 12.0, share 31 %
    /// (100 ln(150/110) = 31.0).
    #[test]
    fn the_worked_share() {
        let line = ExpectedRate { rest: (600.0, 90.0), peak: (2400.0, 180.0) };
        let own = own(&line, 1800.0, 110.0).unwrap();
        assert!((own.share.value - 31.0).abs() < 0.05, "{own:?}");
        assert!((own.pulse.value - 12.0).abs() < 1e-9);
        // 5/min of 150 is 3.33 %: 90 % interval of the share ± 5.5 %.
        assert!((own.share.interval.high - own.share.value - 5.48).abs() < 0.01);
    }

    #[test]
    fn far_outside_the_own_test_nothing_is_said() {
        let line = ExpectedRate { rest: (600.0, 90.0), peak: (1600.0, 150.0) };
        assert!(own(&line, 1700.0, 120.0).is_some());
        assert_eq!(own(&line, 1701.0, 120.0), None);
    }
}
