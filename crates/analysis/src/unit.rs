//! The closed table of units with their UCUM strings. An unknown unit is an error, never a factor 1.

/// What a unit measures; only units of one dimension convert into each other.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// Gas or volume flow.
    Flow,
    /// Flow per body mass.
    FlowPerMass,
    /// Volume.
    Volume,
    /// Frequency of events.
    Frequency,
    /// Volume per heart beat.
    VolumePerBeat,
    /// Pressure.
    Pressure,
    /// Dimensionless ratio.
    Ratio,
    /// Power.
    Power,
    /// Power change per time.
    PowerRate,
    /// Flow per power.
    FlowPerPower,
    /// Relative change per time.
    RelativeRate,
    /// Duration.
    Time,
    /// Velocity.
    Velocity,
    /// Mass of haemoglobin per volume of blood.
    Concentration,
    /// Volume of gas per volume of blood.
    Content,
    /// Mass.
    Mass,
    /// Length.
    Length,
    /// Frequency per flow.
    FrequencyPerFlow,
    /// Frequency per power.
    FrequencyPerPower,
    /// A score without unit.
    Score,
    /// Area.
    Area,
    /// Pressure times flow per mass.
    CirculatoryPower,
    /// Amount of substance per volume.
    Molarity,
    /// Pressure times frequency.
    PressureRate,
    /// Pressure per power.
    PressurePerPower,
}

macro_rules! units {
    ($($(#[$doc:meta])* $name:ident $ucum:literal $shown:literal $dim:ident $factor:expr;)*) => {
        /// A unit of the closed table.
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
        pub enum Unit { $($(#[$doc])* $name),* }

        impl Unit {
            /// All units.
            pub const ALL: &[Unit] = &[$(Unit::$name),*];

            /// The UCUM string.
            #[must_use]
            pub fn ucum(self) -> &'static str { match self { $(Unit::$name => $ucum),* } }

            /// The unit as shown beside a value.
            #[must_use]
            pub fn shown(self) -> &'static str { match self { $(Unit::$name => $shown),* } }

            /// The dimension.
            #[must_use]
            pub fn dimension(self) -> Dimension { match self { $(Unit::$name => Dimension::$dim),* } }

            /// Factor to the dimension's base unit.
            fn factor(self) -> f64 { match self { $(Unit::$name => $factor),* } }
        }
    };
}

units! {
    /// mL/min.
    MlPerMin "mL/min" "mL/min" Flow 1.0;
    /// L/min.
    LPerMin "L/min" "L/min" Flow 1000.0;
    /// mL/s.
    MlPerS "mL/s" "mL/s" Flow 60.0;
    /// L/s.
    LPerS "L/s" "L/s" Flow 60_000.0;
    /// mL/kg/min.
    MlPerKgMin "mL/kg/min" "mL/kg/min" FlowPerMass 1.0;
    /// mL.
    Millilitre "mL" "mL" Volume 1.0;
    /// L.
    Litre "L" "L" Volume 1000.0;
    /// Events per minute.
    PerMin "/min" "/min" Frequency 1.0;
    /// mL per heart beat.
    MlPerBeat "mL/{beat}" "mL/beat" VolumePerBeat 1.0;
    /// mmHg.
    MmHg "mm[Hg]" "mmHg" Pressure 1.0;
    /// kPa (1 kPa = 7.500616827 mmHg, from 101.325 kPa = 760 mmHg).
    KPa "kPa" "kPa" Pressure 760.0 / 101.325;
    /// Ratio.
    One "1" "" Ratio 1.0;
    /// Per cent.
    Percent "%" "%" Ratio 0.01;
    /// W.
    Watt "W" "W" Power 1.0;
    /// kW.
    Kilowatt "kW" "kW" Power 1000.0;
    /// W/min.
    WattPerMin "W/min" "W/min" PowerRate 1.0;
    /// mL/min per W.
    MlPerMinPerWatt "mL/min/W" "mL/min/W" FlowPerPower 1.0;
    /// Per cent per minute.
    PercentPerMin "%/min" "%/min" RelativeRate 1.0;
    /// ms.
    Millisecond "ms" "ms" Time 0.001;
    /// s.
    Second "s" "s" Time 1.0;
    /// min.
    Minute "min" "min" Time 60.0;
    /// h.
    Hour "h" "h" Time 3600.0;
    /// km/h.
    KmPerH "km/h" "km/h" Velocity 1.0;
    /// m/s.
    MPerS "m/s" "m/s" Velocity 3.6;
    /// m/min.
    MPerMin "m/min" "m/min" Velocity 0.06;
    /// Miles per hour (1 mile = 1.609344 km).
    MilePerH "[mi_i]/h" "mph" Velocity 1.609344;
    /// g/L.
    GramPerL "g/L" "g/L" Concentration 1.0;
    /// g/dL.
    GramPerDl "g/dL" "g/dL" Concentration 10.0;
    /// mL of gas per dL of blood.
    MlPerDl "mL/dL" "mL/dL" Content 1.0;
    /// kg.
    Kilogram "kg" "kg" Mass 1.0;
    /// cm.
    Centimetre "cm" "cm" Length 1.0;
    /// Revolutions per minute.
    RevPerMin "{rev}/min" "rpm" Frequency 1.0;
    /// Beats per litre of oxygen uptake.
    PerLitre "/L" "/L" FrequencyPerFlow 1.0;
    /// Beats per minute per watt.
    PerMinPerWatt "/min/W" "/min per W" FrequencyPerPower 1.0;
    /// Score.
    Score "{score}" "" Score 1.0;
    /// m².
    SquareMetre "m2" "m²" Area 1.0;
    /// mmHg·mL/kg/min.
    MmHgMlPerKgMin "mm[Hg].mL/kg/min" "mmHg·mL/kg/min" CirculatoryPower 1.0;
    /// mL of oxygen per litre of ventilation.
    MlPerL "mL/L" "mL/L" Ratio 0.001;
    /// mmHg per W.
    MmHgPerWatt "mm[Hg]/W" "mmHg/W" PressurePerPower 1.0;
    /// mmol/L.
    MmolPerL "mmol/L" "mmol/L" Molarity 1.0;
    /// mmHg per minute (heart rate times pressure).
    MmHgPerMin "mm[Hg]/min" "mmHg/min" PressureRate 1.0;
}

impl Unit {
    /// The unit with this UCUM string, if it is in the table.
    #[must_use]
    pub fn from_ucum(ucum: &str) -> Option<Self> {
        Unit::ALL.iter().copied().find(|unit| unit.ucum() == ucum)
    }

    /// `value` in `self` expressed in `to`; `None` where the dimensions differ.
    #[must_use]
    pub fn convert(self, value: f64, to: Unit) -> Option<f64> {
        if self == to {
            return Some(value);
        }
        (self.dimension() == to.dimension()).then(|| value * self.factor() / to.factor())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn conversions_by_arithmetic() {
        assert_eq!(Unit::LPerMin.convert(1.5, Unit::MlPerMin), Some(1500.0));
        // 1 atm = 101.325 kPa = 760 mmHg by definition of the two units.
        let kpa = Unit::KPa.convert(101.325, Unit::MmHg).unwrap();
        assert!((kpa - 760.0).abs() < 1e-9);
        assert_eq!(Unit::GramPerDl.convert(15.0, Unit::GramPerL), Some(150.0));
        assert_eq!(Unit::MmHg.convert(1.0, Unit::Litre), None);
    }

    #[test]
    fn ucum_strings_are_unique() {
        for unit in Unit::ALL {
            assert_eq!(Unit::from_ucum(unit.ucum()), Some(*unit));
        }
    }
}
