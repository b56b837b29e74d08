//! How the statements on the circulation hold over every defensible choice: start of the increments
//! moved by up to 20 s either way, load end by up to 20 s earlier (later there is no load), averaging
//! windows of 20, 30 and 60 s, thresholds at the ends of their intervals, and every predicted set in
//! range.
//!
//! Four choices of three values each, in the 27 combinations of an orthogonal fraction (a Latin
//! square: each pair of choices is met equally often), so that one choice is not tried at the
//! expense of another.

use crate::decisions::{Decisions, Phase};
use crate::facts::Facts;
use crate::recording::Recording;
use crate::results::{Arg, At, Note, Outcome, Results, Section};
use crate::settings::Settings;
use crate::thresholds::Threshold;

/// Shifts of the start of the increments, s.
const START_S: [f64; 3] = [0.0, -20.0, 20.0];
/// Shifts of load end, s.
const END_S: [f64; 3] = [0.0, -10.0, -20.0];
/// Windows of averages at peak, s.
const WINDOWS_S: [f64; 3] = [30.0, 20.0, 60.0];
/// Place of the thresholds within their intervals, half-widths from the middle.
const MARKS: [f64; 3] = [0.0, -1.0, 1.0];
/// Farthest that a threshold is moved, s.
const FARTHEST_MARK_S: f64 = 60.0;

/// How often a word was read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Tally {
    /// The word; `withheld` where there was none.
    pub word: String,
    /// How often.
    pub count: usize,
}

/// How often a statement was drafted as it stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Held {
    /// The statement.
    pub id: &'static str,
    /// Variants that draft the same message.
    pub same: usize,
}

/// Readings over all variants.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Robustness {
    /// Variants derived.
    pub variants: usize,
    /// Words of the O₂-pulse course, most frequent first.
    pub course: Vec<Tally>,
    /// Every statement on the circulation, in the order of the draft.
    pub statements: Vec<Held>,
    /// O₂ pulse low: how often, of all variants and sets in range.
    pub pulse_low: (usize, usize),
    /// Peak V̇O₂ low: how often, of all variants and sets in range.
    pub vo2_low: (usize, usize),
}

fn add(tallies: &mut Vec<Tally>, word: &str) {
    match tallies.iter_mut().find(|t| t.word == word) {
        Some(tally) => tally.count += 1,
        None => tallies.push(Tally { word: word.to_owned(), count: 1 }),
    }
}

impl Robustness {
    fn take(&mut self, base: &Results, results: &Results) {
        self.variants += 1;
        let course = results.primary("o2-pulse-course", At::Ramp).and_then(Outcome::word);
        add(&mut self.course, course.unwrap_or("withheld"));
        for held in &mut self.statements {
            let code =
                |r: &Results| r.statements.iter().find(|s| s.id == held.id).map(|s| s.note.code);
            held.same += usize::from(code(base) == code(results));
        }
        for (of, id) in
            [(&mut self.pulse_low, "o2-pulse-magnitude"), (&mut self.vo2_low, "capacity-peak")]
        {
            if let Some(statement) = results.statements.iter().find(|s| s.id == id) {
                of.0 += count(&statement.note, "low");
                of.1 += count(&statement.note, "sets");
            }
        }
    }
}

/// The count that stands under `name` in a message.
fn count(note: &Note, name: &str) -> usize {
    let of = |arg: &Arg| if let Arg::Count(n) = arg { Some(*n) } else { None };
    note.args.iter().find(|(n, _)| *n == name).and_then(|(_, arg)| of(arg)).unwrap_or(0)
}

/// Time of a threshold at this place within its interval, s. The interval is one of V̇O₂; at the
/// rise between threshold and peak it becomes one of time.
fn mark_at(
    results: &Results,
    mark: Option<&Threshold>,
    t_s: Option<f64>,
    place: f64,
) -> Option<f64> {
    let (mark, t_s) = (mark?, t_s?);
    let end = results.phases.ramp()?.1;
    let rise = (results.number("vo2-peak", At::Peak)? - mark.vo2) / (end - t_s);
    let half = 0.5 * (mark.high - mark.low) / rise;
    let shift = (place * half).clamp(-FARTHEST_MARK_S, FARTHEST_MARK_S);
    (half.is_finite() && half > 0.0).then_some((t_s + shift).min(end - 10.0))
}

/// The decisions of one variant.
fn varied(base: &Results, decisions: &Decisions, from: f64, to: f64, place: f64) -> Decisions {
    let mut moved = decisions.clone();
    // What is not moved stays as it is, so that the first variant is the test as read.
    if let Some((start, end)) = base.phases.ramp() {
        if from != 0.0 {
            moved.phases.set(Phase::Ramp, Some(start + from));
        }
        if to != 0.0 {
            moved.phases.set(Phase::Recovery, Some(end + to));
        }
    }
    if place != 0.0 {
        let t = &base.thresholds;
        let vt1 = mark_at(base, t.vt1.threshold(), t.vt1_s, place);
        let vt2 = mark_at(base, t.vt2.threshold(), t.vt2_s, place);
        moved.vt1_s = vt1.or(moved.vt1_s);
        moved.vt2_s = vt2.or(moved.vt2_s);
    }
    moved
}

/// Derives every variant. Costs 27 derivations: for a worker, not for a frame. Empty without
/// increments.
#[must_use]
pub fn robustness(
    recording: &Recording,
    facts: &Facts,
    decisions: &Decisions,
    settings: &Settings,
) -> Robustness {
    let mut robustness = Robustness::default();
    let base = crate::derive(recording, facts, decisions, settings);
    if base.phases.ramp().is_none() {
        return robustness;
    }
    let ours = base.statements.iter().filter(|s| s.section == Section::Circulation);
    robustness.statements = ours.map(|s| Held { id: s.id, same: 0 }).collect();
    for (i, from) in START_S.into_iter().enumerate() {
        for (j, to) in END_S.into_iter().enumerate() {
            for (k, peak_window_s) in WINDOWS_S.into_iter().enumerate() {
                let place = MARKS[(i + j + k) % MARKS.len()];
                let moved = varied(&base, decisions, from, to, place);
                let settings = Settings { peak_window_s, ..settings.clone() };
                let results = crate::derive(recording, facts, &moved, &settings);
                robustness.take(&base, &results);
            }
        }
    }
    robustness.course.sort_by(|a, b| b.count.cmp(&a.count).then_with(|| a.word.cmp(&b.word)));
    robustness
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::facts::Rhythm;
    use crate::model::{demo::case, plan::Plan, test::generate};

    fn sinus() -> Facts {
        let mut facts = Facts::default();
        facts.test.rhythm = Some(Rhythm::Sinus);
        facts
    }

    #[test]
    fn every_variant_is_counted_once_and_a_clear_course_holds() {
        let recording = generate(&(case("knot").unwrap().plan)()).0;
        let r = robustness(&recording, &sinus(), &Default::default(), &Default::default());
        assert_eq!(r.variants, 27);
        assert_eq!(r.course.iter().map(|t| t.count).sum::<usize>(), 27);
        assert_eq!(r.course[0].word, "falling");
        assert!(r.course[0].count >= 20, "{:?}", r.course);
        let held = |id| r.statements.iter().find(|s| s.id == id).unwrap().same;
        assert_eq!(held("o2-pulse-course"), r.course[0].count);
        // What is said of every test holds in every variant.
        assert_eq!(held("circulation-caveat"), 27);
    }

    /// Each pair of choices is met three times, as a fraction of 3 × 3 × 3 × 3 should.
    #[test]
    fn the_fraction_is_balanced() {
        for mark in 0..3 {
            for i in 0..3 {
                let met = (0..9).filter(|n| (i + n / 3 + n % 3) % 3 == mark).count();
                assert_eq!(met, 3);
            }
        }
    }

    /// Two thresholds whose interval is ± 90 mL/min at a rise of 900 mL/min in 300 s move by 30 s.
    #[test]
    fn a_threshold_moves_by_its_interval() {
        let recording = generate(&Plan::healthy(9)).0;
        let results = crate::derive(&recording, &sinus(), &Default::default(), &Default::default());
        let peak = results.number("vo2-peak", At::Peak).unwrap();
        let end = results.phases.ramp().unwrap().1;
        let vo2 = peak - 900.0;
        let mark = Threshold { vo2, low: vo2 - 90.0, high: vo2 + 90.0, ..Threshold::default() };
        let at = |place| mark_at(&results, Some(&mark), Some(end - 300.0), place).unwrap();
        assert!((at(1.0) - (end - 270.0)).abs() < 1e-6);
        assert!((at(-1.0) - (end - 330.0)).abs() < 1e-6);
        assert_eq!(mark_at(&results, None, Some(end - 300.0), 1.0), None);
    }

    #[test]
    fn without_increments_there_is_nothing_to_vary() {
        let empty = Recording::default();
        let r = robustness(&empty, &sinus(), &Default::default(), &Default::default());
        assert_eq!(r, Robustness::default());
    }

    #[test]
    fn what_forbids_the_course_forbids_it_in_every_variant() {
        let recording = generate(&Plan::healthy(9)).0;
        let facts = Facts::default();
        let r = robustness(&recording, &facts, &Default::default(), &Default::default());
        assert_eq!(r.course, vec![Tally { word: "withheld".into(), count: 27 }]);
    }
}
