//! The binary without a display: exit codes, outputs, and what stands on standard error.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

use serde_json::Value;

const NOW: &str = "2026-11-24T10:51:00+01:00";

fn demo(file: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../../demo-sessions/kittiwake").join(file)
}

fn run(folder: &Path, arguments: &[&str]) -> Output {
    let output = Command::new(env!("CARGO_BIN_EXE_rampcrest"))
        .args(arguments)
        .current_dir(folder)
        .env_remove("DISPLAY")
        .env_remove("WAYLAND_DISPLAY")
        .env_remove("WAYLAND_SOCKET")
        .env_remove("SOURCE_DATE_EPOCH")
        .env("XDG_CONFIG_HOME", folder)
        .output()
        .expect("starts");
    let error = String::from_utf8_lossy(&output.stderr);
    assert!(!error.contains("panicked"), "{error}");
    output
}

fn code(output: &Output) -> Option<i32> {
    output.status.code()
}

fn json(output: &Output) -> Value {
    serde_json::from_slice(&output.stdout).expect("standard output is JSON")
}

#[test]
fn bare_without_a_display_says_one_sentence_and_derives_the_demonstration_test() {
    let folder = tempfile::tempdir().expect("folder");
    let output = run(folder.path(), &["--now", NOW]);
    assert_eq!(code(&output), Some(0));
    let said = String::from_utf8_lossy(&output.stdout).into_owned();
    assert_eq!(said.trim_end().lines().count(), 1, "{said}");
    let read = |name: &str| std::fs::read(folder.path().join("out").join(name)).expect(name);
    let results: Value = serde_json::from_slice(&read("results.json")).expect("JSON");
    assert_eq!(results["schema"], "rampcrest-results/1");
    let session: Value = serde_json::from_slice(&read("session.json")).expect("JSON");
    assert_eq!(session["schema"], "rampcrest-session/1");
    assert_eq!(&read("window.png")[1..4], b"PNG");
    assert!(String::from_utf8_lossy(&read("page.html")).starts_with("<!DOCTYPE html>"));
    let again = run(folder.path(), &["--now", NOW, "--out", "again"]);
    assert_eq!(code(&again), Some(0));
    for name in ["results.json", "session.json", "page.html", "window.png"] {
        let twin = std::fs::read(folder.path().join("again").join(name)).expect(name);
        assert!(read(name) == twin, "{name} differs between two runs");
    }
}

#[test]
fn a_file_without_a_display_is_exit_6() {
    let folder = tempfile::tempdir().expect("folder");
    let table = demo("table.csv");
    let output = run(folder.path(), &[table.to_str().expect("path")]);
    assert_eq!(code(&output), Some(6));
    assert!(String::from_utf8_lossy(&output.stderr).contains("no-display"));
}

#[test]
fn a_display_that_does_not_answer_is_exit_6_too() {
    let folder = tempfile::tempdir().expect("folder");
    let output = Command::new(env!("CARGO_BIN_EXE_rampcrest"))
        .args(["--renderer", "cpu"])
        .arg(demo("table.csv"))
        .env("DISPLAY", ":9873")
        .env_remove("WAYLAND_DISPLAY")
        .env_remove("WAYLAND_SOCKET")
        .env("XDG_CONFIG_HOME", folder.path())
        .output()
        .expect("starts");
    let error = String::from_utf8_lossy(&output.stderr);
    assert_eq!(code(&output), Some(6), "{error}");
    assert!(!error.contains("panicked"), "{error}");
}

#[test]
fn derive_gives_results_and_a_table_stands_for_its_session() {
    let folder = tempfile::tempdir().expect("folder");
    let (table, facts) = (demo("table.csv"), demo("facts.json"));
    let (table, facts) = (table.to_str().expect("path"), facts.to_str().expect("path"));
    let derived = run(folder.path(), &["derive", table, "--facts", facts, "--json"]);
    assert_eq!(code(&derived), Some(0));
    let results = json(&derived);
    let peak = results["outcomes"]
        .as_array()
        .expect("list")
        .iter()
        .find(|outcome| outcome["id"] == "vo2-peak" && outcome["primary"] == true);
    assert_eq!(peak.expect("peak uptake")["unit"], "mL/min");
    let import = ["import", table, "--facts", facts, "--now", NOW, "-o", "s.json"];
    assert_eq!(code(&run(folder.path(), &import)), Some(0));
    let again = run(folder.path(), &["derive", "s.json", "--json"]);
    assert_eq!(json(&again), results);
}

#[test]
fn edits_move_a_boundary_and_a_bad_one_writes_nothing() {
    let folder = tempfile::tempdir().expect("folder");
    let table = demo("table.csv");
    let table = table.to_str().expect("path");
    let list = |edit: &str| format!(r#"{{"schema":"rampcrest-edits/1","edits":[{edit}]}}"#);
    let good = list(r#"{"edit":"set-boundary","phase":"ramp","t_s":400}"#);
    std::fs::write(folder.path().join("good.json"), good).expect("writes");
    let output = run(folder.path(), &["edit", table, "good.json", "-o", "s.json", "--now", NOW]);
    assert_eq!(code(&output), Some(0), "{}", String::from_utf8_lossy(&output.stderr));
    let results = json(&run(folder.path(), &["derive", "s.json", "--json"]));
    let phases = results["phases"].as_array().expect("phases");
    let ramp = phases.iter().find(|phase| phase["id"] == "ramp").expect("ramp");
    // Boundaries snap to the end of a breath, of which there is one every few seconds.
    assert!((ramp["from"].as_f64().expect("time") - 400.0).abs() < 5.0, "{ramp}");
    let bad = list(r#"{"edit":"set-boundary","phase":"sprint","t_s":400}"#);
    std::fs::write(folder.path().join("bad.json"), bad).expect("writes");
    let output = run(folder.path(), &["edit", table, "bad.json", "-o", "no.json", "--json"]);
    assert_eq!(code(&output), Some(3));
    assert!(json(&output)["problem"]["where"].as_str().expect("place").contains("edits[0]"));
    assert!(!folder.path().join("no.json").exists());
}

#[test]
fn pictures_and_descriptions_come_without_a_display_and_alike_twice() {
    let folder = tempfile::tempdir().expect("folder");
    let table = demo("table.csv");
    let table = table.to_str().expect("path");
    for name in ["a.png", "b.png"] {
        let picture = ["picture", table, "--view", "circulation", "--size", "1280x800", "-o", name];
        assert_eq!(code(&run(folder.path(), &picture)), Some(0));
    }
    let read = |name| std::fs::read(folder.path().join(name)).expect("written");
    assert!(read("a.png") == read("b.png"));
    // Width and height stand big-endian from byte 16 of a PNG file (ISO/IEC 15948, 11.2.2).
    assert_eq!(read("a.png")[16..24], [0, 0, 5, 0, 0, 0, 3, 32]);
    let described =
        json(&run(folder.path(), &["describe", table, "--view", "time-course", "--json"]));
    assert_eq!(described["schema"], "rampcrest-describe/1");
    assert_eq!(described["size"], serde_json::json!([1920, 1080]));
    let nodes = described["nodes"].as_array().expect("nodes");
    let slider = nodes.iter().find(|node| node["role"] == "slider").expect("a boundary");
    assert_eq!(slider["focusable"], true);
    assert!(nodes.iter().all(|node| node["rect"].as_array().is_some_and(|r| r.len() == 4)));
}

#[test]
fn every_way_to_fail_has_its_exit_code() {
    let folder = tempfile::tempdir().expect("folder");
    std::fs::write(folder.path().join("empty.csv"), "").expect("writes");
    std::fs::write(folder.path().join("header.csv"), "t,VO2\ns,mL/min\n").expect("writes");
    let table = demo("table.csv");
    let table = table.to_str().expect("path");
    let cases: [(&[&str], i32); 12] = [
        (&["derive"], 2),
        (&["derive", table, "--view", "x"], 2),
        (&["picture", table, "--view", "elsewhere", "-o", "p.png"], 2),
        (&["picture", table, "-o", "p.png"], 2),
        (&["import", table, "--now", "yesterday", "-o", "s.json"], 2),
        (&["batch", ".", "-o", "out"], 2),
        (&["derive", "nowhere.csv"], 3),
        (&["derive", "empty.csv"], 3),
        (&["derive", "header.csv"], 3),
        (&["derive", "."], 3),
        (&["import", table, "-o", "no/such/folder/s.json"], 7),
        (&["picture", table, "--view", "data", "-o", "no/such/folder/p.png"], 7),
    ];
    for (arguments, expected) in cases {
        let output = run(folder.path(), arguments);
        let error = String::from_utf8_lossy(&output.stderr);
        assert_eq!(code(&output), Some(expected), "{arguments:?}: {error}");
        assert!(error.starts_with("rampcrest: "), "{arguments:?}: {error}");
    }
    assert_eq!(code(&run(folder.path(), &["--help"])), Some(0));
    assert_eq!(code(&run(folder.path(), &["--version"])), Some(0));
    let probe = run(folder.path(), &["probe"]);
    assert!(String::from_utf8_lossy(&probe.stdout).starts_with("gpu: no"));
}

#[test]
fn an_open_question_is_exit_4_and_stands_in_the_results() {
    let folder = tempfile::tempdir().expect("folder");
    let table = std::fs::read_to_string(demo("table.csv")).expect("demo");
    // A pressure, a breathing rate or nothing at all: the name and the values leave it open.
    let mut rows = 0;
    let with_column: Vec<String> = table
        .lines()
        .map(|line| {
            if line.starts_with('#') {
                return line.to_owned();
            }
            rows += 1;
            let cell = match rows {
                1 => "RR".to_owned(),
                2 => String::new(),
                n => (80 + n % 7).to_string(),
            };
            format!("{line},{cell}")
        })
        .collect();
    std::fs::write(folder.path().join("t.csv"), with_column.join("\n")).expect("writes");
    let output = run(folder.path(), &["derive", "t.csv", "--json"]);
    assert_eq!(code(&output), Some(4), "{}", String::from_utf8_lossy(&output.stderr));
    let questions = json(&output)["questions"].as_array().expect("list").clone();
    assert_eq!(questions[0]["column"], "RR");
    let answered = run(folder.path(), &["derive", "t.csv", "--answer", "RR=leave-out"]);
    assert_eq!(code(&answered), Some(0));
}
