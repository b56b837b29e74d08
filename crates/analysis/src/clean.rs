//! From the breaths of the file to the breaths used for numbers: held rows joined, left-out
//! stretches and manoeuvres taken out. The file's own breaths are never changed.

use std::ops::Range;

use crate::breaths::{Breaths, Column};
use crate::decisions::Exclusion;
use crate::errant;
use crate::facts::{Event, EventKind};
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::recording::{Recording, RowKind};
use crate::results::{BreathFlag, FlagKind, Phases};
use crate::unit::Unit;

/// Time kept out around an inspiratory-capacity manoeuvre, s before and after its instant (common
/// practice: the manoeuvre and the breath that follows it).
const MANOEUVRE_S: (f64, f64) = (5.0, 10.0);

/// Share of errant breaths that is a loud doubt.
const MANY_ERRANT: f64 = 0.05;

/// The quantities that a gas analyser holds from breath to breath.
const GAS: [Quantity; 5] =
    [Quantity::Vo2, Quantity::Vco2, Quantity::Ve, Quantity::Peto2, Quantity::Petco2];

/// Breaths to work with, and the marks on those of the file.
pub(crate) struct Cleaned {
    pub breaths: Breaths,
    /// Rows of the file behind each breath.
    rows: Vec<Range<usize>>,
    pub flags: Vec<BreathFlag>,
}

/// Joins held rows, leaves out what the reader and the manoeuvres take out.
pub(crate) fn clean(recording: &Recording, excluded: &[Exclusion], events: &[Event]) -> Cleaned {
    let raw = &recording.breaths;
    let groups = if recording.row_kind == RowKind::Beat { held(raw) } else { singles(raw.len()) };
    let mut flags = Vec::new();
    let mut kept = Vec::with_capacity(groups.len());
    for group in groups {
        let middle = 0.5 * (raw.end_s()[group.start] - raw.duration_s()[group.start])
            + 0.5 * raw.end_s()[group.end - 1];
        match taken_out(middle, excluded, events) {
            Some((kind, note)) => flags.extend(group.map(|breath| BreathFlag {
                breath,
                kind: kind.clone(),
                note: note.clone(),
            })),
            None => kept.push(group),
        }
    }
    let mut breaths = regroup(raw, &kept);
    if !recording.load.t_s.is_empty() {
        let held = (0..breaths.len()).map(|i| recording.load.at(breaths.mid_s(i))).collect();
        breaths.set(Quantity::WorkRate, held);
    }
    Cleaned { breaths, rows: kept, flags }
}

/// Merges errant breaths with the next two, looking within rest and warm-up, the increments and
/// recovery by themselves.
pub(crate) fn merge_errant(
    cleaned: Cleaned,
    phases: &Phases,
    k: f64,
    doubts: &mut Vec<Note>,
) -> Cleaned {
    let stretches = stretches(phases, &cleaned.breaths);
    let errant = errant::flag(&cleaned.breaths, &stretches, k);
    let count = errant.iter().filter(|e| **e).count();
    if count == 0 {
        return cleaned;
    }
    let share = count as f64 / errant.len() as f64;
    if share > MANY_ERRANT {
        let share = Arg::Number(100.0 * share, Unit::Percent);
        doubts.push(Note::new("many-errant-breaths").with("share", share));
    }
    let groups = errant::groups(&cleaned.breaths, &errant, &stretches);
    let mut flags = cleaned.flags;
    for group in groups.iter().filter(|g| errant[g.start]) {
        for i in group.clone() {
            let code = if errant[i] { "breath-errant" } else { "breath-merged-with-errant" };
            flags.extend(cleaned.rows[i].clone().map(|breath| BreathFlag {
                breath,
                kind: FlagKind::Merged,
                note: Note::new(code),
            }));
        }
    }
    let rows = groups.iter().map(|g| cleaned.rows[g.start].start..cleaned.rows[g.end - 1].end);
    let rows = rows.collect();
    Cleaned { breaths: regroup(&cleaned.breaths, &groups), rows, flags }
}

/// Stretches within which errant breaths are looked for.
fn stretches(phases: &Phases, breaths: &Breaths) -> Vec<(f64, f64)> {
    let end = breaths.end_s().last().copied().unwrap_or(0.0);
    match phases.ramp() {
        None => vec![(f64::MIN, end)],
        Some((from, to)) => vec![(f64::MIN, from), (from, to), (to, end)],
    }
}

fn taken_out(t_s: f64, excluded: &[Exclusion], events: &[Event]) -> Option<(FlagKind, Note)> {
    if excluded.iter().any(|e| e.from_s <= t_s && t_s <= e.to_s) {
        return Some((FlagKind::LeftOut, Note::new("breath-left-out")));
    }
    let event = events.iter().find(|e| {
        matches!(e.kind, EventKind::IcManoeuvre(_))
            && e.t_s - MANOEUVRE_S.0 <= t_s
            && t_s <= e.t_s + MANOEUVRE_S.1
    })?;
    let note = Note::new("breath-in-manoeuvre").with("time", Arg::Instant(event.t_s));
    Some((FlagKind::Manoeuvre, note))
}

fn singles(n: usize) -> Vec<Range<usize>> {
    (0..n).map(|i| i..i + 1).collect()
}

/// Runs of rows whose gas values are all the same: one breath, held over its heart beats.
fn held(breaths: &Breaths) -> Vec<Range<usize>> {
    let same = |i: usize| GAS.iter().all(|q| breaths.value(*q, i) == breaths.value(*q, i - 1));
    let mut groups: Vec<Range<usize>> = Vec::new();
    for i in 0..breaths.len() {
        match groups.last_mut() {
            // A breath longer than 20 s is not one breath.
            Some(g) if same(i) && breaths.end_s()[i] - breaths.end_s()[g.start] < 20.0 => {
                g.end = i + 1;
            }
            _ => groups.push(i..i + 1),
        }
    }
    groups
}

/// A table whose breaths are the given groups of rows: durations add up, rates are weighted by
/// duration, a volume per breath is the mean per breath.
pub(crate) fn regroup(breaths: &Breaths, groups: &[Range<usize>]) -> Breaths {
    let d = breaths.duration_s();
    let end = groups.iter().map(|g| breaths.end_s()[g.end - 1]).collect();
    let duration = groups.iter().map(|g| d[g.clone()].iter().sum()).collect();
    let columns = breaths
        .columns()
        .map(|(quantity, column)| {
            let per_breath = quantity == Quantity::Vt;
            let merged: Column = groups
                .iter()
                .map(|g| {
                    if g.len() == 1 {
                        return column[g.start];
                    }
                    let (mut sum, mut weight) = (0.0, 0.0);
                    for i in g.clone() {
                        if let Some(x) = column[i] {
                            let w = if per_breath { 1.0 } else { d[i] };
                            sum += w * x;
                            weight += w;
                        }
                    }
                    (weight > 0.0).then(|| sum / weight)
                })
                .collect();
            (quantity, merged)
        })
        .collect();
    // The groups keep the order of the rows, so the table can be formed.
    Breaths::new(end, Some(duration), columns).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn recording(row_kind: RowKind, vo2: &[f64], hr: &[f64]) -> Recording {
        let some = |c: &[f64]| c.iter().map(|x| Some(*x)).collect();
        let columns = [(Quantity::Vo2, some(vo2)), (Quantity::Hr, some(hr))].into();
        let end = (1..=vo2.len()).map(|k| k as f64).collect();
        let breaths = Breaths::new(end, None, columns).unwrap();
        Recording { breaths, row_kind, ..Recording::default() }
    }

    #[test]
    fn held_rows_become_one_breath() {
        let beats = recording(RowKind::Beat, &[5.0, 5.0, 5.0, 7.0], &[60.0, 66.0, 60.0, 80.0]);
        let cleaned = clean(&beats, &[], &[]);
        assert_eq!(cleaned.breaths.end_s(), [3.0, 4.0]);
        assert_eq!(cleaned.breaths.duration_s(), [3.0, 1.0]);
        assert_eq!(cleaned.breaths.value(Quantity::Hr, 0), Some(62.0));
    }

    #[test]
    fn left_out_breaths_and_manoeuvres_are_marked_and_absent() {
        let vo2: Vec<f64> = (0..40).map(f64::from).collect();
        let breaths = recording(RowKind::Breath, &vo2, &vo2);
        let excluded = [Exclusion { from_s: 0.0, to_s: 2.0 }];
        let events = [Event { t_s: 20.0, kind: EventKind::IcManoeuvre(Some(2.0)) }];
        let cleaned = clean(&breaths, &excluded, &events);
        let count = |kind: FlagKind| cleaned.flags.iter().filter(|f| f.kind == kind).count();
        assert_eq!(count(FlagKind::LeftOut), 2);
        // Breath middles at 15.5 … 29.5 s.
        assert_eq!(count(FlagKind::Manoeuvre), 15);
        assert_eq!(cleaned.breaths.len(), 40 - 2 - 15);
    }
}
