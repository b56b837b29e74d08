//! Each column's verdict: read, asked about, or left out, and why.

use analysis::quantity::Quantity;
use analysis::unit::{Dimension, Unit};

use super::answers::{Answers, Profile};
use super::columns::{Header, Name};
use super::grid::Row;
use super::layout::Layout;
use super::number::{self, Cell, Decimal};
use super::units::{self, UnitText};
use super::values::{self, Verdict};
use super::{build, issue};
use crate::problem::Problem;
use crate::provenance::{ColumnReading, Decided, LeftOut, Question, Reading, Target};

/// Cells shown as samples.
const SAMPLES: usize = 5;
/// Share of plausible values below which a stated unit is doubted.
const DOUBTED: f64 = 0.5;

/// The table as far as it is known when columns are decided.
pub(super) struct Table<'a> {
    pub headers: &'a Row,
    pub layout: &'a Layout,
    /// Rows of values.
    pub rows: &'a [&'a Row],
    /// Their times, s.
    pub times: &'a [f64],
    pub time_column: usize,
    pub decimal: Decimal,
    pub answers: &'a Answers,
    pub profile: Option<&'a Profile>,
}

/// What was decided about all columns but time.
#[derive(Default)]
pub(super) struct Plan {
    pub columns: Vec<ColumnReading>,
    pub left_out: Vec<LeftOut>,
    pub questions: Vec<Question>,
    pub warnings: Vec<Problem>,
}

impl Plan {
    /// The column read as `quantity`.
    pub fn reads(&self, quantity: Quantity) -> Option<&ColumnReading> {
        self.columns.iter().find(|c| c.reading.target == Target::Quantity(quantity))
    }
}

enum Decision {
    Read(Reading, Decided),
    Ask(Vec<Reading>),
    Leave(&'static str),
}

/// Whether another column has the same header.
pub(super) fn is_shared(headers: &Row, index: usize) -> bool {
    let own = headers.cell(index);
    headers.cells.iter().filter(|c| *c == own).count() > 1
}

/// How a column is named in questions: its header, or `#N` where it has none of its own.
pub(super) fn label(headers: &Row, index: usize) -> String {
    let own = headers.cell(index);
    if own.is_empty() || is_shared(headers, index) {
        format!("#{}", index + 1)
    } else {
        own.to_owned()
    }
}

/// Decides every column but the time.
pub(super) fn plan(table: &Table) -> Plan {
    let mut plan = Plan::default();
    let width = table.rows.iter().map(|r| r.cells.len()).max().unwrap_or(0);
    for index in 0..width.max(table.headers.cells.len()) {
        if index != table.time_column {
            plan_column(table, index, &mut plan);
        }
    }
    settle_doubles(table, &mut plan);
    for column in &plan.columns {
        warn(table, column, &mut plan.warnings);
    }
    plan
}

fn plan_column(table: &Table, index: usize, plan: &mut Plan) {
    let cells: Vec<&str> = table.rows.iter().map(|r| r.cell(index)).collect();
    let head = table.layout.headers.get(index).cloned().unwrap_or_default();
    let header = table.headers.cell(index).to_owned();
    if header.is_empty() && cells.iter().all(|c| c.is_empty()) {
        return; // the empty column that a final separator makes
    }
    match decide(table, index, &head, &cells) {
        Decision::Read(reading, _) if reading.target == Target::LeaveOut => {
            leave(plan, index, header, "answered");
        }
        Decision::Read(reading, decided) => plan.columns.push(ColumnReading {
            index,
            header,
            unit_text: head.unit,
            reading,
            decided,
            zero_is_missing: values::zero_is_missing(reading.target),
            samples: samples(&cells),
        }),
        Decision::Ask(readings) => {
            let mut readings: Vec<String> = readings.iter().map(Reading::to_string).collect();
            readings.push("leave-out".into());
            plan.questions.push(Question { column: label(table.headers, index), readings });
            leave(plan, index, header, "question");
        }
        Decision::Leave(code) => leave(plan, index, header, code),
    }
}

fn leave(plan: &mut Plan, index: usize, header: String, code: &str) {
    let why = column_reason(code).to_owned();
    plan.left_out.push(LeftOut::Column { index, header, code: code.into(), why });
}

/// First cells that hold something.
pub(super) fn samples(cells: &[&str]) -> Vec<String> {
    let filled = cells.iter().filter(|c| !c.is_empty());
    filled.take(SAMPLES).map(|c| c.chars().take(24).collect()).collect()
}

fn decide(table: &Table, index: usize, head: &Header, cells: &[&str]) -> Decision {
    let header = table.headers.cell(index);
    let shared = is_shared(table.headers, index);
    if let Some(reading) = table.answers.about(header, index, shared) {
        return Decision::Read(reading, Decided::Answer);
    }
    if let Some(reading) = table.profile.and_then(|p| p.about(header, &head.unit)) {
        return Decision::Read(reading, Decided::Profile);
    }
    let targets = match head.name {
        None => return Decision::Leave("unknown-name"),
        Some(Name::Unread(code)) => return Decision::Leave(code),
        Some(Name::Reads(targets)) => targets,
    };
    if targets.contains(&Target::Time) {
        return Decision::Leave("second-time");
    }
    if wrong_condition(targets, head.condition) {
        return Decision::Leave("condition");
    }
    let numbers = match numbers(cells, targets, table.decimal) {
        Ok(numbers) => numbers,
        Err(code) => return Decision::Leave(code),
    };
    match units::read(&head.unit, targets[0]) {
        UnitText::Nothing => unstated(table, index, targets, &numbers),
        UnitText::Unit(unit) => stated(head, targets, unit, &numbers),
        UnitText::Clock | UnitText::Unknown => Decision::Ask(all_readings(targets)),
    }
}

/// Gas uptake is STPD and ventilation BTPS; the file says otherwise.
fn wrong_condition(targets: &[Target], condition: Option<&str>) -> bool {
    let Some(condition) = condition else { return false };
    match targets[0] {
        Target::Quantity(Quantity::Vo2 | Quantity::Vco2) => condition != "stpd",
        Target::Quantity(Quantity::Ve | Quantity::Vt) => condition != "btps",
        _ => false,
    }
}

/// The numbers of a column, or why it has none.
fn numbers(cells: &[&str], targets: &[Target], decimal: Decimal) -> Result<Vec<f64>, &'static str> {
    let (mut numbers, mut texts) = (Vec::with_capacity(cells.len()), 0_usize);
    for cell in cells {
        let first = match (targets[0], cell.split_once('/')) {
            (Target::BpPair, Some((sys, _))) => sys,
            _ => cell,
        };
        match number::cell(first, decimal) {
            Cell::Number(v) => numbers.push(v),
            Cell::Text => texts += 1,
            Cell::Missing => {}
        }
    }
    if texts > numbers.len() {
        Err("not-numbers")
    } else if numbers.is_empty() {
        Err("no-values")
    } else {
        Ok(numbers)
    }
}

fn all_readings(targets: &[Target]) -> Vec<Reading> {
    targets
        .iter()
        .flat_map(|t| units::possible(*t).iter().map(|u| Reading { target: *t, unit: *u }))
        .collect()
}

fn unstated(table: &Table, index: usize, targets: &[Target], numbers: &[f64]) -> Decision {
    let rr = Target::Quantity(Quantity::RrInterval);
    if targets.contains(&rr) {
        let column: Vec<Option<f64>> =
            table.rows.iter().map(|r| number::number(r.cell(index), table.decimal)).collect();
        if let Some(figures) = values::rr_identity(table.times, &column) {
            let reading = Reading { target: rr, unit: Unit::Millisecond };
            return Decision::Read(reading, Decided::Values { figures });
        }
    }
    match values::decide(numbers, targets) {
        Verdict::Taken(reading, figures) => Decision::Read(reading, Decided::Values { figures }),
        Verdict::Open(readings) => Decision::Ask(readings),
    }
}

fn stated(head: &Header, targets: &[Target], unit: Unit, numbers: &[f64]) -> Decision {
    let vo2 = targets.contains(&Target::Quantity(Quantity::Vo2));
    if vo2 && unit.dimension() == Dimension::FlowPerMass {
        return Decision::Leave("per-mass");
    }
    let fitting: Vec<Reading> = targets
        .iter()
        .filter(|t| units::fits(unit, **t))
        .map(|t| Reading { target: *t, unit })
        .collect();
    let reading = match fitting.as_slice() {
        [] => return Decision::Leave("unit-does-not-fit"),
        [reading] => reading,
        _ => return Decision::Ask(fitting),
    };
    let doubted = numbers.len() >= 10
        && numbers.iter().any(|v| *v != 0.0)
        && values::share(numbers, reading.target, unit) < DOUBTED;
    let better = values::survivors(numbers, targets);
    if doubted && !better.is_empty() {
        let mut readings = vec![*reading];
        readings.extend(better.iter().map(|(r, _)| *r));
        return Decision::Ask(readings);
    }
    let decided = if head.unit_below { Decided::UnitRow } else { Decided::Header };
    Decision::Read(*reading, decided)
}

/// Two columns for one quantity: an answer wins; equal ones are one; different ones are asked.
fn settle_doubles(table: &Table, plan: &mut Plan) {
    let mut kept: Vec<ColumnReading> = Vec::new();
    let columns = std::mem::take(&mut plan.columns);
    for column in &columns {
        let target = column.reading.target;
        let others: Vec<&ColumnReading> =
            columns.iter().filter(|c| c.reading.target == target).collect();
        let answered = others.iter().find(|c| c.decided == Decided::Answer);
        let first = answered.map_or(others[0].index, |c| c.index);
        if others.len() == 1 || (column.index == first && answered.is_some()) {
            kept.push(column.clone());
        } else if answered.is_some() || others.iter().all(|o| agree(table, others[0], o)) {
            if column.index == first {
                kept.push(column.clone());
            } else {
                leave(plan, column.index, column.header.clone(), "same-quantity");
            }
        } else {
            plan.questions.push(Question {
                column: label(table.headers, column.index),
                readings: vec![column.reading.to_string(), "leave-out".into()],
            });
            leave(plan, column.index, column.header.clone(), "question");
        }
    }
    plan.columns = kept;
}

/// Whether two columns hold the same values: within 2 % in 95 % of the rows that have both.
fn agree(table: &Table, a: &ColumnReading, b: &ColumnReading) -> bool {
    let of = |row: &Row, c: &ColumnReading| build::value(row.cell(c.index), c, table.decimal);
    let pairs: Vec<(f64, f64)> =
        table.rows.iter().filter_map(|r| Some((of(r, a)?, of(r, b)?))).collect();
    let same = pairs.iter().filter(|(x, y)| (x - y).abs() <= 0.02 * x.abs().max(y.abs())).count();
    same as f64 >= 0.95 * pairs.len() as f64
}

/// Says which cells of a column were not read as they stand.
fn warn(table: &Table, column: &ColumnReading, warnings: &mut Vec<Problem>) {
    let name = label(table.headers, column.index);
    let (mut texts, mut first) = (0_usize, Vec::new());
    let (mut stand_ins, mut outside) = (0_usize, 0_usize);
    let (low, high) = values::plausible(column.reading.target);
    for row in table.rows {
        let cell = row.cell(column.index);
        match number::cell(cell, table.decimal) {
            Cell::Missing => {}
            Cell::Text if column.reading.target == Target::BpPair => {}
            Cell::Text => {
                texts += 1;
                if first.len() < 3 {
                    first.push((row.line, cell.chars().take(20).collect::<String>()));
                }
            }
            Cell::Number(raw) if build::is_stand_in(raw, column) => stand_ins += 1,
            Cell::Number(_) => {
                let v = build::value(cell, column, table.decimal);
                outside += usize::from(v.is_some_and(|v| v < low || v > high));
            }
        }
    }
    if texts > 0 {
        warnings.push(issue::text_cells(&name, texts, &first));
    }
    if stand_ins > 0 {
        warnings.push(issue::stand_ins(&name, stand_ins, "0 or a code such as -1 or 9999"));
    }
    if outside > 0 && column.reading.target == Target::Quantity(Quantity::RrInterval) {
        warnings.push(issue::not_beats(&name, outside));
    } else if outside > 0 {
        let unit = crate::provenance::base_unit(column.reading.target);
        warnings.push(issue::implausible(&name, outside, low, high, unit.shown()));
    }
}

/// Words for why a column is left out.
fn column_reason(code: &str) -> &'static str {
    match code {
        "question" => "Its quantity or unit is open; see the questions.",
        "answered" => "Left out by the reader's answer.",
        "unknown-name" => "The name is not in the table of known names.",
        "unit-does-not-fit" => {
            "The stated unit is not one of this quantity, so the name means something else."
        }
        "second-time" => "Another column already gives the time.",
        "condition" => "The stated condition (STPD, BTPS, ATPS) is not the one of this quantity.",
        "not-numbers" => "Most cells are not numbers.",
        "no-values" => "It holds no value.",
        "same-quantity" => "Another column already gives this quantity, with the same values.",
        "per-mass" => "Per kilogram; the uptake itself is read and the mass is a fact.",
        "fraction" => "A gas fraction, which is not converted to a tension.",
        "saturation-source" => "Arterial saturation belongs to a gas sample, not to each breath.",
        "event-like" => "Belongs to the events or notes of the test, which are entered as facts.",
        "derived" => "A derived value, which is not taken over from the file.",
        _ => "Nothing reads it.",
    }
}
