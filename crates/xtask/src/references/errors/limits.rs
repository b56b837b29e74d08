//! Whether the printed detection limit holds.

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Break, Design, Null};

use super::{Count, found, part, pool, read};

/// Each normal's printed limit, and whether the same person levelling then is found.
pub(super) fn kept(out: &mut String, seeds: &Range<u64>) {
    let _ = writeln!(
        out,
        "\n## Detection limit kept\n\nEach test's own printed limit, for a probability of 0.80; the \
         same person and noise, levelling from then on, found as slowed, flattened or falling. \
         Tests that read rising or indeterminate.\n\n\
         | null, T | n | limit, 5th / 50th / 95th centile, min | none | found at own limit |\n\
         |---|---|---|---|---|"
    );
    let b = Design::normal(Null::Matched, 10.0);
    let rows = [
        ("b, T 8", Design { ramp_min: 8.0, ..b }),
        ("b, T 10", b),
        ("b, T 12", Design { ramp_min: 12.0, ..b }),
        ("b, T 10, heavy noise", Design { heavy_noise: true, ..b }),
        ("b, T 10, HR limited", Design { hr_limited: true, ..b }),
        ("b, T 15", Design { ramp_min: 15.0, ..b }),
        ("mid, T 10", Design::normal(Null::Mid, 10.0)),
        ("lin, T 10", Design::normal(Null::Lin, 10.0)),
    ];
    let mut main = Count::default();
    for (i, (name, design)) in rows.into_iter().enumerate() {
        let tests = limits(&design, seeds);
        let mut minutes: Vec<f64> = tests.iter().filter_map(|t| t.map(|(l, _)| l)).collect();
        minutes.sort_by(f64::total_cmp);
        let at = |p: usize| minutes.get(minutes.len().saturating_sub(1) * p / 100).copied();
        let at = |p| at(p).unwrap_or(f64::NAN);
        let none = Count::of(tests.iter().map(Option::is_none));
        let hits = Count::of(tests.iter().flatten().map(|(_, found)| *found));
        if i < 3 {
            main = Count { k: main.k + hits.k, n: main.n + hits.n };
        }
        let _ = writeln!(
            out,
            "| {name} | {} | {:.1} / {:.1} / {:.1} | {} | {} |",
            tests.len(),
            at(5),
            at(50),
            at(95),
            none.percent(),
            hits.percent(),
        );
    }
    let _ = writeln!(out, "\nb, T 8–12 together: {} of {}.", main.percent(), main.n);
}

/// Limit of each test that is not found already, and whether a levelling of that length is found.
fn limits(design: &Design, seeds: &Range<u64>) -> Vec<Option<(f64, bool)>> {
    pool::over(part(seeds, 2), |seed| {
        let own = read(design, seed).filter(|r| !found(r))?;
        let Some(before_end_min) = own.limit else { return Some(None) };
        let broken = Break::Level { before_end_min };
        let levelled = read(&Design { broken, ..*design }, seed)?;
        Some(Some((before_end_min, found(&levelled))))
    })
    .into_iter()
    .flatten()
    .collect()
}
