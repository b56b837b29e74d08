//! Lag of V̇O₂ behind the load in the ramp (Whipp, Davis, Torres and Wasserman, J Appl Physiol
//! 1981), and the work rate it belongs to.

use crate::decisions::Phase;
use crate::note::Note;
use crate::quantity::Quantity;
use crate::regression;
use crate::results::{At, LoadShape, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Used where no plausible lag can be measured, s (common practice).
const ASSUMED_S: f64 = 40.0;
const PLAUSIBLE_S: std::ops::RangeInclusive<f64> = 20.0..=90.0;

/// Lag, s, and whether it was assumed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct ResponseTime {
    pub lag_s: f64,
    pub assumed: bool,
}

/// Measures the lag: where the line of V̇O₂ on time between 90 s of the increments and VT1 meets the
/// V̇O₂ of the warm-up.
pub(crate) fn measure(stage: &Stage<'_>) -> ResponseTime {
    let assumed = ResponseTime { lag_s: ASSUMED_S, assumed: true };
    let lag = || {
        let ramp = stage.results.phases.ramp()?;
        let base = stage.window_mean(Quantity::Vo2, stage.end_of(Phase::WarmUp, 60.0)?)?;
        let to = stage.results.thresholds.vt1_s.unwrap_or(0.5 * (ramp.0 + ramp.1));
        let series = stage.ramp_series.as_ref()?;
        let (first, last) = (series.until(ramp.0 + 90.0), series.until(to));
        let vo2 = series.vo2.as_ref()?.raw.get(first..last)?;
        if vo2.len() < 12 {
            return None;
        }
        let line = regression::line(&series.t_s[first..last], vo2)?;
        let met = (base - line.intercept) / line.slope;
        Some(met - ramp.0 + half_step_s(stage))
    };
    lag()
        .filter(|s| PLAUSIBLE_S.contains(s))
        .map_or(assumed, |lag_s| ResponseTime { lag_s, assumed: false })
}

/// Steps lead their own straight line by half a step.
fn half_step_s(stage: &Stage<'_>) -> f64 {
    match stage.results.phases.load_shape {
        Some(LoadShape::Steps { length_s, .. }) => 0.5 * length_s,
        _ => 0.0,
    }
}

/// Mean load around `t_s` less the lag, W: over 30 s of a ramp, over a whole step of steps.
pub(crate) fn work_rate(stage: &Stage<'_>, t_s: f64, lag: ResponseTime) -> Option<f64> {
    let half = half_step_s(stage).max(15.0);
    let at = t_s - lag.lag_s;
    stage.window_mean(Quantity::WorkRate, (at - half, at + half))
}

/// Pushes the lag as an outcome.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let (id, method, unit) = ("mean-response-time", "ramp-line-on-warm-up", Unit::Second);
    let reason = stage
        .missing(&[Quantity::Vo2, Quantity::WorkRate])
        .or_else(|| stage.results.phases.ramp().is_none().then(|| stage.no_ramp()));
    let outcome = match reason {
        Some(reason) => Outcome::absent(id, At::Ramp, method, reason).in_unit(unit),
        None => {
            let found = measure(stage);
            let outcome = Outcome::quantity(id, At::Ramp, method, unit, found.lag_s);
            if found.assumed {
                outcome.doubting(Note::new("response-time-assumed"))
            } else {
                outcome
            }
        }
    };
    stage.push(outcome);
}
