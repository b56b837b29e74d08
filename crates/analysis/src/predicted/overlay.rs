//! The model of a normal response.

/// The overlay, or why it is not drawn.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OverlayOutcome {}

/// V̇O₂ of unloaded pedalling at 60 rpm, mL/min (from memory; common practice).
#[must_use]
pub fn unloaded_vo2(mass_kg: f64) -> f64 {
    5.8 * mass_kg + 151.0
}
