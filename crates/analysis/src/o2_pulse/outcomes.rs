//! Outcomes of the course: one reading and the numbers that go with it.

use super::detail::{CourseDetail, CourseNumbers, Estimate};
use crate::results::{At, Interval, Kind, Note, Outcome};
use crate::unit::Unit;

/// Method of everything here.
pub(crate) const METHOD: &str = "joint-bend-score";

/// A number of the course: id, unit, and where to find it.
type Row = (&'static str, Unit, fn(&CourseNumbers) -> (f64, Option<Interval>));

fn ranged(estimate: Estimate) -> (f64, Option<Interval>) {
    (estimate.value, Some(estimate.interval()))
}

const ROWS: [Row; 9] = [
    ("o2-pulse-late-slope", Unit::PercentPerMin, |n| {
        (n.late_slope.value, Some(n.late_slope_interval))
    }),
    ("o2-pulse-early-slope", Unit::PercentPerMin, |n| (n.early_slope, None)),
    ("o2-pulse-deficit", Unit::PercentPerMin, |n| ranged(n.deficit)),
    ("o2-pulse-deficit-vo2-part", Unit::PercentPerMin, |n| ranged(n.deficit_vo2)),
    ("o2-pulse-deficit-hr-part", Unit::PercentPerMin, |n| ranged(n.deficit_hr)),
    ("vo2-hr-slope-ratio", Unit::One, |n| ranged(n.slope_ratio)),
    ("vo2-hr-slope-over-pulse", Unit::One, |n| (n.rho_late, None)),
    ("o2-pulse-asymptote", Unit::MlPerBeat, |n| ranged(n.asymptote)),
    ("o2-pulse-score", Unit::Score, |n| (n.score, None)),
];

/// All outcomes of the course; `detail` where curves were fitted, `why` where none were.
pub(crate) fn all(detail: Option<&CourseDetail>, why: &[Note]) -> Vec<Outcome> {
    let mut outcomes = vec![reading(detail, why)];
    let reason = || why.first().cloned().unwrap_or_else(|| Note::new("course-not-fitted"));
    let numbers = detail.and_then(|d| d.numbers.as_ref().map(|n| (d, n)));
    for (id, unit, get) in ROWS {
        outcomes.push(match numbers {
            None => Outcome::absent(id, At::Ramp, METHOD, reason()).in_unit(unit),
            Some((detail, numbers)) => {
                let (value, interval) = get(numbers);
                let outcome = Outcome::quantity(id, At::Ramp, METHOD, unit, value)
                    .recorded_within(interval)
                    .repeated_within(None);
                placed(outcome, detail)
            }
        });
    }
    outcomes.push(limit(numbers, reason()));
    outcomes.push(onset(detail, reason()));
    outcomes
}

fn placed(outcome: Outcome, detail: &CourseDetail) -> Outcome {
    match detail.late {
        Some(late) => outcome.based_on((late.from_s, late.to_s), detail.late_breaths),
        None => outcome,
    }
}

fn reading(detail: Option<&CourseDetail>, why: &[Note]) -> Outcome {
    let id = "o2-pulse-course";
    match detail {
        Some(CourseDetail { course: Some(course), .. }) => {
            let detail = detail.expect("matched above");
            let mut outcome = Outcome::reading(id, At::Ramp, METHOD, course.code());
            outcome.doubts.clone_from(&detail.doubts);
            placed(outcome, detail)
        }
        _ => {
            let mut reasons = why.iter().cloned();
            let first = reasons.next().unwrap_or_else(|| Note::new("course-not-fitted"));
            let mut outcome = Outcome::absent(id, At::Ramp, METHOD, first).of_kind(Kind::Reading);
            // Further reasons stand as doubts, so that stating one fact does not hide the next.
            outcome.doubts.extend(reasons);
            outcome
        }
    }
}

fn limit(numbers: Option<(&CourseDetail, &CourseNumbers)>, reason: Note) -> Outcome {
    let (id, unit) = ("o2-pulse-detection-limit", Unit::Minute);
    match numbers {
        None => Outcome::absent(id, At::Ramp, METHOD, reason).in_unit(unit),
        Some((detail, numbers)) => match numbers.detection_limit_min {
            Some(minutes) => placed(Outcome::quantity(id, At::Ramp, METHOD, unit, minutes), detail),
            None => {
                Outcome::absent(id, At::Ramp, METHOD, Note::new("detection-limit-beyond-5-min"))
                    .in_unit(unit)
            }
        },
    }
}

fn onset(detail: Option<&CourseDetail>, reason: Note) -> Outcome {
    let (id, unit) = ("o2-pulse-onset", Unit::Second);
    let absent = |reason| Outcome::absent(id, At::Ramp, METHOD, reason).in_unit(unit);
    match detail {
        Some(CourseDetail { course: None, .. }) | None => absent(reason),
        Some(detail) => match detail.onset {
            None => absent(Note::new("onset-not-timed")),
            Some(onset) => {
                let outcome = Outcome::quantity(id, At::Ramp, METHOD, unit, onset.t_s)
                    .recorded_within(Some(onset.set_s))
                    .repeated_within(None);
                placed(outcome, detail)
            }
        },
    }
}
