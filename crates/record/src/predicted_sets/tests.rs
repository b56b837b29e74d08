//! What the bundled sets and a lab's own set must and must not do.

use super::bundled::FILES;
use super::{bundled, parse};

#[test]
fn every_bundled_file_is_read_and_its_worked_values_come_out() {
    for (name, text) in FILES {
        // Reading a set evaluates every worked value of the file.
        let set = parse(text, name).unwrap_or_else(|problem| panic!("{problem}"));
        assert_eq!(format!("{}.json", set.id), *name);
    }
    assert_eq!(bundled().len(), FILES.len());
}
