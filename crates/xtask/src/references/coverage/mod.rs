//! Coverage of the closed-form intervals and errors of the thresholds, on simulated tests.
//!
//! The truth of an interval is the same procedure on the noise-free series at the same breaths,
//! with the boundaries put in and the VT2 that limited the noisy run.

use std::ops::Range;

use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Protocol as Stated, ProtocolKind, Rhythm};
use analysis::model::population::{Class, Protocol, draw};
use analysis::model::test::{Truth, generate};
use analysis::recording::Recording;
use analysis::results::{Interval, Outcome, Results};
use analysis::settings::Settings;
use analysis::thresholds::Proposal;

use super::pool;

mod tables;

/// What carries an interval.
const ITEMS: [&str; 8] = [
    "vo2-peak",
    "vt1-vo2",
    "vt2-vo2",
    "ve-vco2-slope-to-vt2",
    "ve-vco2-slope-full",
    "oues",
    "dvo2-dwr",
    "hr-recovery-1min",
];

/// One item of one test.
#[derive(Clone, Copy, Debug)]
struct Scored {
    covered: bool,
    /// Half width over the functional truth, %.
    half_pct: f64,
    /// Error against the functional truth, %.
    error_pct: f64,
    /// Size of the error in half widths.
    in_widths: f64,
}

/// What became of a threshold.
#[derive(Clone, Copy, Debug, PartialEq)]
enum Fate {
    Proposed,
    NotReached,
    Indeterminate,
}

/// One simulated test.
#[derive(Clone, Debug)]
struct Tested {
    items: [Option<Scored>; ITEMS.len()],
    vt1: Fate,
    vt2: Fate,
    /// Codes of why not.
    why: [Option<&'static str>; 2],
    /// Error against the structural truth, % of it.
    vt1_error: Option<f64>,
    vt2_error: Option<f64>,
    reached_vt1: bool,
    reached_vt2: bool,
    noise: f64,
}

fn fate(proposal: &Proposal) -> Fate {
    match proposal {
        Proposal::Proposed(_) => Fate::Proposed,
        Proposal::NotReached(_) => Fate::NotReached,
        Proposal::Indeterminate(_) | Proposal::Absent(_) => Fate::Indeterminate,
    }
}

fn why(proposal: &Proposal) -> Option<&'static str> {
    match proposal {
        Proposal::Proposed(_) => None,
        Proposal::NotReached(n) | Proposal::Indeterminate(n) | Proposal::Absent(n) => Some(n.code),
    }
}

fn facts(protocol: Protocol) -> Facts {
    let mut facts = Facts::default();
    facts.test.mode = Some(Mode::Cycle);
    facts.test.rhythm = Some(Rhythm::Sinus);
    let kind = match protocol {
        Protocol::Ramp(_) => ProtocolKind::Ramp,
        Protocol::Steps(_) => ProtocolKind::Steps,
    };
    facts.test.protocol = Some(Stated { kind: Some(kind), w_per_min: None });
    facts
}

fn primary<'r>(results: &'r Results, id: &str) -> Option<&'r Outcome> {
    results.outcomes.iter().find(|o| o.id == id && o.primary)
}

/// Highest 30-s mean as it stands, before any correction for noise.
fn raw_peak(results: &Results) -> Option<f64> {
    let raw = results.outcomes.iter().find(|o| o.id == "vo2-peak" && o.method == "highest-30s");
    raw.or_else(|| primary(results, "vo2-peak")).and_then(Outcome::number)
}

struct Clean {
    /// VT2 of the noisy run, or load end, as the limit.
    limited: Results,
    /// Nothing fixed but the boundaries.
    free: Results,
}

fn clean(truth: &Truth, noisy: &Results, facts: &Facts, decisions: &Decisions) -> Clean {
    // Nothing to flag in a noise-free series; its tiny residuals would flag every curve.
    let settings = Settings { errant_k: 1e9, ..Settings::default() };
    let run = |d: &Decisions| analysis::derive(&truth.noise_free, facts, d, &settings);
    let limit = noisy.thresholds.vt2_s.or(decisions.phases.recovery);
    Clean { limited: run(&Decisions { vt2_s: limit, ..decisions.clone() }), free: run(decisions) }
}

/// The functional truth of an item.
fn functional(id: &str, clean: &Clean) -> Option<f64> {
    match id {
        "vo2-peak" => raw_peak(&clean.free),
        "vt1-vo2" => clean.limited.thresholds.v_slope.as_ref().and_then(|v| v.knot),
        "vt2-vo2" => clean.free.thresholds.vt2.threshold().map(|t| t.vo2),
        "ve-vco2-slope-to-vt2" => primary(&clean.limited, id)?.number(),
        other => primary(&clean.free, other)?.number(),
    }
}

fn score(id: &str, noisy: &Results, clean: &Clean) -> Option<Scored> {
    let (value, interval) = match id {
        "vt1-vo2" => engine(&noisy.thresholds.vt1)?,
        "vt2-vo2" => engine(&noisy.thresholds.vt2)?,
        _ => {
            let outcome = primary(noisy, id)?;
            (outcome.number()?, outcome.recording?)
        }
    };
    let truth = functional(id, clean)?;
    Some(Scored {
        covered: interval.low <= truth && truth <= interval.high,
        half_pct: 50.0 * (interval.high - interval.low) / truth,
        error_pct: 100.0 * (value - truth) / truth,
        in_widths: if truth < value {
            (value - truth) / (value - interval.low)
        } else {
            (truth - value) / (interval.high - value)
        },
    })
}

fn engine(proposal: &Proposal) -> Option<(f64, Interval)> {
    proposal.threshold().map(|t| (t.vo2, Interval { low: t.low, high: t.high }))
}

/// One test; its intervals are scored only `with_truth`, which derives it twice more.
fn test(seed: u64, protocol: Protocol, class: Class, with_truth: bool) -> Tested {
    let plan = draw(seed, protocol, class);
    let (recording, truth): (Recording, Truth) = generate(&plan);
    let facts = facts(protocol);
    let decisions = Decisions { phases: truth.phases, ..Decisions::default() };
    let noisy = analysis::derive(&recording, &facts, &decisions, &Settings::default());
    let clean = with_truth.then(|| clean(&truth, &noisy, &facts, &decisions));
    let against = |proposal: &Proposal, truth: Option<f64>| {
        let t = proposal.threshold()?;
        truth.map(|v| 100.0 * (t.vo2 - v) / v)
    };
    Tested {
        items: ITEMS.map(|id| score(id, &noisy, clean.as_ref()?)),
        vt1: fate(&noisy.thresholds.vt1),
        vt2: fate(&noisy.thresholds.vt2),
        why: [&noisy.thresholds.vt1, &noisy.thresholds.vt2].map(why),
        vt1_error: against(&noisy.thresholds.vt1, truth.vt1_vo2),
        vt2_error: against(&noisy.thresholds.vt2, truth.vt2_vo2),
        reached_vt1: truth.vt1_vo2.is_some(),
        reached_vt2: truth.vt2_vo2.is_some(),
        noise: plan.noise.breath,
    }
}

/// Protocol of the particular kinds.
const TEN_MINUTES: Protocol = Protocol::Ramp(10.0);

/// Name and protocol of the main rows.
const PROTOCOLS: [(&str, Protocol); 5] = [
    ("8-min ramp", Protocol::Ramp(8.0)),
    ("10-min ramp", Protocol::Ramp(10.0)),
    ("12-min ramp", Protocol::Ramp(12.0)),
    ("15-min ramp", Protocol::Ramp(15.0)),
    ("1-min steps, 10 min", Protocol::Steps(10.0)),
];

/// All tables for `seeds`. The kinds of tests without a threshold and the particular ones take the
/// first half of the seeds.
#[must_use]
pub fn report(seeds: Range<u64>) -> String {
    let over = |class: Class, seeds: &Range<u64>, with_truth: bool| -> Vec<(&str, Vec<Tested>)> {
        let one = |p: Protocol| pool::over(seeds.clone(), |s| test(s, p, class, with_truth));
        PROTOCOLS.iter().map(|(name, p)| (*name, one(*p))).collect()
    };
    let half = seeds.start..seeds.start + (seeds.end - seeds.start).div_ceil(2);
    let both = over(Class::Both, &seeds, true);
    let without = [Class::Submaximal, Class::Straight, Class::NoVt2]
        .map(|class| (class, over(class, &half, false)));
    let particular = [Class::Copd, Class::Anticipatory, Class::Oscillating, Class::PreSmoothed]
        .map(|class| (class, pool::over(half.clone(), |s| test(s, TEN_MINUTES, class, false))));
    tables::text(&seeds, &both, &without, &particular)
}
