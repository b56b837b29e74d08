//! What the window and the page draw of the O₂-pulse course.

use crate::results::{Interval, Note};

/// The word of the course.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Course {
    /// The O₂ pulse keeps rising as expected.
    Rising,
    /// It rises less than expected; levelling cannot be separated.
    RisingSlowed,
    /// It no longer rises.
    Flattened,
    /// It falls.
    Falling,
    /// The recording does not decide.
    Indeterminate,
}

impl Course {
    /// Stable code word of the outcome `o2-pulse-course`.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Course::Rising => "rising",
            Course::RisingSlowed => "rising-slowed",
            Course::Flattened => "flattened",
            Course::Falling => "falling",
            Course::Indeterminate => "indeterminate",
        }
    }

    /// Whether it says that the O₂ pulse stopped rising.
    #[must_use]
    pub fn is_flat_or_falling(self) -> bool {
        matches!(self, Course::Flattened | Course::Falling)
    }
}

/// One 10-s bin of clipped breaths.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Bin {
    /// Centre, s.
    pub t_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// HR, /min.
    pub hr: f64,
    /// Breaths in it.
    pub breaths: usize,
}

/// The fitted curves at one instant.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct CurvePoint {
    /// Time, s.
    pub t_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// Standard error of V̇O₂, mL/min.
    pub vo2_se: f64,
    /// HR, /min.
    pub hr: f64,
    /// Standard error of HR, /min.
    pub hr_se: f64,
    /// O₂ pulse, mL/beat.
    pub pulse: f64,
    /// Standard error of the O₂ pulse, mL/beat.
    pub pulse_se: f64,
}

/// A straight stretch of V̇O₂ and HR in time; their ratio is the line drawn for the O₂ pulse.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Line {
    /// Where it was fitted, s.
    pub from_s: f64,
    /// Where it was fitted, s.
    pub to_s: f64,
    /// Reference time, s.
    pub at_s: f64,
    /// V̇O₂ at the reference time, mL/min.
    pub vo2: f64,
    /// mL/min per min.
    pub vo2_per_min: f64,
    /// HR at the reference time, /min.
    pub hr: f64,
    /// /min per min.
    pub hr_per_min: f64,
}

impl Line {
    /// V̇O₂, HR and O₂ pulse of the line at `t_s`.
    #[must_use]
    pub fn at(&self, t_s: f64) -> (f64, f64, f64) {
        let minutes = (t_s - self.at_s) / 60.0;
        let vo2 = self.vo2 + self.vo2_per_min * minutes;
        let hr = self.hr + self.hr_per_min * minutes;
        (vo2, hr, vo2 / hr)
    }

    /// Slope of V̇O₂ on HR, mL/beat.
    #[must_use]
    pub fn slope(&self) -> f64 {
        self.vo2_per_min / self.hr_per_min
    }

    /// Local slope of V̇O₂ on HR over the O₂ pulse: > 1 rising, 1 level, < 1 falling.
    #[must_use]
    pub fn rho(&self) -> f64 {
        self.slope() / (self.vo2 / self.hr)
    }

    /// Relative slope of the O₂ pulse, %/min.
    #[must_use]
    pub fn pulse_slope_pct(&self) -> f64 {
        100.0 * (self.vo2_per_min / self.vo2 - self.hr_per_min / self.hr)
    }
}

/// An estimate with its standard error.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Estimate {
    /// The estimate.
    pub value: f64,
    /// Its standard error, same unit.
    pub se: f64,
}

impl Estimate {
    /// Its 90 % interval.
    #[must_use]
    pub fn interval(self) -> Interval {
        Interval::around(self.value, 1.645 * self.se)
    }
}

/// The numbers of the calibrated recipe.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct CourseNumbers {
    /// Relative slope of the O₂ pulse in the late window, %/min.
    pub late_slope: Estimate,
    /// Its 90 % interval: reaches further down where the slope broke.
    pub late_slope_interval: Interval,
    /// Slope of the own early line carried on, %/min.
    pub early_slope: f64,
    /// Late slope less the early line's, %/min.
    pub deficit: Estimate,
    /// Part of the deficit due to slowing V̇O₂, %/min.
    pub deficit_vo2: Estimate,
    /// Part of the deficit due to accelerating HR, %/min.
    pub deficit_hr: Estimate,
    /// Late over early slope of V̇O₂ on HR.
    pub slope_ratio: Estimate,
    /// Early local slope over O₂ pulse.
    pub rho_early: f64,
    /// Late local slope over O₂ pulse.
    pub rho_late: f64,
    /// Early slope of V̇O₂ on HR, mL/beat: the value towards which the O₂ pulse rises.
    pub asymptote: Estimate,
    /// Log Bayes factor of a late break against a smooth natural bend.
    pub log_bayes_factor: f64,
    /// Score (log odds).
    pub score: f64,
    /// Line of the score above which the course is flattened or falling.
    pub line_upper: f64,
    /// Line of the score above which it is at least slowed.
    pub line_lower: f64,
    /// Shortest levelling that this test would have found with probability 0.8, min before load
    /// end; `None` where it is longer than 5 min.
    pub detection_limit_min: Option<f64>,
    /// Relative slope over the last 4 min, %/min, where the ramp is long enough.
    pub late_slope_4min: Option<Estimate>,
}

/// When the slowing began; only where the strict rule holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Onset {
    /// Time, s.
    pub t_s: f64,
    /// Its 10–90 % set, s.
    pub set_s: Interval,
    /// Minutes before load end.
    pub before_end_min: f64,
}

/// Everything drawn of the course. Where the course is withheld, `bins` may still be there.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct CourseDetail {
    /// The word; `None` where it is withheld.
    pub course: Option<Course>,
    /// Why the word is withheld; empty where it is given.
    pub withheld: Vec<Note>,
    /// Doubts that stand with the word.
    pub doubts: Vec<Note>,
    /// Start of the increments and load end, s.
    pub ramp_s: (f64, f64),
    /// Bins from 2 min into the ramp to 20 s before load end.
    pub bins: Vec<Bin>,
    /// Fitted curves at the bins, with standard errors.
    pub curve: Vec<CurvePoint>,
    /// The own early line, to be carried on to load end.
    pub early: Option<Line>,
    /// The late line.
    pub late: Option<Line>,
    /// Late line of the O₂ pulse with the interval of its level and slope: (s, low, high).
    pub late_band: Vec<(f64, Interval)>,
    /// The numbers; `None` where nothing may be said of the shape.
    pub numbers: Option<CourseNumbers>,
    /// Onset of the slowing.
    pub onset: Option<Onset>,
    /// Breaths in the late window.
    pub late_breaths: usize,
}
