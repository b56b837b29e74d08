//! How the readings of the circulation hold over every defensible choice: start of the increments
//! moved by up to 20 s either way, load end by up to 20 s earlier (later there is no load), and peak
//! windows of 20, 30 and 60 s.

use crate::decisions::{Decisions, Phase};
use crate::facts::Facts;
use crate::recording::Recording;
use crate::results::{Arg, At, Note, Outcome, Results};
use crate::settings::Settings;

/// Shifts of the start of the increments, s.
const START_S: [f64; 3] = [0.0, -20.0, 20.0];
/// Shifts of load end, s.
const END_S: [f64; 3] = [0.0, -10.0, -20.0];
/// Windows of peak values, s.
const WINDOWS_S: [f64; 3] = [30.0, 20.0, 60.0];

/// How often a word was read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Tally {
    /// The word; `withheld` where there was none.
    pub word: String,
    /// How often.
    pub count: usize,
}

/// Readings over all variants, most frequent first.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Robustness {
    /// Variants derived.
    pub variants: usize,
    /// Words of the O₂-pulse course.
    pub course: Vec<Tally>,
    /// Codes of the first pattern.
    pub pattern: Vec<Tally>,
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
    fn take(&mut self, results: &Results) {
        self.variants += 1;
        let course = results.primary("o2-pulse-course", At::Ramp).and_then(Outcome::word);
        add(&mut self.course, course.unwrap_or("withheld"));
        let pattern = results.statements.iter().find(|s| s.id == "circulation-pattern");
        add(&mut self.pattern, pattern.map_or("none", |s| s.note.code));
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
    let Some((start, end)) = base.phases.ramp() else { return robustness };
    for from in START_S {
        for to in END_S {
            for window in WINDOWS_S {
                let mut moved = decisions.clone();
                // The boundary as it stands stays as it is, so that the first variant is the test
                // as read.
                if from != 0.0 {
                    moved.phases.set(Phase::Ramp, Some(start + from));
                }
                if to != 0.0 {
                    moved.phases.set(Phase::Recovery, Some(end + to));
                }
                let settings = Settings { peak_window_s: window, ..settings.clone() };
                robustness.take(&crate::derive(recording, facts, &moved, &settings));
            }
        }
    }
    for tallies in [&mut robustness.course, &mut robustness.pattern] {
        tallies.sort_by(|a, b| b.count.cmp(&a.count).then_with(|| a.word.cmp(&b.word)));
    }
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
