//! Oscillatory ventilation during exercise: published definitions side by side, on 10-s averages.

use crate::averaging::Means;
use crate::breaths::Breaths;
use crate::decisions::Phase;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::recording::Recording;
use crate::results::{At, Kind, Outcome, Phases};
use crate::stage::Stage;
use crate::unit::Unit;

/// Width of the average, s: a longer one would shrink the cycles themselves.
const SMOOTH_S: f64 = 10.0;
/// Autocorrelation that confirms a period. In 300 simulated tests without oscillation the highest was
/// 0.35; with cycles of ±15 % the first centile was 0.44, the fifth 0.54.
const PERIODIC: f64 = 0.45;
/// Width of the mean that is taken off to see the cycles, s.
const TREND_S: f64 = 120.0;

/// One cycle of ventilation, nadir to nadir.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cycle {
    /// Start, s.
    pub from_s: f64,
    /// End, s.
    pub to_s: f64,
    /// Peak above the mean of the two nadirs, L/min.
    pub amplitude: f64,
    /// Mean ventilation over the cycle, L/min.
    pub mean: f64,
}

impl Cycle {
    fn length(&self) -> f64 {
        self.to_s - self.from_s
    }
}

/// What was found. Every definition is confirmed by cycles that repeat: ordinary breath noise swings
/// by as much, but not periodically.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Oscillation {
    /// Cycles of 30–140 s.
    pub cycles: Vec<Cycle>,
    /// Share of exercise in cycles of at least 15 % of resting ventilation.
    pub share: f64,
    /// Highest autocorrelation of the relative swing at lags of 40–140 s.
    pub periodicity: f64,
    /// By the AHA definition (≥ 60 % of exercise, amplitude ≥ 15 % of resting V̇E).
    pub aha: Option<bool>,
    /// Ben-Dov 1992: ≥ 3 in a row, amplitude > 25 % of mean V̇E, 30–60 s.
    pub ben_dov: bool,
    /// Leite 2003: ≥ 3 regular cycles (SD ≤ 20 % of the mean length), amplitude ≥ 5 L/min.
    pub leite: bool,
    /// Sun 2010, ventilation alone: ≥ 3 cycles, amplitude > 30 % of concurrent mean, 40–140 s.
    pub sun: bool,
    /// Variables (V̇E among them) that repeat with the same period while Sun's criterion of
    /// ventilation holds; Sun 2010 asks for three.
    pub together: usize,
}

impl Oscillation {
    /// Whether breathing counts as oscillating for the sake of errant breaths and intervals: one
    /// published definition holds.
    #[must_use]
    pub fn present(&self) -> bool {
        self.aha == Some(true) || self.leite || self.sun
    }
}

/// Variables beside V̇E that may oscillate with it (Sun 2010).
const WITH_IT: [Quantity; 5] =
    [Quantity::Vo2, Quantity::Vco2, Quantity::Rer, Quantity::Peto2, Quantity::Petco2];

/// Looks for cycles of V̇E over `exercise` (s) given resting V̇E.
pub(crate) fn find(means: &Means, exercise: (f64, f64), resting: Option<f64>) -> Oscillation {
    let ve = means.each_second(Quantity::Ve, SMOOTH_S, exercise);
    let trend = means.each_second(Quantity::Ve, TREND_S, exercise);
    let level: Vec<f64> = trend.iter().map(|m| m.unwrap_or(0.0)).collect();
    let about: Vec<f64> =
        ve.iter().zip(&trend).map(|(x, m)| x.zip(*m).map_or(0.0, |(x, m)| x - m)).collect();
    let turns = turning_points(&about, &level);
    let cycles = cycles(&turns, &level, exercise.0);
    let swing: Vec<f64> =
        about.iter().zip(&level).map(|(x, m)| if *m > 0.0 { x / m } else { 0.0 }).collect();
    let periodicity = periodicity(&swing);
    let mut found = Oscillation { cycles, periodicity, ..Oscillation::default() };
    judge(&mut found, exercise, resting);
    found
}

/// Variables that repeat together: V̇E, which does, and the others that do.
fn together(means: &Means, exercise: (f64, f64)) -> usize {
    let repeats = |q: &&Quantity| periodicity(&relative_swing(means, **q, exercise)) >= PERIODIC;
    1 + WITH_IT.iter().filter(repeats).count()
}

/// (10-s mean − 120-s mean) ÷ 120-s mean, each second; empty without the quantity.
fn relative_swing(means: &Means, quantity: Quantity, exercise: (f64, f64)) -> Vec<f64> {
    let here = means.each_second(quantity, SMOOTH_S, exercise);
    let trend = means.each_second(quantity, TREND_S, exercise);
    let swing = |(x, m): (&Option<f64>, &Option<f64>)| {
        x.zip(*m).filter(|(_, m)| *m > 0.0).map_or(0.0, |(x, m)| x / m - 1.0)
    };
    here.iter().zip(&trend).map(swing).collect()
}

/// Looks over warm-up and increments of a recording.
pub(crate) fn look(breaths: &Breaths, recording: &Recording, phases: &Phases) -> Oscillation {
    let Some(ramp) = phases.ramp() else { return Oscillation::default() };
    if !breaths.has(Quantity::Ve) {
        return Oscillation::default();
    }
    let means = Means::new(&breaths.only(&[Quantity::Ve]), &recording.gaps);
    let from = phases.window(Phase::WarmUp).map_or(ramp.0, |w| w.0);
    let rest = phases.window(Phase::Rest).map(|(from, to)| ((to - 60.0).max(from), to));
    let resting = rest.and_then(|w| means.over(Quantity::Ve, w));
    let mut found = find(&means, (from, ramp.1), resting);
    if found.sun {
        let gas = [Quantity::Vo2, Quantity::Vco2, Quantity::Peto2, Quantity::Petco2];
        let means = Means::new(&breaths.only(&gas), &recording.gaps);
        found.together = together(&means, (from, ramp.1));
    }
    found
}

/// Highest autocorrelation at lags of 40–140 s of a series on a 1-s grid.
fn periodicity(swing: &[f64]) -> f64 {
    let squares: f64 = swing.iter().map(|x| x * x).sum();
    if squares <= 0.0 {
        return 0.0;
    }
    (40..=140)
        .step_by(2)
        .filter(|lag| 3 * lag <= swing.len())
        .map(|lag| {
            let pairs: f64 = swing.iter().zip(&swing[lag..]).map(|(a, b)| a * b).sum();
            pairs / squares * swing.len() as f64 / (swing.len() - lag) as f64
        })
        .fold(0.0, f64::max)
}

/// Alternating nadirs and peaks as (index, value, is a peak), each swing at least 2 L/min and 10 %
/// of the local level.
fn turning_points(x: &[f64], level: &[f64]) -> Vec<(usize, f64, bool)> {
    let mut turns: Vec<(usize, f64, bool)> = Vec::new();
    let (mut low, mut high) = ((0, f64::MAX), (0, f64::MIN));
    let mut rising = None;
    for (i, v) in x.iter().copied().enumerate() {
        let swing = (0.10 * level[i]).max(2.0);
        if v < low.1 {
            low = (i, v);
        }
        if v > high.1 {
            high = (i, v);
        }
        if rising != Some(true) && v > low.1 + swing {
            turns.push((low.0, low.1, false));
            (rising, high) = (Some(true), (i, v));
        } else if rising != Some(false) && v < high.1 - swing {
            turns.push((high.0, high.1, true));
            (rising, low) = (Some(false), (i, v));
        }
    }
    turns
}

fn cycles(turns: &[(usize, f64, bool)], level: &[f64], from_s: f64) -> Vec<Cycle> {
    turns
        .windows(3)
        .filter(|w| !w[0].2 && w[1].2 && !w[2].2)
        .map(|w| Cycle {
            from_s: from_s + w[0].0 as f64,
            to_s: from_s + w[2].0 as f64,
            amplitude: w[1].1 - 0.5 * (w[0].1 + w[2].1),
            mean: level[w[1].0],
        })
        .filter(|c| (30.0..=140.0).contains(&c.length()))
        .collect()
}

fn judge(found: &mut Oscillation, exercise: (f64, f64), resting: Option<f64>) {
    let total = exercise.1 - exercise.0;
    let repeats = found.periodicity >= PERIODIC;
    if let Some(rest) = resting.filter(|r| *r >= 5.0 && total > 0.0) {
        let wide = found.cycles.iter().filter(|c| c.amplitude >= 0.15 * rest);
        found.share = wide.map(Cycle::length).sum::<f64>() / total;
        found.aha = Some(repeats && found.share >= 0.60);
    }
    found.ben_dov =
        repeats && in_a_row(&found.cycles, |c| c.amplitude > 0.25 * c.mean && c.length() <= 60.0);
    found.leite = repeats
        && found.cycles.windows(3).any(|w| {
            let mean = w.iter().map(Cycle::length).sum::<f64>() / 3.0;
            let variance =
                w.iter().map(|c| (c.length() - mean) * (c.length() - mean)).sum::<f64>() / 2.0;
            let amplitude = w.iter().map(|c| c.amplitude).sum::<f64>() / 3.0;
            follow(w) && variance.sqrt() <= 0.20 * mean && amplitude >= 5.0
        });
    found.sun =
        repeats && in_a_row(&found.cycles, |c| c.amplitude > 0.30 * c.mean && c.length() >= 40.0);
}

/// Whether three neighbouring cycles all fulfil `holds`.
fn in_a_row(cycles: &[Cycle], holds: impl Fn(&Cycle) -> bool) -> bool {
    cycles.windows(3).any(|w| follow(w) && w.iter().all(&holds))
}

/// Whether each cycle begins where the one before ends.
fn follow(cycles: &[Cycle]) -> bool {
    cycles.windows(2).all(|w| (w[1].from_s - w[0].to_s).abs() < 1.0)
}

/// Pushes the readings by each definition.
pub(crate) fn derive(stage: &mut Stage<'_>, found: &Oscillation) {
    let reading = |id: &'static str, method: &'static str, value: Result<bool, Note>| match value {
        Ok(true) => Outcome::reading(id, At::Ramp, method, "present"),
        Ok(false) => Outcome::reading(id, At::Ramp, method, "absent"),
        Err(reason) => Outcome::absent(id, At::Ramp, method, reason).of_kind(Kind::Reading),
    };
    let missing = stage
        .missing(&[Quantity::Ve])
        .or_else(|| stage.results.phases.ramp().is_none().then(|| stage.no_ramp()));
    let given = |value: Option<bool>| match (&missing, value) {
        (Some(reason), _) => Err(reason.clone()),
        (None, Some(value)) => Ok(value),
        (None, None) => Err(Note::new("resting-ventilation-unknown")),
    };
    let id = "oscillatory-ventilation";
    let mut primary = reading(id, "aha-2010", given(found.aha));
    if missing.is_none() && found.aha.is_some() && (0.40..0.60).contains(&found.share) {
        let share = Arg::Number(100.0 * found.share, Unit::Percent);
        primary = primary.doubting(Note::new("oscillation-borderline").with("share", share));
    }
    let others = [
        reading(id, "ben-dov-1992", given(Some(found.ben_dov))).alternative(),
        reading(id, "leite-2003", given(Some(found.leite))).alternative(),
        reading(id, "sun-2010", given(Some(found.sun && found.together >= 3))).alternative(),
        reading(id, "sun-2010-ventilation", given(Some(found.sun))).alternative(),
    ];
    stage.push(primary);
    for other in others {
        stage.push(other);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// V̇E of a triangle wave of ±`half` L/min around 40, period 60 s, one breath each 2 s.
    fn wave(half: f64) -> Means {
        let end: Vec<f64> = (1..=360).map(|k| 2.0 * f64::from(k)).collect();
        let triangle = |t: f64| 4.0 * (t / 60.0 - (t / 60.0 + 0.5).floor()).abs() - 1.0;
        let ve = end.iter().map(|t| Some(40.0 + half * triangle(*t))).collect();
        Means::new(&Breaths::new(end, None, [(Quantity::Ve, ve)].into()).unwrap(), &[])
    }

    #[test]
    fn marked_cycles_are_found_with_their_length() {
        let found = find(&wave(10.0), (0.0, 720.0), Some(10.0));
        assert!(found.cycles.len() >= 9, "{:?}", found.cycles.len());
        assert!(found.cycles.iter().all(|c| (c.length() - 60.0).abs() <= 4.0));
        assert!(found.aha == Some(true) && found.leite && found.sun && found.present());
    }

    #[test]
    fn three_variables_that_swing_together_fulfil_sun() {
        let end: Vec<f64> = (1..=360).map(|k| 2.0 * f64::from(k)).collect();
        let triangle = |t: f64| 4.0 * (t / 60.0 - (t / 60.0 + 0.5).floor()).abs() - 1.0;
        let wave = |level: f64, half: f64| {
            end.iter().map(|t| Some(level + half * triangle(*t))).collect::<Vec<_>>()
        };
        let columns = |vo2: f64, vco2: f64| {
            let columns =
                [(Quantity::Vo2, wave(1500.0, vo2)), (Quantity::Vco2, wave(1500.0, vco2))];
            Means::new(&Breaths::new(end.clone(), None, columns.into()).unwrap(), &[])
        };
        // RER swings too, since V̇CO₂ swings more.
        assert_eq!(together(&columns(150.0, 200.0), (0.0, 720.0)), 4);
        assert_eq!(together(&columns(0.0, 0.0), (0.0, 720.0)), 1);
    }

    #[test]
    fn small_ripples_are_not_oscillation() {
        let found = find(&wave(1.0), (0.0, 720.0), Some(10.0));
        assert_eq!((found.aha, found.present()), (Some(false), false));
        assert!(found.cycles.is_empty());
    }
}
