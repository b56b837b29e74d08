//! The model of a normal response: a picture for orientation, never a measured norm and never
//! evidence. From the person's own rest, mass and ramp, and the chosen predicted sets.

mod curves;
mod response;
mod treadmill;

#[cfg(test)]
mod tests;

use super::candidates::candidates;
use super::outcomes::{beta_blocked, chosen_value};
use super::person;
use super::sets::{Person, Predicts};
use crate::decisions::Phase;
use crate::facts::Mode;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::results::At;
use crate::stage::Stage;
use crate::unit::Unit;

pub use curves::{Curve, Curves, Pressure, Role, Runs, over_time, over_vo2};
pub use response::{Inputs, Moment, Response};

/// The overlay, or why it is not drawn.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OverlayOutcome {
    /// The model.
    pub model: Option<Model>,
    /// Why there is none.
    pub withheld: Option<Note>,
}

/// The model as drawn.
#[derive(Clone, Debug, PartialEq)]
pub struct Model {
    /// The run in the middle, with all its parameters.
    pub response: Response,
    /// Curves over time, s, the file's own time.
    pub over_time: Option<Curves>,
    /// Why there are none over time.
    pub over_time_withheld: Option<Note>,
    /// Curves over V̇O₂, mL/min: they need no work rate.
    pub over_vo2: Curves,
    /// Ceiling of ventilation, L/min, where MVV is known.
    pub mvv_l_min: Option<f64>,
    /// What was assumed, and what is left out.
    pub doubts: Vec<Note>,
}

/// Derives the overlay.
pub(super) fn derive(stage: &mut Stage<'_>) {
    stage.results.overlay = match build(stage) {
        Ok(model) => OverlayOutcome { model: Some(model), withheld: None },
        Err(why) => OverlayOutcome { model: None, withheld: Some(why) },
    };
}

fn build(stage: &Stage<'_>) -> Result<Model, Note> {
    let (person, mode_doubt) = person::of(stage);
    let vo2 = chosen_value(stage, Predicts::Vo2Peak, &person)?;
    let (inputs, mut doubts) = inputs(stage, &person, vo2.value)?;
    doubts.extend(mode_doubt);
    doubts.extend(vo2.doubts);
    let overlay = &stage.settings.overlay;
    let middle = Response::new(inputs, overlay, overlay.gain)?;
    let run = |vo2_peak: Option<f64>, gain| {
        let inputs = Inputs { vo2_peak: vo2_peak.unwrap_or(inputs.vo2_peak), ..inputs };
        Response::new(inputs, overlay, gain).ok()
    };
    let runs = curves::Runs {
        middle,
        low: run(vo2.low, overlay.gain_band.0),
        high: run(vo2.high, overlay.gain_band.1),
        pressure: pressure(stage, &person),
        hr_beta_blocked: rate_on_beta_blocker(stage, &person),
    };
    let cycle = person.mode == Some(Mode::Cycle);
    let over_time = if cycle { ramp_curves(stage, &runs) } else { treadmill::curves(stage, &runs) };
    if !cycle && over_time.is_ok() {
        doubts.push(Note::new("overlay-estimated-from-belt"));
    }
    let (over_time, over_time_withheld) = match over_time {
        Ok(curves) => (Some(curves), None),
        Err(why) => (None, Some(why)),
    };
    Ok(Model {
        response: middle,
        over_time,
        over_time_withheld,
        over_vo2: curves::over_vo2(&runs),
        mvv_l_min: mvv(stage),
        doubts,
    })
}

/// What the model takes from the person and the test, and what had to be assumed or left out.
fn inputs(stage: &Stage<'_>, person: &Person, vo2_peak: f64) -> Result<(Inputs, Vec<Note>), Note> {
    let mut doubts = Vec::new();
    let mass = person.mass_kg.ok_or_else(|| Note::missing_fact("mass"))?;
    let overlay = &stage.settings.overlay;
    let unloaded = overlay.unloaded_vo2(mass);
    let measured = stage.results.number(Quantity::Vo2.code(), At::Rest);
    let rest_vo2 = measured.filter(|v| *v < 0.9 * unloaded).unwrap_or_else(|| {
        let per_kg = Arg::Number(overlay.rest_per_kg, Unit::MlPerKgMin);
        doubts.push(Note::new("overlay-rest-from-mass").with("value", per_kg));
        overlay.rest_per_kg * mass
    });
    let hr_peak = chosen_value(stage, Predicts::HrPeak, person).map(|p| p.value);
    let hr_rest = stage.results.number(Quantity::Hr.code(), At::Rest);
    let hr = match (hr_rest, hr_peak) {
        (Some(rest), Ok(peak)) if peak > rest => Some((rest, peak)),
        (Some(_), Ok(_)) => {
            doubts.push(Note::new("reserve-not-positive"));
            None
        }
        (_, Err(why)) => {
            doubts.push(why);
            None
        }
        (None, Ok(_)) => {
            doubts.push(Note::new("overlay-without-resting-rate"));
            None
        }
    };
    let ve_slope = match chosen_value(stage, Predicts::VeVco2Slope, person) {
        Ok(prediction) => Some(prediction.value),
        Err(why) => {
            doubts.push(why);
            None
        }
    };
    let ramp_start = stage.results.phases.ramp().map(|r| r.0);
    let warm_up = stage.results.phases.window(Phase::WarmUp);
    let watts = warm_up.and_then(|w| stage.window_mean(Quantity::WorkRate, w)).unwrap_or(0.0);
    let inputs = Inputs {
        rest_vo2,
        unloaded_vo2: unloaded,
        vo2_peak,
        hr,
        ve_slope,
        warm_up_s: warm_up.zip(ramp_start).map_or(0.0, |(w, start)| start - w.0),
        warm_up_watts: watts.max(0.0),
        rate_w_per_min: stage.ramp_rate().filter(|r| *r > 0.0).unwrap_or(f64::NAN),
    };
    Ok((inputs, doubts))
}

/// The curves of a cycle ramp.
fn ramp_curves(stage: &Stage<'_>, runs: &curves::Runs) -> Result<Curves, Note> {
    let (start, load_end) = stage.results.phases.ramp().ok_or_else(|| stage.no_ramp())?;
    let duration = runs.middle.peak_s.ok_or_else(|| stage.no_ramp())?;
    let from = -runs.middle.inputs.warm_up_s;
    let to = duration.max(load_end - start);
    Ok(curves::over_time(runs, start, from, to))
}

fn mvv(stage: &Stage<'_>) -> Option<f64> {
    let subject = &stage.facts.subject;
    let estimated = subject.fev1_l.map(|fev1| fev1 * stage.settings.mvv_factor);
    subject.mvv_l_min.or(estimated).filter(|x| *x > 0.0)
}

/// Pressure at rest and its rise with work rate, where both are known.
fn pressure(stage: &Stage<'_>, person: &Person) -> Option<curves::Pressure> {
    let slope = chosen_value(stage, Predicts::SysBpSlope, person).ok()?;
    Some(curves::Pressure {
        systolic: stage.results.number(Quantity::SysBp.code(), At::Rest),
        diastolic: stage.results.number(Quantity::DiaBp.code(), At::Rest),
        slope: slope.value,
        slope_sd: slope.see.unwrap_or(0.0),
    })
}

/// Predicted peak rate on a beta-blocker, when one is, or may be, taken.
fn rate_on_beta_blocker(stage: &Stage<'_>, person: &Person) -> Option<f64> {
    if !beta_blocked(stage) {
        return None;
    }
    let list = candidates(stage.settings, Predicts::HrPeakBetaBlocked, person);
    list.into_iter().find_map(|c| c.result.ok()).map(|p| p.value)
}

impl Model {
    /// The parameters as listed beside the picture: word of the catalogue, value, unit.
    #[must_use]
    pub fn parameters(&self) -> Vec<(&'static str, Arg)> {
        let r = &self.response;
        let number = |x: f64, unit| Arg::Number(x, unit);
        let mut list = vec![
            ("overlay-rest", number(r.inputs.rest_vo2, Unit::MlPerMin)),
            ("overlay-unloaded", number(r.inputs.unloaded_vo2, Unit::MlPerMin)),
            ("overlay-peak", number(r.inputs.vo2_peak, Unit::MlPerMin)),
            ("overlay-gain", number(r.gain, Unit::MlPerMinPerWatt)),
            ("overlay-tau", number(r.tau_s, Unit::Second)),
            ("overlay-vt1", number(r.vt1_vo2, Unit::MlPerMin)),
            ("overlay-vt2", number(r.vt2_vo2, Unit::MlPerMin)),
        ];
        if let Some((rest, peak)) = r.inputs.hr {
            list.push(("overlay-hr-rest", number(rest, Unit::PerMin)));
            list.push(("overlay-hr-peak", number(peak, Unit::PerMin)));
        }
        if let (Some(t), Some(watts)) = (r.peak_s, r.peak_watts) {
            list.push(("overlay-time", Arg::Duration(t)));
            list.push(("overlay-work-rate", number(watts, Unit::Watt)));
        }
        list
    }
}
