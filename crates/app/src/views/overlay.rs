//! The predicted normal response behind the data: a pale band and a thin line, ramp only.

use analysis::predicted::overlay::Curves;
use analysis::quantity::Quantity;

use crate::chart::spec::{CARRIED, Chart, Item};
use crate::context::Context;
use crate::values;

/// Adds the overlay of `quantity` to a time chart, `map` taking the shown unit to the chart's y.
pub fn time(cx: &Context<'_>, chart: &mut Chart, quantity: Quantity, map: impl Fn(f64) -> f64) {
    if !cx.settings.overlay_shown {
        return;
    }
    if let Some(curves) = cx.results.overlay.model.as_ref().and_then(|m| m.over_time.as_ref()) {
        add(cx, chart, curves, quantity, map);
    }
}

fn add(
    cx: &Context<'_>,
    chart: &mut Chart,
    curves: &Curves,
    quantity: Quantity,
    map: impl Fn(f64) -> f64,
) {
    let Some(curve) = curves.of(quantity) else {
        return;
    };
    let t = cx.tokens;
    let place = |v: f64| map(values::in_shown(quantity, v));
    let rows: Vec<[f64; 3]> = curves
        .x
        .iter()
        .zip(curve.low.iter().zip(&curve.high))
        .map(|(x, (low, high))| [*x, place(*low), place(*high)])
        .collect();
    if rows.len() > 1 {
        chart.items.insert(0, Item::Band { rows, fill: t.band, edge: t.band_edge });
    }
    let middle: Vec<[f64; 2]> =
        curves.x.iter().zip(&curve.middle).map(|(x, v)| [*x, place(*v)]).collect();
    let (within, beyond) = middle.split_at(curves.normal.min(middle.len()));
    for (piece, dash) in [(within, None), (beyond, CARRIED)] {
        if piece.len() > 1 {
            let pieces = vec![piece.to_vec()];
            chart.items.push(Item::Line { pieces, width: 1.1, color: t.predicted, dash });
        }
    }
}

/// Highest value of the overlay of `quantity`, shown unit, so that axes hold it.
#[must_use]
pub fn top(cx: &Context<'_>, quantity: Quantity) -> f64 {
    if !cx.settings.overlay_shown {
        return 0.0;
    }
    let model = cx.results.overlay.model.as_ref();
    let curve = model.and_then(|m| m.over_time.as_ref()).and_then(|c| c.of(quantity));
    curve.map_or(0.0, |c| c.middle.iter().chain(&c.high).copied().fold(0.0, f64::max)).max(0.0)
        * values::in_shown(quantity, 1.0)
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
