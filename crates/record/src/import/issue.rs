//! The words of every problem that import can meet: one place, one code each.

use crate::problem::Problem;

const FILE: &str = "the file";

/// Nothing in the file.
pub(crate) fn empty() -> Problem {
    Problem::new("import-empty", FILE, "The file holds nothing.", "Export the test again.")
}

/// Larger than the cap.
pub(crate) fn too_large(size: usize, cap: usize) -> Problem {
    Problem::new(
        "import-too-large",
        FILE,
        format!("The file has {} MiB; at most {} MiB are read.", size >> 20, cap >> 20),
        "Export this one test alone, as text.",
    )
}

/// A spreadsheet file.
pub(crate) fn spreadsheet() -> Problem {
    Problem::new(
        "import-spreadsheet",
        FILE,
        "This is a spreadsheet or an archive, which is not read directly.",
        "Open it in a spreadsheet program and save the sheet with the breaths as CSV.",
    )
}

/// Not text.
pub(crate) fn binary() -> Problem {
    Problem::new(
        "import-binary",
        FILE,
        "The file is not text.",
        "Export the breath table as text (CSV or tab-separated).",
    )
}

/// Too many rows, columns, or a too long cell.
pub(crate) fn cap(line: usize, what: &str, cap: usize) -> Problem {
    Problem::new(
        "import-cap",
        format!("line {line}"),
        format!("The table has {what}; the limit is {cap}."),
        "Check that this is one test's breath table and that every quotation mark is closed.",
    )
}

/// No header row.
pub(crate) fn no_header() -> Problem {
    Problem::new(
        "import-no-header",
        FILE,
        "No row names the columns: a header needs a time and at least one more known name, such as time, VO2, VCO2, VE, HR.",
        "Add a first row with the names and units of the columns.",
    )
}

/// A header but no row of values.
pub(crate) fn no_rows(line: usize) -> Problem {
    Problem::new(
        "import-no-rows",
        format!("below line {line}"),
        "Under the header there is no row with a time and values.",
        "Export the test with its breaths, not only the head of the table.",
    )
}

/// No usable time column.
pub(crate) fn no_time(header_line: usize, why: &str) -> Problem {
    Problem::new(
        "import-no-time",
        format!("line {header_line}"),
        format!("The table has no time that can be read: {why}."),
        "Add a column named “time” in s, min, m:ss or h:mm:ss, or say which column it is.",
    )
}

/// Time runs backwards.
pub(crate) fn time_back(line: usize, from: f64, to: f64, rows: usize) -> Problem {
    let count = if rows == 1 { "once".to_owned() } else { format!("in {rows} rows") };
    Problem::new(
        "import-time-back",
        format!("line {line}"),
        format!("Time goes back from {from:.1} s to {to:.1} s, and does so {count}."),
        "Put the rows in the order of time; if the clock restarts in every phase, export the time since the start of the test.",
    )
}

/// Too short for a test.
pub(crate) fn too_short(span_s: f64, shortest_s: f64) -> Problem {
    Problem::new(
        "import-too-short",
        FILE,
        format!(
            "The rows cover {span_s:.0} s; a test of less than {shortest_s:.0} s cannot be read."
        ),
        "Check that the whole test was exported and that the unit of time is right.",
    )
}

/// Neither gas nor rate.
pub(crate) fn nothing_to_read(open: bool) -> Problem {
    let todo = if open {
        "Answer the open questions about the columns, or state their units in the header."
    } else {
        "Export the table with at least one of VO2 and HR, named in the header."
    };
    Problem::new(
        "import-no-vo2-no-hr",
        FILE,
        "Both oxygen uptake and heart rate are missing; one of them is needed.",
        todo,
    )
}

/// A saved recipe does not fit the bytes.
pub(crate) fn recipe(what: impl Into<String>) -> Problem {
    Problem::new("import-recipe", "the import recipe", what, "Import the original file again.")
}

/// An answer names no column.
pub(crate) fn answer_column(column: &str) -> Problem {
    Problem::new(
        "import-answer-column",
        format!("answer “{column}”"),
        "The table has no column of this name.",
        "Write the header as in the file, or #N for the N-th column.",
    )
}

/// An answer cannot be understood.
pub(crate) fn answer_form(answer: &str, why: &str) -> Problem {
    Problem::new(
        "import-answer",
        format!("answer “{answer}”"),
        format!("It cannot be understood: {why}."),
        "Write COLUMN=READING, for example “VO2=vo2 L/min”, “RR=rr-interval ms” or “RR=leave-out”.",
    )
}

/// Warning: cells that are not numbers.
pub(crate) fn text_cells(column: &str, count: usize, first: &[(usize, String)]) -> Problem {
    let list: Vec<String> =
        first.iter().map(|(line, text)| format!("line {line} “{text}”")).collect();
    Problem::new(
        "import-text-cells",
        format!("column “{column}”"),
        format!("{count} cells are text, not numbers, and count as missing: {}.", list.join(", ")),
        "Correct them in the source if they were values.",
    )
}

/// Warning: zeros or sentinels read as missing.
pub(crate) fn stand_ins(column: &str, count: usize, which: &str) -> Problem {
    Problem::new(
        "import-stand-in",
        format!("column “{column}”"),
        format!("{count} cells hold {which} and are read as missing."),
        "Nothing, unless these were real values.",
    )
}

/// Warning: values outside the plausible range.
pub(crate) fn implausible(column: &str, count: usize, low: f64, high: f64, unit: &str) -> Problem {
    Problem::new(
        "import-implausible",
        format!("column “{column}”"),
        format!("{count} values lie outside {low} to {high} {unit}; they are kept."),
        "Look at them in the data table and leave out the breaths that are wrong.",
    )
}

/// Warning: intervals that are no beats.
pub(crate) fn not_beats(column: &str, count: usize) -> Problem {
    Problem::new(
        "import-not-beats",
        format!("column “{column}”"),
        format!(
            "Intervals shorter than 240 ms or longer than 2.5 s: {count}. They are no beats; a long one is a gap."
        ),
        "Nothing; the heart rate does not use them.",
    )
}

/// Warning: rows that go back in time were left out.
pub(crate) fn rows_back(count: usize, line: usize) -> Problem {
    Problem::new(
        "import-rows-back",
        format!("line {line}"),
        format!("{count} rows whose time goes back were left out, the first one here."),
        "Check the source if these rows matter.",
    )
}

/// Warning: equal time stamps were spread.
pub(crate) fn equal_stamps(count: usize) -> Problem {
    Problem::new(
        "import-equal-stamps",
        FILE,
        format!("{count} rows share the time of the row before; they were spread over the step."),
        "Nothing; export with tenths of a second where that is possible.",
    )
}

/// Warning: gaps.
pub(crate) fn gaps(count: usize, total_s: f64) -> Problem {
    Problem::new(
        "import-gaps",
        FILE,
        format!("{count} gaps without gas values, {total_s:.0} s together, are kept as gaps."),
        "Nothing; windows that touch a gap say so.",
    )
}

/// Warning: an averaged table.
pub(crate) fn averaged(step_s: f64) -> Problem {
    Problem::new(
        "import-averaged",
        FILE,
        format!("The rows stand at a constant step of {step_s} s: averages, not breaths."),
        "Export breath by breath where that is possible; intervals are wider or withheld for averages.",
    )
}

/// A profile file that cannot be read.
pub(crate) fn profile(why: &str) -> Problem {
    Problem::new(
        "import-profile",
        "the import profile",
        format!("It cannot be read: {why}."),
        "Use a profile saved by this program, or import without it.",
    )
}

/// `1,712` may be 1712 or 1.712.
pub(crate) fn decimal_open() -> Problem {
    Problem::new(
        "import-decimal-open",
        FILE,
        "Numbers such as “1,712” may mean 1712 or 1.712, and nothing in the file decides.",
        "Answer “decimal=comma” or “decimal=point”.",
    )
}
