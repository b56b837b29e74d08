//! The parts of the grid: preamble, header, row of units, rows of breaths, and what is neither.

use super::answers::{Answers, Profile};
use super::columns::{self, Header, Name};
use super::grid::Row;
use super::number::{self, Decimal};
use super::{issue, time, units};
use crate::problem::Problem;
use crate::provenance::{LeftOut, Target};

/// How far down a header is looked for, rows.
const SEARCH: usize = 500;

/// Words with which a row of a summary begins.
const SUMMARIES: &[&str] = &[
    "max",
    "maximum",
    "min",
    "minimum",
    "mean",
    "average",
    "avg",
    "mittelwert",
    "mittel",
    "peak",
    "pred",
    "predicted",
    "soll",
    "sd",
    "median",
    "total",
    "sum",
    "summary",
    "vo2max",
    "vo2peak",
    "%pred",
    "moyenne",
    "media",
];

/// Where the parts of the table are.
#[derive(Clone, Debug, PartialEq)]
pub struct Layout {
    /// Index of the header row.
    pub header: usize,
    /// Header cells taken apart.
    pub headers: Vec<Header>,
    /// Index of the row of units, if there is one.
    pub unit_row: Option<usize>,
    /// Index of the first row after header, units and conditions.
    pub first: usize,
}

/// Finds header and unit row.
///
/// # Errors
/// No row names a time and another known column, or nothing follows it.
pub fn find(rows: &[Row], answers: &Answers, profile: Option<&Profile>) -> Result<Layout, Problem> {
    let told = |row: &Row, i: usize, unit: &str| {
        let named = answers.named(row.cell(i));
        named.or_else(|| profile?.about(row.cell(i), unit)).map(|r| r.target)
    };
    let parsed = rows.iter().take(SEARCH).map(headers_of);
    let header = parsed.enumerate().find(|(i, h)| is_header(&rows[*i], h, &told));
    let Some((header, mut headers)) = header else { return Err(issue::no_header()) };
    let (mut unit_row, mut first) = (None, header + 1);
    for (i, row) in rows.iter().enumerate().skip(header + 1).take(3) {
        let filled: Vec<&String> = row.cells.iter().filter(|c| !c.is_empty()).collect();
        let bare = |c: &str| c.trim_matches(['[', ']', '(', ')', ' ']).to_owned();
        let said = filled.iter().filter(|c| says_unit(&bare(c))).count();
        let numbers = filled.iter().filter(|c| is_number(c)).count();
        if said * 2 < filled.len() || numbers * 2 > filled.len() || said == 0 {
            break;
        }
        first = i + 1;
        for (column, head) in headers.iter_mut().enumerate() {
            let (unit, condition) = columns::without_condition(&bare(row.cell(column)));
            head.condition = head.condition.or(condition);
            if head.unit.is_empty() && !number::is_missing(&unit) {
                head.unit = unit;
                head.unit_below = true;
                unit_row = unit_row.or(Some(i));
            }
        }
    }
    if first >= rows.len() {
        return Err(issue::no_rows(rows[header].line));
    }
    Ok(Layout { header, headers, unit_row, first })
}

fn headers_of(row: &Row) -> Vec<Header> {
    row.cells.iter().map(|c| columns::header(c)).collect()
}

fn is_number(cell: &str) -> bool {
    number::number(cell, Decimal::Point).is_some()
        || number::number(cell, Decimal::Comma).is_some()
        || time::clock(cell).is_some()
}

fn says_unit(cell: &str) -> bool {
    let (rest, condition) = columns::without_condition(cell);
    condition.is_some() || units::is_unit_like(&rest) || number::is_missing(cell)
}

/// A header names at least three columns, or a time and one more among few others. A name counts
/// by the table of names, or because an answer or the profile names it.
fn is_header(
    row: &Row,
    headers: &[Header],
    told: &impl Fn(&Row, usize, &str) -> Option<Target>,
) -> bool {
    let (mut reads, mut known, mut time) = (0, 0, false);
    for (i, head) in headers.iter().enumerate() {
        let told = told(row, i, &head.unit);
        reads += usize::from(told.is_some() || matches!(head.name, Some(Name::Reads(_))));
        known += usize::from(told.is_some() || head.name.is_some());
        time |= told == Some(Target::Time) || head.name == Some(Name::Reads(&[Target::Time]));
    }
    let filled = row.cells.iter().filter(|c| !c.is_empty()).count();
    let numbers = row.cells.iter().filter(|c| is_number(c)).count();
    numbers * 2 <= filled && (reads >= 3 || (time && reads >= 2 && known * 2 >= filled))
}

/// Rows after the header: those that hold a time and a value, and the others with the reason.
#[must_use]
pub fn sort_rows(
    rows: &[Row],
    layout: &Layout,
    time_column: usize,
    times: &[Option<f64>],
    decimal: Decimal,
) -> (Vec<usize>, Vec<LeftOut>) {
    let mut data = Vec::new();
    let mut left = Vec::new();
    for row in &rows[..layout.header] {
        let code = if is_comment(row) { "comment" } else { "preamble" };
        push(&mut left, row.line, code, true);
    }
    let mut joined = false;
    for i in layout.first..rows.len() {
        let row = &rows[i];
        match why_not(rows, layout, i, time_column, times[i - layout.first], decimal) {
            None => {
                data.push(i);
                joined = false;
            }
            Some(code) => {
                push(&mut left, row.line, code, joined);
                joined = true;
            }
        }
    }
    (data, left)
}

fn why_not(
    rows: &[Row],
    layout: &Layout,
    i: usize,
    time_column: usize,
    time: Option<f64>,
    decimal: Decimal,
) -> Option<&'static str> {
    let row = &rows[i];
    let filled: Vec<&String> = row.cells.iter().filter(|c| !c.is_empty()).collect();
    let first = filled.first().map_or("", |c| c.as_str());
    if is_comment(row) {
        return Some("comment");
    }
    if row.cells == rows[layout.header].cells
        || layout.unit_row.is_some_and(|u| row.cells == rows[u].cells)
    {
        return Some("repeated-header");
    }
    if SUMMARIES.contains(&columns::plain(first).trim_end_matches(':')) {
        return Some("summary");
    }
    if filled.len() == 1 {
        return Some("title");
    }
    if time.is_none() {
        return Some("no-time");
    }
    let valued =
        row.cells.iter().enumerate().any(|(c, cell)| c != time_column && has_value(cell, decimal));
    (!valued).then_some("no-values")
}

fn is_comment(row: &Row) -> bool {
    let first = row.cells.iter().find(|c| !c.is_empty()).map_or("", String::as_str);
    (first.starts_with('#') && !number::is_missing(first)) || first.starts_with("//")
}

fn has_value(cell: &str, decimal: Decimal) -> bool {
    matches!(number::cell(cell, decimal), number::Cell::Number(_))
}

/// Adds a row to the list; `joined` (nothing kept in between) extends a range of the same reason.
pub(crate) fn push(left: &mut Vec<LeftOut>, line: usize, reason: &str, joined: bool) {
    if joined
        && let Some(LeftOut::Rows { to, code, .. }) = left.last_mut()
        && code == reason
    {
        *to = line;
        return;
    }
    let why = row_reason(reason).to_owned();
    left.push(LeftOut::Rows { from: line, to: line, code: reason.to_owned(), why });
}

/// Words for why a row is left out.
fn row_reason(code: &str) -> &'static str {
    match code {
        "preamble" => "Stands before the header.",
        "comment" => "A comment.",
        "repeated-header" => "Repeats the header.",
        "summary" => "A summary, not a breath.",
        "title" => "A title: one cell alone.",
        "no-time" => "Has no time that can be read.",
        "no-values" => "Has a time but no value.",
        "time-back" => "Its time lies before that of an earlier row.",
        _ => "Not a row of the table.",
    }
}
