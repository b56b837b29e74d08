//! Reserves of heart rate and breathing, and products of heart rate, pressure and V̇O₂ at peak.

use crate::facts::Rhythm;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::results::{At, Outcome, Text};
use crate::stage::Stage;
use crate::unit::Unit;

/// Derives reserves and products; peak, table, slopes and predictions must be known.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let outcomes = [
        heart_rate_reserve(stage),
        chronotropic_index(stage),
        breathing_reserve(stage, false),
        breathing_reserve(stage, true),
        product(
            stage,
            "rate-pressure-product",
            Unit::MmHgPerMin,
            "hr-peak",
            At::Peak,
            |hr, sbp| hr * sbp,
        ),
        product(
            stage,
            "circulatory-power",
            Unit::MmHgMlPerKgMin,
            "vo2-peak-per-kg",
            At::Peak,
            |v, sbp| v * sbp,
        ),
        product(
            stage,
            "ventilatory-power",
            Unit::MmHg,
            "ve-vco2-slope-full",
            At::Ramp,
            |s, sbp| sbp / s,
        ),
    ];
    for outcome in outcomes {
        stage.push(outcome);
    }
}

/// The number of a primary outcome, or its reason.
pub(crate) fn known(stage: &Stage<'_>, id: &str, at: At) -> Result<f64, Note> {
    let outcome = stage.results.primary(id, at);
    outcome.and_then(Outcome::number).ok_or_else(|| {
        outcome.and_then(|o| o.reason.clone()).unwrap_or_else(|| Note::new("not-derived"))
    })
}

fn given(
    id: &'static str,
    at: At,
    method: impl Into<Text>,
    unit: Unit,
    value: Result<f64, Note>,
) -> Outcome {
    match value {
        Ok(value) => Outcome::quantity(id, at, method, unit, value),
        Err(why) => Outcome::absent(id, at, method, why).in_unit(unit),
    }
}

/// (HR peak − HR rest) / (top − HR rest).
fn share_of_reserve(stage: &Stage<'_>, top: Result<f64, Note>) -> Result<f64, Note> {
    let peak = known(stage, "hr-peak", At::Peak)?;
    let rest = known(stage, "hr", At::Rest)?;
    let top = top?;
    if top <= rest {
        return Err(Note::new("reserve-not-positive"));
    }
    Ok((peak - rest) / (top - rest))
}

/// Share of the reserve to predicted peak HR that was used, %.
fn heart_rate_reserve(stage: &Stage<'_>) -> Outcome {
    let predicted = stage.results.primary("predicted-hr-peak", At::Peak);
    let method = predicted.map_or(Text::from("predicted-hr"), |p| p.method.clone());
    let top = known(stage, "predicted-hr-peak", At::Peak);
    let value = share_of_reserve(stage, top).map(|x| 100.0 * x);
    rhythm_doubts(stage, given("hr-reserve-used", At::Peak, method, Unit::Percent, value))
}

/// Chronotropic index with 220 − age, the only top for which the 0.80 and 0.62 limits hold.
fn chronotropic_index(stage: &Stage<'_>) -> Outcome {
    let top = stage.facts.subject.age_years.ok_or_else(|| Note::missing_fact("age"));
    let value = share_of_reserve(stage, top.map(|age| 220.0 - age));
    let outcome = given("chronotropic-index", At::Peak, "220-less-age", Unit::One, value);
    rhythm_doubts(stage, outcome)
}

fn rhythm_doubts(stage: &Stage<'_>, mut outcome: Outcome) -> Outcome {
    if outcome.value.is_none() {
        return outcome;
    }
    match stage.facts.test.rhythm {
        Some(Rhythm::Sinus) => {}
        Some(_) => outcome.doubts.push(Note::new("rate-not-sinus")),
        None => outcome.doubts.push(Note::new("rhythm-not-stated")),
    }
    if stage.facts.test.rate_slowing_drug.taken == Some(true) {
        outcome.doubts.push(Note::new("rate-slowing-drug"));
    }
    outcome
}

/// 100·(1 − V̇E/MVV) %, or MVV − V̇E in L/min; MVV measured, else FEV₁ times a stated factor.
fn breathing_reserve(stage: &Stage<'_>, absolute: bool) -> Outcome {
    let subject = &stage.facts.subject;
    let positive = |x: Option<f64>| x.filter(|x| *x > 0.0);
    let factor = stage.settings.mvv_factor;
    let (mvv, method): (Result<f64, Note>, Text) =
        match (positive(subject.mvv_l_min), positive(subject.fev1_l)) {
            (Some(mvv), _) => (Ok(mvv), "mvv-measured".into()),
            (None, Some(fev1)) => (Ok(factor * fev1), format!("mvv-fev1-x-{factor:.0}").into()),
            (None, None) => (Err(Note::missing_fact("fev1")), "mvv".into()),
        };
    let peak = known(stage, "ve-peak", At::Peak);
    let value = peak.and_then(|ve| {
        mvv.clone().map(|mvv| if absolute { mvv - ve } else { 100.0 * (1.0 - ve / mvv) })
    });
    let (id, unit) = if absolute {
        ("breathing-reserve-absolute", Unit::LPerMin)
    } else {
        ("breathing-reserve", Unit::Percent)
    };
    let mut outcome = given(id, At::Peak, method, unit, value);
    if let (Some(value), Ok(mvv)) = (outcome.number(), mvv) {
        outcome.doubts.push(Note::new("mvv-used").with("mvv", Arg::Number(mvv, Unit::LPerMin)));
        if value < 0.0 {
            outcome.doubts.push(Note::new("breathing-reserve-negative"));
        }
    }
    outcome
}

/// A product with systolic pressure at peak (read within 60 s of it).
fn product(
    stage: &Stage<'_>,
    id: &'static str,
    unit: Unit,
    other: &str,
    other_at: At,
    form: impl Fn(f64, f64) -> f64,
) -> Outcome {
    let value = known(stage, other, other_at)
        .and_then(|x| known(stage, Quantity::SysBp.code(), At::Peak).map(|sbp| form(x, sbp)));
    given(id, At::Peak, "with-sbp-at-peak", unit, value)
}
