//! Checks of a set file at the place where they fail, so that the message names the line.

use analysis::predicted::sets::{Input, PrintedUnit};
use analysis::unit::Unit;
use serde::{Deserialize, Deserializer, de::Error as _};

use super::schema::{EquationV1, FormulaV1, RangeV1, TermV1, WorkedV1};

/// A value that is checked where it stands, so that the error has its line.
pub(super) trait Check {
    fn check(&self) -> Result<(), String>;
}

pub(super) struct Checked<T>(pub T);

impl<'de, T: Deserialize<'de> + Check> Deserialize<'de> for Checked<T> {
    fn deserialize<D: Deserializer<'de>>(d: D) -> Result<Self, D::Error> {
        let value = T::deserialize(d)?;
        value.check().map_err(D::Error::custom)?;
        Ok(Self(value))
    }
}

impl Check for RangeV1 {
    fn check(&self) -> Result<(), String> {
        match self.input {
            Input::AgeYears | Input::HeightCm | Input::MassKg | Input::Bmi => {}
            _ => return Err("a range is of age_years, height_cm, mass_kg or bmi".into()),
        }
        if self.low > self.high {
            return Err(format!("the range runs from {} down to {}", self.low, self.high));
        }
        Ok(())
    }
}

impl Check for EquationV1 {
    fn check(&self) -> Result<(), String> {
        if self.both.is_some() == (self.male.is_some() || self.female.is_some()) {
            return Err("an equation has either `both`, or `male` and/or `female`".into());
        }
        let uses = |input: Input| {
            let arms = [&self.both, &self.male, &self.female];
            arms.iter().any(|a| a.as_ref().is_some_and(|a| a.formula.uses(input)))
        };
        if uses(Input::Sex) != self.sex_code.is_some() {
            return Err("`sex_code` and the input `sex` belong together".into());
        }
        if uses(Input::Mode) != self.mode_code.is_some() {
            return Err("`mode_code` and the input `mode` belong together".into());
        }
        let predicts = self.predicts.unit().dimension();
        let fits = match self.unit {
            PrintedUnit::KpmPerMin => Unit::Watt.dimension() == predicts,
            PrintedUnit::Table(Unit::MlPerKgMin) => Unit::MlPerMin.dimension() == predicts,
            PrintedUnit::Table(unit) => unit.dimension() == predicts,
        };
        if !fits {
            return Err(format!("the unit does not measure `{}`", self.predicts.code()));
        }
        Ok(())
    }
}

impl Check for WorkedV1 {
    fn check(&self) -> Result<(), String> {
        match (self.value, self.within, &self.refused) {
            (Some(_), Some(within), None) if within >= 0.0 => Ok(()),
            (None, None, Some(_)) => Ok(()),
            _ => Err("a worked example has `value` and `within`, or `refused`".into()),
        }
    }
}

impl FormulaV1 {
    fn uses(&self, input: Input) -> bool {
        let terms: Vec<&TermV1> = match self {
            FormulaV1::Sum(terms) | FormulaV1::Logistic { numerator: terms, .. } => {
                terms.iter().collect()
            }
            FormulaV1::MassBranches { predicted_mass, factor, .. } => {
                predicted_mass.iter().chain(factor).collect()
            }
        };
        terms.iter().any(|t| t.of.iter().any(|(i, _)| *i == input))
    }
}
