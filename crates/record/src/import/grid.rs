//! Text to rows of cells: the separator is found by the most regular table it makes.

use serde::{Deserialize, Serialize};

use super::{issue, number, time};
use crate::problem::Problem;

/// Most rows read.
pub const MAX_ROWS: usize = 200_000;
/// Most columns read.
pub const MAX_COLUMNS: usize = 256;
/// Longest cell, bytes.
pub const MAX_CELL: usize = 4096;

/// What stands between the cells of a row.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Separator {
    /// Tabulator.
    Tab,
    /// `;`
    Semicolon,
    /// `|`
    Bar,
    /// `,`
    Comma,
    /// One or more spaces.
    Spaces,
}

impl Separator {
    /// In the order in which a tie is decided.
    const ALL: [Separator; 5] =
        [Separator::Tab, Separator::Semicolon, Separator::Bar, Separator::Comma, Separator::Spaces];

    fn byte(self) -> u8 {
        match self {
            Separator::Tab => b'\t',
            Separator::Semicolon => b';',
            Separator::Bar => b'|',
            Separator::Comma => b',',
            Separator::Spaces => b' ',
        }
    }
}

/// A row with its line in the file, from 1.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// Line in the file, from 1.
    pub line: usize,
    /// Cells, trimmed.
    pub cells: Vec<String>,
}

impl Row {
    /// The cell, or nothing beyond the end of a short row.
    #[must_use]
    pub fn cell(&self, column: usize) -> &str {
        self.cells.get(column).map_or("", String::as_str)
    }
}

/// Finds the separator of `text`.
#[must_use]
pub fn sniff(text: &str) -> Separator {
    let lines: Vec<&str> = text.lines().filter(|l| !l.trim().is_empty()).take(2000).collect();
    let body = lines[lines.len() / 5..].join("\n");
    let mut best = (0.0, Separator::Comma);
    for separator in Separator::ALL {
        let score = regularity(&body, separator);
        if score > best.0 + 1e-9 {
            best = (score, separator);
        }
    }
    best.1
}

/// Share of rows with the commonest number of cells, times the share of cells that are numbers,
/// times or missing; 0 for a single column.
fn regularity(text: &str, separator: Separator) -> f64 {
    let Ok(rows) = split(text, separator) else { return 0.0 };
    let mut counts = std::collections::BTreeMap::<usize, usize>::new();
    let (mut cells, mut values) = (0_usize, 0_usize);
    for row in &rows {
        *counts.entry(row.cells.len()).or_default() += 1;
        for cell in row.cells.iter().filter(|c| !c.is_empty()) {
            cells += 1;
            values += usize::from(is_value(cell));
        }
    }
    let Some((width, common)) = counts.into_iter().max_by_key(|(width, n)| (*n, *width)) else {
        return 0.0;
    };
    if width < 2 || cells == 0 {
        return 0.0;
    }
    // The constant lets a table of text alone still tell its separator.
    (common as f64 / rows.len() as f64) * (0.05 + values as f64 / cells as f64)
}

fn is_value(cell: &str) -> bool {
    number::is_missing(cell)
        || number::number(cell, number::Decimal::Point).is_some()
        || number::number(cell, number::Decimal::Comma).is_some()
        || time::clock(cell).is_some()
}

/// Splits `text` into rows; blank lines are skipped.
///
/// # Errors
/// More rows or columns or longer cells than the caps.
pub fn split(text: &str, separator: Separator) -> Result<Vec<Row>, Problem> {
    let rows = if separator == Separator::Spaces {
        text.lines()
            .enumerate()
            .map(|(i, l)| Row {
                line: i + 1,
                cells: l.split_whitespace().map(str::to_owned).collect(),
            })
            .filter(|row| !row.cells.is_empty())
            .take(MAX_ROWS + 1)
            .collect()
    } else {
        quoted(text, separator.byte())
    };
    check_caps(rows)
}

fn quoted(text: &str, separator: u8) -> Vec<Row> {
    let mut reader = csv::ReaderBuilder::new()
        .delimiter(separator)
        .has_headers(false)
        .flexible(true)
        .from_reader(text.as_bytes());
    let mut rows = Vec::new();
    let mut record = csv::StringRecord::new();
    let mut lines = Lines { text: text.as_bytes(), at: 0, line: 1 };
    while rows.len() <= MAX_ROWS {
        match reader.read_record(&mut record) {
            Ok(true) => {}
            Ok(false) | Err(_) => break,
        }
        if record.iter().all(|c| c.trim().is_empty()) {
            continue;
        }
        let line = record.position().map_or(0, |p| lines.line_at(p.byte() as usize));
        rows.push(Row { line, cells: record.iter().map(|c| c.trim().to_owned()).collect() });
    }
    rows
}

/// Counts lines up to a place; places must rise.
struct Lines<'a> {
    text: &'a [u8],
    at: usize,
    line: usize,
}

impl Lines<'_> {
    /// The line, from 1, of the first byte from `start` on that is no line end.
    fn line_at(&mut self, start: usize) -> usize {
        while let Some(byte) = self.text.get(self.at)
            && (self.at < start || matches!(byte, b'\n' | b'\r'))
        {
            let next = self.text.get(self.at + 1);
            self.line += usize::from(*byte == b'\n' || (*byte == b'\r' && next != Some(&b'\n')));
            self.at += 1;
        }
        self.line
    }
}

fn check_caps(rows: Vec<Row>) -> Result<Vec<Row>, Problem> {
    if rows.len() > MAX_ROWS {
        return Err(issue::cap(rows[MAX_ROWS].line, "too many rows", MAX_ROWS));
    }
    for row in &rows {
        if row.cells.len() > MAX_COLUMNS {
            return Err(issue::cap(row.line, "too many columns", MAX_COLUMNS));
        }
        if row.cells.iter().any(|c| c.len() > MAX_CELL) {
            return Err(issue::cap(row.line, "a cell that is too long (bytes)", MAX_CELL));
        }
    }
    Ok(rows)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_separator_makes_the_most_regular_table() {
        for (text, expected) in [
            ("t;VO2;HR\ns;L/min;/min\n0,5;1,25;80\n3,5;1,30;81\n", Separator::Semicolon),
            ("t,VO2,HR\n0.5,1.25,80\n3.5,1.30,81\n", Separator::Comma),
            ("t\tVO2\tHR\n0,5\t1,25\t80\n3,5\t1,30\t81\n", Separator::Tab),
            ("t  VO2  HR\n0,5  1,25   80\n3,5 1,30 81\n", Separator::Spaces),
            ("t,VO2\n\"0,5\",\"1,25\"\n\"3,5\",\"1,30\"\n", Separator::Comma),
            ("t|VO2\n0.5|1.25\n3.5|1.30\n", Separator::Bar),
            ("Name;A, B\n\nt;VO2\n0:01;1,2\n0:05;1,3\n0:08;1,2\n", Separator::Semicolon),
        ] {
            assert_eq!(sniff(text), expected, "{text}");
        }
    }

    #[test]
    fn lines_are_those_of_the_file() {
        let rows = split("a,b\n\n\"x\ny\",2\n3,4\n", Separator::Comma).unwrap();
        let lines: Vec<usize> = rows.iter().map(|r| r.line).collect();
        assert_eq!(lines, [1, 3, 5]);
    }

    #[test]
    fn an_unclosed_quotation_mark_is_refused() {
        let text = format!("a,b\n\"1,2\n{}", "3,4\n".repeat(3000));
        assert_eq!(split(&text, Separator::Comma).unwrap_err().code, "import-cap");
    }
}
