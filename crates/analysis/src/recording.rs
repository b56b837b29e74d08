//! What the file holds, as the engine reads it: a pure function of its bytes and the import recipe.

use crate::breaths::Breaths;
use crate::quantity::Quantity;

/// What one row of the source table stood for.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum RowKind {
    /// One row per breath.
    #[default]
    Breath,
    /// One row per heart beat, gas values held over the beats of a breath.
    Beat,
    /// Rows at a constant step: an averaged table, not breaths.
    Averaged {
        /// The step, s.
        step_s: f64,
    },
}

/// A trace held between its points, such as the work rate set by the ergometer.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Trace {
    /// Times, s, rising.
    pub t_s: Vec<f64>,
    /// Values from each time on.
    pub value: Vec<f64>,
}

impl Trace {
    /// The value held at `t_s`; `None` before the first point or without any.
    #[must_use]
    pub fn at(&self, t_s: f64) -> Option<f64> {
        let after = self.t_s.partition_point(|t| *t <= t_s);
        (after > 0).then(|| self.value[after - 1])
    }
}

/// A stretch of time without gas values.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Gap {
    /// Start, s.
    pub from_s: f64,
    /// End, s.
    pub to_s: f64,
}

/// The test as recorded. Never changed after import.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Recording {
    /// The breaths, canonical units.
    pub breaths: Breaths,
    /// What a row of the table stood for.
    pub row_kind: RowKind,
    /// Work rate over time, W, at the resolution of the file (empty when absent).
    pub load: Trace,
    /// Gaps in the gas values, kept as gaps.
    pub gaps: Vec<Gap>,
    /// Temperature, pressure and humidity where the file states them.
    pub ambient: Ambient,
}

/// Conditions of the room.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Ambient {
    /// Barometric pressure, mmHg.
    pub pressure_mmhg: Option<f64>,
    /// Temperature, °C.
    pub temperature_c: Option<f64>,
    /// Relative humidity, %.
    pub humidity_pct: Option<f64>,
}

impl Recording {
    /// First and last instant covered by breaths, s.
    #[must_use]
    pub fn span_s(&self) -> Option<(f64, f64)> {
        let end = self.breaths.end_s();
        let first = *end.first()?;
        Some((first - self.breaths.duration_s()[0], *end.last()?))
    }

    /// Whether the recording holds any value of `quantity`.
    #[must_use]
    pub fn has(&self, quantity: Quantity) -> bool {
        match quantity {
            Quantity::WorkRate => !self.load.t_s.is_empty(),
            other => self.breaths.has(other),
        }
    }
}
