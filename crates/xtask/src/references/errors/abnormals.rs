//! People whose O₂ pulse breaks late: how often that is found.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Break, Design, Null};
use analysis::o2_pulse::Course;

use super::{Read, cell, covered, flat_or_falling, found, is, median, part, rate};

/// The two aims: an O₂ pulse that truly levels, ramps of 8 to 12 min together.
pub(super) fn levelling(out: &mut String, seeds: &Range<u64>) {
    let seeds = part(seeds, 2);
    let _ = writeln!(
        out,
        "\n## An O₂ pulse that truly levels, ramps of 8, 10 and 12 min together\n\n\
         | null, level from | n | found | flattened or falling | falling | interval of g covers |\n\
         |---|---|---|---|---|---|"
    );
    for null in [Null::Matched, Null::Mid, Null::Lin] {
        for before_end_min in [3.0, 4.0] {
            let broken = Break::Level { before_end_min };
            let reads: Vec<Read> = [8.0, 10.0, 12.0]
                .iter()
                .flat_map(|t| cell(&Design { broken, ..Design::normal(null, *t) }, seeds.clone()))
                .collect();
            let _ = writeln!(
                out,
                "| {}, {before_end_min:.0} min | {} | {} | {} | {} | {} |",
                null.code(),
                reads.len(),
                rate(&reads, found),
                rate(&reads, flat_or_falling),
                rate(&reads, is(Course::Falling)),
                rate(&reads, covered),
            );
        }
    }
}

/// Each break.
pub(super) fn rows(out: &mut String, seeds: &Range<u64>) {
    let seeds = part(seeds, 4);
    let _ = writeln!(
        out,
        "\n## Abnormal: found as slowed, flattened or falling\n\n\
         | null, T, break | n | found | flattened or falling | falling | interval of g covers | \
         onset error, median (80th centile of size), min | true g, median |\n\
         |---|---|---|---|---|---|---|---|"
    );
    for (name, design, before) in abnormal_rows() {
        let reads = cell(&design, seeds.clone());
        let errors: Vec<f64> = reads.iter().filter_map(|r| r.onset.map(|o| o - before)).collect();
        let mut sizes: Vec<f64> = errors.iter().map(|e| e.abs()).collect();
        sizes.sort_by(f64::total_cmp);
        let at80 = sizes.get(sizes.len() * 4 / 5).copied().unwrap_or(f64::NAN);
        let _ = writeln!(
            out,
            "| {name} | {} | {} | {} | {} | {} | {:.1} ({at80:.1}) of {} | {:.1} |",
            reads.len(),
            rate(&reads, found),
            rate(&reads, flat_or_falling),
            rate(&reads, is(Course::Falling)),
            rate(&reads, covered),
            median(errors.clone()),
            errors.len(),
            median(reads.iter().map(|r| r.truth).collect()),
        );
    }
}

fn abnormal_rows() -> Vec<(String, Design, f64)> {
    let mut rows = Vec::new();
    let b = Design::normal(Null::Matched, 10.0);
    for ratio in [0.8, 0.6, 0.45, 0.3, 0.15] {
        for before in [2.0, 3.0, 4.0, 5.0] {
            let broken = Break::Ratio { ratio, before_end_min: before };
            let name = format!("b, T 10, r {ratio:.2} at {before:.0} min");
            rows.push((name, Design { broken, ..b }, before));
        }
    }
    for null in [Null::Matched, Null::Mid, Null::Lin] {
        for minutes in [8.0, 10.0, 12.0] {
            for before in [3.0, 4.0] {
                let broken = Break::Level { before_end_min: before };
                let name = format!("{}, T {minutes:.0}, level at {before:.0} min", null.code());
                rows.push((name, Design { broken, ..Design::normal(null, minutes) }, before));
            }
        }
    }
    let level = Design { broken: Break::Level { before_end_min: 4.0 }, ..b };
    let extra = [
        ("V̇O₂ alone slows", Design { vo2_share: 1.0, ..level }),
        ("HR alone accelerates", Design { vo2_share: 0.0, ..level }),
        ("heavy noise", Design { heavy_noise: true, ..level }),
        ("HR limited", Design { hr_limited: true, ..level }),
        ("1-min steps", Design { step_min: 1.0, ..level }),
        ("2.5-min steps, T 15", Design { step_min: 2.5, ramp_min: 15.0, ..level }),
        ("3-min steps, T 18", Design { step_min: 3.0, ramp_min: 18.0, ..level }),
    ];
    for (name, design) in extra {
        rows.push((format!("b, T 10, level at 4 min, {name}"), design, 4.0));
    }
    for (name, vo2_share) in [("V̇O₂ alone slows", 1.0), ("HR alone accelerates", 0.0)] {
        let broken = Break::Level { before_end_min: 3.0 };
        let design = Design { broken, vo2_share, ..b };
        rows.push((format!("b, T 10, level at 3 min, {name}"), design, 3.0));
    }
    rows
}
