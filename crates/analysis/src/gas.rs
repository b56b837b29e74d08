//! Gas laws and gas exchange: conversions between conditions, the Haldane transformation, dead
//! space, alveolar gas, oxygen content.
//!
//! Pressures in mmHg, temperatures in °C, volumes and flows in any unit of volume.

/// Saturated water vapour pressure at body temperature, mmHg (convention).
pub const BODY_WATER_MMHG: f64 = 47.0;
/// 0 °C in K.
const ZERO_C_K: f64 = 273.15;
/// Body temperature, K.
const BODY_K: f64 = 310.15;
/// Standard pressure, mmHg.
const STANDARD_MMHG: f64 = 760.0;
/// 760·310.15/273.15: from V̇CO₂ (STPD) over V̇E (BTPS) to a tension, mmHg.
pub const BTPS_PER_STPD_MMHG: f64 = STANDARD_MMHG * BODY_K / ZERO_C_K;
/// Dry fraction of oxygen in room air.
pub const FIO2_ROOM: f64 = 0.2093;

/// Saturated water vapour pressure at `celsius`, mmHg (Buck 1996).
#[must_use]
pub fn water_vapour_mmhg(celsius: f64) -> f64 {
    let hpa = 6.1121 * libm::exp((18.678 - celsius / 234.5) * celsius / (257.14 + celsius));
    hpa * 0.750_061_7
}

/// Gas of a room: pressure, temperature and relative humidity (0–1).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Room {
    /// Barometric pressure, mmHg.
    pub pressure_mmhg: f64,
    /// Temperature, °C.
    pub celsius: f64,
    /// Relative humidity, 1 = saturated.
    pub humidity: f64,
}

impl Room {
    fn dry_mmhg(self) -> f64 {
        self.pressure_mmhg - self.humidity * water_vapour_mmhg(self.celsius)
    }

    /// Factor from a volume at room conditions to STPD.
    #[must_use]
    pub fn to_stpd(self) -> f64 {
        ZERO_C_K / (ZERO_C_K + self.celsius) * self.dry_mmhg() / STANDARD_MMHG
    }

    /// Factor from a volume at room conditions to BTPS.
    #[must_use]
    pub fn to_btps(self) -> f64 {
        BODY_K / (ZERO_C_K + self.celsius) * self.dry_mmhg()
            / (self.pressure_mmhg - BODY_WATER_MMHG)
    }
}

/// Factor from BTPS to STPD at `pressure_mmhg`.
#[must_use]
pub fn btps_to_stpd(pressure_mmhg: f64) -> f64 {
    ZERO_C_K / BODY_K * (pressure_mmhg - BODY_WATER_MMHG) / STANDARD_MMHG
}

/// V̇O₂ and V̇CO₂ from expired ventilation (STPD) and dry fractions, nitrogen neither taken up nor
/// given off (Haldane). `None` for inspired oxygen above 0.6, where errors explode, and for
/// fractions that are none.
#[must_use]
pub fn haldane(ve_stpd: f64, fio2: f64, fico2: f64, feo2: f64, feco2: f64) -> Option<(f64, f64)> {
    let inert_in = 1.0 - fio2 - fico2;
    if !(0.0..=0.6).contains(&fio2) || inert_in <= 0.0 || feo2 + feco2 >= 1.0 {
        return None;
    }
    let vi = ve_stpd * (1.0 - feo2 - feco2) / inert_in;
    let (vo2, vco2) = (vi * fio2 - ve_stpd * feo2, ve_stpd * feco2 - vi * fico2);
    (vo2.is_finite() && vco2.is_finite()).then_some((vo2, vco2))
}

/// Mixed expired CO₂ tension, mmHg, from V̇CO₂ (STPD) and V̇E (BTPS) in the same unit.
#[must_use]
pub fn mixed_expired_mmhg(vco2: f64, ve: f64) -> f64 {
    BTPS_PER_STPD_MMHG * vco2 / ve
}

/// Dead space over tidal volume (Enghoff) with an arterial tension; apparatus dead space in the
/// unit of `vt`.
#[must_use]
pub fn dead_space_share(paco2: f64, mixed_expired: f64, apparatus: f64, vt: f64) -> f64 {
    (paco2 - mixed_expired) / paco2 - apparatus / vt
}

/// Arterial CO₂ tension estimated from the end-tidal one and VT in L (Jones, Robertson and Kane,
/// J Appl Physiol 1979). Shown, never graded.
#[must_use]
pub fn jones_paco2(petco2: f64, vt_l: f64) -> f64 {
    5.5 + 0.90 * petco2 - 2.1 * vt_l
}

/// Alveolar oxygen tension, mmHg (full alveolar gas equation).
#[must_use]
pub fn alveolar_po2(fio2: f64, pressure_mmhg: f64, paco2: f64, rer: f64) -> f64 {
    fio2 * (pressure_mmhg - BODY_WATER_MMHG) - paco2 * (fio2 + (1.0 - fio2) / rer)
}

/// Oxygen content of blood, mL/dL, from haemoglobin (g/dL), saturation (0–1), tension (mmHg) and
/// the oxygen bound per gram (mL/g).
#[must_use]
pub fn oxygen_content(hb_g_dl: f64, saturation: f64, po2: f64, bound_ml_g: f64) -> f64 {
    bound_ml_g * hb_g_dl * saturation + 0.0031 * po2
}

#[cfg(test)]
mod tests {
    use super::*;

    fn near(x: f64, expected: f64, tolerance: f64) {
        assert!((x - expected).abs() <= tolerance, "{x} against {expected}");
    }

    const ROOM: Room = Room { pressure_mmhg: 747.0, celsius: 22.0, humidity: 1.0 };

    #[test]
    fn water_vapour_against_iapws_95() {
        // CoolProp 8.0.0 (IAPWS-95): 17.546 mmHg at 20 °C, 47.121 mmHg at 37 °C.
        near(water_vapour_mmhg(20.0), 17.546, 0.02);
        near(water_vapour_mmhg(37.0), 47.121, 0.03);
    }

    #[test]
    fn conversions_of_a_worked_example() {
        // PB 747, 22 °C, saturated: PH2O 19.83 by Buck.
        // STPD 273.15/295.15 · 727.17/760 = 0.88548; BTPS 310.15/295.15 · 727.17/700 = 1.09161.
        near(water_vapour_mmhg(22.0), 19.83, 0.005);
        near(ROOM.to_stpd(), 0.88548, 2e-5);
        near(ROOM.to_btps(), 1.09161, 2e-5);
        near(btps_to_stpd(747.0), 0.8112, 5e-5);
        near(ROOM.to_btps() * btps_to_stpd(747.0), ROOM.to_stpd(), 1e-12);
        let dry = Room { humidity: 0.0, ..ROOM };
        near(dry.to_stpd(), 273.15 / 295.15 * 747.0 / 760.0, 1e-12);
    }

    #[test]
    fn haldane_of_a_worked_example() {
        // V̇E 48.67 L/min STPD: V̇I = 48.67·0.7925/0.7903 = 48.806; by hand from there.
        let ve = 60.0 * 0.81117;
        let (vo2, vco2) = haldane(ve, 0.2093, 0.0004, 0.1680, 0.0395).unwrap();
        near(vo2, 2.0384, 1e-3);
        near(vco2, 1.9030, 1e-3);
        near(vco2 / vo2, 0.9335, 5e-4);
        assert_eq!(haldane(ve, 0.61, 0.0, 0.5, 0.04), None);
        assert_eq!(haldane(f64::NAN, 0.2093, 0.0004, 0.168, 0.0395), None);
    }

    #[test]
    fn dead_space_of_a_worked_example() {
        // 863·1.903/60 = 27.37; (38 − 27.37)/38 = 0.280; Jones 5.5 + 37.8 − 4.2 = 39.1.
        near(BTPS_PER_STPD_MMHG, 862.95, 0.01);
        let mixed = mixed_expired_mmhg(1.903, 60.0);
        near(mixed, 27.37, 0.01);
        near(dead_space_share(38.0, mixed, 0.0, 2.0), 0.280, 5e-4);
        near(jones_paco2(42.0, 2.0), 39.1, 1e-12);
        near(dead_space_share(39.1, mixed, 0.0, 2.0), 0.300, 5e-4);
        near(dead_space_share(39.1, mixed, 0.080, 2.0), 0.260, 5e-4);
    }

    #[test]
    fn alveolar_gas_of_a_worked_example() {
        // 0.2093·700 − 38·(0.2093 + 0.7907/0.95) = 146.51 − 39.58 = 106.93.
        near(alveolar_po2(FIO2_ROOM, 747.0, 38.0, 0.95), 106.93, 0.01);
        // 1.34·15·0.97 + 0.0031·95 = 19.497 + 0.2945.
        near(oxygen_content(15.0, 0.97, 95.0, 1.34), 19.7915, 1e-9);
    }
}
