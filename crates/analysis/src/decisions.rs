//! What the reader decided, apart from the facts: boundaries, exclusions, marks.

/// A phase of the test.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Phase {
    /// Quiet rest.
    Rest,
    /// Unloaded or lightly loaded exercise before the increments.
    WarmUp,
    /// Incremental exercise.
    Ramp,
    /// After load end.
    Recovery,
}

impl Phase {
    /// All phases in order.
    pub const ALL: [Phase; 4] = [Phase::Rest, Phase::WarmUp, Phase::Ramp, Phase::Recovery];

    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Phase::Rest => "rest",
            Phase::WarmUp => "warm-up",
            Phase::Ramp => "ramp",
            Phase::Recovery => "recovery",
        }
    }
}

/// Starts of the phases as the reader set them, s; `None` leaves the proposal.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct PhaseStarts {
    /// Start of rest.
    pub rest: Option<f64>,
    /// Start of warm-up.
    pub warm_up: Option<f64>,
    /// Start of the increments.
    pub ramp: Option<f64>,
    /// Load end.
    pub recovery: Option<f64>,
}

impl PhaseStarts {
    /// The start of `phase`.
    #[must_use]
    pub fn get(&self, phase: Phase) -> Option<f64> {
        match phase {
            Phase::Rest => self.rest,
            Phase::WarmUp => self.warm_up,
            Phase::Ramp => self.ramp,
            Phase::Recovery => self.recovery,
        }
    }

    /// Sets the start of `phase`.
    pub fn set(&mut self, phase: Phase, t_s: Option<f64>) {
        *match phase {
            Phase::Rest => &mut self.rest,
            Phase::WarmUp => &mut self.warm_up,
            Phase::Ramp => &mut self.ramp,
            Phase::Recovery => &mut self.recovery,
        } = t_s;
    }
}

/// A mark the reader may set.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Mark {
    /// First ventilatory threshold.
    Vt1,
    /// Second ventilatory threshold (respiratory compensation point).
    Vt2,
}

impl Mark {
    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Mark::Vt1 => "vt1",
            Mark::Vt2 => "vt2",
        }
    }
}

/// Breaths left out by the reader. The reason's text stays in `record`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Exclusion {
    /// From, s.
    pub from_s: f64,
    /// To, s.
    pub to_s: f64,
}

/// The reader's decisions that change numbers.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Decisions {
    /// Phase boundaries.
    pub phases: PhaseStarts,
    /// Left-out stretches.
    pub excluded: Vec<Exclusion>,
    /// The reader's VT1, s.
    pub vt1_s: Option<f64>,
    /// The reader's VT2, s.
    pub vt2_s: Option<f64>,
    /// Two points for the two-factor table, s; `None` = the ends of the late window.
    pub two_factor_s: Option<(f64, f64)>,
}

impl Decisions {
    /// The reader's time of `mark`.
    #[must_use]
    pub fn mark(&self, mark: Mark) -> Option<f64> {
        match mark {
            Mark::Vt1 => self.vt1_s,
            Mark::Vt2 => self.vt2_s,
        }
    }
}
