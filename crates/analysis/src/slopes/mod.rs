//! Slopes over the increments: V̇E–V̇CO₂, oxygen uptake efficiency, V̇O₂–work rate, HR–work rate.
//!
//! Each is an ordinary least-squares slope of a response without the noise it shares with the
//! other axis. Interval: ± 1.645·f·√(LR/Sxx), where LR is the long-run variance of the residual
//! minus its own cubic in time and f the factor calibrated by simulation.

mod efficiency;
mod ventilation;
mod work;

use crate::long_run;
use crate::note::Note;
use crate::ramp_series::{BIN_S, RampSeries};
use crate::regression::{self, Line};
use crate::repeatability::Z90;
use crate::results::Interval;
use crate::stage::Stage;

/// Widening of the factors where the export was averaged over a few breaths.
const PRE_SMOOTHED: f64 = 1.10;

/// A fitted line for a chart.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ChartLine {
    /// Slope.
    pub slope: f64,
    /// Value at x = 0.
    pub intercept: f64,
    /// First and last x of the fit.
    pub x: (f64, f64),
    /// Share of variance explained.
    pub r_squared: f64,
}

/// Points and lines of one slope chart.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SlopeChart {
    /// Abscissa.
    pub x: Vec<f64>,
    /// Ordinate.
    pub y: Vec<f64>,
    /// Lines, the primary first.
    pub lines: Vec<ChartLine>,
}

/// Chart data of the slopes.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SlopeDetail {
    /// V̇E (L/min, without shared noise) on V̇CO₂ (L/min, smoothed); lines: to VT2, full.
    pub ve_vco2: SlopeChart,
    /// V̇O₂ (mL/min) on log₁₀ V̇E (L/min).
    pub oues: SlopeChart,
    /// V̇O₂ (mL/min) on work rate (W).
    pub vo2_work: SlopeChart,
}

/// Derives the slopes; the thresholds must be known.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    ventilation::derive(stage);
    efficiency::derive(stage);
    work::derive(stage);
}

/// A slope with its interval.
struct Fitted {
    line: Line,
    interval: Option<Interval>,
    chart: ChartLine,
}

/// Fits `y` on `x` at times `t_s`; `factor` is the calibrated one.
fn fit(
    series: &RampSeries,
    t_s: &[f64],
    x: &[f64],
    y: &[f64],
    factor: f64,
) -> Result<Fitted, Note> {
    let line = regression::line(x, y).ok_or_else(|| Note::new("too-few-breaths"))?;
    if line.n < 12 {
        return Err(Note::new("too-few-breaths"));
    }
    let mut residual: Vec<f64> = x.iter().zip(y).map(|(x, y)| y - line.at(*x)).collect();
    regression::remove_polynomial(t_s, &mut residual, 3);
    let lr = long_run::variance(t_s, &residual, series.ramp.0, BIN_S);
    let factor = if series.pre_smoothed { factor * PRE_SMOOTHED } else { factor };
    let half = Z90 * factor * (lr / line.sxx).sqrt();
    let ends = x.iter().fold((f64::MAX, f64::MIN), |(a, b), x| (a.min(*x), b.max(*x)));
    let chart = ChartLine {
        slope: line.slope,
        intercept: line.intercept,
        x: ends,
        r_squared: regression::r_squared(&line, x, y),
    };
    let interval = half.is_finite().then(|| Interval::around(line.slope, half));
    Ok(Fitted { line, interval, chart })
}

/// The series of the increments, or why there is none for these channels.
fn series_for<'s>(
    stage: &'s Stage<'_>,
    needed: &[crate::quantity::Quantity],
) -> Result<&'s RampSeries, Note> {
    if let Some(reason) = stage.missing(needed) {
        return Err(reason);
    }
    stage.ramp_series.as_ref().ok_or_else(|| stage.no_ramp())
}
