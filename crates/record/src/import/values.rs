//! Columns from values: without a stated unit a column is taken only if exactly one (quantity,
//! unit) survives its plausible range, or an identity holds.

use analysis::quantity::Quantity;
use analysis::unit::Unit;

use super::units;
use crate::provenance::{Reading, Target, base_unit};

/// Share of values that must be plausible in the reading taken.
const TAKEN: f64 = 0.95;
/// Share of plausible values from which a reading counts as surviving.
const SURVIVES: f64 = 0.5;
/// Share of rows in which R–R ÷ 1000 must equal the time step.
const IDENTITY: f64 = 0.99;

/// What the values say about a column.
#[derive(Clone, Debug, PartialEq)]
pub enum Verdict {
    /// Exactly one reading, with the figures that decided.
    Taken(Reading, String),
    /// These readings (perhaps none) are possible; the reader decides.
    Open(Vec<Reading>),
}

/// Plausible range in the unit the engine holds (common practice).
#[must_use]
pub fn plausible(target: Target) -> (f64, f64) {
    match target {
        Target::Quantity(q) => q.row().plausible,
        Target::BreathDuration => (0.3, 30.0),
        Target::BpPair => Quantity::SysBp.row().plausible,
        Target::Time | Target::LeaveOut => (f64::NEG_INFINITY, f64::INFINITY),
    }
}

/// Quantities of which a zero cannot be a measured value.
#[must_use]
pub fn zero_is_missing(target: Target) -> bool {
    matches!(
        target,
        Target::BpPair
            | Target::Quantity(
                Quantity::Hr
                    | Quantity::Spo2
                    | Quantity::SysBp
                    | Quantity::DiaBp
                    | Quantity::RrInterval
            )
    )
}

/// Share of `values` (in `unit`) that are plausible for `target`.
#[must_use]
pub fn share(values: &[f64], target: Target, unit: Unit) -> f64 {
    let (low, high) = plausible(target);
    let zeros = zero_is_missing(target);
    let (mut inside, mut all) = (0_usize, 0_usize);
    for value in values.iter().filter(|v| !(zeros && **v == 0.0)) {
        all += 1;
        let v = unit.convert(*value, base_unit(target));
        inside += usize::from(v.is_some_and(|v| v >= low && v <= high));
    }
    if all == 0 { 0.0 } else { inside as f64 / all as f64 }
}

/// Every reading of `targets` in a possible unit, with its share, that survives.
#[must_use]
pub fn survivors(values: &[f64], targets: &[Target]) -> Vec<(Reading, f64)> {
    targets
        .iter()
        .flat_map(|t| units::possible(*t).iter().map(|u| Reading { target: *t, unit: *u }))
        .map(|r| (r, share(values, r.target, r.unit)))
        .filter(|(_, s)| *s >= SURVIVES)
        .collect()
}

/// Decides a column of `targets` from its values.
#[must_use]
pub fn decide(values: &[f64], targets: &[Target]) -> Verdict {
    if let [only] = targets
        && !values.is_empty()
        && values.iter().all(|v| *v == 0.0)
        && !zero_is_missing(*only)
    {
        // Zero is zero in every unit of the table.
        let reading = Reading { target: *only, unit: base_unit(*only) };
        return Verdict::Taken(reading, format!("all {} values are 0", values.len()));
    }
    let found = survivors(values, targets);
    match found.as_slice() {
        [(reading, s)] if *s >= TAKEN => {
            let (low, high) = plausible(reading.target);
            let base = base_unit(reading.target);
            let shown = |v: f64| base.convert(v, reading.unit).unwrap_or(v);
            let figures = format!(
                "{:.0} % of {} values lie in {} to {} {}, and no other reading fits",
                (s * 100.0).floor(),
                values.len(),
                shown(low),
                shown(high),
                reading.unit.ucum()
            );
            Verdict::Taken(*reading, figures)
        }
        [] => Verdict::Open(
            targets
                .iter()
                .flat_map(|t| units::possible(*t).iter().map(|u| Reading { target: *t, unit: *u }))
                .collect(),
        ),
        several => Verdict::Open(several.iter().map(|(r, _)| *r).collect()),
    }
}

/// Whether R–R ÷ 1000 equals the time step in at least 99 % of rows: then the column is the
/// interval that ends at its row, in ms. Returns the figures.
#[must_use]
pub fn rr_identity(times: &[f64], rr: &[Option<f64>]) -> Option<String> {
    let pairs: Vec<(f64, f64)> = times
        .windows(2)
        .zip(rr.iter().skip(1))
        .filter_map(|(t, r)| r.map(|r| (t[1] - t[0], r)))
        .collect();
    let held = pairs.iter().filter(|(step, r)| (r / 1000.0 - step).abs() < 0.0015).count();
    let enough = pairs.len() >= 20 && held as f64 >= IDENTITY * pairs.len() as f64;
    enough.then(|| format!("RR/1000 equals the step of time in {held} of {} rows", pairs.len()))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(values: &[f64], quantities: &[Quantity]) -> Result<String, usize> {
        let targets: Vec<Target> = quantities.iter().map(|q| Target::Quantity(*q)).collect();
        match decide(values, &targets) {
            Verdict::Taken(reading, _) => Ok(reading.to_string()),
            Verdict::Open(readings) => Err(readings.len()),
        }
    }

    #[test]
    fn one_survivor_is_taken_and_two_are_asked() {
        let rr = [Quantity::Fr, Quantity::RrInterval, Quantity::SysBp];
        assert_eq!(read(&[0.25, 1.9, 3.1], &[Quantity::Vo2]), Ok("vo2 L/min".into()));
        assert_eq!(read(&[250.0, 1900.0], &[Quantity::Vo2]), Ok("vo2 mL/min".into()));
        assert_eq!(read(&[0.0, 50.0, 305.0], &[Quantity::WorkRate]), Ok("work-rate W".into()));
        assert_eq!(read(&[720.0, 400.0, 900.0], &rr), Ok("rr-interval ms".into()));
        assert_eq!(read(&[14.0, 22.0, 41.0], &rr), Ok("fr /min".into()));
        assert_eq!(read(&[0.0, 0.0], &[Quantity::WorkRate]), Ok("work-rate W".into()));
        // 60 to 95 may be breaths per minute or a pressure.
        assert_eq!(read(&[60.0, 80.0, 95.0], &rr), Err(2));
        // A belt at 3 to 9 may be in km/h or in mph (both below 30 km/h) or m/s (below 8.3 m/s).
        assert!(read(&[3.0, 5.0, 9.0], &[Quantity::Speed]).is_err());
        // 0 to 0.3: watts of almost nothing, or kilowatts.
        assert_eq!(read(&[0.0, 0.1, 0.3], &[Quantity::WorkRate]), Err(2));
    }

    #[test]
    fn the_identity_is_arithmetic_on_the_rows() {
        let rr: Vec<f64> = (0..200).map(|i| 700.0 + f64::from(i % 7) * 10.0).collect();
        let mut t = 0.0;
        let times: Vec<f64> = rr
            .iter()
            .map(|r| {
                t += r / 1000.0;
                t
            })
            .collect();
        let some: Vec<Option<f64>> = rr.iter().copied().map(Some).collect();
        assert!(rr_identity(&times, &some).is_some());
        let breaths: Vec<Option<f64>> = rr.iter().map(|r| Some(r / 50.0)).collect();
        assert!(rr_identity(&times, &breaths).is_none());
    }
}
