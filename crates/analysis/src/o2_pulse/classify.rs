//! The calibrated recipe from breaths to the word of the course.
//!
//! Constants and their error rates: calibrated on the stage values of Donne et al. 2024
//! (doi:10.5281/zenodo.10841412) and the ramps of Chabert et al. 2022 (doi:10.13026/2qs3-kh43).

use super::bayes;
use super::bins::{self, Binned, TRIM_S};
use super::design;
use super::detail::{Course, CourseDetail, CourseNumbers, CurvePoint, Estimate, Line, Onset};
use super::fit::{Fit, Variable, mean_weights, slope_weights};
use super::linalg::dot;
use super::score::{self, LINE_LOWER, LINE_UPPER, Weighed};
use crate::recording::Trace;
use crate::results::{Arg, Interval, Note};

/// Length of the late window, s.
pub const LATE_S: f64 = 180.0;
/// The prior of the curves rounds a steep knee, so the interval of the late slope reaches further
/// down by this share of the deficit.
const ROUNDED_KNEE: f64 = 0.075;
/// Shortest ramp, s.
pub const SHORTEST_RAMP_S: f64 = 360.0;
/// Fewest breaths in the late window.
pub const FEWEST_LATE_BREATHS: usize = 60;

/// Breaths and load of one ramp.
#[derive(Clone, Copy, Debug)]
pub struct CourseInput<'a> {
    /// Times of the breaths, s, rising.
    pub t_s: &'a [f64],
    /// V̇O₂ of each breath, mL/min.
    pub vo2: &'a [f64],
    /// Mean HR over each breath, /min.
    pub hr: &'a [f64],
    /// Load over time, W; empty = a load that rises in proportion to time.
    pub load: &'a Trace,
    /// Start of the increments, s.
    pub ramp_start_s: f64,
    /// Load end, s.
    pub load_end_s: f64,
}

/// What the recipe works on, ready for its steps.
struct Parts {
    binned: Binned,
    vo2: Fit,
    hr: Fit,
    /// Bin times, min.
    minutes: Vec<f64>,
    late_from_s: f64,
}

/// Reads the course of the O₂ pulse.
///
/// Nothing is known here about rhythm, gas or devices: those who call withhold the word for these.
///
/// # Errors
/// The reason why not even the curves can be given: `course-ramp-too-short`, `course-too-few-breaths`,
/// `load-not-rising`, `course-not-fitted`.
pub fn classify(input: &CourseInput<'_>) -> Result<CourseDetail, Note> {
    let ramp_s = input.load_end_s - input.ramp_start_s;
    if ramp_s.is_nan() || ramp_s < SHORTEST_RAMP_S {
        return Err(
            Note::new("course-ramp-too-short").with("duration", Arg::Duration(ramp_s.max(0.0)))
        );
    }
    let parts = prepare(input)?;
    let late = Window::late(&parts, LATE_S);
    let numbers = numbers(&parts, &late, ramp_s / 60.0).ok_or(Note::new("course-not-fitted"))?;
    let evidence = bayes::evidence(&parts.vo2, &parts.hr).ok_or(Note::new("course-not-fitted"))?;
    let course = score::decide(&numbers);
    let mut detail = drawing(input, &parts, &late);
    detail.course = Some(course);
    detail.onset = onset(course, &evidence, input.load_end_s);
    detail.numbers = Some(numbers);
    let (from, to) = (parts.late_from_s, input.load_end_s - TRIM_S);
    detail.late_breaths = input.t_s.iter().filter(|t| **t >= from && **t < to).count();
    if detail.late_breaths < FEWEST_LATE_BREATHS {
        detail.course = None;
        detail.onset = None;
        detail
            .withheld
            .push(Note::new("few-late-breaths").with("count", Arg::Count(detail.late_breaths)));
    }
    Ok(detail)
}

fn prepare(input: &CourseInput<'_>) -> Result<Parts, Note> {
    let binned = bins::bin(input.t_s, input.vo2, input.hr, input.ramp_start_s, input.load_end_s)
        .ok_or(Note::new("course-too-few-breaths"))?;
    let late_from_s = input.load_end_s - TRIM_S - LATE_S;
    let late = binned.bins.iter().filter(|b| b.t_s >= late_from_s).count();
    if late < 6 || binned.bins.len() - late < 6 {
        return Err(Note::new("course-too-few-breaths"));
    }
    let design = design::design(input.load, input.ramp_start_s, input.load_end_s, &binned.bins)
        .ok_or(Note::new("load-not-rising"))?;
    let vo2: Vec<f64> = binned.bins.iter().map(|b| b.vo2).collect();
    let hr: Vec<f64> = binned.bins.iter().map(|b| b.hr).collect();
    let fit = |variable, y: &[f64], level: &[f64]| {
        Fit::new(variable, &binned.bins, y, level, &design).ok_or(Note::new("course-not-fitted"))
    };
    let (vo2, hr) =
        (fit(Variable::Vo2, &vo2, &binned.vo2_level)?, fit(Variable::Hr, &hr, &binned.hr_level)?);
    if vo2.curve.iter().chain(&hr.curve).any(|x| x.is_nan() || *x <= 0.0) {
        return Err(Note::new("course-not-fitted"));
    }
    let minutes = binned.bins.iter().map(|b| b.t_s / 60.0).collect();
    Ok(Parts { binned, vo2, hr, minutes, late_from_s })
}

/// Weights on the bins of a window.
struct Window {
    from_s: f64,
    slope: Vec<f64>,
    mean: Vec<f64>,
    early_slope: Vec<f64>,
    early_mean: Vec<f64>,
}

impl Window {
    /// The last `length_s` before the trim, and all before it.
    fn late(parts: &Parts, length_s: f64) -> Self {
        let bins = &parts.binned.bins;
        let from_s = parts.late_from_s + LATE_S - length_s;
        let inside = |i: usize| bins[i].t_s >= from_s;
        Self {
            from_s,
            slope: slope_weights(&parts.minutes, inside),
            mean: mean_weights(bins.len(), inside),
            early_slope: slope_weights(&parts.minutes, |i| !inside(i)),
            early_mean: mean_weights(bins.len(), |i| !inside(i)),
        }
    }
}

/// Relative slope of the O₂ pulse over the window, %/min, with the calibrated standard error.
fn pulse_slope(parts: &Parts, window: &Window) -> Estimate {
    let ln_pulse: Vec<f64> = parts
        .vo2
        .curve
        .iter()
        .zip(&parts.hr.curve)
        .map(|(v, h)| libm::log(*v) - libm::log(*h))
        .collect();
    let variance = |fit: &Fit| {
        let weights: Vec<f64> = window.slope.iter().zip(&fit.curve).map(|(a, f)| a / f).collect();
        fit.variance(&fit.functional(&weights).on_theta)
    };
    Estimate {
        value: 100.0 * dot(&window.slope, &ln_pulse),
        se: 1.05 * 100.0 * (variance(&parts.vo2) + variance(&parts.hr)).max(0.0).sqrt(),
    }
}

/// Early and late slopes and the late level of one variable, with coefficients for delta rules.
struct Slopes {
    early: f64,
    late: f64,
    level: f64,
    on_early: [f64; 7],
    on_late: [f64; 7],
    on_level: [f64; 7],
}

impl Slopes {
    fn of(fit: &Fit, window: &Window) -> Self {
        let (early, late, level) = (
            fit.functional(&window.early_slope),
            fit.functional(&window.slope),
            fit.functional(&window.mean),
        );
        Self {
            early: early.value,
            late: late.value,
            level: level.value,
            on_early: early.on_theta,
            on_late: late.on_theta,
            on_level: level.on_theta,
        }
    }

    /// Variance of `a · early + b · late + c · level`.
    fn variance(&self, fit: &Fit, a: f64, b: f64, c: f64) -> f64 {
        let mut sum = [0.0; 7];
        for (j, s) in sum.iter_mut().enumerate() {
            *s = a * self.on_early[j] + b * self.on_late[j] + c * self.on_level[j];
        }
        fit.variance(&sum).max(0.0)
    }

    /// 100 (late slope − early slope) ÷ late level, %/min.
    fn change(&self, fit: &Fit) -> Estimate {
        let scale = 100.0 / self.level;
        let value = scale * (self.late - self.early);
        let variance = self.variance(fit, -scale, scale, -value / self.level);
        Estimate { value, se: variance.sqrt() }
    }
}

fn numbers(parts: &Parts, window: &Window, ramp_min: f64) -> Option<CourseNumbers> {
    let g = pulse_slope(parts, window);
    let (v, h) = (Slopes::of(&parts.vo2, window), Slopes::of(&parts.hr, window));
    let (change_v, change_h) = (v.change(&parts.vo2), h.change(&parts.hr));
    let deficit_hr = Estimate { value: -change_h.value, se: change_h.se };
    let deficit = Estimate {
        value: change_v.value + deficit_hr.value,
        se: (change_v.se * change_v.se + change_h.se * change_h.se).sqrt(),
    };
    let asymptote = v.early / h.early;
    let asymptote_variance = v.variance(&parts.vo2, 1.0 / h.early, 0.0, 0.0)
        + h.variance(&parts.hr, asymptote / h.early, 0.0, 0.0);
    let late_slope = v.late / h.late;
    let ratio = late_slope / asymptote;
    let ratio_variance = v.variance(&parts.vo2, -ratio / v.early, 1.0 / (h.late * asymptote), 0.0)
        + h.variance(&parts.hr, ratio / h.early, -ratio / h.late, 0.0);
    let early_pulse =
        dot(&parts.vo2.curve, &window.early_mean) / dot(&parts.hr.curve, &window.early_mean);
    let evidence = bayes::evidence(&parts.vo2, &parts.hr)?;
    let weighed = Weighed {
        log_bayes_factor: evidence.log_bayes_factor,
        late_slope: g.value,
        ramp_min,
        vo2_bend: parts.vo2.bend,
        hr_bend: parts.hr.bend,
    };
    let score = weighed.score();
    score.is_finite().then(|| CourseNumbers {
        late_slope: g,
        late_slope_interval: reaching_down(g, deficit.value),
        early_slope: g.value - deficit.value,
        deficit,
        deficit_vo2: change_v,
        deficit_hr,
        slope_ratio: Estimate { value: ratio, se: ratio_variance.sqrt() },
        rho_early: asymptote / early_pulse,
        rho_late: late_slope / (v.level / h.level),
        asymptote: Estimate { value: asymptote, se: asymptote_variance.sqrt() },
        log_bayes_factor: evidence.log_bayes_factor,
        score,
        line_upper: LINE_UPPER,
        line_lower: LINE_LOWER,
        detection_limit_min: score::detection_limit(score, g.se, ramp_min),
        late_slope_4min: (ramp_min >= 10.0)
            .then(|| pulse_slope(parts, &Window::late(parts, 240.0))),
    })
}

/// The 90 % interval of the late slope, %/min.
fn reaching_down(g: Estimate, deficit: f64) -> Interval {
    let knee = ROUNDED_KNEE * deficit.min(0.0);
    let low = g.value - 1.645 * (g.se * g.se + knee * knee).sqrt();
    Interval { low, high: g.interval().high }
}

/// The onset is given only above the upper line and where the evidence is for a real loss of slope.
fn onset(course: Course, evidence: &bayes::Evidence, end_s: f64) -> Option<Onset> {
    let (near, far) = evidence.onset_set_min;
    let strict = course.is_flat_or_falling() && evidence.ratio <= 0.5 && far - near <= 2.0;
    strict.then_some(Onset {
        t_s: end_s - 60.0 * evidence.onset_min,
        set_s: Interval { low: end_s - 60.0 * far, high: end_s - 60.0 * near },
        before_end_min: evidence.onset_min,
    })
}

fn line(parts: &Parts, from_s: f64, to_s: f64, slope: &[f64], mean: &[f64]) -> Line {
    Line {
        from_s,
        to_s,
        at_s: 60.0 * dot(&parts.minutes, mean),
        vo2: dot(&parts.vo2.curve, mean),
        vo2_per_min: dot(&parts.vo2.curve, slope),
        hr: dot(&parts.hr.curve, mean),
        hr_per_min: dot(&parts.hr.curve, slope),
    }
}

fn drawing(input: &CourseInput<'_>, parts: &Parts, window: &Window) -> CourseDetail {
    let bins = &parts.binned.bins;
    let curve: Vec<CurvePoint> = (0..bins.len())
        .map(|k| {
            let (vo2, hr) = (parts.vo2.curve[k], parts.hr.curve[k]);
            let (vo2_se, hr_se) = (parts.vo2.se_at(k), parts.hr.se_at(k));
            let pulse = vo2 / hr;
            let relative = (vo2_se / vo2) * (vo2_se / vo2) + (hr_se / hr) * (hr_se / hr);
            let pulse_se = pulse * relative.sqrt();
            CurvePoint { t_s: bins[k].t_s, vo2, vo2_se, hr, hr_se, pulse, pulse_se }
        })
        .collect();
    let to_s = input.load_end_s - TRIM_S;
    let early_from = input.ramp_start_s + bins::LEAD_S;
    let early = line(parts, early_from, window.from_s, &window.early_slope, &window.early_mean);
    let late = line(parts, window.from_s, to_s, &window.slope, &window.mean);
    let late_band = curve
        .iter()
        .filter(|p| p.t_s >= window.from_s)
        .map(|p| (p.t_s, Interval::around(late.at(p.t_s).2, 1.645 * p.pulse_se)))
        .collect();
    CourseDetail {
        ramp_s: (input.ramp_start_s, input.load_end_s),
        bins: bins.clone(),
        curve,
        early: Some(early),
        late: Some(late),
        late_band,
        ..CourseDetail::default()
    }
}

/// Whether the fitted V̇O₂ falls over the late window although load rises.
#[must_use]
pub fn vo2_fell_late(detail: &CourseDetail) -> bool {
    detail.late.is_some_and(|line| line.vo2_per_min < 0.0)
}
