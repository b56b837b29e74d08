//! The pipeline, in reading order.

use crate::averaging::Means;
use crate::decisions::Decisions;
use crate::facts::Facts;
use crate::recording::Recording;
use crate::results::{At, Results};
use crate::settings::Settings;
use crate::stage::Stage;
use crate::{clean, fick, o2_pulse, peak, phases, predicted, reasoning, table};

/// Derives everything from the recording and the reader's judgement. Pure and total: what cannot
/// be derived is an outcome with its reason.
#[must_use]
pub fn derive(
    recording: &Recording,
    facts: &Facts,
    decisions: &Decisions,
    settings: &Settings,
) -> Results {
    let mut results = Results::default();
    (results.phases, results.doubts) = phases::derive(recording, &decisions.phases);
    let cleaned = clean::clean(recording, &decisions.excluded, &facts.events);
    results.flags = cleaned.flags;
    let means = Means::new(&cleaned.breaths, &recording.gaps);
    let anchor_s = results.phases.ramp().map_or(0.0, |r| r.0);
    results.series = means.series(settings.averaging, anchor_s);
    let breaths = cleaned.breaths;
    let mut stage = Stage { recording, facts, decisions, settings, breaths, means, results };

    peak::derive(&mut stage);
    let per_kg = peak::per_kg(&stage, "vo2-peak", "vo2-peak-per-kg", At::Peak);
    stage.push(per_kg);
    table::derive(&mut stage);

    predicted::derive(&mut stage);
    o2_pulse::derive(&mut stage);
    fick::derive(&mut stage);
    reasoning::derive(&mut stage);
    stage.results
}
