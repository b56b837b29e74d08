//! Charts in three parts: what is shown (`spec`), where (`layout`, `ticks`), how (`paint`), and the
//! handles that move on them (`interact`, `handles`).

pub mod column;
pub mod handles;
pub mod interact;
pub mod items;
pub mod layout;
pub mod paint;
pub mod spec;
pub mod thin;
pub mod ticks;
pub mod words;
