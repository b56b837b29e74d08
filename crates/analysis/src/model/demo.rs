//! The plans of the demo tests. All people, tests and the laboratory are invented.

use super::plan::{Bend, Oscillation, Plan, Shunt};

/// One demo case.
#[derive(Clone, Copy, Debug)]
pub struct Case {
    /// Folder and label: a bird's name.
    pub name: &'static str,
    /// What the case is for.
    pub about: &'static str,
    /// Its plan.
    pub plan: fn() -> Plan,
}

/// Every case, in the order in which they are written.
pub const CASES: &[Case] = &[
    Case { name: "kittiwake", about: "normal", plan: kittiwake },
    Case {
        name: "dunlin",
        about: "mid-ramp flattening of the O2 pulse with heart-rate acceleration",
        plan: dunlin,
    },
    Case { name: "curlew", about: "atrial fibrillation", plan: curlew },
    Case { name: "turnstone", about: "low but normal in shape", plan: turnstone },
    Case { name: "eider", about: "blunted rate on a beta-blocker", plan: eider },
    Case { name: "knot", about: "falling O2 pulse with an abrupt shunt signature", plan: knot },
    Case { name: "bittern", about: "COPD with little breathing reserve", plan: bittern },
    Case { name: "sanderling", about: "submaximal effort", plan: sanderling },
    Case { name: "avocet", about: "heart failure with oscillatory breathing", plan: avocet },
    Case { name: "plover", about: "pulmonary vascular limitation", plan: plover },
    Case { name: "wagtail", about: "dysfunctional breathing", plan: wagtail },
    Case { name: "redshank", about: "anaemia", plan: redshank },
];

/// The case of this name.
#[must_use]
pub fn case(name: &str) -> Option<&'static Case> {
    CASES.iter().find(|c| c.name == name)
}

fn kittiwake() -> Plan {
    let mut p = Plan::healthy(20_101);
    p.schedule.w_per_min = 15.0;
    p.schedule.ramp_s = 625.0;
    p.metabolism.vo2_rest = 225.0;
    p.metabolism.vo2_unloaded = 500.0;
    p.metabolism.vt1_vo2 = 1060.0;
    p.ventilation.vt2_vo2 = Some(1590.0);
    p.ventilation.vt_rest = 0.55;
    p.ventilation.vt_max = 2.0;
    p.circulation.hr_peak = 181.0;
    p.noise.breath = 0.75;
    p
}

fn dunlin() -> Plan {
    let mut p = Plan::healthy(20_202);
    p.schedule.ramp_s = 580.0;
    p.metabolism.vo2_rest = 290.0;
    p.metabolism.vo2_unloaded = 600.0;
    p.metabolism.gain = 10.4;
    p.metabolism.vt1_vo2 = 1190.0;
    p.ventilation.vt2_vo2 = Some(1840.0);
    p.ventilation.vt_max = 2.2;
    p.ventilation.slope = 25.5;
    p.circulation.hr_rest = 70.0;
    p.circulation.hr_unloaded = 82.0;
    p.circulation.hr_peak = 146.0;
    p.circulation.curve = 0.0;
    p.circulation.bend = Some(Bend { before_end_s: 240.0, vo2_factor: 0.56, hr_factor: 1.28 });
    p.noise.spo2_gap = Some((690.0, 738.0));
    p
}

fn curlew() -> Plan {
    let mut p = Plan::healthy(20_303);
    p.schedule.ramp_s = 540.0;
    p.schedule.w_per_min = 10.0;
    p.metabolism.vo2_rest = 265.0;
    p.metabolism.vo2_unloaded = 520.0;
    p.metabolism.gain = 9.2;
    p.metabolism.lag_s = 50.0;
    p.metabolism.vt1_vo2 = 880.0;
    p.ventilation.vt2_vo2 = Some(1120.0);
    p.ventilation.slope = 29.0;
    p.ventilation.vt_max = 1.8;
    p.circulation.hr_rest = 84.0;
    p.circulation.hr_unloaded = 104.0;
    p.circulation.hr_peak = 158.0;
    p.circulation.curve = -0.25;
    p.circulation.recovery_s = 75.0;
    p.noise.hr_irregular = 9.0;
    p
}

fn turnstone() -> Plan {
    let mut p = Plan::healthy(20_404);
    p.schedule.w_per_min = 15.0;
    p.schedule.ramp_s = 525.0;
    p.metabolism.vo2_rest = 270.0;
    p.metabolism.vo2_unloaded = 560.0;
    p.metabolism.gain = 9.6;
    p.metabolism.vt1_vo2 = 900.0;
    p.ventilation.vt2_vo2 = Some(1330.0);
    p.ventilation.vt_max = 1.7;
    p.circulation.hr_rest = 82.0;
    p.circulation.hr_unloaded = 106.0;
    p.circulation.hr_peak = 176.0;
    p
}

fn eider() -> Plan {
    let mut p = Plan::healthy(20_505);
    p.schedule.w_per_min = 15.0;
    p.schedule.ramp_s = 600.0;
    p.metabolism.vo2_rest = 280.0;
    p.metabolism.vo2_unloaded = 560.0;
    p.metabolism.gain = 9.8;
    p.metabolism.vt1_vo2 = 1080.0;
    p.ventilation.vt2_vo2 = Some(1600.0);
    p.ventilation.slope = 25.5;
    p.circulation.hr_rest = 54.0;
    p.circulation.hr_unloaded = 66.0;
    p.circulation.hr_peak = 109.0;
    p.circulation.curve = -0.1;
    p
}

fn knot() -> Plan {
    let mut p = Plan::healthy(20_606);
    p.schedule.w_per_min = 10.0;
    p.schedule.ramp_s = 560.0;
    p.metabolism.vo2_rest = 230.0;
    p.metabolism.vo2_unloaded = 470.0;
    p.metabolism.gain = 8.6;
    p.metabolism.vt1_vo2 = 690.0;
    p.ventilation.vt2_vo2 = None;
    p.ventilation.intercept = 3.5;
    p.ventilation.dead_space = 0.2;
    p.ventilation.dead_space_share = 0.14;
    p.ventilation.slope = 36.0;
    p.ventilation.vt_max = 1.5;
    p.ventilation.pet_gap_rise = -1.5;
    p.circulation.hr_rest = 80.0;
    p.circulation.hr_unloaded = 98.0;
    p.circulation.hr_peak = 158.0;
    p.circulation.curve = 0.0;
    p.circulation.spo2_rest = 95.8;
    p.circulation.spo2_fall = 2.0;
    p.circulation.bend = Some(Bend { before_end_s: 170.0, vo2_factor: 0.45, hr_factor: 1.2 });
    p.circulation.shunt = Some(Shunt { before_end_s: 160.0, fraction: 0.13 });
    p
}

fn bittern() -> Plan {
    let mut p = Plan::healthy(20_707);
    p.schedule.w_per_min = 10.0;
    p.schedule.ramp_s = 500.0;
    p.metabolism.vo2_rest = 270.0;
    p.metabolism.vo2_unloaded = 560.0;
    p.metabolism.gain = 9.4;
    p.metabolism.vt1_vo2 = 980.0;
    p.metabolism.v_slope_rise = 0.22;
    p.ventilation.vt2_vo2 = None;
    p.ventilation.intercept = 4.8;
    p.ventilation.slope = 30.0;
    p.ventilation.ceiling = 45.0;
    p.ventilation.vt_rest = 0.68;
    p.ventilation.vt_max = 1.35;
    p.ventilation.dead_space = 0.22;
    p.ventilation.dead_space_share = 0.22;
    p.ventilation.eelv = 4.6;
    p.ventilation.pet_gap_rest = -3.0;
    p.ventilation.pet_gap_rise = -2.0;
    p.circulation.hr_rest = 82.0;
    p.circulation.hr_unloaded = 98.0;
    p.circulation.hr_peak = 134.0;
    p.circulation.spo2_rest = 95.0;
    p.circulation.spo2_fall = 4.5;
    p
}

fn sanderling() -> Plan {
    let mut p = Plan::healthy(20_808);
    p.schedule.w_per_min = 15.0;
    p.schedule.ramp_s = 400.0;
    p.metabolism.vo2_rest = 265.0;
    p.metabolism.vo2_unloaded = 540.0;
    p.metabolism.vt1_vo2 = 1120.0;
    p.ventilation.vt2_vo2 = None;
    p.circulation.hr_rest = 74.0;
    p.circulation.hr_unloaded = 92.0;
    p.circulation.hr_peak = 128.0;
    p
}

fn avocet() -> Plan {
    let mut p = Plan::healthy(20_909);
    p.schedule.w_per_min = 10.0;
    p.schedule.ramp_s = 540.0;
    p.metabolism.vo2_rest = 260.0;
    p.metabolism.vo2_unloaded = 480.0;
    p.metabolism.gain = 8.2;
    p.metabolism.lag_s = 60.0;
    p.metabolism.vt1_vo2 = 760.0;
    p.ventilation.vt2_vo2 = Some(1000.0);
    p.ventilation.intercept = 3.5;
    p.ventilation.dead_space = 0.21;
    p.ventilation.dead_space_share = 0.12;
    p.ventilation.slope = 35.0;
    p.ventilation.vt2_factor = 1.25;
    p.ventilation.vt_max = 1.7;
    p.ventilation.pet_gap_rise = 0.5;
    p.ventilation.oscillation = Some(Oscillation { amplitude: 0.24, period_s: 70.0, until: 0.72 });
    p.circulation.hr_rest = 72.0;
    p.circulation.hr_unloaded = 86.0;
    p.circulation.hr_peak = 124.0;
    p.circulation.recovery_s = 95.0;
    p
}

fn plover() -> Plan {
    let mut p = Plan::healthy(21_010);
    p.schedule.w_per_min = 10.0;
    p.schedule.ramp_s = 510.0;
    p.metabolism.vo2_rest = 235.0;
    p.metabolism.vo2_unloaded = 450.0;
    p.metabolism.gain = 7.6;
    p.metabolism.lag_s = 55.0;
    p.metabolism.vt1_vo2 = 640.0;
    p.ventilation.vt2_vo2 = None;
    p.ventilation.intercept = 4.0;
    p.ventilation.slope = 42.0;
    p.ventilation.vt_max = 1.6;
    p.ventilation.dead_space = 0.19;
    p.ventilation.dead_space_share = 0.25;
    p.ventilation.pet_gap_rest = -3.0;
    p.ventilation.pet_gap_rise = -4.0;
    p.circulation.hr_rest = 84.0;
    p.circulation.hr_unloaded = 104.0;
    p.circulation.hr_peak = 156.0;
    p.circulation.spo2_rest = 95.5;
    p.circulation.spo2_fall = 7.0;
    p.circulation.bend = Some(Bend { before_end_s: 260.0, vo2_factor: 0.6, hr_factor: 1.1 });
    p
}

fn wagtail() -> Plan {
    let mut p = Plan::healthy(21_111);
    p.schedule.w_per_min = 20.0;
    p.schedule.ramp_s = 500.0;
    p.metabolism.vo2_rest = 240.0;
    p.metabolism.vo2_unloaded = 510.0;
    p.metabolism.vt1_vo2 = 1150.0;
    p.ventilation.vt2_vo2 = Some(1620.0);
    p.ventilation.anticipation = 0.22;
    p.ventilation.slope = 26.0;
    p.ventilation.vt_max = 1.8;
    p.circulation.hr_rest = 86.0;
    p.circulation.hr_unloaded = 104.0;
    p.circulation.hr_peak = 176.0;
    p.noise.irregular = 0.17;
    p.noise.sighs = 0.035;
    p
}

fn redshank() -> Plan {
    let mut p = Plan::healthy(21_212);
    p.schedule.w_per_min = 15.0;
    p.schedule.ramp_s = 500.0;
    p.metabolism.vo2_rest = 225.0;
    p.metabolism.vo2_unloaded = 470.0;
    p.metabolism.gain = 9.0;
    p.metabolism.vt1_vo2 = 760.0;
    p.ventilation.vt2_vo2 = Some(1130.0);
    p.ventilation.vt_max = 1.7;
    p.circulation.hr_rest = 88.0;
    p.circulation.hr_unloaded = 114.0;
    p.circulation.hr_peak = 180.0;
    p
}
