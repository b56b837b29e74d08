//! What panels and views may read.

use analysis::decisions::Decisions;
use analysis::facts::Facts;
use analysis::reasoning::robustness::Robustness;
use analysis::recording::Recording;
use analysis::results::Results;
use analysis::settings::Settings;

use record::facts_file::FactsFile;
use record::session::Session;
use record::session::findings::FindingShown;

use crate::chart::handles::Handle;
use crate::chart::layout::Grid;
use crate::theme::Tokens;
use crate::view_state::ViewState;

/// A read-only look at the open test.
pub struct Context<'a> {
    /// The recording.
    pub recording: &'a Recording,
    /// Facts.
    pub facts: &'a Facts,
    /// Facts as the file format holds them, free text included.
    pub facts_file: &'a FactsFile,
    /// Decisions, as a moving handle would have them.
    pub decisions: &'a Decisions,
    /// Settings.
    pub settings: &'a Settings,
    /// Results to show: the preview while a handle moves.
    pub results: &'a Results,
    /// The committed results.
    pub committed: &'a Results,
    /// How the statements on the circulation hold over defensible choices, once derived.
    pub robustness: Option<&'a Robustness>,
    /// Whether that belongs to an earlier state of the session.
    pub robustness_behind: bool,
    /// State of the view.
    pub view: &'a ViewState,
    /// Colours.
    pub tokens: &'static Tokens,
    /// Measures.
    pub grid: Grid,
    /// Handles of the time axis.
    pub handles: &'a [Handle],
    /// Statements.
    pub findings: &'a [FindingShown],
    /// The session, if a test is open.
    pub session: Option<&'a Session>,
    /// Label of the case.
    pub label: &'a str,
    /// Whether a test is open.
    pub open: bool,
    /// Whether the session is signed.
    pub signed: bool,
    /// Whether there is something to take back.
    pub can_undo: bool,
    /// Whether there is something to carry out again.
    pub can_redo: bool,
    /// Whether a handle moves.
    pub provisional: bool,
    /// Whether the session stands saved as it is.
    pub saved: bool,
}

impl<'a> Context<'a> {
    /// The same look again, to be varied.
    #[must_use]
    pub fn copied(&self) -> Context<'a> {
        Context { ..*self }
    }

    /// State of the session in words.
    #[must_use]
    pub fn state_words(&self) -> &'static str {
        match (self.signed, self.saved) {
            (true, _) => "Signed",
            (false, true) => "Draft · saved",
            (false, false) => "Draft · not saved",
        }
    }

    /// The stretch of time shown, s.
    #[must_use]
    pub fn time(&self) -> (f64, f64) {
        self.view.zoom_s.unwrap_or_else(|| self.whole())
    }

    /// The whole test, s.
    #[must_use]
    pub fn whole(&self) -> (f64, f64) {
        let (from, to) = self.recording.span_s().unwrap_or((0.0, 60.0));
        if to > from { (from, to) } else { (from, from + 60.0) }
    }

    /// The time cursor, s: where the reader set it, else three quarters up the ramp.
    #[must_use]
    pub fn cursor(&self) -> f64 {
        self.view.cursor_s.unwrap_or_else(|| match self.committed.phases.ramp() {
            Some((from, to)) => from + 0.75 * (to - from),
            None => {
                let (from, to) = self.whole();
                0.5 * (from + to)
            }
        })
    }
}
