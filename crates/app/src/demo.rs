//! The embedded demonstration test.

use std::collections::BTreeMap;

use analysis::breaths::{Breaths, Column};
use analysis::quantity::Quantity as Q;
use analysis::recording::{Recording, Trace};

/// The invented normal test *Kittiwake*.
pub const TABLE: &str = include_str!("../../../demo-sessions/kittiwake/table.csv");

/// Its label.
pub const LABEL: &str = "Kittiwake";

/// Reads the demonstration table by the columns it is known to have.
#[must_use]
pub fn recording(table: &str) -> Option<Recording> {
    const COLUMNS: [Q; 11] = [
        Q::WorkRate,
        Q::WorkRate,
        Q::Vo2,
        Q::Vco2,
        Q::Ve,
        Q::Vt,
        Q::Fr,
        Q::Hr,
        Q::Peto2,
        Q::Petco2,
        Q::Spo2,
    ];
    let rows: Vec<Vec<Option<f64>>> = table
        .lines()
        .filter(|line| !line.starts_with('#'))
        .skip(2)
        .map(|line| line.split(',').map(|cell| cell.trim().parse().ok()).collect())
        .collect();
    let end_s: Vec<f64> =
        rows.iter().map(|row| row.first().copied().flatten()).collect::<Option<_>>()?;
    let mut columns: BTreeMap<Q, Column> = BTreeMap::new();
    for (i, quantity) in COLUMNS.iter().enumerate().skip(2) {
        columns.insert(*quantity, rows.iter().map(|r| r.get(i).copied().flatten()).collect());
    }
    let load = rows.iter().map(|r| r.get(1).copied().flatten().unwrap_or(0.0)).collect();
    let load = Trace { t_s: end_s.clone(), value: load };
    let breaths = Breaths::new(end_s, None, columns).ok()?;
    Some(Recording { breaths, load, ..Recording::default() })
}
