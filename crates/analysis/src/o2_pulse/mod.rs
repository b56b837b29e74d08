//! The course of the O₂ pulse over the ramp: does it keep rising, slow, flatten or fall?
//!
//! Start at [`classify`]: the calibrated recipe on plain slices. [`derive`] adds what forbids a
//! course, its doubts, and the outcomes.

mod bayes;
mod bins;
mod classify;
mod design;
mod detail;
mod fit;
mod linalg;
mod line_up;
mod noise;
mod outcomes;
mod score;
pub(crate) mod suppress;
mod terminal;

use crate::quantity::Quantity;
use crate::results::{FlagKind, Note};
use crate::stage::Stage;

pub(crate) use bayes::normal_cdf;
pub use classify::{
    CourseInput, FEWEST_LATE_BREATHS, LATE_S, SHORTEST_RAMP_S, classify, vo2_fell_late,
};
pub use detail::{Bin, Course, CourseDetail, CourseNumbers, CurvePoint, Estimate, Line, Onset};
pub use line_up::{COURSES, LineUp, line_up};
pub use score::{LINE_LOWER, LINE_UPPER};

/// Margin of "level", %/min.
const LEVEL_MARGIN: f64 = 2.5;
/// Local slope over O₂ pulse that counts as level.
const LEVEL_RHO: core::ops::RangeInclusive<f64> = 0.85..=1.15;

/// Breaths of the fit: the raw ones, less those left out or in a manoeuvre. Errant breaths stay,
/// since the bins are robust and were calibrated with them.
pub(crate) struct Slices {
    pub t_s: Vec<f64>,
    pub vo2: Vec<f64>,
    pub hr: Vec<f64>,
}

impl Slices {
    pub fn of(stage: &Stage<'_>) -> Self {
        let breaths = &stage.recording.breaths;
        let mut used = vec![true; breaths.len()];
        for flag in &stage.results.flags {
            if matches!(flag.kind, FlagKind::LeftOut | FlagKind::Manoeuvre) {
                used[flag.breath] = false;
            }
        }
        let plausible = |q: Quantity, i: usize| breaths.value(q, i).filter(|x| q.is_plausible(*x));
        let mut out = Self { t_s: Vec::new(), vo2: Vec::new(), hr: Vec::new() };
        for i in (0..breaths.len()).filter(|&i| used[i]) {
            if let (Some(vo2), Some(hr)) = (plausible(Quantity::Vo2, i), plausible(Quantity::Hr, i))
            {
                out.t_s.push(breaths.mid_s(i));
                out.vo2.push(vo2);
                out.hr.push(hr);
            }
        }
        out
    }
}

/// Derives the O₂-pulse course.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let (detail, why) = course(stage);
    for outcome in outcomes::all(detail.as_ref(), &why) {
        stage.push(outcome);
    }
    stage.results.course = detail;
}

/// The course with its doubts, and why the word (or everything) is withheld.
fn course(stage: &Stage<'_>) -> (Option<CourseDetail>, Vec<Note>) {
    if let Some(reason) = suppress::nothing_to_fit(stage) {
        return (None, vec![reason]);
    }
    let Some(ramp) = stage.results.phases.ramp() else { return (None, vec![stage.no_ramp()]) };
    let slices = Slices::of(stage);
    let input = CourseInput {
        t_s: &slices.t_s,
        vo2: &slices.vo2,
        hr: &slices.hr,
        load: &stage.recording.load,
        ramp_start_s: ramp.0,
        load_end_s: ramp.1,
    };
    let mut forbidding = suppress::forbidding(stage, ramp);
    let mut detail = match classify(&input) {
        Ok(detail) => detail,
        Err(reason) => {
            if !forbidding.contains(&reason) {
                forbidding.push(reason);
            }
            return (None, forbidding);
        }
    };
    forbidding.extend(suppress::fixed_rate(&detail));
    if !forbidding.is_empty() {
        return (Some(only_bins(detail, &forbidding)), forbidding);
    }
    detail.doubts = doubts(stage, &input, &detail, ramp);
    detail.withheld.extend(suppress::work_not_as_set(stage, suppress::late_window(ramp.1)));
    if !detail.withheld.is_empty() {
        detail.course = None;
        detail.onset = None;
    }
    let why = detail.withheld.clone();
    (Some(detail), why)
}

/// Where the course is forbidden, only the measured bins remain.
fn only_bins(detail: CourseDetail, withheld: &[Note]) -> CourseDetail {
    CourseDetail {
        withheld: withheld.to_vec(),
        ramp_s: detail.ramp_s,
        bins: detail.bins,
        late_breaths: detail.late_breaths,
        ..CourseDetail::default()
    }
}

fn doubts(
    stage: &Stage<'_>,
    input: &CourseInput<'_>,
    detail: &CourseDetail,
    ramp: (f64, f64),
) -> Vec<Note> {
    let mut doubts = suppress::error_rate_unknown(stage, ramp);
    let Some(numbers) = &detail.numbers else { return doubts };
    if is_level(numbers) {
        doubts.push(Note::new("level-within-2.5"));
    }
    if LEVEL_RHO.contains(&numbers.rho_early) && LEVEL_RHO.contains(&numbers.rho_late) {
        doubts.push(Note::new("low-from-start"));
    }
    let late_loss = !matches!(detail.course, Some(Course::Rising | Course::Indeterminate) | None);
    if late_loss && terminal::is_terminal(input, suppress::rer_at_peak(stage)) {
        doubts.push(Note::new("terminal-compatible-with-plateau"));
    }
    if vo2_fell_late(detail) {
        doubts.push(Note::new("vo2-fell-while-load-rose"));
    }
    if detail.course == Some(Course::Indeterminate) {
        doubts.push(Note::new("noise-does-not-decide"));
    }
    doubts.extend(suppress::remarks(stage, ramp));
    doubts
}

/// Equivalence: the whole interval of the slope over 4 min lies within ± 2.5 %/min.
fn is_level(numbers: &CourseNumbers) -> bool {
    numbers.late_slope_4min.is_some_and(|g| g.value.abs() + 1.645 * g.se < LEVEL_MARGIN)
}

#[cfg(test)]
mod tests;

#[cfg(test)]
mod withheld_tests;
