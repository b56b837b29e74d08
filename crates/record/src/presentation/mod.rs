//! How results are shown, in the window and on paper alike: rounding, words, labels.

pub mod labels;
pub mod values;
pub mod wording;
