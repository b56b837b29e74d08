//! The ventilatory thresholds.

/// Chart data of the thresholds.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct ThresholdDetail {}
