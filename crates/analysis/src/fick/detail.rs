//! What the window and the page draw of the Fick reasoning.

use crate::results::{Interval, Note};

/// A named assumption that closes "O₂ pulse = stroke volume × extraction".
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Model {
    /// A1: extraction rises with % of own peak V̇O₂ (Stringer 1997).
    A1,
    /// A2: output rises linearly with V̇O₂.
    A2,
    /// A3: extraction is a rising fraction of arterial content (Crisafulli 2007).
    A3,
    /// B: stroke volume stayed as it was.
    B,
}

impl Model {
    /// Code as shown.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Model::A1 => "A1",
            Model::A2 => "A2",
            Model::A3 => "A3",
            Model::B => "B",
        }
    }
}

/// A value with its 90 % interval.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ranged {
    /// Median.
    pub value: f64,
    /// 5th and 95th centile.
    pub interval: Interval,
}

/// One instant of a path through the plane of stroke volume and extraction.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PathPoint {
    /// Time, s.
    pub t_s: f64,
    /// O₂ pulse, mL/beat.
    pub pulse: f64,
    /// C(a−v̄)O₂, mL/dL.
    pub content: Ranged,
    /// Stroke volume, mL.
    pub stroke_volume: Ranged,
}

/// The test's path under one assumption.
#[derive(Clone, Debug, PartialEq)]
pub struct Path {
    /// The assumption.
    pub model: Model,
    /// Its points, in time, from the early part of the ramp to peak.
    pub points: Vec<PathPoint>,
}

/// What can be: bounds of the plane.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Region {
    /// Lowest extraction considered, mL/dL.
    pub content_low: f64,
    /// Usual ceiling of extraction with resting Hb, mL/dL; a band where Hb is not known.
    pub content_usual: Interval,
    /// Limit of extraction with Hb raised for exercise, mL/dL; a band where Hb is not known.
    pub content_limit: Interval,
    /// Stroke volume that can be, mL; `None` without height and mass.
    pub stroke_volume: Option<Interval>,
}

/// "Forward stroke volume at peak was probably not below …".
#[derive(Clone, Debug, PartialEq)]
pub struct Bound {
    /// The bound, every input at its cautious end, mL.
    pub stroke_volume: f64,
    /// The same with usual extraction and resting Hb, mL.
    pub usual: f64,
    /// With extraction 13, 16.2 and 18 mL/dL, mL.
    pub at_normal_extraction: (f64, f64, f64),
    /// The extraction that the bound assumes, mL/dL.
    pub content: f64,
    /// The O₂ pulse that the bound assumes, mL/beat.
    pub pulse: f64,
    /// Every assumption, each with its value.
    pub assumptions: Vec<Note>,
}

/// One row of the two-factor table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FactorRow {
    /// The assumption.
    pub model: Model,
    /// Change of extraction, %.
    pub content: Ranged,
    /// Change of stroke volume, %.
    pub stroke_volume: Ranged,
    /// Whether the stroke-volume column is the assumption itself.
    pub stroke_volume_assumed: bool,
    /// Stroke volume at the second point, mL.
    pub stroke_volume_end: Ranged,
    /// Extraction at the second point, mL/dL.
    pub content_end: Ranged,
    /// Probability, under this assumption, that stroke volume was lower at the second point.
    pub probability_lower: f64,
}

/// The two-factor table between two points.
#[derive(Clone, Debug, PartialEq)]
pub struct FactorTable {
    /// First and second point, s.
    pub between_s: (f64, f64),
    /// O₂ pulse at both, mL/beat.
    pub pulse: (f64, f64),
    /// V̇O₂ at both, mL/min.
    pub vo2: (f64, f64),
    /// Change of the O₂ pulse, %.
    pub pulse_change: Ranged,
    /// Rows.
    pub rows: Vec<FactorRow>,
}

/// Sudden step that a right-to-left shunt would leave.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ShuntStep {
    /// When, s.
    pub t_s: f64,
    /// Step of PETCO₂, mmHg.
    pub petco2: f64,
    /// Step of PETO₂, mmHg.
    pub peto2: f64,
    /// Step of RER.
    pub rer: f64,
    /// Change of SpO₂ in the minute after, points; `None` where it may not be used.
    pub spo2: Option<f64>,
}

/// HR against the predicted line at peak V̇O₂.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct RatePoint {
    /// Time, s.
    pub t_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// HR, /min.
    pub hr: f64,
    /// HR of the predicted line at this V̇O₂, /min.
    pub expected: f64,
}

/// Chart data of the Fick reasoning.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct FickDetail {
    /// Why nothing is shown; empty where the plane may be drawn.
    pub withheld: Vec<Note>,
    /// Arterial O₂ content, mL/dL; a band where Hb is not known.
    pub arterial_content: Option<Interval>,
    /// Whether Hb was stated.
    pub hb_stated: bool,
    /// Bounds.
    pub region: Option<Region>,
    /// Values of the O₂ pulse whose curves are drawn, mL/beat.
    pub equal_pulse: Vec<f64>,
    /// O₂ pulse at peak with its 90 % interval, mL/beat.
    pub pulse_at_peak: Option<Ranged>,
    /// Paths, one per assumption.
    pub paths: Vec<Path>,
    /// Forward stroke-volume bound.
    pub bound: Option<Bound>,
    /// Why there is no bound.
    pub no_bound: Option<Note>,
    /// Two-factor table.
    pub table: Option<FactorTable>,
    /// The conditional two-sided sentence, or why the two cannot be separated.
    pub sentence: Option<Note>,
    /// HR deficit over the ramp against the predicted line.
    pub rate: Vec<RatePoint>,
    /// Shunt signature.
    pub shunt: Option<ShuntStep>,
}

/// Stroke volume on the curve of one O₂ pulse: `100 · pulse ÷ content`, mL.
#[must_use]
pub fn equal_pulse_sv(pulse: f64, content: f64) -> f64 {
    100.0 * pulse / content
}
