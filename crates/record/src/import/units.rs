//! Spellings of units: a closed table. What is not in it is not understood.

use analysis::quantity::Quantity;
use analysis::unit::Unit;
use unicode_normalization::UnicodeNormalization;

use crate::provenance::{Target, base_unit};

/// What a unit text says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum UnitText {
    /// A unit of the table.
    Unit(Unit),
    /// The form of times with colons (`m:ss`, `h:mm:ss`).
    Clock,
    /// Nothing is stated (empty or a dash).
    Nothing,
    /// Not in the table.
    Unknown,
}

/// Spellings, already in the form of [`plain`].
const SPELLINGS: &[(Unit, &[&str])] = &[
    (Unit::MlPerMin, &["ml/min", "mlmin-1", "mlmin", "ml/minute", "cc/min", "ccm/min", "ml/mn"]),
    (
        Unit::LPerMin,
        &[
            "l/min",
            "lmin-1",
            "lmin",
            "lpm",
            "l/minute",
            "litre/min",
            "liter/min",
            "litres/min",
            "liters/min",
            "ltr/min",
            "l/mn",
        ],
    ),
    (Unit::MlPerS, &["ml/s", "mls-1"]),
    (Unit::LPerS, &["l/s", "ls-1"]),
    (
        Unit::MlPerKgMin,
        &[
            "ml/kg/min",
            "ml/min/kg",
            "mlkg-1min-1",
            "mlmin-1kg-1",
            "mlkgmin",
            "ml/kgmin",
            "ml/minkg",
            "mlminkg",
        ],
    ),
    (Unit::Millilitre, &["ml", "cc"]),
    (Unit::Litre, &["l", "litre", "liter", "litres", "liters", "ltr"]),
    (
        Unit::PerMin,
        &[
            "/min",
            "1/min",
            "min-1",
            "bpm",
            "b/min",
            "bts/min",
            "beat/min",
            "beats/min",
            "br/min",
            "breath/min",
            "breaths/min",
            "permin",
            "s/min",
            "x/min",
            "/minute",
            "/mn",
            "cpm",
        ],
    ),
    (
        Unit::MlPerBeat,
        &[
            "ml/beat",
            "ml/b",
            "ml/bt",
            "ml/beats",
            "mlbeat-1",
            "ml/{beat}",
            "ml/schlag",
            "ml/puls",
            "ml/batt",
        ],
    ),
    (Unit::MmHg, &["mmhg", "mm[hg]", "torr"]),
    (Unit::KPa, &["kpa"]),
    (Unit::One, &["1", "ratio"]),
    (Unit::Percent, &["%", "percent", "pct", "percento", "prozent"]),
    (Unit::Watt, &["w", "watt", "watts"]),
    (Unit::Kilowatt, &["kw"]),
    (Unit::Millisecond, &["ms", "msec", "msecs", "millisecond", "milliseconds"]),
    (Unit::Second, &["s", "sec", "secs", "second", "seconds", "sek"]),
    (Unit::Minute, &["min", "mins", "minute", "minutes", "mn"]),
    (Unit::Hour, &["h", "hr", "hrs", "hour", "hours", "std"]),
    (Unit::KmPerH, &["km/h", "kmh", "kph", "kmh-1"]),
    (Unit::MPerS, &["m/s", "ms-1"]),
    (Unit::MPerMin, &["m/min", "mmin-1"]),
    (Unit::MilePerH, &["mph", "mi/h", "miles/h", "[mi_i]/h"]),
    (Unit::RevPerMin, &["rpm", "rev/min", "u/min", "{rev}/min", "revs/min", "tr/min"]),
];

/// Forms of time written with colons.
const CLOCKS: &[&str] = &[
    "m:s", "m:ss", "mm:ss", "min:s", "min:sec", "min:ss", "h:m:s", "h:mm:ss", "hh:mm:ss", "hms",
    "mm:ss:f", "hh:mm", "m:ssf", "mm:ssf",
];

/// A unit text in its plainest form: compatibility characters folded, no marks, no spaces, no
/// points or multiplication signs, lower case.
#[must_use]
pub fn plain(text: &str) -> String {
    text.nfkd()
        .filter(|c| !unicode_normalization::char::is_combining_mark(*c))
        .filter(|c| {
            !c.is_whitespace() && !matches!(c, '.' | '·' | '⋅' | '*' | '×' | '^' | '(' | ')')
        })
        .map(|c| match c {
            '\u{2212}' | '–' => '-',
            '\u{2044}' | '÷' => '/',
            other => other,
        })
        .flat_map(char::to_lowercase)
        .collect()
}

/// Reads a unit text for a column that is `target`.
#[must_use]
pub fn read(text: &str, target: Target) -> UnitText {
    // An underscore stands for nothing, `_per_` for a slash: `vo2_ml_min`, `hr_per_min`.
    let bare = plain(text).replace("per_", "/").replace('_', "");
    if bare.is_empty() || bare.bytes().all(|b| b == b'-') {
        return UnitText::Nothing;
    }
    if CLOCKS.contains(&bare.as_str()) {
        return UnitText::Clock;
    }
    let unit = SPELLINGS.iter().find(|(_, list)| list.contains(&bare.as_str())).map(|(u, _)| *u);
    match (unit, target) {
        // The trade writes oxygen pulse in "ml", cadence in "1/min", and time in "min" with colons.
        (Some(Unit::Millilitre), Target::Quantity(Quantity::O2Pulse)) => {
            UnitText::Unit(Unit::MlPerBeat)
        }
        (Some(Unit::PerMin), Target::Quantity(Quantity::Cadence)) => {
            UnitText::Unit(Unit::RevPerMin)
        }
        (Some(unit), _) => UnitText::Unit(unit),
        (None, _) => UnitText::Unknown,
    }
}

/// Whether the text is a unit of the table at all, or says that there is none.
#[must_use]
pub fn is_unit_like(text: &str) -> bool {
    !matches!(read(text, Target::LeaveOut), UnitText::Unknown | UnitText::Nothing)
}

/// Whether cells in `unit` can be `target`.
#[must_use]
pub fn fits(unit: Unit, target: Target) -> bool {
    unit.dimension() == base_unit(target).dimension()
}

/// The units in which a column of `target` may come when none is stated.
#[must_use]
pub fn possible(target: Target) -> &'static [Unit] {
    match target {
        Target::Time => &[Unit::Second, Unit::Minute, Unit::Millisecond, Unit::Hour],
        Target::BreathDuration => &[Unit::Second, Unit::Millisecond],
        // Blood pressure in kPa is read only where the file says so.
        Target::BpPair => &[Unit::MmHg],
        Target::LeaveOut => &[],
        Target::Quantity(q) => match q {
            Quantity::WorkRate => &[Unit::Watt, Unit::Kilowatt],
            Quantity::Speed => &[Unit::KmPerH, Unit::MPerS, Unit::MPerMin, Unit::MilePerH],
            Quantity::Grade | Quantity::Spo2 => &[Unit::Percent, Unit::One],
            Quantity::Cadence => &[Unit::RevPerMin],
            Quantity::Vo2 | Quantity::Vco2 => &[Unit::MlPerMin, Unit::LPerMin],
            Quantity::Ve => &[Unit::LPerMin, Unit::MlPerMin, Unit::LPerS],
            Quantity::Vt => &[Unit::Litre, Unit::Millilitre],
            Quantity::Fr | Quantity::Hr => &[Unit::PerMin],
            Quantity::RrInterval => &[Unit::Millisecond, Unit::Second],
            Quantity::O2Pulse => &[Unit::MlPerBeat],
            Quantity::Rer | Quantity::EqO2 | Quantity::EqCo2 => &[Unit::One],
            Quantity::Peto2 | Quantity::Petco2 => &[Unit::MmHg, Unit::KPa],
            Quantity::SysBp | Quantity::DiaBp => &[Unit::MmHg],
        },
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn spellings_are_unique_and_plain() {
        let mut seen = std::collections::BTreeSet::new();
        for (_, list) in SPELLINGS {
            for spelling in *list {
                assert_eq!(plain(spelling), *spelling);
                assert!(seen.insert(spelling), "{spelling} twice");
            }
        }
    }

    #[test]
    fn units_as_exports_write_them() {
        let vo2 = Target::Quantity(Quantity::Vo2);
        let pulse = Target::Quantity(Quantity::O2Pulse);
        for (text, target, expected) in [
            ("mL·min⁻¹", vo2, UnitText::Unit(Unit::MlPerMin)),
            ("ml/(kg*min)", vo2, UnitText::Unit(Unit::MlPerKgMin)),
            ("ml.kg-1.min-1", vo2, UnitText::Unit(Unit::MlPerKgMin)),
            ("L/min", vo2, UnitText::Unit(Unit::LPerMin)),
            ("ml", pulse, UnitText::Unit(Unit::MlPerBeat)),
            ("ml", vo2, UnitText::Unit(Unit::Millilitre)),
            ("h:mm:ss", Target::Time, UnitText::Clock),
            ("---", vo2, UnitText::Nothing),
            ("furlong", vo2, UnitText::Unknown),
            ("kpm/min", Target::Quantity(Quantity::WorkRate), UnitText::Unknown),
        ] {
            assert_eq!(read(text, target), expected, "{text}");
        }
    }
}
