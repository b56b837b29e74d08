//! Recipe and rows to the recording: nothing is decided here.

use std::collections::BTreeMap;

use analysis::breaths::{Breaths, Column};
use analysis::quantity::Quantity;
use analysis::recording::{Ambient, Gap, Recording, RowKind, Trace};

use super::beats::{self, Beats};
use super::grid::Row;
use super::number::{self, Cell};
use super::recipe::{Recipe, RowsAre};
use super::{issue, time};
use crate::problem::Problem;
use crate::provenance::{ColumnReading, LeftOut, Target, base_unit};

/// Without a breath for longer than this, the time between is a gap, s.
const LONGEST_BREATH_S: f64 = 15.0;

/// Numbers that stand for "missing" where the quantity cannot have them.
const STAND_INS: &[f64] = &[-1.0, 999.0, -999.0, 9999.0, -9999.0];

/// The value of a cell in the engine's unit; text, missing values and stand-ins are `None`.
#[must_use]
pub fn value(cell: &str, column: &ColumnReading, recipe_decimal: number::Decimal) -> Option<f64> {
    let Cell::Number(raw) = number::cell(cell, recipe_decimal) else { return None };
    if is_stand_in(raw, column) {
        return None;
    }
    column.reading.unit.convert(raw, base_unit(column.reading.target)).filter(|v| v.is_finite())
}

/// Whether the number only says "missing".
#[must_use]
pub fn is_stand_in(raw: f64, column: &ColumnReading) -> bool {
    if column.zero_is_missing && raw == 0.0 {
        return true;
    }
    let Target::Quantity(q) = column.reading.target else { return false };
    STAND_INS.contains(&raw)
        && column.reading.unit.convert(raw, q.unit()).is_none_or(|v| !q.is_plausible(v))
}

/// The lines left out, for look-up.
struct LeftLines(Vec<(usize, usize)>);

impl LeftLines {
    fn new(recipe: &Recipe) -> Self {
        let ranges = recipe.left_out.iter().filter_map(|l| match l {
            LeftOut::Rows { from, to, .. } => Some((*from, *to)),
            LeftOut::Column { .. } => None,
        });
        let mut ranges: Vec<_> = ranges.collect();
        ranges.sort_unstable();
        Self(ranges)
    }

    fn hold(&self, line: usize) -> bool {
        let after = self.0.partition_point(|(from, _)| *from <= line);
        after > 0 && self.0[after - 1].1 >= line
    }
}

/// The rows that the recipe keeps.
#[must_use]
pub fn kept<'a>(rows: &'a [Row], recipe: &Recipe) -> Vec<&'a Row> {
    let left = LeftLines::new(recipe);
    rows.iter().filter(|r| r.line >= recipe.first_line && !left.hold(r.line)).collect()
}

/// Builds the recording from all rows of the file.
///
/// # Errors
/// The recipe does not fit the rows: a time that cannot be read, or time that does not rise.
pub fn recording(rows: &[Row], recipe: &Recipe) -> Result<Recording, Problem> {
    let rows = kept(rows, recipe);
    let time_column = recipe
        .columns
        .iter()
        .find(|c| c.reading.target == Target::Time)
        .ok_or_else(|| issue::recipe("The recipe names no time column."))?;
    let cells = rows.iter().map(|r| r.cell(time_column.index));
    let times: Option<Vec<f64>> =
        time::read(cells, recipe.decimal, recipe.time).into_iter().collect();
    let mut times = times.ok_or_else(|| issue::recipe("A time cannot be read."))?;
    time::spread_equal(&mut times);
    let columns = columns(&rows, recipe);
    let load = load(&times, columns.get(&Target::Quantity(Quantity::WorkRate)));
    let duration = columns.get(&Target::BreathDuration).cloned();
    let columns: BTreeMap<Quantity, Column> = columns
        .into_iter()
        .filter_map(|(t, c)| match t {
            Target::Quantity(q) if q != Quantity::WorkRate => Some((q, c)),
            _ => None,
        })
        .collect();
    let (breaths, gaps) = match recipe.rows {
        RowsAre::Beats => {
            let f = beats::fold(&Beats { t_s: &times, columns: &columns });
            (Breaths::new(f.end_s, Some(f.duration_s), f.columns), f.gaps)
        }
        RowsAre::Breaths => of_breaths(times, duration, columns),
        RowsAre::Averages { step_s } => {
            let durations = vec![step_s; times.len()];
            let gaps = gaps(&times, &durations, 2.5 * step_s);
            (Breaths::new(times, Some(durations), columns), gaps)
        }
    };
    let breaths = breaths.map_err(|_| issue::recipe("Time does not rise."))?;
    let row_kind = match recipe.rows {
        RowsAre::Breaths => RowKind::Breath,
        RowsAre::Beats => RowKind::Beat,
        RowsAre::Averages { step_s } => RowKind::Averaged { step_s },
    };
    Ok(Recording { breaths, row_kind, load, gaps, ambient: Ambient::default() })
}

fn columns(rows: &[&Row], recipe: &Recipe) -> BTreeMap<Target, Column> {
    let mut out: BTreeMap<Target, Column> = BTreeMap::new();
    for column in &recipe.columns {
        let cells = rows.iter().map(|r| r.cell(column.index));
        match column.reading.target {
            Target::Time | Target::LeaveOut => {}
            Target::BpPair => {
                let pairs: Vec<_> = cells.map(|c| pair(c, column, recipe.decimal)).collect();
                let of = |q, pick: fn(&(f64, f64)) -> f64| {
                    (Target::Quantity(q), pairs.iter().map(|p| p.as_ref().map(pick)).collect())
                };
                out.extend([of(Quantity::SysBp, |p| p.0), of(Quantity::DiaBp, |p| p.1)]);
            }
            target => {
                out.insert(target, cells.map(|c| value(c, column, recipe.decimal)).collect());
            }
        }
    }
    // A rate where the file has only intervals.
    let (hr, rr) = (Target::Quantity(Quantity::Hr), Target::Quantity(Quantity::RrInterval));
    if recipe.rows != RowsAre::Beats
        && !out.contains_key(&hr)
        && let Some(intervals) = out.get(&rr)
    {
        let beat = |v: &Option<f64>| v.filter(|ms| *ms > 0.0 && *ms <= beats::LONGEST_RR_MS);
        let rate = intervals.iter().map(|v| beat(v).map(|ms| 60_000.0 / ms)).collect();
        out.insert(hr, rate);
    }
    out
}

/// `120/80`.
#[must_use]
pub fn pair(cell: &str, column: &ColumnReading, decimal: number::Decimal) -> Option<(f64, f64)> {
    let (sys, dia) = cell.split_once('/')?;
    let read = |text| {
        let v = number::number(text, decimal)?;
        column.reading.unit.convert(v, base_unit(Target::BpPair))
    };
    Some((read(sys)?, read(dia)?))
}

/// Work rate as a held trace: a point where it changes.
fn load(times: &[f64], column: Option<&Column>) -> Trace {
    let mut trace = Trace::default();
    let Some(column) = column else { return trace };
    for (t, value) in times.iter().zip(column) {
        if let Some(v) = value
            && trace.value.last() != Some(v)
        {
            trace.t_s.push(*t);
            trace.value.push(*v);
        }
    }
    trace
}

fn of_breaths(
    times: Vec<f64>,
    stated: Option<Column>,
    columns: BTreeMap<Quantity, Column>,
) -> (Result<Breaths, analysis::breaths::BreathsError>, Vec<Gap>) {
    let frequency = columns.get(&Quantity::Fr);
    let durations: Vec<f64> = (0..times.len())
        .map(|i| {
            let own = stated.as_ref().and_then(|d| d[i]).filter(|d| *d > 0.0);
            let step = if i > 0 { times[i] - times[i - 1] } else { f64::NAN };
            let by_rate = frequency.and_then(|f| f[i]).filter(|f| *f >= 3.0).map(|f| 60.0 / f);
            // The step is the duration, unless breaths are missing in between.
            own.unwrap_or(if i > 0 && step <= LONGEST_BREATH_S {
                step
            } else {
                by_rate.unwrap_or(f64::NAN)
            })
        })
        .collect();
    let usual = median(&durations).unwrap_or(3.0);
    let durations: Vec<f64> =
        durations.into_iter().map(|d| if d.is_finite() { d } else { usual }).collect();
    let gaps = gaps(&times, &durations, LONGEST_BREATH_S);
    (Breaths::new(times, Some(durations), columns), gaps)
}

fn median(values: &[f64]) -> Option<f64> {
    let mut finite: Vec<f64> = values.iter().copied().filter(|v| v.is_finite()).collect();
    finite.sort_by(f64::total_cmp);
    finite.get(finite.len() / 2).copied()
}

fn gaps(times: &[f64], durations: &[f64], longest_s: f64) -> Vec<Gap> {
    (1..times.len())
        .filter(|i| times[*i] - times[*i - 1] > longest_s)
        .map(|i| Gap { from_s: times[i - 1], to_s: times[i] - durations[i] })
        .filter(|g| g.to_s > g.from_s)
        .collect()
}
