//! Phases from the response alone, where the file has no load.

use crate::averaging::Means;
use crate::breaths::Breaths;
use crate::quantity::Quantity;
use crate::recording::Recording;

/// Lag of V̇O₂ behind the load that is taken off the bend (common practice).
const LAG_S: f64 = 30.0;
const GRID_S: f64 = 5.0;

/// What the response says.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Found {
    pub ramp_s: f64,
    pub end_s: f64,
}

/// Load end where V̇O₂ (else HR) is highest, start of the increments at its bend before.
pub(super) fn read(recording: &Recording, span: (f64, f64)) -> Option<Found> {
    let means = Means::new(&recording.breaths, &recording.gaps);
    let quantity = [Quantity::Vo2, Quantity::Hr].into_iter().find(|q| means.has(*q))?;
    let (_, (_, end_s)) = means.highest(quantity, 20.0, span)?;
    let steps = ((end_s - span.0) / GRID_S).floor().max(0.0) as usize;
    let points: Vec<(f64, f64)> = (0..steps)
        .filter_map(|k| {
            let t = span.0 + GRID_S * k as f64;
            means.over(quantity, (t, t + 20.0)).map(|y| (t + 10.0, y))
        })
        .collect();
    let first = bend(&points)?;
    // The step from rest to warm-up pulls the bend towards itself: look again behind it.
    let bend = match step(&recording.breaths, (span.0, first + LAG_S)) {
        Some(s) => {
            let behind = points.partition_point(|p| p.0 < s + LAG_S);
            bend(&points[behind..]).unwrap_or(first)
        }
        None => first,
    };
    let ramp_s = (bend - LAG_S).max(span.0);
    (end_s - ramp_s >= 120.0).then_some(Found { ramp_s, end_s })
}

/// Knot of `y = a + c·(t − k)₊` with the least squares.
fn bend(points: &[(f64, f64)]) -> Option<f64> {
    let n = points.len();
    if n < 24 {
        return None;
    }
    let mean = points.iter().map(|p| p.1).sum::<f64>() / n as f64;
    let mut best: Option<(f64, f64)> = None;
    for candidate in &points[6..n - 12] {
        let hinge = |t: f64| (t - candidate.0).max(0.0);
        let middle = points.iter().map(|p| hinge(p.0)).sum::<f64>() / n as f64;
        let (mut xx, mut xy) = (0.0, 0.0);
        for (t, y) in points {
            let x = hinge(*t) - middle;
            xx += x * x;
            xy += x * (y - mean);
        }
        let gain = xy * xy / xx;
        if xx > 0.0 && xy > 0.0 && best.is_none_or(|(g, _)| gain > g) {
            best = Some((gain, candidate.0));
        }
    }
    best.map(|(_, t)| t)
}

/// Time of a clear step up of V̇O₂ within `window`: two means, the later at least a third higher,
/// each over at least 30 s.
pub(super) fn step(breaths: &Breaths, window: (f64, f64)) -> Option<f64> {
    let vo2 = breaths.column(Quantity::Vo2)?;
    let inside: Vec<(f64, f64, f64)> = (0..breaths.len())
        .filter(|i| breaths.end_s()[*i] <= window.1)
        .filter_map(|i| vo2[i].map(|v| (breaths.end_s()[i], breaths.duration_s()[i], v)))
        .collect();
    let (time, total) = inside.iter().fold((0.0, 0.0), |(t, s), (_, d, v)| (t + d, s + d * v));
    let (mut t1, mut s1) = (0.0, 0.0);
    let mut best: Option<(f64, f64)> = None;
    for (end, d, v) in &inside {
        t1 += d;
        s1 += d * v;
        let (t2, s2) = (time - t1, total - s1);
        if t1 < 30.0 || t2 < 30.0 {
            continue;
        }
        let (before, after) = (s1 / t1, s2 / t2);
        let gain = t1 * t2 / time * (after - before) * (after - before);
        if after >= before * 4.0 / 3.0 && best.is_none_or(|(g, _)| gain > g) {
            best = Some((gain, *end));
        }
    }
    best.map(|(_, t)| t)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn phases_are_found_in_the_response() {
        // V̇O₂ 300 to 180 s, 600 to 360 s, then +3 per s to 900 s, falling afterwards.
        let end: Vec<f64> = (1..=340).map(|k| 3.0 * f64::from(k)).collect();
        let vo2 = |t: f64| match t {
            t if t <= 180.0 => 300.0,
            t if t <= 360.0 => 600.0,
            t if t <= 900.0 => 600.0 + 3.0 * (t - 360.0),
            t => 2220.0 - 10.0 * (t - 900.0),
        };
        let column = end.iter().map(|t| Some(vo2(*t))).collect();
        let breaths = Breaths::new(end, None, [(Quantity::Vo2, column)].into()).unwrap();
        assert_eq!(step(&breaths, (0.0, 360.0)), Some(180.0));
        let recording = Recording { breaths, ..Recording::default() };
        let found = read(&recording, (0.0, 1020.0)).unwrap();
        assert!((found.end_s - 900.0).abs() <= 10.0, "{found:?}");
        assert!((found.ramp_s + LAG_S - 360.0).abs() <= 60.0, "{found:?}");
    }
}
