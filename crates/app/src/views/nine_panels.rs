//! The trade's nine-panel array, after Wasserman, in the order of 2012; numbers visible.
//!
//! Positions and pairings are those commonly described for the 2012 edition of *Principles of
//! Exercise Testing and Interpretation* (from memory); they are marked as not checked against it.

use analysis::quantity::Quantity as Q;
use egui::{Align, Rect, Ui, pos2};

use super::{time_charts as charts, ventilation, xy};
use crate::chart::column;
use crate::chart::interact::Geometry;
use crate::chart::layout::{Column, Scale};
use crate::chart::paint;
use crate::chart::spec::{Chart, Item, Title};
use crate::chart::ticks::Axis;
use crate::command::Outbox;
use crate::context::Context;
use crate::theme::{Family, size};
use crate::widgets::text;

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let note = "after Wasserman, order of 2012  ·  positions not checked against the book";
    let at = pos2(rect.right() - 46.0, rect.bottom() - 2.0);
    text::plain(ui, at, Align::Max, note, size::BODY, cx.tokens.ink2);
    let cells = xy::cells(Rect::from_min_max(rect.min, rect.max - egui::vec2(0.0, 14.0)), 3, 3);
    let mut geometry = Vec::new();
    for (i, frame) in cells.iter().enumerate() {
        let (mut chart, unit, time) = panel(cx, i + 1);
        chart.title.insert(0, Title::grey(format!("{}", i + 1)));
        if time {
            geometry.push(time_panel(ui, cx, out, *frame, i, &mut chart));
        } else {
            xy::draw(ui, cx, *frame, chart, unit);
        }
    }
    geometry
}

/// A panel over time, with cursor and handles.
fn time_panel(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    frame: Rect,
    index: usize,
    chart: &mut Chart,
) -> Geometry {
    let scale = Scale::over(frame, chart.x);
    let response = paint::chart(ui, cx.tokens, frame, chart);
    crate::widgets::missing::show(ui, cx, out, frame, chart);
    column::frame_input(ui, cx, out, &scale, &response);
    let labels = Rect::from_min_size(frame.left_bottom(), egui::vec2(frame.width(), 18.0));
    let place = Column {
        frames: vec![frame],
        labels,
        ribbon: Rect::from_min_max(frame.left_bottom(), frame.right_bottom()),
        notes: Rect::NOTHING,
    };
    for handle in cx.handles {
        column::vertical(ui, cx, &place, &scale, handle);
    }
    column::cursor(ui, cx, &place, &scale, std::slice::from_ref(chart));
    let label = column::active_label(ui, cx, &place, &scale, index);
    let covered: Vec<Rect> = label.iter().map(|l| l.0).collect();
    paint::time_labels(ui, cx.tokens, labels, &scale, &covered);
    column::areas(ui, cx, out, &place, &scale, index);
    if let Some((rect, words)) = label {
        column::yellow_label(ui, cx, rect, &words);
    }
    Geometry { column: index, scale, span: frame }
}

/// Panel `n`: its chart, the unit of x, and whether x is time.
fn panel(cx: &Context<'_>, n: usize) -> (Chart, &'static str, bool) {
    match n {
        1 => (charts::gas(cx), "", true),
        2 => (heart(cx), "", true),
        3 => {
            let mut chart = xy::chart(cx, "p3", Q::Vo2, Q::Hr, xy::ramp(cx), false);
            both(cx, &mut chart);
            (chart, "L/min", false)
        }
        4 => (charts::equivalents(cx), "", true),
        5 => (charts::ventilation(cx), "", true),
        6 => (ventilation::ve_on_vco2(cx), "L/min", false),
        7 => (charts::end_tidal(cx), "", true),
        8 => (charts::exchange_ratio(cx), "", true),
        _ => (capacity(cx), "L/min", false),
    }
}

/// HR with the O₂ pulse tied at ten to one.
fn heart(cx: &Context<'_>) -> Chart {
    let mut chart = charts::heart_rate(cx);
    chart.y = Axis::fixed(0.0, chart.y.high.max(180.0), 50.0);
    chart.title.push(Title::name("O₂ pulse × 10", Family::Circulation));
    super::series::average(cx, &mut chart, Q::O2Pulse, |v| v * 10.0);
    chart.tied(0.1, 0.0, Axis::fixed(0.0, 20.0, 5.0))
}

/// V̇CO₂ against V̇O₂ on equal scales beside HR: tied at 1 L/min = 50 /min.
fn both(cx: &Context<'_>, chart: &mut Chart) {
    let points: Vec<[f64; 2]> = xy::path(cx, Q::Vo2, Q::Vco2, xy::ramp(cx))
        .into_iter()
        .map(|p| [p[0], p[1] * 50.0])
        .filter(|p| p[1] >= chart.y.low && p[1] <= chart.y.high)
        .collect();
    let color = cx.tokens.line(Family::CarbonDioxide);
    let dash = crate::chart::spec::LONG;
    chart.items.push(Item::Line { pieces: vec![points], width: 1.7, color, dash });
    chart.title.push(Title::name("V̇CO₂", Family::CarbonDioxide));
    *chart = chart.clone().tied(0.02, 0.0, Axis::fixed(0.0, 4.0, 0.5));
}

/// VT on V̇E with MVV.
fn capacity(cx: &Context<'_>) -> Chart {
    let mut chart = ventilation::vt_on_ve(cx);
    let mvv =
        cx.facts.subject.mvv_l_min.or(cx.facts.subject.fev1_l.map(|f| f * cx.settings.mvv_factor));
    if let Some(mvv) = mvv.filter(|_| chart.missing.is_none()) {
        let x = Axis::from_zero(mvv.max(chart.x.1) * 1.02, 5);
        chart.x = (0.0, x.high);
        chart.x_axis = Some(x);
        let line = vec![vec![[mvv, 0.0], [mvv, chart.y.high]]];
        let color = cx.tokens.ink2;
        chart.items.push(Item::Line { pieces: line, width: 1.1, color, dash: None });
        chart.remarks.push(([mvv, chart.y.high * 0.93], "MVV".into()));
    }
    chart
}
