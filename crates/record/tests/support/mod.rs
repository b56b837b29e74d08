//! Sessions of the demo tests.

use std::sync::Arc;

use analysis::settings::Settings;
use record::facts_file::FactsFile;
use record::import::{Answers, import};
use record::predicted_sets;
use record::session::Session;

/// The instant of every test.
pub const NOW: &str = "2026-11-24T10:51:00+01:00";

/// Every demo test.
#[allow(dead_code, reason = "each test program uses a part of this module")]
pub const CASES: [&str; 12] = [
    "avocet",
    "bittern",
    "curlew",
    "dunlin",
    "eider",
    "kittiwake",
    "knot",
    "plover",
    "redshank",
    "sanderling",
    "turnstone",
    "wagtail",
];

/// The demo `case` as a session just opened.
pub fn demo(case: &str) -> Session {
    assert!(CASES.contains(&case), "{case} is no demo");
    let folder = format!("{}/../../demo-sessions/{case}", env!("CARGO_MANIFEST_DIR"));
    let bytes = std::fs::read(format!("{folder}/table.csv")).expect("the table");
    let facts = std::fs::read_to_string(format!("{folder}/facts.json")).expect("the facts");
    let facts = FactsFile::read(&facts).expect("facts");
    let read = import(&bytes, "table.csv", &Answers::none(), None).expect("imports");
    let recording = Arc::new(read.recording);
    let settings = Settings { sets: predicted_sets::bundled(), ..Settings::default() };
    Session::from_import(&bytes, "table.csv", read.recipe, recording, facts, settings, NOW)
        .expect("a session")
}
