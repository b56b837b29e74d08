//! The rate against the person's own earlier test: the only comparison by which a share of the O₂
//! pulse is put down to the rate, and by which a low pulse is called hidden behind it.

use super::compose::Draft;
use super::seen::Seen;
use super::signs::Sign;
use crate::results::{Arg, At, Note, Outcome, Section, Statement};
use crate::stage::Stage;

/// Share of predicted below which an O₂ pulse counts as low here.
const LOW: f64 = 0.80;

const SHARE: &str = "fick-rate-share";
const PULSE: &str = "fick-pulse-at-own-rate";

/// The statement; `None` without an own earlier test.
pub(super) fn statement(stage: &Stage<'_>) -> Option<Statement> {
    let share = stage.results.primary(SHARE, At::Peak)?;
    share.number()?;
    let lower = share.recording.is_some_and(|i| i.low > 0.0);
    let code = match (lower, hidden(stage)) {
        (false, _) => "rate-as-in-own-test",
        (true, true) => "rate-hides-low-pulse",
        (true, false) => "rate-share",
    };
    let note = Note::new(code)
        .with("share", Arg::Outcome(SHARE, At::Peak))
        .with("pulse", Arg::Outcome(PULSE, At::Peak));
    let draft = Draft::new("rate-own-test", Section::Circulation, note)
        .resting_on(SHARE, At::Peak)
        .resting_on(PULSE, At::Peak)
        .resting_on("o2-pulse-at-peak", At::Peak);
    Some(match stage.facts.test.rate_slowing_drug.taken {
        Some(true) => draft.supported_by(Sign::RateDrug.met()).done(),
        Some(false) => draft.done(),
        None => draft.open(Sign::RateDrug.open()).done(),
    })
}

/// Measured pulse at least 80 % of predicted, below it at the own rate, little of the rate reserve
/// used, and effort not submaximal without a limit.
fn hidden(stage: &Stage<'_>) -> bool {
    let number = |id: &str| stage.results.number(id, At::Peak);
    let (Some(pulse), Some(own), Some(predicted)) =
        (number("o2-pulse-at-peak"), number(PULSE), number("predicted-o2-pulse"))
    else {
        return false;
    };
    let effort = stage.results.primary("effort", At::Test).and_then(Outcome::word);
    let adequate = effort.is_some_and(|w| w != "submaximal-without-limit");
    let low_rate = Seen::of(stage).rate_low == Some(true);
    adequate && low_rate && pulse >= LOW * predicted && own < LOW * predicted
}

#[cfg(test)]
mod tests {
    use crate::facts::{Facts, OwnTest, RateSlowingDrug, Rhythm, Sex};
    use crate::model::{demo::case, test::generate};
    use crate::results::{At, Results};

    /// The blunted rate of the demo case; its own earlier test is invented here.
    fn derived(own_test: Option<OwnTest>) -> Results {
        let recording = generate(&(case("eider").unwrap().plan)()).0;
        let mut facts = Facts::default();
        facts.subject.age_years = Some(58.0);
        facts.subject.sex = Some(Sex::Male);
        facts.subject.height_cm = Some(177.0);
        facts.subject.mass_kg = Some(80.0);
        facts.test.rhythm = Some(Rhythm::Sinus);
        facts.test.rate_slowing_drug = RateSlowingDrug { taken: Some(true), ..Default::default() };
        facts.test.own_test = own_test;
        crate::derive(&recording, &facts, &Default::default(), &Default::default())
    }

    fn code(results: &Results) -> Option<&'static str> {
        results.statements.iter().find(|s| s.id == "rate-own-test").map(|s| s.note.code)
    }

    /// A test whose HR at this V̇O₂ was `factor` times the present one.
    fn own(results: &Results, factor: f64) -> OwnTest {
        let vo2 = results.number("vo2-peak", At::Peak).unwrap();
        let pulse = results.number("o2-pulse-at-peak", At::Peak).unwrap();
        OwnTest { low: (0.3 * vo2, 80.0), peak: (vo2, factor * vo2 / pulse) }
    }

    #[test]
    fn without_an_own_test_there_is_no_share_and_no_statement() {
        let results = derived(None);
        let reason = results.primary("fick-rate-share", At::Peak).unwrap().reason.clone();
        assert_eq!(reason.unwrap().code, "fact-missing");
        assert_eq!(code(&results), None);
    }

    /// A rate 1.4 times as high: 100 ln 1.4 = 33.6 % of the pulse is due to the rate.
    #[test]
    fn the_share_is_that_of_the_rates() {
        let without = derived(None);
        let results = derived(Some(own(&without, 1.4)));
        let share = results.number("fick-rate-share", At::Peak).unwrap();
        assert!((share - 33.647).abs() < 0.01, "{share}");
        assert!(code(&results).is_some_and(|c| c != "rate-as-in-own-test"));
    }

    #[test]
    fn the_same_rate_says_so() {
        let without = derived(None);
        assert_eq!(code(&derived(Some(own(&without, 1.0)))), Some("rate-as-in-own-test"));
    }
}
