//! A column of linked time charts with its handles, ribbon and notes.

use egui::{Align, NumExt as _, Rect, Response, Sense, Stroke, Ui, pos2, vec2};

use super::handles::{Handle, HandleKind};
use super::interact::{Geometry, REACH, pointer_id};
use super::layout::{Column, Scale};
use super::paint;
use super::spec::Chart;
use super::ticks::clock;
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::ribbon;
use crate::theme::size;
use crate::views::overlay;
use crate::widgets::text::{self, Run};

/// Which notes stand under a column.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// What was delivered: blood pressure, ECG, treatment.
    Heart,
    /// How it was breathed and felt.
    Breath,
}

/// Draws the column number `index` into `rect`.
pub fn show(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    rect: Rect,
    index: usize,
    side: Side,
    rows: Vec<(f32, Chart)>,
) -> Geometry {
    let weights: Vec<f32> = rows.iter().map(|(w, _)| *w).collect();
    let column = Column::of(rect, &cx.grid, &weights);
    let scale = Scale::over(column.ribbon, cx.time());
    let mut charts: Vec<Chart> = rows.into_iter().map(|(_, chart)| chart).collect();
    overlay::name(cx, &mut charts);
    for (frame, chart) in column.frames.iter().zip(&mut charts) {
        let response = paint::chart(ui, cx.tokens, *frame, chart);
        crate::widgets::missing::show(ui, cx, out, *frame, chart);
        frame_input(ui, cx, out, &scale, &response);
    }
    zoom_stretch(ui, cx, &column, &scale);
    for handle in cx.handles {
        vertical(ui, cx, &column, &scale, handle);
    }
    cursor(ui, cx, &column, &scale, &charts);
    let label = active_label(ui, cx, &column, &scale, index);
    let covered: Vec<Rect> = label.iter().map(|l| l.0).collect();
    paint::time_labels(ui, cx.tokens, column.labels, &scale, &covered);
    ribbon::show(ui, cx, &column, &scale, index);
    ribbon::notes(ui, cx, &column, &scale, side);
    areas(ui, cx, out, &column, &scale, index);
    if let Some((rect, text)) = label {
        yellow_label(ui, cx, rect, &text);
    }
    Geometry { column: index, scale, span: column.span() }
}

pub(crate) fn frame_input(
    ui: &Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    scale: &Scale,
    response: &Response,
) {
    let whole = cx.whole();
    if response.double_clicked() {
        out.push(Command::Zoom(None));
    } else if response.clicked()
        && let Some(pos) = response.interact_pointer_pos()
    {
        out.push(Command::Cursor(scale.value_at(pos.x).clamp(whole.0, whole.1)));
    }
    if let (true, Some(from), Some(to)) = (
        response.dragged() || response.drag_stopped(),
        ui.input(|i| i.pointer.press_origin()),
        response.interact_pointer_pos(),
    ) {
        let (a, b) = (scale.value_at(from.x), scale.value_at(to.x));
        let stretch = (a.min(b).max(whole.0), a.max(b).min(whole.1));
        if response.drag_stopped() {
            out.push(Command::ZoomDragging(None));
            if stretch.1 - stretch.0 >= 20.0 {
                out.push(Command::Zoom(Some(stretch)));
            }
        } else {
            out.push(Command::ZoomDragging(Some(stretch)));
        }
    } else if response.drag_stopped() {
        if let Some(stretch) = cx.view.zoom_drag.filter(|z| z.1 - z.0 >= 20.0) {
            out.push(Command::Zoom(Some(stretch)));
        }
        out.push(Command::ZoomDragging(None));
    }
    if let Some(pos) = response.hover_pos() {
        let (scroll, pan) = ui.input(|i| (i.smooth_scroll_delta().y, i.modifiers.shift));
        if scroll.abs() > 0.1 && !pan {
            let factor = f64::from((scroll * 0.004).exp());
            out.push(Command::Zoom(Some(zoomed(cx.time(), whole, scale.value_at(pos.x), factor))));
        }
    }
}

/// The stretch `now` magnified by `factor` around `centre`, within `whole`, not below 20 s.
#[must_use]
pub fn zoomed(now: (f64, f64), whole: (f64, f64), centre: f64, factor: f64) -> (f64, f64) {
    let span = ((now.1 - now.0) / factor).clamp(20.0, (whole.1 - whole.0).max(20.0));
    let share = (centre - now.0) / (now.1 - now.0);
    let from = (centre - share * span).max(whole.0).min((whole.1 - span).max(whole.0));
    (from, from + span)
}

fn zoom_stretch(ui: &Ui, cx: &Context<'_>, column: &Column, scale: &Scale) {
    let stretches = [cx.view.zoom_drag, cx.view.selected_s];
    for stretch in stretches.into_iter().flatten() {
        for frame in &column.frames {
            let (a, b) = (scale.place(stretch.0), scale.place(stretch.1));
            let rect = Rect::from_x_y_ranges(a..=b, frame.y_range()).intersect(*frame);
            if rect.is_positive() {
                ui.painter().rect_filled(rect, 0.0, cx.tokens.ink.gamma_multiply(0.08));
            }
        }
    }
}

/// The line of a handle through all frames.
pub(crate) fn vertical(ui: &Ui, cx: &Context<'_>, column: &Column, scale: &Scale, handle: &Handle) {
    if !scale.holds(handle.t_s) {
        return;
    }
    let t = cx.tokens;
    let x = ui.painter().round_to_pixel_center(scale.place(handle.t_s));
    let span = column.span();
    let bottom = column.ribbon.top();
    let held = cx.view.drag.filter(|d| d.kind == handle.kind);
    let ends = [pos2(x, span.top()), pos2(x, bottom)];
    match handle.kind {
        HandleKind::Mark(_) | HandleKind::Point(_) => {
            let stroke = Stroke::new(1.2, t.movable_edge);
            ui.painter().extend(egui::Shape::dashed_line(&ends, stroke, 1.2, 4.0));
        }
        HandleKind::Boundary(_) => {
            let wide = if held.is_some() {
                2.5
            } else if hovered(ui, handle) {
                2.0
            } else {
                1.2
            };
            let stroke = Stroke::new(wide, t.movable_edge);
            if handle.proposed && held.is_none() {
                ui.painter().extend(egui::Shape::dashed_line(&ends, stroke, 4.0, 4.0));
            } else {
                ui.painter().line_segment(ends, stroke);
            }
        }
        HandleKind::Cursor => {}
    }
    if let Some(held) = held.filter(|h| h.moved && scale.holds(h.was_s)) {
        let x = scale.place(held.was_s);
        let stroke = Stroke::new(1.0, t.ink2);
        let ends = [pos2(x, span.top()), pos2(x, bottom)];
        ui.painter().extend(egui::Shape::dashed_line(&ends, stroke, 2.0, 2.0));
    }
}

/// Whether the pointer rests on `handle` in any column.
#[must_use]
pub fn hovered(ui: &Ui, handle: &Handle) -> bool {
    (0..super::interact::COLUMNS).any(|column| {
        ui.ctx().read_response(pointer_id(handle.kind, column)).is_some_and(|r| r.hovered())
    })
}

pub(crate) fn cursor(ui: &Ui, cx: &Context<'_>, column: &Column, scale: &Scale, charts: &[Chart]) {
    let t_s = cx.cursor();
    let Some(first) = column.frames.first() else {
        return;
    };
    if !scale.holds(t_s) {
        return;
    }
    let x = ui.painter().round_to_pixel_center(scale.place(t_s));
    let last = column.frames.last().unwrap_or(first);
    let ink = Stroke::new(1.1, cx.tokens.ink.gamma_multiply(0.8));
    ui.painter().line_segment([pos2(x, first.top()), pos2(x, last.bottom())], ink);
    for (frame, chart) in column.frames.iter().zip(charts) {
        paint::rings(ui, cx.tokens, *frame, chart, x);
    }
    let top = first.top();
    let corners = vec![
        pos2(x - 5.5, top),
        pos2(x + 5.5, top),
        pos2(x + 5.5, top + 6.5),
        pos2(x, top + 12.0),
        pos2(x - 5.5, top + 6.5),
    ];
    let edge = Stroke::new(1.5, cx.tokens.movable_edge);
    ui.painter().add(egui::Shape::convex_polygon(corners, cx.tokens.movable, edge));
}

/// The label of the handle that is held, hovered or focused: its rectangle and words.
pub(crate) fn active_label(
    ui: &Ui,
    cx: &Context<'_>,
    column: &Column,
    scale: &Scale,
    index: usize,
) -> Option<(Rect, String)> {
    let focused = |h: &Handle| {
        ui.ctx().memory(|m| m.focused()) == Some(super::interact::slider_id(h.kind)) && index == 0
    };
    let over =
        |h: &Handle| ui.ctx().read_response(pointer_id(h.kind, index)).is_some_and(|r| r.hovered());
    let held = |h: &Handle| cx.view.drag.is_some_and(|d| d.kind == h.kind && d.column == index);
    let shown = cx.handles.iter().filter(|h| h.kind != HandleKind::Cursor);
    let any_held = cx.view.drag.is_some();
    let handle = shown
        .filter(|h| if any_held { held(h) } else { over(h) || focused(h) })
        .min_by_key(|h| !held(h))?;
    if !scale.holds(handle.t_s) {
        return None;
    }
    let mut words = format!("{} {}", handle.kind.name(), clock(handle.t_s));
    if let Some(w) = cx.recording.load.at(handle.t_s) {
        words.push_str(&format!(" · {w:.0}\u{a0}W"));
    }
    if let Some(drag) = cx.view.drag.filter(|d| d.moved) {
        words.push_str(&format!("   was {}", clock(drag.was_s)));
    }
    let wide = text::width(ui, &[Run::new(words.clone(), size::BODY, cx.tokens.on_movable)]) + 12.0;
    let x = scale.place(handle.t_s);
    let left =
        (x - 0.5 * wide).at_most(column.labels.right() - wide).at_least(column.labels.left());
    let top = column.labels.top() + 1.0;
    Some((Rect::from_min_size(pos2(left, top), vec2(wide, 20.0)), words))
}

pub(crate) fn yellow_label(ui: &mut Ui, cx: &Context<'_>, rect: Rect, words: &str) {
    let t = cx.tokens;
    let rect = rect.translate(vec2(0.0, -4.0));
    ui.painter().rect(
        rect,
        2.0,
        t.movable,
        Stroke::new(1.0, t.movable_edge),
        egui::StrokeKind::Inside,
    );
    let at = pos2(rect.left() + 6.0, rect.center().y + 4.5);
    text::plain(ui, at, Align::Min, words, size::BODY, t.on_movable);
}

/// Pointer areas of the handles, over everything else in the column.
pub(crate) fn areas(
    ui: &mut Ui,
    cx: &Context<'_>,
    _out: &mut Outbox,
    column: &Column,
    scale: &Scale,
    index: usize,
) {
    let span = column.span();
    let places: Vec<f32> = cx.handles.iter().map(|h| scale.place(h.t_s)).collect();
    for (i, handle) in cx.handles.iter().enumerate() {
        let held = cx.view.drag.is_some_and(|d| d.kind == handle.kind);
        if !scale.holds(handle.t_s) && !held {
            continue;
        }
        let x = places[i];
        // Never beyond half-way to a neighbour of the same sort.
        let neighbour = |side: f32| {
            cx.handles
                .iter()
                .zip(&places)
                .filter(|(h, p)| h.kind != handle.kind && (*p - x) * side > 0.0)
                .map(|(_, p)| (p - x).abs() * 0.5)
                .fold(REACH, f32::min)
                .max(3.0)
        };
        let (left, right) = (neighbour(-1.0), neighbour(1.0));
        let y = match handle.kind {
            HandleKind::Cursor => span.top()..=(span.top() + 16.0),
            // A mark is taken at its diamond and along its dotted line.
            HandleKind::Boundary(_) | HandleKind::Mark(_) | HandleKind::Point(_) => {
                span.top()..=(span.bottom() + 4.0)
            }
        };
        let rect = Rect::from_x_y_ranges((x - left)..=(x + right), y);
        let response = ui.interact(rect, pointer_id(handle.kind, index), Sense::DRAG);
        if response.hovered() || response.dragged() {
            ui.ctx().set_cursor_icon(egui::CursorIcon::ResizeHorizontal);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn zoom_stays_within_the_test() {
        assert_eq!(zoomed((0.0, 100.0), (0.0, 100.0), 50.0, 2.0), (25.0, 75.0));
        assert_eq!(zoomed((25.0, 75.0), (0.0, 100.0), 25.0, 0.25), (0.0, 100.0));
        let (from, to) = zoomed((0.0, 100.0), (0.0, 100.0), 100.0, 1000.0);
        assert_eq!((from, to), (80.0, 100.0));
    }
}
