//! Peak values: highest rolling means inside loaded exercise.

use crate::facts::EventKind;
use crate::note::Note;
use crate::peak_interval;
use crate::quantity::Quantity;
use crate::repeatability::{self, CV_PEAK_O2_PULSE, CV_PEAK_VE};
use crate::results::{At, Interval, Outcome, Text};
use crate::stage::Stage;
use crate::unit::Unit;

/// Window of the highest heart rate, s (common practice).
const HR_WINDOW_S: f64 = 10.0;

/// Derives the peak values.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let width = stage.settings.peak_window_s;
    let raw = highest(stage, "vo2-peak", Quantity::Vo2, width);
    for outcome in peak_interval::vo2(stage, raw) {
        stage.push(outcome);
    }
    let per_kg = per_kg(stage, "vo2-peak", "vo2-peak-per-kg", At::Peak);
    stage.push(per_kg);
    let at_peak = o2_pulse_at_peak(stage);
    let highest_pulse = highest(stage, "o2-pulse-highest", Quantity::O2Pulse, width);
    let vco2 = highest(stage, "vco2-peak", Quantity::Vco2, width);
    let mut ve = highest(stage, "ve-peak", Quantity::Ve, width);
    if let Some(value) = ve.number() {
        ve = ve.repeated_within(Some(repeatability::widen(value, None, &[CV_PEAK_VE])));
    }
    let rer = highest(stage, "rer-peak", Quantity::Rer, width);
    let hr = highest(stage, "hr-peak", Quantity::Hr, HR_WINDOW_S);
    for outcome in [at_peak, highest_pulse, vco2, ve, rer, hr] {
        stage.push(outcome);
    }
    let work = peak_work_rate(stage);
    stage.push(work);
    let spo2 = lowest_saturation(stage);
    stage.push(spo2);
}

/// Channels that a quantity rests on.
pub(crate) fn channels(quantity: Quantity) -> &'static [Quantity] {
    match quantity {
        Quantity::O2Pulse => &[Quantity::Vo2, Quantity::Hr],
        Quantity::Rer => &[Quantity::Vco2, Quantity::Vo2],
        Quantity::EqO2 => &[Quantity::Ve, Quantity::Vo2],
        Quantity::EqCo2 => &[Quantity::Ve, Quantity::Vco2],
        other => QUANTITIES_ALONE[other as usize],
    }
}

const QUANTITIES_ALONE: [&[Quantity]; 20] = {
    use Quantity as Q;
    [
        &[Q::WorkRate],
        &[Q::Speed],
        &[Q::Grade],
        &[Q::Cadence],
        &[Q::Vo2],
        &[Q::Vco2],
        &[Q::Ve],
        &[Q::Vt],
        &[Q::Fr],
        &[Q::Hr],
        &[Q::RrInterval],
        &[Q::O2Pulse],
        &[Q::Rer],
        &[Q::EqO2],
        &[Q::EqCo2],
        &[Q::Peto2],
        &[Q::Petco2],
        &[Q::Spo2],
        &[Q::SysBp],
        &[Q::DiaBp],
    ]
};

/// Why `quantity` has no value: a missing channel.
pub(crate) fn why_missing(stage: &Stage<'_>, quantity: Quantity) -> Option<Note> {
    if stage.means.has(quantity) {
        return None;
    }
    stage.missing(channels(quantity)).or_else(|| Some(Note::missing_channel(quantity)))
}

fn highest(stage: &Stage<'_>, id: &'static str, quantity: Quantity, width: f64) -> Outcome {
    let method: Text = format!("highest-{width:.0}s").into();
    let unit = quantity.unit();
    let absent =
        |reason: Note, method: Text| Outcome::absent(id, At::Peak, method, reason).in_unit(unit);
    if let Some(reason) = why_missing(stage, quantity) {
        return absent(reason, method);
    }
    let Some(ramp) = stage.results.phases.ramp() else { return absent(stage.no_ramp(), method) };
    match stage.means.highest(quantity, width, ramp) {
        Some((value, window)) => Outcome::quantity(id, At::Peak, method, unit, value)
            .based_on(window, stage.breaths_in(window)),
        None => absent(Note::new("window-not-covered"), method),
    }
}

/// Mean V̇O₂ over mean HR of the window of peak V̇O₂.
fn o2_pulse_at_peak(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("o2-pulse-at-peak", "same-window-as-vo2-peak", Unit::MlPerBeat);
    let absent = |reason| Outcome::absent(id, At::Peak, method, reason).in_unit(unit);
    if let Some(reason) = why_missing(stage, Quantity::O2Pulse) {
        return absent(reason);
    }
    let Some(peak) = stage.results.primary("vo2-peak", At::Peak) else {
        return absent(stage.no_ramp());
    };
    let Some(window) = peak.basis.window_s else {
        return absent(peak.reason.clone().unwrap_or_else(|| stage.no_ramp()));
    };
    match stage.window_mean(Quantity::O2Pulse, window) {
        Some(value) => {
            let interval = peak.recording.zip(stage.window_mean(Quantity::Hr, window)).map(
                // HR over 30 s is known ten times better than V̇O₂; its share is left out.
                |(i, hr)| Interval { low: i.low / hr, high: i.high / hr },
            );
            let repeat = repeatability::widen(value, interval, &[CV_PEAK_O2_PULSE]);
            Outcome::quantity(id, At::Peak, method, unit, value)
                .recorded_within(interval)
                .repeated_within(Some(repeat))
                .based_on(window, stage.breaths_in(window))
        }
        None => absent(Note::new("window-not-covered")),
    }
}

/// Highest load set during the increments.
fn peak_work_rate(stage: &Stage<'_>) -> Outcome {
    let (id, method, unit) = ("work-rate-peak", "highest-load", Unit::Watt);
    let absent = |reason| Outcome::absent(id, At::Peak, method, reason).in_unit(unit);
    if let Some(reason) = stage.missing(&[Quantity::WorkRate]) {
        return absent(reason);
    }
    let Some((from, to)) = stage.results.phases.ramp() else { return absent(stage.no_ramp()) };
    let load = &stage.recording.load;
    let inside = load.t_s.iter().zip(&load.value).filter(|(t, _)| from <= **t && **t < to);
    let highest = inside.map(|(_, w)| *w).fold(load.at(from).unwrap_or(f64::NAN), f64::max);
    Outcome::quantity(id, At::Peak, method, unit, highest)
        .based_on((from, to), stage.breaths_in((from, to)))
}

/// Lowest saturation under load: lowest 10-s mean, else the lowest reading noted.
fn lowest_saturation(stage: &Stage<'_>) -> Outcome {
    let (id, unit) = ("spo2-lowest", Unit::Percent);
    let Some(ramp) = stage.results.phases.ramp() else {
        return Outcome::absent(id, At::Ramp, "lowest-10s", stage.no_ramp()).in_unit(unit);
    };
    let noted = stage.facts.events.iter().filter(|e| ramp.0 <= e.t_s && e.t_s <= ramp.1);
    let noted = noted.filter_map(|e| match e.kind {
        EventKind::Spo2(Some(x)) => Some((x, e.t_s)),
        _ => None,
    });
    let lowest_noted = noted.min_by(|a, b| a.0.total_cmp(&b.0));
    if let Some((value, window)) = stage.means.lowest(Quantity::Spo2, HR_WINDOW_S, ramp) {
        return Outcome::quantity(id, At::Ramp, "lowest-10s", unit, value)
            .based_on(window, stage.breaths_in(window));
    }
    match lowest_noted {
        Some((value, t)) => {
            Outcome::quantity(id, At::Ramp, "lowest-noted", unit, value).based_on((t, t), 0)
        }
        None => {
            let reason = why_missing(stage, Quantity::Spo2)
                .unwrap_or_else(|| Note::new("window-not-covered"));
            Outcome::absent(id, At::Ramp, "lowest-10s", reason).in_unit(unit)
        }
    }
}

/// `id` per kg of body mass, from the outcome just derived.
pub(crate) fn per_kg(stage: &Stage<'_>, of: &str, id: &'static str, at: At) -> Outcome {
    let unit = Unit::MlPerKgMin;
    let Some(source) = stage.results.primary(of, at) else {
        return Outcome::absent(id, at, "per-mass", stage.no_ramp()).in_unit(unit);
    };
    let absent = |reason| Outcome::absent(id, at, source.method.clone(), reason).in_unit(unit);
    let Some(value) = source.number() else {
        return absent(source.reason.clone().unwrap_or_else(|| stage.no_ramp()));
    };
    let Some(mass) = stage.facts.subject.mass_kg.filter(|m| *m > 0.0) else {
        return absent(Note::missing_fact("mass"));
    };
    let scaled = |i: Interval| Interval { low: i.low / mass, high: i.high / mass };
    let mut outcome = Outcome::quantity(id, at, source.method.clone(), unit, value / mass)
        .recorded_within(source.recording.map(scaled))
        .repeated_within(source.repeat.map(scaled));
    outcome.basis = source.basis.clone();
    outcome
}
