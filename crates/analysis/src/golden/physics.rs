//! Water vapour and gas laws against published values.

use super::{golden, near};
use crate::gas::{self, Room};

/// IAPWS-IF97 (Wagner W et al., J Eng Gas Turbines Power 2000;122:150), table of verification
/// values of the saturation-pressure equation: 0.353658941e-2 MPa at 300 K.
const IF97_300_K_MMHG: f64 = 0.353_658_941e-2 * 1e6 / 133.322_387_415;

#[test]
fn water_vapour_agrees_with_iapws_over_the_temperatures_of_rooms_and_bodies() {
    for row in golden!("water-vapour-py.csv").rows {
        let found = gas::water_vapour_mmhg(row[0]);
        // Buck's fit against IAPWS-95 and IAPWS-IF97: within 0.05 % from 10 to 42 °C.
        assert!((found / row[1] - 1.0).abs() < 5e-4, "{} °C: {found}", row[0]);
        assert!((found / row[2] - 1.0).abs() < 5e-4, "{} °C: {found}", row[0]);
    }
    let found = gas::water_vapour_mmhg(300.0 - 273.15);
    assert!((found / IF97_300_K_MMHG - 1.0).abs() < 5e-4, "{found}");
    // The rounded convention at body temperature lies within 0.3 % of IAPWS-95.
    let body = golden!("water-vapour-py.csv").rows.into_iter().find(|r| r[0] == 37.0).unwrap();
    assert!((gas::BODY_WATER_MMHG / body[1] - 1.0).abs() < 3e-3);
}

#[test]
fn water_vapour_of_buck_s_equation() {
    // 0.750062 · 6.1121 · exp((18.678 − T/234.5) · T/(257.14 + T)), worked to two decimals.
    for (celsius, mmhg) in
        [(18.0, 15.48), (20.0, 17.54), (22.0, 19.83), (25.0, 23.77), (30.0, 31.84), (37.0, 47.10)]
    {
        assert!((gas::water_vapour_mmhg(celsius) - mmhg).abs() < 0.006, "{celsius}");
    }
}

#[test]
fn a_litre_of_room_gas_by_every_way() {
    // 747 mmHg, 22 °C, saturated, V̇E 60 L/min: 53.13 STPD, 65.50 BTPS, and back.
    let room = Room { pressure_mmhg: 747.0, celsius: 22.0, humidity: 1.0 };
    assert!((60.0 * room.to_stpd() - 53.13).abs() < 0.005);
    assert!((60.0 * room.to_btps() - 65.50).abs() < 0.005);
    assert!((60.0 * room.to_btps() * gas::btps_to_stpd(747.0) - 53.13).abs() < 0.005);
    // Half saturated: half of the vapour pressure is left in the dry part.
    let half = Room { humidity: 0.5, ..room };
    let dry = 747.0 - 0.5 * gas::water_vapour_mmhg(22.0);
    near(half.to_stpd(), 273.15 / 295.15 * dry / 760.0, 1e-12);
    near(half.to_btps(), 310.15 / 295.15 * dry / 700.0, 1e-12);
}

#[test]
fn the_chain_from_fractions_to_equivalents() {
    // V̇E 60 BTPS at 747 mmHg; FEO₂ 0.1680, FECO₂ 0.0395: RER 0.9335, V̇E/V̇O₂ 29.43, V̇E/V̇CO₂ 31.53.
    let stpd = 60.0 * gas::btps_to_stpd(747.0);
    let (vo2, vco2) = gas::haldane(stpd, gas::FIO2_ROOM, 0.0004, 0.1680, 0.0395).unwrap();
    assert!((60.0 / vo2 - 29.43).abs() < 0.006 && (60.0 / vco2 - 31.53).abs() < 0.006);
    // Room air in, room air out: nothing taken up, nothing given off.
    let none = gas::haldane(stpd, gas::FIO2_ROOM, 0.0004, gas::FIO2_ROOM, 0.0004).unwrap();
    near(none.0, 0.0, 1e-12);
    near(none.1, 0.0, 1e-12);
    // Mixed expired tension 863·1.903/60 = 27.37 mmHg; ventilation back from dead space 0.280:
    // 863·1.903/(38·(1 − 0.280)) = 60.0.
    let mixed = gas::mixed_expired_mmhg(1.903, 60.0);
    let share = gas::dead_space_share(38.0, mixed, 0.0, 2.0);
    near(gas::BTPS_PER_STPD_MMHG * 1.903 / (38.0 * (1.0 - share)), 60.0, 1e-12);
}

#[test]
fn haldane_refuses_what_it_cannot_answer() {
    let at = |fio2| gas::haldane(50.0, fio2, 0.0004, 0.16, 0.04);
    assert!(at(0.6).is_some() && at(0.600_001).is_none() && at(-0.01).is_none());
    assert!(gas::haldane(50.0, 0.2093, 0.0004, 0.6, 0.4).is_none());
    assert!(gas::haldane(50.0, 0.5, 0.5, 0.16, 0.04).is_none());
}
