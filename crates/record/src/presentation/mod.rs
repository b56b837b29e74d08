//! How results are shown, in the window and on paper alike: rounding, words, labels.

pub mod charts;
pub mod key_table;
pub mod labels;
pub mod values;
pub mod wording;
