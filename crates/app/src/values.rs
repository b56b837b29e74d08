//! Values of the averaged series at an instant, as shown.

use analysis::quantity::Quantity;
use analysis::unit::Unit;
use record::presentation::values::fixed;

use crate::context::Context;

/// Unit in which a quantity is shown, and its decimals there.
#[must_use]
pub fn shown_unit(quantity: Quantity) -> (Unit, usize) {
    match quantity {
        Quantity::Vo2 | Quantity::Vco2 => (Unit::LPerMin, 2),
        Quantity::Ve => (Unit::LPerMin, 0),
        other => (other.unit(), usize::from(other.row().decimals)),
    }
}

/// `value` in the canonical unit as a number in the shown unit.
#[must_use]
pub fn in_shown(quantity: Quantity, value: f64) -> f64 {
    quantity.unit().convert(value, shown_unit(quantity).0).unwrap_or(value)
}

/// Whether the averaged series hold any value of `quantity`.
#[must_use]
pub fn present(cx: &Context<'_>, quantity: Quantity) -> bool {
    cx.results.series.columns.get(&quantity).is_some_and(|c| c.iter().any(Option::is_some))
}

/// The averaged value at `t_s`, canonical unit; missing in a gap.
#[must_use]
pub fn raw_at(cx: &Context<'_>, quantity: Quantity, t_s: f64) -> Option<f64> {
    let series = &cx.results.series;
    let column = series.columns.get(&quantity)?;
    let after = series.t_s.partition_point(|t| *t <= t_s);
    let near = [after.checked_sub(1), Some(after)]
        .into_iter()
        .flatten()
        .filter(|i| *i < series.t_s.len())
        .min_by(|a, b| (series.t_s[*a] - t_s).abs().total_cmp(&(series.t_s[*b] - t_s).abs()))?;
    if (series.t_s[near] - t_s).abs() > 20.0 {
        return None;
    }
    column.get(near).copied().flatten()
}

/// The averaged value at `t_s` as shown, and its unit.
#[must_use]
pub fn at(cx: &Context<'_>, quantity: Quantity, t_s: f64) -> (String, String) {
    let (unit, decimals) = shown_unit(quantity);
    match raw_at(cx, quantity, t_s) {
        Some(value) => (fixed(in_shown(quantity, value), decimals), unit.shown().to_owned()),
        None => ("–".into(), String::new()),
    }
}
