//! The closed table of quantities: symbol, canonical unit, decimals and plausible range.

use crate::unit::Unit;

/// A quantity that a breath table may hold, or that is formed from its columns.
///
/// Every stored value is in the canonical unit of [`Quantity::unit`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Quantity {
    /// External work rate.
    WorkRate,
    /// Treadmill belt speed.
    Speed,
    /// Treadmill grade.
    Grade,
    /// Pedalling cadence.
    Cadence,
    /// Oxygen uptake, STPD.
    Vo2,
    /// Carbon dioxide output, STPD.
    Vco2,
    /// Minute ventilation, BTPS.
    Ve,
    /// Tidal volume, BTPS.
    Vt,
    /// Breathing frequency.
    Fr,
    /// Heart rate.
    Hr,
    /// Interval between heart beats.
    RrInterval,
    /// Oxygen pulse, V̇O₂ ÷ HR.
    O2Pulse,
    /// Respiratory exchange ratio, V̇CO₂ ÷ V̇O₂.
    Rer,
    /// Ventilatory equivalent for oxygen, V̇E ÷ V̇O₂.
    EqO2,
    /// Ventilatory equivalent for carbon dioxide, V̇E ÷ V̇CO₂.
    EqCo2,
    /// End-tidal oxygen tension.
    Peto2,
    /// End-tidal carbon dioxide tension.
    Petco2,
    /// Oxygen saturation by pulse oximetry.
    Spo2,
    /// Systolic blood pressure.
    SysBp,
    /// Diastolic blood pressure.
    DiaBp,
}

/// One row of the quantity table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct QuantityRow {
    /// The quantity described.
    pub quantity: Quantity,
    /// Stable kebab-case code used in files.
    pub code: &'static str,
    /// Symbol as the trade writes it, with its dots.
    pub symbol: &'static str,
    /// The unit in which the engine holds it.
    pub unit: Unit,
    /// Decimals when shown in the canonical unit.
    pub decimals: u8,
    /// Plausible lowest and highest value of a single breath, canonical unit (common practice).
    pub plausible: (f64, f64),
}

macro_rules! table {
    ($($q:ident $code:literal $sym:literal $unit:ident $dec:literal $lo:literal $hi:literal;)*) => {
        /// The whole table, in reading order.
        pub const TABLE: &[QuantityRow] = &[$(QuantityRow {
            quantity: Quantity::$q, code: $code, symbol: $sym, unit: Unit::$unit,
            decimals: $dec, plausible: ($lo, $hi),
        }),*];
    };
}

table! {
    WorkRate   "work-rate"   "work rate"  Watt            0 0.0    1000.0;
    Speed      "speed"       "speed"      KmPerH          1 0.0    30.0;
    Grade      "grade"       "grade"      Percent         1 -10.0  40.0;
    Cadence    "cadence"     "cadence"    RevPerMin       0 0.0    200.0;
    Vo2        "vo2"         "V̇O₂"        MlPerMin        0 20.0   8000.0;
    Vco2       "vco2"        "V̇CO₂"       MlPerMin        0 20.0   9000.0;
    Ve         "ve"          "V̇E"         LPerMin         1 1.0    280.0;
    Vt         "vt"          "VT"         Litre           2 0.1    6.0;
    Fr         "fr"          "fR"         PerMin          0 3.0    100.0;
    Hr         "hr"          "HR"         PerMin          0 25.0   250.0;
    RrInterval "rr-interval" "R–R"        Millisecond     0 240.0  2500.0;
    O2Pulse    "o2-pulse"    "O₂ pulse"   MlPerBeat       1 0.3    45.0;
    Rer        "rer"         "RER"        One             2 0.4    2.5;
    EqO2       "eq-o2"       "V̇E/V̇O₂"     One             1 8.0    120.0;
    EqCo2      "eq-co2"      "V̇E/V̇CO₂"    One             1 8.0    120.0;
    Peto2      "peto2"       "PETO₂"      MmHg            0 50.0   160.0;
    Petco2     "petco2"      "PETCO₂"     MmHg            0 8.0    80.0;
    Spo2       "spo2"        "SpO₂"       Percent         0 50.0   100.0;
    SysBp      "sys-bp"      "SBP"        MmHg            0 50.0   300.0;
    DiaBp      "dia-bp"      "DBP"        MmHg            0 20.0   180.0;
}

impl Quantity {
    /// This quantity's row of [`TABLE`].
    #[must_use]
    pub fn row(self) -> &'static QuantityRow {
        &TABLE[self as usize]
    }

    /// The unit in which the engine holds this quantity.
    #[must_use]
    pub fn unit(self) -> Unit {
        self.row().unit
    }

    /// Stable kebab-case code.
    #[must_use]
    pub fn code(self) -> &'static str {
        self.row().code
    }

    /// The quantity with this code, if it is in the table.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        TABLE.iter().find(|row| row.code == code).map(|row| row.quantity)
    }

    /// Whether a single value lies in the plausible range (canonical unit).
    #[must_use]
    pub fn is_plausible(self, value: f64) -> bool {
        let (low, high) = self.row().plausible;
        value >= low && value <= high
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_row_stands_at_its_own_place_and_codes_are_unique() {
        for (i, row) in TABLE.iter().enumerate() {
            assert_eq!(row.quantity as usize, i, "{}", row.code);
            assert_eq!(Quantity::from_code(row.code), Some(row.quantity));
            assert!(row.plausible.0 < row.plausible.1);
        }
    }
}
