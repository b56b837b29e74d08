//! Coverage of the closed-form intervals and errors of the thresholds, on simulated tests.
//!
//! The truth of an interval is the same procedure on the noise-free series at the same breaths,
//! with the boundaries put in and the VT2 that limited the noisy run.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Protocol as Stated, ProtocolKind, Rhythm};
use analysis::model::population::{Class, Protocol, draw};
use analysis::model::test::{Truth, generate};
use analysis::recording::Recording;
use analysis::results::{Interval, Outcome, Results};
use analysis::settings::Settings;
use analysis::thresholds::Proposal;

use super::binomial::Count;
use super::pool;

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

fn test(seed: u64, protocol: Protocol, class: Class) -> Tested {
    let plan = draw(seed, protocol, class);
    let (recording, truth): (Recording, Truth) = generate(&plan);
    let facts = facts(protocol);
    let decisions = Decisions { phases: truth.phases, ..Decisions::default() };
    let noisy = analysis::derive(&recording, &facts, &decisions, &Settings::default());
    let clean = clean(&truth, &noisy, &facts, &decisions);
    let against = |proposal: &Proposal, truth: Option<f64>| {
        let t = proposal.threshold()?;
        truth.map(|v| 100.0 * (t.vo2 - v) / v)
    };
    Tested {
        items: ITEMS.map(|id| score(id, &noisy, &clean)),
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

/// Name and protocol of the main rows.
const PROTOCOLS: [(&str, Protocol); 5] = [
    ("8-min ramp", Protocol::Ramp(8.0)),
    ("10-min ramp", Protocol::Ramp(10.0)),
    ("12-min ramp", Protocol::Ramp(12.0)),
    ("15-min ramp", Protocol::Ramp(15.0)),
    ("1-min steps, 10 min", Protocol::Steps(10.0)),
];

/// All tables for `seeds`.
#[must_use]
pub fn report(seeds: Range<u64>) -> String {
    let mut out = String::new();
    let _ = writeln!(
        out,
        "# Coverage of the intervals, errors of the thresholds\n\n\
         `cargo xtask references coverage --seeds {}..{}`. Invented tests from the project's own \
         seeded model, which was written by those who tuned the rules: no patient and no healthy \
         adult is in it. Truth of an interval: the same procedure on the noise-free series at the \
         same breaths and boundaries. Per cent [exact 95 % limits].\n",
        seeds.start, seeds.end
    );
    let all: Vec<(&str, Vec<Tested>)> = PROTOCOLS
        .iter()
        .map(|(name, p)| (*name, pool::over(seeds.clone(), |s| test(s, *p, Class::Both))))
        .collect();
    coverage_table(&mut out, &all);
    width_table(&mut out, &all);
    threshold_table(&mut out, &all);
    noise_table(&mut out, &all);
    reason_table(&mut out, &all);
    class_table(&mut out, &seeds);
    out
}

fn coverage_table(out: &mut String, all: &[(&str, Vec<Tested>)]) {
    let _ =
        writeln!(out, "## 90 % intervals of this recording: coverage of the functional truth\n");
    let names: Vec<&str> = all.iter().map(|a| a.0).collect();
    let _ = writeln!(out, "| item | all | {} |", names.join(" | "));
    let _ = writeln!(out, "|---|---|{}", "---|".repeat(names.len()));
    for (k, id) in ITEMS.iter().enumerate() {
        let count = |tests: &[Tested]| {
            Count::of(tests.iter().filter_map(|t| t.items[k]).map(|s| s.covered))
        };
        let each: Vec<Count> = all.iter().map(|a| count(&a.1)).collect();
        let total = Count { k: each.iter().map(|c| c.k).sum(), n: each.iter().map(|c| c.n).sum() };
        let cells: Vec<String> = each.iter().map(|c| cell(*c)).collect();
        let _ = writeln!(out, "| `{id}` | {} | {} |", cell(total), cells.join(" | "));
    }
}

fn cell(count: Count) -> String {
    format!("{} of {}", count.percent(), count.n)
}

fn width_table(out: &mut String, all: &[(&str, Vec<Tested>)]) {
    let _ = writeln!(
        out,
        "\n## Width and error against the functional truth, all protocols\n\n\
         | item | median half width, % | median error, % | SD of error, % | factor on the width that \
         would cover 90 % |\n|---|---|---|---|---|"
    );
    for (k, id) in ITEMS.iter().enumerate() {
        let scored: Vec<Scored> =
            all.iter().flat_map(|a| a.1.iter()).filter_map(|t| t.items[k]).collect();
        let errors: Vec<f64> = scored.iter().map(|s| s.error_pct).collect();
        let n = errors.len().max(1) as f64;
        let mean = errors.iter().sum::<f64>() / n;
        let sd = (errors.iter().map(|e| (e - mean) * (e - mean)).sum::<f64>() / n).sqrt();
        let _ = writeln!(
            out,
            "| `{id}` | {:.1} | {:+.1} | {sd:.1} | {:.2} |",
            centile(scored.iter().map(|s| s.half_pct), 50),
            centile(errors.iter().copied(), 50),
            centile(scored.iter().map(|s| s.in_widths), 90)
        );
    }
}

fn centile(values: impl Iterator<Item = f64>, p: usize) -> f64 {
    let mut x: Vec<f64> = values.collect();
    x.sort_by(f64::total_cmp);
    if x.is_empty() { f64::NAN } else { x[(x.len() - 1) * p / 100] }
}

/// Median size / 90th centile of the size / median signed error, %.
fn errors(values: &[f64]) -> String {
    if values.is_empty() {
        return String::from("–");
    }
    format!(
        "{:.1} / {:.1} / {:+.1}",
        centile(values.iter().map(|e| e.abs()), 50),
        centile(values.iter().map(|e| e.abs()), 90),
        centile(values.iter().copied(), 50)
    )
}

const THRESHOLD_HEAD: &str = "n | VT1 proposed | not reached | error of VT1 | VT2 proposed | not \
                              seen | error of VT2 |\n|---|---|---|---|---|---|---|---|";

fn threshold_row(tests: &[&Tested]) -> String {
    let share = |f: &dyn Fn(&Tested) -> bool| Count::of(tests.iter().map(|t| f(t))).percent();
    let one: Vec<f64> = tests.iter().filter_map(|t| t.vt1_error).collect();
    let two: Vec<f64> = tests.iter().filter_map(|t| t.vt2_error).collect();
    format!(
        "{} | {} | {} | {} | {} | {} | {} |",
        tests.len(),
        share(&|t| t.vt1 == Fate::Proposed),
        share(&|t| t.vt1 == Fate::NotReached),
        errors(&one),
        share(&|t| t.vt2 == Fate::Proposed),
        share(&|t| t.vt2 == Fate::NotReached),
        errors(&two),
    )
}

fn threshold_table(out: &mut String, all: &[(&str, Vec<Tested>)]) {
    let _ = writeln!(
        out,
        "\n## Thresholds against the V̇O₂ at which the simulated muscle or ventilation turns\n\n\
         Error: median size / 90th centile of the size / median signed, % of the true V̇O₂ there. \
         Tests in which both thresholds were passed.\n\n| protocol | {THRESHOLD_HEAD}"
    );
    let mut every: Vec<&Tested> = Vec::new();
    for (name, tests) in all {
        let had: Vec<&Tested> = tests.iter().filter(|t| t.reached_vt1 && t.reached_vt2).collect();
        let _ = writeln!(out, "| {name} | {}", threshold_row(&had));
        every.extend(had);
    }
    let _ = writeln!(out, "| all | {}", threshold_row(&every));
}

fn noise_table(out: &mut String, all: &[(&str, Vec<Tested>)]) {
    let _ = writeln!(out, "\n## The same by breath noise\n\n| noise | {THRESHOLD_HEAD}");
    for (name, low, high) in [("low", 0.0, 0.8), ("mid", 0.8, 1.3), ("high", 1.3, 9.0)] {
        let group: Vec<&Tested> = all
            .iter()
            .flat_map(|a| a.1.iter())
            .filter(|t| (low..high).contains(&t.noise) && t.reached_vt1 && t.reached_vt2)
            .collect();
        let _ = writeln!(out, "| {name} | {}", threshold_row(&group));
    }
}

/// What stood in the way of a proposal, most frequent first.
fn reason_table(out: &mut String, all: &[(&str, Vec<Tested>)]) {
    let _ = writeln!(out, "\n## Why no proposal, share of tests that passed both thresholds\n");
    for (k, name) in ["VT1", "VT2"].iter().enumerate() {
        let had: Vec<&Tested> = all
            .iter()
            .flat_map(|a| a.1.iter())
            .filter(|t| t.reached_vt1 && t.reached_vt2)
            .collect();
        let mut codes: Vec<&str> = had.iter().filter_map(|t| t.why[k]).collect();
        codes.sort_unstable();
        let mut counts: Vec<(usize, &str)> =
            codes.chunk_by(|a, b| a == b).map(|c| (c.len(), c[0])).collect();
        counts.sort_by(|a, b| b.cmp(a));
        let share = |n: usize| 100.0 * n as f64 / had.len().max(1) as f64;
        let list: Vec<String> =
            counts.iter().map(|(n, code)| format!("`{code}` {:.1} %", share(*n))).collect();
        let _ = writeln!(out, "- {name}: {}", list.join(", "));
    }
}

fn class_table(out: &mut String, seeds: &Range<u64>) {
    let part = seeds.start..seeds.start + ((seeds.end - seeds.start) / 2).max(1);
    let _ = writeln!(
        out,
        "\n## Other kinds of tests, 10-min ramps\n\nA proposal where there is no such threshold is \
         a false one.\n\n| kind | has VT1 / VT2 | {}",
        THRESHOLD_HEAD.replace("|\n|---|", "|\n|---|---|")
    );
    for class in Class::ALL {
        let tests = pool::over(part.clone(), |s| test(s, Protocol::Ramp(10.0), class));
        let refs: Vec<&Tested> = tests.iter().collect();
        let yes = |b: bool| if b { "yes" } else { "no" };
        let _ = writeln!(
            out,
            "| {} | {} / {} | {}",
            class.name(),
            yes(class.has_vt1()),
            yes(class.has_vt2()),
            threshold_row(&refs)
        );
    }
}
