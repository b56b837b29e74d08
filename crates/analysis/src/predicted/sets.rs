//! A published set of prediction equations, as data.
//!
//! A set is coefficients, ranges and a citation, never code: a laboratory can audit it and add its
//! own. Parsed and checked outside this crate; evaluated by [`super::evaluate`].

use std::sync::Arc;

use crate::facts::{Mode, Sex};
use crate::unit::Unit;

pub use super::predicts::{Direction, Predicts};

/// Watts per kilopond-metre per minute: 9.80665 N · 1 m / 60 s.
pub const WATT_PER_KPM_MIN: f64 = 9.80665 / 60.0;
/// Kilograms per pound.
pub const KG_PER_LB: f64 = 0.453_592_37;
/// Centimetres per inch.
pub const CM_PER_IN: f64 = 2.54;
/// 95th percentile of the standard normal distribution: limits are the 5th and 95th percentile.
pub const Z95: f64 = 1.645;

/// Where the coefficients come from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Provenance {
    /// Seen in the named source: selectable.
    Verified,
    /// From memory, or only consistent with printed results of inferred inputs: locked.
    Unconfirmed,
}

/// What a formula may take, in the unit in which its paper takes it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Input {
    /// Age, years.
    AgeYears,
    /// Height, cm.
    HeightCm,
    /// Height, m.
    HeightM,
    /// Height, inches.
    HeightIn,
    /// Body mass, kg.
    MassKg,
    /// Body mass, lb.
    MassLb,
    /// Body mass index, kg/m².
    Bmi,
    /// 1 where the body mass index is above 25 kg/m², else 0.
    BmiOver25,
    /// Body surface area by Du Bois, m².
    BsaDuBois,
    /// Age class of the SHIP study: 25–34 → 1, 35–44 → 2, 45–54 → 3, 55–64 → 4, from 65 → 5.
    AgeClass,
    /// The equation's own code of sex.
    Sex,
    /// The equation's own code of the ergometer.
    Mode,
    /// FEV₁, L.
    Fev1L,
}

impl Input {
    /// Its code in set files.
    #[must_use]
    pub fn code(self) -> &'static str {
        Self::ALL.iter().find(|(input, _)| *input == self).map_or("", |(_, code)| code)
    }

    /// All inputs with their codes in set files.
    pub const ALL: [(Input, &'static str); 13] = [
        (Input::AgeYears, "age_years"),
        (Input::HeightCm, "height_cm"),
        (Input::HeightM, "height_m"),
        (Input::HeightIn, "height_in"),
        (Input::MassKg, "mass_kg"),
        (Input::MassLb, "mass_lb"),
        (Input::Bmi, "bmi"),
        (Input::BmiOver25, "bmi_over_25"),
        (Input::BsaDuBois, "bsa_du_bois"),
        (Input::AgeClass, "age_class"),
        (Input::Sex, "sex"),
        (Input::Mode, "mode"),
        (Input::Fev1L, "fev1_l"),
    ];

    /// The input with this code.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        Input::ALL.iter().find(|(_, c)| *c == code).map(|(input, _)| *input)
    }
}

/// coefficient · ∏ input^power.
#[derive(Clone, Debug, PartialEq)]
pub struct Term {
    /// Coefficient.
    pub times: f64,
    /// Factors with their powers; none = a constant.
    pub of: Vec<(Input, f64)>,
}

/// The kinds of formula that the published sets need.
#[derive(Clone, Debug, PartialEq)]
pub enum Formula {
    /// A sum of terms.
    Sum(Vec<Term>),
    /// Hansen, Sue, Wasserman 1984: mass against the mass predicted from height chooses the branch.
    /// Below: ((P + W)/2 + c)·k. At: (W + c)·k. Above: (P + c)·k + over·(W − P).
    MassBranches {
        /// Predicted mass P, kg.
        predicted_mass: Vec<Term>,
        /// The factor k.
        factor: Vec<Term>,
        /// The mass c added before multiplying, kg.
        added_kg: f64,
        /// mL/min per kg above the predicted mass.
        over_per_kg: f64,
    },
    /// numerator / (1 + exp(rate·(age − centre))).
    Logistic {
        /// Numerator.
        numerator: Vec<Term>,
        /// Rate, 1/year.
        rate: f64,
        /// Centre, years.
        centre_years: f64,
    },
}

/// Lower and upper limit of normal.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Limits {
    /// None published with the equation: none is borrowed.
    NotPublished,
    /// Standard error of the estimate, printed unit: prediction ∓ 1.645·SEE, and z.
    See(f64),
    /// Shares of the prediction (a published convention or reference interval).
    Share {
        /// Lower limit.
        low: Option<f64>,
        /// Upper limit.
        high: Option<f64>,
    },
    /// Distance from the prediction, printed unit.
    Offset {
        /// Lower limit, ≤ 0.
        low: Option<f64>,
        /// Upper limit, ≥ 0.
        high: Option<f64>,
    },
    /// Percentiles as tabulated, printed unit.
    Table {
        /// 5th percentile.
        low: Option<f64>,
        /// 95th percentile.
        high: Option<f64>,
    },
}

/// The formula and limits of one sex.
#[derive(Clone, Debug, PartialEq)]
pub struct Arm {
    /// Formula.
    pub formula: Formula,
    /// Limits.
    pub limits: Limits,
    /// The limits are a convention of practice, not published with the equation.
    pub limits_by_convention: bool,
    /// Where these coefficients come from.
    pub provenance: Provenance,
}

/// What a reader must know beside every value of an equation.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Caveat {
    /// Valve dead space was removed from its ventilation.
    DeadSpaceRemoved,
    /// Scatter so wide that no value is abnormal on it alone.
    WideScatter,
    /// Hardly distinguishes cycle and treadmill: likely to predict too much for a cycle.
    CycleHardlyLower,
    /// No term for body size.
    NoSizeTerm,
    /// Derived on fitter people than most patients.
    FitCohort,
    /// Derived on men.
    MenStudied,
    /// Does not agree with the same paper's V̇O₂ and heart rate.
    Inconsistent,
    /// A rule of thumb.
    RuleOfThumb,
}

impl Caveat {
    /// All caveats with their codes, which are also message codes.
    pub const ALL: [(Caveat, &'static str); 8] = [
        (Caveat::DeadSpaceRemoved, "dead-space-removed-in-set"),
        (Caveat::WideScatter, "wide-scatter"),
        (Caveat::CycleHardlyLower, "cycle-hardly-lower-in-set"),
        (Caveat::NoSizeTerm, "no-size-term"),
        (Caveat::FitCohort, "fit-cohort"),
        (Caveat::MenStudied, "men-studied"),
        (Caveat::Inconsistent, "inconsistent-in-source"),
        (Caveat::RuleOfThumb, "rule-of-thumb"),
    ];

    /// Its message code.
    #[must_use]
    pub fn code(self) -> &'static str {
        Caveat::ALL[self as usize].1
    }

    /// The caveat with this code.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        Caveat::ALL.iter().find(|(_, c)| *c == code).map(|(caveat, _)| *caveat)
    }
}

/// The unit in which a paper prints its result.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PrintedUnit {
    /// A unit of the closed table.
    Table(Unit),
    /// Kilopond-metres per minute.
    KpmPerMin,
}

impl PrintedUnit {
    /// As printed.
    #[must_use]
    pub fn shown(self) -> &'static str {
        match self {
            PrintedUnit::Table(unit) => unit.shown(),
            PrintedUnit::KpmPerMin => "kpm/min",
        }
    }
}

/// An equation's own numbers for two cases: 0/1, 1/2, whatever its paper uses.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Code {
    /// Male, or cycle.
    pub first: f64,
    /// Female, or treadmill.
    pub second: f64,
}

/// How far a worked value is independent of the equation as coded.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum WorkedOrigin {
    /// Inputs and result printed in a publication.
    Printed,
    /// Result printed, inputs inferred from the same equations: a consistency check only.
    InferredInputs,
    /// Computed apart from this program, in double precision.
    Computed,
}

/// A person for whom a worked value holds.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Person {
    /// Age, years.
    pub age_years: Option<f64>,
    /// Sex for the equations.
    pub sex: Option<Sex>,
    /// Height, cm.
    pub height_cm: Option<f64>,
    /// Body mass, kg.
    pub mass_kg: Option<f64>,
    /// FEV₁, L.
    pub fev1_l: Option<f64>,
    /// Ergometer.
    pub mode: Option<Mode>,
}

/// What a worked example must give.
#[derive(Clone, Debug, PartialEq)]
pub enum Expected {
    /// This value, printed unit, within a tolerance.
    Value {
        /// Value.
        value: f64,
        /// Largest difference.
        within: f64,
    },
    /// A refusal with this reason code.
    Refused(String),
}

/// A worked example of the set's own.
#[derive(Clone, Debug, PartialEq)]
pub struct Worked {
    /// For whom.
    pub person: Person,
    /// Whether the reader's override is taken as given.
    pub overridden: bool,
    /// Result.
    pub expected: Expected,
    /// Independence.
    pub origin: WorkedOrigin,
}

/// One equation of a set.
#[derive(Clone, Debug, PartialEq)]
pub struct Equation {
    /// What it predicts.
    pub predicts: Predicts,
    /// Unit in which its paper prints it.
    pub unit: PrintedUnit,
    /// Men; `None` = the equation does not hold for men.
    pub male: Option<Arm>,
    /// Women; `None` = the equation does not hold for women.
    pub female: Option<Arm>,
    /// Its code of sex, where [`Input::Sex`] occurs.
    pub sex_code: Option<Code>,
    /// Its code of the ergometer, where [`Input::Mode`] occurs.
    pub mode_code: Option<Code>,
    /// Factor on the whole expression for a treadmill.
    pub treadmill_factor: Option<f64>,
    /// A result below this is refused, in the unit of [`Predicts::unit`]; without one only
    /// results ≤ 0 are.
    pub floor: Option<f64>,
    /// Shown beside the others, never graded.
    pub information_only: bool,
    /// What a reader must know beside every value of it.
    pub caveats: Vec<Caveat>,
    /// Worked examples.
    pub worked: Vec<Worked>,
}

/// What happens outside a range.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Beyond {
    /// Withheld unless the reader overrides.
    Withhold,
    /// Shown with a doubt.
    Flag,
}

/// A range of validity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    /// Age, height in cm, mass in kg, or body mass index.
    pub input: Input,
    /// Only for this sex.
    pub sex: Option<Sex>,
    /// Lowest value.
    pub low: f64,
    /// Highest value.
    pub high: f64,
    /// What happens outside.
    pub beyond: Beyond,
}

/// A published set.
#[derive(Clone, Debug, PartialEq)]
pub struct PredictedSet {
    /// Stable id, e.g. `hansen-1984`.
    pub id: String,
    /// Name as shown.
    pub name: String,
    /// Sets of one family belong together in one report.
    pub family: String,
    /// Year of publication.
    pub year: u32,
    /// Citation.
    pub citation: String,
    /// DOI.
    pub doi: Option<String>,
    /// Where the coefficients were seen.
    pub source: String,
    /// Who was studied.
    pub population: String,
    /// Remarks for whoever chooses.
    pub remarks: Vec<String>,
    /// Ergometers on which it was derived; empty = it does not depend on one.
    pub derived_on: Vec<Mode>,
    /// What happens on another ergometer.
    pub other_mode: Beyond,
    /// Not for anyone under 18.
    pub adults_only: bool,
    /// Ranges of validity.
    pub ranges: Vec<Range>,
    /// The equations.
    pub equations: Vec<Equation>,
    /// The file word for word, where a laboratory added it; `None` for a set of the program.
    pub own: Option<Arc<str>>,
}

impl PredictedSet {
    /// The equation for `predicts`.
    #[must_use]
    pub fn equation(&self, predicts: Predicts) -> Option<&Equation> {
        self.equations.iter().find(|e| e.predicts == predicts)
    }
}

impl Equation {
    /// The formula and limits of `sex`.
    #[must_use]
    pub fn arm(&self, sex: Sex) -> Option<&Arm> {
        match sex {
            Sex::Male => self.male.as_ref(),
            Sex::Female => self.female.as_ref(),
        }
    }

    /// `value` in the printed unit expressed in the unit of [`Predicts::unit`].
    #[must_use]
    pub fn canonical(&self, value: f64, mass_kg: Option<f64>) -> Option<f64> {
        let to = self.predicts.unit();
        match self.unit {
            PrintedUnit::KpmPerMin => Unit::Watt.convert(value * WATT_PER_KPM_MIN, to),
            PrintedUnit::Table(Unit::MlPerKgMin) => {
                Unit::MlPerMin.convert(value * mass_kg.filter(|m| *m > 0.0)?, to)
            }
            PrintedUnit::Table(unit) => unit.convert(value, to),
        }
    }
}
