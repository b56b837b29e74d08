//! People without disease: how often each word is read.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Design, Null, shape_functionals};
use analysis::o2_pulse::Course;

use super::{Read, cell, covered, flat_or_falling, is, median, pool, rate};

/// How much the V̇O₂–HR relation bends in each null.
pub(super) fn shapes(out: &mut String, seeds: &Range<u64>) {
    let _ = writeln!(
        out,
        "## Shape of the simulated normals\n\n\
         | null | R 1st / 5th / 50th centile | rho 1st / 5th / 50th |\n|---|---|---|"
    );
    for null in [Null::Matched, Null::Mid, Null::Lin] {
        let design = Design::normal(null, 10.0);
        let (mut r, mut rho): (Vec<f64>, Vec<f64>) =
            pool::over(seeds.clone(), |s| shape_functionals(&design, s)).into_iter().unzip();
        r.sort_by(f64::total_cmp);
        rho.sort_by(f64::total_cmp);
        let at = |x: &[f64], p: usize| x[(x.len() - 1) * p / 100];
        let _ = writeln!(
            out,
            "| {} | {:.2} / {:.2} / {:.2} | {:.2} / {:.2} / {:.2} |",
            null.code(),
            at(&r, 1),
            at(&r, 5),
            at(&r, 50),
            at(&rho, 1),
            at(&rho, 5),
            at(&rho, 50)
        );
    }
}

fn normal_rows() -> Vec<(String, Design)> {
    let mut rows = Vec::new();
    for null in [Null::Matched, Null::Mid, Null::Lin] {
        for minutes in [8.0, 10.0, 12.0, 15.0] {
            rows.push((format!("{}, T {minutes}", null.code()), Design::normal(null, minutes)));
        }
    }
    let b = Design::normal(Null::Matched, 10.0);
    rows.push(("b, T 10, 60-s V̇O₂ plateau in all".into(), Design { plateau_s: 60.0, ..b }));
    rows.push(("b, T 10, heavy noise".into(), Design { heavy_noise: true, ..b }));
    rows.push(("b, T 10, HR limited".into(), Design { hr_limited: true, ..b }));
    rows.push(("b, T 10, 1-min steps".into(), Design { step_min: 1.0, ..b }));
    rows.push(("b, T 15, 2.5-min steps".into(), Design { ramp_min: 15.0, step_min: 2.5, ..b }));
    rows.push(("b, T 18, 3-min steps".into(), Design { ramp_min: 18.0, step_min: 3.0, ..b }));
    rows
}

/// Each protocol.
pub(super) fn rows(out: &mut String, seeds: &Range<u64>) {
    let _ = writeln!(
        out,
        "\n## Normals\n\n\
         | null, protocol | n | rising | slowed | flattened or falling | falling | indeterminate \
         | 90 % interval of g covers | median SE of g |\n|---|---|---|---|---|---|---|---|---|"
    );
    for (name, design) in normal_rows() {
        let reads = cell(&design, seeds.clone());
        let _ = writeln!(
            out,
            "| {name} | {} | {} | {} | {} | {} | {} | {} | {:.2} |",
            reads.len(),
            rate(&reads, is(Course::Rising)),
            rate(&reads, is(Course::RisingSlowed)),
            rate(&reads, flat_or_falling),
            rate(&reads, is(Course::Falling)),
            rate(&reads, is(Course::Indeterminate)),
            rate(&reads, covered),
            median(reads.iter().map(|r| r.se).collect()),
        );
    }
}

/// The four aims on the nulls, ramps of 8 to 12 min together.
pub(super) fn pooled(out: &mut String, seeds: &Range<u64>) {
    let _ = writeln!(
        out,
        "\n## Normals, ramps of 8, 10 and 12 min together\n\n\
         | null | n | slowed | flattened or falling | falling | indeterminate | \
         flattened or falling though true g ≥ 1 |\n|---|---|---|---|---|---|---|"
    );
    for null in [Null::Matched, Null::Mid, Null::Lin] {
        let reads: Vec<Read> = [8.0, 10.0, 12.0]
            .iter()
            .flat_map(|t| cell(&Design::normal(null, *t), seeds.clone()))
            .collect();
        let _ = writeln!(
            out,
            "| {} | {} | {} | {} | {} | {} | {} |",
            null.code(),
            reads.len(),
            rate(&reads, is(Course::RisingSlowed)),
            rate(&reads, flat_or_falling),
            rate(&reads, is(Course::Falling)),
            rate(&reads, is(Course::Indeterminate)),
            rate(&reads, |r| flat_or_falling(r) && r.truth >= 1.0),
        );
    }
}
