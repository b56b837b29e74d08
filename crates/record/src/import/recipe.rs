//! How a file was read, in full: the same bytes and the same recipe give the same recording.

use serde::{Deserialize, Serialize};
use sha2::{Digest, Sha256};

use analysis::recording::{Recording, RowKind};

use super::decode::Encoding;
use super::grid::Separator;
use super::number::Decimal;
use super::time::TimeForm;
use crate::provenance::{ColumnReading, LeftOut, Question};

/// What a row of the table is.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "kind", rename_all = "kebab-case", deny_unknown_fields)]
pub enum RowsAre {
    /// One row per breath.
    Breaths,
    /// One row per heart beat; gas values are held over the beats of a breath.
    Beats,
    /// Averages at a constant step.
    Averages {
        /// The step, s.
        step_s: f64,
    },
}

/// The import recipe.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Recipe {
    /// Version of the rules that read it.
    pub version: u32,
    /// Encoding of the bytes.
    pub encoding: Encoding,
    /// Separator of the cells.
    pub separator: Separator,
    /// Decimal sign.
    pub decimal: Decimal,
    /// Line of the header, from 1.
    pub header_line: usize,
    /// Line of the units, where there is one.
    pub unit_line: Option<usize>,
    /// Line of the first row of values.
    pub first_line: usize,
    /// How the time column is read.
    pub time: TimeForm,
    /// What a row is.
    pub rows: RowsAre,
    /// The columns read, the time column first.
    pub columns: Vec<ColumnReading>,
    /// Rows and columns left out, with the reason.
    pub left_out: Vec<LeftOut>,
    /// Open questions; their columns are left out.
    pub questions: Vec<Question>,
    /// Digest of the decoded columns.
    pub digest: String,
}

/// The version written.
pub const VERSION: u32 = 1;

/// SHA-256 (hex) over every decoded number, bit for bit, in the order of the quantity table.
#[must_use]
pub fn digest(recording: &Recording) -> String {
    let mut hash = Sha256::new();
    let mut numbers = |name: &str, values: &mut dyn Iterator<Item = Option<f64>>| {
        hash.update(name.as_bytes());
        for value in values {
            match value {
                Some(v) => {
                    hash.update([1]);
                    hash.update(v.to_bits().to_le_bytes());
                }
                None => hash.update([0]),
            }
        }
        hash.update([2]);
    };
    let breaths = &recording.breaths;
    numbers("end", &mut breaths.end_s().iter().copied().map(Some));
    numbers("duration", &mut breaths.duration_s().iter().copied().map(Some));
    for (quantity, column) in breaths.columns() {
        numbers(quantity.code(), &mut column.iter().copied());
    }
    numbers("load-time", &mut recording.load.t_s.iter().copied().map(Some));
    numbers("load", &mut recording.load.value.iter().copied().map(Some));
    numbers("gaps", &mut recording.gaps.iter().flat_map(|g| [Some(g.from_s), Some(g.to_s)]));
    let kind = match recording.row_kind {
        RowKind::Breath => [Some(0.0), None],
        RowKind::Beat => [Some(1.0), None],
        RowKind::Averaged { step_s } => [Some(2.0), Some(step_s)],
    };
    numbers("rows", &mut kind.into_iter());
    hash.finalize().iter().map(|b| format!("{b:02x}")).collect()
}
