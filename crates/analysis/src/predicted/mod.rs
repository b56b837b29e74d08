//! Predicted-normal values from published sets, and the model of a normal response.

mod candidates;
mod evaluate;
mod outcomes;
pub mod overlay;
mod person;
mod predicts;
pub mod sets;
pub mod validity;

use crate::stage::Stage;

pub use candidates::{Candidate, candidates, provenance};
pub use evaluate::{Prediction, evaluate};

/// Derives `predicted-…` outcomes and the overlay.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    if !stage.settings.sets.is_empty() {
        outcomes::derive(stage);
        overlay::derive(stage);
    }
}
