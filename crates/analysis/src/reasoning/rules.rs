//! The rule table, as data: pattern → factor → candidates, and what would speak for or against.
//!
//! Row numbers are those of the claim table each message rests on; the order is precedence: rate
//! before shape, terminal before true breaks, content before stroke volume.

use super::seen::Seen;
use super::signs::{Answer, Sign};
use crate::facts::Diagnosis;

/// A candidate explanation; never offered when it is recorded already.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Candidate {
    /// Word of the catalogue.
    pub word: &'static str,
    /// The recorded diagnosis that is the same thing.
    pub recorded: Option<Diagnosis>,
}

const fn c(word: &'static str) -> Candidate {
    Candidate { word, recorded: None }
}

const fn r(word: &'static str, diagnosis: Diagnosis) -> Candidate {
    Candidate { word, recorded: Some(diagnosis) }
}

/// One rule.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Rule {
    /// Row of the claim table.
    pub row: u8,
    /// Message of the pattern.
    pub code: &'static str,
    /// All must be met.
    pub pattern: &'static [Sign],
    /// All must be absent.
    pub without: &'static [Sign],
    /// Candidates, most general first.
    pub candidates: &'static [Candidate],
    /// Speak for it.
    pub corroborate: &'static [Sign],
    /// Speak against it.
    pub against: &'static [Sign],
    /// Information that would separate it from others, words of the catalogue.
    pub separate: &'static [&'static str],
    /// Lower comes first; equal ones are ordered by corroborators met.
    pub precedence: u8,
}

use Sign as S;

/// The table.
pub(crate) const RULES: &[Rule] = &[
    Rule {
        row: 11,
        code: "pattern-rate-limited-drug",
        pattern: &[S::RateLow, S::RateDrug],
        without: &[S::PulseLow],
        candidates: &[
            c("rate-slowing-drug"),
            c("sinus-node-disease"),
            r("denervated-heart", Diagnosis::Transplant),
        ],
        corroborate: &[S::RecoverySlow],
        against: &[S::Submaximal],
        separate: &["own-earlier-test-off-the-drug"],
        precedence: 1,
    },
    Rule {
        row: 11,
        code: "pattern-rate-limited",
        pattern: &[S::RateLow],
        without: &[S::PulseLow, S::RateDrug, S::Submaximal],
        candidates: &[
            c("sinus-node-disease"),
            r("denervated-heart", Diagnosis::Transplant),
            c("trained-low-rate"),
        ],
        corroborate: &[S::RecoverySlow],
        against: &[],
        separate: &["medication-list", "own-earlier-test"],
        precedence: 1,
    },
    Rule {
        row: 16,
        code: "pattern-terminal",
        pattern: &[S::Loss, S::Terminal],
        without: &[],
        candidates: &[c("true-maximum")],
        corroborate: &[S::RerHigh],
        against: &[S::EcgChange],
        separate: &[],
        precedence: 2,
    },
    Rule {
        row: 7,
        code: "pattern-shunt",
        pattern: &[S::Loss, S::ShuntStep],
        without: &[],
        candidates: &[r("right-to-left-shunt", Diagnosis::Shunt), c("low-finger-perfusion")],
        corroborate: &[S::Desaturation, S::SlopeHigh, S::Petco2Low],
        against: &[],
        separate: &["contrast-echocardiogram-result", "arterial-gases-if-taken"],
        precedence: 3,
    },
    Rule {
        row: 8,
        code: "pattern-desaturation",
        pattern: &[S::Loss, S::Desaturation],
        without: &[S::ShuntStep],
        candidates: &[
            r("interstitial-lung-disease", Diagnosis::Ild),
            r("emphysema", Diagnosis::Copd),
            r("pulmonary-vascular-disease", Diagnosis::PulmonaryHypertension),
            c("low-finger-perfusion"),
        ],
        corroborate: &[S::SlopeHigh, S::ReserveLow],
        against: &[],
        separate: &["arterial-gases-if-taken"],
        precedence: 4,
    },
    Rule {
        row: 9,
        code: "pattern-content-ceiling",
        pattern: &[S::PulseLow, S::HbLow],
        without: &[S::Loss],
        candidates: &[c("anaemia")],
        corroborate: &[S::HbLow, S::CoHigh, S::Vt1Early],
        against: &[S::WorkSlopeLow],
        separate: &["co-oximetry"],
        precedence: 4,
    },
    Rule {
        row: 9,
        code: "pattern-cohb",
        pattern: &[S::PulseLow, S::CoHigh],
        without: &[S::Loss],
        candidates: &[c("carbon-monoxide")],
        corroborate: &[S::HbLow, S::Vt1Early],
        against: &[S::WorkSlopeLow],
        separate: &["co-oximetry"],
        precedence: 4,
    },
    Rule {
        row: 4,
        code: "pattern-both-slowed",
        pattern: &[S::Flat, S::Vo2Slowed, S::HrAccelerated],
        without: &[],
        candidates: &[
            c("inducible-ischaemia"),
            c("valve-disease-or-outflow-obstruction"),
            r("heart-failure", Diagnosis::HeartFailure),
            c("extraction-that-stopped-growing"),
        ],
        corroborate: &[S::EcgChange, S::PressureBlunted, S::WorkSlopeLow, S::RecoveryHigher],
        against: &[S::Terminal, S::ReserveLow],
        separate: &["exercise-imaging-result", "hb-at-peak", "own-earlier-test"],
        precedence: 5,
    },
    Rule {
        row: 6,
        code: "pattern-pulmonary-vascular",
        pattern: &[S::Loss, S::SlopeHigh, S::Petco2Low],
        without: &[],
        candidates: &[
            r("pulmonary-vascular-disease", Diagnosis::PulmonaryHypertension),
            r("heart-failure", Diagnosis::HeartFailure),
        ],
        corroborate: &[S::Desaturation, S::WorkSlopeLow],
        against: &[S::ReserveLow],
        separate: &["echocardiogram-result", "arterial-gases-if-taken"],
        precedence: 5,
    },
    Rule {
        row: 13,
        code: "pattern-ventilatory",
        pattern: &[S::Flat, S::ReserveLow],
        without: &[],
        candidates: &[
            r("airflow-obstruction-with-hyperinflation", Diagnosis::Copd),
            c("low-body-mass"),
        ],
        corroborate: &[S::ReserveLow],
        against: &[S::EcgChange],
        separate: &["inspiratory-capacity-in-exercise"],
        precedence: 5,
    },
    Rule {
        row: 14,
        code: "pattern-hr-part",
        pattern: &[S::Loss, S::HrAccelerated],
        without: &[S::Vo2Slowed],
        candidates: &[
            c("stroke-volume-limit-compensated-by-rate"),
            c("low-volume-or-heat"),
            c("naturally-steepening-rate"),
        ],
        corroborate: &[S::EcgChange, S::PressureBlunted],
        against: &[],
        separate: &["own-earlier-test", "exercise-imaging-result"],
        precedence: 6,
    },
    Rule {
        row: 15,
        code: "pattern-vo2-part",
        pattern: &[S::Loss, S::Vo2Slowed],
        without: &[S::HrAccelerated],
        candidates: &[c("true-maximum"), c("work-not-as-set"), c("peripheral-limit")],
        corroborate: &[S::RerHigh, S::WorkSlopeLow],
        against: &[],
        separate: &["cadence-record", "own-earlier-test"],
        precedence: 6,
    },
    Rule {
        row: 3,
        code: "pattern-level-early",
        pattern: &[S::PulseLow, S::LevelEarly],
        without: &[],
        candidates: &[
            r("heart-failure", Diagnosis::HeartFailure),
            c("severe-valve-disease"),
            r("pulmonary-vascular-disease", Diagnosis::PulmonaryHypertension),
        ],
        corroborate: &[S::WorkSlopeLow, S::SlopeHigh],
        against: &[],
        separate: &["echocardiogram-result", "hb-at-peak"],
        precedence: 7,
    },
    Rule {
        row: 2,
        code: "pattern-low-normal-shape",
        pattern: &[S::PulseLow, S::Rising],
        without: &[S::LevelEarly, S::HbLow],
        candidates: &[
            c("deconditioning"),
            c("small-heart-or-low-volume"),
            r("stable-heart-failure", Diagnosis::HeartFailure),
            c("muscle-disease"),
        ],
        corroborate: &[S::Vt1Early],
        against: &[S::SlopeHigh, S::PressureBlunted, S::RecoverySlow],
        separate: &["hb-at-peak", "echocardiogram-result"],
        precedence: 8,
    },
    Rule {
        row: 1,
        code: "pattern-usual",
        pattern: &[S::Rising],
        without: &[S::PulseLow],
        candidates: &[],
        corroborate: &[],
        against: &[S::EcgChange],
        separate: &[],
        precedence: 9,
    },
];

/// A rule whose pattern is met, with what speaks for and against it.
#[derive(Clone, Debug)]
pub(crate) struct Match {
    /// The rule.
    pub rule: &'static Rule,
    /// Corroborators met, absent, not measured; arguments against that are met.
    pub met: Vec<Sign>,
    /// Corroborators looked for and not there.
    pub absent: Vec<Sign>,
    /// Corroborators not measured.
    pub open: Vec<Sign>,
    /// Arguments against it that are met.
    pub against: Vec<Sign>,
}

/// The rules that apply, in precedence.
pub(crate) fn matches(seen: &Seen) -> Vec<Match> {
    let mut found: Vec<Match> = RULES
        .iter()
        .filter(|rule| {
            rule.pattern.iter().all(|s| s.answer(seen) == Answer::Met)
                && rule.without.iter().all(|s| s.answer(seen) != Answer::Met)
        })
        .map(|rule| {
            let with = |signs: &[Sign], answer| {
                signs.iter().copied().filter(|s| s.answer(seen) == answer).collect()
            };
            Match {
                rule,
                met: with(rule.corroborate, Answer::Met),
                absent: with(rule.corroborate, Answer::Absent),
                open: with(rule.corroborate, Answer::NotMeasured),
                against: with(rule.against, Answer::Met),
            }
        })
        .collect();
    // Stable: rules of equal rank and equal support keep the order of the table.
    found.sort_by_key(|m| {
        let support = m.met.len() as i64 - m.against.len() as i64;
        (m.rule.precedence, -support)
    });
    found
}
