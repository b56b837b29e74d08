//! Texts of the window, the page and the session.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[
    (
        "caution",
        "Decision support for qualified readers. Not assessed, certified or cleared as a medical device; whether it may be used in patient care is for the local service and its regulator. Not for use during a test. Local protocols and licensed practice prevail.",
    ),
    ("edit-set-boundary", "Move boundary"),
    ("edit-clear-boundary", "Boundary as proposed"),
    ("edit-set-averaging", "Choose averaging"),
    ("edit-set-fact", "State a fact"),
    ("edit-exclude-breaths", "Leave out breaths"),
    ("edit-include-breaths", "Take in breaths"),
    ("edit-set-mark", "Move mark"),
    ("edit-clear-mark", "Mark as proposed"),
    ("edit-set-predicted", "Choose predicted set"),
    ("edit-set-overlay-shown", "Predicted overlay"),
    ("edit-set-two-factor", "Move two-factor times"),
    ("edit-set-setting", "Change a setting"),
    ("edit-add-event", "Enter reading"),
    ("edit-remove-event", "Remove reading"),
    ("edit-finding-text", "Edit statement"),
    ("edit-finding-status", "Decide on statement"),
    ("edit-finding-add", "Add statement"),
    ("edit-sign", "Sign"),
    ("sheet-late-slope", "late slope {slope}"),
    ("sheet-readers-mark", "reader’s mark"),
    ("sheet-proposal", "proposal"),
];
