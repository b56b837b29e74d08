//! Text set on a baseline, with a node for assistive technology.

use analysis::results::Outcome;
use egui::{Align, Color32, FontId, Pos2, Rect, Response, Role, Sense, Ui, WidgetInfo, pos2, vec2};

use record::presentation::{how, values};

use crate::context::Context;

/// Ascent of DejaVu Sans over the em (hhea table: 1901 of 2048 units).
const ASCENT: f32 = 1901.0 / 2048.0;
/// Descent of DejaVu Sans over the em (hhea table: 483 of 2048 units).
const DESCENT: f32 = 483.0 / 2048.0;

/// A piece of text in one size and colour.
#[derive(Clone, Debug)]
pub struct Run {
    /// The text.
    pub text: String,
    /// Size, px at 1×.
    pub size: f32,
    /// Colour.
    pub color: Color32,
}

impl Run {
    /// A run.
    pub fn new(text: impl Into<String>, size: f32, color: Color32) -> Self {
        Self { text: text.into(), size, color }
    }
}

/// Width of `runs` set in one line.
#[must_use]
pub fn width(ui: &Ui, runs: &[Run]) -> f32 {
    runs.iter().map(|run| galley(ui, run).size().x).sum()
}

fn galley(ui: &Ui, run: &Run) -> std::sync::Arc<egui::Galley> {
    ui.painter().layout_no_wrap(run.text.clone(), FontId::proportional(run.size), run.color)
}

/// Paints `runs` on one baseline without a node; returns what they cover.
pub fn paint(ui: &Ui, at: Pos2, align: Align, runs: &[Run]) -> Rect {
    let total = width(ui, runs);
    let mut x = match align {
        Align::Min => at.x,
        Align::Center => at.x - 0.5 * total,
        Align::Max => at.x - total,
    };
    let left = x;
    let mut tallest = 0.0_f32;
    for run in runs {
        let galley = galley(ui, run);
        let top = ui.painter().round_to_pixel_center(at.y - ASCENT * run.size) - 0.5;
        let advance = galley.size().x;
        ui.painter().galley(pos2(x, top), galley, run.color);
        x += advance;
        tallest = tallest.max(run.size);
    }
    Rect::from_min_max(
        pos2(left, at.y - ASCENT * tallest),
        pos2(left + total, at.y + DESCENT * tallest),
    )
}

/// Sets `runs` on one baseline and gives them a node.
pub fn line(ui: &mut Ui, at: Pos2, align: Align, runs: &[Run]) -> Response {
    let rect = paint(ui, at, align, runs);
    let id = ui.next_auto_id();
    ui.skip_ahead_auto_ids(1);
    let response = ui.interact(rect, id, Sense::hover());
    let text: String = runs.iter().map(|r| r.text.as_str()).collect();
    response.widget_info(|| WidgetInfo::labeled(Role::Label, true, text.trim()));
    response
}

/// One run on a baseline, with a node.
pub fn plain(
    ui: &mut Ui,
    at: Pos2,
    align: Align,
    text: impl Into<String>,
    size: f32,
    color: Color32,
) -> Response {
    line(ui, at, align, &[Run::new(text, size, color)])
}

/// What a shown number is for assistive technology and for `describe`.
pub struct Key<'a> {
    /// `ID@AT`.
    pub id: &'a str,
    /// Name of the quantity.
    pub name: &'a str,
    /// Value as shown, unit and interval included.
    pub value: &'a str,
    /// Results and settings, for how it was computed.
    pub cx: &'a Context<'a>,
}

/// A shown number: `runs` on one baseline whose node bears `key`.
pub fn number(ui: &mut Ui, at: Pos2, align: Align, runs: &[Run], key: &Key<'_>) -> Response {
    let rect = paint(ui, at, align, runs);
    mark_number(ui, rect, key)
}

/// Gives `rect` the node of a shown number.
pub fn mark_number(ui: &mut Ui, rect: Rect, key: &Key<'_>) -> Response {
    node_of_number(ui, rect, key, "number")
}

/// The same in the key table, where a number may stand a second time in the window.
pub fn table_number(ui: &mut Ui, rect: Rect, key: &Key<'_>) -> Response {
    node_of_number(ui, rect, key, "table number")
}

fn node_of_number(ui: &mut Ui, rect: Rect, key: &Key<'_>, place: &str) -> Response {
    let id = ui.make_persistent_id((place, key.id));
    let response = ui.interact(rect, id, Sense::hover());
    response.widget_info(|| WidgetInfo::labeled(Role::Label, true, key.value));
    let (author, name) = (key.id.to_owned(), key.name.to_owned());
    ui.ctx().accesskit_node_builder(response.id, |node| {
        node.set_author_id(author);
        node.set_label(name);
    });
    response.on_hover_ui(|ui| how(ui, key))
}

/// How a number was computed: method, formula, citation, breaths, doubts.
fn how(ui: &mut Ui, key: &Key<'_>) {
    let found = |o: &&Outcome| o.primary && values::key(&o.id, o.at) == key.id;
    let Some(outcome) = key.cx.results.outcomes.iter().find(found) else { return };
    ui.set_max_width(460.0);
    ui.label(key.value);
    for line in how::computed(outcome, key.cx.results, key.cx.settings, key.cx.facts) {
        ui.label(line);
    }
}

/// Text wrapped to `width`, its first line's top at `top_left`; returns its response.
pub fn block(
    ui: &mut Ui,
    top_left: Pos2,
    width: f32,
    text: &str,
    size: f32,
    color: Color32,
) -> Response {
    let galley = ui.painter().layout(text.to_owned(), FontId::proportional(size), color, width);
    let rect = Rect::from_min_size(top_left, vec2(galley.size().x, galley.size().y));
    ui.painter().galley(top_left, galley, color);
    let id = ui.next_auto_id();
    ui.skip_ahead_auto_ids(1);
    let response = ui.interact(rect, id, Sense::hover());
    response.widget_info(|| WidgetInfo::labeled(Role::Label, true, text));
    response
}

/// Height that `text` takes when wrapped to `width`.
#[must_use]
pub fn block_height(ui: &Ui, width: f32, text: &str, size: f32) -> f32 {
    ui.painter()
        .layout(text.to_owned(), FontId::proportional(size), Color32::PLACEHOLDER, width)
        .size()
        .y
}
