//! Ventilation: is breathing the limit, is it efficient?

use analysis::quantity::Quantity as Q;
use analysis::slopes::SlopeChart;
use egui::{Rect, Ui};

use super::{outcome_list, time_charts as charts, xy};
use crate::chart::column::{self, Side};
use crate::chart::interact::Geometry;
use crate::chart::layout::columns;
use crate::chart::spec::{CARRIED, Chart, Item, Mark, Title};
use crate::chart::ticks::Axis;
use crate::command::Outbox;
use crate::context::Context;
use crate::theme::Family;

/// What is listed beside the charts.
const BREATHING: [&str; 7] = [
    "ve-vco2-slope-to-vt2",
    "ve-vco2-slope-full",
    "oues",
    "breathing-reserve",
    "ve-peak",
    "eq-co2-nadir",
    "oscillation",
];

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let places = columns(rect, 2, cx.grid.gap);
    let time = vec![(3.0, charts::ventilation(cx)), (3.0, charts::equivalents(cx))];
    let geometry = column::show(ui, cx, out, places[0], 0, Side::Breath, time);
    let cells = xy::cells(places[1], 2, 2);
    xy::draw(ui, cx, cells[0], ve_on_vco2(cx), "L/min");
    xy::draw(ui, cx, cells[1], vt_on_ve(cx), "L/min");
    xy::draw(ui, cx, cells[2], oues(cx), "L/min");
    let place = cells[3];
    let list =
        Rect::from_min_max(place.min - egui::vec2(10.0, 18.0), place.max + egui::vec2(46.0, 18.0));
    outcome_list::show(ui, cx, list, "Breathing", |id| BREATHING.contains(&id));
    vec![geometry]
}

/// V̇E on V̇CO₂ with its slopes.
#[must_use]
pub fn ve_on_vco2(cx: &Context<'_>) -> Chart {
    let mut chart = xy::chart(cx, "ve-on-vco2", Q::Vco2, Q::Ve, xy::ramp(cx), true);
    let slopes = &cx.results.slopes.ve_vco2;
    lines(cx, &mut chart, slopes);
    if let Some(first) = slopes.lines.first() {
        chart.title.push(Title::grey(format!("slope {:.1}", first.slope)));
    }
    chart
}

fn lines(cx: &Context<'_>, chart: &mut Chart, slopes: &SlopeChart) {
    for (i, line) in slopes.lines.iter().enumerate() {
        let pieces = xy::straight(line.slope, line.intercept, line.x);
        let dash = if i == 0 { None } else { CARRIED };
        let color = cx.tokens.ink;
        chart.items.push(Item::Line { pieces, width: 1.5, color, dash });
    }
}

/// VT on V̇E.
#[must_use]
pub fn vt_on_ve(cx: &Context<'_>) -> Chart {
    xy::chart(cx, "vt-on-ve", Q::Ve, Q::Vt, xy::ramp(cx), true)
}

/// V̇O₂ on the logarithm of V̇E.
fn oues(cx: &Context<'_>) -> Chart {
    let data = &cx.results.slopes.oues;
    let points: Vec<[f64; 2]> = data.x.iter().zip(&data.y).map(|(x, y)| [*x, y / 1000.0]).collect();
    let (Some(x), Some(y)) = (xy::extent(&points, 0), xy::extent(&points, 1)) else {
        return xy::chart(cx, "oues", Q::Ve, Q::Vo2, (0.0, -1.0), true);
    };
    let axis = Axis::around(x.0 - 0.02, x.1 + 0.02, 4);
    let mut chart = Chart::new("oues", (axis.low, axis.high), Axis::from_zero(y.1 * 1.1, 5));
    chart.x_axis = Some(axis);
    let color = cx.tokens.raw(Family::Oxygen);
    chart.items.push(Item::Points { points, mark: Mark::Dot, radius: 1.6, color });
    for line in &data.lines {
        let pieces = xy::straight(line.slope / 1000.0, line.intercept / 1000.0, line.x);
        chart.items.push(Item::Line { pieces, width: 1.5, color: cx.tokens.ink, dash: None });
    }
    chart.title = vec![
        Title::name("V̇O₂", Family::Oxygen),
        Title::grey("L/min against log₁₀ V̇E"),
        Title::grey("·  OUES"),
    ];
    chart.description =
        "V̇O₂ against the logarithm of V̇E with the oxygen uptake efficiency slope".into();
    chart
}
