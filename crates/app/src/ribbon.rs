//! The phase ribbon under each column of time charts: phases, grips, marks, notes.

use analysis::decisions::Phase;
use egui::{
    Align, EventFilter, NumExt as _, Rect, Role, Sense, Stroke, StrokeKind, Ui, WidgetInfo, pos2,
    vec2,
};

use crate::chart::column::{Side, hovered};
use crate::chart::handles::{Handle, HandleKind};
use crate::chart::interact::slider_id;
use crate::chart::layout::{Column, Scale};
use crate::chart::ticks::clock;
use crate::context::Context;
use crate::theme::size;
use crate::widgets::notes::Note;
use crate::widgets::text::{self, Run};

/// Draws the ribbon; the sliders stand on that of the first column.
pub fn show(ui: &mut Ui, cx: &Context<'_>, column: &Column, scale: &Scale, index: usize) {
    let ribbon = column.ribbon;
    ui.painter().rect_filled(ribbon, 0.0, cx.tokens.phases[0]);
    let marks = marks(ui, cx, scale);
    for span in &cx.results.phases.spans {
        let (a, b) = (scale.place(span.from_s), scale.place(span.to_s));
        let rect = Rect::from_x_y_ranges(a..=b, ribbon.y_range()).intersect(ribbon);
        if !rect.is_positive() {
            continue;
        }
        ui.painter().rect_filled(rect, 0.0, cx.tokens.phases[span.phase as usize]);
        phase_word(ui, cx, rect, span.phase, span.to_s - span.from_s, &marks);
    }
    for (handle, x, word) in &marks {
        diamond(ui, cx, ribbon, handle, *x, word.as_ref());
    }
    for handle in cx.handles {
        if scale.holds(handle.t_s) && matches!(handle.kind, HandleKind::Boundary(_)) {
            grip(ui, cx, ribbon, scale.place(handle.t_s), handle);
        }
    }
    if index == 0 {
        for handle in cx.handles {
            slider(ui, cx, ribbon, scale, handle);
        }
    }
}

/// The name of a phase.
#[must_use]
pub fn phase_name(phase: Phase) -> &'static str {
    match phase {
        Phase::Rest => "Rest",
        Phase::WarmUp => "Warm-up",
        Phase::Ramp => "Ramp",
        Phase::Recovery => "Recovery",
    }
}

fn phase_word(
    ui: &mut Ui,
    cx: &Context<'_>,
    rect: Rect,
    phase: Phase,
    length_s: f64,
    marks: &[(Handle, f32, Option<Rect>)],
) {
    let long = format!("{}  {}", phase_name(phase), clock(length_s));
    let base = rect.center().y + 4.5;
    let left = rect.left() + 11.0;
    let free_to = marks
        .iter()
        .map(|(_, x, _)| x - 10.0)
        .filter(|x| *x > rect.left() && *x < rect.right())
        .fold(rect.right() - 9.0, f32::min);
    for words in [long.as_str(), phase_name(phase)] {
        let run = [Run::new(words, size::BODY, cx.tokens.ink)];
        if left + text::width(ui, &run) <= free_to {
            text::line(ui, pos2(left, base), Align::Min, &run);
            return;
        }
    }
}

/// Marks on the ribbon: handle, x, and where its name has room.
fn marks(ui: &Ui, cx: &Context<'_>, scale: &Scale) -> Vec<(Handle, f32, Option<Rect>)> {
    let all: Vec<Handle> = cx
        .handles
        .iter()
        .filter(|h| matches!(h.kind, HandleKind::Mark(_)) && scale.holds(h.t_s))
        .copied()
        .collect();
    all.iter()
        .map(|handle| {
            let x = scale.place(handle.t_s);
            let run = [Run::new(handle.kind.name(), size::BODY, cx.tokens.ink)];
            let name = Rect::from_min_size(pos2(x + 9.0, 0.0), vec2(text::width(ui, &run), 14.0));
            let blocked = cx.handles.iter().any(|other| {
                other.kind != handle.kind && {
                    let at = scale.place(other.t_s);
                    other.kind != HandleKind::Cursor && at > x && at < name.right() + 9.0
                }
            });
            (*handle, x, (!blocked).then_some(name))
        })
        .collect()
}

fn diamond(
    ui: &mut Ui,
    cx: &Context<'_>,
    ribbon: Rect,
    handle: &Handle,
    x: f32,
    name: Option<&Rect>,
) {
    let c = pos2(x, ribbon.center().y);
    let r = 6.5;
    let corners = vec![c + vec2(0.0, -r), c + vec2(r, 0.0), c + vec2(0.0, r), c + vec2(-r, 0.0)];
    let held = cx.view.drag.is_some_and(|d| d.kind == handle.kind);
    let fill = if handle.proposed && !held { cx.tokens.plot } else { cx.tokens.movable };
    let edge = Stroke::new(1.5, cx.tokens.movable_edge);
    ui.painter().add(egui::Shape::convex_polygon(corners, fill, edge));
    if let Some(name) = name {
        let at = pos2(name.left(), c.y + 4.5);
        text::plain(ui, at, Align::Min, handle.kind.name(), size::BODY, cx.tokens.ink);
    }
}

pub(crate) fn grip(ui: &Ui, cx: &Context<'_>, ribbon: Rect, x: f32, handle: &Handle) {
    let t = cx.tokens;
    let held = cx.view.drag.is_some_and(|d| d.kind == handle.kind);
    let active = held || hovered(ui, handle);
    let wide = if active { 16.0 } else { 12.0 };
    let rect =
        Rect::from_center_size(pos2(x, ribbon.center().y), vec2(wide, ribbon.height() + 6.0));
    let fill = if handle.proposed && !held { t.plot } else { t.movable };
    ui.painter().rect(rect, 2.5, fill, Stroke::new(1.5, t.movable_edge), StrokeKind::Inside);
    let offsets: &[f32] = if active { &[-3.5, 0.0, 3.5] } else { &[-2.0, 2.0] };
    for dx in offsets {
        let at = ui.painter().round_to_pixel_center(x + dx);
        let y = rect.center().y;
        ui.painter().vline(at, (y - 6.0)..=(y + 6.0), Stroke::new(1.0, t.movable_edge));
    }
    if ui.ctx().memory(|m| m.focused()) == Some(slider_id(handle.kind)) {
        focus_ring(ui, cx, rect);
    }
}

fn focus_ring(ui: &Ui, cx: &Context<'_>, rect: Rect) {
    let ring = Stroke::new(2.0, cx.tokens.ink);
    ui.painter().rect_stroke(rect.expand(4.0), 2.0, ring, StrokeKind::Middle);
}

/// The focusable slider of a handle.
pub(crate) fn slider(ui: &mut Ui, cx: &Context<'_>, ribbon: Rect, scale: &Scale, handle: &Handle) {
    let x = scale.place(handle.t_s).at_most(ribbon.right()).at_least(ribbon.left());
    let rect = Rect::from_center_size(pos2(x, ribbon.center().y), vec2(12.0, ribbon.height()));
    let response = ui.interact(rect, slider_id(handle.kind), Sense::FOCUSABLE);
    let name = handle.kind.name();
    response.widget_info(|| WidgetInfo::slider(true, handle.t_s, name));
    ui.ctx().accesskit_node_builder(response.id, |node| {
        node.set_role(Role::Slider);
        node.set_value(clock(handle.t_s));
        node.set_min_numeric_value(handle.range_s.0);
        node.set_max_numeric_value(handle.range_s.1);
        node.set_description(if handle.proposed { "proposal" } else { "decision" });
    });
    if response.has_focus() {
        let filter = EventFilter { horizontal_arrows: true, ..EventFilter::default() };
        ui.memory_mut(|m| m.set_focus_lock_filter(response.id, filter));
        if !matches!(handle.kind, HandleKind::Boundary(_)) {
            focus_ring(ui, cx, rect);
        }
    }
}

/// Timed notes under the ribbon, in two lanes.
pub fn notes(ui: &mut Ui, cx: &Context<'_>, column: &Column, scale: &Scale, side: Side) {
    let rect = column.notes;
    let t = cx.tokens;
    ui.painter().rect(rect, 0.0, t.panel, Stroke::new(1.0, t.grid), StrokeKind::Inside);
    if !cx.grid.narrow {
        let at = pos2(rect.left() - 6.0, rect.top() + 14.0);
        text::plain(ui, at, Align::Max, "notes", size::BODY, t.ink2);
    }
    let all: Vec<Note> = crate::widgets::notes::of_side(cx, side)
        .into_iter()
        .filter(|n| scale.holds(n.t_s))
        .collect();
    for note in &all {
        let x = scale.place(note.t_s);
        ui.painter().vline(x, rect.top() - 3.0..=rect.top() + 2.0, Stroke::new(1.5, t.ink));
    }
    let mut taken: [Vec<(f32, f32)>; 2] = [Vec::new(), Vec::new()];
    // What may need action is placed first, in the lower lane; the rest takes what is left.
    for note in all.iter().filter(|n| n.strong).chain(all.iter().filter(|n| !n.strong)) {
        let x = scale.place(note.t_s);
        let text = cut(&note.text, 34);
        let ink = if note.strong { t.ink } else { t.ink2 };
        let run = [Run::new(text, size::BODY, ink)];
        let wide = text::width(ui, &run);
        let left = (x + 4.0).min(rect.right() - wide - 2.0).max(rect.left() + 2.0);
        let free = |lane: usize| {
            taken[lane].iter().all(|(a, b)| left + wide + 6.0 < *a || left > *b + 6.0)
        };
        let lanes = if note.strong { [1, 0] } else { [0, 1] };
        let Some(lane) = lanes.into_iter().find(|lane| free(*lane)) else {
            continue;
        };
        taken[lane].push((left, left + wide));
        let base = rect.top() + rect.height() * (0.5 * lane as f32 + 0.25) + 5.0;
        text::line(ui, pos2(left, base), Align::Min, &run).on_hover_text(note.text.clone());
    }
}

/// At most `most` characters, cut at a word.
fn cut(text: &str, most: usize) -> String {
    if text.chars().count() <= most {
        return text.to_owned();
    }
    let head: String = text.chars().take(most).collect();
    let end = head.rfind(' ').unwrap_or(head.len());
    format!("{}…", head[..end].trim_end_matches([',', ' ']))
}
