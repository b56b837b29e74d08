//! How results are shown, in the window and on paper alike: rounding, words, labels.

pub mod charts;
pub mod choices;
pub mod how;
pub mod key_table;
pub mod labels;
pub mod values;
pub mod wording;
