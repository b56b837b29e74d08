//! The predicted normal response behind the data: a pale band and a thin line, ramp only.

use analysis::quantity::Quantity;

use crate::chart::spec::Chart;
use crate::context::Context;

/// Adds the overlay of `quantity` to a time chart, `map` taking the shown unit to the chart's y.
pub fn time(_cx: &Context<'_>, _chart: &mut Chart, _quantity: Quantity, _map: impl Fn(f64) -> f64) {
}
