//! Blood samples and inspiratory-capacity manoeuvres at a time: dead space, arterial–end-tidal and
//! alveolar–arterial differences; the estimate without a sample is shown and never graded.

use crate::decisions::Phase;
use crate::facts::EventKind;
use crate::gas;
use crate::note::Note;
use crate::quantity::Quantity;
use crate::results::{At, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// How far from the end of rest or from peak a sample may stand, s (common practice).
const NEAR_S: f64 = 90.0;

/// Arterial or capillary values of one sample.
#[derive(Clone, Copy)]
struct Sample {
    t_s: f64,
    pao2: Option<f64>,
    paco2: Option<f64>,
}

/// Derives sample outcomes at rest and at peak.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let peak = stage.peak_window();
    let rest = stage.end_of(Phase::Rest, 60.0);
    for (at, window) in [(At::Rest, rest), (At::Peak, peak)] {
        let outcomes = [
            dead_space(stage, at, window),
            arterial_end_tidal(stage, at, window),
            alveolar_arterial(stage, at, window),
            estimated_dead_space(stage, at, window),
        ];
        for outcome in outcomes {
            stage.push(outcome);
        }
    }
    let lactate = lactate(stage);
    let capacity = inspiratory_capacity(stage, rest);
    stage.push(lactate);
    stage.push(capacity);
    for (at, window) in [(At::Rest, rest), (At::Peak, peak)] {
        let [expiratory, inspiratory] = lung_volumes(stage, at, window);
        stage.push(expiratory);
        stage.push(inspiratory);
    }
}

/// The sample nearest to `window`.
fn sample(stage: &Stage<'_>, window: Option<(f64, f64)>) -> Result<Sample, Note> {
    let window = window.ok_or_else(|| stage.no_ramp())?;
    let away = |t: f64| (window.0 - t).max(t - window.1).max(0.0);
    let samples = stage.facts.events.iter().filter_map(|e| match e.kind {
        EventKind::GasSample { pao2, paco2, .. } => Some(Sample { t_s: e.t_s, pao2, paco2 }),
        _ => None,
    });
    samples
        .filter(|s| away(s.t_s) <= NEAR_S)
        .min_by(|a, b| away(a.t_s).total_cmp(&away(b.t_s)))
        .ok_or_else(|| Note::missing_fact("gas-sample"))
}

/// 30 s around the sample.
fn around(t_s: f64) -> (f64, f64) {
    (t_s - 15.0, t_s + 15.0)
}

fn mean(stage: &Stage<'_>, quantity: Quantity, window: (f64, f64)) -> Result<f64, Note> {
    stage.window_mean(quantity, window).ok_or_else(|| {
        crate::peak::why_missing(stage, quantity).unwrap_or_else(|| Note::new("window-not-covered"))
    })
}

fn given(
    id: &'static str,
    at: At,
    method: &'static str,
    unit: Unit,
    value: Result<(f64, (f64, f64)), Note>,
) -> Outcome {
    match value {
        Ok((value, window)) => Outcome::quantity(id, at, method, unit, value).based_on(window, 0),
        Err(why) => Outcome::absent(id, at, method, why).in_unit(unit),
    }
}

fn mixed_expired(stage: &Stage<'_>, window: (f64, f64)) -> Result<f64, Note> {
    let vco2 = mean(stage, Quantity::Vco2, window)? / 1000.0;
    Ok(gas::mixed_expired_mmhg(vco2, mean(stage, Quantity::Ve, window)?))
}

fn dead_space(stage: &Stage<'_>, at: At, window: Option<(f64, f64)>) -> Outcome {
    let value = || {
        let sample = sample(stage, window)?;
        let paco2 = sample.paco2.ok_or_else(|| Note::missing_fact("paco2"))?;
        let near = around(sample.t_s);
        let mixed = mixed_expired(stage, near)?;
        // The apparatus dead space is not known, so it stays in the result.
        Ok((gas::dead_space_share(paco2, mixed, 0.0, 1.0), near))
    };
    given("vd-vt", at, "enghoff-with-sample", Unit::One, value())
}

fn arterial_end_tidal(stage: &Stage<'_>, at: At, window: Option<(f64, f64)>) -> Outcome {
    let value = || {
        let sample = sample(stage, window)?;
        let paco2 = sample.paco2.ok_or_else(|| Note::missing_fact("paco2"))?;
        let near = around(sample.t_s);
        Ok((paco2 - mean(stage, Quantity::Petco2, near)?, near))
    };
    given("pa-et-co2", at, "sample-less-end-tidal", Unit::MmHg, value())
}

fn alveolar_arterial(stage: &Stage<'_>, at: At, window: Option<(f64, f64)>) -> Outcome {
    let pressure = stage.recording.ambient.pressure_mmhg;
    let value = || {
        let sample = sample(stage, window)?;
        let paco2 = sample.paco2.ok_or_else(|| Note::missing_fact("paco2"))?;
        let pao2 = sample.pao2.ok_or_else(|| Note::missing_fact("pao2"))?;
        let near = around(sample.t_s);
        let rer = mean(stage, Quantity::Rer, near)?;
        let fio2 = stage.facts.test.fio2.unwrap_or(gas::FIO2_ROOM);
        let alveolar = gas::alveolar_po2(fio2, pressure.unwrap_or(760.0), paco2, rer);
        Ok((alveolar - pao2, near))
    };
    let outcome = given("pa-a-o2", at, "alveolar-gas-equation", Unit::MmHg, value());
    if outcome.value.is_some() && pressure.is_none() {
        return outcome.doubting(Note::new("pressure-assumed-760"));
    }
    outcome
}

fn estimated_dead_space(stage: &Stage<'_>, at: At, window: Option<(f64, f64)>) -> Outcome {
    let value = || {
        let window = window.ok_or_else(|| stage.no_ramp())?;
        let petco2 = mean(stage, Quantity::Petco2, window)?;
        let estimate = gas::jones_paco2(petco2, mean(stage, Quantity::Vt, window)?);
        let mixed = mixed_expired(stage, window)?;
        Ok((gas::dead_space_share(estimate, mixed, 0.0, 1.0), window))
    };
    let outcome = given("vd-vt-estimated", at, "jones-1979", Unit::One, value());
    if outcome.value.is_some() {
        return outcome.doubting(Note::new("estimate-never-graded"));
    }
    outcome
}

/// Highest lactate noted.
fn lactate(stage: &Stage<'_>) -> Outcome {
    let samples = stage.facts.events.iter().filter_map(|e| match e.kind {
        EventKind::Lactate(Some(x)) => Some((x, (e.t_s, e.t_s))),
        _ => None,
    });
    let highest = samples.max_by(|a, b| a.0.total_cmp(&b.0));
    let value = highest.ok_or_else(|| Note::missing_fact("lactate"));
    given("lactate-highest", At::Test, "highest-sample", Unit::MmolPerL, value)
}

/// Manoeuvres as (s, L): the last at rest or in warm-up, and the last under load.
fn manoeuvres(stage: &Stage<'_>, rest: Option<(f64, f64)>) -> [Option<(f64, f64)>; 2] {
    let Some(ramp) = stage.results.phases.ramp() else { return [None, None] };
    let before = rest.map_or(ramp.0, |r| r.1);
    let mut at = stage.facts.events.iter().filter_map(|e| match e.kind {
        EventKind::IcManoeuvre(Some(x)) => Some((e.t_s, x)),
        _ => None,
    });
    let resting = at.clone().rfind(|(t, _)| *t <= before);
    [resting, at.rfind(|(t, _)| *t > ramp.0 && *t <= ramp.1 + 15.0)]
}

/// End-expiratory lung volume, TLC − IC, and end-inspiratory, that plus the tidal volume of the 30 s
/// before the manoeuvre.
fn lung_volumes(stage: &Stage<'_>, at: At, rest: Option<(f64, f64)>) -> [Outcome; 2] {
    let found = || {
        let tlc = stage.facts.subject.tlc_l.filter(|x| *x > 0.0);
        let tlc = tlc.ok_or_else(|| Note::missing_fact("tlc"))?;
        let [resting, loaded] = manoeuvres(stage, rest.filter(|_| at == At::Rest));
        let taken = if at == At::Rest { resting } else { loaded };
        let (t, ic) = taken.ok_or_else(|| Note::missing_fact("ic-manoeuvre"))?;
        if ic >= tlc {
            return Err(Note::new("ic-above-tlc"));
        }
        Ok((tlc - ic, t))
    };
    let expiratory = found().map(|(volume, t)| (volume, (t, t)));
    let inspiratory = found().and_then(|(volume, t)| {
        let before = (t - 35.0, t - 5.0);
        Ok((volume + mean(stage, Quantity::Vt, before)?, before))
    });
    [
        given("eelv", at, "tlc-less-ic", Unit::Litre, expiratory),
        given("eilv", at, "eelv-plus-vt", Unit::Litre, inspiratory),
    ]
}

/// Inspiratory capacity of the last manoeuvre under load less that at rest, L.
fn inspiratory_capacity(stage: &Stage<'_>, rest: Option<(f64, f64)>) -> Outcome {
    let value = || {
        let [resting, loaded] = manoeuvres(stage, rest);
        let (rest, load) = resting.zip(loaded).ok_or_else(|| Note::missing_fact("ic-manoeuvre"))?;
        Ok((load.1 - rest.1, (rest.0, load.0)))
    };
    given("ic-change", At::Peak, "last-under-load-less-rest", Unit::Litre, value())
}
