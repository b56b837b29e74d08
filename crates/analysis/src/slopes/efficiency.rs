//! Oxygen uptake efficiency slope: V̇O₂ on log₁₀ V̇E (Baba et al., J Am Coll Cardiol 1996).

use super::{fit, series_for};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::repeatability::{self, CV_OUES};
use crate::results::{At, Outcome};
use crate::smooth;
use crate::stage::Stage;
use crate::unit::Unit;

/// Calibrated factor, tuned on simulated tests of seeds below 10,000.
const F: f64 = 1.33;

/// Derives OUES over all, the first three quarters and the first half of the increments.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let unit = Unit::MlPerMin;
    let parts = [("oues", 1.0), ("oues-75", 0.75), ("oues-50", 0.5)];
    let method = "vo2-on-log-ve";
    let points = series_for(stage, &[Quantity::Vo2, Quantity::Ve]).and_then(|series| {
        let (vo2, ve) = series
            .vo2
            .as_ref()
            .zip(series.ve.as_ref())
            .ok_or_else(|| Note::new("too-few-breaths"))?;
        let x: Vec<f64> = ve.hat.iter().map(|v| libm::log10(v.max(f64::MIN_POSITIVE))).collect();
        Ok((x, smooth::cleaned(vo2, ve)))
    });
    for (id, share) in parts {
        let fitted = points.as_ref().map_err(Clone::clone).and_then(|(x, y)| {
            let series = stage.ramp_series.as_ref().ok_or_else(|| stage.no_ramp())?;
            let n = series.until(series.ramp.0 + share * (series.ramp.1 - series.ramp.0));
            fit(series, &series.t_s[..n], &x[..n], &y[..n], F)
        });
        let outcome = match fitted {
            Err(reason) => Outcome::absent(id, At::Ramp, method, reason).in_unit(unit),
            Ok(f) => {
                let mut outcome = Outcome::quantity(id, At::Ramp, method, unit, f.line.slope);
                outcome.basis.breaths = f.line.n;
                outcome.basis.window_s = stage.results.phases.ramp();
                if share == 1.0 {
                    let interval = f.interval.filter(|_| stage.intervals_hold());
                    let repeat = repeatability::widen(f.line.slope, interval, &[CV_OUES]);
                    stage.results.slopes.oues.lines.push(f.chart);
                    outcome = outcome.recorded_within(interval).repeated_within(Some(repeat));
                    outcome = stage.doubt_interval(outcome);
                }
                outcome
            }
        };
        stage.push(outcome);
    }
    if let Ok((x, y)) = points {
        stage.results.slopes.oues.x = x;
        stage.results.slopes.oues.y = y;
    }
}
