//! Chart items from averaged series and raw breaths.

use std::collections::BTreeSet;

use analysis::quantity::Quantity;
use analysis::results::FlagKind;

use crate::chart::spec::{
    Chart, DOTS, Dash, EndLabel, Item, LONG, Mark, Point, SHORT, Title, pieces,
};
use crate::context::Context;
use crate::theme::Family;
use crate::values;

/// Longest stretch without values over which a line is still drawn, s.
pub const GAP_S: f64 = 20.0;

/// How a quantity is drawn: width, pattern, shape and radius of its raw breaths.
#[must_use]
pub fn style(quantity: Quantity) -> (f32, Option<Dash>, Mark, f32) {
    use Quantity as Q;
    match quantity {
        Q::O2Pulse => (3.2, None, Mark::Dot, 1.2),
        Q::Vo2 | Q::EqO2 | Q::Peto2 => (1.9, None, Mark::Dot, 1.2),
        Q::Spo2 => (1.9, None, Mark::Square, 1.2),
        Q::Vco2 | Q::EqCo2 | Q::Petco2 => (1.7, LONG, Mark::Level, 2.5),
        Q::Hr => (1.7, SHORT, Mark::Dot, 1.0),
        Q::Ve => (2.0, None, Mark::Dot, 1.2),
        Q::Vt => (1.4, LONG, Mark::Dot, 1.0),
        Q::Fr => (1.4, DOTS, Mark::Dot, 1.0),
        Q::Rer => (1.5, None, Mark::Dot, 1.2),
        _ => (1.4, None, Mark::Dot, 1.0),
    }
}

/// Raw value of `quantity` at breath `i`, ratios formed from their parts, shown unit.
#[must_use]
pub fn breath(cx: &Context<'_>, quantity: Quantity, i: usize) -> Option<f64> {
    breaths(cx, quantity)(i)
}

/// [`breath`] for many breaths: the columns are looked up once.
fn breaths<'a>(cx: &Context<'a>, quantity: Quantity) -> impl Fn(usize) -> Option<f64> + 'a {
    use Quantity as Q;
    let table = &cx.recording.breaths;
    let own = table.column(quantity);
    let shown = values::in_shown(quantity, 1.0);
    let (over, under, factor) = match quantity {
        Q::O2Pulse => (table.column(Q::Vo2), table.column(Q::Hr), 1.0),
        Q::Rer => (table.column(Q::Vco2), table.column(Q::Vo2), 1.0),
        Q::EqO2 => (table.column(Q::Ve), table.column(Q::Vo2), 1000.0),
        Q::EqCo2 => (table.column(Q::Ve), table.column(Q::Vco2), 1000.0),
        _ => (None, None, 1.0),
    };
    move |i| {
        let at = |column: Option<&[Option<f64>]>| column?.get(i).copied().flatten();
        if own.is_some() {
            return at(own).map(|v| v * shown);
        }
        let (over, under) = (at(over)?, at(under)?);
        (under > 0.0).then(|| factor * over / under)
    }
}

/// Adds raw breaths of `quantity`, `map` taking the shown unit to the chart's y.
pub fn raw(cx: &Context<'_>, chart: &mut Chart, quantity: Quantity, map: impl Fn(f64) -> f64) {
    if !cx.view.raw {
        return;
    }
    let (_, _, mark, radius) = style(quantity);
    let color = cx.tokens.raw(Family::of(quantity));
    let ends = cx.recording.breaths.end_s();
    let (from, to) = chart.x;
    let left_out: BTreeSet<usize> =
        cx.results.flags.iter().filter(|f| f.kind == FlagKind::LeftOut).map(|f| f.breath).collect();
    let value = breaths(cx, quantity);
    let (mut kept, mut out): (Vec<Point>, Vec<Point>) = (Vec::new(), Vec::new());
    for (i, t) in ends.iter().enumerate() {
        if *t < from || *t > to {
            continue;
        }
        if let Some(v) = value(i) {
            let point = [cx.recording.breaths.mid_s(i), map(v)];
            if left_out.contains(&i) { out.push(point) } else { kept.push(point) }
        }
    }
    chart.items.push(Item::Points { points: kept, mark, radius, color });
    if !out.is_empty() {
        chart.items.push(Item::Points { points: out, mark: Mark::Cross, radius: 3.0, color });
    }
}

/// Adds the averaged line of `quantity`, its ring at the cursor and its name at its end.
pub fn average(cx: &Context<'_>, chart: &mut Chart, quantity: Quantity, map: impl Fn(f64) -> f64) {
    let series = &cx.results.series;
    let Some(column) = series.columns.get(&quantity) else {
        return;
    };
    let (width, dash, ..) = style(quantity);
    let family = Family::of(quantity);
    let color = cx.tokens.line(family);
    let ys: Vec<Option<f64>> =
        column.iter().map(|v| v.map(|v| map(values::in_shown(quantity, v)))).collect();
    let pieces = pieces(&series.t_s, &ys, GAP_S);
    chart.items.push(Item::Line { pieces, width, color, dash });
    if let Some(v) = values::raw_at(cx, quantity, cx.cursor()) {
        chart.rings.push((map(values::in_shown(quantity, v)), color));
    }
    if let Some(at) = end_point(cx, &series.t_s, &ys, chart.x) {
        let text = quantity.row().symbol.to_owned();
        chart.labels.push(EndLabel { at, text, color: cx.tokens.text(family) });
    }
}

/// Where a line is named: at load end, where lines stand apart, else at its last value.
fn end_point(cx: &Context<'_>, t: &[f64], ys: &[Option<f64>], x: (f64, f64)) -> Option<Point> {
    let wanted = cx.results.phases.ramp().map_or(x.1, |(_, end)| end).min(x.1);
    t.iter()
        .zip(ys)
        .filter_map(|(t, y)| y.map(|y| [*t, y]))
        .filter(|p| p[0] >= x.0 && p[0] <= x.1)
        .min_by(|a, b| (a[0] - wanted).abs().total_cmp(&(b[0] - wanted).abs()))
}

/// Smallest and largest averaged value of the test, shown unit.
#[must_use]
pub fn range(cx: &Context<'_>, quantity: Quantity) -> Option<(f64, f64)> {
    let column = cx.results.series.columns.get(&quantity)?;
    let mut all = column.iter().flatten().map(|v| values::in_shown(quantity, *v));
    let first = all.next()?;
    Some(all.fold((first, first), |(lo, hi), v| (lo.min(v), hi.max(v))))
}

/// The title of a quantity in its hue.
#[must_use]
pub fn title(quantity: Quantity) -> Title {
    Title::name(quantity.row().symbol, Family::of(quantity))
}

/// A sentence that tells what a time chart shows, for those who do not see it.
#[must_use]
pub fn describe(cx: &Context<'_>, quantities: &[Quantity]) -> String {
    let parts: Vec<String> = quantities
        .iter()
        .filter_map(|q| {
            let (low, high) = range(cx, *q)?;
            let (unit, decimals) = values::shown_unit(*q);
            let (now, _) = values::at(cx, *q, cx.cursor());
            Some(format!(
                "{} from {low:.decimals$} to {high:.decimals$} {}, {now} at the cursor",
                q.row().symbol,
                unit.shown()
            ))
        })
        .collect();
    if parts.is_empty() { "no data".into() } else { format!("Over time: {}", parts.join("; ")) }
}
