//! What the file said beside what was understood: columns as read, rows and columns left out,
//! and the questions that only the reader can answer.

use std::fmt;
use std::str::FromStr;

use analysis::quantity::Quantity;
use analysis::unit::Unit;
use serde::{Deserialize, Serialize};

/// What a column can be read as.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Target {
    /// Time of the row.
    Time,
    /// A quantity of the engine's table.
    Quantity(Quantity),
    /// Duration of the breath (Ttot).
    BreathDuration,
    /// Systolic and diastolic pressure in one cell, `120/80`.
    BpPair,
    /// Deliberately not read.
    LeaveOut,
}

impl Target {
    /// Stable code: `time`, `breath-duration`, `bp-pair`, `leave-out`, or the quantity's code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Target::Time => "time",
            Target::Quantity(q) => q.code(),
            Target::BreathDuration => "breath-duration",
            Target::BpPair => "bp-pair",
            Target::LeaveOut => "leave-out",
        }
    }

    /// The target with this code.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        match code {
            "time" => Some(Target::Time),
            "breath-duration" => Some(Target::BreathDuration),
            "bp-pair" => Some(Target::BpPair),
            "leave-out" => Some(Target::LeaveOut),
            other => Quantity::from_code(other).map(Target::Quantity),
        }
    }
}

/// One way to read a column: what it is and in which unit. Written `vo2 L/min`, `time s`,
/// `rr-interval ms`, `leave-out`; this text is also the answer to a question.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(into = "String", try_from = "String")]
pub struct Reading {
    /// What the column is.
    pub target: Target,
    /// Unit of its cells (s for times written with colons).
    pub unit: Unit,
}

impl fmt::Display for Reading {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.target {
            Target::LeaveOut => f.write_str("leave-out"),
            target => write!(f, "{} {}", target.code(), self.unit.ucum()),
        }
    }
}

impl From<Reading> for String {
    fn from(reading: Reading) -> Self {
        reading.to_string()
    }
}

impl TryFrom<String> for Reading {
    type Error = String;

    fn try_from(text: String) -> Result<Self, String> {
        text.parse()
    }
}

impl FromStr for Reading {
    type Err = String;

    /// Reads `quantity unit` (UCUM). The unit may be left out only with `leave-out`.
    fn from_str(text: &str) -> Result<Self, String> {
        let text = text.trim();
        if text == "leave-out" {
            return Ok(Reading { target: Target::LeaveOut, unit: Unit::One });
        }
        let (code, unit) = text
            .split_once(char::is_whitespace)
            .ok_or_else(|| format!("“{text}” is not a quantity and its unit"))?;
        let target =
            Target::from_code(code).ok_or_else(|| format!("“{code}” is not a known quantity"))?;
        let unit = Unit::from_ucum(unit.trim())
            .ok_or_else(|| format!("“{}” is not a known unit", unit.trim()))?;
        if unit.convert(1.0, base_unit(target)).is_none() {
            return Err(format!("{code} is not measured in {}", unit.ucum()));
        }
        Ok(Reading { target, unit })
    }
}

/// The unit in which the engine holds `target`.
#[must_use]
pub fn base_unit(target: Target) -> Unit {
    match target {
        Target::Time | Target::BreathDuration => Unit::Second,
        Target::Quantity(q) => q.unit(),
        Target::BpPair => Unit::MmHg,
        Target::LeaveOut => Unit::One,
    }
}

/// How a column's quantity and unit were decided.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "by", rename_all = "kebab-case", deny_unknown_fields)]
pub enum Decided {
    /// By the unit in the header cell (or a unit that the name leaves no choice about).
    Header,
    /// By the row of units below the header.
    UnitRow,
    /// By the values: the figures that decided.
    Values {
        /// In plain words, e.g. `100 % of 2000 values lie in 20 to 8000 mL/min`.
        figures: String,
    },
    /// By the lab's import profile.
    Profile,
    /// By the reader's answer.
    Answer,
}

/// A column as the file has it beside what was understood.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct ColumnReading {
    /// Column of the table, from 0.
    pub index: usize,
    /// Header text as in the file.
    pub header: String,
    /// Unit text as in the file; empty where none is stated.
    pub unit_text: String,
    /// What was understood.
    pub reading: Reading,
    /// How.
    pub decided: Decided,
    /// Whether a zero stands for a missing value (heart rate, saturation, pressures).
    #[serde(default)]
    pub zero_is_missing: bool,
    /// First cells as in the file.
    pub samples: Vec<String>,
}

/// Something of the file that was left out.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "what", rename_all = "kebab-case", deny_unknown_fields)]
pub enum LeftOut {
    /// Rows, by their line in the file (from 1, both ends included).
    Rows {
        /// First line.
        from: usize,
        /// Last line.
        to: usize,
        /// Stable code of the reason.
        code: String,
        /// The reason.
        why: String,
    },
    /// A column.
    Column {
        /// Column of the table, from 0.
        index: usize,
        /// Header text as in the file.
        header: String,
        /// Stable code of the reason.
        code: String,
        /// The reason.
        why: String,
    },
}

/// A column that only the reader can decide; it is left out until answered.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Question {
    /// The column: its header as in the file (`#N`, from 1, where it has none or shares it).
    pub column: String,
    /// Possible answers.
    pub readings: Vec<String>,
}
