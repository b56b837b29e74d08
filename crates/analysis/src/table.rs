//! The table of values at rest, warm-up, the thresholds, peak and one minute of recovery.

use crate::decisions::Phase;
use crate::facts::EventKind;
use crate::note::Note;
use crate::peak::why_missing;
use crate::quantity::Quantity;
use crate::repeatability::{self, CV_EQCO2_VT1, CV_EQO2_VT1};
use crate::results::{At, Outcome, Text};
use crate::stage::Stage;

/// Quantities of the table, in reading order.
pub const QUANTITIES: [Quantity; 16] = [
    Quantity::WorkRate,
    Quantity::Vo2,
    Quantity::Vco2,
    Quantity::Ve,
    Quantity::Vt,
    Quantity::Fr,
    Quantity::Hr,
    Quantity::O2Pulse,
    Quantity::Rer,
    Quantity::EqO2,
    Quantity::EqCo2,
    Quantity::Peto2,
    Quantity::Petco2,
    Quantity::Spo2,
    Quantity::SysBp,
    Quantity::DiaBp,
];

/// Places of the table, in reading order.
pub const PLACES: [At; 6] = [At::Rest, At::WarmUp, At::Vt1, At::Vt2, At::Peak, At::Recovery1Min];

/// Longest window at rest and in warm-up, s.
const STEADY_S: f64 = 60.0;
/// Window around a threshold and around one minute of recovery, s.
const AROUND_S: f64 = 30.0;
/// How far from a place a single reading (cuff, noted saturation) may stand, s.
const READING_S: f64 = 60.0;

/// Derives the table; the thresholds must be known.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    for at in PLACES {
        let window = window(stage, at);
        for quantity in QUANTITIES {
            let outcome = match &window {
                Ok((window, method)) => cell(stage, quantity, at, *window, method.clone()),
                Err(reason) => {
                    // The missing channel is the nearer reason.
                    let reason = missing(stage, quantity).unwrap_or_else(|| reason.clone());
                    Outcome::absent(quantity.code(), at, "window-mean", reason)
                        .in_unit(quantity.unit())
                }
            };
            stage.push(outcome);
        }
    }
}

/// Window and method of a place, or why there is none.
fn window(stage: &Stage<'_>, at: At) -> Result<((f64, f64), Text), Note> {
    let steady = |phase, code: &'static str| {
        let window = stage.end_of(phase, STEADY_S).ok_or_else(|| Note::new(code))?;
        Ok((window, Text::from(format!("last-{:.0}s", window.1 - window.0))))
    };
    let threshold = |id: &str| {
        let outcome = stage.results.primary(id, at).ok_or_else(|| stage.no_ramp())?;
        let (from, to) = outcome.basis.window_s.ok_or_else(|| {
            outcome.reason.clone().unwrap_or_else(|| Note::new("threshold-not-known"))
        })?;
        let t = 0.5 * (from + to);
        Ok(((t - AROUND_S / 2.0, t + AROUND_S / 2.0), Text::from("mean-30s")))
    };
    match at {
        At::Rest => steady(Phase::Rest, "no-rest"),
        At::WarmUp => steady(Phase::WarmUp, "no-warm-up"),
        At::Vt1 => threshold("vt1-vo2"),
        At::Vt2 => threshold("vt2-vo2"),
        At::Recovery1Min => {
            let (from, to) = stage
                .results
                .phases
                .window(Phase::Recovery)
                .ok_or_else(|| Note::new("no-recovery"))?;
            let window = (from + 60.0 - AROUND_S / 2.0, from + 60.0 + AROUND_S / 2.0);
            if to < from + 60.0 {
                return Err(Note::new("recovery-too-short"));
            }
            Ok((window, Text::from("mean-30s")))
        }
        _ => {
            let window = stage.peak_window().ok_or_else(|| stage.no_ramp())?;
            Ok((window, Text::from(format!("mean-{:.0}s", window.1 - window.0))))
        }
    }
}

fn missing(stage: &Stage<'_>, quantity: Quantity) -> Option<Note> {
    match quantity {
        Quantity::WorkRate => stage.missing(&[Quantity::WorkRate]),
        Quantity::SysBp | Quantity::DiaBp | Quantity::Spo2 if noted_at_all(stage, quantity) => None,
        other => why_missing(stage, other),
    }
}

fn noted_at_all(stage: &Stage<'_>, quantity: Quantity) -> bool {
    stage.facts.events.iter().any(|e| noted(e.kind, quantity).is_some())
}

/// The reading of `quantity` in an event.
fn noted(kind: EventKind, quantity: Quantity) -> Option<f64> {
    match (kind, quantity) {
        (EventKind::Bp { sys, .. }, Quantity::SysBp) => sys,
        (EventKind::Bp { dia, .. }, Quantity::DiaBp) => dia,
        (EventKind::Spo2(x), Quantity::Spo2) => x,
        _ => None,
    }
}

fn cell(
    stage: &Stage<'_>,
    quantity: Quantity,
    at: At,
    window: (f64, f64),
    method: Text,
) -> Outcome {
    let (id, unit) = (quantity.code(), quantity.unit());
    if let Some(reason) = missing(stage, quantity) {
        return Outcome::absent(id, at, method, reason).in_unit(unit);
    }
    if matches!(quantity, Quantity::SysBp | Quantity::DiaBp) {
        return reading(stage, quantity, at, window);
    }
    if let Some(value) = stage.window_mean(quantity, window) {
        let outcome = Outcome::quantity(id, at, method, unit, value)
            .based_on(window, stage.breaths_in(window));
        let cv = match (quantity, at) {
            (Quantity::EqO2, At::Vt1) => CV_EQO2_VT1,
            (Quantity::EqCo2, At::Vt1) => CV_EQCO2_VT1,
            _ => return outcome,
        };
        return outcome.repeated_within(Some(repeatability::widen(value, None, &[cv])));
    }
    if quantity == Quantity::Spo2 {
        return reading(stage, quantity, at, window);
    }
    Outcome::absent(id, at, method, Note::new("window-not-covered")).in_unit(unit)
}

/// A single reading nearest to the window, never interpolated.
fn reading(stage: &Stage<'_>, quantity: Quantity, at: At, window: (f64, f64)) -> Outcome {
    let (id, unit) = (quantity.code(), quantity.unit());
    // A cuff reading of a quiet phase stands for the whole of it, not for its last minute only.
    let phase = match at {
        At::Rest => Some(Phase::Rest),
        At::WarmUp => Some(Phase::WarmUp),
        _ => None,
    };
    let window = phase.and_then(|p| stage.results.phases.window(p)).unwrap_or(window);
    let away = |t: f64| (window.0 - t).max(t - window.1).max(0.0);
    let events = stage.facts.events.iter().filter_map(|e| Some((e.t_s, noted(e.kind, quantity)?)));
    let breaths = &stage.breaths;
    let rows =
        (0..breaths.len()).filter_map(|i| Some((breaths.end_s()[i], breaths.value(quantity, i)?)));
    // At equal distance the later reading stands: it belongs to the end of the window.
    let nearest = events
        .chain(rows)
        .filter(|(t, _)| away(*t) <= READING_S)
        .min_by(|a, b| away(a.0).total_cmp(&away(b.0)).then(b.0.total_cmp(&a.0)));
    match nearest {
        Some((t, value)) => {
            Outcome::quantity(id, at, "nearest-reading", unit, value).based_on((t, t), 0)
        }
        None => {
            Outcome::absent(id, at, "nearest-reading", Note::new("no-reading-near")).in_unit(unit)
        }
    }
}
