//! The pipeline, in reading order.

use crate::averaging::Means;
use crate::decisions::Decisions;
use crate::facts::Facts;
use crate::ramp_series::RampSeries;
use crate::recording::{Recording, RowKind};
use crate::results::Results;
use crate::settings::Settings;
use crate::stage::Stage;
use crate::{
    clean, effort, fick, irregularity, o2_pulse, oscillation, peak, phases, predicted, protocol,
    quality, reasoning, recovery, reserve, samples, slopes, table, thresholds,
};

/// Derives everything from the recording and the reader's judgement. Pure and total: what cannot
/// be derived is an outcome with its reason.
#[must_use]
pub fn derive(
    recording: &Recording,
    facts: &Facts,
    decisions: &Decisions,
    settings: &Settings,
) -> Results {
    let mut stage = prepare(recording, facts, decisions, settings);

    peak::derive(&mut stage);
    thresholds::derive(&mut stage);
    slopes::derive(&mut stage);
    table::derive(&mut stage);
    recovery::derive(&mut stage);
    samples::derive(&mut stage);
    protocol::derive(&mut stage);
    irregularity::derive(&mut stage);
    quality::derive(&mut stage);

    predicted::derive(&mut stage);
    reserve::derive(&mut stage);
    effort::derive(&mut stage);
    predicted::express(&mut stage);
    o2_pulse::derive(&mut stage);
    fick::derive(&mut stage);
    reasoning::derive(&mut stage);
    stage.results
}

/// Phases, cleaned breaths, averages and the series of the increments.
pub(crate) fn prepare<'a>(
    recording: &'a Recording,
    facts: &'a Facts,
    decisions: &'a Decisions,
    settings: &'a Settings,
) -> Stage<'a> {
    let mut results = Results::default();
    (results.phases, results.doubts) = phases::derive(recording, &decisions.phases);
    let taken = clean::clean(recording, &decisions.excluded, &facts.events);
    let found = oscillation::look(&taken.breaths, recording, &results.phases);
    let oscillating = found.present();
    let cleaned = if oscillating || matches!(recording.row_kind, RowKind::Averaged { .. }) {
        taken
    } else {
        clean::merge_errant(taken, &results.phases, settings.errant_k, &mut results.doubts)
    };
    results.flags = cleaned.flags;
    let means = Means::new(&cleaned.breaths, &recording.gaps);
    let ramp = results.phases.ramp();
    results.series = means.series(settings.averaging, ramp.map_or(0.0, |r| r.0));
    let ramp_series = ramp.map(|ramp| RampSeries::new(&cleaned.breaths, ramp));
    let breaths = cleaned.breaths;
    let mut stage = Stage {
        recording,
        facts,
        decisions,
        settings,
        breaths,
        means,
        ramp_series,
        oscillating,
        results,
    };
    oscillation::derive(&mut stage, &found);
    stage
}
