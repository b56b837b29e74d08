//! V̇E–V̇CO₂: slope to VT2 and over all increments (never mixed), intercept and nadir.

use super::{Fitted, fit, series_for};
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::results::{At, Outcome};
use crate::smooth;
use crate::stage::Stage;
use crate::unit::Unit;

const NEEDED: [Quantity; 2] = [Quantity::Ve, Quantity::Vco2];
/// Calibrated factors, tuned on simulated tests of seeds below 10,000.
const F_TO_VT2: f64 = 1.57;
const F_FULL: f64 = 1.55;
/// Window of the nadir, s.
const NADIR_S: f64 = 60.0;
/// Explained variance below which a slope carries a doubt (common practice).
const R_SQUARED: f64 = 0.95;

/// Derives the V̇E–V̇CO₂ outcomes.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let vt2_s = stage.results.thresholds.vt2_s;
    let (to_vt2, full) = match series_for(stage, &NEEDED).and_then(|series| {
        let (vco2, ve) = series
            .vco2
            .as_ref()
            .zip(series.ve.as_ref())
            .ok_or_else(|| Note::new("too-few-breaths"))?;
        let x: Vec<f64> = vco2.hat.iter().map(|x| x / 1000.0).collect();
        let y = smooth::cleaned(ve, vco2);
        let n = vt2_s.map_or(x.len(), |t| series.until(t));
        let upto = |n: usize, f| fit(series, &series.t_s[..n], &x[..n], &y[..n], f);
        Ok((upto(n, F_TO_VT2), upto(x.len(), F_FULL), x, y))
    }) {
        Ok((to_vt2, full, x, y)) => {
            let chart = &mut stage.results.slopes.ve_vco2;
            (chart.x, chart.y) = (x, y);
            chart.lines = [&to_vt2, &full].into_iter().flatten().map(|f| f.chart).collect();
            (to_vt2, full)
        }
        Err(reason) => (Err(reason.clone()), Err(reason)),
    };
    let mut primary = slope(stage, "ve-vco2-slope-to-vt2", &to_vt2);
    if primary.value.is_some() && vt2_s.is_none() {
        primary = primary.doubting(Note::new("slope-to-load-end"));
    }
    let full = slope(stage, "ve-vco2-slope-full", &full);
    let intercept = intercept(&to_vt2);
    let nadir = nadir(stage, vt2_s);
    for outcome in [primary, full, intercept, nadir] {
        stage.push(outcome);
    }
}

fn slope(stage: &Stage<'_>, id: &'static str, fitted: &Result<Fitted, Note>) -> Outcome {
    let method = "ols-without-shared-noise";
    match fitted {
        Err(reason) => Outcome::absent(id, At::Ramp, method, reason.clone()).in_unit(Unit::One),
        Ok(f) => {
            let mut outcome = Outcome::quantity(id, At::Ramp, method, Unit::One, f.line.slope)
                .recorded_within(f.interval.filter(|_| stage.intervals_hold()))
                .repeated_within(None);
            outcome.basis.breaths = f.line.n;
            outcome.basis.window_s = stage.results.phases.ramp();
            if f.chart.r_squared < R_SQUARED {
                let r2 = Arg::Number(f.chart.r_squared, Unit::One);
                outcome = outcome.doubting(Note::new("line-fits-poorly").with("r2", r2));
            }
            stage.doubt_interval(outcome)
        }
    }
}

fn intercept(fitted: &Result<Fitted, Note>) -> Outcome {
    let (id, method, unit) = ("ve-vco2-intercept", "ols-without-shared-noise", Unit::LPerMin);
    match fitted {
        Err(reason) => Outcome::absent(id, At::Ramp, method, reason.clone()).in_unit(unit),
        Ok(f) => Outcome::quantity(id, At::Ramp, method, unit, f.line.intercept),
    }
}

/// Lowest 60-s mean over mean between the first minute of the increments and VT2.
fn nadir(stage: &Stage<'_>, vt2_s: Option<f64>) -> Outcome {
    let (id, method, unit) = ("ve-vco2-nadir", "lowest-60s", Unit::One);
    let absent = |reason| Outcome::absent(id, At::Ramp, method, reason).in_unit(unit);
    if let Some(reason) = stage.missing(&NEEDED) {
        return absent(reason);
    }
    let Some((from, to)) = stage.results.phases.ramp() else { return absent(stage.no_ramp()) };
    let within = (from + 60.0, vt2_s.unwrap_or(to));
    match stage.means.lowest(Quantity::EqCo2, NADIR_S, within) {
        Some((value, window)) => Outcome::quantity(id, At::Ramp, method, unit, value)
            .based_on(window, stage.breaths_in(window)),
        None => absent(Note::new("window-not-covered")),
    }
}
