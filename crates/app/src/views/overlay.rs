//! The model of a normal response behind the data: a pale band and a thin line, ramp only.

use analysis::predicted::overlay::{Curve, Curves, Model};
use analysis::quantity::Quantity;
use record::presentation::wording;

use crate::chart::spec::{CARRIED, Chart, DOTS, Dash, Item, Point};
use crate::context::Context;
use crate::values;

/// The model where it is to be drawn.
fn model<'a>(cx: &Context<'a>) -> Option<&'a Model> {
    cx.results.overlay.model.as_ref().filter(|_| cx.settings.overlay_shown)
}

fn over_time<'a>(cx: &Context<'a>) -> Option<&'a Curves> {
    model(cx)?.over_time.as_ref()
}

/// Adds line and band of `quantity` to a time chart, `map` taking the shown unit to the chart's y.
pub fn time(cx: &Context<'_>, chart: &mut Chart, quantity: Quantity, map: impl Fn(f64) -> f64) {
    let Some((curves, curve)) = over_time(cx).and_then(|c| Some((c, c.of(quantity)?))) else {
        return;
    };
    let place = |v: f64| map(values::in_shown(quantity, v));
    let rows = band(curves, curve, place);
    if rows.len() > 1 {
        chart.items.insert(0, Item::Band { rows, fill: cx.tokens.band, edge: cx.tokens.band_edge });
    }
    line(cx, chart, curves, curve, None, place);
    if quantity == Quantity::Hr
        && let Some(blocked) = curves.beta_blocked()
    {
        line(cx, chart, curves, blocked, DOTS, place);
    }
    chart.modelled = true;
}

/// Adds the line of `quantity` alone, for a chart that has the band of another.
pub fn time_line(
    cx: &Context<'_>,
    chart: &mut Chart,
    quantity: Quantity,
    map: impl Fn(f64) -> f64,
) {
    if let Some((curves, curve)) = over_time(cx).and_then(|c| Some((c, c.of(quantity)?))) {
        line(cx, chart, curves, curve, None, |v| map(values::in_shown(quantity, v)));
        chart.modelled = true;
    }
}

/// Adds the model's `y` against its `x`: up to the predicted peak, where both go on nowhere.
pub fn against(cx: &Context<'_>, chart: &mut Chart, x: Quantity, y: Quantity) {
    let Some(model) = model(cx).filter(|_| chart.missing.is_none()) else {
        return;
    };
    let curves = &model.over_vo2;
    let xs = if x == Quantity::Vo2 {
        Some(&curves.x)
    } else {
        curves.of(x).map(|c| &c.middle).filter(|m| m.len() == curves.x.len())
    };
    let (Some(xs), Some(curve)) = (xs, curves.of(y)) else {
        return;
    };
    let xs: Vec<f64> = xs.iter().map(|v| values::in_shown(x, *v)).collect();
    let shown = Curves { x: xs, normal: curves.normal, curves: Vec::new() };
    let place = |v: f64| values::in_shown(y, v);
    let rows = band(&shown, curve, place);
    if rows.len() > 1 {
        chart.items.insert(0, Item::Band { rows, fill: cx.tokens.band, edge: cx.tokens.band_edge });
    }
    line(cx, chart, &shown, curve, None, place);
    if y == Quantity::Hr
        && let Some(blocked) = curves.beta_blocked()
    {
        line(cx, chart, &shown, blocked, DOTS, place);
    }
    chart.modelled = true;
}

/// The band as rows of x, lower, upper; where one edge is not published the line closes it.
fn band(curves: &Curves, curve: &Curve, place: impl Fn(f64) -> f64) -> Vec<[f64; 3]> {
    let edge = |edge: &[f64]| -> Vec<f64> {
        if edge.is_empty() { curve.middle.clone() } else { edge.to_vec() }
    };
    if curve.low.is_empty() && curve.high.is_empty() {
        return Vec::new();
    }
    let (low, high) = (edge(&curve.low), edge(&curve.high));
    curves
        .x
        .iter()
        .take(curves.normal)
        .zip(low.iter().zip(&high))
        .map(|(x, (low, high))| [*x, place(*low), place(*high)])
        .collect()
}

/// The middle, `dash`ed as told up to the predicted peak and carried on beyond it.
fn line(
    cx: &Context<'_>,
    chart: &mut Chart,
    curves: &Curves,
    curve: &Curve,
    dash: Option<Dash>,
    place: impl Fn(f64) -> f64,
) {
    let middle: Vec<Point> =
        curves.x.iter().zip(&curve.middle).map(|(x, v)| [*x, place(*v)]).collect();
    let peak = curves.normal.min(middle.len());
    // The dashed piece starts where the other ends.
    let (within, beyond) = (&middle[..peak], &middle[peak.saturating_sub(1)..]);
    for (piece, dash) in [(within, dash), (beyond, CARRIED)] {
        if piece.len() > 1 {
            let pieces = vec![piece.to_vec()];
            let color = cx.tokens.predicted;
            chart.items.push(Item::Line { pieces, width: 1.1, color, dash });
        }
    }
}

/// Highest value of the overlay of `quantity`, shown unit, so that axes hold it.
#[must_use]
pub fn top(cx: &Context<'_>, quantity: Quantity) -> f64 {
    let curve = over_time(cx).and_then(|c| c.of(quantity));
    curve.map_or(0.0, |c| c.middle.iter().chain(&c.high).copied().fold(0.0, f64::max)).max(0.0)
        * values::in_shown(quantity, 1.0)
}

/// Writes once, into the first chart of a column that can say it, what the model is, or why it is
/// not drawn.
pub fn name<'c>(cx: &Context<'_>, charts: impl IntoIterator<Item = &'c mut Chart>) {
    let words = withheld(cx).map(|why| format!("No model of a normal response: {why}"));
    let is_withheld = words.is_some();
    let words = words.unwrap_or_else(|| wording::plain_text("overlay-label"));
    // A chart that says nothing else yet has room for it.
    let chart = charts
        .into_iter()
        .filter(|c| c.missing.is_none() && (is_withheld || c.modelled))
        .min_by_key(|c| !c.remarks.is_empty());
    if let Some(chart) = chart {
        chart.remarks.push(([chart.x.0, chart.y.high], words.clone()));
        chart.description = format!("{}. {words}", chart.description);
    }
}

/// Why no overlay is drawn, in words, if one is wanted.
#[must_use]
pub fn withheld(cx: &Context<'_>) -> Option<String> {
    if !cx.settings.overlay_shown {
        return None;
    }
    let overlay = &cx.results.overlay;
    let why = overlay
        .withheld
        .as_ref()
        .or_else(|| overlay.model.as_ref().and_then(|m| m.over_time_withheld.as_ref()));
    why.map(|n| crate::words::note(n, cx.results))
}
