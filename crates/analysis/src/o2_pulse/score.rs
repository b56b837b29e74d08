//! The score and the word (steps 9 and 10 of the recipe), and what this test could have seen.
//!
//! The score is the log odds of "levels from 3 or 4 min before load end" against "a healthy
//! person's natural bend", a logistic regression on simulated people (seeds below 10,000; ramps of
//! 8 to 12 min, some of 15, all three nulls, some with heavy noise). Besides the evidence for a break and the late slope it
//! weighs the natural bend of this very test, which is what most often passes for a break.

use super::detail::{Course, CourseNumbers};

/// Score above which the course is flattened or falling.
pub const LINE_UPPER: f64 = 1.8;
/// Score above which it is at least slowed.
pub const LINE_LOWER: f64 = -0.3;

/// Weights of the score.
const CONSTANT: f64 = 4.19;
const LOG_BAYES_FACTOR: f64 = 0.59;
/// Of the late slope, for a ramp of 10 min.
const LATE_SLOPE: f64 = -1.38;
/// Of the ramp, per 10 min.
const RAMP: f64 = -0.49;
/// Of the even and odd bend of V̇O₂ and HR, each less its usual one, as a fraction of the rise.
const VO2_BEND: (f64, f64) = (3.11, -2.10);
const HR_BEND: (f64, f64) = (-0.13, 2.25);
/// Longer ramps than were calibrated count against a break, per min over 12 min.
const LONG_RAMP: f64 = -0.25;

/// Probit of "levelling for L min is found" on ln L, the own score, the standard error of the late
/// slope (for a ramp of 10 min), and min over 12 min of ramp.
const FOUND_CONSTANT: f64 = -1.29;
const FOUND_LN_MINUTES: f64 = 4.70;
const FOUND_SCORE: f64 = 0.363;
const FOUND_SE: f64 = -0.87;
const FOUND_LONG_RAMP: f64 = -0.076;
/// Standard normal 80th centile.
const Z_80: f64 = 0.841_621;
/// Median score of simulated people without disease: where the own test is found already, its own
/// score says nothing of how it would have read before.
const USUAL_SCORE: f64 = -3.8;
/// Levellings that were simulated, min.
const SIMULATED_MIN: (f64, f64) = (2.0, 5.0);

/// What the score weighs.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Weighed {
    /// Log Bayes factor of a late break.
    pub log_bayes_factor: f64,
    /// Late slope of the O₂ pulse, %/min.
    pub late_slope: f64,
    /// Ramp, min.
    pub ramp_min: f64,
    /// Even and odd bend of V̇O₂ less the usual ones, as fractions of its rise.
    pub vo2_bend: (f64, f64),
    /// The same of HR.
    pub hr_bend: (f64, f64),
}

impl Weighed {
    /// The score, log odds.
    pub fn score(&self) -> f64 {
        let k = self.ramp_min / 10.0;
        CONSTANT
            + LOG_BAYES_FACTOR * self.log_bayes_factor
            + k * (LATE_SLOPE * self.late_slope + RAMP)
            + VO2_BEND.0 * self.vo2_bend.0
            + VO2_BEND.1 * self.vo2_bend.1
            + HR_BEND.0 * self.hr_bend.0
            + HR_BEND.1 * self.hr_bend.1
            + LONG_RAMP * (self.ramp_min - 12.0).max(0.0)
    }
}

/// The word.
pub(crate) fn decide(numbers: &CourseNumbers) -> Course {
    let (g, se, score) = (numbers.late_slope.value, numbers.late_slope.se, numbers.score);
    let low = numbers.late_slope_interval.low;
    if score > LINE_UPPER && g + 2.33 * se < 0.0 {
        Course::Falling
    } else if score > LINE_UPPER && low <= 0.0 {
        Course::Flattened
    } else if score > LINE_LOWER {
        Course::RisingSlowed
    } else if low > 0.0 {
        Course::Rising
    } else {
        Course::Indeterminate
    }
}

/// Shortest levelling that this test would have found with probability 0.8, min before load end,
/// from its score, the standard error of its late slope (%/min) and its ramp (min); `None` where it
/// is longer than 5 min.
pub(crate) fn detection_limit(score: f64, late_slope_se: f64, ramp_min: f64) -> Option<f64> {
    let score = if score > LINE_LOWER { USUAL_SCORE } else { score };
    let probit = FOUND_CONSTANT
        + FOUND_SCORE * score
        + FOUND_SE * late_slope_se * ramp_min / 10.0
        + FOUND_LONG_RAMP * (ramp_min - 12.0).max(0.0);
    let minutes = libm::exp((Z_80 - probit) / FOUND_LN_MINUTES);
    (minutes <= SIMULATED_MIN.1).then_some(minutes.max(SIMULATED_MIN.0))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::results::Interval;

    fn word(g: f64, se: f64, low: f64, score: f64) -> Course {
        decide(&CourseNumbers {
            late_slope: super::super::Estimate { value: g, se },
            late_slope_interval: Interval { low, high: g + 1.645 * se },
            score,
            ..CourseNumbers::default()
        })
    }

    /// Each word just on either side of its line.
    #[test]
    fn words_change_at_their_lines() {
        assert_eq!(word(-2.0, 0.8, -3.3, 1.81), Course::Falling);
        assert_eq!(word(-1.8, 0.8, -3.1, 1.81), Course::Flattened);
        assert_eq!(word(1.0, 0.8, -0.3, 1.81), Course::Flattened);
        assert_eq!(word(1.0, 0.8, -0.3, 1.79), Course::RisingSlowed);
        assert_eq!(word(2.0, 0.8, 0.7, 1.81), Course::RisingSlowed);
        assert_eq!(word(2.0, 0.8, 0.7, -0.31), Course::Rising);
        assert_eq!(word(1.0, 0.8, -0.3, -0.31), Course::Indeterminate);
    }

    /// ln L = (0.8416 + 1.29 − 0.363 S + 0.87 k SE) / 4.70, here with SE 0.7 at 10 min. S = −7:
    /// (2.1316 + 2.541 + 0.609) / 4.70 = 1.1237, 3.08 min. A test that is found itself has the
    /// limit of S = −3.8: 0.8766, 2.40 min. S = −0.5: 0.6217, 1.86, below what was simulated.
    /// S = −16: 1.819, 6.2 min.
    #[test]
    fn the_limit_follows_the_own_score() {
        let limit = |score| detection_limit(score, 0.7, 10.0);
        assert!((limit(-7.0).unwrap() - 3.08).abs() < 0.01);
        assert!((limit(3.0).unwrap() - 2.40).abs() < 0.01);
        assert_eq!(limit(-0.5), Some(2.0));
        assert_eq!(limit(-16.0), None);
    }

    /// More noise and a longer ramp need a longer levelling.
    #[test]
    fn noise_and_long_ramps_raise_the_limit() {
        let base = detection_limit(-5.0, 0.7, 10.0).unwrap();
        assert!(detection_limit(-5.0, 1.1, 10.0).unwrap() > base + 0.1);
        assert!(detection_limit(-5.0, 0.7 * 10.0 / 15.0, 15.0).unwrap() > base);
    }

    /// More of a late slope speaks against a break, more evidence for one.
    #[test]
    fn the_score_moves_with_slope_and_evidence() {
        let usual = Weighed {
            log_bayes_factor: -1.5,
            late_slope: 4.7,
            ramp_min: 10.0,
            vo2_bend: (0.0, 0.0),
            hr_bend: (0.0, 0.0),
        };
        let level = Weighed { late_slope: 0.8, log_bayes_factor: 2.0, ..usual };
        assert!(usual.score() < LINE_LOWER && level.score() > LINE_UPPER);
        // k g is that of `level`: the ramp alone costs 0.6 · 0.49 + 4 · 0.25 = 1.294.
        let longer = Weighed { ramp_min: 16.0, late_slope: 0.5, ..level };
        assert!((level.score() - longer.score() - 1.294).abs() < 1e-9);
    }
}
