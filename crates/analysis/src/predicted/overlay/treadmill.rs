//! A treadmill has no work rate: V̇O₂ over time only as an estimate from belt speed and grade.

use super::curves::{Curves, Runs, estimated};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::stage::Stage;

/// Step of the grid, s.
const STEP_S: f64 = 5.0;
/// From this speed on the running equation holds, m/min (5 mph; from memory).
const RUNNING: f64 = 134.0;

/// Steady oxygen cost, mL/kg/min, of `speed` m/min at `grade` as a fraction (ACSM metabolic
/// equations); too high when holding the handrail and in unfit people.
#[must_use]
fn cost(speed: f64, grade: f64) -> f64 {
    if speed < RUNNING {
        0.1 * speed + 1.8 * speed * grade + 3.5
    } else {
        0.2 * speed + 0.9 * speed * grade + 3.5
    }
}

/// The curves over time.
///
/// # Errors
/// Without a speed column or increments: the curves over V̇O₂ stay valid.
pub(super) fn curves(stage: &Stage<'_>, runs: &Runs) -> Result<Curves, Note> {
    let mass = stage.facts.subject.mass_kg.ok_or_else(|| Note::missing_fact("mass"))?;
    let breaths = &stage.recording.breaths;
    if !stage.recording.has(Quantity::Speed) {
        return Err(Note::new("overlay-time-needs-load"));
    }
    let (_, end) = stage.results.phases.ramp().ok_or_else(|| stage.no_ramp())?;
    let from = stage.results.phases.spans.first().map_or(0.0, |s| s.from_s);
    let (tau, rest) = (runs.middle.tau_s, runs.middle.inputs.rest_vo2);
    let decay = libm::exp(-STEP_S / tau);
    let count = ((end - from) / STEP_S).clamp(0.0, 4000.0) as usize;
    let (mut t_s, mut vo2) = (Vec::with_capacity(count + 1), Vec::with_capacity(count + 1));
    let mut now = rest;
    for i in 0..=count {
        let t = from + STEP_S * i as f64;
        let breath = breaths.end_s().partition_point(|e| *e < t).min(breaths.len().max(1) - 1);
        let kmh = breaths.value(Quantity::Speed, breath).unwrap_or(0.0);
        let grade = breaths.value(Quantity::Grade, breath).unwrap_or(0.0) / 100.0;
        let steady = if kmh > 0.0 { mass * cost(kmh / 0.06, grade) } else { rest };
        if i > 0 {
            now = steady + (now - steady) * decay;
        }
        t_s.push(t);
        vo2.push(now);
    }
    Ok(estimated(runs, t_s, &vo2))
}

#[cfg(test)]
mod tests {
    use super::cost;

    #[test]
    fn the_published_examples_of_the_cost_come_out() {
        // 80.4 m/min at 10 % → 26.01; 160.8 m/min level → 35.66 (from the ACSM equations).
        assert!((cost(80.4, 0.10) - 26.01).abs() < 0.005);
        assert!((cost(160.8, 0.0) - 35.66).abs() < 0.005);
    }
}
