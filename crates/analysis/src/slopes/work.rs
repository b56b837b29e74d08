//! V̇O₂ and HR on work rate: only on a cycle and where the load rose linearly.

use super::{fit, series_for};
use crate::facts::Mode;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::regression;
use crate::results::{At, LoadShape, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Start after the start of the increments, s.
const FROM_S: f64 = 90.0;
/// Calibrated factor.
const F: f64 = 0.95;
/// The closing seconds that the late HR slope leaves out (common practice).
const LAST_S: f64 = 10.0;

/// Derives ΔV̇O₂/ΔWR (whole, to VT1, after VT1) and ΔHR/ΔWR with its change at VT1.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let unit = Unit::MlPerMinPerWatt;
    let vt1_s = stage.results.thresholds.vt1_s;
    let parts = [
        ("dvo2-dwr", Ok((FROM_S, None))),
        ("dvo2-dwr-to-vt1", vt1_s.map(|t| (FROM_S, Some(t))).ok_or(())),
        ("dvo2-dwr-after-vt1", vt1_s.map(|t| (t, None)).ok_or(())),
    ];
    let rate = linear_rate(stage);
    for (i, (id, part)) in parts.into_iter().enumerate() {
        let found = rate.clone().and_then(|rate| {
            let (from, to) = part.map_err(|()| no_vt1(stage))?;
            let from =
                if i == 2 { from } else { stage.results.phases.ramp().map_or(0.0, |r| r.0) + from };
            segment(stage, rate, from, to)
        });
        let outcome = match found {
            Err(reason) => {
                Outcome::absent(id, At::Ramp, "vo2-on-linear-load", reason).in_unit(unit)
            }
            Ok((f, x, y)) => {
                let mut outcome =
                    Outcome::quantity(id, At::Ramp, "vo2-on-linear-load", unit, f.line.slope);
                outcome.basis.breaths = f.line.n;
                outcome.basis.window_s = stage.results.phases.ramp();
                if i == 0 {
                    stage.results.slopes.vo2_work = super::SlopeChart { x, y, lines: Vec::new() };
                    let interval = f.interval.filter(|_| stage.intervals_hold());
                    outcome = outcome.recorded_within(interval).repeated_within(None);
                    outcome = stage.doubt_interval(outcome);
                    if stage.results.phases.load_shape == Some(LoadShape::Unknown) {
                        outcome = outcome.doubting(Note::new("load-as-stated"));
                    }
                }
                stage.results.slopes.vo2_work.lines.push(f.chart);
                outcome
            }
        };
        stage.push(outcome);
    }
    heart_rate(stage, rate, vt1_s);
}

fn no_vt1(stage: &Stage<'_>) -> Note {
    stage
        .results
        .primary("vt1-vo2", At::Vt1)
        .and_then(|o| o.reason.clone())
        .unwrap_or_else(|| Note::new("threshold-not-known"))
}

/// Rise of the load, W/min, and its load at the start, or why there is no linear one.
fn linear_rate(stage: &Stage<'_>) -> Result<(f64, f64), Note> {
    if stage.facts.test.mode == Some(Mode::Treadmill) {
        return Err(Note::new("withheld-treadmill"));
    }
    let Some(ramp) = stage.results.phases.ramp() else { return Err(stage.no_ramp()) };
    let rate = match stage.results.phases.load_shape {
        Some(LoadShape::Unknown) | None => {
            stage.ramp_rate().ok_or_else(|| Note::missing_channel(Quantity::WorkRate))?
        }
        Some(LoadShape::Constant | LoadShape::Other) => {
            return Err(Note::new("withheld-load-not-linear"));
        }
        Some(_) => stage.ramp_rate().ok_or_else(|| Note::new("withheld-load-not-linear"))?,
    };
    if !(rate > 0.0 && rate.is_finite()) {
        return Err(Note::new("withheld-load-not-linear"));
    }
    // Steps lead their straight line by half a step.
    let half_step = match stage.results.phases.load_shape {
        Some(LoadShape::Steps { step_w, .. }) => 0.5 * step_w,
        _ => 0.0,
    };
    let before = stage.recording.load.at(ramp.0 - 1.0).unwrap_or(0.0);
    if strays(stage, ramp, before, rate) {
        return Err(Note::new("withheld-load-not-linear"));
    }
    Ok((rate, before + half_step))
}

/// Whether the load strays from its straight line by more than 5 % of its rise, or one step.
fn strays(stage: &Stage<'_>, ramp: (f64, f64), before: f64, rate: f64) -> bool {
    let allowed = match stage.results.phases.load_shape {
        Some(LoadShape::Steps { step_w, .. }) => 1.6 * step_w,
        _ => (0.05 * rate * (ramp.1 - ramp.0) / 60.0).max(5.0),
    };
    let load = &stage.recording.load;
    let inside = load.t_s.iter().zip(&load.value).filter(|(t, _)| ramp.0 <= **t && **t < ramp.1);
    let mut off: Vec<f64> =
        inside.map(|(t, w)| (w - before - rate * (t - ramp.0) / 60.0).abs()).collect();
    // A few odd samples do not make a load non-linear.
    let at = off.len() * 9 / 10;
    at < off.len() && {
        off.sort_by(f64::total_cmp);
        off[at] > allowed
    }
}

type Segment = (super::Fitted, Vec<f64>, Vec<f64>);

fn segment(
    stage: &Stage<'_>,
    (rate, start): (f64, f64),
    from: f64,
    to: Option<f64>,
) -> Result<Segment, Note> {
    let series = series_for(stage, &[Quantity::Vo2])?;
    let vo2 = series.vo2.as_ref().ok_or_else(|| Note::new("too-few-breaths"))?;
    let first = series.until(from);
    let last = to.map_or(series.len(), |t| series.until(t)).max(first);
    let t = &series.t_s[first..last];
    let x: Vec<f64> = t.iter().map(|t| start + rate * (t - series.ramp.0) / 60.0).collect();
    let y = vo2.raw[first..last].to_vec();
    fit(series, t, &x, &y, F).map(|f| (f, x, y))
}

/// HR on work rate before and after VT1, and the change in per cent (Chaudhry et al. 2017; shown,
/// never classified).
fn heart_rate(stage: &mut Stage<'_>, rate: Result<(f64, f64), Note>, vt1_s: Option<f64>) {
    let ramp = stage.results.phases.ramp();
    let whole = |stage: &Stage<'_>| -> Result<f64, Note> {
        let (from, to) = ramp.ok_or_else(|| stage.no_ramp())?;
        hr_slope(stage, rate.clone()?, (from + 60.0, to))
    };
    let change = |stage: &Stage<'_>| -> Result<f64, Note> {
        let (from, to) = ramp.ok_or_else(|| stage.no_ramp())?;
        let rate = rate.clone()?;
        let vt1 = vt1_s.ok_or_else(|| no_vt1(stage))?;
        let early = hr_slope(stage, rate, (from + 60.0, vt1))?;
        let late = hr_slope(stage, rate, (vt1, to - LAST_S))?;
        if early <= 0.0 {
            return Err(Note::new("too-little-rise"));
        }
        Ok(100.0 * (late - early) / early)
    };
    let outcomes = [
        ("dhr-dwr", Unit::PerMinPerWatt, whole(stage)),
        ("dhr-dwr-change", Unit::Percent, change(stage)),
    ]
    .map(|(id, unit, value)| match value {
        Ok(value) => Outcome::quantity(id, At::Ramp, "hr-on-linear-load", unit, value),
        Err(reason) => Outcome::absent(id, At::Ramp, "hr-on-linear-load", reason).in_unit(unit),
    });
    for outcome in outcomes {
        stage.push(outcome);
    }
}

fn hr_slope(stage: &Stage<'_>, (rate, _): (f64, f64), window: (f64, f64)) -> Result<f64, Note> {
    if let Some(reason) = stage.missing(&[Quantity::Hr]) {
        return Err(reason);
    }
    let (t, hr) = stage.points(Quantity::Hr, window);
    let least = Arg::Count(12);
    if hr.len() < 12 {
        return Err(Note::new("too-few-breaths").with("least", least));
    }
    let line = regression::line(&t, &hr).ok_or_else(|| Note::new("too-few-breaths"))?;
    Ok(line.slope * 60.0 / rate)
}
