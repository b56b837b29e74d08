//! Phases of the test: proposed from the load trace, else from the response; the reader's
//! boundaries always win.

pub(crate) mod load;
mod response;

use crate::decisions::{Phase, PhaseStarts};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::recording::{Recording, Trace};
use crate::results::{LoadShape, Origin, PhaseSpan, Phases};
use crate::unit::Unit;

use load::LoadReading;

/// Shortest phase, s.
pub const SHORTEST_PHASE_S: f64 = 10.0;

/// A proposed start with its reason.
type Start = (f64, Note);

/// Proposed starts of the four phases.
#[derive(Debug, Default)]
struct Proposal {
    starts: [Option<Start>; 4],
    shape: Option<LoadShape>,
    doubts: Vec<Note>,
}

/// The phases as used, and doubts about them.
pub(crate) fn derive(recording: &Recording, reader: &PhaseStarts) -> (Phases, Vec<Note>) {
    let Some(span) = recording.span_s() else { return (Phases::default(), Vec::new()) };
    let proposal = propose(recording, span);
    let mut doubts = proposal.doubts;
    let spans = settle(&proposal.starts, reader, span, &mut doubts);
    (Phases { spans, load_shape: proposal.shape }, doubts)
}

fn propose(recording: &Recording, span: (f64, f64)) -> Proposal {
    let mut proposal = Proposal::default();
    let other = |shape: LoadShape, code: &'static str| Proposal {
        shape: Some(shape),
        doubts: vec![Note::new(code)],
        ..Proposal::default()
    };
    let reading = match belt(recording) {
        Some(belt) => {
            proposal.doubts.push(Note::new("phases-from-belt"));
            load::read(&belt).without_shape()
        }
        None => load::read(&recording.load),
    };
    match reading {
        LoadReading::Constant => return other(LoadShape::Constant, "constant-load-test"),
        LoadReading::Interval => return other(LoadShape::Other, "interval-test"),
        LoadReading::Repeated => return other(LoadShape::Other, "repeated-test"),
        LoadReading::Other => return other(LoadShape::Other, "load-not-recognised"),
        LoadReading::Incremental { warm_up_s, ramp_s, end_s, shape } => {
            proposal.shape = Some(shape);
            proposal.starts[2] = Some((ramp_s, Note::new("phase-from-increments")));
            if end_s < span.1 {
                proposal.starts[3] = Some((end_s, Note::new("phase-from-load-end")));
            }
            proposal.starts[1] = warm_up_s
                .filter(|t| *t > span.0)
                .map(|t| (t, Note::new("phase-from-first-load")))
                .or_else(|| warm_up_without_load(recording, (span.0, ramp_s)));
        }
        LoadReading::Nothing => {
            proposal.shape = Some(LoadShape::Unknown);
            if let Some(found) = response::read(recording, span) {
                let reason = || Note::new("phase-from-response");
                proposal.starts[2] = Some((found.ramp_s, reason()));
                proposal.starts[3] = (found.end_s < span.1).then(|| (found.end_s, reason()));
                proposal.starts[1] = warm_up_without_load(recording, (span.0, found.ramp_s));
                proposal.doubts.push(Note::new("phases-from-response"));
            } else {
                proposal.doubts.push(Note::new("phases-not-found"));
            }
        }
    }
    if proposal.starts[2].as_ref().is_some_and(|(t, _)| *t >= span.0 + SHORTEST_PHASE_S) {
        proposal.starts[0] = Some((span.0, Note::new("phase-from-record-start")));
    }
    proposal
}

/// Demand of walking on the belt, where the file holds speed but no load: 10·(0.1 v + 1.8 v·grade)
/// with v in m/min, that is mL/kg/min over rest times ten (walking equation of the ACSM), so that it
/// has the size of a load in W.
fn belt(recording: &Recording) -> Option<Trace> {
    let breaths = &recording.breaths;
    if !recording.load.t_s.is_empty() || !breaths.has(Quantity::Speed) {
        return None;
    }
    let speed = breaths.column(Quantity::Speed)?;
    let factor = Quantity::Speed.unit().convert(1.0, Unit::MPerMin)?;
    let rows = (0..breaths.len()).filter_map(|i| {
        let plausible = Quantity::Speed.row().plausible;
        let m_per_min = factor * speed[i].filter(|v| (plausible.0..=plausible.1).contains(v))?;
        let grade = breaths.value(Quantity::Grade, i).unwrap_or(0.0).clamp(-10.0, 40.0) / 100.0;
        Some((breaths.mid_s(i), 10.0 * m_per_min * (0.1 + 1.8 * grade)))
    });
    let (t_s, value) = rows.unzip();
    Some(Trace { t_s, value })
}

/// Start of unloaded pedalling: by cadence, else by the step of V̇O₂.
fn warm_up_without_load(recording: &Recording, before: (f64, f64)) -> Option<Start> {
    let breaths = &recording.breaths;
    if let Some(cadence) =
        breaths.column(Quantity::Cadence).filter(|_| breaths.has(Quantity::Cadence))
    {
        let turning = |i: usize| cadence.get(i).copied().flatten().is_some_and(|c| c > 20.0);
        let i = (0..breaths.len()).find(|i| turning(*i) && turning(*i + 1) && turning(*i + 2))?;
        let t_s = breaths.end_s()[i] - breaths.duration_s()[i];
        return (t_s > before.0 && t_s < before.1).then(|| (t_s, Note::new("phase-from-cadence")));
    }
    let step = response::step(breaths, before)?;
    let onset = response::onset(breaths, before, step);
    Some((onset, Note::new("phase-from-vo2-step")))
}

/// Joins proposal and reader: order kept, each phase at least [`SHORTEST_PHASE_S`].
fn settle(
    proposed: &[Option<Start>; 4],
    reader: &PhaseStarts,
    span: (f64, f64),
    doubts: &mut Vec<Note>,
) -> Vec<PhaseSpan> {
    let mut starts: Vec<(Phase, f64, Origin)> = Vec::new();
    for (phase, start) in Phase::ALL.into_iter().zip(proposed) {
        match reader.get(phase).filter(|t| t.is_finite()) {
            Some(t) => starts.push((phase, t, Origin::Reader)),
            None => {
                if let Some((t, reason)) = start {
                    starts.push((phase, *t, Origin::Proposed(reason.clone())));
                }
            }
        }
    }
    make_room(&mut starts, span, doubts);
    (0..starts.len())
        .map(|i| PhaseSpan {
            phase: starts[i].0,
            from_s: starts[i].1,
            to_s: starts.get(i + 1).map_or(span.1, |next| next.1),
            origin: starts[i].2.clone(),
        })
        .collect()
}

/// Drops or moves what crosses: a proposal gives way to the reader, a later start to an earlier.
fn make_room(starts: &mut Vec<(Phase, f64, Origin)>, span: (f64, f64), doubts: &mut Vec<Note>) {
    // A proposal gives way to the reader's later boundary.
    for i in (0..starts.len()).rev() {
        let reader_after = starts[i + 1..]
            .iter()
            .enumerate()
            .filter(|(_, s)| s.2 == Origin::Reader)
            .map(|(k, s)| s.1 - SHORTEST_PHASE_S * (k + 1) as f64)
            .fold(f64::INFINITY, f64::min);
        if starts[i].2 != Origin::Reader {
            starts[i].1 = starts[i].1.min(reader_after);
        }
    }
    let mut kept: Vec<(Phase, f64, Origin)> = Vec::new();
    for (phase, t, origin) in starts.drain(..) {
        let earliest = kept.last().map_or(span.0, |k| k.1 + SHORTEST_PHASE_S);
        let moved = t.max(earliest);
        if moved > span.1 - SHORTEST_PHASE_S {
            if origin == Origin::Reader {
                doubts.push(Note::new("boundary-outside"));
            }
            continue;
        }
        if moved > t && origin == Origin::Reader {
            doubts.push(Note::new("boundary-moved"));
        }
        kept.push((phase, moved, origin));
    }
    // A proposal before the record, pushed there by the reader, is no phase of its own.
    *starts = kept;
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::breaths::Breaths;

    /// Rest 180 s at 0 W, 50 W to 360 s, then 15 W/min in steps to 960 s, recovery to 1140 s.
    fn stepped() -> Recording {
        let end: Vec<f64> = (1..=380).map(|k| 3.0 * f64::from(k)).collect();
        let vo2 = end.iter().map(|t| Some(300.0 + t)).collect();
        let mut load = Trace { t_s: vec![0.0, 180.0], value: vec![0.0, 50.0] };
        for k in 0..10 {
            load.t_s.push(360.0 + 60.0 * f64::from(k));
            load.value.push(65.0 + 15.0 * f64::from(k));
        }
        load.t_s.push(960.0);
        load.value.push(0.0);
        Recording {
            breaths: Breaths::new(end, None, [(Quantity::Vo2, vo2)].into()).unwrap(),
            load,
            ..Recording::default()
        }
    }

    fn starts(phases: &Phases) -> Vec<(Phase, f64)> {
        phases.spans.iter().map(|s| (s.phase, s.from_s)).collect()
    }

    #[test]
    fn the_four_phases_follow_the_load() {
        let (phases, doubts) = derive(&stepped(), &PhaseStarts::default());
        let expected = [
            (Phase::Rest, 0.0),
            (Phase::WarmUp, 180.0),
            (Phase::Ramp, 360.0),
            (Phase::Recovery, 960.0),
        ];
        assert_eq!(starts(&phases), expected);
        assert_eq!(phases.ramp(), Some((360.0, 960.0)));
        assert!(doubts.is_empty());
    }

    #[test]
    fn the_reader_wins_and_nothing_crosses() {
        let reader = PhaseStarts { ramp: Some(120.0), ..PhaseStarts::default() };
        let (phases, _) = derive(&stepped(), &reader);
        let expected = [
            (Phase::Rest, 0.0),
            (Phase::WarmUp, 110.0),
            (Phase::Ramp, 120.0),
            (Phase::Recovery, 960.0),
        ];
        assert_eq!(starts(&phases), expected);
        assert_eq!(phases.span(Phase::Ramp).unwrap().origin, Origin::Reader);
        for pair in phases.spans.windows(2) {
            assert_eq!(pair[0].to_s, pair[1].from_s);
            assert!(pair[0].to_s - pair[0].from_s >= SHORTEST_PHASE_S);
        }
    }

    #[test]
    fn a_treadmill_is_read_from_speed_and_grade() {
        // 3 min standing, 2 min at 3 km/h, then stages of 3 min (km/h, %), 3 min standing. The slow
        // walk is the first stage.
        let stages = [(3.0, 4.0), (4.0, 6.0), (5.0, 8.0), (6.0, 10.0), (7.0, 12.0)];
        let at = |t: f64| match t {
            t if t < 180.0 => (0.0, 0.0),
            t if t < 300.0 => (3.0, 0.0),
            t if t < 1200.0 => stages[((t - 300.0) / 180.0) as usize],
            _ => (0.0, 0.0),
        };
        let end: Vec<f64> = (1..=460).map(|k| 3.0 * f64::from(k)).collect();
        let mid = |t: &f64| at(t - 1.5);
        let columns = [
            (Quantity::Speed, end.iter().map(|t| Some(mid(t).0)).collect()),
            (Quantity::Grade, end.iter().map(|t| Some(mid(t).1)).collect()),
            (Quantity::Vo2, end.iter().map(|t| Some(300.0 + t)).collect()),
        ];
        let breaths = Breaths::new(end.clone(), None, columns.into()).unwrap();
        let recording = Recording { breaths, ..Recording::default() };
        let (phases, doubts) = derive(&recording, &PhaseStarts::default());
        let near = |found: f64, true_s: f64| assert!((found - true_s).abs() <= 3.0, "{phases:?}");
        let found = starts(&phases);
        let expected = [(Phase::Rest, 0.0), (Phase::Ramp, 180.0), (Phase::Recovery, 1200.0)];
        assert_eq!(found.len(), expected.len(), "{found:?}");
        for ((phase, found), (true_phase, true_s)) in found.iter().zip(expected) {
            assert_eq!(*phase, true_phase);
            near(*found, true_s);
        }
        assert_eq!(phases.load_shape, Some(LoadShape::Unknown));
        assert!(doubts.iter().any(|d| d.code == "phases-from-belt"));
    }

    #[test]
    fn a_constant_load_is_not_forced_into_phases() {
        let mut recording = stepped();
        recording.load = Trace { t_s: vec![0.0, 180.0, 900.0], value: vec![0.0, 120.0, 0.0] };
        let (phases, doubts) = derive(&recording, &PhaseStarts::default());
        assert!(phases.spans.is_empty());
        assert_eq!(phases.load_shape, Some(LoadShape::Constant));
        assert_eq!(doubts[0].code, "constant-load-test");
    }
}
