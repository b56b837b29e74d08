//! The model of a normal response.

/// The overlay, or why it is not drawn.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct OverlayOutcome {}
