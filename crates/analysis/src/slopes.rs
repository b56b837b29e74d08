//! Slopes over the ramp.

/// Chart data of the slopes.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SlopeDetail {}
