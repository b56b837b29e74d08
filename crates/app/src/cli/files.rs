//! Reading and writing, with failures that name the file.

use std::fs::File;
use std::io::{Read, Write};
use std::path::Path;

use record::session::store::write_atomic;

use super::failure::{Exit, Failure};

/// The whole of `path`; a file larger than `most` bytes is read no further than one byte beyond.
///
/// # Errors
/// Refused (3).
pub fn read(path: &Path, most: usize) -> Result<Vec<u8>, Failure> {
    let mut bytes = Vec::new();
    let unreadable = |error| Failure::unreadable(path, &error);
    let file = File::open(path).map_err(unreadable)?;
    file.take(most as u64 + 1).read_to_end(&mut bytes).map_err(unreadable)?;
    Ok(bytes)
}

/// A text file of settings or facts.
///
/// # Errors
/// Refused (3).
pub fn read_text(path: &Path) -> Result<String, Failure> {
    const MOST: usize = 4 << 20;
    String::from_utf8(read(path, MOST)?).map_err(|error| {
        let error = std::io::Error::new(std::io::ErrorKind::InvalidData, error.utf8_error());
        Failure::unreadable(path, &error)
    })
}

/// Writes the file whole or not at all.
///
/// # Errors
/// Cannot write (7).
pub fn write(path: &Path, bytes: &[u8]) -> Result<(), Failure> {
    write_atomic(path, bytes).map_err(|problem| Failure { exit: Exit::CannotWrite, problem })
}

/// Writes a line to standard output; a reader that has gone away is no failure of ours.
pub fn print(text: &str) {
    let mut out = std::io::stdout().lock();
    out.write_all(text.as_bytes()).and_then(|()| out.write_all(b"\n")).ok();
}
