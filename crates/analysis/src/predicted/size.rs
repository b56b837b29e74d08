//! Body size: obesity and leanness, and the dead space in a ventilatory equivalent.

use super::sets::{Person, Predicts};
use crate::facts::Sex;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::results::{At, Interval, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

const OBESE: f64 = 30.0;
const LEAN: f64 = 18.5;

fn bmi(person: &Person) -> Option<f64> {
    let height = person.height_cm.filter(|h| *h > 0.0)? / 100.0;
    person.mass_kg.map(|m| m / (height * height))
}

/// Mass predicted from height (Hansen, Sue, Wasserman 1984), kg.
#[must_use]
fn predicted_mass(person: &Person) -> Option<f64> {
    let height = person.height_cm?;
    let mass = match person.sex? {
        Sex::Male => 0.79 * height - 60.7,
        Sex::Female => 0.65 * height - 42.8,
    };
    Some(mass).filter(|m| *m > 20.0)
}

/// What size has to do with a reading: in obesity the absolute value is graded, and the value per
/// kg of actual mass is not graded alone in the very lean.
pub(super) fn doubts(person: &Person, predicts: Predicts) -> Option<Note> {
    let bmi = bmi(person).filter(|_| predicts == Predicts::Vo2Peak)?;
    let note = |code| Note::new(code).with("bmi", Arg::Number(bmi, Unit::One));
    if bmi >= OBESE {
        Some(note("obesity-graded-on-absolute"))
    } else {
        (bmi < LEAN).then(|| note("lean-not-graded-per-kg"))
    }
}

/// In obesity, peak V̇O₂ per kg of the mass predicted from height.
pub(super) fn derive(stage: &Stage<'_>, person: &Person) -> Option<Outcome> {
    bmi(person).filter(|b| *b >= OBESE)?;
    let mass = predicted_mass(person)?;
    let measured = stage.results.primary("vo2-peak", At::Peak)?;
    let value = measured.number()?;
    let per = |i: Option<Interval>| i.map(|i| Interval { low: i.low / mass, high: i.high / mass });
    let (id, method) = ("vo2-peak-per-predicted-mass", "hansen-predicted-mass");
    let mut outcome = Outcome::quantity(id, At::Peak, method, Unit::MlPerKgMin, value / mass)
        .recorded_within(per(measured.recording))
        .doubting(Note::new("predicted-mass").with("mass", Arg::Number(mass, Unit::Kilogram)));
    outcome.repeat = per(measured.repeat);
    Some(outcome)
}

/// The nadir of the set has its valve dead space removed, the measured one has not: 100 mL of
/// apparatus dead space raise V̇E/V̇CO₂ by 0.1·fR/V̇CO₂ (L), here with the values at VT1.
pub(super) fn dead_space_bias(stage: &Stage<'_>) -> Note {
    let at_vt1 = |q: Quantity| stage.results.number(q.code(), At::Vt1);
    match (at_vt1(Quantity::Fr), at_vt1(Quantity::Vco2)) {
        (Some(fr), Some(vco2)) if vco2 > 0.0 => {
            let bias = 0.1 * fr / (vco2 / 1000.0);
            Note::new("nadir-includes-dead-space").with("bias", Arg::Number(bias, Unit::One))
        }
        _ => Note::new("nadir-includes-dead-space-unknown"),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn mass_index_and_predicted_mass_by_hand() {
        // 81 kg at 180 cm: 81/3.24 = 25. Men 0.79·180 − 60.7 = 81.5, women 0.65·160 − 42.8 = 61.2.
        let man = Person {
            sex: Some(Sex::Male),
            height_cm: Some(180.0),
            mass_kg: Some(81.0),
            ..Person::default()
        };
        assert!((bmi(&man).unwrap() - 25.0).abs() < 1e-12);
        assert!((predicted_mass(&man).unwrap() - 81.5).abs() < 1e-12);
        let woman = Person { sex: Some(Sex::Female), height_cm: Some(160.0), ..man };
        assert!((predicted_mass(&woman).unwrap() - 61.2).abs() < 1e-12);
        assert_eq!(bmi(&Person { height_cm: Some(0.0), ..man }), None);
        // 0.79·90 − 60.7 = 10.4 kg is nobody's mass.
        assert_eq!(predicted_mass(&Person { height_cm: Some(90.0), ..man }), None);
    }
}
