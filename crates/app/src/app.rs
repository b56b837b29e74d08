//! The window, without any shell.

use std::sync::{Arc, LazyLock};

use analysis::decisions::Decisions;
use analysis::recording::Recording;
use egui::{Rect, Theme, Ui, pos2};
use record::facts_file::FactsFile;
use record::session::Edit;

use crate::background::{Background, Picked};
use crate::chart::handles::{self, HandleKind};
use crate::chart::interact;
use crate::chart::layout::{Grid, LEAST, Parts};
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::derived::Derived;
use crate::dispatch;
use crate::document::Document;
use crate::opening::{self, Reading};
use crate::preferences::Preferences;
use crate::robustness::Strip;
use crate::theme::{self, Tokens};
use crate::view_state::{Dialog, View, ViewState};
use crate::{panels, views};

static NO_FACTS: LazyLock<FactsFile> = LazyLock::new(FactsFile::default);
static NO_TEST: LazyLock<Arc<Recording>> = LazyLock::new(Default::default);

/// The window.
#[derive(Debug, Default)]
pub struct App {
    /// The open test.
    pub document: Document,
    /// What follows from it.
    pub derived: Derived,
    /// What is shown.
    pub view: ViewState,
    /// Taste.
    pub preferences: Preferences,
    /// How the statements on the circulation hold over defensible choices.
    pub robustness: Strip,
    /// What runs beside the window.
    pub background: Background,
}

impl App {
    /// The window on nothing.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// The window on the embedded demonstration test.
    #[must_use]
    pub fn on_demo() -> Self {
        let mut app = Self::new();
        app.open_table(crate::demo::TABLE, crate::demo::NAME, crate::demo::facts());
        app
    }

    /// Opens a breath table; a refusal stands in the status line.
    pub fn open_table(&mut self, bytes: &[u8], name: &str, facts: FactsFile) {
        let reading = Reading { facts, ..Reading::default() };
        match opening::table(bytes, name, reading) {
            Ok(document) => self.show(document),
            Err(problem) => self.view.status = Some(problem.to_string()),
        }
    }

    /// Shows `document` from its beginning.
    pub fn show(&mut self, document: Document) {
        self.document = document;
        self.derived = Derived::default();
        self.robustness.clear();
        self.view = ViewState { view: self.view.view, ..ViewState::default() };
    }

    /// Fonts and styles; every shell calls this once before the first frame.
    pub fn setup(&self, ctx: &egui::Context) {
        theme::install(ctx);
        ctx.set_theme(self.preferences.theme);
    }

    /// Draws one frame into `ui`, which covers the window. A window smaller than the layout is made
    /// for shows a part of it, with bars to reach the rest.
    pub fn ui(&mut self, ui: &mut Ui) {
        let window = ui.ctx().content_rect();
        let size = window.size().max(LEAST);
        if size == window.size() {
            return self.frame(ui, window);
        }
        let outer = ui.spacing().scroll;
        ui.spacing_mut().scroll = egui::style::ScrollStyle::solid();
        egui::ScrollArea::both()
            .id_salt("window")
            .auto_shrink(false)
            // The wheel is the zoom of the charts.
            .scroll_source(egui::scroll_area::ScrollSource::SCROLL_BAR)
            .show(ui, |ui| {
                ui.spacing_mut().scroll = outer;
                let (_, window) = ui.allocate_space(size);
                self.frame(ui, window);
            });
    }

    fn frame(&mut self, ui: &mut Ui, window: Rect) {
        if ui.ctx().theme() != self.preferences.theme {
            ui.ctx().set_theme(self.preferences.theme);
        }
        let mut commands = self.read_handles(ui);
        commands.extend(self.arrivals(ui));
        self.carry_out(ui, commands);
        self.derive(ui);
        if self.view.view == View::Circulation {
            self.robustness.update(&self.document, ui.ctx());
        }
        let commands = self.draw(ui, window);
        self.carry_out(ui, commands);
    }

    /// Reads pointer and keys before anything is drawn, so that this very frame shows the result.
    fn read_handles(&mut self, ui: &Ui) -> Outbox {
        self.derive(ui);
        let Some(recording) = self.document.recording().cloned() else {
            return Outbox::new();
        };
        let handles = self.handles();
        let mut out = Outbox::new();
        let moved = interact::read(
            ui,
            &mut self.view.drag,
            &handles,
            &self.view.geometry,
            recording.breaths.end_s(),
        );
        for interact::Moved::To(kind, t_s) in moved {
            out.push(self.moved(kind, t_s));
        }
        if let Some(drag) = self.view.drag.filter(|d| d.kind == HandleKind::Cursor) {
            self.view.cursor_s = Some(drag.t_s);
        }
        out.extend(dispatch::keys(ui, self.view.dialog.is_some()));
        out
    }

    /// Files that were dropped or picked.
    fn arrivals(&mut self, ui: &Ui) -> Outbox {
        let mut out = Outbox::new();
        if ui.input(|i| i.viewport().close_requested()) && self.document.unsaved_work() {
            ui.ctx().send_viewport_cmd(egui::ViewportCommand::CancelClose);
            out.push(Command::Show(Dialog::Unsaved(Box::new(Command::Quit))));
        }
        if let Some(file) = ui.input(|i| i.raw.dropped_files.first().cloned()) {
            out.push(Command::OpenPath(file.path().to_owned()));
        }
        match self.background.poll() {
            Some(Picked::File(path)) => out.push(Command::OpenPath(path)),
            Some(Picked::NoDialog) => {
                let words = "No file dialog on this desktop: type the path.";
                self.view.status = Some(words.into());
            }
            Some(Picked::Cancelled) | None => {}
        }
        out
    }

    fn handles(&self) -> Vec<handles::Handle> {
        let whole = self.document.recording().and_then(|r| r.span_s()).unwrap_or((0.0, 60.0));
        let results = self.derived.shown();
        let mut all = handles::handles(results, &self.document.decisions(), whole);
        if self.view.view == View::Circulation {
            all.extend(handles::points(results, &self.document.decisions()));
        }
        if let Some(drag) = self.view.drag.filter(|d| d.kind != HandleKind::Cursor) {
            for handle in all.iter_mut().filter(|h| h.kind == drag.kind) {
                handle.t_s = drag.t_s;
                handle.range_s = drag.range_s;
            }
        }
        all
    }

    /// Brings the results up to date with the session and the handle under way.
    fn derive(&mut self, ui: &Ui) {
        let moving = self.view.drag.filter(|d| d.moved && d.kind != HandleKind::Cursor);
        let moving = moving.map(|d| self.decided(d.kind, d.t_s));
        let ctx = ui.ctx().clone();
        self.derived.update(&self.document, moving.as_ref(), move || ctx.request_repaint());
    }

    /// The decisions with one handle at `t_s`.
    fn decided(&self, kind: HandleKind, t_s: f64) -> Decisions {
        let mut decisions = self.document.decisions();
        if let HandleKind::Point(_) = kind {
            // The point that does not move stays where it was, proposed or decided.
            let table = self.derived.committed().fick.table.as_ref();
            decisions.two_factor_s = decisions.two_factor_s.or(table.map(|t| t.between_s));
        }
        kind.set(&mut decisions, t_s);
        decisions
    }

    /// The command of a handle that came to rest at `t_s`.
    fn moved(&self, kind: HandleKind, t_s: f64) -> Command {
        match (kind, self.decided(kind, t_s).two_factor_s) {
            (HandleKind::Point(_), Some((from, to))) => {
                Command::Edit(Edit::SetTwoFactor { from_s: Some(from), to_s: Some(to) })
            }
            _ => dispatch::moved(kind, t_s),
        }
    }

    fn carry_out(&mut self, ui: &Ui, commands: Outbox) {
        for command in commands {
            self.dispatch(ui, command);
            ui.ctx().request_repaint();
        }
    }

    fn dispatch(&mut self, ui: &Ui, command: Command) {
        dispatch::carry_out(self, ui, command);
    }

    fn draw(&mut self, ui: &mut Ui, window: Rect) -> Outbox {
        let grid = Grid::of(window.width());
        let parts = Parts::of(window, &grid);
        let tokens = Tokens::of(self.preferences.theme);
        let mut handles = self.handles();
        let mut form = std::mem::take(&mut self.view.form);
        let recording = self.document.recording().unwrap_or(&NO_TEST);
        let moving = self.view.drag.filter(|d| d.moved && d.kind != HandleKind::Cursor);
        let decisions = match moving {
            Some(drag) => self.decided(drag.kind, drag.t_s),
            None => self.document.decisions(),
        };
        let open = self.document.recording().is_some();
        let label = self.document.label();
        let mut cx = Context {
            recording,
            facts: self.document.facts(),
            facts_file: self.document.facts_file().unwrap_or(&NO_FACTS),
            decisions: &decisions,
            settings: self.document.settings(),
            results: self.derived.shown(),
            committed: self.derived.committed(),
            robustness: self.robustness.shown(),
            robustness_behind: self.robustness.behind(&self.document),
            view: &self.view,
            tokens,
            grid,
            handles: &[],
            findings: self.derived.findings(),
            session: self.document.session(),
            label: &label,
            open,
            signed: self.document.signed(),
            can_undo: self.document.can_undo().is_some(),
            can_redo: self.document.can_redo().is_some(),
            provisional: self.derived.provisional(),
            saved: self.document.saved(),
        };
        if open {
            handles.push(handles::Handle {
                kind: HandleKind::Cursor,
                t_s: cx.cursor(),
                proposed: self.view.cursor_s.is_none(),
                range_s: cx.whole(),
            });
        }
        cx.handles = &handles;
        let mut out = Outbox::new();
        let geometry = paint(ui, &cx, &mut out, window, &parts);
        crate::dialogs::show(ui, &cx, &mut form, &mut out);
        self.view.geometry = geometry;
        self.view.form = form;
        out
    }

    /// Light or dark.
    pub fn set_theme(&mut self, theme: Theme) {
        self.preferences.theme = theme;
    }
}

fn paint(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    window: Rect,
    parts: &Parts,
) -> Vec<interact::Geometry> {
    ui.painter().rect_filled(window, 0.0, cx.tokens.window);
    panels::top_bar::show(ui, cx, out, parts.top_bar);
    panels::caution::show(ui, cx, parts.caution);
    if !cx.open {
        crate::views::empty::show(ui, cx, out, window);
        return Vec::new();
    }
    panels::view_row::show(ui, cx, out, parts.view_row);
    panels::value_strip::show(ui, cx, parts.strip);
    if cx.view.view == View::Findings {
        // The sheet would say the same a second time.
        let all = Rect::from_min_max(parts.view.min, parts.sheet.max);
        return views::show(ui, cx, out, all);
    }
    let geometry = views::show(ui, cx, out, parts.view);
    panels::findings::show(ui, cx, out, parts.sheet);
    if cx.view.wide_findings {
        let left = pos2(window.left(), parts.strip.top());
        let over = Rect::from_min_max(left, parts.sheet.right_bottom());
        panels::findings::wide(ui, cx, out, over);
    }
    geometry
}
