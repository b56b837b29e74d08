//! Predicted-normal values from published sets, and the model of a normal response.

mod candidates;
pub mod chooser;
pub mod classes;
mod evaluate;
mod express;
mod outcomes;
pub mod overlay;
mod person;
mod predicts;
mod reading;
pub mod sets;
mod size;
pub mod validity;

use crate::stage::Stage;

pub use candidates::{Candidate, candidates, provenance};
pub use evaluate::{Prediction, evaluate};
pub(crate) use express::votes;

/// Derives `predicted-…` outcomes and the overlay.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    if !stage.settings.sets.is_empty() {
        outcomes::derive(stage);
        overlay::derive(stage);
    }
}

/// Compares with the predictions, and gives the published classes of the indication; runs once
/// effort is known.
pub(crate) fn express(stage: &mut Stage<'_>) {
    if !stage.settings.sets.is_empty() {
        express::derive(stage);
    }
    classes::derive(stage);
}
