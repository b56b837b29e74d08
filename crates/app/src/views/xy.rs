//! Charts of one quantity against another over the increments, and cells to put them in.

use analysis::quantity::Quantity;
use egui::{Rect, Ui, pos2, vec2};

use super::series;
use crate::chart::paint;
use crate::chart::spec::{Chart, Item, Mark, Point, Title};
use crate::chart::ticks::Axis;
use crate::context::Context;
use crate::theme::Family;
use crate::values;

/// Averaged path of `y` on `x` between two instants, shown units.
#[must_use]
pub fn path(cx: &Context<'_>, x: Quantity, y: Quantity, window: (f64, f64)) -> Vec<Point> {
    let series = &cx.results.series;
    let at = |q: Quantity, i: usize| {
        if q == Quantity::WorkRate {
            return cx.recording.load.at(series.t_s[i]);
        }
        let value = series.columns.get(&q)?.get(i).copied().flatten()?;
        Some(values::in_shown(q, value))
    };
    (0..series.t_s.len())
        .filter(|i| series.t_s[*i] >= window.0 && series.t_s[*i] <= window.1)
        .filter_map(|i| Some([at(x, i)?, at(y, i)?]))
        .collect()
}

/// Breaths of `y` on `x` between two instants, shown units.
#[must_use]
pub fn breaths(cx: &Context<'_>, x: Quantity, y: Quantity, window: (f64, f64)) -> Vec<Point> {
    let b = &cx.recording.breaths;
    let at = |q: Quantity, i: usize| match q {
        Quantity::WorkRate => cx.recording.load.at(b.mid_s(i)),
        q => series::breath(cx, q, i),
    };
    (0..b.len())
        .filter(|i| b.mid_s(*i) >= window.0 && b.mid_s(*i) <= window.1)
        .filter_map(|i| Some([at(x, i)?, at(y, i)?]))
        .collect()
}

/// Smallest and largest of one coordinate.
#[must_use]
pub fn extent(points: &[Point], axis: usize) -> Option<(f64, f64)> {
    let mut all = points.iter().map(|p| p[axis]);
    let first = all.next()?;
    Some(all.fold((first, first), |(lo, hi), v| (lo.min(v), hi.max(v))))
}

/// The window of the increments, or the whole test.
#[must_use]
pub fn ramp(cx: &Context<'_>) -> (f64, f64) {
    cx.results.phases.ramp().unwrap_or_else(|| cx.whole())
}

/// A chart of `y` on `x` over `window`: breaths faint, average as a line, the cursor as a ring.
#[must_use]
pub fn chart(
    cx: &Context<'_>,
    id: &'static str,
    x: Quantity,
    y: Quantity,
    window: (f64, f64),
    zero: bool,
) -> Chart {
    let line = path(cx, x, y, window);
    let (Some(xs), Some(ys)) = (extent(&line, 0), extent(&line, 1)) else {
        let mut chart = Chart::new(id, (0.0, 1.0), Axis::fixed(0.0, 1.0, 0.5));
        chart.x_axis = Some(Axis::fixed(0.0, -1.0, 1.0));
        let lacking = if cx.recording.has(y) { x } else { y };
        chart.missing = super::time_charts::absent(lacking);
        chart.description = "no data".into();
        return chart;
    };
    let pad = |r: (f64, f64), share: f64| share * (r.1 - r.0);
    let (x_axis, y_axis) = if zero {
        (Axis::from_zero(xs.1 * 1.05, 5), Axis::from_zero(ys.1 * 1.1, 5))
    } else {
        (
            Axis::around(xs.0 - pad(xs, 0.03), xs.1 + pad(xs, 0.03), 5),
            Axis::around(ys.0 - pad(ys, 0.08), ys.1 + pad(ys, 0.12), 5),
        )
    };
    let mut chart = Chart::new(id, (x_axis.low, x_axis.high), y_axis);
    chart.x_axis = Some(x_axis);
    let family = Family::of(y);
    if cx.view.raw {
        let points = breaths(cx, x, y, window);
        let color = cx.tokens.raw(family);
        chart.items.push(Item::Points { points, mark: Mark::Dot, radius: 1.6, color });
    }
    super::overlay::against(cx, &mut chart, x, y);
    let (width, dash, ..) = series::style(y);
    let color = cx.tokens.line(family);
    chart.items.push(Item::Line { pieces: vec![line], width, color, dash });
    cursor(cx, &mut chart, x, y);
    let (xu, yu) = (values::shown_unit(x).0.shown(), values::shown_unit(y).0.shown());
    let words = format!("{yu} against {} {xu}", x.row().symbol);
    chart.title = vec![series::title(y), Title::grey(words.trim().to_owned())];
    chart.description =
        format!("{} against {} over the increments", y.row().symbol, x.row().symbol);
    chart
}

/// An open ring at the cursor's place.
pub fn cursor(cx: &Context<'_>, chart: &mut Chart, x: Quantity, y: Quantity) {
    let t = cx.cursor();
    let near = path(cx, x, y, (t - 2.0, t + 2.0));
    if let Some(p) = near.get(near.len() / 2) {
        let color = cx.tokens.ink;
        chart.items.push(Item::Points { points: vec![*p], mark: Mark::Ring, radius: 4.0, color });
    }
}

/// Frames in a grid of `columns` × `rows`, with room for ticks, titles and labels.
#[must_use]
pub fn cells(rect: Rect, columns: usize, rows: usize) -> Vec<Rect> {
    let (gap_x, gap_y) = (14.0, 6.0);
    let w = (rect.width() - gap_x * (columns as f32 - 1.0)) / columns as f32;
    let h = (rect.height() - gap_y * (rows as f32 - 1.0)) / rows as f32;
    (0..columns * rows)
        .map(|i| {
            let (c, r) = ((i % columns) as f32, (i / columns) as f32);
            let at = pos2(rect.left() + c * (w + gap_x), rect.top() + r * (h + gap_y));
            frame(Rect::from_min_size(at, vec2(w, h)))
        })
        .collect()
}

/// The frame of a chart that takes `cell` with its ticks and title.
#[must_use]
pub fn frame(cell: Rect) -> Rect {
    Rect::from_min_max(
        pos2(cell.left() + 38.0, cell.top() + 20.0),
        pos2(cell.right() - 46.0, cell.bottom() - 20.0),
    )
}

/// Draws `chart` with its x unit at the right end.
pub fn draw(ui: &mut Ui, cx: &Context<'_>, frame: Rect, mut chart: Chart, x_unit: &str) {
    chart.x_unit = x_unit.to_owned();
    paint::chart(ui, cx.tokens, frame, &mut chart);
    crate::widgets::missing::show(ui, cx, &mut Vec::new(), frame, &chart);
}

/// A straight line between two x.
#[must_use]
pub fn straight(slope: f64, intercept: f64, x: (f64, f64)) -> Vec<Vec<Point>> {
    vec![vec![[x.0, intercept + slope * x.0], [x.1, intercept + slope * x.1]]]
}
