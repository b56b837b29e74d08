//! What each line of the score would cost and find, and what the bend as covariate gained.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Break, Design, Null};

use super::{Count, Read, cell, part};

/// A score of a read test.
type Score = fn(&Read) -> f64;

/// Normals of each null (T 8–12) and four abnormal cells (b, T 10).
struct Cells {
    normals: Vec<Vec<Read>>,
    abnormal: Vec<Vec<Read>>,
}

impl Cells {
    fn of(seeds: &Range<u64>) -> Self {
        let normals = [Null::Matched, Null::Mid, Null::Lin]
            .iter()
            .map(|null| {
                [8.0, 10.0, 12.0]
                    .iter()
                    .flat_map(|t| cell(&Design::normal(*null, *t), part(seeds, 2)))
                    .collect()
            })
            .collect();
        let b = Design::normal(Null::Matched, 10.0);
        let broken = |broken: Break| cell(&Design { broken, ..b }, part(seeds, 2));
        let level = |before_end_min| broken(Break::Level { before_end_min });
        let ratio = |before_end_min| broken(Break::Ratio { ratio: 0.45, before_end_min });
        Self { normals, abnormal: vec![level(3.0), level(4.0), ratio(3.0), ratio(4.0)] }
    }
}

fn above(reads: &[Read], line: f64, score: impl Fn(&Read) -> f64) -> Count {
    Count::of(reads.iter().map(|r| score(r) > line))
}

/// Shares above the line, as `0.91 / 0.99 | 0.84 / 0.92`.
fn abnormal(cells: &Cells, line: f64, score: impl Fn(&Read) -> f64 + Copy) -> String {
    let rate = |i: usize| above(&cells.abnormal[i], line, score).rate();
    format!("{:.2} / {:.2} | {:.2} / {:.2}", rate(0), rate(1), rate(2), rate(3))
}

/// Both tables.
pub(super) fn tables(out: &mut String, seeds: &Range<u64>) {
    let cells = Cells::of(seeds);
    lines(out, &cells);
    gain(out, &cells);
}

fn lines(out: &mut String, cells: &Cells) {
    let _ = writeln!(
        out,
        "\n## Trade-off\n\nShare with a score above the line (normals T 8–12; abnormals b, T 10). \
         The lines in use are {:.1} (slowed) and {:.1} (flattened, falling).\n\n\
         | line | b | mid | lin | level 3 / 4 min | r 0.45, 3 / 4 min |\n|---|---|---|---|---|---|",
        analysis::o2_pulse::LINE_LOWER,
        analysis::o2_pulse::LINE_UPPER,
    );
    for line in [3.0, 2.4, 1.8, 1.2, 0.6, 0.0, -0.3, -0.7, -1.2, -2.0] {
        let normal = |i: usize| above(&cells.normals[i], line, |r| r.score).percent();
        let _ = writeln!(
            out,
            "| {line:.1} | {} | {} | {} | {} |",
            normal(0),
            normal(1),
            normal(2),
            abnormal(cells, line, |r| r.score),
        );
    }
}

/// The line that `share` of the reads lie above.
fn line_at(reads: &[Read], share: f64, score: impl Fn(&Read) -> f64) -> f64 {
    let mut x: Vec<f64> = reads.iter().map(score).collect();
    x.sort_by(|a, b| b.total_cmp(a));
    x[(share * x.len() as f64) as usize]
}

fn gain(out: &mut String, cells: &Cells) {
    let _ = writeln!(
        out,
        "\n## What the bend as covariate gains\n\nEach score with its own line, set so that the same \
         share of the normals on null b lies above it. Without: log Bayes factor and late slope \
         alone. With: the score in use.\n\n\
         | b above the line, % | score | mid, % | lin, % | level 3 / 4 min | r 0.45, 3 / 4 min |\n\
         |---|---|---|---|---|---|"
    );
    let scores: [(&str, Score); 2] = [("without", |r| r.plain_score), ("with", |r| r.score)];
    for share in [0.025, 0.05, 0.08, 0.11, 0.15] {
        for (name, score) in scores {
            let line = line_at(&cells.normals[0], share, score);
            let _ = writeln!(
                out,
                "| {:.1} | {name} | {} | {} | {} |",
                100.0 * share,
                above(&cells.normals[1], line, score).percent(),
                above(&cells.normals[2], line, score).percent(),
                abnormal(cells, line, score),
            );
        }
    }
}
