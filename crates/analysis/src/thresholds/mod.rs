//! The ventilatory thresholds: one proposal each, or the reason why not; the reader's mark stands
//! apart and wins.

mod guards;
mod report;
mod vt1;
mod vt2;

use crate::note::Note;
use crate::stage::Stage;

pub use guards::Guards;

/// What the engine proposes for one threshold.
#[derive(Clone, Debug, PartialEq)]
pub enum Proposal {
    /// A threshold.
    Proposed(Threshold),
    /// The test ended before it, as far as can be seen.
    NotReached(Note),
    /// The data do not say, with the reason.
    Indeterminate(Note),
    /// It cannot be looked for (missing channel, no increments).
    Absent(Note),
}

impl Default for Proposal {
    fn default() -> Self {
        Proposal::Absent(Note::new("no-ramp"))
    }
}

impl Proposal {
    /// The proposed threshold, if there is one.
    #[must_use]
    pub fn threshold(&self) -> Option<&Threshold> {
        match self {
            Proposal::Proposed(t) => Some(t),
            _ => None,
        }
    }
}

/// A threshold with what its intervals need.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Threshold {
    /// Time, s, the file's own.
    pub t_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// Interval of *this recording*, mL/min.
    pub low: f64,
    /// Its upper end.
    pub high: f64,
    /// Doubts that go with it.
    pub doubts: Vec<Note>,
}

/// The V-slope picture: V̇CO₂ without shared noise on smoothed V̇O₂.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct VSlope {
    /// Time of each point, s.
    pub t_s: Vec<f64>,
    /// Smoothed V̇O₂, mL/min.
    pub vo2: Vec<f64>,
    /// V̇CO₂ without shared noise, mL/min.
    pub vco2: Vec<f64>,
    /// Knot, mL/min of V̇O₂, of the best hinge (proposed or not).
    pub knot: Option<f64>,
    /// V̇CO₂ of the hinge at its knot, mL/min.
    pub at_knot: f64,
    /// Slope before the knot.
    pub before: f64,
    /// Slope after the knot.
    pub after: f64,
    /// Evidence T over the candidate times: (s, T).
    pub profile: Vec<(f64, f64)>,
}

/// Chart data of the thresholds.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ThresholdDetail {
    /// The engine's VT1.
    pub vt1: Proposal,
    /// The engine's VT2.
    pub vt2: Proposal,
    /// VT1 as used (the reader's mark, else the proposal), s.
    pub vt1_s: Option<f64>,
    /// VT2 as used, s.
    pub vt2_s: Option<f64>,
    /// V-slope.
    pub v_slope: Option<VSlope>,
    /// Evidence for VT2 over its candidate times: (s, T of V̇E on V̇CO₂, T of PETCO₂).
    pub vt2_profile: Vec<(f64, f64, f64)>,
    /// Readings shown beside the proposals.
    pub guards: Guards,
}

/// Derives both thresholds: VT2 first, because it limits the data of VT1.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let mut detail = ThresholdDetail::default();
    let checks = guards::Checks::new(stage);
    detail.vt2 = vt2::propose(stage, &checks, &mut detail.vt2_profile);
    detail.vt2_s = stage.decisions.vt2_s.or_else(|| detail.vt2.threshold().map(|t| t.t_s));
    let (vt1, v_slope) = vt1::propose(stage, &checks, detail.vt2_s);
    detail.vt1 = vt1;
    detail.v_slope = v_slope;
    detail.vt1_s = stage.decisions.vt1_s.or_else(|| detail.vt1.threshold().map(|t| t.t_s));
    detail.guards = guards::derive(stage, detail.vt2_s);
    stage.results.thresholds = detail;
    report::derive(stage);
}
