//! The pipeline, in reading order.

use crate::decisions::Decisions;
use crate::facts::Facts;
use crate::recording::Recording;
use crate::results::Results;
use crate::settings::Settings;
use crate::stage::Stage;
use crate::{fick, o2_pulse, predicted, reasoning};

/// Derives everything from the recording and the reader's judgement. Pure and total: what cannot
/// be derived is an outcome with its reason.
#[must_use]
pub fn derive(
    recording: &Recording,
    facts: &Facts,
    decisions: &Decisions,
    settings: &Settings,
) -> Results {
    let mut stage = Stage {
        recording,
        facts,
        decisions,
        settings,
        breaths: recording.breaths.clone(),
        results: Results::default(),
    };
    predicted::derive(&mut stage);
    o2_pulse::derive(&mut stage);
    fick::derive(&mut stage);
    reasoning::derive(&mut stage);
    stage.results
}
