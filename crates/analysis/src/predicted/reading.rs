//! One reading over all limits: low only if low by every set in range.

use super::evaluate::UNRELIABLE;
use super::sets::{Direction, Z95};
use crate::note::{Arg, Note};
use crate::results::{At, Kind, Outcome};

/// How close to the limit, in SEE, counts as borderline.
const NEAR_Z: f64 = 0.2;
/// The same in per cent of predicted, where the limit is a convention.
const NEAR_PERCENT: (f64, f64) = (80.0, 90.0);

/// The limits of one set.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Limit {
    pub name: String,
    pub prediction: f64,
    pub low: Option<f64>,
    pub high: Option<f64>,
    pub see: Option<f64>,
    pub chosen: bool,
}

impl Limit {
    pub(super) fn is_undercut_by(&self, value: f64) -> bool {
        self.low.is_some_and(|low| value < low)
    }

    pub(super) fn is_exceeded_by(&self, value: f64) -> bool {
        self.high.is_some_and(|high| value > high)
    }

    /// Whether `value` is too near the limit on the bad side to be called either way.
    fn is_near(&self, value: f64, direction: Direction) -> bool {
        if let Some(see) = self.see.filter(|s| *s > 0.0) {
            let z = (value - self.prediction) / see;
            return match direction {
                Direction::Low => (z + Z95).abs() < NEAR_Z,
                Direction::High => (z - Z95).abs() < NEAR_Z,
                Direction::Both => (z.abs() - Z95).abs() < NEAR_Z,
            };
        }
        let percent = 100.0 * value / self.prediction;
        // Where the convention is another one than about 85 %, only 5 % around it.
        let share = self.low.map(|low| 100.0 * low / self.prediction);
        match share {
            Some(share) if direction != Direction::High => {
                let (from, to) = if (80.0..=90.0).contains(&share) {
                    (NEAR_PERCENT.0.min(share), NEAR_PERCENT.1)
                } else {
                    (0.95 * share, 1.05 * share)
                };
                percent >= from && percent <= to
            }
            _ => false,
        }
    }
}

/// The reading of `value` over `limits`.
pub(super) fn of(
    id: &'static str,
    at: At,
    value: f64,
    direction: Direction,
    limits: &[Limit],
    effort_forbids: bool,
) -> Outcome {
    let method = "every-set-in-range";
    let absent = |code| Outcome::absent(id, at, method, Note::new(code)).of_kind(Kind::Reading);
    if effort_forbids {
        return absent("not-graded-submaximal");
    }
    if limits.is_empty() {
        return absent("no-limit-in-range");
    }
    let side = |l: &Limit| match direction {
        Direction::Low => l.is_undercut_by(value),
        Direction::High => l.is_exceeded_by(value),
        Direction::Both => l.is_undercut_by(value) || l.is_exceeded_by(value),
    };
    let names = |which: bool| {
        let list: Vec<&str> =
            limits.iter().filter(|l| side(l) == which).map(|l| l.name.as_str()).collect();
        Arg::Name(list.join(", ").into())
    };
    let beyond = limits.iter().filter(|l| side(l)).count();
    let high = direction == Direction::High
        || (direction == Direction::Both && limits.iter().any(|l| l.is_exceeded_by(value)));
    let near = limits.iter().find(|l| l.chosen).is_some_and(|l| l.is_near(value, direction));
    let word = match (beyond, high) {
        _ if near => "borderline",
        (0, _) => "within-limits",
        (n, false) if n == limits.len() => "below-limit",
        (n, true) if n == limits.len() => "above-limit",
        (_, false) => "below-limit-in-some",
        (_, true) => "above-limit-in-some",
    };
    let mut outcome = Outcome::reading(id, at, method, word);
    if beyond > 0 && beyond < limits.len() {
        let note = Note::new("beyond-by-some-sets");
        outcome.doubts.push(note.with("beyond", names(true)).with("within", names(false)));
    } else {
        let count = Arg::Count(limits.len());
        outcome.doubts.push(Note::new("compared-with-sets").with("sets", count));
    }
    let wide = |l: &&Limit| direction == Direction::Low && unreliable(l.prediction, l.low);
    for limit in limits.iter().filter(wide) {
        let name = Arg::Name(limit.name.clone().into());
        outcome.doubts.push(Note::new("limit-unreliable").with("set", name));
    }
    outcome
}

fn unreliable(prediction: f64, low: Option<f64>) -> bool {
    low.is_some_and(|low| low < UNRELIABLE * prediction)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn limit(prediction: f64, low: f64, see: Option<f64>, chosen: bool) -> Limit {
        let name = format!("set of {prediction}");
        Limit { name, prediction, low: Some(low), high: None, see, chosen }
    }

    fn word(value: f64, limits: &[Limit]) -> String {
        let outcome = of("x", At::Peak, value, Direction::Low, limits, false);
        outcome.word().unwrap_or("none").to_owned()
    }

    /// 2300 mL/min in the man of 45 of the notes: Hansen 2716.2 (84.7 %), Jones 2933 with SEE 458
    /// (z −1.38), FRIEND 3106 with SEE 528 (z −1.53): below 80 % for some, yet inside every limit.
    #[test]
    fn a_value_below_80_percent_may_still_lie_inside_the_limits() {
        let hansen = limit(2716.2, 0.84 * 2716.2, None, true);
        let jones = limit(2933.0, 2933.0 - 1.645 * 458.0, Some(458.0), false);
        let friend = limit(3106.2, 3106.2 - 1.645 * 528.0, Some(528.0), false);
        assert_eq!(word(2300.0, &[hansen.clone(), jones.clone(), friend.clone()]), "borderline");
        let chosen = Limit { chosen: true, ..jones.clone() };
        let beside = Limit { chosen: false, ..hansen };
        assert_eq!(word(2300.0, &[chosen, beside, friend]), "within-limits");
    }

    #[test]
    fn low_needs_every_set() {
        let a = limit(2000.0, 1680.0, None, true);
        let b = limit(2000.0, 1200.0, Some(486.3), false);
        assert_eq!(word(1500.0, &[a.clone(), b.clone()]), "below-limit-in-some");
        assert_eq!(word(1100.0, &[a.clone(), b]), "below-limit");
        assert_eq!(word(1900.0, &[a]), "within-limits");
        assert_eq!(word(1900.0, &[]), "none");
    }

    #[test]
    fn submaximal_effort_without_a_limit_withholds_the_reading() {
        let a = limit(2000.0, 1680.0, None, true);
        let outcome = of("x", At::Peak, 1000.0, Direction::Low, &[a], true);
        assert_eq!(outcome.reason.map(|n| n.code), Some("not-graded-submaximal"));
    }
}
