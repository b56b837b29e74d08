//! All keys.

use egui::Ui;

use crate::command::Command;

/// Draws the list.
pub fn show(ui: &mut Ui) {
    egui::Grid::new("keys").num_columns(2).spacing([24.0, 4.0]).show(ui, |ui| {
        for command in Command::with_keys() {
            ui.label(command.key_text().unwrap_or_default());
            ui.label(command.tooltip());
            ui.end_row();
        }
        for (key, words) in [
            ("← →", "On a focused boundary or mark: one breath"),
            ("Shift ← →", "On a focused boundary or mark: ten seconds"),
            ("Esc", "Cancel a drag, close a dialog"),
            ("Alt", "While dragging a mark: free of breaths"),
            ("Double click", "Show all of the test"),
        ] {
            ui.label(key);
            ui.label(words);
            ui.end_row();
        }
    });
}
