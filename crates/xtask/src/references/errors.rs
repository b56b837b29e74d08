//! Error rates of the O₂-pulse course on simulated people: normals, abnormals, trade-off.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Break, Design, Null, shape_functionals, simulate};
use analysis::o2_pulse::{Course, CourseInput, classify};

use super::binomial::Count;
use super::pool;

/// What one simulated ramp gave.
#[derive(Clone, Copy, Debug)]
struct Read {
    course: Option<Course>,
    score: f64,
    slope: f64,
    se: f64,
    truth: f64,
    limit: Option<f64>,
    /// Onset, minutes before load end.
    onset: Option<f64>,
}

fn read(design: &Design, seed: u64) -> Option<Read> {
    let s = simulate(design, seed);
    let detail = classify(&CourseInput {
        t_s: &s.t_s,
        vo2: &s.vo2,
        hr: &s.hr,
        load: &s.load,
        ramp_start_s: s.ramp_start_s,
        load_end_s: s.load_end_s,
    })
    .ok()?;
    let n = detail.numbers?;
    Some(Read {
        course: detail.course,
        score: n.score,
        slope: n.late_slope.value,
        se: n.late_slope.se,
        truth: s.late_slope,
        limit: n.detection_limit_min,
        onset: detail.onset.map(|o| o.before_end_min),
    })
}

fn cell(design: &Design, seeds: Range<u64>) -> Vec<Read> {
    pool::over(seeds, |seed| read(design, seed)).into_iter().flatten().collect()
}

fn rate(reads: &[Read], hit: impl Fn(&Read) -> bool) -> String {
    Count::of(reads.iter().map(hit)).percent()
}

fn is(course: Course) -> impl Fn(&Read) -> bool {
    move |r| r.course == Some(course)
}

fn flat_or_falling(r: &Read) -> bool {
    r.course.is_some_and(Course::is_flat_or_falling)
}

fn found(r: &Read) -> bool {
    flat_or_falling(r) || r.course == Some(Course::RisingSlowed)
}

fn covered(r: &Read) -> bool {
    (r.slope - r.truth).abs() <= 1.645 * r.se
}

fn median(mut x: Vec<f64>) -> f64 {
    x.sort_by(f64::total_cmp);
    x.get(x.len() / 2).copied().unwrap_or(f64::NAN)
}

/// A smaller set for cells that need fewer.
fn part(seeds: &Range<u64>, share: u64) -> Range<u64> {
    seeds.start..seeds.start + ((seeds.end - seeds.start) / share).max(1)
}

/// All tables for `seeds`.
#[must_use]
pub fn report(seeds: Range<u64>) -> String {
    let mut out = String::new();
    let _ = writeln!(
        out,
        "# Error rates of the O₂-pulse course\n\n\
         `cargo xtask references errors --seeds {}..{}`. Invented ramps: shape matched to stage \
         values of Donne et al. 2024 (doi:10.5281/zenodo.10841412), noise to ramps of Chabert et \
         al. 2022 (doi:10.13026/2qs3-kh43). No patient and no healthy person's own rate. \
         Per cent [exact 95 % limits].\n",
        seeds.start, seeds.end
    );
    shapes(&mut out, &seeds);
    normals(&mut out, &seeds);
    pooled(&mut out, &seeds);
    abnormals(&mut out, &seeds);
    trade_off(&mut out, &seeds);
    limits_kept(&mut out, &seeds);
    out
}

fn shapes(out: &mut String, seeds: &Range<u64>) {
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

fn normals(out: &mut String, seeds: &Range<u64>) {
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
fn pooled(out: &mut String, seeds: &Range<u64>) {
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

fn abnormals(out: &mut String, seeds: &Range<u64>) {
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
        ("heavy noise", Design { heavy_noise: true, ..level }),
        ("HR limited", Design { hr_limited: true, ..level }),
        ("1-min steps", Design { step_min: 1.0, ..level }),
    ];
    for (name, design) in extra {
        rows.push((format!("b, T 10, level at 4 min, {name}"), design, 4.0));
    }
    rows
}

fn trade_off(out: &mut String, seeds: &Range<u64>) {
    let normals: Vec<Vec<Read>> = [Null::Matched, Null::Mid, Null::Lin]
        .iter()
        .map(|null| {
            [8.0, 10.0, 12.0]
                .iter()
                .flat_map(|t| cell(&Design::normal(*null, *t), part(seeds, 2)))
                .collect()
        })
        .collect();
    let b = Design::normal(Null::Matched, 10.0);
    let broken = |broken: Break| cell(&Design { broken, ..b }, part(seeds, 4));
    let level = [3.0, 4.0].map(|m| broken(Break::Level { before_end_min: m }));
    let ratio = [3.0, 4.0].map(|m| broken(Break::Ratio { ratio: 0.45, before_end_min: m }));
    let _ = writeln!(
        out,
        "\n## Trade-off\n\nShare with a score above the line (normals T 8–12; abnormals b, T 10).\n\n\
         | line | b | mid | lin | level 3 / 4 min | r 0.45, 3 / 4 min |\n|---|---|---|---|---|---|"
    );
    let above = |reads: &[Read], line: f64| Count::of(reads.iter().map(|r| r.score > line));
    for line in [2.4, 1.6, 0.8, 0.0, -0.5, -1.2, -2.0] {
        let _ = writeln!(
            out,
            "| {line:.1} | {} | {} | {} | {:.2} / {:.2} | {:.2} / {:.2} |",
            above(&normals[0], line).percent(),
            above(&normals[1], line).percent(),
            above(&normals[2], line).percent(),
            above(&level[0], line).rate(),
            above(&level[1], line).rate(),
            above(&ratio[0], line).rate(),
            above(&ratio[1], line).rate(),
        );
    }
}

/// Each normal's printed limit, and whether the same person levelling then is found.
fn limits_kept(out: &mut String, seeds: &Range<u64>) {
    let _ = writeln!(
        out,
        "\n## Detection limit kept\n\nEach test's own printed limit; the same person and noise, \
         levelling from then on, found as slowed, flattened or falling.\n\n\
         | null, T | limit 2.5 | 3.0 | 3.5 | 4.0 min and more | none | found at own limit |\n\
         |---|---|---|---|---|---|---|"
    );
    for minutes in [8.0, 10.0, 12.0] {
        let design = Design::normal(Null::Matched, minutes);
        let pairs: Vec<(Option<f64>, bool)> = pool::over(part(seeds, 2), |seed| {
            let own = read(&design, seed)?;
            let Some(limit) = own.limit else { return Some((None, false)) };
            let broken = Break::Level { before_end_min: limit };
            read(&Design { broken, ..design }, seed).map(|r| (Some(limit), found(&r)))
        })
        .into_iter()
        .flatten()
        .collect();
        let share = |test: &dyn Fn(Option<f64>) -> bool| {
            format!("{:.0} %", 100.0 * Count::of(pairs.iter().map(|p| test(p.0))).rate())
        };
        let kept = Count::of(pairs.iter().filter(|p| p.0.is_some()).map(|p| p.1));
        let _ = writeln!(
            out,
            "| b, T {minutes:.0} | {} | {} | {} | {} | {} | {} |",
            share(&|l| l.is_some_and(|x| x < 2.75)),
            share(&|l| l.is_some_and(|x| (2.75..3.25).contains(&x))),
            share(&|l| l.is_some_and(|x| (3.25..3.75).contains(&x))),
            share(&|l| l.is_some_and(|x| x >= 3.75)),
            share(&|l| l.is_none()),
            kept.percent(),
        );
    }
}
