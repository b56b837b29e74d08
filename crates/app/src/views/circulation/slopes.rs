//! V̇O₂ on HR with lines of equal O₂ pulse, and both against work rate.

use analysis::o2_pulse::Line;
use analysis::quantity::Quantity as Q;
use egui::{Align, Rect, Ui, pos2, vec2};
use record::presentation::values::fixed;

use crate::chart::paint;
use crate::chart::spec::{CARRIED, Chart, Dash, Item, Mark, Point, Title};
use crate::chart::ticks::Axis;
use crate::context::Context;
use crate::theme::{Family, size};
use crate::values;
use crate::views::series;
use crate::widgets::text::{self, Run};

/// The instants of the averaged series within the ramp.
fn ramp_times(cx: &Context<'_>) -> Vec<f64> {
    let Some((from, to)) = cx.results.phases.ramp() else {
        return Vec::new();
    };
    cx.results.series.t_s.iter().copied().filter(|t| *t >= from && *t <= to).collect()
}

fn path(cx: &Context<'_>, x: impl Fn(f64) -> Option<f64>, y: Q) -> Vec<Point> {
    let shown = |q: Q, t: f64| values::raw_at(cx, q, t).map(|v| values::in_shown(q, v));
    ramp_times(cx).into_iter().filter_map(|t| Some([x(t)?, shown(y, t)?])).collect()
}

fn extent(points: &[Point], axis: usize) -> (f64, f64) {
    points
        .iter()
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(lo, hi), p| (lo.min(p[axis]), hi.max(p[axis])))
}

/// Raw breaths of the ramp: early dots and late open squares.
fn breaths(cx: &Context<'_>, chart: &mut Chart, x: impl Fn(usize, f64) -> Option<f64>, y: Q) {
    if !cx.view.raw {
        return;
    }
    let Some((from, to)) = cx.results.phases.ramp() else {
        return;
    };
    let late = cx.results.course.as_ref().and_then(|c| c.late).map(|l| (l.from_s, l.to_s));
    let (mut early, mut last) = (Vec::new(), Vec::new());
    for i in 0..cx.recording.breaths.len() {
        let t = cx.recording.breaths.mid_s(i);
        if t < from || t > to {
            continue;
        }
        let (Some(x), Some(y)) = (x(i, t), series::breath(cx, y, i)) else {
            continue;
        };
        let inside = late.is_some_and(|(a, b)| t >= a && t <= b);
        if inside { last.push([x, y]) } else { early.push([x, y]) }
    }
    let color = cx.tokens.raw(Family::of(y));
    chart.items.push(Item::Points { points: early, mark: Mark::Dot, radius: 1.6, color });
    chart.items.push(Item::Points { points: last, mark: Mark::OpenSquare, radius: 2.2, color });
}

/// Early and late line as a path through (x, y) in time.
fn fitted(cx: &Context<'_>, chart: &mut Chart, map: impl Fn(&Line, f64) -> Point) {
    let Some(course) = &cx.results.course else {
        return;
    };
    let ink = cx.tokens.ink;
    let piece = |l: &Line, a: f64, b: f64| {
        (0..=20).map(|i| map(l, a + (b - a) * f64::from(i) / 20.0)).collect::<Vec<_>>()
    };
    if let Some(l) = &course.early {
        let solid = vec![piece(l, l.from_s, l.to_s)];
        chart.items.push(Item::Line { pieces: solid, width: 1.4, color: ink, dash: None });
        let on = vec![piece(l, l.to_s, course.ramp_s.1)];
        chart.items.push(Item::Line { pieces: on, width: 1.4, color: ink, dash: CARRIED });
    }
    if let Some(l) = &course.late {
        let solid = vec![piece(l, l.from_s, l.to_s)];
        chart.items.push(Item::Line { pieces: solid, width: 2.0, color: ink, dash: None });
    }
}

/// V̇O₂ on HR.
pub fn on_hr(ui: &mut Ui, cx: &Context<'_>, rect: Rect) {
    let t = cx.tokens;
    let frame = Rect::from_min_max(
        pos2(rect.left() + 38.0, rect.top() + 27.0),
        pos2(rect.right() - 58.0, rect.bottom() - 20.0),
    );
    let title = [
        Run::new("V̇O₂ on HR", size::SECTION, t.ink),
        Run::new("   L/min against /min", size::BODY, t.ink2),
    ];
    let shown = if cx.grid.narrow { &title[..1] } else { &title[..] };
    text::line(ui, pos2(frame.left(), rect.top() + 14.0), Align::Min, shown);
    let hr = |time: f64| values::raw_at(cx, Q::Hr, time);
    let line = path(cx, hr, Q::Vo2);
    let (x, y) = (extent(&line, 0), extent(&line, 1));
    let (mut chart, known) = if line.len() > 1 {
        let x = Axis::around(x.0 - 3.0, x.1 + 6.0, 5);
        let y = Axis::around(y.0 * 0.9, y.1 * 1.15, 5);
        let mut chart = Chart::new("vo2-on-hr", (x.low, x.high), y);
        chart.x_axis = Some(x);
        (chart, true)
    } else {
        let mut chart = Chart::new("vo2-on-hr", (60.0, 180.0), Axis::fixed(0.0, 3.0, 0.5));
        chart.x_axis = Some(Axis::fixed(60.0, 180.0, 20.0));
        chart.missing = crate::views::time_charts::absent(Q::Hr);
        (chart, false)
    };
    if known {
        equal_pulse(cx, &mut chart, &line);
        chart.right_title = vec![Title::grey("mL/beat")];
        breaths(cx, &mut chart, |i, _| cx.recording.breaths.value(Q::Hr, i), Q::Vo2);
        let color = t.line(Family::Oxygen);
        chart.items.push(Item::Line { pieces: vec![line], width: 1.9, color, dash: None });
        fitted(cx, &mut chart, |l, time| {
            let (vo2, hr, _) = l.at(time);
            [hr, vo2 / 1000.0]
        });
    }
    chart.description = "V̇O₂ against heart rate over the ramp, with lines of equal O₂ pulse".into();
    paint::chart(ui, t, frame, &mut chart);
    let unit = [Run::new("/min", size::BODY, t.ink2)];
    text::paint(ui, pos2(frame.right() + 20.0, frame.bottom() + 15.0), Align::Min, &unit);
    if known {
        slopes_table(ui, cx, frame);
    }
}

/// Dotted lines of equal O₂ pulse around the path, named at the right edge.
fn equal_pulse(cx: &Context<'_>, chart: &mut Chart, path: &[Point]) {
    let pulses = path.iter().map(|p| 1000.0 * p[1] / p[0]);
    let (low, high) = pulses.fold((f64::INFINITY, 0.0_f64), |(lo, hi), p| (lo.min(p), hi.max(p)));
    let mut pulse = (low / 2.0).ceil() * 2.0;
    let color = cx.tokens.predicted;
    while pulse < high * 1.3 {
        let y = |hr: f64| pulse * hr / 1000.0;
        let line = vec![[chart.x.0, y(chart.x.0)], [chart.x.1, y(chart.x.1)]];
        let dash = Some(Dash(1.5, 4.0));
        chart.items.push(Item::Line { pieces: vec![line], width: 1.1, color, dash });
        let at_edge = y(chart.x.1);
        if at_edge > chart.y.low && at_edge < chart.y.high {
            chart.right.push((at_edge, format!("{pulse:.0}")));
        }
        pulse += 2.0;
    }
}

fn slopes_table(ui: &mut Ui, cx: &Context<'_>, frame: Rect) {
    let t = cx.tokens;
    let Some(n) = cx.results.course.as_ref().and_then(|c| c.numbers) else {
        return;
    };
    let late = cx.results.course.as_ref().and_then(|c| c.late).map(|l| l.slope());
    let short = frame.width() < 320.0;
    let first = if short { "slope ÷ pulse" } else { "local slope ÷ O₂ pulse (1 = level)" };
    let rows = [
        (first, fixed(n.rho_early, 2), fixed(n.rho_late, 2)),
        ("slope, mL/beat", fixed(n.asymptote.value, 1), late.map_or("–".into(), |s| fixed(s, 1))),
        ("late ÷ early slope", String::new(), fixed(n.slope_ratio.value, 2)),
    ];
    let wide = 300.0_f32.min(frame.width() - 8.0);
    let right = frame.right() - 8.0;
    let top = frame.bottom() - 6.0 - 18.0 * 4.0;
    let back = Rect::from_min_max(pos2(right - wide, top), pos2(right, frame.bottom() - 4.0));
    ui.painter().rect_filled(back, 2.0, t.plot.gamma_multiply(0.9));
    let cell = |ui: &mut Ui, x: f32, y: f32, s: &str, ink| {
        text::plain(ui, pos2(x, y), Align::Max, s, size::BODY, ink);
    };
    let mut y = top + 14.0;
    cell(ui, right - 56.0, y, "early", t.ink2);
    cell(ui, right - 6.0, y, "late", t.ink2);
    for (name, early, last) in rows {
        y += 18.0;
        text::plain(ui, pos2(back.left() + 4.0, y), Align::Min, name, size::BODY, t.ink2);
        if !early.is_empty() {
            cell(ui, right - 56.0, y, &early, t.ink);
        }
        cell(ui, right - 6.0, y, &last, t.ink);
    }
}

/// HR and V̇O₂ against work rate, one above the other.
pub fn against_work(ui: &mut Ui, cx: &Context<'_>, rect: Rect) {
    let t = cx.tokens;
    let left = rect.left() + cx.grid.ticks.0;
    let head = [Run::new("HR and V̇O₂ against work rate", size::SECTION, t.ink)];
    text::line(ui, pos2(left, rect.top() + 14.0), Align::Min, &head);
    let top = rect.top() + 24.0;
    let height = ((rect.bottom() - 20.0 - top - 14.0) * 0.5).max(10.0);
    let right = rect.right() - 112.0;
    for (i, q) in [Q::Hr, Q::Vo2].into_iter().enumerate() {
        let y = top + i as f32 * (height + 14.0);
        let frame = Rect::from_min_max(pos2(left, y), pos2(right, y + height));
        one_against_work(ui, cx, frame, q, i == 1);
    }
}

fn one_against_work(ui: &mut Ui, cx: &Context<'_>, frame: Rect, q: Q, labels: bool) {
    let t = cx.tokens;
    let watts = |time: f64| cx.recording.load.at(time);
    let line = path(cx, watts, q);
    let top = extent(&line, 0).1.max(50.0);
    let x = Axis::from_zero(top * 1.02, 4);
    let id = if q == Q::Hr { "hr-on-work" } else { "vo2-on-work" };
    if line.len() < 2 {
        let mut chart = Chart::new(id, (0.0, 200.0), Axis::fixed(0.0, 1.0, 1.0));
        chart.missing = crate::views::time_charts::absent(Q::WorkRate);
        paint::chart(ui, t, frame, &mut chart);
        return;
    }
    let y = extent(&line, 1);
    let pad = 0.12 * (y.1 - y.0);
    let mut chart = Chart::new(id, (0.0, x.high), Axis::around(y.0 - pad, y.1 + pad, 5));
    let empty = Axis::fixed(0.0, -1.0, 1.0);
    chart.x_axis = Some(if labels { x } else { empty });
    breaths(cx, &mut chart, |_, time| watts(time), q);
    let (width, dash, ..) = series::style(q);
    let color = t.line(Family::of(q));
    chart.items.push(Item::Line { pieces: vec![line], width, color, dash });
    // At load end the ergometer lets go: the load just before it is meant.
    let end = cx.results.phases.ramp().map_or(f64::INFINITY, |r| r.1 - 2.0);
    fitted(cx, &mut chart, |l, time| {
        let (vo2, hr, _) = l.at(time);
        [watts(time.min(end)).unwrap_or(0.0), if q == Q::Hr { hr } else { vo2 / 1000.0 }]
    });
    chart.description = format!("{} against work rate over the ramp", q.row().symbol);
    paint::chart(ui, t, frame, &mut chart);
    let unit = if q == Q::Hr { " /min" } else { " L/min" };
    let name = [
        Run::new(q.row().symbol, size::BODY, t.text(Family::of(q))),
        Run::new(unit, size::BODY, t.ink2),
    ];
    text::line(ui, frame.left_top() + vec2(8.0, 16.0), Align::Min, &name);
    if labels {
        let at = pos2(frame.right() + 16.0, frame.bottom() + 15.0);
        text::paint(ui, at, Align::Min, &[Run::new("W", size::BODY, t.ink2)]);
    }
    rates(ui, cx, frame, q);
}

/// Early and late slope against work, beside the frame.
fn rates(ui: &mut Ui, cx: &Context<'_>, frame: Rect, q: Q) {
    let t = cx.tokens;
    let Some(course) = &cx.results.course else {
        return;
    };
    let slope = |l: &Line| {
        let (a, b) = (cx.recording.load.at(l.from_s)?, cx.recording.load.at(l.to_s)?);
        let per_min = if q == Q::Hr { l.hr_per_min * 10.0 } else { l.vo2_per_min };
        let minutes = (l.to_s - l.from_s) / 60.0;
        (b > a).then(|| per_min * minutes / (b - a))
    };
    if course.early.is_none() && course.late.is_none() {
        return;
    }
    let unit: &[&str] = if q == Q::Hr { &["/min", "per 10 W"] } else { &["mL/min", "per W"] };
    let x = frame.right() + 10.0;
    let mut y = frame.top() + 16.0;
    for (name, line) in [("late", course.late), ("early", course.early)] {
        let Some(value) = line.as_ref().and_then(slope) else {
            continue;
        };
        text::plain(ui, pos2(x, y), Align::Min, name, size::BODY, t.ink2);
        let value = fixed(value, 1);
        text::plain(ui, pos2(x, y + 18.0), Align::Min, value, size::SECTION, t.ink);
        y += 40.0;
    }
    for (i, words) in unit.iter().enumerate() {
        let at = pos2(x, y + 15.0 * i as f32);
        if at.y < frame.bottom() + 4.0 {
            text::plain(ui, at, Align::Min, *words, size::BODY, t.ink2);
        }
    }
}
