//! The fixed parts of the window around the view.

pub mod caution;
pub mod findings;
pub mod key_values;
pub mod statements;
pub mod top_bar;
pub mod value_strip;
pub mod view_row;
