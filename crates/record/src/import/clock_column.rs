//! The time column: which it is, how it is read, and which rows it keeps; and what a row is.

use super::answers::{Answers, Profile};
use super::columns::{Header, Name};
use super::decide::{is_shared, samples};
use super::grid::Row;
use super::layout::{self, Layout};
use super::number::Decimal;
use super::recipe::RowsAre;
use super::time::{self, TimeForm};
use super::units::{self, UnitText};
use super::{issue, values};
use crate::problem::Problem;
use crate::provenance::{ColumnReading, Decided, LeftOut, Reading, Target};

/// Rows whose time goes back that may be left out, one in this many; more are refused.
const BACK_ONE_IN: usize = 100;
/// Share of equal neighbours in V̇O₂ above which values are held.
const HELD: f64 = 0.35;
/// Share of steps that must be equal in a table of averages.
const CONSTANT: f64 = 0.95;

/// The time column and the rows it keeps.
pub(super) struct Timed {
    pub column: ColumnReading,
    pub form: TimeForm,
    /// Indices of the rows kept.
    pub data: Vec<usize>,
    /// Their times, s, rising.
    pub times: Vec<f64>,
    pub left_out: Vec<LeftOut>,
    pub warnings: Vec<Problem>,
}

struct Candidate {
    index: usize,
    form: TimeForm,
    decided: Decided,
}

/// Chooses and reads the time column.
pub(super) fn choose(
    rows: &[Row],
    layout: &Layout,
    decimal: Decimal,
    answers: &Answers,
    profile: Option<&Profile>,
) -> Result<Timed, Problem> {
    let headers = &rows[layout.header];
    let mut found: Option<Candidate> = None;
    let mut why = "no column is named as a time".to_owned();
    for (index, head) in layout.headers.iter().enumerate() {
        let shared = is_shared(headers, index);
        let answered = answers.about(headers.cell(index), index, shared);
        let told = answered.or_else(|| profile?.about(headers.cell(index), &head.unit));
        let by = if answered.is_some() { Decided::Answer } else { Decided::Profile };
        let told_time = told.filter(|r| r.target == Target::Time);
        let by_name = matches!(head.name, Some(Name::Reads(&[Target::Time])));
        if told_time.is_none() && (told.is_some() || !by_name) {
            continue;
        }
        let cells = time_cells(rows, layout, index, decimal);
        match form_of(&cells, decimal, head, told_time) {
            Ok((form, _)) if told_time.is_some() => {
                found = Some(Candidate { index, form, decided: by });
                break;
            }
            // Time since the start is better than the time of day.
            Ok((form, decided)) if found.as_ref().is_none_or(|f| f.yields_to(form)) => {
                found = Some(Candidate { index, form, decided });
            }
            Ok(_) => {}
            Err(reason) => why = reason,
        }
    }
    let Some(candidate) = found else { return Err(issue::no_time(headers.line, &why)) };
    let form = candidate.form;
    keep_rows(rows, layout, decimal, form, candidate.column(rows, layout))
}

impl Candidate {
    fn yields_to(&self, form: TimeForm) -> bool {
        self.form == TimeForm::TimeOfDay && form != TimeForm::TimeOfDay
    }

    fn column(self, rows: &[Row], layout: &Layout) -> ColumnReading {
        let cells: Vec<&str> = rows[layout.first..].iter().map(|r| r.cell(self.index)).collect();
        ColumnReading {
            index: self.index,
            header: rows[layout.header].cell(self.index).to_owned(),
            unit_text: layout.headers[self.index].unit.clone(),
            reading: Reading { target: Target::Time, unit: self.form.unit() },
            decided: self.decided,
            zero_is_missing: false,
            samples: samples(&cells),
        }
    }
}

/// The cells of the rows that look like rows of values: a time and something beside it.
fn time_cells<'a>(
    rows: &'a [Row],
    layout: &Layout,
    index: usize,
    decimal: Decimal,
) -> Vec<&'a str> {
    let is_time =
        |cell: &str| super::number::number(cell, decimal).is_some() || time::clock(cell).is_some();
    let beside = |row: &Row| row.cells.iter().enumerate().any(|(i, c)| i != index && is_time(c));
    rows[layout.first..]
        .iter()
        .filter(|r| is_time(r.cell(index)) && beside(r))
        .map(|r| r.cell(index))
        .collect()
}

fn form_of(
    cells: &[&str],
    decimal: Decimal,
    head: &Header,
    told: Option<Reading>,
) -> Result<(TimeForm, Decided), String> {
    if cells.is_empty() {
        return Err("its cells hold no times".into());
    }
    let unit_text = &head.unit;
    let stated = if head.unit_below { Decided::UnitRow } else { Decided::Header };
    let clocks = cells.iter().filter(|c| time::clock(c).is_some()).count() * 2 > cells.len();
    let unit =
        told.map_or_else(|| units::read(unit_text, Target::Time), |r| UnitText::Unit(r.unit));
    match unit {
        UnitText::Unit(unit) if !clocks => TimeForm::of_unit(unit)
            .map(|form| (form, stated))
            .ok_or_else(|| format!("“{unit_text}” is not a unit of time")),
        UnitText::Unknown => Err(format!("its unit “{unit_text}” is not known")),
        _ => match time::plausible_forms(cells, decimal).as_slice() {
            [(form, step, span)] => Ok((*form, decided_by(cells, decimal, *form, *step, *span))),
            [] => Err("no unit of time makes a test of half a minute to three hours of it".into()),
            several => {
                let units: Vec<&str> = several.iter().map(|f| f.0.unit().shown()).collect();
                Err(format!("its unit is open, it may be {}", units.join(" or ")))
            }
        },
    }
}

fn decided_by(cells: &[&str], decimal: Decimal, form: TimeForm, step: f64, span: f64) -> Decided {
    let (step, span) = if span > 0.0 {
        (step, span)
    } else {
        time::step_and_span(cells, decimal, form).unwrap_or((0.0, 0.0))
    };
    Decided::Values {
        figures: format!("the median step is {step:.2} s and the rows cover {span:.0} s"),
    }
}

fn keep_rows(
    rows: &[Row],
    layout: &Layout,
    decimal: Decimal,
    form: TimeForm,
    column: ColumnReading,
) -> Result<Timed, Problem> {
    let below = &rows[layout.first..];
    let all = time::read(below.iter().map(|r| r.cell(column.index)), decimal, form);
    let (mut data, mut left_out) = layout::sort_rows(rows, layout, column.index, &all, decimal);
    if data.is_empty() {
        return Err(issue::no_rows(rows[layout.header].line));
    }
    let at = |i: usize| all[i - layout.first].unwrap_or(f64::NAN);
    let mut highest = f64::NEG_INFINITY;
    let mut back = Vec::new();
    for i in &data {
        if at(*i) < highest {
            back.push((*i, highest));
        }
        highest = highest.max(at(*i));
    }
    let mut warnings = Vec::new();
    if let Some((first, before)) = back.first() {
        let line = rows[*first].line;
        if back.len() > 1.max(data.len() / BACK_ONE_IN) {
            return Err(issue::time_back(line, *before, at(*first), back.len()));
        }
        for (i, _) in &back {
            layout::push(&mut left_out, rows[*i].line, "time-back", false);
        }
        warnings.push(issue::rows_back(back.len(), line));
        data.retain(|i| back.iter().all(|(b, _)| b != i));
    }
    // Read again from the rows kept: a time of day counts from the first of them.
    let kept = data.iter().map(|i| rows[*i].cell(column.index));
    let mut times: Vec<f64> = time::read(kept, decimal, form).into_iter().flatten().collect();
    let moved = time::spread_equal(&mut times);
    if moved > 0 {
        warnings.push(issue::equal_stamps(moved));
    }
    Ok(Timed { column, form, data, times, left_out, warnings })
}

/// What the rows are: beats, averages at a constant step, or breaths.
pub(super) fn rows_are(
    times: &[f64],
    vo2: Option<&[Option<f64>]>,
    rr: Option<&[Option<f64>]>,
    hr: Option<&[Option<f64>]>,
) -> RowsAre {
    let mut steps: Vec<f64> = times.windows(2).map(|w| w[1] - w[0]).collect();
    if steps.is_empty() {
        return RowsAre::Breaths;
    }
    let by_beat = rr.is_some_and(|rr| values::rr_identity(times, rr).is_some());
    if by_beat || (held(vo2) && hr.is_some_and(|hr| steps_are_beats(&steps, hr))) {
        return RowsAre::Beats;
    }
    steps.sort_by(f64::total_cmp);
    let usual = steps[steps.len() / 2];
    let equal = steps.iter().filter(|s| (**s - usual).abs() <= 0.02 * usual).count();
    let enough = if usual >= 5.0 { 4 } else { 10 };
    if steps.len() >= enough && equal as f64 >= CONSTANT * steps.len() as f64 {
        return RowsAre::Averages { step_s: (usual * 1000.0).round() / 1000.0 };
    }
    RowsAre::Breaths
}

fn held(column: Option<&[Option<f64>]>) -> bool {
    column.is_some_and(|c| {
        let pairs = c.windows(2).filter(|w| w[0].is_some() && w[1].is_some());
        let (same, all) =
            pairs.fold((0_u32, 0_u32), |(s, n), w| (s + u32::from(w[0] == w[1]), n + 1));
        all > 0 && f64::from(same) >= HELD * f64::from(all)
    })
}

/// Whether the step of time is the beat that the heart rate says.
fn steps_are_beats(steps: &[f64], hr: &[Option<f64>]) -> bool {
    let mut ratios: Vec<f64> = steps
        .iter()
        .zip(hr.iter().skip(1))
        .filter_map(|(step, hr)| hr.map(|hr| step * hr / 60.0))
        .collect();
    ratios.sort_by(f64::total_cmp);
    let within = ratios.iter().filter(|r| (**r - 1.0).abs() < 0.2).count();
    ratios.len() >= 20 && within as f64 >= 0.8 * ratios.len() as f64
}
