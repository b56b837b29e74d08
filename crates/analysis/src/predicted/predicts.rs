//! What an equation can predict: the outcome it stands beside, its unit and its bad side.

use crate::results::At;
use crate::unit::Unit;

/// On which side of the prediction a value is abnormal.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Direction {
    /// Low values.
    Low,
    /// High values.
    High,
    /// Either.
    Both,
}

/// A quantity that has prediction equations.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Predicts {
    /// Peak V̇O₂.
    Vo2Peak,
    /// Peak heart rate.
    HrPeak,
    /// Peak heart rate on a beta-blocker.
    HrPeakBetaBlocked,
    /// O₂ pulse at peak.
    O2Pulse,
    /// Peak work rate.
    WorkRate,
    /// V̇O₂ at VT1.
    Vt1Vo2,
    /// Lower limit of V̇O₂ at VT1, as a share of predicted peak V̇O₂.
    Vt1LowerLimit,
    /// Lowest V̇E/V̇CO₂.
    VeVco2Nadir,
    /// V̇E–V̇CO₂ slope up to VT2.
    VeVco2Slope,
    /// Oxygen uptake efficiency slope.
    Oues,
    /// Oxygen uptake efficiency plateau.
    Ouep,
    /// Maximal voluntary ventilation.
    Mvv,
    /// Systolic pressure at peak.
    SysBp,
    /// Rise of systolic pressure with work rate.
    SysBpSlope,
    /// Chronotropic index.
    ChronotropicIndex,
    /// ΔHR/ΔV̇O₂.
    HrVo2Slope,
    /// ΔV̇O₂/ΔWR.
    Vo2WrSlope,
    /// Body surface area.
    Bsa,
}

/// One row of the table.
pub(crate) struct Row {
    predicts: Predicts,
    /// Code in set files.
    code: &'static str,
    /// Id of the prediction.
    pub predicted_id: &'static str,
    /// Id of the measured outcome.
    pub measured_id: Option<&'static str>,
    at: At,
    unit: Unit,
    direction: Direction,
}

macro_rules! table {
    ($($p:ident $code:literal $measured:expr, $at:ident $unit:ident $dir:ident;)*) => {
        const TABLE: &[Row] = &[$(Row {
            predicts: Predicts::$p,
            code: $code,
            predicted_id: concat!("predicted-", $code),
            measured_id: $measured,
            at: At::$at,
            unit: Unit::$unit,
            direction: Direction::$dir,
        }),*];
    };
}

table! {
    Vo2Peak           "vo2-peak"             Some("vo2-peak"),             Peak MlPerMin        Low;
    HrPeak            "hr-peak"              Some("hr-peak"),              Peak PerMin          Low;
    HrPeakBetaBlocked "hr-peak-beta-blocked" None,                         Peak PerMin          Low;
    O2Pulse           "o2-pulse"             Some("o2-pulse-at-peak"),     Peak MlPerBeat       Low;
    WorkRate          "work-rate"            Some("work-rate-peak"),       Peak Watt            Low;
    Vt1Vo2            "vt1-vo2"              Some("vt1-vo2"),              Vt1  MlPerMin        Low;
    Vt1LowerLimit          "vt1-lower-limit"      None,                         Vt1  Percent         Low;
    VeVco2Nadir       "ve-vco2-nadir"        Some("ve-vco2-nadir"),        Ramp One             High;
    VeVco2Slope       "ve-vco2-slope-to-vt2" Some("ve-vco2-slope-to-vt2"), Ramp One             High;
    Oues              "oues"                 Some("oues"),                 Ramp MlPerMin        Low;
    Ouep              "ouep"                 None,                         Ramp MlPerL          Low;
    Mvv               "mvv"                  None,                         Test LPerMin         Low;
    SysBp             "sys-bp"               Some("sys-bp"),               Peak MmHg            Both;
    SysBpSlope        "sys-bp-slope"         None,                         Ramp MmHgPerWatt     Both;
    ChronotropicIndex "chronotropic-index"   Some("chronotropic-index"),   Peak One             Low;
    HrVo2Slope        "dhr-dvo2"             Some("dhr-dvo2"),             Ramp PerLitre        High;
    Vo2WrSlope        "dvo2-dwr"             Some("dvo2-dwr"),             Ramp MlPerMinPerWatt Low;
    Bsa               "bsa"                  None,                         Test SquareMetre     Both;
}

impl Predicts {
    /// All, in reading order.
    pub fn all() -> impl Iterator<Item = Predicts> {
        TABLE.iter().map(|row| row.predicts)
    }

    pub(crate) fn row(self) -> &'static Row {
        &TABLE[self as usize]
    }

    /// Code in set files, e.g. `vo2-peak`.
    #[must_use]
    pub fn code(self) -> &'static str {
        self.row().code
    }

    /// The one with this code.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        TABLE.iter().find(|row| row.code == code).map(|row| row.predicts)
    }

    /// Id of the prediction, e.g. `predicted-vo2-peak`.
    #[must_use]
    pub fn predicted_id(self) -> &'static str {
        self.row().predicted_id
    }

    /// Id of the measured outcome it stands beside, where there is one.
    #[must_use]
    pub fn measured_id(self) -> Option<&'static str> {
        self.row().measured_id
    }

    /// Where in the test it belongs.
    #[must_use]
    pub fn at(self) -> At {
        self.row().at
    }

    /// Unit of every prediction of it.
    #[must_use]
    pub fn unit(self) -> Unit {
        self.row().unit
    }

    /// The side on which a value is abnormal.
    #[must_use]
    pub fn direction(self) -> Direction {
        self.row().direction
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_row_stands_at_its_own_place() {
        for (i, row) in TABLE.iter().enumerate() {
            assert_eq!(row.predicts as usize, i);
            assert_eq!(Predicts::from_code(row.code), Some(row.predicts));
        }
    }
}
