//! What the reader can do. A command owns its label, tooltip, shortcut and availability; buttons,
//! the list of keys and help are made from it.

use analysis::predicted::sets::Predicts;
use egui::{Key, KeyboardShortcut, Modifiers};

use crate::context::Context;
use crate::view_state::{Dialog, View};
use record::presentation::wording;
use record::session::Edit;

/// Something to be done, sent by a panel and carried out by `dispatch`.
#[derive(Clone, Debug, PartialEq)]
pub enum Command {
    /// Take back the last edit.
    Undo,
    /// Carry out again what was taken back.
    Redo,
    /// Open a dialog.
    Show(Dialog),
    /// Close the dialog.
    CloseDialog,
    /// Open the embedded demonstration test.
    OpenDemo,
    /// Open this file.
    OpenPath(std::path::PathBuf),
    /// Ask the desktop for a file.
    PickFile,
    /// Save the session where it was saved before, or ask.
    Save,
    /// Save the session here.
    SaveTo(std::path::PathBuf),
    /// Write the page here.
    ExportTo(std::path::PathBuf),
    /// Show a view.
    Go(View),
    /// Show or hide the predicted overlay.
    ToggleOverlay,
    /// Show or hide raw breaths.
    ToggleRaw,
    /// Lay the findings over the charts, or back to the side.
    WidenFindings,
    /// Light or dark.
    ToggleTheme,
    /// Set the time cursor, s.
    Cursor(f64),
    /// Move the time cursor by breaths.
    StepCursor(i32),
    /// Show this stretch of time, s; `None` all of it.
    Zoom(Option<(f64, f64)>),
    /// A stretch of time is being dragged out for zooming, s.
    ZoomDragging(Option<(f64, f64)>),
    /// Zoom around the cursor by this factor.
    ZoomBy(f64),
    /// Select the breaths of a stretch, s.
    Select(Option<(f64, f64)>),
    /// Open the evidence under a statement.
    Evidence(Option<String>),
    /// Change the session.
    Edit(Edit),
    /// Several edits as one step.
    Edits(Vec<Edit>),
    /// Add the laboratory's own predicted set from this file.
    AddSet(std::path::PathBuf),
    /// Read a column of the file so: its name in the question, and the reading chosen.
    Answer(String, String),
    /// Close the window, work saved or not.
    Quit,
    /// Carry this out although work is not saved.
    Discard(Box<Command>),
}

impl Command {
    /// Commands that have a key, in the order of the list of keys.
    #[must_use]
    pub fn with_keys() -> Vec<Command> {
        let mut all = vec![
            Command::Show(Dialog::Open),
            Command::Save,
            Command::Show(Dialog::Export),
            Command::Show(Dialog::Sign),
            Command::Undo,
            Command::Redo,
            Command::Show(Dialog::Facts),
            Command::Show(Dialog::Sets(Predicts::Vo2Peak)),
            Command::Show(Dialog::Event),
            Command::Show(Dialog::Exclude(None)),
            Command::ToggleOverlay,
            Command::ToggleRaw,
            Command::WidenFindings,
            Command::ToggleTheme,
            Command::StepCursor(-1),
            Command::StepCursor(1),
            Command::ZoomBy(1.5),
            Command::ZoomBy(1.0 / 1.5),
            Command::Zoom(None),
            Command::Show(Dialog::Keys),
        ];
        all.extend(View::TABS.into_iter().take(9).map(Command::Go));
        all
    }

    /// Label, as on a button.
    #[must_use]
    pub fn label(&self) -> String {
        match self {
            Command::Undo => "Undo".into(),
            Command::Redo => "Redo".into(),
            Command::Show(dialog) => match dialog {
                Dialog::Open => "Open file…".into(),
                Dialog::Save => "Save session as…".into(),
                Dialog::Export => "Export page…".into(),
                Dialog::Sets(_) => "Predicted sets and their fit…".into(),
                Dialog::Overlay => "Parameters of the overlay…".into(),
                Dialog::Facts => "Facts…".into(),
                Dialog::Sign => "Sign…".into(),
                Dialog::Keys => "Keys".into(),
                Dialog::Event => "Enter reading…".into(),
                Dialog::Exclude(_) => wording::plain_text("exclude-title"),
                Dialog::LineUp => wording::plain_text("line-up-title"),
                Dialog::Inputs => "Inputs…".into(),
                Dialog::Statement(_) => "Edit…".into(),
                Dialog::Unsaved(_) => "Unsaved work".into(),
            },
            Command::CloseDialog => "Cancel".into(),
            Command::OpenDemo => "Open the demonstration test “Kittiwake”".into(),
            Command::OpenPath(_) => "Open".into(),
            Command::PickFile => "Browse…".into(),
            Command::Save => "Save session".into(),
            Command::SaveTo(_) => "Save".into(),
            Command::ExportTo(_) => "Export".into(),
            Command::Go(view) => view.name().into(),
            Command::ToggleOverlay => "Predicted overlay".into(),
            Command::ToggleRaw => "Raw breaths".into(),
            Command::WidenFindings => "Open findings".into(),
            Command::ToggleTheme => "Light or dark".into(),
            Command::Cursor(_) => "Set the time cursor".into(),
            Command::StepCursor(n) if *n < 0 => "Cursor one breath back".into(),
            Command::StepCursor(_) => "Cursor one breath on".into(),
            Command::Zoom(_) => "Show all of the test".into(),
            Command::ZoomDragging(_) => "Choose a stretch of time".into(),
            Command::ZoomBy(f) if *f > 1.0 => "Zoom in at the cursor".into(),
            Command::ZoomBy(_) => "Zoom out at the cursor".into(),
            Command::Select(_) => "Select breaths".into(),
            Command::Evidence(_) => "Evidence".into(),
            Command::Edit(edit) => edit.label(),
            Command::Edits(edits) => edits.first().map_or_else(String::new, Edit::label),
            Command::Answer(column, reading) => wording::with(
                "import-answer",
                &[("column", column.clone()), ("reading", crate::views::import::reading(reading))],
            ),
            Command::AddSet(_) => wording::plain_text("chooser-add-button"),
            Command::Quit => "Close".into(),
            Command::Discard(_) => "Discard changes".into(),
        }
    }

    /// What it does, in a sentence.
    #[must_use]
    pub fn tooltip(&self) -> String {
        match self {
            Command::Undo => "Take back the last change.".into(),
            Command::Redo => "Carry out again what was taken back.".into(),
            Command::Show(Dialog::Open) => "Open a breath table or a saved session.".into(),
            Command::Show(Dialog::Export) => "Write the findings page as one HTML file.".into(),
            Command::Show(Dialog::Facts) => "State what is known of person and test.".into(),
            Command::Show(Dialog::Sign) => "Sign the findings; the session locks.".into(),
            Command::Show(Dialog::Event) => "Enter a reading or note at the cursor.".into(),
            Command::Show(Dialog::Exclude(_)) => wording::plain_text("exclude-tooltip"),
            Command::Show(Dialog::LineUp) => wording::plain_text("line-up-tooltip"),
            Command::Show(Dialog::Keys) => "List all keys.".into(),
            Command::Save => "Save the session.".into(),
            Command::ToggleOverlay => "Show or hide the predicted normal response.".into(),
            Command::ToggleRaw => "Show or hide single breaths under the averages.".into(),
            Command::WidenFindings => "Lay the findings over the charts, or back.".into(),
            Command::Go(view) => view.question().into(),
            other => other.label(),
        }
    }

    /// Its key.
    #[must_use]
    pub fn shortcut(&self) -> Option<KeyboardShortcut> {
        let command = |key| Some(KeyboardShortcut::new(Modifiers::COMMAND, key));
        let plain = |key| Some(KeyboardShortcut::new(Modifiers::NONE, key));
        match self {
            Command::Undo => command(Key::Z),
            Command::Redo => {
                Some(KeyboardShortcut::new(Modifiers::COMMAND | Modifiers::SHIFT, Key::Z))
            }
            Command::Show(Dialog::Open) => command(Key::O),
            Command::Save => command(Key::S),
            Command::Show(Dialog::Export) => command(Key::E),
            Command::Show(Dialog::Sign) => command(Key::I),
            Command::Show(Dialog::Facts) => plain(Key::P),
            Command::Show(Dialog::Sets(Predicts::Vo2Peak)) => plain(Key::N),
            Command::Show(Dialog::Event) => plain(Key::E),
            Command::Show(Dialog::Exclude(None)) => plain(Key::X),
            Command::Show(Dialog::Keys) => plain(Key::Questionmark),
            Command::ToggleOverlay => plain(Key::O),
            Command::ToggleRaw => plain(Key::B),
            Command::WidenFindings => plain(Key::F),
            Command::ToggleTheme => plain(Key::L),
            Command::StepCursor(n) if *n < 0 => plain(Key::ArrowLeft),
            Command::StepCursor(_) => plain(Key::ArrowRight),
            Command::ZoomBy(f) if *f > 1.0 => plain(Key::Plus),
            Command::ZoomBy(_) => plain(Key::Minus),
            Command::Zoom(None) => plain(Key::Num0),
            Command::Go(view) => {
                const KEYS: [Key; 9] = [
                    Key::Num1,
                    Key::Num2,
                    Key::Num3,
                    Key::Num4,
                    Key::Num5,
                    Key::Num6,
                    Key::Num7,
                    Key::Num8,
                    Key::Num9,
                ];
                let place = View::TABS.iter().position(|v| v == view)?;
                KEYS.get(place).copied().and_then(plain)
            }
            _ => None,
        }
    }

    /// Its key in words, without platform signs.
    #[must_use]
    pub fn key_text(&self) -> Option<String> {
        let shortcut = self.shortcut()?;
        let key = match shortcut.logical_key {
            Key::Questionmark => "?".to_owned(),
            Key::Plus => "+".to_owned(),
            Key::Minus => "−".to_owned(),
            Key::ArrowLeft => "←".to_owned(),
            Key::ArrowRight => "→".to_owned(),
            other => other.name().to_owned(),
        };
        let m = shortcut.modifiers;
        let ctrl = if m.command || m.ctrl { "Ctrl " } else { "" };
        let shift = if m.shift { "Shift " } else { "" };
        Some(format!("{ctrl}{shift}{key}"))
    }

    /// Tooltip with its key.
    #[must_use]
    pub fn hover(&self) -> String {
        match self.key_text() {
            Some(key) => format!("{}  {key}", self.tooltip()),
            None => self.tooltip(),
        }
    }

    /// Whether it can be carried out now.
    #[must_use]
    pub fn available(&self, cx: &Context<'_>) -> bool {
        match self {
            Command::Undo => cx.can_undo,
            Command::Redo => cx.can_redo,
            Command::Show(Dialog::Sign) => cx.open && !cx.signed,
            Command::Show(Dialog::Facts | Dialog::Event | Dialog::Exclude(_)) => {
                cx.open && !cx.signed
            }
            Command::Show(Dialog::Export) | Command::Save => cx.open,
            Command::Edit(_) | Command::Edits(_) | Command::Answer(..) => cx.open && !cx.signed,
            _ => true,
        }
    }
}

/// Where panels put what is to be done.
pub type Outbox = Vec<Command>;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_key_stands_for_two_commands() {
        let mut seen = Vec::new();
        for command in Command::with_keys() {
            let key = command.shortcut().expect("has a key");
            assert!(!seen.contains(&key), "{key:?}");
            assert!(command.key_text().is_some());
            seen.push(key);
        }
    }
}
