//! Chart data of the page: what is drawn, in the units shown, before any painting.

use analysis::quantity::Quantity;
use analysis::recording::Recording;
use analysis::results::Results;

use super::{values, wording};

/// How a series is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Stroke {
    /// Single breaths.
    Dots,
    /// The averaged course, heaviest.
    Line,
    /// A line carried on.
    Dashed,
    /// A predicted value.
    Thin,
}

/// The predicted range: x, low, high.
pub type Range = Vec<(f64, f64, f64)>;

/// One series. A gap is a break between two runs.
#[derive(Clone, Debug, PartialEq)]
pub struct Series {
    /// How it is drawn.
    pub stroke: Stroke,
    /// Runs of points.
    pub runs: Vec<Vec<(f64, f64)>>,
    /// Name at its last point.
    pub label: Option<String>,
}

/// An axis with its ticks.
#[derive(Clone, Debug, PartialEq)]
pub struct Axis {
    /// Lowest value.
    pub from: f64,
    /// Highest value.
    pub to: f64,
    /// Ticks with their labels.
    pub ticks: Vec<(f64, String)>,
}

/// A chart.
#[derive(Clone, Debug, PartialEq)]
pub struct Chart {
    /// What it shows, for those who do not see it.
    pub described: String,
    /// Name inside the frame; empty where the title above says it.
    pub name: String,
    /// Horizontal axis.
    pub x: Axis,
    /// Vertical axis.
    pub y: Axis,
    /// Series, back to front.
    pub series: Vec<Series>,
    /// The predicted range, empty where there is none.
    pub range: Range,
    /// An upright line with its name.
    pub upright: Option<(f64, String)>,
    /// A stretch marked at the top, with its name.
    pub stretch: Option<(f64, f64, String)>,
}

/// Longest step without a value over which a line is drawn, s.
const GAP_S: f64 = 20.0;

/// The O₂ pulse over time, from the end of the warm-up into recovery, with the model of a normal
/// response where `overlay` asks for it; `None` without values.
#[must_use]
pub fn o2_pulse(recording: &Recording, results: &Results, overlay: bool) -> Option<Chart> {
    let span = recording.span_s()?;
    let ramp = results.phases.ramp();
    let (from, to) = ramp.map_or(span, |(a, b)| ((a - 60.0).max(span.0), (b + 150.0).min(span.1)));
    let dots = breaths(recording, Quantity::O2Pulse, from, to);
    let line = averaged(results, Quantity::O2Pulse, from, to);
    if line.iter().all(Vec::is_empty) {
        return None;
    }
    let mut series = Vec::new();
    let course = results.course.as_ref();
    let (range, middle) = predicted(results, Quantity::O2Pulse, |t| Some(t).filter(|_| overlay));
    series.extend(middle);
    series.push(Series { stroke: Stroke::Dots, runs: vec![dots], label: None });
    if let (Some(early), Some((_, end))) = (course.and_then(|c| c.early), ramp) {
        let points = steps(early.from_s, end).map(|t| (t, early.at(t).2)).collect();
        let label = Some(wording::plain_text("page-early-line"));
        series.push(Series { stroke: Stroke::Dashed, runs: vec![points], label });
    }
    series.push(Series { stroke: Stroke::Line, runs: line, label: None });
    let stretch = course
        .and_then(|c| c.late)
        .map(|l| (l.from_s, l.to_s, wording::plain_text("page-late-window")));
    Some(Chart {
        described: wording::plain_text("page-fig-pulse"),
        name: String::new(),
        x: time_axis(from, to),
        y: with_headroom(value_axis(&series, None)),
        series,
        range,
        upright: ramp.map(|(_, end)| (end, wording::plain_text("page-load-end"))),
        stretch,
    })
}

/// `quantity` against work rate over the increments, with the model of a normal response where
/// `overlay` asks for it; `None` without values.
#[must_use]
pub fn against_work(
    recording: &Recording,
    results: &Results,
    quantity: Quantity,
    overlay: bool,
) -> Option<Chart> {
    let (from, to) = results.phases.ramp()?;
    let load = |t: f64| recording.load.at(t);
    let at_load = |points: Vec<(f64, f64)>| -> Vec<(f64, f64)> {
        points.into_iter().filter_map(|(t, v)| Some((load(t)?, v))).collect()
    };
    let line: Vec<Vec<(f64, f64)>> =
        averaged(results, quantity, from, to).into_iter().map(at_load).collect();
    if line.iter().all(Vec::is_empty) {
        return None;
    }
    // At load end the load is off already.
    let (range, middle) = predicted(results, quantity, |t| load(t).filter(|_| overlay && t < to));
    let mut series: Vec<Series> = middle.into_iter().collect();
    series.push(Series {
        stroke: Stroke::Dots,
        runs: vec![at_load(breaths(recording, quantity, from, to))],
        label: None,
    });
    if let Some(early) = results.course.as_ref().and_then(|c| c.early) {
        let of = |t: f64| {
            let (vo2, hr, _) = early.at(t);
            values::on_axis(quantity, if quantity == Quantity::Hr { hr } else { vo2 })
        };
        let points =
            at_load(steps(early.from_s, to).filter(|t| *t < to).map(|t| (t, of(t))).collect());
        series.push(Series { stroke: Stroke::Dashed, runs: vec![points], label: None });
    }
    series.push(Series { stroke: Stroke::Line, runs: line, label: None });
    let top = series.iter().flat_map(|s| s.runs.iter().flatten()).map(|p| p.0).fold(1.0, f64::max);
    let unit = values::of_series(quantity, 0.0).1;
    let name = format!("{}, {unit}", quantity.row().symbol);
    Some(Chart {
        described: name.clone(),
        name,
        x: Axis { from: 0.0, to: top * 1.03, ticks: ticks(0.0, top, 4) },
        y: value_axis(&series, Some(0.05)),
        series,
        range,
        upright: None,
        stretch: None,
    })
}

/// The model of a normal response over the increments: its range and its middle. `at` gives the
/// horizontal place of an instant.
fn predicted(
    results: &Results,
    quantity: Quantity,
    at: impl Fn(f64) -> Option<f64>,
) -> (Range, Option<Series>) {
    let curves = results.overlay.model.as_ref().and_then(|m| m.over_time.as_ref());
    let Some((curves, curve)) = curves.and_then(|c| Some((c, c.of(quantity)?))) else {
        return (Vec::new(), None);
    };
    let (from, to) = results.phases.ramp().unwrap_or((f64::NEG_INFINITY, f64::INFINITY));
    let place = |i: usize| {
        let t = *curves.x.get(i)?;
        at(t).filter(|_| (from..=to).contains(&t))
    };
    let shown = |v: f64| values::on_axis(quantity, v);
    let middle: Vec<(f64, f64)> = (0..curves.normal)
        .filter_map(|i| Some((place(i)?, shown(*curve.middle.get(i)?))))
        .collect();
    let range = (0..curves.normal)
        .filter_map(|i| {
            // The line closes a range that has one limit only.
            let middle = curve.middle.get(i);
            let low = *curve.low.get(i).or(middle)?;
            let high = *curve.high.get(i).or(middle)?;
            Some((place(i)?, shown(low), shown(high)))
        })
        .collect();
    (range, Some(Series { stroke: Stroke::Thin, runs: vec![middle], label: None }))
}

/// Every 10 s, both ends included.
fn steps(from: f64, to: f64) -> impl Iterator<Item = f64> {
    let n = ((to - from) / 10.0).max(0.0).ceil();
    (0..=n as usize).map(move |i| (from + 10.0 * i as f64).min(to))
}

/// Single breaths, in the unit shown.
fn breaths(recording: &Recording, quantity: Quantity, from: f64, to: f64) -> Vec<(f64, f64)> {
    let b = &recording.breaths;
    let value = |i: usize| match quantity {
        Quantity::O2Pulse => Some(b.value(Quantity::Vo2, i)? / b.value(Quantity::Hr, i)?),
        other => b.value(other, i),
    };
    (0..b.len())
        .map(|i| (b.mid_s(i), i))
        .filter(|(t, _)| (from..=to).contains(t))
        .filter_map(|(t, i)| Some((t, values::on_axis(quantity, value(i)?))))
        .collect()
}

/// The averaged series in runs without gaps, in the unit shown.
fn averaged(results: &Results, quantity: Quantity, from: f64, to: f64) -> Vec<Vec<(f64, f64)>> {
    let mut runs: Vec<Vec<(f64, f64)>> = Vec::new();
    let Some(column) = results.series.columns.get(&quantity) else { return runs };
    let mut last = f64::NEG_INFINITY;
    for (t, value) in results.series.t_s.iter().zip(column) {
        let Some(value) = value.filter(|_| (from..=to).contains(t)) else { continue };
        if t - last > GAP_S || runs.is_empty() {
            runs.push(Vec::new());
        }
        last = *t;
        if let Some(run) = runs.last_mut() {
            run.push((*t, values::on_axis(quantity, value)));
        }
    }
    runs
}

/// An axis that holds the lines whole and all but the most outlying dots.
fn value_axis(series: &[Series], pad: Option<f64>) -> Axis {
    let mut all: Vec<f64> = Vec::new();
    let mut dots: Vec<f64> = Vec::new();
    for s in series {
        let list = if s.stroke == Stroke::Dots { &mut dots } else { &mut all };
        list.extend(s.runs.iter().flatten().map(|p| p.1));
    }
    dots.sort_by(f64::total_cmp);
    if !dots.is_empty() {
        let cut = dots.len() / 50;
        all.extend([dots[cut], dots[dots.len() - 1 - cut]]);
    }
    let low = all.iter().copied().fold(f64::INFINITY, f64::min);
    let high = all.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    let room = (high - low).max(1e-6) * pad.unwrap_or(0.08);
    let (from, to) = (low - room, high + room);
    Axis { from, to, ticks: ticks(from, to, 4) }
}

/// The axis with room on top for the late window's bar.
fn with_headroom(axis: Axis) -> Axis {
    let to = axis.to + 0.12 * (axis.to - axis.from);
    Axis { ticks: ticks(axis.from, to, 4), to, ..axis }
}

/// Ticks at 1, 2 or 5 times a power of ten, about `wanted` of them.
fn ticks(from: f64, to: f64, wanted: usize) -> Vec<(f64, String)> {
    let raw = (to - from) / wanted as f64;
    if !(raw.is_finite() && raw > 0.0) {
        return Vec::new();
    }
    let power = 10_f64.powf(raw.log10().floor());
    let step =
        [1.0, 2.0, 5.0, 10.0].into_iter().map(|m| m * power).find(|s| *s >= raw).unwrap_or(raw);
    let decimals = if step >= 1.0 { 0 } else { (-step.log10()).ceil() as usize };
    let first = (from / step).ceil() as i64;
    let last = (to / step + 1e-9).floor() as i64;
    (first..=last).map(|i| i as f64 * step).map(|v| (v, values::fixed(v, decimals))).collect()
}

/// A time axis with ticks at sensible minutes.
fn time_axis(from: f64, to: f64) -> Axis {
    let step = [30.0, 60.0, 120.0, 180.0, 300.0, 600.0]
        .into_iter()
        .find(|s| (to - from) / s <= 8.0)
        .unwrap_or(1200.0);
    let (first, last) = ((from / step).ceil() as i64, (to / step).floor() as i64);
    let ticks = (first..=last).map(|i| i as f64 * step).map(|t| (t, values::time(t))).collect();
    Axis { from, to, ticks }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_stand_at_round_values() {
        let labels = |from, to| ticks(from, to, 4).into_iter().map(|t| t.1).collect::<Vec<_>>();
        assert_eq!(labels(3.4, 20.1), ["5", "10", "15", "20"]);
        assert_eq!(labels(0.4, 2.6), ["1", "2"]);
        assert_eq!(labels(0.4, 1.6), ["0.5", "1.0", "1.5"]);
        assert_eq!(labels(0.0, 193.0), ["0", "50", "100", "150"]);
        assert_eq!(labels(0.4, 0.62), ["0.4", "0.5", "0.6"]);
        assert_eq!(labels(0.40, 0.55), ["0.40", "0.45", "0.50", "0.55"]);
        let axis = time_axis(302.0, 1032.0);
        let labels: Vec<&str> = axis.ticks.iter().map(|t| t.1.as_str()).collect();
        assert_eq!(labels, ["6:00", "8:00", "10:00", "12:00", "14:00", "16:00"]);
    }
}
