//! Where a phase boundary may go: to the end of a breath, at least 10 s from its neighbours.

use analysis::breaths::Breaths;
use analysis::decisions::Phase;
use analysis::recording::Recording;
use analysis::results::Phases;

/// Shortest phase, s.
pub const SHORTEST_S: f64 = 10.0;

/// The end of a breath nearest to `t_s`; `t_s` itself where there is no breath.
#[must_use]
pub fn snap(breaths: &Breaths, t_s: f64) -> f64 {
    let ends = breaths.end_s();
    let after = ends.partition_point(|e| *e < t_s);
    [after.checked_sub(1), Some(after)]
        .into_iter()
        .flatten()
        .filter_map(|i| ends.get(i).copied())
        .min_by(|a, b| (a - t_s).abs().total_cmp(&(b - t_s).abs()))
        .unwrap_or(t_s)
}

/// Earliest and latest start of `phase`, s, given the phases as used; `None` where the recording
/// has no room for it.
#[must_use]
pub fn limits(recording: &Recording, phases: &Phases, phase: Phase) -> Option<(f64, f64)> {
    let (first, last) = recording.span_s()?;
    let before = phases.spans.iter().rfind(|s| s.phase < phase).map(|s| s.from_s + SHORTEST_S);
    let after = phases.spans.iter().find(|s| s.phase > phase).map(|s| s.from_s);
    let low = before.unwrap_or(first).max(first);
    let high = after.unwrap_or(last) - SHORTEST_S;
    (low <= high).then_some((low, high))
}

/// `t_s` snapped to the end of a breath that keeps the limits; `None` where it cannot.
#[must_use]
pub fn placed(recording: &Recording, phases: &Phases, phase: Phase, t_s: f64) -> Option<f64> {
    let (low, high) = limits(recording, phases, phase)?;
    if !(t_s >= low - SNAP_SLACK_S && t_s <= high + SNAP_SLACK_S) {
        return None;
    }
    let ends = recording.breaths.end_s();
    let inside = &ends[ends.partition_point(|e| *e < low)..ends.partition_point(|e| *e <= high)];
    inside.iter().copied().min_by(|a, b| (a - t_s).abs().total_cmp(&(b - t_s).abs()))
}

/// A time this close beyond a limit still means the limit (half a slow breath), s.
const SNAP_SLACK_S: f64 = 2.5;
