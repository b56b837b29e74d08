//! What can be moved on the time axis: boundaries, marks, the cursor.

use analysis::decisions::{Decisions, Mark, Phase};
use analysis::results::{Origin, Results};

/// Which handle.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum HandleKind {
    /// Start of a phase.
    Boundary(Phase),
    /// A threshold.
    Mark(Mark),
    /// An instant of the two-factor table.
    Point(End),
    /// The time cursor.
    Cursor,
}

/// Which instant of the two-factor table.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum End {
    /// The first.
    First,
    /// The second.
    Second,
}

impl HandleKind {
    /// Every handle there can be.
    pub const ALL: [HandleKind; 9] = [
        HandleKind::Boundary(Phase::Rest),
        HandleKind::Boundary(Phase::WarmUp),
        HandleKind::Boundary(Phase::Ramp),
        HandleKind::Boundary(Phase::Recovery),
        HandleKind::Mark(Mark::Vt1),
        HandleKind::Mark(Mark::Vt2),
        HandleKind::Point(End::First),
        HandleKind::Point(End::Second),
        HandleKind::Cursor,
    ];

    /// Its name.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            HandleKind::Boundary(Phase::Rest) => "Rest start",
            HandleKind::Boundary(Phase::WarmUp) => "Warm-up start",
            HandleKind::Boundary(Phase::Ramp) => "Ramp start",
            HandleKind::Boundary(Phase::Recovery) => "Load end",
            HandleKind::Mark(Mark::Vt1) => "VT1",
            HandleKind::Mark(Mark::Vt2) => "VT2",
            HandleKind::Point(End::First) => "First point",
            HandleKind::Point(End::Second) => "Second point",
            HandleKind::Cursor => "Time cursor",
        }
    }

    /// Stable code, from which widget ids are made.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            HandleKind::Boundary(phase) => phase.code(),
            HandleKind::Mark(mark) => mark.code(),
            HandleKind::Point(End::First) => "first-point",
            HandleKind::Point(End::Second) => "second-point",
            HandleKind::Cursor => "cursor",
        }
    }

    /// Sets it in `decisions`.
    pub fn set(self, decisions: &mut Decisions, t_s: f64) {
        match self {
            HandleKind::Boundary(phase) => decisions.phases.set(phase, Some(t_s)),
            HandleKind::Mark(Mark::Vt1) => decisions.vt1_s = Some(t_s),
            HandleKind::Mark(Mark::Vt2) => decisions.vt2_s = Some(t_s),
            HandleKind::Point(end) => {
                if let Some((first, second)) = &mut decisions.two_factor_s {
                    *match end {
                        End::First => first,
                        End::Second => second,
                    } = t_s;
                }
            }
            HandleKind::Cursor => {}
        }
    }
}

/// A handle where it stands.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Handle {
    /// Which.
    pub kind: HandleKind,
    /// Where, s.
    pub t_s: f64,
    /// Whether the machine proposed it.
    pub proposed: bool,
    /// How far it may move, s.
    pub range_s: (f64, f64),
}

/// Shortest phase, s.
pub const SHORTEST_PHASE_S: f64 = 10.0;

/// The handles of a test whose results are `results`.
#[must_use]
pub fn handles(results: &Results, decisions: &Decisions, whole: (f64, f64)) -> Vec<Handle> {
    let spans = &results.phases.spans;
    let mut all = Vec::new();
    for (before, span) in spans.iter().zip(spans.iter().skip(1)) {
        let low = before.from_s + SHORTEST_PHASE_S;
        all.push(Handle {
            kind: HandleKind::Boundary(span.phase),
            t_s: span.from_s,
            proposed: span.origin != Origin::Reader,
            range_s: (low, (span.to_s - SHORTEST_PHASE_S).max(low)),
        });
    }
    let ramp = results.phases.ramp().unwrap_or(whole);
    for mark in [Mark::Vt1, Mark::Vt2] {
        let decided = decisions.mark(mark);
        if let Some(t_s) = decided.or_else(|| proposed_mark(results, mark)) {
            all.push(Handle {
                kind: HandleKind::Mark(mark),
                t_s,
                proposed: decided.is_none(),
                range_s: ramp,
            });
        }
    }
    all
}

/// Least distance of the two points, s: their windows of 30 s must not overlap.
const POINTS_APART_S: f64 = 30.0;

/// The two instants of the two-factor table, where there is one.
#[must_use]
pub fn points(results: &Results, decisions: &Decisions) -> Vec<Handle> {
    let (Some(table), Some(ramp)) = (&results.fick.table, results.phases.ramp()) else {
        return Vec::new();
    };
    let (first, second) = table.between_s;
    let proposed = decisions.two_factor_s.is_none();
    let point = |end, t_s, low: f64, high: f64| Handle {
        kind: HandleKind::Point(end),
        t_s,
        proposed,
        range_s: (low, high.max(low)),
    };
    vec![
        point(End::First, first, ramp.0 + 15.0, second - POINTS_APART_S),
        point(End::Second, second, first + POINTS_APART_S, ramp.1 - 15.0),
    ]
}

fn proposed_mark(results: &Results, mark: Mark) -> Option<f64> {
    match mark {
        Mark::Vt1 => results.thresholds.vt1_s,
        Mark::Vt2 => results.thresholds.vt2_s,
    }
}
