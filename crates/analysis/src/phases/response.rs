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

/// Time constant of V̇O₂ after a step of moderate work, s (common practice).
const TAU_S: f64 = 30.0;
/// How far before and after the two-mean step the onset is looked for, s.
const BACK_S: f64 = 45.0;
const AHEAD_S: f64 = 10.0;

/// Onset of the step near `step_s`: two means split a gradual rise too late, an exponential rise does
/// not. Start of the best of `y = a + b·(1 − exp(−(t − onset)/τ))₊`, to the nearest end of a breath.
pub(super) fn onset(breaths: &Breaths, window: (f64, f64), step_s: f64) -> f64 {
    let Some(vo2) = breaths.column(Quantity::Vo2) else { return step_s };
    let inside: Vec<(f64, f64, f64)> = (0..breaths.len())
        .filter(|i| breaths.end_s()[*i] <= window.1)
        .filter_map(|i| vo2[i].map(|v| (breaths.mid_s(i), breaths.duration_s()[i], v)))
        .collect();
    let (time, total) = inside.iter().fold((0.0, 0.0), |(t, s), (_, d, v)| (t + d, s + d * v));
    let mean = total / time;
    let gain = |onset: f64| {
        let shape = |t: f64| 1.0 - libm::exp(-(t - onset).max(0.0) / TAU_S);
        let middle = inside.iter().map(|(t, d, _)| d * shape(*t)).sum::<f64>() / time;
        let (mut xx, mut xy) = (0.0, 0.0);
        for (t, d, v) in &inside {
            let x = shape(*t) - middle;
            xx += d * x * x;
            xy += d * x * (v - mean);
        }
        if xy > 0.0 && xx > 0.0 { xy * xy / xx } else { 0.0 }
    };
    let candidates = breaths.end_s().iter().copied();
    let near = candidates.filter(|t| step_s - BACK_S <= *t && *t <= step_s + AHEAD_S);
    near.map(|t| (gain(t), t)).max_by(|a, b| a.0.total_cmp(&b.0)).map_or(step_s, |(_, t)| t)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn an_exponential_rise_is_dated_at_its_onset() {
        // 280 mL/min to 150 s, then towards 560 with 38 s: not the time constant of the procedure.
        let end: Vec<f64> = (1..=100).map(|k| 3.0 * f64::from(k)).collect();
        let wobble = |k: usize| 12.0 * [1.0, -0.5, -1.0, 0.5, 0.0][k % 5];
        let vo2 = end.iter().enumerate().map(|(k, t)| {
            let mid: f64 = t - 1.5;
            let rise = 280.0 * (1.0 - libm::exp(-(mid - 150.0).max(0.0) / 38.0));
            Some(280.0 + rise + wobble(k))
        });
        let breaths = Breaths::new(end.clone(), None, [(Quantity::Vo2, vo2.collect())].into());
        let breaths = breaths.unwrap();
        let by_means = step(&breaths, (0.0, 300.0)).unwrap();
        let found = onset(&breaths, (0.0, 300.0), by_means);
        assert!(by_means - 150.0 > 12.0, "{by_means}");
        assert!((found - 150.0).abs() <= 6.0, "{found}");
    }

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
