//! Recovery: fall of heart rate in the first minute, decline of V̇O₂, rise of RER.

use crate::decisions::Phase;
use crate::facts::RecoveryMode;
use crate::long_run;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::regression;
use crate::repeatability::Z90;
use crate::results::{At, Interval, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Calibrated factor of the HR recovery.
const F: f64 = 1.31;
const BIN_S: f64 = 5.0;
/// Fewest HR values in each window.
const FEWEST: usize = 2;

/// Derives the recovery outcomes.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let hr = heart_rate(stage);
    let half = half_time(stage);
    let delay = delay(stage);
    let overshoot = rer_overshoot(stage);
    for outcome in [hr, half, delay, overshoot] {
        stage.push(outcome);
    }
}

/// Load end and end of record, or why there is no recovery of `least_s`.
fn recovery(stage: &Stage<'_>, least_s: f64) -> Result<(f64, f64), Note> {
    if stage.results.phases.ramp().is_none() {
        return Err(stage.no_ramp());
    }
    let (from, to) =
        stage.results.phases.window(Phase::Recovery).ok_or_else(|| Note::new("no-recovery"))?;
    if to < from + least_s { Err(Note::new("recovery-too-short")) } else { Ok((from, to)) }
}

/// Mean HR of the last 10 s of load less the mean of 55–65 s after it (Cole et al., NEJM 1999, with
/// windows).
fn heart_rate(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("hr-recovery-1min", "last-10s-less-55-to-65s", Unit::PerMin);
    let absent = |why| Outcome::absent(id, At::Recovery1Min, method, why).in_unit(unit);
    if let Some(why) = stage.missing(&[Quantity::Hr]) {
        return absent(why);
    }
    let end = match recovery(stage, 60.0) {
        Ok((end, _)) => end,
        Err(why) => return absent(why),
    };
    let (before, after) = ((end - 10.0, end), (end + 55.0, end + 65.0));
    let means = stage.window_mean(Quantity::Hr, before).zip(stage.window_mean(Quantity::Hr, after));
    let Some((top, later)) = means else { return absent(Note::new("window-not-covered")) };
    let half = error(stage, end).map(|se| Z90 * F * se);
    let value = top - later;
    let mut outcome = Outcome::quantity(id, At::Recovery1Min, method, unit, value)
        .recorded_within(
            half.filter(|_| stage.intervals_hold()).map(|h| Interval::around(value, h)),
        )
        .repeated_within(None)
        .based_on((before.0, after.1), stage.breaths_in(before) + stage.breaths_in(after));
    let mode = match stage.facts.test.recovery_mode {
        None => "recovery-mode-not-stated",
        Some(RecoveryMode::Active) => "recovery-active",
        Some(RecoveryMode::Passive) => "recovery-passive",
        Some(RecoveryMode::Supine) => "recovery-supine",
    };
    outcome = outcome.doubting(Note::new(mode));
    if let Some(peak) = stage.results.primary("hr-peak", At::Peak)
        && peak.basis.window_s.is_some_and(|w| end - w.1 > 10.0)
        && peak.number().is_some_and(|x| x > top + 1.0)
    {
        outcome = outcome.doubting(Note::new("hr-peak-before-load-end"));
    }
    stage.doubt_interval(outcome)
}

/// Standard error: long-run noise about quadratics through the last 90 s of load and through
/// 20–120 s of recovery.
fn error(stage: &Stage<'_>, end: f64) -> Option<f64> {
    let part = |fit: (f64, f64), used: (f64, f64)| {
        let (t, mut hr) = stage.points(Quantity::Hr, fit);
        regression::remove_polynomial(&t, &mut hr, 2);
        let n = stage.points(Quantity::Hr, used).0.len().max(FEWEST);
        let lr = long_run::variance(&t, &hr, fit.0, BIN_S);
        Some(lr / n as f64).filter(|v| v.is_finite())
    };
    let before = part((end - 90.0, end), (end - 10.0, end))?;
    let after = part((end + 20.0, end + 120.0), (end + 55.0, end + 65.0))?;
    Some((before + after).sqrt())
}

/// Time from load end until the 20-s mean of V̇O₂ falls to half of peak V̇O₂ and stays there for
/// 15 s (Scrutinio et al. 1998).
fn half_time(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("vo2-half-time-recovery", "half-of-peak", Unit::Second);
    let absent = |why| Outcome::absent(id, At::Test, method, why).in_unit(unit);
    let (end, last, peak) = match vo2_recovery(stage) {
        Ok(found) => found,
        Err(why) => return absent(why),
    };
    match falls_below(stage, (end, last), 0.5 * peak, 15.0) {
        Some(t) => Outcome::quantity(id, At::Test, method, unit, t - end),
        None => absent(Note::new("half-not-reached")),
    }
}

/// Time from load end until V̇O₂ falls for good below its peak (Bailey et al., JACC HF 2018).
fn delay(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("vo2-recovery-delay", "below-peak-for-good", Unit::Second);
    let absent = |why| Outcome::absent(id, At::Test, method, why).in_unit(unit);
    let (end, last, peak) = match vo2_recovery(stage) {
        Ok(found) => found,
        Err(why) => return absent(why),
    };
    let steps = (last - end).floor().clamp(0.0, 3600.0) as usize;
    let above =
        (0..=steps).map(|k| end + k as f64).rfind(|t| around(stage, *t).is_some_and(|x| x >= peak));
    Outcome::quantity(id, At::Test, method, unit, above.map_or(0.0, |t| t - end))
}

fn vo2_recovery(stage: &Stage<'_>) -> Result<(f64, f64, f64), Note> {
    if let Some(why) = stage.missing(&[Quantity::Vo2]) {
        return Err(why);
    }
    let (end, last) = recovery(stage, 30.0)?;
    let peak = stage
        .results
        .number("vo2-peak", At::Peak)
        .ok_or_else(|| Note::new("window-not-covered"))?;
    Ok((end, last, peak))
}

/// 20-s mean about `t`.
fn around(stage: &Stage<'_>, t: f64) -> Option<f64> {
    stage.window_mean(Quantity::Vo2, (t - 10.0, t + 10.0))
}

fn falls_below(stage: &Stage<'_>, (from, to): (f64, f64), level: f64, stay_s: f64) -> Option<f64> {
    let steps = (to - from - 10.0).floor().clamp(0.0, 3600.0) as usize;
    let (mut since, mut before): (Option<f64>, Option<f64>) = (None, None);
    for k in 0..=steps {
        let t = from + k as f64;
        let x = around(stage, t)?;
        if x > level {
            since = None;
        } else if since.is_none() {
            // The crossing lies between two grid points.
            let share = before.map_or(1.0, |b| ((b - level) / (b - x)).clamp(0.0, 1.0));
            since = Some(t - 1.0 + share);
        }
        if since.is_some_and(|s| t - s >= stay_s) {
            return since.map(|s| s.max(from));
        }
        before = Some(x);
    }
    None
}

/// Highest 30-s RER of recovery over RER at peak V̇O₂.
fn rer_overshoot(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("rer-overshoot", "highest-30s-less-peak", Unit::One);
    let absent = |why| Outcome::absent(id, At::Test, method, why).in_unit(unit);
    if let Some(why) = stage.missing(&[Quantity::Vco2, Quantity::Vo2]) {
        return absent(why);
    }
    let window = match recovery(stage, 60.0) {
        Ok(window) => window,
        Err(why) => return absent(why),
    };
    let peak = stage.peak_window().and_then(|w| stage.window_mean(Quantity::Rer, w));
    match stage.means.highest(Quantity::Rer, 30.0, window).zip(peak) {
        Some(((top, at), peak)) => Outcome::quantity(id, At::Test, method, unit, top - peak)
            .based_on(at, stage.breaths_in(at))
            .doubting(Note::new("rer-overshoot-top").with("top", Arg::Number(top, unit))),
        None => absent(Note::new("window-not-covered")),
    }
}
