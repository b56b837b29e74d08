//! From the bytes of a breath table to a recording. Lenient and talkative: what is not understood
//! is listed and left out; nothing is guessed.
//!
//! [`import`] decides and writes the [`Recipe`]; [`recording_from`] repeats it, bit for bit.

mod answers;
mod beats;
mod build;
mod clock_column;
mod columns;
mod decide;
mod decode;
mod grid;
mod issue;
mod layout;
mod number;
mod recipe;
#[cfg(test)]
mod robustness;
#[cfg(test)]
mod tests;
mod time;
mod units;
mod values;

pub use answers::{Answers, Profile, ProfileColumn};
pub use decode::{Encoding, MAX_BYTES};
pub use grid::Separator;
pub use number::Decimal;
pub use recipe::{Recipe, RowsAre, digest};
pub use time::TimeForm;

use analysis::quantity::Quantity;
use analysis::recording::Recording;

use self::clock_column::Timed;
use self::decide::{Plan, Table};
use self::grid::Row;
use crate::problem::Problem;
use crate::provenance::{ColumnReading, LeftOut, Question};

/// A shorter test is refused, s.
const SHORTEST_S: f64 = 60.0;

/// A file as read.
#[derive(Clone, Debug, PartialEq)]
pub struct Imported {
    /// What the engine reads.
    pub recording: Recording,
    /// How it was read, to be kept.
    pub recipe: Recipe,
    /// What the reader should know: text in number cells, stand-ins, gaps, averages.
    pub issues: Vec<Problem>,
}

impl Imported {
    /// The columns read, time first.
    #[must_use]
    pub fn columns(&self) -> &[ColumnReading] {
        &self.recipe.columns
    }

    /// Rows and columns left out.
    #[must_use]
    pub fn left_out(&self) -> &[LeftOut] {
        &self.recipe.left_out
    }

    /// Open questions; where there is one, the exit code is 4.
    #[must_use]
    pub fn questions(&self) -> &[Question] {
        &self.recipe.questions
    }
}

/// Reads a breath table.
///
/// # Errors
/// The file is refused (exit code 3): empty, binary, no header, no rows, no time or a time that
/// goes back, shorter than a minute, neither V̇O₂ nor HR.
pub fn import(
    bytes: &[u8],
    name: &str,
    answers: &Answers,
    profile: Option<&Profile>,
) -> Result<Imported, Problem> {
    read(bytes, answers, profile).map_err(|problem| located(problem, name))
}

fn located(mut problem: Problem, name: &str) -> Problem {
    if !name.is_empty() {
        problem.where_ = match problem.where_.as_str() {
            "the file" => name.to_owned(),
            place => format!("{name}, {place}"),
        };
    }
    problem
}

fn read(bytes: &[u8], answers: &Answers, profile: Option<&Profile>) -> Result<Imported, Problem> {
    let encoding = decode::sniff(bytes)?;
    let text = decode::decode(bytes, encoding);
    if text.trim().is_empty() {
        return Err(issue::empty());
    }
    let separator = grid::sniff(&text);
    let rows = grid::split(&text, separator)?;
    let layout = layout::find(&rows, answers, profile)?;
    let headers = &rows[layout.header];
    for column in answers.names() {
        let known = (0..headers.cells.len())
            .any(|i| column == format!("#{}", i + 1) || column.trim() == headers.cell(i));
        if !known {
            return Err(issue::answer_column(column));
        }
    }
    let below = rows[layout.first..].iter().flat_map(|r| r.cells.iter().map(String::as_str));
    let decimal =
        answers.decimal.or(profile.and_then(|p| p.decimal)).or_else(|| number::sniff(below));
    let frame = Frame { encoding, separator, rows: &rows, layout: &layout, answers, profile };
    match decimal {
        Some(decimal) => frame.with(decimal).map(|(imported, _)| imported),
        None => frame.with_either(),
    }
}

/// What is known before the decimal sign is.
struct Frame<'a> {
    encoding: Encoding,
    separator: Separator,
    rows: &'a [Row],
    layout: &'a layout::Layout,
    answers: &'a Answers,
    profile: Option<&'a Profile>,
}

impl Frame<'_> {
    /// Reads with both decimal signs; the one that makes more columns plausible is taken.
    fn with_either(&self) -> Result<Imported, Problem> {
        match (self.with(Decimal::Point), self.with(Decimal::Comma)) {
            (Ok((a, x)), Ok((b, y))) => match x.cmp(&y) {
                std::cmp::Ordering::Greater => Ok(a),
                std::cmp::Ordering::Less => Ok(b),
                std::cmp::Ordering::Equal => Err(issue::decimal_open()),
            },
            (Ok((a, _)), Err(_)) => Ok(a),
            (Err(_), Ok((b, _))) => Ok(b),
            (Err(problem), Err(_)) => Err(problem),
        }
    }

    /// Reads with `decimal`; also the number of columns read without an implausible value.
    fn with(&self, decimal: Decimal) -> Result<(Imported, usize), Problem> {
        let (rows, layout) = (self.rows, self.layout);
        let timed = clock_column::choose(rows, layout, decimal, self.answers, self.profile)?;
        let Timed { column, form, data, times, mut left_out, mut warnings } = timed;
        let kept: Vec<&Row> = data.iter().map(|i| &rows[*i]).collect();
        let plan = decide::plan(&Table {
            headers: &rows[layout.header],
            layout,
            rows: &kept,
            times: &times,
            time_column: column.index,
            decimal,
            answers: self.answers,
            profile: self.profile,
        });
        let span = times.last().zip(times.first()).map_or(0.0, |(b, a)| b - a);
        refuse_if_no_test(&plan, span)?;
        let are = rows_are(&plan, &kept, &times, decimal);
        left_out.extend(plan.left_out);
        warnings.extend(plan.warnings);
        let clean = plan
            .columns
            .len()
            .saturating_sub(warnings.iter().filter(|w| w.code == "import-implausible").count());
        let mut recipe = Recipe {
            version: recipe::VERSION,
            encoding: self.encoding,
            separator: self.separator,
            decimal,
            header_line: rows[layout.header].line,
            unit_line: layout.unit_row.map(|i| rows[i].line),
            first_line: rows[layout.first].line,
            time: form,
            rows: are,
            columns: std::iter::once(column).chain(plan.columns).collect(),
            left_out,
            questions: plan.questions,
            digest: String::new(),
        };
        let recording = build::recording(rows, &recipe)?;
        recipe.digest = digest(&recording);
        add_warnings(&recording, &recipe, &mut warnings);
        Ok((Imported { recording, recipe, issues: warnings }, clean))
    }
}

/// Neither V̇O₂ nor heart rate, or too short.
fn refuse_if_no_test(plan: &Plan, span_s: f64) -> Result<(), Problem> {
    let one = [Quantity::Vo2, Quantity::Hr, Quantity::RrInterval];
    if one.into_iter().all(|q| plan.reads(q).is_none()) {
        return Err(issue::nothing_to_read(!plan.questions.is_empty()));
    }
    if span_s < SHORTEST_S {
        return Err(issue::too_short(span_s, SHORTEST_S));
    }
    Ok(())
}

fn rows_are(plan: &Plan, rows: &[&Row], times: &[f64], decimal: Decimal) -> RowsAre {
    let of = |q| -> Option<Vec<Option<f64>>> {
        let column = plan.reads(q)?;
        Some(rows.iter().map(|r| build::value(r.cell(column.index), column, decimal)).collect())
    };
    clock_column::rows_are(
        times,
        of(Quantity::Vo2).as_deref(),
        of(Quantity::RrInterval).as_deref(),
        of(Quantity::Hr).as_deref(),
    )
}

fn add_warnings(recording: &Recording, recipe: &Recipe, warnings: &mut Vec<Problem>) {
    if !recording.gaps.is_empty() {
        let total = recording.gaps.iter().map(|g| g.to_s - g.from_s).sum();
        warnings.push(issue::gaps(recording.gaps.len(), total));
    }
    if let RowsAre::Averages { step_s } = recipe.rows {
        warnings.push(issue::averaged(step_s));
    }
}

/// Repeats an import from its recipe: a pure function of bytes and recipe.
///
/// # Errors
/// The recipe does not fit the bytes, or the decoded columns differ from the recipe's digest.
pub fn recording_from(bytes: &[u8], recipe: &Recipe) -> Result<Recording, Problem> {
    if recipe.version != recipe::VERSION {
        return Err(issue::recipe(format!("Its version is {}, not known here.", recipe.version)));
    }
    if bytes.len() > MAX_BYTES {
        return Err(issue::too_large(bytes.len(), MAX_BYTES));
    }
    let text = decode::decode(bytes, recipe.encoding);
    let rows = grid::split(&text, recipe.separator)?;
    let recording = build::recording(&rows, recipe)?;
    if digest(&recording) != recipe.digest {
        return Err(issue::recipe("The decoded columns are not those of the recipe's digest."));
    }
    Ok(recording)
}
