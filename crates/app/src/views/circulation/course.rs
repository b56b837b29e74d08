//! The O₂ pulse over the ramp with its own early line and late window.

use analysis::o2_pulse::CourseDetail;
use analysis::quantity::Quantity as Q;
use egui::{Align, Rect, Stroke, Ui, pos2, vec2};

use crate::chart::column;
use crate::chart::handles::{End, HandleKind};
use crate::chart::interact::Geometry;
use crate::chart::layout::Scale;
use crate::chart::paint;
use crate::chart::spec::{CARRIED, Chart, EndLabel, FINE, Item, Mark, Title};
use crate::chart::ticks::{Axis, clock, ticks, time_step};
use crate::command::Outbox;
use crate::context::Context;
use crate::ribbon;
use crate::theme::{Family, size};
use crate::views::series::{self, GAP_S};
use crate::widgets::text::{self, Run};

/// Draws the chart with what is said beside it.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Geometry {
    let t = cx.tokens;
    let left = rect.left() + cx.grid.ticks.0;
    let title = [
        Run::new("O₂ pulse over the ramp", size::SECTION, t.ink),
        Run::new("   mL/beat  ·  mean V̇O₂ ÷ mean HR", size::BODY, t.ink2),
    ];
    text::line(ui, pos2(left, rect.top() + 14.0), Align::Min, &title);
    let box_height = if cx.grid.narrow { 52.0 } else { 78.0 };
    let box_top = rect.top() + 24.0;
    let head = Rect::from_min_max(pos2(left, box_top), pos2(rect.right(), box_top + box_height));
    super::course_box::show(ui, cx, out, head);
    let frame = Rect::from_min_max(
        pos2(left, head.bottom() + 24.0),
        pos2(rect.right() - if cx.grid.narrow { 8.0 } else { 16.0 }, rect.bottom() - 20.0),
    );
    let x = span(cx);
    let scale = Scale::over(frame, x);
    let mut chart = chart(cx, x);
    let response = paint::chart(ui, t, frame, &mut chart);
    crate::widgets::missing::show(ui, cx, out, frame, &chart);
    column::frame_input(ui, cx, out, &scale, &response);
    windows_above(ui, cx, frame, &scale);
    onset(ui, cx, frame, &scale);
    handles(ui, cx, out, frame, &scale, &chart);
    Geometry { column: 0, scale, span: frame }
}

/// A minute before the ramp to a minute and a half after it.
fn span(cx: &Context<'_>) -> (f64, f64) {
    if let Some(zoom) = cx.view.zoom_s {
        return zoom;
    }
    // While a boundary moves the axis stays where it was, so that the hand finds it.
    let (from, to) = cx.committed.phases.ramp().unwrap_or(cx.whole());
    let whole = cx.whole();
    ((from - 60.0).max(whole.0), (to + 90.0).min(whole.1))
}

fn chart(cx: &Context<'_>, x: (f64, f64)) -> Chart {
    let t = cx.tokens;
    let range = series::range(cx, Q::O2Pulse);
    let (low, high) = range.unwrap_or((0.0, 15.0));
    let axis = Axis::around((low * 0.9).max(0.0), high * 1.3, 8);
    let mut chart = Chart::new("course", x, axis);
    chart.x_axis = Some(Axis::fixed(x.0, x.0 - 1.0, 1.0));
    chart.title = vec![Title::grey("")];
    if range.is_none() {
        chart.missing = crate::views::time_charts::absent(Q::O2Pulse);
        return chart;
    }
    let course = cx.results.course.as_ref();
    let late = course.and_then(|c| c.late);
    if let Some(late) = late {
        chart.items.push(Item::Stretch {
            from: late.from_s,
            to: late.to_s,
            fill: t.late,
            edge: Some(t.frame),
        });
    }
    crate::views::overlay::time(cx, &mut chart, Q::O2Pulse, |v| v);
    raw(cx, &mut chart, late.map(|l| (l.from_s, l.to_s)));
    average(cx, &mut chart);
    if let Some(course) = course {
        lines(cx, &mut chart, course);
    }
    chart.description = describe(cx);
    crate::views::overlay::name(cx, [&mut chart]);
    chart
}

fn raw(cx: &Context<'_>, chart: &mut Chart, late: Option<(f64, f64)>) {
    if !cx.view.raw {
        return;
    }
    let color = cx.tokens.raw(Family::Circulation);
    let (mut early, mut last) = (Vec::new(), Vec::new());
    for i in 0..cx.recording.breaths.len() {
        let t = cx.recording.breaths.mid_s(i);
        if t < chart.x.0 || t > chart.x.1 {
            continue;
        }
        if let Some(v) = series::breath(cx, Q::O2Pulse, i) {
            let inside = late.is_some_and(|(a, b)| t >= a && t <= b);
            if inside { last.push([t, v]) } else { early.push([t, v]) }
        }
    }
    chart.items.push(Item::Points { points: early, mark: Mark::Dot, radius: 1.8, color });
    chart.items.push(Item::Points { points: last, mark: Mark::OpenSquare, radius: 2.0, color });
}

fn average(cx: &Context<'_>, chart: &mut Chart) {
    series::average(cx, chart, Q::O2Pulse, |v| v);
    let _ = GAP_S;
}

fn lines(cx: &Context<'_>, chart: &mut Chart, course: &CourseDetail) {
    let ink = cx.tokens.ink;
    let sample = |line: &analysis::o2_pulse::Line, from: f64, to: f64| {
        (0..=40)
            .map(|i| {
                let t = from + (to - from) * f64::from(i) / 40.0;
                [t, line.at(t).2]
            })
            .collect::<Vec<_>>()
    };
    if let Some(early) = &course.early {
        let solid = vec![sample(early, early.from_s, early.to_s)];
        chart.items.push(Item::Line { pieces: solid, width: 1.4, color: ink, dash: None });
        let end = course.ramp_s.1;
        if end > early.to_s {
            let on = vec![sample(early, early.to_s, end)];
            chart.items.push(Item::Line { pieces: on, width: 1.4, color: ink, dash: CARRIED });
        }
        let at = [end, early.at(end).2];
        chart.labels.push(EndLabel { at, text: "own early line".into(), color: ink });
    }
    for (pick, _) in [(0, "low"), (1, "high")] {
        let edge: Vec<[f64; 2]> = course
            .late_band
            .iter()
            .map(|(t, i)| [*t, if pick == 0 { i.low } else { i.high }])
            .collect();
        if edge.len() > 1 {
            chart.items.push(Item::Line { pieces: vec![edge], width: 1.2, color: ink, dash: FINE });
        }
    }
    if let Some(late) = &course.late {
        let line = vec![sample(late, late.from_s, late.to_s)];
        chart.items.push(Item::Line { pieces: line, width: 2.0, color: ink, dash: None });
    }
}

fn describe(cx: &Context<'_>) -> String {
    let words = super::course_box::headline(cx);
    format!("{words}. {}", series::describe(cx, &[Q::O2Pulse]))
}

/// Bars above the frame that name the early part and the late window.
fn windows_above(ui: &mut Ui, cx: &Context<'_>, frame: Rect, scale: &Scale) {
    let Some(course) = &cx.results.course else {
        return;
    };
    let end = course.ramp_s.1;
    let parts = [
        course.early.map(|l| {
            let from = clock(l.from_s - course.ramp_s.0);
            (l.from_s, l.to_s, format!("early part, from ramp {from}"))
        }),
        course.late.map(|l| {
            let ends = clock(end - l.to_s);
            let long = clock(l.to_s - l.from_s);
            (l.from_s, l.to_s, format!("late window {long}, ends {ends} before load end"))
        }),
    ];
    let mut taken = frame.left();
    for (from, to, words) in parts.into_iter().flatten() {
        let (a, b) = (scale.place(from).max(frame.left()), scale.place(to).min(frame.right()));
        if b <= a {
            continue;
        }
        ui.painter().hline(a..=b, frame.top() - 1.0, Stroke::new(2.0, cx.tokens.ink));
        let run = [Run::new(words, size::BODY, cx.tokens.ink2)];
        let wide = text::width(ui, &run);
        let left = (0.5 * (a + b - wide)).clamp(taken, (frame.right() - wide).max(taken));
        text::line(ui, pos2(left, frame.top() - 7.0), Align::Min, &run);
        taken = left + wide + 16.0;
    }
}

/// Onset of the slowing: a square with its whisker on the base line.
fn onset(ui: &mut Ui, cx: &Context<'_>, frame: Rect, scale: &Scale) {
    let Some(onset) = cx.results.course.as_ref().and_then(|c| c.onset) else {
        return;
    };
    let y = frame.bottom() - 18.0;
    let x = scale.place(onset.t_s);
    let (a, b) = (scale.place(onset.set_s.low), scale.place(onset.set_s.high));
    let ink = Stroke::new(1.5, cx.tokens.ink);
    ui.painter().hline(a..=b, y, ink);
    for end in [a, b] {
        ui.painter().vline(end, (y - 4.0)..=(y + 4.0), ink);
    }
    let square = Rect::from_center_size(pos2(x, y), vec2(9.0, 9.0));
    ui.painter().rect(square, 0.0, cx.tokens.plot, ink, egui::StrokeKind::Middle);
    let half = 0.5 * (onset.set_s.high - onset.set_s.low);
    let words = format!("slowing begins, {} ± {}", clock(onset.t_s), clock(half));
    text::plain(ui, pos2(a - 8.0, y + 4.5), Align::Max, words, size::BODY, cx.tokens.ink);
}

/// Boundaries of the ramp with their grips inside the frame, cursor, labels in ramp time.
fn handles(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    frame: Rect,
    scale: &Scale,
    chart: &Chart,
) {
    let labels = Rect::from_min_size(frame.left_bottom(), vec2(frame.width(), 18.0));
    let grips = Rect::from_min_max(
        pos2(frame.left(), frame.bottom() - 24.0),
        pos2(frame.right(), frame.bottom()),
    );
    let column = crate::chart::layout::Column {
        frames: vec![frame],
        labels,
        ribbon: grips,
        notes: Rect::NOTHING,
    };
    for handle in cx.handles.iter().filter(|h| scale.holds(h.t_s)) {
        column::vertical(ui, cx, &column, scale, handle);
    }
    column::cursor(ui, cx, &column, scale, std::slice::from_ref(chart));
    ramp_time(ui, cx, labels, scale);
    for handle in cx.handles {
        if matches!(handle.kind, HandleKind::Boundary(_)) && scale.holds(handle.t_s) {
            let x = scale.place(handle.t_s);
            ribbon::grip(ui, cx, grips, x, handle);
            let at = pos2(x + 11.0, grips.center().y + 4.5);
            let name = handle.kind.name().to_lowercase();
            text::plain(ui, at, Align::Min, name, size::BODY, cx.tokens.ink2);
        }
        ribbon::slider(ui, cx, grips, scale, handle);
    }
    points(ui, cx, frame, scale);
    column::areas(ui, cx, out, &column, scale, 0);
    if let Some((rect, words)) = column::active_label(ui, cx, &column, scale, 0) {
        column::yellow_label(ui, cx, rect.translate(vec2(0.0, 2.0)), &words);
    }
}

/// The two instants of the two-factor table: numbered badges on their lines.
fn points(ui: &mut Ui, cx: &Context<'_>, frame: Rect, scale: &Scale) {
    let t = cx.tokens;
    for handle in cx.handles.iter().filter(|h| scale.holds(h.t_s)) {
        let HandleKind::Point(end) = handle.kind else {
            continue;
        };
        let at = pos2(scale.place(handle.t_s), frame.top() + 30.0);
        let fill = if handle.proposed { t.plot } else { t.movable };
        let badge = Rect::from_center_size(at, vec2(16.0, 16.0));
        let edge = Stroke::new(1.5, t.movable_edge);
        ui.painter().rect(badge, 8.0, fill, edge, egui::StrokeKind::Inside);
        let number = if end == End::First { "1" } else { "2" };
        let ink = if handle.proposed { t.ink } else { t.on_movable };
        text::paint(ui, at + vec2(0.0, 4.5), Align::Center, &[Run::new(number, size::BODY, ink)]);
    }
}

fn ramp_time(ui: &mut Ui, cx: &Context<'_>, labels: Rect, scale: &Scale) {
    let start = cx.results.phases.ramp().map_or(0.0, |r| r.0);
    let shown = (scale.value.0 - start, scale.value.1 - start);
    let step = time_step(shown.1 - shown.0, labels.width(), 56.0);
    let base = labels.bottom() - 4.0;
    let run = [Run::new("ramp time", size::BODY, cx.tokens.ink2)];
    let name = text::paint(ui, pos2(labels.right(), base), Align::Max, &run);
    for t in ticks(shown.0, shown.1, step) {
        let x = scale.place(t + start);
        let run = [Run::new(clock(t), size::BODY, cx.tokens.ink2)];
        if x + 0.5 * text::width(ui, &run) < name.left() - 4.0 && x > labels.left() + 10.0 {
            text::paint(ui, pos2(x, base), Align::Center, &run);
        }
    }
}
