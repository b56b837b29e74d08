//! Stroke volume × extraction: the pairs that give this O₂ pulse.

use analysis::fick::{Model, PathPoint, equal_pulse_sv};
use egui::{Align, Rect, Ui, pos2};

use crate::chart::layout::{Scale, spread};
use crate::chart::paint;
use crate::chart::spec::{Chart, DOTS, Dash, Item, LONG, Mark, Missing, Point};
use crate::chart::ticks::{Axis, clock};
use crate::chart::words;
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::{Family, size};
use crate::view_state::Dialog;
use crate::widgets::text::{self, Run};

/// Draws the plane.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    let frame = Rect::from_min_max(
        pos2(rect.left() + 38.0, rect.top() + 24.0),
        pos2(rect.right() - 12.0, rect.bottom() - 36.0),
    );
    let mut head = vec![Run::new("Stroke volume × extraction", size::SECTION, t.ink)];
    let long = Run::new("   Fick plane: pairs that give this O₂ pulse", size::BODY, t.ink2);
    if text::width(ui, &head) + text::width(ui, std::slice::from_ref(&long)) < rect.width() - 38.0 {
        head.push(long);
    }
    text::line(ui, pos2(frame.left(), rect.top() + 14.0), Align::Min, &head);
    let mut chart = chart(cx);
    paint::chart(ui, t, frame, &mut chart);
    crate::widgets::missing::show(ui, cx, out, frame, &chart);
    let under = [Run::new("C(a−v̄)O₂, mL/dL", size::BODY, t.ink2)];
    text::line(ui, pos2(frame.center().x, frame.bottom() + 30.0), Align::Center, &under);
    if chart.missing.is_none() {
        names(ui, cx, frame, &chart);
    }
}

fn chart(cx: &Context<'_>) -> Chart {
    let fick = &cx.results.fick;
    let (x, y) = extent(cx);
    let mut chart = Chart::new("plane", (x.low, x.high), y);
    chart.x_axis = Some(x);
    chart.description = describe(cx);
    if let Some(why) = fick.withheld.first() {
        chart.missing = Some(Missing {
            what: crate::words::note(why, cx.results),
            then: String::new(),
            todo: Some(Command::Show(Dialog::Facts)),
        });
        return chart;
    }
    limits(cx, &mut chart);
    for pulse in &fick.equal_pulse {
        curve(cx, &mut chart, *pulse, cx.tokens.band_edge, 1.2, Some(Dash(1.5, 3.0)));
    }
    for path in &fick.paths {
        band(cx, &mut chart, &path.points);
    }
    if let Some(peak) = fick.pulse_at_peak {
        let color = cx.tokens.line(Family::Circulation);
        curve(cx, &mut chart, peak.value, color, 1.3, None);
        sliver(cx, &mut chart);
    }
    for path in &fick.paths {
        let (mark, dash) = style(path.model);
        let color = cx.tokens.line(Family::Circulation);
        let points: Vec<Point> =
            path.points.iter().map(|p| [p.content.value, p.stroke_volume.value]).collect();
        let ends: Vec<Point> = points.first().into_iter().chain(points.last()).copied().collect();
        chart.items.push(Item::Line { pieces: vec![points], width: 1.9, color, dash });
        chart.items.push(Item::Points { points: ends, mark, radius: 4.5, color });
    }
    chart
}

/// Marker and pattern of an assumption.
#[must_use]
pub fn style(model: Model) -> (Mark, Option<Dash>) {
    match model {
        Model::A1 => (Mark::Square, None),
        Model::A2 => (Mark::Triangle, LONG),
        Model::A3 => (Mark::Dot, DOTS),
        Model::B => (Mark::Ring, DOTS),
    }
}

fn extent(cx: &Context<'_>) -> (Axis, Axis) {
    let fick = &cx.results.fick;
    let points = fick.paths.iter().flat_map(|p| &p.points);
    let (mut high, mut low, mut right) = (140.0_f64, 40.0_f64, 20.0_f64);
    for p in points {
        high = high.max(p.stroke_volume.value * 1.25);
        low = low.min(p.stroke_volume.value * 0.7);
        right = right.max(p.content.value * 1.15);
    }
    if let Some(region) = fick.region {
        right = right.max(region.content_limit.high + 1.5);
    }
    let y = Axis::fixed((low / 20.0).floor() * 20.0, (high / 20.0).ceil() * 20.0, 20.0);
    (Axis::fixed(4.0, (right / 2.0).ceil() * 2.0, 2.0), y)
}

fn curve(
    _cx: &Context<'_>,
    chart: &mut Chart,
    pulse: f64,
    color: egui::Color32,
    width: f32,
    dash: Option<Dash>,
) {
    let (a, b) = chart.x;
    let line: Vec<Point> = (0..=60)
        .map(|i| {
            let content = a + (b - a) * f64::from(i) / 60.0;
            [content, equal_pulse_sv(pulse, content)]
        })
        .collect();
    chart.items.push(Item::Line { pieces: vec![line], width, color, dash });
}

/// Extraction above the usual ceiling is hatched thin, beyond the cautious limit dense.
fn limits(cx: &Context<'_>, chart: &mut Chart) {
    let Some(region) = cx.results.fick.region else {
        return;
    };
    let t = cx.tokens;
    let (usual, limit) = (region.content_usual.high, region.content_limit.high);
    chart.items.push(Item::Hatch { from: usual, to: limit, every: 9.0, color: t.hatch });
    chart.items.push(Item::Hatch { from: limit, to: chart.x.1, every: 5.0, color: t.hatch });
    let (low, high) = (chart.y.low, chart.y.high);
    for (x, dash) in [(usual, LONG), (limit, None)] {
        let line = vec![vec![[x, low], [x, high]]];
        chart.items.push(Item::Line { pieces: line, width: 1.2, color: t.ink, dash });
    }
}

/// The uncertainty of a path lies along the lines of equal O₂ pulse.
fn band(cx: &Context<'_>, chart: &mut Chart, points: &[PathPoint]) {
    let fill = cx.tokens.fick_band;
    for pair in points.windows(2) {
        let corner = |p: &PathPoint, content: f64| [content, equal_pulse_sv(p.pulse, content)];
        let [a, b] = [&pair[0], &pair[1]];
        let points = vec![
            corner(a, a.content.interval.low),
            corner(a, a.content.value),
            corner(a, a.content.interval.high),
            corner(b, b.content.interval.high),
            corner(b, b.content.value),
            corner(b, b.content.interval.low),
        ];
        chart.items.push(Item::Area { points, fill, edge: egui::Color32::TRANSPARENT });
    }
}

/// The peak interval: an outlined sliver between two lines of equal O₂ pulse.
fn sliver(cx: &Context<'_>, chart: &mut Chart) {
    let fick = &cx.results.fick;
    let (Some(pulse), Some(last)) =
        (fick.pulse_at_peak, fick.paths.first().and_then(|p| p.points.last()))
    else {
        return;
    };
    let (a, b) = (last.content.interval.low, last.content.interval.high);
    let along = |pulse: f64, forth: bool| {
        (0..=12).map(move |i| {
            let i = if forth { i } else { 12 - i };
            let content = a + (b - a) * f64::from(i) / 12.0;
            [content, equal_pulse_sv(pulse, content)]
        })
    };
    let points: Vec<Point> =
        along(pulse.interval.low, true).chain(along(pulse.interval.high, false)).collect();
    let mut closed = points.clone();
    closed.extend(points.first().copied());
    let color = cx.tokens.line(Family::Circulation);
    chart.items.push(Item::Line { pieces: vec![closed], width: 1.0, color, dash: None });
}

fn names(ui: &mut Ui, cx: &Context<'_>, frame: Rect, chart: &Chart) {
    let t = cx.tokens;
    let fick = &cx.results.fick;
    let x = Scale::over(frame, chart.x);
    let y = Scale { px: (frame.bottom(), frame.top()), value: (chart.y.low, chart.y.high) };
    let grey = |s: String| [Run::new(s, size::BODY, t.ink2)];
    for pulse in &fick.equal_pulse {
        // Named where the curve leaves the frame at its top.
        let content = 100.0 * pulse / chart.y.high;
        if content > chart.x.0 + 0.4 && content < chart.x.1 - 1.0 {
            let at = pos2(x.place(content) + 3.0, frame.top() + 13.0);
            text::paint(ui, at, Align::Min, &grey(format!("{pulse:.0}")));
        }
    }
    let foot = frame.left_bottom() + egui::vec2(8.0, -8.0);
    let foot = text::line(ui, foot, Align::Min, &grey("mL/beat on each dotted line".into()));
    let mut taken = vec![foot.rect];
    if let Some(region) = fick.region {
        let percent = |f: f64| format!("above {:.0}\u{a0}%", f * 100.0);
        for (content, words) in [
            (region.content_usual.high, percent(cx.settings.fick.extraction_usual)),
            (region.content_limit.high, "beyond limit".to_owned()),
        ] {
            let run = grey(words);
            let left = x.place(content) + 5.0;
            let step = if content > region.content_usual.high { 44.0 } else { 28.0 };
            if left + text::width(ui, &run) <= frame.right() {
                text::line(ui, pos2(left, frame.top() + step), Align::Min, &run);
            }
        }
    }
    path_names(ui, cx, frame, &x, &y, &mut taken);
    bound(ui, cx, frame, &x, &y, &mut taken);
    start(ui, cx, frame, &x, &y, &taken);
}

/// Names of the paths at their peaks, pushed apart.
fn path_names(
    ui: &mut Ui,
    cx: &Context<'_>,
    frame: Rect,
    x: &Scale,
    y: &Scale,
    taken: &mut Vec<Rect>,
) {
    let fick = &cx.results.fick;
    let color = cx.tokens.text(Family::Circulation);
    let ends: Vec<(Model, egui::Pos2)> = fick
        .paths
        .iter()
        .filter_map(|p| p.points.last().map(|last| (p.model, last)))
        .map(|(m, p)| (m, pos2(x.place(p.content.value), y.place(p.stroke_volume.value))))
        .filter(|(_, at)| frame.contains(*at))
        .collect();
    let wanted: Vec<f32> = ends.iter().map(|(_, at)| at.y - 10.0).collect();
    let placed = spread(&wanted, 15.0, (frame.top() + 60.0, frame.bottom() - 24.0));
    for ((model, at), place_y) in ends.iter().zip(placed) {
        let name = format!("{} peak", model.code());
        let place = pos2(at.x + 12.0, place_y);
        taken.push(text::plain(ui, place, Align::Min, name, size::BODY, color).rect);
    }
}

/// Where in the ramp the first path starts.
fn start(ui: &mut Ui, cx: &Context<'_>, frame: Rect, x: &Scale, y: &Scale, taken: &[Rect]) {
    let fick = &cx.results.fick;
    let color = cx.tokens.text(Family::Circulation);
    let first = fick.paths.iter().find(|p| p.model == Model::A1).and_then(|p| p.points.first());
    if let Some(p) = first {
        let start = cx.results.phases.ramp().map_or(0.0, |r| r.0);
        let at = pos2(x.place(p.content.value), y.place(p.stroke_volume.value) + 22.0);
        if frame.contains(at) {
            let words = format!("ramp {}", clock(p.t_s - start));
            beside(ui, frame, at, Align::Center, &[Run::new(words, size::BODY, color)], taken);
        }
    }
}

/// Sets a name on the baseline `at`, or above or below it where that is taken.
fn beside(
    ui: &mut Ui,
    frame: Rect,
    at: egui::Pos2,
    align: Align,
    run: &[Run],
    taken: &[Rect],
) -> Rect {
    let wide = text::width(ui, run);
    let left = if align == Align::Center { at.x - 0.5 * wide } else { at.x };
    let wanted = Rect::from_min_size(pos2(left, at.y - 11.0), egui::vec2(wide, 14.0));
    let place = words::free(wanted, frame.shrink(2.0), taken);
    text::line(ui, pos2(place.left(), place.top() + 11.0), Align::Min, run).rect
}

/// The forward stroke-volume bound: a dotted line and a ring on the limit.
fn bound(ui: &mut Ui, cx: &Context<'_>, frame: Rect, x: &Scale, y: &Scale, taken: &mut Vec<Rect>) {
    let Some(bound) = &cx.results.fick.bound else {
        return;
    };
    let at = pos2(x.place(bound.content), y.place(bound.stroke_volume));
    if !frame.contains(at) {
        return;
    }
    let ink = egui::Stroke::new(1.0, cx.tokens.ink);
    let ends = [pos2(frame.left(), at.y), at];
    ui.painter().extend(egui::Shape::dashed_line(&ends, ink, 1.5, 3.0));
    ui.painter().circle(at, 4.5, cx.tokens.plot, egui::Stroke::new(1.5, cx.tokens.ink));
    let long = format!("forward SV at peak probably not below {:.0}\u{a0}mL", bound.stroke_volume);
    let run = [Run::new(long.clone(), size::BODY, cx.tokens.ink)];
    let words = if text::width(ui, &run) + 12.0 < at.x - frame.left() {
        long
    } else {
        format!("SV not below {:.0}\u{a0}mL", bound.stroke_volume)
    };
    let place = pos2(frame.left() + 8.0, at.y - 6.0);
    let run = [Run::new(words, size::BODY, cx.tokens.ink)];
    taken.push(beside(ui, frame, place, Align::Min, &run, taken));
}

fn describe(cx: &Context<'_>) -> String {
    let paths: Vec<String> = cx
        .results
        .fick
        .paths
        .iter()
        .filter_map(|p| {
            let last = p.points.last()?;
            Some(format!(
                "{}: {:.0} mL at {:.1} mL/dL at peak",
                p.model.code(),
                last.stroke_volume.value,
                last.content.value
            ))
        })
        .collect();
    format!("Stroke volume against extraction. {}", paths.join("; "))
}
