//! A published set of prediction equations, as data.

/// A published set, coefficients as data; parsed outside this crate.
#[derive(Clone, Debug, PartialEq)]
pub struct PredictedSet {
    /// Stable id, e.g. `hansen-1984`.
    pub id: String,
}
