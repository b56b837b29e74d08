//! Checks against values that other programs computed (`tests/golden`, with the scripts that made
//! them; the first line of each table names program and version).

mod averages;
mod lines;
mod physics;
mod smoothing;
mod two_segments;

/// A table: comment line, header, numbers.
struct Table {
    header: Vec<&'static str>,
    rows: Vec<Vec<f64>>,
}

impl Table {
    fn read(text: &'static str) -> Self {
        let mut lines = text.lines().filter(|line| !line.starts_with('#'));
        let header: Vec<&str> = lines.next().expect("a header").split(',').collect();
        let rows: Vec<Vec<f64>> = lines
            .map(|line| line.split(',').map(|cell| cell.parse().expect("a number")).collect())
            .collect();
        assert!(!rows.is_empty() && rows.iter().all(|row| row.len() == header.len()));
        Self { header, rows }
    }

    fn column(&self, name: &str) -> Vec<f64> {
        let at = self.header.iter().position(|h| *h == name).expect("a column of that name");
        self.rows.iter().map(|row| row[at]).collect()
    }
}

/// The table `name` of `tests/golden`.
macro_rules! golden {
    ($name:literal) => {
        super::Table::read(include_str!(concat!("../../../../tests/golden/", $name)))
    };
}
use golden;

/// Fails unless `found` and `expected` differ by at most `tolerance`, relative above one.
#[track_caller]
fn near(found: f64, expected: f64, tolerance: f64) {
    let allowed = tolerance * expected.abs().max(1.0);
    assert!((found - expected).abs() <= allowed, "{found} against {expected}");
}

#[track_caller]
fn all_near(found: &[f64], expected: &[f64], tolerance: f64) {
    assert_eq!(found.len(), expected.len());
    for (found, expected) in found.iter().zip(expected) {
        near(*found, *expected, tolerance);
    }
}
