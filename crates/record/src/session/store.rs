//! Files on disk: written whole or not at all, read with a message that says what to do.

use std::fs::{self, File};
use std::io::{self, Write};
use std::path::{Path, PathBuf};

use super::{Session, problems};
use crate::problem::Problem;
use analysis::settings::Settings;

/// Writes `bytes` at `path`: beside it first, flushed to the disk, then renamed over it. What stood
/// there before is whole until the new file is.
///
/// # Errors
/// Nothing could be written; what stood there is untouched.
pub fn write_atomic(path: &Path, bytes: &[u8]) -> Result<(), Problem> {
    let shown = shown(path);
    if path.is_dir() {
        return Err(problems::cannot_write(shown, "It is a folder."));
    }
    if fs::metadata(path).is_ok_and(|m| m.permissions().readonly()) {
        return Err(problems::cannot_write(shown, "The file is read-only."));
    }
    if fs::metadata(path).is_ok_and(|m| !m.is_file()) {
        // A device or pipe cannot be replaced by renaming.
        return File::options()
            .write(true)
            .open(path)
            .and_then(|mut f| f.write_all(bytes).and_then(|()| f.flush()))
            .map_err(|e| problems::cannot_write(shown, reason(&e)));
    }
    let beside = beside(path);
    let written = write_new(&beside, bytes).and_then(|()| fs::rename(&beside, path));
    if let Err(e) = written {
        let _ = fs::remove_file(&beside);
        return Err(problems::cannot_write(shown, reason(&e)));
    }
    sync_folder(path);
    Ok(())
}

fn write_new(path: &Path, bytes: &[u8]) -> io::Result<()> {
    let mut file = File::options().write(true).create_new(true).open(path)?;
    file.write_all(bytes)?;
    file.sync_all()
}

/// A name beside `path` that does not exist yet.
fn beside(path: &Path) -> PathBuf {
    let name = path.file_name().map(|n| n.to_string_lossy().into_owned()).unwrap_or_default();
    (0..u32::MAX)
        .map(|n| path.with_file_name(format!(".{name}.{}-{n}.part", std::process::id())))
        .find(|p| !p.exists())
        .unwrap_or_else(|| path.with_extension("part"))
}

/// Makes the renaming last; systems that cannot flush a folder keep their own promise.
fn sync_folder(path: &Path) {
    let folder = path.parent().filter(|p| !p.as_os_str().is_empty()).unwrap_or(Path::new("."));
    if let Ok(folder) = File::open(folder) {
        let _ = folder.sync_all();
    }
}

/// Reads the file at `path`.
///
/// # Errors
/// It cannot be read.
pub fn read_file(path: &Path) -> Result<Vec<u8>, Problem> {
    fs::read(path).map_err(|e| {
        Problem::new(
            "cannot-read",
            shown(path),
            reason(&e),
            "Check the name and whether you may read it.",
        )
    })
}

/// Only the file's name: folders may name a person.
fn shown(path: &Path) -> String {
    path.file_name()
        .map_or_else(|| path.display().to_string(), |n| n.to_string_lossy().into_owned())
}

fn reason(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => "There is no such file or folder.".into(),
        io::ErrorKind::PermissionDenied => "It is not permitted here.".into(),
        io::ErrorKind::StorageFull => "The disk is full.".into(),
        io::ErrorKind::ReadOnlyFilesystem => "The disk is read-only.".into(),
        _ => format!("{error}."),
    }
}

impl Session {
    /// Saves the session at `path`, whole or not at all, and removes the recovery log beside it.
    ///
    /// # Errors
    /// Nothing could be written; the session and what stood at `path` are as before.
    pub fn save(&self, path: &Path) -> Result<(), Problem> {
        write_atomic(path, &self.write())?;
        super::recovery_log::remove(path);
        Ok(())
    }

    /// Reads the session at `path`. `given` lends the predicted sets.
    ///
    /// # Errors
    /// As [`Session::read`]; the problem names the file.
    pub fn load(path: &Path, given: &Settings) -> Result<Self, Problem> {
        Self::read(&read_file(path)?, given).map_err(|mut p| {
            p.where_ = format!("{}, {}", shown(path), p.where_);
            p
        })
    }
}
