//! The shape of a set file as serde reads it.

use analysis::predicted::sets::{Caveat, Input, Predicts, PrintedUnit};
use serde::Deserialize;

use super::check::Checked;
use super::read::{
    caveats, factors, filled, id, input_code, predicts, printed_unit, schema, some, yes,
};

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct SetV1 {
    #[serde(rename = "schema", deserialize_with = "schema")]
    pub _schema: (),
    #[serde(deserialize_with = "id")]
    pub id: String,
    #[serde(deserialize_with = "filled")]
    pub name: String,
    #[serde(deserialize_with = "filled")]
    pub family: String,
    pub year: u32,
    #[serde(deserialize_with = "filled")]
    pub citation: String,
    pub doi: Option<String>,
    #[serde(deserialize_with = "filled")]
    pub source: String,
    #[serde(deserialize_with = "filled")]
    pub population: String,
    #[serde(default)]
    pub remarks: Vec<String>,
    #[serde(default)]
    pub derived_on: Vec<ModeV1>,
    #[serde(default)]
    pub other_mode: BeyondV1,
    #[serde(default = "yes")]
    pub adults_only: bool,
    #[serde(default)]
    pub ranges: Vec<Checked<RangeV1>>,
    #[serde(deserialize_with = "some")]
    pub equations: Vec<Checked<EquationV1>>,
}

#[derive(Clone, Copy, Deserialize, PartialEq)]
#[serde(rename_all = "lowercase")]
pub(super) enum SexV1 {
    Male,
    Female,
}

#[derive(Clone, Copy, Deserialize)]
#[serde(rename_all = "lowercase")]
pub(super) enum ModeV1 {
    Cycle,
    Treadmill,
}

#[derive(Clone, Copy, Default, Deserialize)]
#[serde(rename_all = "lowercase")]
pub(super) enum BeyondV1 {
    #[default]
    Withhold,
    Flag,
}

#[derive(Clone, Copy, Deserialize)]
#[serde(rename_all = "lowercase")]
pub(super) enum ProvenanceV1 {
    Verified,
    Unconfirmed,
}

#[derive(Clone, Copy, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub(super) enum OriginV1 {
    Printed,
    InferredInputs,
    Computed,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct RangeV1 {
    #[serde(deserialize_with = "input_code")]
    pub input: Input,
    pub sex: Option<SexV1>,
    pub low: f64,
    pub high: f64,
    #[serde(default)]
    pub beyond: BeyondV1,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct EquationV1 {
    #[serde(deserialize_with = "predicts")]
    pub predicts: Predicts,
    #[serde(deserialize_with = "printed_unit")]
    pub unit: PrintedUnit,
    pub both: Option<ArmV1>,
    pub male: Option<ArmV1>,
    pub female: Option<ArmV1>,
    pub sex_code: Option<SexCodeV1>,
    pub mode_code: Option<ModeCodeV1>,
    pub treadmill_factor: Option<f64>,
    pub floor: Option<f64>,
    #[serde(default)]
    pub information_only: bool,
    #[serde(default, deserialize_with = "caveats")]
    pub caveats: Vec<Caveat>,
    #[serde(deserialize_with = "some")]
    pub worked: Vec<Checked<WorkedV1>>,
}

#[derive(Clone, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct ArmV1 {
    pub formula: FormulaV1,
    #[serde(default)]
    pub limits: LimitsV1,
    #[serde(default)]
    pub limits_by_convention: bool,
    pub provenance: ProvenanceV1,
}

#[derive(Clone, Deserialize)]
#[serde(rename_all = "snake_case", deny_unknown_fields)]
pub(super) enum FormulaV1 {
    Sum(Vec<TermV1>),
    MassBranches {
        predicted_mass: Vec<TermV1>,
        factor: Vec<TermV1>,
        added_kg: f64,
        over_per_kg: f64,
    },
    Logistic {
        numerator: Vec<TermV1>,
        rate: f64,
        centre_years: f64,
    },
}

#[derive(Clone, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct TermV1 {
    pub times: f64,
    #[serde(default, deserialize_with = "factors")]
    pub of: Vec<(Input, f64)>,
}

#[derive(Clone, Copy, Default, Deserialize)]
#[serde(rename_all = "snake_case", deny_unknown_fields)]
pub(super) enum LimitsV1 {
    #[default]
    NotPublished,
    See(f64),
    Share {
        low: Option<f64>,
        high: Option<f64>,
    },
    Offset {
        low: Option<f64>,
        high: Option<f64>,
    },
    Table {
        low: Option<f64>,
        high: Option<f64>,
    },
}

#[derive(Clone, Copy, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct SexCodeV1 {
    pub male: f64,
    pub female: f64,
}

#[derive(Clone, Copy, Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct ModeCodeV1 {
    pub cycle: f64,
    pub treadmill: f64,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
pub(super) struct WorkedV1 {
    pub age_years: Option<f64>,
    pub sex: Option<SexV1>,
    pub height_cm: Option<f64>,
    pub mass_kg: Option<f64>,
    pub fev1_l: Option<f64>,
    pub mode: Option<ModeV1>,
    #[serde(default)]
    pub overridden: bool,
    pub value: Option<f64>,
    pub within: Option<f64>,
    pub refused: Option<String>,
    pub origin: OriginV1,
}
