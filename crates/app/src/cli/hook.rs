//! What a bug leaves behind: place and version, and nothing about the test that was open.

use std::panic;

use crate::shell::{libraries, words};

/// Replaces the message of a panic, which could carry data of the file that was open.
pub fn install() {
    panic::set_hook(Box::new(|info| {
        let text = info
            .payload()
            .downcast_ref::<String>()
            .map(String::as_str)
            .or_else(|| info.payload().downcast_ref::<&str>().copied())
            .unwrap_or_default();
        // A missing system library is told in a sentence by whoever catches it.
        if libraries::missing(text).is_some() {
            return;
        }
        let place = info.location().map_or_else(String::new, |at| {
            // Where the program was built is nobody's business.
            let file = at.file().rsplit("/registry/src/").next().unwrap_or_default();
            format!("{file}:{}", at.line())
        });
        eprintln!("{}", words::bug(env!("CARGO_PKG_VERSION"), &place));
    }));
}
