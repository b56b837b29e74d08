//! The embedded demonstration test.

use record::facts_file::FactsFile;

/// The invented normal test *Kittiwake*: its breath table.
pub const TABLE: &[u8] = include_bytes!("../../../demo-sessions/kittiwake/table.csv");

/// Its facts.
pub const FACTS: &str = include_str!("../../../demo-sessions/kittiwake/facts.json");

/// Name under which the table is read.
pub const NAME: &str = "kittiwake.csv";

/// Its facts; none where they cannot be read, which a test forbids.
#[must_use]
pub fn facts() -> FactsFile {
    FactsFile::read(FACTS).unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_demonstration_test_is_whole() {
        let facts = FactsFile::read(FACTS).expect("facts can be read");
        assert_eq!(facts.identity.label.as_deref(), Some("Kittiwake"));
        let answers = record::import::Answers::none();
        let imported = record::import::import(TABLE, NAME, &answers, None).expect("is read");
        assert!(imported.questions().is_empty());
        assert!(imported.recording.breaths.len() > 300);
    }
}
