//! Carries out commands: one flat match.

use egui::{Theme, Ui};

use crate::app::App;
use crate::chart::column::zoomed;
use crate::chart::handles::HandleKind;
use crate::chart::interact::step;
use crate::command::{Command, Outbox};
use record::presentation::wording;
use record::session::Edit;

use crate::view_state::Dialog;

/// The command of a handle that came to rest at `t_s`.
#[must_use]
pub fn moved(kind: HandleKind, t_s: f64) -> Command {
    match kind {
        HandleKind::Boundary(phase) => Command::Edit(Edit::SetBoundary { phase, t_s }),
        HandleKind::Mark(mark) => Command::Edit(Edit::SetMark { mark, t_s }),
        // Both points change together, which only the window knows.
        HandleKind::Point(_) | HandleKind::Cursor => Command::Cursor(t_s),
    }
}

/// Commands of the keys pressed in this frame.
#[must_use]
pub fn keys(ui: &Ui, dialog_open: bool) -> Outbox {
    let mut out = Outbox::new();
    if dialog_open || ui.ctx().text_edit_focused() {
        return out;
    }
    let focused = ui.ctx().memory(|m| m.focused()).is_some();
    for command in Command::with_keys() {
        let Some(shortcut) = command.shortcut() else {
            continue;
        };
        // Arrows belong to whatever has the focus.
        if focused && matches!(command, Command::StepCursor(_)) {
            continue;
        }
        if ui.input_mut(|i| i.consume_shortcut(&shortcut)) {
            out.push(command);
        }
    }
    out
}

/// Carries out `command`.
pub fn carry_out(app: &mut App, ui: &Ui, command: Command) {
    match command {
        Command::Undo => app.document.undo(),
        Command::Redo => app.document.redo(),
        Command::Show(dialog) => app.view.dialog = Some(dialog),
        Command::CloseDialog => app.view.dialog = None,
        Command::Go(view) => app.view.view = view,
        Command::ToggleOverlay => {
            let shown = !app.document.settings().overlay_shown;
            edit(app, &[Edit::SetOverlayShown { shown }]);
        }
        Command::ToggleRaw => app.view.raw = !app.view.raw,
        Command::WidenFindings => app.view.wide_findings = !app.view.wide_findings,
        Command::ToggleTheme => {
            let theme = match app.preferences.theme {
                Theme::Light => Theme::Dark,
                Theme::Dark => Theme::Light,
            };
            app.set_theme(theme);
        }
        Command::Cursor(t_s) => app.view.cursor_s = Some(t_s),
        Command::StepCursor(n) => step_cursor(app, n),
        Command::Zoom(stretch) => app.view.zoom_s = stretch.filter(|s| Some(*s) != whole(app)),
        Command::ZoomDragging(stretch) => app.view.zoom_drag = stretch,
        Command::ZoomBy(factor) => zoom_by(app, factor),
        Command::Select(stretch) => app.view.selected_s = stretch,
        Command::Evidence(id) => app.view.evidence_of = id,
        Command::Edit(one) => edit(app, &[one]),
        Command::Edits(edits) => edit(app, &edits),
        Command::AddSet(path) => add_set(app, &path),
        Command::Answer(column, reading) => answer(app, &column, &reading),
        Command::Quit => ui.ctx().send_viewport_cmd(egui::ViewportCommand::Close),
        Command::OpenDemo => {
            app.open_table(crate::demo::TABLE, crate::demo::NAME, crate::demo::facts());
        }
        Command::OpenPath(path) => open(app, &path),
        Command::PickFile => app.background.pick(ui.ctx()),
        Command::Save => match app.document.path().map(std::path::Path::to_owned) {
            Some(path) => save(app, &path),
            None => app.view.dialog = Some(Dialog::Save),
        },
        Command::SaveTo(path) => save(app, &path),
        Command::ExportTo(path) => export(app, &path),
        Command::Discard(next) => {
            app.view.dialog = None;
            app.document.forget_changes();
            carry_out(app, ui, *next);
        }
    }
}

fn open(app: &mut App, path: &std::path::Path) {
    if app.document.unsaved_work() {
        let next = Command::OpenPath(path.to_owned());
        app.view.dialog = Some(Dialog::Unsaved(Box::new(next)));
        return;
    }
    match crate::opening::file(path) {
        Ok(document) => app.show(document),
        Err(problem) => app.view.status = Some(problem.to_string()),
    }
}

fn save(app: &mut App, path: &std::path::Path) {
    match app.document.save(path) {
        Ok(()) => {
            app.view.dialog = None;
            app.view.status = Some("Session saved.".into());
        }
        Err(problem) => app.view.status = Some(problem.to_string()),
    }
}

fn export(app: &mut App, path: &std::path::Path) {
    match app.document.export(app.derived.committed(), path) {
        Ok(()) => {
            app.view.dialog = None;
            app.view.status = Some("Page written.".into());
        }
        Err(problem) => app.view.status = Some(problem.to_string()),
    }
}

/// Adds the predicted set of a file to the session.
fn add_set(app: &mut App, path: &std::path::Path) {
    match record::session::store::read_file(path) {
        Ok(bytes) => {
            let text = String::from_utf8_lossy(&bytes).into_owned();
            edit(app, &[Edit::AddPredictedSet { text }]);
        }
        Err(problem) => app.view.status = Some(problem.to_string()),
    }
}

/// Reads the file anew with an answer about a column.
fn answer(app: &mut App, column: &str, reading: &str) {
    let Some(session) = app.document.session().filter(|s| s.signed().is_none()) else {
        return;
    };
    match crate::reimport::answered(session, column, reading, &app.document.now()) {
        Ok(anew) => {
            let document = app.document.read_anew(anew.session);
            app.show(document);
            let lost: Vec<String> = anew.lost.iter().map(Edit::label).collect();
            if !lost.is_empty() {
                let args = [("edits", lost.join(", "))];
                app.view.status = Some(wording::with("import-lost", &args));
            }
        }
        Err(problem) => app.view.status = Some(problem.to_string()),
    }
}

/// Carries out edits; a refusal stands in the status line.
fn edit(app: &mut App, edits: &[Edit]) {
    app.view.status = app.document.apply(edits).err().map(|problem| problem.to_string());
}

fn whole(app: &App) -> Option<(f64, f64)> {
    app.document.recording().and_then(|r| r.span_s())
}

fn step_cursor(app: &mut App, n: i32) {
    let Some(recording) = app.document.recording().cloned() else {
        return;
    };
    let now = app
        .view
        .cursor_s
        .or_else(|| app.derived.shown().phases.ramp().map(|(from, to)| from + 0.75 * (to - from)));
    let ends = recording.breaths.end_s();
    app.view.cursor_s = Some(step(now.unwrap_or(0.0), ends, n));
}

fn zoom_by(app: &mut App, factor: f64) {
    let Some(whole) = whole(app) else {
        return;
    };
    let now = app.view.zoom_s.unwrap_or(whole);
    let centre = app.view.cursor_s.filter(|t| *t >= now.0 && *t <= now.1);
    let centre = centre.unwrap_or(0.5 * (now.0 + now.1));
    let next = zoomed(now, whole, centre, factor);
    app.view.zoom_s = (next != whole).then_some(next);
}
