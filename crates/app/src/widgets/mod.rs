//! Small widgets shared by panels and views.

pub mod button;
pub mod marks;
pub mod missing;
pub mod notes;
pub mod text;
