//! From the file's shape to the engine's.

use analysis::facts::{Mode, Sex};
use analysis::predicted::sets::{
    Arm, Beyond, Code, Equation, Expected, Formula, Limits, Person, PredictedSet, Provenance,
    Range, Term, Worked, WorkedOrigin,
};

use super::schema::{
    ArmV1, BeyondV1, EquationV1, FormulaV1, LimitsV1, ModeV1, OriginV1, ProvenanceV1, RangeV1,
    SetV1, SexV1, TermV1, WorkedV1,
};

impl From<SetV1> for PredictedSet {
    fn from(v: SetV1) -> Self {
        Self {
            id: v.id,
            name: v.name,
            family: v.family,
            year: v.year,
            citation: v.citation,
            doi: v.doi,
            source: v.source,
            population: v.population,
            remarks: v.remarks,
            derived_on: v.derived_on.into_iter().map(Mode::from).collect(),
            other_mode: v.other_mode.into(),
            adults_only: v.adults_only,
            ranges: v.ranges.into_iter().map(|r| r.0.into()).collect(),
            equations: v.equations.into_iter().map(|e| e.0.into()).collect(),
            own: None,
        }
    }
}

impl From<SexV1> for Sex {
    fn from(v: SexV1) -> Self {
        match v {
            SexV1::Male => Sex::Male,
            SexV1::Female => Sex::Female,
        }
    }
}

impl From<ModeV1> for Mode {
    fn from(v: ModeV1) -> Self {
        match v {
            ModeV1::Cycle => Mode::Cycle,
            ModeV1::Treadmill => Mode::Treadmill,
        }
    }
}

impl From<BeyondV1> for Beyond {
    fn from(v: BeyondV1) -> Self {
        match v {
            BeyondV1::Withhold => Beyond::Withhold,
            BeyondV1::Flag => Beyond::Flag,
        }
    }
}

impl From<RangeV1> for Range {
    fn from(v: RangeV1) -> Self {
        Self {
            input: v.input,
            sex: v.sex.map(Sex::from),
            low: v.low,
            high: v.high,
            beyond: v.beyond.into(),
        }
    }
}

impl From<EquationV1> for Equation {
    fn from(v: EquationV1) -> Self {
        let arm = |own: Option<ArmV1>| own.or_else(|| v.both.clone()).map(Arm::from);
        Self {
            predicts: v.predicts,
            unit: v.unit,
            male: arm(v.male.clone()),
            female: arm(v.female.clone()),
            sex_code: v.sex_code.map(|c| Code { first: c.male, second: c.female }),
            mode_code: v.mode_code.map(|c| Code { first: c.cycle, second: c.treadmill }),
            treadmill_factor: v.treadmill_factor,
            floor: v.floor,
            information_only: v.information_only,
            caveats: v.caveats,
            worked: v.worked.into_iter().map(|w| w.0.into()).collect(),
        }
    }
}

impl From<ArmV1> for Arm {
    fn from(v: ArmV1) -> Self {
        Self {
            formula: v.formula.into(),
            limits: v.limits.into(),
            limits_by_convention: v.limits_by_convention,
            provenance: match v.provenance {
                ProvenanceV1::Verified => Provenance::Verified,
                ProvenanceV1::Unconfirmed => Provenance::Unconfirmed,
            },
        }
    }
}

fn terms(v: Vec<TermV1>) -> Vec<Term> {
    v.into_iter().map(|t| Term { times: t.times, of: t.of }).collect()
}

impl From<FormulaV1> for Formula {
    fn from(v: FormulaV1) -> Self {
        match v {
            FormulaV1::Sum(list) => Formula::Sum(terms(list)),
            FormulaV1::MassBranches { predicted_mass, factor, added_kg, over_per_kg } => {
                Formula::MassBranches {
                    predicted_mass: terms(predicted_mass),
                    factor: terms(factor),
                    added_kg,
                    over_per_kg,
                }
            }
            FormulaV1::Logistic { numerator, rate, centre_years } => {
                Formula::Logistic { numerator: terms(numerator), rate, centre_years }
            }
        }
    }
}

impl From<LimitsV1> for Limits {
    fn from(v: LimitsV1) -> Self {
        match v {
            LimitsV1::NotPublished => Limits::NotPublished,
            LimitsV1::See(see) => Limits::See(see),
            LimitsV1::Share { low, high } => Limits::Share { low, high },
            LimitsV1::Offset { low, high } => Limits::Offset { low, high },
            LimitsV1::Table { low, high } => Limits::Table { low, high },
        }
    }
}

impl From<WorkedV1> for Worked {
    fn from(v: WorkedV1) -> Self {
        let expected = match (v.refused, v.value) {
            (None, Some(value)) => Expected::Value { value, within: v.within.unwrap_or(0.0) },
            (refused, _) => Expected::Refused(refused.unwrap_or_default()),
        };
        Self {
            person: Person {
                age_years: v.age_years,
                sex: v.sex.map(Sex::from),
                height_cm: v.height_cm,
                mass_kg: v.mass_kg,
                fev1_l: v.fev1_l,
                mode: v.mode.map(Mode::from),
            },
            overridden: v.overridden,
            expected,
            origin: match v.origin {
                OriginV1::Printed => WorkedOrigin::Printed,
                OriginV1::InferredInputs => WorkedOrigin::InferredInputs,
                OriginV1::Computed => WorkedOrigin::Computed,
            },
        }
    }
}
