//! One equation for one person: the value with its limits and doubts, or the reason why not.

use super::sets::{
    Beyond, CM_PER_IN, Code, Direction, Equation, Formula, Input, KG_PER_LB, Limits, Person,
    PredictedSet, Predicts, Term, Z95,
};
use super::validity::{self, InputFit};
use crate::facts::{Mode, Sex};
use crate::note::{Arg, Note};

/// Below this share of its prediction a lower limit says little (own rule).
pub(super) const UNRELIABLE: f64 = 0.6;

/// A prediction, in the unit of [`Predicts::unit`].
#[derive(Clone, Debug, PartialEq)]
pub struct Prediction {
    /// Predicted value.
    pub value: f64,
    /// Lower limit of normal.
    pub low: Option<f64>,
    /// Upper limit of normal.
    pub high: Option<f64>,
    /// Standard error of the estimate, where one is published.
    pub see: Option<f64>,
    /// How each input lies against the ranges.
    pub fits: Vec<InputFit>,
    /// Doubts.
    pub doubts: Vec<Note>,
}

impl Prediction {
    /// Standard score of `measured`, where a SEE is published.
    #[must_use]
    pub fn z(&self, measured: f64) -> Option<f64> {
        self.see.filter(|s| *s > 0.0).map(|see| (measured - self.value) / see)
    }

    /// Whether each input lies in its range (a flag of size counts as outside).
    #[must_use]
    pub fn in_range(&self) -> bool {
        self.fits.iter().all(|f| f.fit == validity::Fit::In)
    }
}

/// Evaluates the equation of `set` for `predicts`. `overridden`: the reader let inputs outside the
/// set's ranges pass.
///
/// # Errors
/// The reason why nothing is predicted: a fact that is missing, another sex, under 18, outside the
/// range, another ergometer, or a result that cannot be right.
pub fn evaluate(
    set: &PredictedSet,
    predicts: Predicts,
    person: &Person,
    overridden: bool,
) -> Result<Prediction, Note> {
    let named = |note: Note| note.with("set", Arg::Name(set.name.clone().into()));
    let equation = set.equation(predicts).ok_or_else(|| named(Note::new("set-lacks-quantity")))?;
    let arm_sex = sex_of(equation, person)?;
    let arm = equation.arm(arm_sex).ok_or_else(|| named(Note::new("set-other-sex")))?;
    if set.adults_only {
        let age = person.age_years.ok_or_else(|| Note::missing_fact("age"))?;
        if age < 18.0 {
            return Err(named(Note::new("under-18-no-adult-set")));
        }
    }
    let mut doubts = Vec::new();
    check_mode(set, equation, person.mode, overridden, &mut doubts)?;
    let printed = apply(&arm.formula, equation, person)?;
    let fits = validity::fits(set, person, arm_sex)?;
    validity::judge(set, &fits, overridden, &mut doubts)?;

    let treadmill = person.mode == Some(Mode::Treadmill);
    let factor = equation.treadmill_factor.filter(|_| treadmill).unwrap_or(1.0);
    let to = |x: f64| equation.canonical(x * factor, person.mass_kg);
    let value = to(printed).ok_or_else(|| Note::missing_fact("mass"))?;
    if !value.is_finite() || value <= 0.0 || value < equation.floor.unwrap_or(0.0) {
        return Err(named(Note::new("prediction-implausible")));
    }
    let (low, high, see) = limits(arm.limits, printed);
    doubts.extend(equation.caveats.iter().map(|c| named(Note::new(c.code()))));
    if low.is_none() && high.is_none() && predicts.measured_id().is_some() {
        doubts.push(named(Note::new("no-limit-published")));
    } else if arm.limits_by_convention {
        doubts.push(named(Note::new("limit-by-convention")));
    }
    let per_kg = person.mass_kg.filter(|_| predicts == Predicts::Vo2Peak).map(|m| value / m);
    let low_limit = low.and_then(to);
    let graded_low = predicts.direction() == Direction::Low;
    let wide = graded_low && low_limit.is_some_and(|low| low < UNRELIABLE * value);
    if wide || per_kg.is_some_and(|v| v < 12.0) {
        doubts.push(named(Note::new("limit-unreliable")));
    }
    Ok(Prediction {
        value,
        low: low_limit,
        high: high.and_then(to),
        see: see.and_then(to),
        fits,
        doubts,
    })
}

/// The sex whose arm is used; an equation that does not distinguish the sexes needs none.
fn sex_of(equation: &Equation, person: &Person) -> Result<Sex, Note> {
    match person.sex {
        Some(sex) => Ok(sex),
        None if equation.male.is_some() && equation.male == equation.female => {
            if equation.male.as_ref().is_some_and(|arm| uses(&arm.formula, Input::Sex)) {
                return Err(Note::missing_fact("sex"));
            }
            Ok(Sex::Female)
        }
        None => Err(Note::missing_fact("sex")),
    }
}

fn uses(formula: &Formula, input: Input) -> bool {
    let in_terms = |terms: &[Term]| terms.iter().any(|t| t.of.iter().any(|(i, _)| *i == input));
    match formula {
        Formula::Sum(terms) => in_terms(terms),
        Formula::MassBranches { predicted_mass, factor, .. } => {
            in_terms(predicted_mass) || in_terms(factor)
        }
        Formula::Logistic { numerator, .. } => in_terms(numerator),
    }
}

fn check_mode(
    set: &PredictedSet,
    equation: &Equation,
    mode: Option<Mode>,
    overridden: bool,
    doubts: &mut Vec<Note>,
) -> Result<(), Note> {
    if set.derived_on.is_empty() {
        return Ok(());
    }
    let note = |code| Note::new(code).with("set", Arg::Name(set.name.clone().into()));
    let Some(mode) = mode else {
        return Err(Note::missing_fact("mode"));
    };
    let converted = mode == Mode::Treadmill && equation.treadmill_factor.is_some();
    if converted {
        doubts.push(note("treadmill-factor").with(
            "factor",
            Arg::Number(equation.treadmill_factor.unwrap_or(1.0), crate::unit::Unit::One),
        ));
    }
    if converted || set.derived_on.contains(&mode) {
        return Ok(());
    }
    match set.other_mode {
        Beyond::Flag => doubts.push(note("derived-on-other-ergometer")),
        Beyond::Withhold if overridden => doubts.push(note("other-ergometer-overridden")),
        Beyond::Withhold => return Err(note("other-ergometer")),
    }
    Ok(())
}

/// Lower limit, upper limit, SEE, all in the printed unit.
fn limits(limits: Limits, printed: f64) -> (Option<f64>, Option<f64>, Option<f64>) {
    match limits {
        Limits::NotPublished => (None, None, None),
        Limits::See(see) => (Some(printed - Z95 * see), Some(printed + Z95 * see), Some(see)),
        Limits::Share { low, high } => (low.map(|s| s * printed), high.map(|s| s * printed), None),
        Limits::Offset { low, high } => (low.map(|d| printed + d), high.map(|d| printed + d), None),
        Limits::Table { low, high } => (low, high, None),
    }
}

/// The formula's result in the printed unit.
fn apply(formula: &Formula, equation: &Equation, person: &Person) -> Result<f64, Note> {
    match formula {
        Formula::Sum(terms) => sum(terms, equation, person),
        Formula::MassBranches { predicted_mass, factor, added_kg, over_per_kg } => {
            let mass = input(Input::MassKg, equation, person)?;
            let ideal = sum(predicted_mass, equation, person)?;
            let k = sum(factor, equation, person)?;
            Ok(if mass > ideal {
                (ideal + added_kg) * k + over_per_kg * (mass - ideal)
            } else if mass < ideal {
                (0.5 * (ideal + mass) + added_kg) * k
            } else {
                (mass + added_kg) * k
            })
        }
        Formula::Logistic { numerator, rate, centre_years } => {
            let age = input(Input::AgeYears, equation, person)?;
            let top = sum(numerator, equation, person)?;
            Ok(top / (1.0 + libm::exp(rate * (age - centre_years))))
        }
    }
}

fn sum(terms: &[Term], equation: &Equation, person: &Person) -> Result<f64, Note> {
    terms.iter().try_fold(0.0, |total, term| {
        let product = term.of.iter().try_fold(term.times, |product, (which, power)| {
            let value = input(*which, equation, person)?;
            Ok(product * if *power == 1.0 { value } else { libm::pow(value, *power) })
        })?;
        Ok(total + product)
    })
}

/// One input in the unit in which the formula takes it.
pub(super) fn input(which: Input, equation: &Equation, person: &Person) -> Result<f64, Note> {
    let sex_code = |code: Code| match person.sex {
        Some(Sex::Male) => Ok(code.first),
        Some(Sex::Female) => Ok(code.second),
        None => Err(Note::missing_fact("sex")),
    };
    let mode_code = |code: Code| match person.mode {
        Some(Mode::Cycle) => Ok(code.first),
        Some(Mode::Treadmill) => Ok(code.second),
        None => Err(Note::missing_fact("mode")),
    };
    let uncoded = || Note::new("set-lacks-code");
    match which {
        Input::Sex => sex_code(equation.sex_code.ok_or_else(uncoded)?),
        Input::Mode => mode_code(equation.mode_code.ok_or_else(uncoded)?),
        _ => body_input(which, person),
    }
}

/// An input that depends on the person alone.
pub(super) fn body_input(which: Input, person: &Person) -> Result<f64, Note> {
    let fact = |value: Option<f64>, word| {
        value.filter(|x| x.is_finite() && *x > 0.0).ok_or_else(|| Note::missing_fact(word))
    };
    let age = || fact(person.age_years, "age");
    let height = || fact(person.height_cm, "height");
    let mass = || fact(person.mass_kg, "mass");
    let bmi = || Ok(mass()? / (height()? / 100.0 * height()? / 100.0));
    match which {
        Input::AgeYears => age(),
        Input::HeightCm => height(),
        Input::HeightM => Ok(height()? / 100.0),
        Input::HeightIn => Ok(height()? / CM_PER_IN),
        Input::MassKg => mass(),
        Input::MassLb => Ok(mass()? / KG_PER_LB),
        Input::Bmi => bmi(),
        Input::BmiOver25 => Ok(if bmi()? > 25.0 { 1.0 } else { 0.0 }),
        Input::BsaDuBois => Ok(0.007_184 * libm::pow(height()?, 0.725) * libm::pow(mass()?, 0.425)),
        Input::AgeClass => {
            let age = age()?;
            Ok([35.0, 45.0, 55.0, 65.0].iter().filter(|limit| age >= **limit).count() as f64 + 1.0)
        }
        Input::Fev1L => fact(person.fev1_l, "fev1"),
        Input::Sex | Input::Mode => Err(Note::new("set-lacks-code")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn limits_of_every_form_by_hand() {
        // 2000 ∓ 1.645·200 = 1671 and 2329.
        let (low, high, see) = limits(Limits::See(200.0), 2000.0);
        assert!((low.unwrap() - 1671.0).abs() < 1e-9 && (high.unwrap() - 2329.0).abs() < 1e-9);
        assert_eq!(see, Some(200.0));
        let share = limits(Limits::Share { low: Some(0.75), high: Some(1.25) }, 2000.0);
        assert_eq!(share, (Some(1500.0), Some(2500.0), None));
        let offset = limits(Limits::Offset { low: Some(-300.0), high: Some(400.0) }, 2000.0);
        assert_eq!(offset, (Some(1700.0), Some(2400.0), None));
        let table = limits(Limits::Table { low: Some(1400.0), high: None }, 2000.0);
        assert_eq!(table, (Some(1400.0), None, None));
        assert_eq!(limits(Limits::NotPublished, 2000.0), (None, None, None));
    }

    #[test]
    fn a_standard_score_needs_a_published_error() {
        let of = |see| Prediction {
            value: 2000.0,
            low: None,
            high: None,
            see,
            fits: Vec::new(),
            doubts: Vec::new(),
        };
        assert_eq!(of(Some(200.0)).z(1500.0), Some(-2.5));
        assert_eq!((of(Some(0.0)).z(1500.0), of(None).z(1500.0)), (None, None));
    }
}
