//! A record with far more rows than any test has breaths, to see what its points cost.

use std::fmt::Write as _;
use std::path::Path;

/// Rows of the record.
const ROWS: usize = 20_000;
/// Rows over which neighbours are mixed, so that they do not repeat in blocks.
const MIXED: usize = 5;

/// Writes a demo table with 20,000 rows in the time of its 400.
///
/// # Errors
/// The demo table cannot be read, or the new one not written.
pub fn write(to: &Path) -> std::io::Result<()> {
    let table = crate::root().join("demo-sessions/kittiwake/table.csv");
    let text = std::fs::read_to_string(table)?;
    let lines: Vec<&str> = text.lines().collect();
    let (head, rows) = lines.split_at(3.min(lines.len()));
    let mut out = head.join("\n") + "\n";
    let end = rows.last().and_then(|row| row.split(',').next()).and_then(|t| t.parse().ok());
    let every: f64 = end.unwrap_or(0.0) / ROWS as f64;
    for i in 0..ROWS {
        let at = i * rows.len() / ROWS;
        let near = (at + i * 7 % MIXED).min(rows.len() - 1);
        let load = rows[at].split(',').nth(1).unwrap_or_default();
        let values = rows[near].splitn(3, ',').nth(2).unwrap_or_default();
        let _ = writeln!(out, "{:.3},{load},{values}", (i + 1) as f64 * every);
    }
    std::fs::write(to, out)
}
