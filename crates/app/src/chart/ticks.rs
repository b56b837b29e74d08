//! Sensible ticks: time at 0.5, 1, 2, 3, 5 or 10 min, values at 1, 2 or 5 times a power of ten.

use record::presentation::values::fixed;

/// Steps of the time axis, s.
const TIME_STEPS_S: [f64; 10] = [5.0, 10.0, 30.0, 60.0, 120.0, 180.0, 300.0, 600.0, 1200.0, 1800.0];

/// Test time as `m:ss`, with a true minus before the start.
#[must_use]
pub fn clock(t_s: f64) -> String {
    let total = t_s.round();
    let sign = if total < 0.0 { "−" } else { "" };
    let total = total.abs() as u64;
    format!("{sign}{}:{:02}", total / 60, total % 60)
}

/// A value axis.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Axis {
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
    /// Distance of labelled ticks.
    pub step: f64,
}

impl Axis {
    /// An axis with fixed ends.
    #[must_use]
    pub fn fixed(low: f64, high: f64, step: f64) -> Self {
        Self { low, high, step }
    }

    /// An axis that holds all of `low..high` with about `count` labelled ticks.
    #[must_use]
    pub fn around(low: f64, high: f64, count: usize) -> Self {
        let span = if high > low { high - low } else { 1.0 };
        let step = nice_step(span / count.max(1) as f64);
        Self { low: (low / step).floor() * step, high: (high / step).ceil() * step, step }
    }

    /// An axis from zero that holds `high`, with about `count` labelled ticks.
    #[must_use]
    pub fn from_zero(high: f64, count: usize) -> Self {
        let step = nice_step(high.max(1e-9) / count.max(1) as f64);
        let top = ((high / (0.5 * step)).ceil() * 0.5 * step).max(step);
        Self { low: 0.0, high: top, step }
    }

    /// The labelled ticks.
    #[must_use]
    pub fn ticks(&self) -> Vec<f64> {
        ticks(self.low, self.high, self.step)
    }

    /// A tick's label, with a true minus.
    #[must_use]
    pub fn label(&self, value: f64) -> String {
        let decimals = decimals(self.step);
        let value = if value.abs() < 0.5 * self.step * 1e-6 { 0.0 } else { value };
        fixed(value, decimals)
    }
}

fn decimals(step: f64) -> usize {
    (0..4)
        .find(|d| {
            let scaled = step * 10_f64.powi(*d);
            (scaled - scaled.round()).abs() < 1e-6
        })
        .unwrap_or(4) as usize
}

/// The smallest of 1, 2, 5 × 10ⁿ that is not below `rough`.
#[must_use]
pub fn nice_step(rough: f64) -> f64 {
    if !rough.is_finite() || rough <= 0.0 {
        return 1.0;
    }
    let power = 10_f64.powf(rough.log10().floor());
    [1.0, 2.0, 5.0, 10.0]
        .into_iter()
        .map(|m| m * power)
        .find(|s| *s >= rough * 0.999)
        .unwrap_or(rough)
}

/// Multiples of `step` within `low..=high`.
#[must_use]
pub fn ticks(low: f64, high: f64, step: f64) -> Vec<f64> {
    if !(step > 0.0 && high > low) || (high - low) / step > 500.0 {
        return Vec::new();
    }
    let first = (low / step - 1e-9).ceil();
    (0..).map(|i| (first + f64::from(i)) * step).take_while(|t| *t <= high + step * 1e-9).collect()
}

/// Step of the time labels so that they stand at least `min_px` apart.
#[must_use]
pub fn time_step(span_s: f64, width_px: f32, min_px: f32) -> f64 {
    let per_px = span_s / f64::from(width_px.max(1.0));
    TIME_STEPS_S.into_iter().find(|step| *step / per_px >= f64::from(min_px)).unwrap_or(3600.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn clock_reads_minutes_and_seconds() {
        assert_eq!(clock(800.0), "13:20");
        assert_eq!(clock(-5.4), "−0:05");
        assert_eq!(clock(59.6), "1:00");
    }

    #[test]
    fn time_steps_are_never_decimal() {
        // 20 min over 618 px: 1.94 s/px, so 2 min is 62 px and the first step that is ≥ 60 px apart.
        assert_eq!(time_step(1200.0, 618.0, 60.0), 120.0);
        assert_eq!(time_step(1200.0, 408.0, 60.0), 180.0);
    }

    #[test]
    fn axes_hold_their_data_on_round_ticks() {
        let axis = Axis::around(63.0, 152.0, 5);
        assert_eq!((axis.low, axis.high, axis.step), (60.0, 160.0, 20.0));
        assert_eq!(axis.ticks(), vec![60.0, 80.0, 100.0, 120.0, 140.0, 160.0]);
        assert_eq!(Axis::from_zero(2.7, 6).label(0.5), "0.5");
        assert_eq!(ticks(0.0, 1.0, 0.0), Vec::<f64>::new());
    }
}
