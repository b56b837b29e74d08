//! Stroke volume and extraction: what the O₂ pulse allows to be said.
//!
//! O₂ pulse = stroke volume × C(a−v̄)O₂ ÷ 100 is exact; one number, two unknowns. Everything here
//! that goes further names the assumption that closes it.

mod bound;
mod content;
mod detail;
mod extraction;
mod factors;
mod outcomes;
mod plane;
mod rate;
mod shunt;

use crate::facts::Diagnosis;
use crate::o2_pulse::suppress::{circulation_not_simple, diagnosed};
use crate::quantity::Quantity;
use crate::results::{Arg, At, Interval, Note};
use crate::stage::Stage;
use crate::unit::Unit;
use bound::Blood;
use factors::Point;

pub use content::{arterial_content, body_surface, effective_hb, shunted_content};
pub use detail::{
    Bound, FactorRow, FactorTable, FickDetail, Model, Path, PathPoint, Ranged, RatePoint, Region,
    ShuntStep, equal_pulse_sv,
};
pub use extraction::{crisafulli_fraction, from_linear_output, linear_output, stringer};
pub(crate) use rate::NOTABLE as NOTABLE_RATE_DEFICIT;

/// Half of the window around a point, s.
const HALF_WINDOW_S: f64 = 15.0;
/// Step between points of a path, s.
const PATH_STEP_S: f64 = 30.0;

/// Derives the Fick outcomes; runs after the course and the predictions.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let detail = detail(stage);
    for outcome in outcomes::all(stage, &detail) {
        stage.push(outcome);
    }
    stage.results.fick = detail;
}

fn detail(stage: &Stage<'_>) -> FickDetail {
    let mut detail = FickDetail {
        withheld: circulation_not_simple(stage.facts),
        hb_stated: stage.facts.subject.hb.is_some(),
        ..FickDetail::default()
    };
    if let Some(reason) = stage.missing(&[Quantity::Vo2, Quantity::Hr]) {
        detail.withheld.push(reason);
    }
    let Some(ramp) = stage.results.phases.ramp() else {
        detail.withheld.push(stage.no_ramp());
        return detail;
    };
    detail.shunt = shunt::find(&stage.breaths, ramp, spo2_usable(stage));
    if !detail.withheld.is_empty() {
        return detail;
    }
    let settings = &stage.settings.fick;
    let blood = blood(stage);
    let size = (stage.facts.subject.height_cm, stage.facts.subject.mass_kg);
    detail.arterial_content = Some(plane::arterial_band(blood.as_ref(), settings));
    let region = plane::region(blood.as_ref(), size, settings);
    detail.region = Some(region);
    let points = path_points(stage, ramp, blood.as_ref());
    detail.equal_pulse = plane::equal_curves(&points);
    detail.pulse_at_peak = pulse_at_peak(stage);
    if let Some(peak_vo2) = stage.results.number("vo2-peak", At::Peak) {
        detail.paths = plane::paths(&points, peak_vo2, content_sd(stage));
        detail.table = table(stage, peak_vo2, blood.as_ref());
        detail.sentence = sentence(stage, detail.table.as_ref());
    }
    match (blood, detail.pulse_at_peak) {
        (None, _) => detail.no_bound = Some(Note::missing_fact("hb")),
        (_, None) => detail.no_bound = Some(Note::new("no-pulse-at-peak")),
        (Some(blood), Some(pulse)) => {
            detail.bound = Some(bound::bound(pulse, &blood, settings));
            if plane::cannot_be(pulse.value, &region) {
                detail.no_bound = Some(Note::new("fick-cannot-be"));
            }
        }
    }
    if let Some(line) = expected_rate(stage) {
        detail.rate = rate::points(&line, &points);
    }
    detail
}

/// Whether SpO₂ may enter the reasoning.
pub(crate) fn spo2_usable(stage: &Stage<'_>) -> bool {
    stage.facts.test.spo2_confirmed == Some(true)
}

fn blood(stage: &Stage<'_>) -> Option<Blood> {
    let subject = &stage.facts.subject;
    let spo2 = spo2_usable(stage).then(|| stage.results.number("spo2", At::Peak)).flatten();
    subject.hb.map(|hb| Blood::new(hb, subject.cohb, spo2, &stage.settings.fick))
}

fn content_sd(stage: &Stage<'_>) -> f64 {
    if diagnosed(stage.facts, Diagnosis::HeartFailure) {
        factors::CONTENT_SD_HEART_FAILURE
    } else {
        factors::CONTENT_SD
    }
}

/// O₂ pulse at peak with the interval of this recording, or, until there is one, ± 2 % (SD of a
/// 30-s mean).
fn pulse_at_peak(stage: &Stage<'_>) -> Option<Ranged> {
    let outcome = stage.results.primary("o2-pulse-at-peak", At::Peak)?;
    let value = outcome.number()?;
    let wide = Interval::around(value, 1.645 * factors::PULSE_SD * value);
    Some(Ranged { value, interval: outcome.recording.unwrap_or(wide) })
}

/// Means of 30 s around `t_s`.
fn point(stage: &Stage<'_>, t_s: f64, blood: Option<&Blood>) -> Option<Point> {
    let window = (t_s - HALF_WINDOW_S, t_s + HALF_WINDOW_S);
    let vo2 = stage.window_mean(Quantity::Vo2, window)?;
    let pulse = stage.window_mean(Quantity::O2Pulse, window)?;
    let work = stage.window_mean(Quantity::WorkRate, window);
    let peak_work = stage.results.number("work-rate-peak", At::Peak).filter(|w| *w > 0.0);
    let fraction_content = match (blood, work, peak_work) {
        (Some(blood), Some(work), Some(peak)) => {
            let fraction = crisafulli_fraction(work / peak);
            Some(fraction * content_at(stage, blood, window))
        }
        _ => None,
    };
    (vo2 > 0.0 && pulse > 0.0).then_some(Point { t_s, vo2, pulse, fraction_content })
}

/// Arterial content at a window: measured saturation where it may be used.
fn content_at(stage: &Stage<'_>, blood: &Blood, window: (f64, f64)) -> f64 {
    let spo2 = stage.window_mean(Quantity::Spo2, window).filter(|_| spo2_usable(stage));
    let saturation = spo2.map_or(0.98, |x| x / 100.0);
    let hb = effective_hb(blood.hb, blood.cohb);
    arterial_content(stage.settings.fick.hufner, hb, saturation, content::PAO2_ASSUMED)
}

fn path_points(stage: &Stage<'_>, ramp: (f64, f64), blood: Option<&Blood>) -> Vec<Point> {
    let (from, to) = (ramp.0 + 60.0, ramp.1 - HALF_WINDOW_S);
    let count = libm::floor((to - from) / PATH_STEP_S).max(-1.0) as i64 + 1;
    (0..count).rev().filter_map(|k| point(stage, to - PATH_STEP_S * k as f64, blood)).collect()
}

/// The two points: the reader's, else the ends of the late window.
fn table(stage: &Stage<'_>, peak_vo2: f64, blood: Option<&Blood>) -> Option<FactorTable> {
    let (a, b) = match stage.decisions.two_factor_s {
        Some(points) => points,
        None => {
            let late = stage.results.course.as_ref()?.late?;
            (late.from_s, late.to_s)
        }
    };
    let (a, b) = (point(stage, a.min(b), blood)?, point(stage, a.max(b), blood)?);
    Some(factors::table((a, b), peak_vo2, content_sd(stage)))
}

/// The conditional two-sided sentence, never one side alone.
fn sentence(stage: &Stage<'_>, table: Option<&FactorTable>) -> Option<Note> {
    let Some(table) = table else {
        let withheld = stage.results.course.as_ref().and_then(|c| c.withheld.first().cloned());
        return withheld;
    };
    if !table.points_down() {
        return Some(Note::new("factors-not-separable"));
    }
    let (a1, a2, b) = (table.row(Model::A1)?, table.row(Model::A2)?, table.row(Model::B)?);
    let percent = |x: f64| Arg::Number(x, Unit::Percent);
    Some(
        Note::new("factors-two-sided")
            .with("a1", percent(-a1.stroke_volume.value))
            .with("a2", percent(-a2.stroke_volume.value))
            .with("content", Arg::Number(b.content_end.value, Unit::MlPerDl)),
    )
}

/// The line from measured rest to predicted peak.
fn expected_rate(stage: &Stage<'_>) -> Option<rate::ExpectedRate> {
    let results = &stage.results;
    let rest = (results.number("vo2", At::Rest)?, results.number("hr", At::Rest)?);
    let predicted = |id: &str| results.number(id, At::Peak);
    let peak = (predicted("predicted-vo2-peak")?, predicted("predicted-hr-peak")?);
    (peak.0 > rest.0 + 200.0 && peak.1 > rest.1 + 10.0).then_some(rate::ExpectedRate { rest, peak })
}

pub(crate) use expected::{deficit_at_peak, own_rate_at_peak};

mod expected {
    //! The HR deficit at peak V̇O₂ with its interval, and the share of the rate by the own test.

    use super::rate::{ExpectedRate, OwnRate, own};
    use super::{At, Interval, Note, Ranged, Stage, expected_rate};

    /// Expected less measured HR at peak V̇O₂, /min.
    pub(crate) fn deficit_at_peak(stage: &Stage<'_>) -> Option<Ranged> {
        let line = expected_rate(stage)?;
        let vo2 = stage.results.number("vo2-peak", At::Peak)?;
        let pulse = stage.results.number("o2-pulse-at-peak", At::Peak)?;
        let value = line.at(vo2) - vo2 / pulse;
        Some(Ranged { value, interval: Interval::around(value, 1.645 * line.sd(vo2)) })
    }

    /// The share of the rate at peak V̇O₂ by the person's own earlier test, or why there is none.
    pub(crate) fn own_rate_at_peak(stage: &Stage<'_>) -> Result<OwnRate, Note> {
        let test = stage.facts.test.own_test.ok_or(Note::missing_fact("own_test"))?;
        let line = ExpectedRate { rest: test.low, peak: test.peak };
        let number = |id| stage.results.number(id, At::Peak).ok_or(Note::new("no-pulse-at-peak"));
        let (vo2, pulse) = (number("vo2-peak")?, number("o2-pulse-at-peak")?);
        own(&line, vo2, vo2 / pulse).ok_or(Note::new("outside-own-test"))
    }
}

#[cfg(test)]
mod tests;
