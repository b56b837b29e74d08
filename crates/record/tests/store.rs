//! Saving: whole or not at all, and nothing is lost.

#![cfg(unix)]

mod support;

use std::fs;
use std::os::unix::process::CommandExt;
use std::path::Path;
use std::process::Command;

use analysis::settings::Settings;
use record::session::findings::Status;
use record::session::recovery_log::{self, Line};
use record::session::{Edit, Session, store};

use support::{NOW, demo};

fn names(folder: &Path) -> Vec<String> {
    let mut names: Vec<String> = fs::read_dir(folder)
        .expect("the folder")
        .map(|e| e.expect("an entry").file_name().to_string_lossy().into_owned())
        .collect();
    names.sort();
    names
}

#[test]
fn a_session_is_saved_and_loaded_and_leaves_nothing_beside_it() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("s.json");
    let session = demo("kittiwake");
    session.save(&path).expect("saved");
    session.save(&path).expect("saved over itself");
    assert_eq!(names(folder.path()), ["s.json"]);
    let back = Session::load(&path, &Settings::default()).expect("loads");
    assert_eq!(back.write(), session.write());
}

#[test]
fn a_full_disk_is_told_and_what_stood_there_stays() {
    let problem = store::write_atomic(Path::new("/dev/full"), b"x").expect_err("full");
    assert_eq!(problem.code, "cannot-write");
    assert!(problem.what.contains("full"), "{problem}");
}

#[test]
fn a_place_that_does_not_take_files_is_told() {
    let folder = tempfile::tempdir().expect("a folder");
    let session = demo("kittiwake");
    for place in [folder.path().to_path_buf(), folder.path().join("no-such").join("s.json")] {
        assert_eq!(session.save(&place).expect_err("refused").code, "cannot-write");
    }
    let path = folder.path().join("s.json");
    fs::write(&path, "before").expect("written");
    let mut rights = fs::metadata(&path).expect("its data").permissions();
    rights.set_readonly(true);
    fs::set_permissions(&path, rights).expect("read-only");
    let problem = session.save(&path).expect_err("read-only");
    assert!(problem.what.contains("read-only"), "{problem}");
    assert_eq!(fs::read_to_string(&path).expect("reads"), "before");
    assert_eq!(names(folder.path()), ["s.json"], "no part of a file is left");
}

/// Another user may not write into a folder that is not theirs. The test starts itself again as
/// that user where it runs as root, since root may write anywhere.
#[test]
fn a_folder_without_rights_is_told() {
    if let Some(path) = std::env::var_os("RAMPCREST_TEST_NO_RIGHTS") {
        let problem = store::write_atomic(Path::new(&path), b"x").expect_err("no rights");
        assert_eq!(problem.code, "cannot-write");
        assert!(problem.what.contains("not permitted"), "{problem}");
        return;
    }
    let folder = tempfile::tempdir().expect("a folder");
    let mut rights = fs::metadata(folder.path()).expect("its data").permissions();
    rights.set_readonly(true);
    fs::set_permissions(folder.path(), rights).expect("read-only");
    let may_write = fs::write(folder.path().join("try"), "x").is_ok();
    // The copy stands where any user may start it.
    let copy = tempfile::Builder::new().prefix("rampcrest-store").tempdir().expect("a folder");
    let exe = copy.path().join("store-test");
    fs::copy(std::env::current_exe().expect("this test"), &exe).expect("copied");
    for open in [copy.path(), folder.path()] {
        let mode = std::os::unix::fs::PermissionsExt::from_mode(0o555);
        fs::set_permissions(open, mode).expect("readable by all");
    }
    let mut again = Command::new(&exe);
    again.args(["--exact", "a_folder_without_rights_is_told"]).current_dir("/");
    again.env("RAMPCREST_TEST_NO_RIGHTS", folder.path().join("s.json"));
    if may_write {
        again.uid(65_534).gid(65_534);
    }
    let output = again.output().expect("started");
    let said = String::from_utf8_lossy(&output.stdout);
    assert!(output.status.success() && said.contains("1 passed"), "{said}");
    for closed in [copy.path(), folder.path()] {
        let mode = std::os::unix::fs::PermissionsExt::from_mode(0o755);
        fs::set_permissions(closed, mode).expect("writable again");
    }
}

#[test]
fn the_recovery_log_brings_back_what_was_not_saved() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("s.json");
    let mut session = demo("kittiwake");
    session.save(&path).expect("saved");
    let edits = [
        Some(Edit::SetOverlayShown { shown: false }),
        Some(Edit::FindingStatus { id: "effort-state".into(), status: Status::Accepted }),
        None,
    ];
    for edit in edits {
        match &edit {
            Some(edit) => session.apply(edit, NOW).expect("carried out"),
            None => assert!(session.undo(NOW).expect("a time")),
        }
        recovery_log::add(&path, &Line { at: NOW.into(), edit }).expect("logged");
    }
    let lines = recovery_log::read(&path);
    assert_eq!(lines.len(), 3);
    let mut back = Session::load(&path, &session.judgement().settings).expect("loads");
    recovery_log::replay(&mut back, &lines).expect("replayed");
    assert_eq!(back.write(), session.write());
    // A last line that was cut off is left out; the log of another state is not used.
    let log = recovery_log::path(&path);
    let text = fs::read_to_string(&log).expect("the log");
    fs::write(&log, &text[..text.len() - 20]).expect("cut");
    assert_eq!(recovery_log::read(&path).len(), 2);
    back.save(&path).expect("saved");
    assert_eq!(names(folder.path()), ["s.json"], "the log is removed on save");
    fs::write(&log, text).expect("an old log");
    assert!(recovery_log::read(&path).is_empty());
}
