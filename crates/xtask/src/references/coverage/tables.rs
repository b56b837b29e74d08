//! The tables of the coverage report.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::population::Class;

use super::super::binomial::Count;
use super::{Fate, ITEMS, Scored, Tested};

/// Tests of each protocol, with its name.
type ByProtocol<'a> = [(&'a str, Vec<Tested>)];
/// Tests of a class of people, by protocol.
type OfClass<'a> = (Class, Vec<(&'a str, Vec<Tested>)>);

/// The whole report.
pub(super) fn text(
    seeds: &Range<u64>,
    both: &ByProtocol<'_>,
    without: &[OfClass<'_>],
    particular: &[(Class, Vec<Tested>)],
) -> String {
    let mut out = String::new();
    let _ = writeln!(
        out,
        "# Coverage of the intervals, errors of the thresholds\n\n\
         `cargo xtask references coverage --seeds {}..{}`. Invented tests from the project's own \
         seeded model, which was written by those who tuned the rules: no patient and no healthy \
         adult is in it. Rules and factors were tuned on seeds below 10,000. Truth of an interval: \
         the same procedure on the noise-free series at the same breaths and boundaries. Per cent \
         [exact 95 % limits]. A seed draws the same person for every protocol, so the limits under \
         \"all\" are narrower than they should be; those of one protocol are exact.\n",
        seeds.start, seeds.end
    );
    coverage_table(&mut out, both);
    width_table(&mut out, both);
    threshold_table(&mut out, both);
    noise_table(&mut out, both);
    reason_table(&mut out, both);
    false_table(&mut out, without);
    class_table(&mut out, particular);
    out
}

fn coverage_table(out: &mut String, all: &ByProtocol<'_>) {
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
        let total = sum(&each);
        let cells: Vec<String> = each.iter().map(|c| cell(*c)).collect();
        let _ = writeln!(out, "| `{id}` | {} | {} |", cell(total), cells.join(" | "));
    }
}

fn cell(count: Count) -> String {
    format!("{} of {}", count.percent(), count.n)
}

fn width_table(out: &mut String, all: &ByProtocol<'_>) {
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

fn threshold_table(out: &mut String, all: &ByProtocol<'_>) {
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

fn noise_table(out: &mut String, all: &ByProtocol<'_>) {
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
fn reason_table(out: &mut String, all: &ByProtocol<'_>) {
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

/// Proposals where there is no such threshold, by protocol.
fn false_table(out: &mut String, without: &[OfClass<'_>]) {
    let names: Vec<&str> =
        without.first().map_or(&[][..], |w| &w.1).iter().map(|(name, _)| *name).collect();
    let _ = writeln!(
        out,
        "\n## False proposals, by protocol\n\n| kind | false | all | {} |\n|---|---|---|{}",
        names.join(" | "),
        "---|".repeat(names.len())
    );
    let mut row =
        |class: Class, name: &str, tests: &ByProtocol<'_>, proposed: fn(&Tested) -> bool| {
            let each: Vec<Count> =
                tests.iter().map(|(_, t)| Count::of(t.iter().map(proposed))).collect();
            let cells: Vec<String> = each.iter().map(|c| cell(*c)).collect();
            let total = cell(sum(&each));
            let _ =
                writeln!(out, "| {} | {name} | {total} | {} |", class.name(), cells.join(" | "));
        };
    for (class, tests) in without {
        if !class.has_vt1() {
            row(*class, "VT1", tests, |t| t.vt1 == Fate::Proposed);
        }
        row(*class, "VT2", tests, |t| t.vt2 == Fate::Proposed);
    }
    let _ = writeln!(out, "\nTests without VT2 that have a VT1:\n\n| protocol | {THRESHOLD_HEAD}");
    for (_, tests) in without.iter().filter(|(class, _)| class.has_vt1()) {
        for (name, tests) in tests {
            let _ =
                writeln!(out, "| {name} | {}", threshold_row(&tests.iter().collect::<Vec<_>>()));
        }
    }
}

fn sum(counts: &[Count]) -> Count {
    Count { k: counts.iter().map(|c| c.k).sum(), n: counts.iter().map(|c| c.n).sum() }
}

fn class_table(out: &mut String, particular: &[(Class, Vec<Tested>)]) {
    let _ = writeln!(
        out,
        "\n## Other kinds of tests, 10-min ramps\n\n| kind | has VT1 / VT2 | {}",
        THRESHOLD_HEAD.replace("|\n|---|", "|\n|---|---|")
    );
    for (class, tests) in particular {
        let yes = |b: bool| if b { "yes" } else { "no" };
        let _ = writeln!(
            out,
            "| {} | {} / {} | {}",
            class.name(),
            yes(class.has_vt1()),
            yes(class.has_vt2()),
            threshold_row(&tests.iter().collect::<Vec<_>>())
        );
    }
}
