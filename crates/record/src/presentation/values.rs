//! The one place where values are rounded: a number on screen is the number on paper.

use analysis::quantity::Quantity;
use analysis::results::{At, Interval, Outcome, Value};
use analysis::unit::{Dimension, Unit};

use super::{labels, wording};

/// What stands where there is no value.
pub const NONE: &str = "–";

/// An outcome as shown.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Shown {
    /// `id@at`.
    pub key: String,
    /// Label, such as "Peak V̇O₂".
    pub label: String,
    /// Rounded value or reading; [`NONE`] where there is none.
    pub value: String,
    /// Unit as shown; empty for words and pure numbers.
    pub unit: String,
    /// *This recording*, `[17.9, 18.9]`; `None` where there is none.
    pub recording: Option<String>,
    /// *If repeated*.
    pub repeat: Option<String>,
}

impl Shown {
    /// Value and unit, `13.7 mL/beat`.
    #[must_use]
    pub fn with_unit(&self) -> String {
        joined(&self.value, &self.unit)
    }
}

/// `id@at`, the key of an outcome in the window, in `describe` and on the page.
#[must_use]
pub fn key(id: &str, at: At) -> String {
    format!("{id}@{}", at.code())
}

/// The outcome as shown.
#[must_use]
pub fn shown(outcome: &Outcome) -> Shown {
    let form = Form::of(outcome);
    let interval = |i: Option<Interval>| i.map(|i| form.interval(i));
    let (value, unit) = match &outcome.value {
        Some(Value::Number(x)) => (form.number(*x), form.unit.to_owned()),
        Some(Value::Word(word)) => (wording::reading(word), String::new()),
        None => (NONE.to_owned(), String::new()),
    };
    Shown {
        key: key(&outcome.id, outcome.at),
        label: labels::label(&outcome.id, outcome.at),
        value,
        unit,
        recording: interval(outcome.recording),
        repeat: interval(outcome.repeat),
    }
}

/// A value in its unit, `13.7 mL/beat`, with the decimals usual for the unit.
#[must_use]
pub fn in_unit(value: f64, unit: Unit) -> String {
    let form = Form::of_unit(unit);
    joined(&form.number(value), form.unit)
}

/// A value of a series, in the unit in which it is shown: number and unit apart.
#[must_use]
pub fn of_series(quantity: Quantity, value: f64) -> (String, &'static str) {
    let form = Form::of_quantity(quantity);
    (form.number(value), form.unit)
}

/// Value of a series in the unit in which it is shown, not rounded: for axes.
#[must_use]
pub fn on_axis(quantity: Quantity, value: f64) -> f64 {
    value * Form::of_quantity(quantity).factor
}

/// An instant or duration, `12:02`, `−0:30`, `1:02:03` from an hour on.
#[must_use]
pub fn time(seconds: f64) -> String {
    let total = seconds.abs().round() as i64;
    let sign = if seconds < 0.0 && total > 0 { "−" } else { "" };
    let (h, m, s) = (total / 3600, total / 60 % 60, total % 60);
    if h > 0 { format!("{sign}{h}:{m:02}:{s:02}") } else { format!("{sign}{m}:{s:02}") }
}

/// `value` with `decimals`, U+2212 for minus, no minus before zero.
#[must_use]
pub fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{:.decimals$}", value.abs());
    let zero = text.bytes().all(|b| matches!(b, b'0' | b'.'));
    if value < 0.0 && !zero { format!("−{text}") } else { text }
}

/// Value and unit with a no-break space between.
#[must_use]
pub fn joined(value: &str, unit: &str) -> String {
    if unit.is_empty() { value.to_owned() } else { format!("{value}\u{a0}{unit}") }
}

/// How a number is written.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Form {
    unit: &'static str,
    factor: f64,
    decimals: usize,
    /// Seconds in one, for times shown as m:ss.
    seconds: Option<f64>,
}

impl Form {
    fn of(outcome: &Outcome) -> Self {
        let unit = outcome.unit.unwrap_or(Unit::One);
        let mut form = Form::of_unit(unit);
        match (outcome.id.as_ref(), unit) {
            ("ventilatory-power", _) | ("ve-vco2-intercept", _) => form.decimals = 1,
            ("rate-pressure-product", _) => form.decimals = 0,
            (id, Unit::One)
                if ["rer", "ratio", "fraction", "vd-vt", "index", "over-pulse"]
                    .iter()
                    .any(|part| id.contains(part)) =>
            {
                form.decimals = 2;
            }
            _ => {}
        }
        form
    }

    fn of_quantity(quantity: Quantity) -> Self {
        let mut form = Form::of_unit(quantity.unit());
        if !matches!(quantity, Quantity::Vo2 | Quantity::Vco2 | Quantity::Ve) {
            form.decimals = usize::from(quantity.row().decimals);
        }
        form
    }

    /// Decimals that a reader can use: one digit beyond what the interval resolves at most.
    fn of_unit(unit: Unit) -> Self {
        let plain = |decimals| Form { unit: unit.shown(), factor: 1.0, decimals, seconds: None };
        match unit {
            Unit::MlPerMin => Form { unit: "L/min", factor: 0.001, ..plain(2) },
            Unit::Second => Form { unit: "", seconds: Some(1.0), ..plain(0) },
            Unit::Minute => Form { unit: "", seconds: Some(60.0), ..plain(0) },
            Unit::Hour | Unit::Litre | Unit::PerMinPerWatt => plain(2),
            _ => plain(match unit.dimension() {
                Dimension::Flow
                | Dimension::Frequency
                | Dimension::Pressure
                | Dimension::Power
                | Dimension::Concentration
                | Dimension::Volume
                | Dimension::Length
                | Dimension::Score => 0,
                Dimension::Ratio if unit == Unit::Percent => 0,
                Dimension::CirculatoryPower => 0,
                Dimension::Area => 2,
                _ => 1,
            }),
        }
    }

    fn number(&self, value: f64) -> String {
        match self.seconds {
            Some(scale) => time(value * scale),
            None => fixed(value * self.factor, self.decimals),
        }
    }

    /// Both ends in brackets; a limit on one side only as such.
    fn interval(&self, i: Interval) -> String {
        match (i.low.is_finite(), i.high.is_finite()) {
            (true, false) => return format!("≥ {}", self.number(i.low)),
            (false, true) => return format!("≤ {}", self.number(i.high)),
            _ => {}
        }
        format!("[{}, {}]", self.number(i.low), self.number(i.high))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn check(id: &'static str, unit: Unit, value: f64, expected: &str) {
        let shown = shown(&Outcome::quantity(id, At::Peak, "m", unit, value));
        assert_eq!(shown.with_unit().replace('\u{a0}', " "), expected);
    }

    #[test]
    fn rounding_by_unit() {
        check("vo2-peak", Unit::MlPerMin, 2134.9, "2.13 L/min");
        check("vo2-peak-per-kg", Unit::MlPerKgMin, 26.04, "26.0 mL/kg/min");
        check("o2-pulse-at-peak", Unit::MlPerBeat, 13.66, "13.7 mL/beat");
        check("o2-pulse-late-slope", Unit::PercentPerMin, -0.5, "−0.5 %/min");
        check("o2-pulse-late-slope", Unit::PercentPerMin, -0.04, "0.0 %/min");
        check("ve-vco2-slope-full", Unit::One, 26.44, "26.4");
        check("rer-peak", Unit::One, 1.104, "1.10");
        check("hr-peak", Unit::PerMin, 154.6, "155 /min");
        check("o2-pulse-detection-limit", Unit::Minute, 2.1667, "2:10");
    }

    #[test]
    fn intervals_and_times() {
        let outcome = Outcome::quantity("o2-pulse-at-peak", At::Peak, "m", Unit::MlPerBeat, 18.4)
            .recorded_within(Some(Interval { low: 17.91, high: 18.9 }));
        assert_eq!(shown(&outcome).recording.as_deref(), Some("[17.9, 18.9]"));
        assert_eq!(shown(&outcome).repeat, None);
        assert_eq!(time(722.4), "12:02");
        assert_eq!(time(-29.6), "−0:30");
        assert_eq!(time(-0.2), "0:00");
        assert_eq!(time(3723.0), "1:02:03");
    }
}
