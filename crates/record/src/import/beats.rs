//! A table of one row per heart beat: gas values held over beats become breaths again.

use std::collections::BTreeMap;

use analysis::breaths::Column;
use analysis::quantity::Quantity;
use analysis::recording::Gap;

/// A value held longer than this is a gap in the gas values, s.
pub const LONGEST_HOLD_S: f64 = 8.0;
/// An interval longer than this is a gap, never a beat, ms.
pub const LONGEST_RR_MS: f64 = 2500.0;
/// A shorter interval is no beat, ms (the plausible range of the quantity table).
const SHORTEST_RR_MS: f64 = 240.0;
/// An interval this far off the running median is not used for heart rate, fraction.
const OFF_MEDIAN: f64 = 0.15;
/// Beats of the running median.
const MEDIAN_BEATS: usize = 15;

/// The rows of a beat-wise table.
pub struct Beats<'a> {
    /// Times of the beats, s, rising.
    pub t_s: &'a [f64],
    /// Columns in canonical units.
    pub columns: &'a BTreeMap<Quantity, Column>,
}

/// Breaths formed from beats.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Folded {
    /// End of each breath, s.
    pub end_s: Vec<f64>,
    /// Duration of each breath, s.
    pub duration_s: Vec<f64>,
    /// Columns, one value per breath.
    pub columns: BTreeMap<Quantity, Column>,
    /// Gaps in the gas values.
    pub gaps: Vec<Gap>,
}

/// Rows `from..=to` that carry one held value.
struct Run {
    from: usize,
    to: usize,
    /// Whether a beat gap lies before the first row.
    after_break: bool,
    /// Whether the rows tell of a breath: a value is there and it is not the one from before a gap.
    told: bool,
}

/// Forms breaths: one per run of equal neighbours in the first held column (V̇O₂, else another gas
/// column; without any, every beat stands for itself).
#[must_use]
pub fn fold(beats: &Beats) -> Folded {
    let usable = usable_intervals(beats.columns.get(&Quantity::RrInterval));
    let mut out = Folded::default();
    for run in runs(beats) {
        let start = start_of(beats.t_s, &usable, &run);
        let end = beats.t_s[run.to];
        if run.after_break {
            add_gap(&mut out.gaps, beats.t_s[run.from - 1], start);
        }
        if !run.told || end - start > LONGEST_HOLD_S {
            add_gap(&mut out.gaps, start, end);
        } else if end > start {
            add_breath(beats, &usable, &run, (start, end), &mut out);
        }
    }
    out
}

fn add_gap(gaps: &mut Vec<Gap>, from_s: f64, to_s: f64) {
    if to_s <= from_s {
        return;
    }
    match gaps.last_mut() {
        Some(last) if from_s <= last.to_s + 1e-9 => last.to_s = last.to_s.max(to_s),
        _ => gaps.push(Gap { from_s, to_s }),
    }
}

fn add_breath(
    beats: &Beats,
    usable: &[Option<f64>],
    run: &Run,
    (start, end): (f64, f64),
    out: &mut Folded,
) {
    out.end_s.push(end);
    out.duration_s.push(end - start);
    let rows = run.from..=run.to;
    let mut push = |quantity, value| out.columns.entry(quantity).or_default().push(value);
    for (quantity, column) in beats.columns {
        match quantity {
            Quantity::RrInterval => {
                let interval = usable.get(rows.clone()).and_then(mean);
                push(Quantity::Hr, interval.map(|ms| 60_000.0 / ms));
            }
            // The interval between beats is the better source of the rate.
            Quantity::Hr if !usable.is_empty() => {}
            Quantity::Hr => push(Quantity::Hr, mean(&column[rows.clone()])),
            _ => push(*quantity, column[rows.clone()].iter().rev().find_map(|v| *v)),
        }
    }
}

fn mean(values: &[Option<f64>]) -> Option<f64> {
    let (sum, n) = values.iter().flatten().fold((0.0, 0_u32), |(s, n), v| (s + v, n + 1));
    (n > 0).then(|| sum / f64::from(n))
}

/// Start of a run, s: the beat before it; after a gap, one usual interval before its first beat.
fn start_of(t_s: &[f64], usable: &[Option<f64>], run: &Run) -> f64 {
    if run.from > 0 && !run.after_break {
        return t_s[run.from - 1];
    }
    let near = usable.iter().skip(run.from).take(MEDIAN_BEATS).flatten().next();
    let start = t_s[run.from] - near.map_or(0.0, |ms| ms / 1000.0);
    if run.from > 0 { start.max(t_s[run.from - 1]) } else { start }
}

fn runs(beats: &Beats) -> Vec<Run> {
    let t = beats.t_s;
    let leader = [Quantity::Vo2, Quantity::Vco2, Quantity::Ve, Quantity::Vt]
        .into_iter()
        .find_map(|q| beats.columns.get(&q));
    let broken = |i: usize| (t[i] - t[i - 1]) * 1000.0 > LONGEST_RR_MS;
    let mut out: Vec<Run> = Vec::new();
    for i in 0..t.len() {
        let after_break = i > 0 && broken(i);
        let value = leader.map(|c| c[i]);
        let same = i > 0 && leader.is_some_and(|c| c[i] == c[i - 1]);
        match out.last_mut() {
            Some(run) if same && !after_break => run.to = i,
            // The value from before a gap, still held after it, is no new breath.
            _ => out.push(Run {
                from: i,
                to: i,
                after_break,
                told: value != Some(None) && !(same && after_break),
            }),
        }
    }
    out
}

/// The intervals that may stand for heart rate, ms: at most 2.5 s, and within 15 % of the median
/// of the 15 intervals around. Empty without a column of intervals.
fn usable_intervals(rr: Option<&Column>) -> Vec<Option<f64>> {
    let Some(rr) = rr else { return Vec::new() };
    let beat = |v: &Option<f64>| v.filter(|ms| *ms >= SHORTEST_RR_MS && *ms <= LONGEST_RR_MS);
    let half = MEDIAN_BEATS / 2;
    let mut around: Vec<f64> = Vec::with_capacity(MEDIAN_BEATS);
    (0..rr.len())
        .map(|i| {
            let own = beat(&rr[i])?;
            around.clear();
            let last = (i + half).min(rr.len() - 1);
            around.extend(rr[i.saturating_sub(half)..=last].iter().filter_map(beat));
            around.sort_by(f64::total_cmp);
            let median = around[around.len() / 2];
            ((own - median).abs() <= OFF_MEDIAN * median).then_some(own)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Beats at constant 600 ms (100/min); V̇O₂ held over five beats, i.e. breaths of 3 s.
    fn table(n: usize) -> (Vec<f64>, BTreeMap<Quantity, Column>) {
        let t: Vec<f64> = (1..=n).map(|i| 0.6 * i as f64).collect();
        let vo2 = (0..n).map(|i| Some(500.0 + (i / 5) as f64)).collect();
        let rr = vec![Some(600.0); n];
        (t, BTreeMap::from([(Quantity::Vo2, vo2), (Quantity::RrInterval, rr)]))
    }

    fn folded(t: &[f64], columns: &BTreeMap<Quantity, Column>) -> Folded {
        fold(&Beats { t_s: t, columns })
    }

    #[test]
    fn one_breath_per_run_of_equal_neighbours() {
        let (t, columns) = table(50);
        let f = folded(&t, &columns);
        assert_eq!(f.end_s.len(), 10);
        assert!(f.gaps.is_empty());
        for i in 0..10 {
            assert!((f.duration_s[i] - 3.0).abs() < 1e-9);
            assert!((f.end_s[i] - 3.0 * (i + 1) as f64).abs() < 1e-9);
            assert_eq!(f.columns[&Quantity::Vo2][i], Some(500.0 + i as f64));
            assert_eq!(f.columns[&Quantity::Hr][i], Some(100.0));
        }
    }

    #[test]
    fn an_early_beat_and_its_pause_do_not_move_the_rate() {
        let (t, mut columns) = table(50);
        let rr = columns.get_mut(&Quantity::RrInterval).unwrap();
        rr[21] = Some(360.0);
        rr[22] = Some(840.0);
        assert_eq!(folded(&t, &columns).columns[&Quantity::Hr][4], Some(100.0));
    }

    #[test]
    fn a_long_hold_is_a_gap() {
        let (t, mut columns) = table(60);
        // Rows 20..40 hold one value: 20 × 0.6 s = 12 s > 8 s.
        let vo2 = columns.get_mut(&Quantity::Vo2).unwrap();
        vo2[20..40].fill(Some(900.0));
        let f = folded(&t, &columns);
        assert_eq!(f.gaps.len(), 1);
        assert!((f.gaps[0].from_s - 12.0).abs() < 1e-9 && (f.gaps[0].to_s - 24.0).abs() < 1e-9);
        assert!(f.columns[&Quantity::Vo2].iter().all(|v| *v != Some(900.0)));
    }

    #[test]
    fn missing_beats_are_a_gap_and_never_a_beat() {
        let (mut t, mut columns) = table(50);
        for x in &mut t[25..] {
            *x += 5.0;
        }
        columns.get_mut(&Quantity::RrInterval).unwrap()[25] = Some(5600.0);
        let f = folded(&t, &columns);
        assert_eq!(f.end_s.len(), 10);
        // The gap ends one usual interval (0.6 s) before the first beat after it.
        assert_eq!(f.gaps.len(), 1);
        assert!((f.gaps[0].from_s - 15.0).abs() < 1e-9 && (f.gaps[0].to_s - 20.0).abs() < 1e-9);
        assert!((f.duration_s[5] - 3.0).abs() < 1e-9);
        assert!(f.columns[&Quantity::Hr].iter().all(|v| *v == Some(100.0)));
    }

    #[test]
    fn without_gas_every_beat_stands_for_itself() {
        let (t, mut columns) = table(50);
        columns.remove(&Quantity::Vo2);
        let f = folded(&t, &columns);
        assert_eq!(f.end_s.len(), 50);
        assert!(f.columns[&Quantity::Hr].iter().all(|v| *v == Some(100.0)));
    }
}
