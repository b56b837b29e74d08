//! Draws a chart into its frame.

use egui::{
    Align, Color32, NumExt as _, Rect, Response, Role, Sense, Stroke, Ui, UiBuilder, WidgetInfo,
    pos2, vec2,
};
use egui_plot::{Plot, PlotBounds};

use super::items::Drawn;
use super::layout::Scale;
use super::spec::{Chart, Title};
use super::ticks::{clock, ticks, time_step};
use crate::theme::{Family, Tokens, size};
use crate::widgets::text::{self, Run};

/// Draws `chart` into `frame`; the response is that of the frame.
pub fn chart(ui: &mut Ui, tokens: &Tokens, frame: Rect, chart: &mut Chart) -> Response {
    ui.painter().rect_filled(frame, 0.0, tokens.plot);
    titles(ui, tokens, frame, chart);
    if chart.missing.is_none() {
        plot(ui, tokens, frame, chart, false);
    }
    let x = Scale::over(frame, chart.x);
    ground(ui, tokens, frame, chart, &x);
    if chart.missing.is_none() {
        plot(ui, tokens, frame, chart, true);
        super::words::show(ui, tokens, frame, chart, &x);
    }
    let id = ui.make_persistent_id(("frame", chart.id));
    let response = ui.interact(frame, id, Sense::CLICK | Sense::DRAG);
    response.widget_info(|| WidgetInfo::labeled(Role::GraphicsDocument, true, &chart.description));
    response
}

/// Bands and stretches lie behind the ground lines, everything else before them.
fn is_ground(item: &super::spec::Item) -> bool {
    use super::spec::Item;
    matches!(item, Item::Band { .. } | Item::Stretch { .. } | Item::Hatch { .. })
}

fn plot(ui: &mut Ui, _tokens: &Tokens, frame: Rect, chart: &mut Chart, data: bool) {
    let (mine, rest): (Vec<_>, Vec<_>) =
        chart.items.drain(..).partition(|item| is_ground(item) != data);
    chart.items = rest;
    if mine.is_empty() {
        return;
    }
    let bounds = PlotBounds::from_min_max([chart.x.0, chart.y.low], [chart.x.1, chart.y.high]);
    ui.scope_builder(UiBuilder::new().max_rect(frame).id_salt(("plot", chart.id, data)), |ui| {
        ui.spacing_mut().item_spacing = egui::Vec2::ZERO;
        Plot::new(("plot", chart.id, data))
            .width(frame.width())
            .height(frame.height())
            .show_axes(false)
            .show_grid(false)
            .show_background(false)
            .show_x(false)
            .show_y(false)
            .show_crosshair(false)
            .allow_drag(false)
            .allow_zoom(false)
            .allow_scroll(false)
            .allow_boxed_zoom(false)
            .allow_double_click_reset(false)
            .allow_axis_zoom_drag(false)
            .sense(Sense::hover())
            .show(ui, move |plot| {
                plot.set_plot_bounds(bounds);
                for item in mine {
                    plot.add(Drawn::new(item));
                }
            });
    });
}

fn runs(tokens: &Tokens, titles: &[Title]) -> Vec<Run> {
    titles
        .iter()
        .enumerate()
        .map(|(i, title)| {
            let lead = if i == 0 { "" } else { "  " };
            match title {
                Title::Name(name, family) => {
                    Run::new(format!("{lead}{name}"), size::BODY, tokens.text(*family))
                }
                Title::Grey(text) => Run::new(format!("{lead}{text}"), size::BODY, tokens.ink2),
            }
        })
        .collect()
}

fn titles(ui: &mut Ui, tokens: &Tokens, frame: Rect, chart: &Chart) {
    let y = frame.top() - 6.0;
    let right = runs(tokens, &chart.right_title);
    let mut left = runs(tokens, &chart.title);
    // Without a title at the right the left one may stand over the right ticks.
    let room = frame.width() + if right.is_empty() { 40.0 } else { -8.0 };
    let room = room - text::width(ui, &right);
    while left.len() > 1 && text::width(ui, &left) > room {
        left.pop();
    }
    text::line(ui, pos2(frame.left(), y), Align::Min, &left);
    if !right.is_empty() {
        text::line(ui, pos2(frame.right(), y), Align::Max, &right);
    }
}

fn ground(ui: &mut Ui, tokens: &Tokens, frame: Rect, chart: &Chart, x: &Scale) {
    let painter = ui.painter().clone();
    let full = Stroke::new(1.0, tokens.grid);
    let half = Stroke::new(1.0, tokens.grid.gamma_multiply(0.5));
    match &chart.x_axis {
        Some(axis) => {
            let base = frame.bottom() + 15.0;
            let grey = |words: String| [Run::new(words, size::BODY, tokens.ink2)];
            let unit = grey(chart.x_unit.clone());
            let unit = text::paint(ui, pos2(frame.right() + 46.0, base), Align::Max, &unit);
            for t in axis.ticks() {
                painter.vline(x.place(t), frame.y_range(), full);
                let label = grey(axis.label(t));
                if x.place(t) + 0.5 * text::width(ui, &label) < unit.left() {
                    text::paint(ui, pos2(x.place(t), base), Align::Center, &label);
                }
            }
        }
        None => {
            let step = time_step(chart.x.1 - chart.x.0, frame.width(), 56.0);
            // Minutes are lined where they stand apart.
            let apart = 60.0 * f64::from(frame.width()) / (chart.x.1 - chart.x.0) >= 6.0;
            let fine = if step > 60.0 && apart { 60.0 } else { step };
            for t in ticks(chart.x.0, chart.x.1, fine) {
                let labelled = (t / step - (t / step).round()).abs() < 1e-9;
                painter.vline(x.place(t), frame.y_range(), if labelled { full } else { half });
            }
        }
    }
    let y = Scale { px: (frame.bottom(), frame.top()), value: (chart.y.low, chart.y.high) };
    for tick in chart.y.ticks() {
        painter.hline(frame.x_range(), y.place(tick), full);
        let at = pos2(frame.left() - 6.0, y.place(tick) + 4.5);
        let label = Run::new(chart.y.label(tick), size::BODY, tokens.ink2);
        text::paint(ui, at, Align::Max, &[label]);
    }
    for (value, label) in &chart.right {
        let at = pos2(frame.right() + 6.0, y.place(*value) + 4.5);
        text::paint(ui, at, Align::Min, &[Run::new(label.clone(), size::BODY, tokens.ink2)]);
    }
    let edge = Stroke::new(1.0, tokens.frame);
    painter.vline(frame.left(), frame.y_range(), edge);
    painter.hline(frame.x_range(), frame.bottom(), edge);
}

/// Time labels under a column; those that `covered` hides are left out whole.
pub fn time_labels(ui: &mut Ui, tokens: &Tokens, labels: Rect, x: &Scale, covered: &[Rect]) {
    let step = time_step(x.value.1 - x.value.0, labels.width(), 56.0);
    let all = ticks(x.value.0, x.value.1, step);
    let last = all.len().saturating_sub(1);
    for (i, t) in all.iter().enumerate() {
        let run = [Run::new(clock(*t), size::BODY, tokens.ink2)];
        let wide = text::width(ui, &run);
        let centre = x.place(*t);
        let left = (centre - 0.5 * wide).at_most(labels.right() - wide).at_least(labels.left());
        let left = if i == 0 || i == last { left } else { centre - 0.5 * wide };
        let rect = Rect::from_min_size(pos2(left, labels.top()), vec2(wide, labels.height()));
        if covered.iter().any(|c| c.intersects(rect)) {
            continue;
        }
        // A boundary's line stops at the figures.
        ui.painter().rect_filled(rect.shrink2(vec2(-1.0, 2.0)), 0.0, tokens.window);
        text::paint(ui, pos2(left, labels.bottom() - 5.0), Align::Min, &run);
    }
}

/// Rings where the cursor meets the lines of `chart`.
pub fn rings(ui: &Ui, tokens: &Tokens, frame: Rect, chart: &Chart, x_px: f32) {
    let y = Scale { px: (frame.bottom(), frame.top()), value: (chart.y.low, chart.y.high) };
    for (value, color) in &chart.rings {
        let at = pos2(x_px, y.place(*value));
        if frame.contains(at) {
            ui.painter().circle(at, 3.5, tokens.plot, Stroke::new(1.5, *color));
        }
    }
}

/// Colour of a name.
#[must_use]
pub fn name_color(tokens: &Tokens, family: Family) -> Color32 {
    tokens.text(family)
}
