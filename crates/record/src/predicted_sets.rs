//! Files of predicted sets, `rampcrest-predicted/1`: the bundled ones and a laboratory's own, one
//! parser for both. A malformed file is refused with its line and the reason.

mod bundled;
mod check;
mod into;
mod parse;
mod read;
mod schema;

pub use bundled::{bundled, default_settings};
pub use parse::{LARGEST, own, parse};

#[cfg(test)]
mod tests;
