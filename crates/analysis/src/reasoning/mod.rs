//! Drafted statements and their evidence. Rules are data ([`rules`]); the text of every message is
//! made outside this crate.

mod circulation;
mod compose;
mod own_rate;
pub mod robustness;
mod rules;
mod sections;
mod seen;
mod signs;

use crate::stage::Stage;

/// Drafts the statements; runs last.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let mut statements = sections::safety(stage);
    statements.extend(sections::effort(stage));
    statements.extend(sections::capacity(stage));
    statements.extend(circulation::draft(stage));
    statements.extend(sections::breathing(stage));
    statements.sort_by_key(|s| s.section);
    stage.results.statements = statements;
}

#[cfg(test)]
mod tests;
