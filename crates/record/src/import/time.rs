//! Times of rows: seconds, minutes, `m:ss`, `h:mm:ss`, the clock; and their order.

use analysis::unit::Unit;
use serde::{Deserialize, Serialize};

use super::number::{self, Decimal};

/// Shortest and longest time that a test's rows may cover for a reading of time to be plausible, s.
const SPAN_S: (f64, f64) = (30.0, 10_800.0);
/// Shortest and longest plausible median step of rows, s (a beat, a minute's average).
const STEP_S: (f64, f64) = (0.25, 60.0);
const DAY_S: f64 = 86_400.0;

/// How the cells of the time column are read.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum TimeForm {
    /// A number in seconds.
    Seconds,
    /// A number in minutes.
    Minutes,
    /// A number in milliseconds.
    Milliseconds,
    /// A number in hours.
    Hours,
    /// A number that is a fraction of a day, as spreadsheets hold times.
    Days,
    /// `m:ss` or `h:mm:ss` since the start.
    Elapsed,
    /// `h:mm`.
    HoursMinutes,
    /// Time of day; counted from the first row, over midnight where needed.
    TimeOfDay,
}

impl TimeForm {
    /// The form for numbers in `unit`.
    #[must_use]
    pub fn of_unit(unit: Unit) -> Option<Self> {
        match unit {
            Unit::Second => Some(TimeForm::Seconds),
            Unit::Minute => Some(TimeForm::Minutes),
            Unit::Millisecond => Some(TimeForm::Milliseconds),
            Unit::Hour => Some(TimeForm::Hours),
            _ => None,
        }
    }

    /// The unit of the cells, for the list of columns.
    #[must_use]
    pub fn unit(self) -> Unit {
        match self {
            TimeForm::Minutes => Unit::Minute,
            TimeForm::Milliseconds => Unit::Millisecond,
            TimeForm::Hours | TimeForm::Days => Unit::Hour,
            _ => Unit::Second,
        }
    }

    fn read(self, cell: &str, decimal: Decimal) -> Option<f64> {
        let scaled = |factor: f64| number::number(cell, decimal).map(|v| v * factor);
        let value = match self {
            TimeForm::Seconds => scaled(1.0),
            TimeForm::Minutes => scaled(60.0),
            TimeForm::Milliseconds => number::number(cell, decimal).map(|v| v / 1000.0),
            TimeForm::Hours => scaled(3600.0),
            TimeForm::Days => scaled(DAY_S),
            TimeForm::Elapsed | TimeForm::TimeOfDay => clock(cell).map(|c| c.seconds),
            TimeForm::HoursMinutes => clock(cell).map(|c| c.seconds * 60.0),
        };
        value.filter(|v| v.is_finite() && v.abs() < 1e9)
    }
}

/// A time written with colons.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Clock {
    /// Read as `m:ss` or `h:mm:ss`, s.
    pub seconds: f64,
    /// Number of parts between colons, 2 or 3.
    pub parts: usize,
    /// Whether a date stands before it.
    pub dated: bool,
}

/// Reads a time written with colons, with or without a date before it.
#[must_use]
pub fn clock(text: &str) -> Option<Clock> {
    let text = text.trim();
    if text.len() > 40 || !text.contains(':') {
        return None;
    }
    let (date, time) = match text.rsplit_once(['T', ' ']) {
        Some((date, time)) => (Some(date), time),
        None => (None, text),
    };
    let dated = match date {
        Some(d) if d.bytes().filter(u8::is_ascii_digit).count() >= 6 && !d.contains(':') => true,
        Some(_) => return None,
        None => false,
    };
    let (negative, time) = match time.strip_prefix(['-', '\u{2212}']) {
        Some(rest) => (true, rest),
        None => (false, time),
    };
    let time = time.strip_suffix('Z').unwrap_or(time);
    let parts: Vec<&str> = time.split(':').collect();
    let (last, front) = parts.split_last()?;
    let whole = |s: &str| (s.len() <= 3).then(|| s.parse::<u32>().ok()).flatten();
    let (sec, frac) = last.split_once(['.', ',']).unwrap_or((last, ""));
    if sec.len() > 2 || !frac.bytes().all(|b| b.is_ascii_digit()) {
        return None;
    }
    let sec =
        f64::from(whole(sec).filter(|s| *s < 60)?) + format!("0.{frac}0").parse::<f64>().ok()?;
    let minutes = match front {
        [m] => whole(m)?,
        [h, m] => whole(h)? * 60 + whole(m).filter(|m| *m < 60)?,
        _ => return None,
    };
    let seconds = f64::from(minutes) * 60.0 + sec;
    let seconds = if negative { -seconds } else { seconds };
    Some(Clock { seconds, parts: parts.len(), dated })
}

/// Times of all cells, s; `None` where a cell is no time.
#[must_use]
pub fn read<'a>(
    cells: impl Iterator<Item = &'a str>,
    decimal: Decimal,
    form: TimeForm,
) -> Vec<Option<f64>> {
    let raw = cells.map(|c| form.read(c, decimal));
    if form != TimeForm::TimeOfDay {
        return raw.collect();
    }
    let (mut origin, mut last, mut days) = (None, f64::NEG_INFINITY, 0.0);
    raw.map(|t| {
        let t = t?;
        if t + days * DAY_S < last - DAY_S / 2.0 {
            days += 1.0;
        }
        last = t + days * DAY_S;
        let origin = *origin.get_or_insert(last);
        Some(last - origin)
    })
    .collect()
}

/// The forms that make a plausible test of these cells: median step of a beat to a minute, span of
/// half a minute to three hours.
#[must_use]
pub fn plausible_forms(cells: &[&str], decimal: Decimal) -> Vec<(TimeForm, f64, f64)> {
    let clocks: Vec<Clock> = cells.iter().filter_map(|c| clock(c)).collect();
    let forms: &[TimeForm] = if clocks.len() * 2 > cells.len() {
        // Clocks of three parts that begin late, or dated ones, are times of day.
        let late = clocks[0].parts == 3 && clocks[0].seconds >= 3600.0;
        if clocks[0].dated || late {
            &[TimeForm::TimeOfDay]
        } else if clocks.iter().all(|c| c.parts == 2) {
            &[TimeForm::Elapsed, TimeForm::HoursMinutes]
        } else {
            &[TimeForm::Elapsed]
        }
    } else {
        &[
            TimeForm::Seconds,
            TimeForm::Minutes,
            TimeForm::Milliseconds,
            TimeForm::Hours,
            TimeForm::Days,
        ]
    };
    if let [only] = forms {
        return vec![(*only, 0.0, 0.0)];
    }
    forms
        .iter()
        .filter_map(|form| {
            let (step, span) = step_and_span(cells, decimal, *form)?;
            let within = |x: f64, (low, high): (f64, f64)| x >= low && x <= high;
            (within(step, STEP_S) && within(span, SPAN_S)).then_some((*form, step, span))
        })
        .collect()
}

/// Median step and span of the readable times, s.
#[must_use]
pub fn step_and_span(cells: &[&str], decimal: Decimal, form: TimeForm) -> Option<(f64, f64)> {
    let times: Vec<f64> =
        read(cells.iter().copied(), decimal, form).into_iter().flatten().collect();
    if times.len() < 2 {
        return None;
    }
    let mut steps: Vec<f64> = times.windows(2).map(|w| w[1] - w[0]).filter(|d| *d > 0.0).collect();
    if steps.is_empty() {
        return None;
    }
    steps.sort_by(f64::total_cmp);
    let low = times.iter().copied().fold(f64::INFINITY, f64::min);
    let high = times.iter().copied().fold(f64::NEG_INFINITY, f64::max);
    Some((steps[steps.len() / 2], high - low))
}

/// Spreads equal stamps over the step before them (at most 1 s, the usual resolution), so that
/// time rises. `times` must not fall. Returns how many rows were moved.
pub fn spread_equal(times: &mut [f64]) -> usize {
    let mut moved = 0;
    let mut i = 0;
    while i < times.len() {
        let t = times[i];
        let mut j = i + 1;
        while j < times.len() && times[j] == t {
            j += 1;
        }
        let k = j - i;
        if k > 1 {
            let before = if i > 0 { t - times[i - 1] } else { 1.0 };
            let room = before.min(1.0);
            for (n, slot) in times[i..j].iter_mut().enumerate() {
                *slot = t - room * (k - 1 - n) as f64 / k as f64;
            }
            moved += k - 1;
        }
        i = j;
    }
    moved
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_as_exports_write_them() {
        for (text, seconds, parts) in [
            ("1:30", 90.0, 2),
            ("0:01:30", 90.0, 3),
            ("14:03:05", 50_585.0, 3),
            ("-2:30", -150.0, 2),
            ("12:07,5", 727.5, 2),
            ("100:00", 6000.0, 2),
        ] {
            let c = clock(text).unwrap();
            assert_eq!((c.seconds, c.parts, c.dated), (seconds, parts, false), "{text}");
        }
        assert!(clock("2026-03-01T14:03:05").unwrap().dated);
        for text in ["1:75", "abc:10", ":", "1:2:3:4", "12", "a b:1"] {
            assert_eq!(clock(text), None, "{text}");
        }
    }

    #[test]
    fn the_clock_passes_midnight() {
        let cells = ["23:59:55", "23:59:59", "0:00:03"];
        let t = read(cells.into_iter(), Decimal::Point, TimeForm::TimeOfDay);
        assert_eq!(t, [Some(0.0), Some(4.0), Some(8.0)]);
    }

    #[test]
    fn the_unit_of_time_follows_from_step_and_span() {
        let form = |cells: Vec<String>| {
            let cells: Vec<&str> = cells.iter().map(String::as_str).collect();
            plausible_forms(&cells, Decimal::Point).into_iter().map(|f| f.0).collect::<Vec<_>>()
        };
        // 300 breaths, 3 s each, in s, min and fractions of a day.
        assert_eq!(form((0..300).map(|i| (3 * i).to_string()).collect()), [TimeForm::Seconds]);
        assert_eq!(
            form((0..300).map(|i| format!("{:.4}", f64::from(i) / 20.0)).collect()),
            [TimeForm::Minutes]
        );
        assert_eq!(
            form((0..300).map(|i| format!("{:.8}", f64::from(3 * i) / 86_400.0)).collect()),
            [TimeForm::Days]
        );
        // One row a minute as hh:mm cannot be m:ss: that would be a test of 20 s.
        assert_eq!(form((0..20).map(|i| format!("10:{i:02}")).collect()), [TimeForm::HoursMinutes]);
        assert_eq!(
            form((0..200).map(|i| format!("{}:{:02}", i * 3 / 60, i * 3 % 60)).collect()),
            [TimeForm::Elapsed]
        );
    }

    #[test]
    fn equal_stamps_are_spread() {
        let mut t = [10.0, 11.0, 11.0, 12.0];
        assert_eq!(spread_equal(&mut t), 1);
        assert_eq!(t, [10.0, 10.5, 11.0, 12.0]);
    }
}
