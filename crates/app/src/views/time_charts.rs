//! The charts over time, used by the views that show time.

use analysis::facts::EventKind;
use analysis::quantity::Quantity as Q;

use super::series::{GAP_S, average, describe, range, raw, title};
use crate::chart::spec::{Chart, EndLabel, Item, Missing, Title};
use crate::chart::ticks::{Axis, nice_step};
use crate::command::Command;
use crate::context::Context;
use crate::panels::view_row::averaging_name;
use crate::theme::Family;
use crate::view_state::Dialog;

fn same(v: f64) -> f64 {
    v
}

fn count(cx: &Context<'_>, tall: bool) -> usize {
    match (tall, cx.grid.narrow) {
        (true, false) => 6,
        (true, true) => 4,
        (false, false) => 5,
        (false, true) => 3,
    }
}

/// What is said in the frame of an absent channel.
#[must_use]
pub fn absent(quantity: Q) -> Option<Missing> {
    Some(Missing {
        what: format!("{}: not in the file.", quantity.row().symbol),
        then: "What depends on it is withheld, with the reason.".into(),
        todo: None,
    })
}

/// V̇O₂, V̇CO₂ and work rate, tied at 10 mL/min per W.
#[must_use]
pub fn gas(cx: &Context<'_>) -> Chart {
    let top = [Q::Vo2, Q::Vco2].iter().filter_map(|q| range(cx, *q)).map(|r| r.1);
    let watts = cx.recording.load.value.iter().copied().fold(0.0, f64::max);
    let top = top.fold(watts * 0.01, f64::max).max(0.5);
    let top = top.max(super::overlay::top(cx, Q::Vo2));
    let mut chart = Chart::new("gas", cx.time(), Axis::from_zero(top * 1.08, count(cx, true)));
    chart.title = vec![title(Q::Vo2), title(Q::Vco2), Title::grey("L/min")];
    if range(cx, Q::Vo2).is_none() && range(cx, Q::Vco2).is_none() {
        chart.missing = absent(Q::Vo2);
    }
    super::overlay::time(cx, &mut chart, Q::Vo2, same);
    super::overlay::time_line(cx, &mut chart, Q::Vco2, same);
    if !cx.recording.load.t_s.is_empty() {
        let long = "work rate, W  (10 mL/min per W)";
        let words = if cx.grid.narrow { "W (10 mL/min per W)" } else { long };
        chart.right_title = vec![Title::grey(words)];
        let axis = Axis::fixed(0.0, chart.y.high * 100.0, chart.y.step * 100.0);
        chart = chart.tied(100.0, 0.0, axis);
        work_rate(cx, &mut chart, 0.01);
    }
    for q in [Q::Vco2, Q::Vo2] {
        raw(cx, &mut chart, q, same);
    }
    for q in [Q::Vco2, Q::Vo2] {
        average(cx, &mut chart, q, same);
    }
    chart.description = describe(cx, &[Q::Vo2, Q::Vco2]);
    chart
}

fn work_rate(cx: &Context<'_>, chart: &mut Chart, scale: f64) {
    let load = &cx.recording.load;
    // The load is held between its points; thinned to what a screen can show.
    let (from, to) = cx.whole();
    let n = 600;
    let line: Vec<[f64; 2]> = (0..=n)
        .filter_map(|i| {
            let t = from + (to - from) * f64::from(i) / f64::from(n);
            load.at(t).map(|w| [t, w * scale])
        })
        .collect();
    let end = cx.results.phases.ramp().map_or(to, |r| r.1);
    let color = cx.tokens.line(Family::Work);
    if let Some(at) = line.iter().rev().find(|p| p[0] <= end - 1.0) {
        let color = cx.tokens.ink2;
        chart.labels.push(EndLabel { at: [end, at[1]], text: "work rate".into(), color });
    }
    chart.items.push(Item::Line { pieces: vec![line], width: 1.4, color, dash: None });
}

/// O₂ pulse, the heaviest line.
#[must_use]
pub fn o2_pulse(cx: &Context<'_>) -> Chart {
    let top = range(cx, Q::O2Pulse).map_or(10.0, |r| r.1);
    let top = top.max(0.9 * super::overlay::top(cx, Q::O2Pulse));
    let axis = Axis::from_zero(top * 1.2, count(cx, true));
    let mut chart = Chart::new("o2-pulse", cx.time(), axis);
    chart.title = vec![title(Q::O2Pulse), Title::grey("mL/beat")];
    if !cx.grid.narrow {
        let averaging = averaging_name(cx.settings.averaging).to_lowercase();
        chart.title.push(Title::grey(format!("mean V̇O₂ ÷ mean HR, {averaging}")));
    }
    if range(cx, Q::O2Pulse).is_none() {
        chart.missing = absent(if cx.recording.has(Q::Hr) { Q::Vo2 } else { Q::Hr });
    }
    super::overlay::time(cx, &mut chart, Q::O2Pulse, same);
    raw(cx, &mut chart, Q::O2Pulse, same);
    average(cx, &mut chart, Q::O2Pulse, same);
    chart.description = describe(cx, &[Q::O2Pulse]);
    chart
}

/// Heart rate.
#[must_use]
pub fn heart_rate(cx: &Context<'_>) -> Chart {
    let (low, high) = range(cx, Q::Hr).unwrap_or((60.0, 160.0));
    let high = high.max(0.9 * super::overlay::top(cx, Q::Hr));
    let axis = Axis::fixed(
        (low / 25.0 - 0.3).floor() * 25.0,
        (high * 1.12 / 12.5).ceil() * 12.5,
        if cx.grid.narrow { 50.0 } else { 25.0 },
    );
    let mut chart = Chart::new("hr", cx.time(), axis);
    chart.title = vec![title(Q::Hr), Title::grey("/min")];
    if range(cx, Q::Hr).is_none() {
        chart.missing = absent(Q::Hr);
    }
    super::overlay::time(cx, &mut chart, Q::Hr, same);
    raw(cx, &mut chart, Q::Hr, same);
    average(cx, &mut chart, Q::Hr, same);
    chart.description = describe(cx, &[Q::Hr]);
    chart
}

/// SpO₂ and blood pressure, set apart: 10 points of SpO₂ are 100 mmHg.
#[must_use]
pub fn saturation(cx: &Context<'_>) -> Chart {
    let low = range(cx, Q::Spo2).map_or(95.0, |r| r.0);
    let floor = if low < 90.0 { (low / 10.0).floor() * 10.0 - 10.0 } else { 80.0 };
    let mut chart = Chart::new("spo2-bp", cx.time(), Axis::fixed(floor, 101.0, 10.0));
    chart.title = vec![title(Q::Spo2), Title::grey("%")];
    let readings: Vec<[f64; 3]> = cx
        .facts
        .events
        .iter()
        .filter_map(|e| match e.kind {
            EventKind::Bp { sys: Some(sys), dia: Some(dia) } => Some([e.t_s, dia, sys]),
            _ => None,
        })
        .collect();
    let has_spo2 = range(cx, Q::Spo2).is_some();
    if !has_spo2 && readings.is_empty() {
        chart.missing = Some(Missing {
            what: "SpO₂ and blood pressure: not in the file.".into(),
            then: "Readings can be entered by hand as timed events.".into(),
            todo: Some(Command::Show(Dialog::Event)),
        });
    }
    if has_spo2 {
        raw(cx, &mut chart, Q::Spo2, same);
        average(cx, &mut chart, Q::Spo2, same);
        at_last_value(cx, &mut chart);
        gap_remark(cx, &mut chart, low);
    }
    let described = describe(cx, &[Q::Spo2]);
    chart.description = format!("{described}; {} readings of blood pressure", readings.len());
    if readings.is_empty() { chart } else { blood_pressure(cx, chart, floor, &readings) }
}

fn blood_pressure(cx: &Context<'_>, chart: Chart, floor: f64, readings: &[[f64; 3]]) -> Chart {
    // The lowest SpO₂ shown stands at 50 mmHg, and 10 points are 100 mmHg.
    let place = |mmhg: f64| floor + (mmhg - 50.0) * 0.1;
    let axis = Axis::fixed(50.0, 260.0, 100.0);
    let mut chart = chart.tied(10.0, 50.0 - 10.0 * floor, axis);
    chart.right_title = vec![Title::grey("BP, mmHg")];
    // Pressure is a model only where it was read at rest.
    for q in [Q::DiaBp, Q::SysBp] {
        super::overlay::time(cx, &mut chart, q, place);
    }
    let bars = readings.iter().map(|r| [r[0], place(r[1]), place(r[2])]).collect();
    chart.items.push(Item::Bars { bars, color: cx.tokens.line(Family::Circulation) });
    if let Some(last) = readings.last() {
        chart.labels.push(EndLabel {
            at: [last[0], place(0.5 * (last[1] + last[2]))],
            text: "BP".into(),
            color: cx.tokens.text(Family::Circulation),
        });
    }
    chart
}

fn gap_remark(cx: &Context<'_>, chart: &mut Chart, low: f64) {
    let series = &cx.results.series;
    let Some(column) = series.columns.get(&Q::Spo2) else {
        return;
    };
    let known: Vec<f64> =
        series.t_s.iter().zip(column).filter(|(_, v)| v.is_some()).map(|(t, _)| *t).collect();
    if let Some(gap) = known.windows(2).find(|w| w[1] - w[0] > GAP_S) {
        chart.remarks.push(([gap[0], low - 2.0], "no signal".into()));
    }
}

/// V̇E, VT and fR, tied: 25 L/min = 10 /min = 1 L.
#[must_use]
pub fn ventilation(cx: &Context<'_>) -> Chart {
    let scaled = [(Q::Ve, 1.0), (Q::Fr, 2.5), (Q::Vt, 25.0)];
    let top = scaled.iter().filter_map(|(q, k)| range(cx, *q).map(|r| r.1 * k));
    let top = top.fold(50.0, f64::max).max(super::overlay::top(cx, Q::Ve));
    let high = (top * 1.12 / 12.5).ceil() * 12.5;
    let step = if high > 200.0 { 50.0 } else { 25.0 };
    let mut chart = Chart::new("ve", cx.time(), Axis::fixed(0.0, high, step));
    chart.title = vec![title(Q::Ve), Title::grey("L/min")];
    chart.right_title = vec![Title::grey("fR, /min | VT, L")];
    chart.right = chart
        .y
        .ticks()
        .into_iter()
        .map(|y| (y, format!("{:.0} | {:.0}", y / 2.5, y / 25.0)))
        .collect();
    if range(cx, Q::Ve).is_none() {
        chart.missing = absent(Q::Ve);
    }
    super::overlay::time(cx, &mut chart, Q::Ve, same);
    mvv(cx, &mut chart);
    raw(cx, &mut chart, Q::Ve, same);
    average(cx, &mut chart, Q::Fr, |v| v * 2.5);
    average(cx, &mut chart, Q::Vt, |v| v * 25.0);
    average(cx, &mut chart, Q::Ve, same);
    chart.description = describe(cx, &[Q::Ve, Q::Vt, Q::Fr]);
    chart
}

/// The MVV line over the ramp, measured or from FEV₁.
pub fn mvv(cx: &Context<'_>, chart: &mut Chart) {
    let s = &cx.facts.subject;
    let factor = cx.settings.mvv_factor;
    let (mvv, words) = match (s.mvv_l_min, s.fev1_l) {
        (Some(m), _) => (m, format!("MVV {m:.0}\u{a0}L/min, measured")),
        (None, Some(fev1)) => {
            let m = fev1 * factor;
            (m, format!("MVV {m:.0}\u{a0}L/min, from FEV₁\u{a0}×\u{a0}{factor:.0}"))
        }
        (None, None) => return,
    };
    let (from, to) = cx.results.phases.ramp().unwrap_or(chart.x);
    if mvv <= chart.y.high {
        let line = vec![vec![[from, mvv], [to, mvv]]];
        let color = cx.tokens.ink2;
        chart.items.push(Item::Line { pieces: line, width: 1.1, color, dash: None });
        chart.remarks.push(([from + 5.0, mvv - chart.y.high * 0.07], words));
    } else {
        chart.remarks.push(([from + 5.0, chart.y.high * 0.95], words));
    }
}

/// Ventilatory equivalents.
#[must_use]
pub fn equivalents(cx: &Context<'_>) -> Chart {
    let ranges: Vec<(f64, f64)> =
        [Q::EqO2, Q::EqCo2].iter().filter_map(|q| range(cx, *q)).collect();
    let low = ranges.iter().map(|r| r.0).fold(f64::INFINITY, f64::min).min(40.0);
    let high = ranges.iter().map(|r| r.1).fold(30.0, f64::max).min(100.0);
    let step = nice_step((high - low) / count(cx, true) as f64).max(5.0);
    let axis = Axis::fixed((low / step - 0.2).floor() * step, high * 1.06, step);
    let mut chart = Chart::new("equivalents", cx.time(), axis);
    chart.title = vec![title(Q::EqO2), title(Q::EqCo2)];
    if ranges.is_empty() {
        chart.missing = absent(Q::Ve);
    }
    super::overlay::time(cx, &mut chart, Q::EqCo2, same);
    super::overlay::time_line(cx, &mut chart, Q::EqO2, same);
    for q in [Q::EqCo2, Q::EqO2] {
        raw(cx, &mut chart, q, same);
    }
    for q in [Q::EqCo2, Q::EqO2] {
        average(cx, &mut chart, q, same);
    }
    at_last_value(cx, &mut chart);
    chart.description = describe(cx, &[Q::EqO2, Q::EqCo2]);
    chart
}

/// Names a line at its last value rather than at load end, where lines of recovery part.
fn at_last_value(cx: &Context<'_>, chart: &mut Chart) {
    let series = &cx.results.series;
    for label in &mut chart.labels {
        let quantity = [Q::EqO2, Q::EqCo2, Q::Peto2, Q::Petco2, Q::Spo2]
            .into_iter()
            .find(|q| q.row().symbol == label.text);
        let Some((quantity, column)) =
            quantity.and_then(|q| series.columns.get(&q).map(|c| (q, c)))
        else {
            continue;
        };
        let shift = if quantity == Q::Petco2 { 50.0 } else { 0.0 };
        let known =
            series.t_s.iter().zip(column).rev().find(|(t, v)| v.is_some() && **t <= chart.x.1);
        if let Some((t, Some(v))) = known {
            label.at = [*t, v + shift];
        }
    }
}

/// End-tidal tensions, tied: PETCO₂ = PETO₂ − 50.
#[must_use]
pub fn end_tidal(cx: &Context<'_>) -> Chart {
    let o2 = range(cx, Q::Peto2);
    let co2 = range(cx, Q::Petco2).map(|r| (r.0 + 50.0, r.1 + 50.0));
    let all = [o2, co2];
    let low = all.iter().flatten().map(|r| r.0).fold(f64::INFINITY, f64::min).min(80.0);
    let high = all.iter().flatten().map(|r| r.1).fold(110.0, f64::max);
    let step = if cx.grid.narrow { 20.0 } else { 10.0 };
    let axis = Axis::fixed((low / 10.0).floor() * 10.0, high + 4.0, step);
    let mut chart = Chart::new("end-tidal", cx.time(), axis);
    chart.title = vec![title(Q::Peto2), Title::grey("mmHg")];
    if o2.is_none() && co2.is_none() {
        chart.missing = absent(Q::Petco2);
    }
    if co2.is_some() {
        chart = chart.tied(1.0, -50.0, Axis::fixed(0.0, 100.0, step));
        chart.right_title = vec![Title::grey("PETCO₂, mmHg")];
    }
    super::overlay::time(cx, &mut chart, Q::Petco2, |v| v + 50.0);
    for (q, shift) in [(Q::Petco2, 50.0), (Q::Peto2, 0.0)] {
        raw(cx, &mut chart, q, |v| v + shift);
    }
    for (q, shift) in [(Q::Petco2, 50.0), (Q::Peto2, 0.0)] {
        average(cx, &mut chart, q, |v| v + shift);
    }
    at_last_value(cx, &mut chart);
    chart.description = describe(cx, &[Q::Peto2, Q::Petco2]);
    chart
}

/// RER.
#[must_use]
pub fn exchange_ratio(cx: &Context<'_>) -> Chart {
    let (low, high) = range(cx, Q::Rer).unwrap_or((0.7, 1.2));
    let step = if cx.grid.narrow { 0.4 } else { 0.2 };
    let low = ((low - 0.05) / 0.2).floor() * 0.2;
    let axis = Axis::fixed(low, ((high + 0.05) / 0.2).ceil() * 0.2, step);
    let mut chart = Chart::new("rer", cx.time(), axis);
    chart.title = vec![title(Q::Rer), Title::grey("V̇CO₂ ÷ V̇O₂")];
    if range(cx, Q::Rer).is_none() {
        chart.missing = absent(Q::Vco2);
    }
    let (from, to) = chart.x;
    chart.items.push(Item::Line {
        pieces: vec![vec![[from, 1.0], [to, 1.0]]],
        width: 1.0,
        color: cx.tokens.frame,
        dash: None,
    });
    super::overlay::time(cx, &mut chart, Q::Rer, same);
    raw(cx, &mut chart, Q::Rer, same);
    average(cx, &mut chart, Q::Rer, same);
    chart.labels.clear();
    chart.description = describe(cx, &[Q::Rer]);
    chart
}
