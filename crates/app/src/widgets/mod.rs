//! Small widgets shared by panels and views.

pub mod button;
pub mod missing;
pub mod notes;
pub mod text;
