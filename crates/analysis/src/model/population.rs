//! Random people and protocols for the calibration of thresholds, slopes and peak values.
//!
//! Every range is an assumption; none is fitted to patients.

use super::plan::{Circulation, Metabolism, Noise, Oscillation, Plan, Schedule, Ventilation};
use super::rng::Rng;

/// Protocol of a simulated test.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Protocol {
    /// Ramp of about this many minutes (± 0.6).
    Ramp(f64),
    /// Steps of one minute over about this many minutes.
    Steps(f64),
}

/// What the simulated person has.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Class {
    /// Both thresholds.
    Both,
    /// No VT2.
    NoVt2,
    /// Stopped before VT1.
    Submaximal,
    /// A straight V-slope and no VT2.
    Straight,
    /// Ventilation that cannot follow the extra CO₂.
    Copd,
    /// Hyperventilation before and early in exercise.
    Anticipatory,
    /// Oscillatory ventilation.
    Oscillating,
    /// Both thresholds, exported as running means of three breaths.
    PreSmoothed,
}

impl Class {
    /// All classes.
    pub const ALL: [Class; 8] = [
        Class::Both,
        Class::NoVt2,
        Class::Submaximal,
        Class::Straight,
        Class::Copd,
        Class::Anticipatory,
        Class::Oscillating,
        Class::PreSmoothed,
    ];

    /// Name in tables.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Class::Both => "both thresholds",
            Class::NoVt2 => "no VT2",
            Class::Submaximal => "stopped before VT1",
            Class::Straight => "straight V-slope",
            Class::Copd => "COPD-like",
            Class::Anticipatory => "anticipatory hyperventilation",
            Class::Oscillating => "oscillating",
            Class::PreSmoothed => "both, pre-smoothed export",
        }
    }

    /// Whether a VT1 is there to be found.
    #[must_use]
    pub fn has_vt1(self) -> bool {
        !matches!(self, Class::Submaximal | Class::Straight)
    }

    /// Whether a VT2 is there to be found.
    #[must_use]
    pub fn has_vt2(self) -> bool {
        matches!(self, Class::Both | Class::Anticipatory | Class::Oscillating | Class::PreSmoothed)
    }
}

/// The plan of `seed`. A seed draws one person, whatever the class and protocol.
#[must_use]
pub fn draw(seed: u64, protocol: Protocol, class: Class) -> Plan {
    let mut rng = Rng::new(seed, 31);
    let patient = rng.chance(0.5);
    let rise = if patient { rng.between(550.0, 1300.0) } else { rng.between(1200.0, 2900.0) };
    let schedule_minutes = match protocol {
        Protocol::Ramp(m) | Protocol::Steps(m) => m + rng.between(-0.6, 0.6),
    };
    let mut metabolism = metabolism(&mut rng, rise);
    let ramp_s = schedule_minutes * 60.0;
    // The rise that the lagged V̇O₂ reaches at load end, in W of a steady demand.
    let lag = metabolism.lag_s;
    let reached = ramp_s - metabolism.plateau_s - lag * (1.0 - libm::exp(-ramp_s / lag));
    let w_per_min = rise / metabolism.gain / (reached / 60.0);
    let vt2_at = rng.between(0.74, 0.92);
    let vt2_factor = rng.between(1.2, 1.7);
    match class {
        Class::Submaximal => metabolism.vt1_vo2 = metabolism.vo2_unloaded + 1.3 * rise,
        // Steep enough for an RER near 1.0 at the end: the harder null.
        Class::Straight => {
            metabolism.v_slope_rise = 0.0;
            metabolism.v_slope += 0.1;
        }
        _ => {}
    }
    let mut ventilation = ventilation(&mut rng, rise);
    ventilation.vt2_vo2 = class.has_vt2().then_some(metabolism.vo2_unloaded + vt2_at * rise);
    ventilation.vt2_factor = vt2_factor;
    particular(&mut rng, class, &metabolism, rise, &mut ventilation);
    Plan {
        seed,
        schedule: Schedule {
            rest_s: 120.0,
            warm_up_s: 180.0,
            ramp_s,
            recovery_s: 180.0,
            base_w: 0.0,
            w_per_min,
            step_s: matches!(protocol, Protocol::Steps(_)).then_some(60.0),
        },
        metabolism,
        ventilation,
        circulation: circulation(&mut rng),
        noise: noise(&mut rng, class),
    }
}

fn metabolism(rng: &mut Rng, rise: f64) -> Metabolism {
    let vo2_rest = rng.between(220.0, 330.0);
    let vo2_unloaded = vo2_rest + rng.between(180.0, 330.0);
    let plateau = rng.chance(0.25);
    let length = rng.between(25.0, 75.0);
    Metabolism {
        vo2_rest,
        vo2_unloaded,
        gain: rng.between(8.5, 11.0),
        lag_s: rng.between(20.0, 75.0),
        plateau_s: if plateau { length } else { 0.0 },
        rer_rest: rng.between(0.77, 0.85),
        v_slope: rng.between(0.80, 1.0),
        v_slope_rise: rng.between(0.25, 0.65),
        vt1_vo2: vo2_unloaded + rng.between(0.25, 0.62) * rise,
        corner: rng.between(0.01, 0.04) * rise,
        vco2_lag_s: rng.between(3.0, 15.0),
        washout: rng.between(5.0, 35.0),
    }
}

fn ventilation(rng: &mut Rng, rise: f64) -> Ventilation {
    let base = Plan::healthy(0).ventilation;
    let vt_max = (1.2 + 0.45 * rise / 1000.0) * rng.between(0.85, 1.2);
    Ventilation {
        intercept: rng.between(1.5, 3.2),
        slope: rng.between(22.0, 30.0),
        vt_max,
        vt_scale: 12.0 + 8.0 * rise / 1000.0,
        dead_space: rng.between(0.15, 0.21),
        dead_space_share: rng.between(0.03, 0.10),
        eelv: rng.between(2.0, 3.2),
        ..base
    }
}

/// What the class changes in ventilation.
fn particular(
    rng: &mut Rng,
    class: Class,
    metabolism: &Metabolism,
    rise: f64,
    v: &mut Ventilation,
) {
    match class {
        Class::Anticipatory => v.anticipation = rng.between(0.2, 0.45),
        Class::Oscillating => {
            v.oscillation = Some(Oscillation {
                amplitude: rng.between(0.15, 0.35),
                period_s: rng.between(45.0, 95.0),
                until: rng.between(0.5, 1.1),
            });
        }
        Class::Copd => {
            let top = metabolism.vo2_unloaded + rise;
            v.ceiling = v.intercept + v.slope * 0.92 * top / 1000.0;
            v.dead_space_share += 0.12;
            v.eelv += 1.5;
        }
        _ => {}
    }
}

fn circulation(rng: &mut Rng) -> Circulation {
    let hr_rest = rng.between(58.0, 88.0);
    let hr_unloaded = hr_rest + rng.between(10.0, 24.0);
    Circulation {
        hr_rest,
        hr_unloaded,
        hr_peak: hr_unloaded + rng.between(35.0, 95.0),
        curve: rng.gauss(-0.15, 0.2),
        lag_s: rng.between(25.0, 55.0),
        recovery_s: rng.between(40.0, 90.0),
        spo2_rest: 97.5,
        spo2_fall: rng.between(0.0, 3.0),
        bend: None,
        shunt: None,
    }
}

fn noise(rng: &mut Rng, class: Class) -> Noise {
    Noise {
        breath: libm::exp(0.35 * rng.normal()).clamp(0.35, 2.2),
        drift: 1.0,
        sighs: 0.007,
        swallows: 0.007,
        leaks: 0.003,
        irregular: 0.0,
        hr: 1.2,
        hr_irregular: 0.0,
        smoothed: if class == Class::PreSmoothed { 3 } else { 1 },
        spo2_gap: None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::test::generate;

    /// Thresholds are passed exactly where the class has them, in this order.
    #[test]
    fn classes_have_the_thresholds_they_name() {
        for class in Class::ALL {
            for seed in 0..25 {
                let (_, truth) = generate(&draw(seed, Protocol::Ramp(10.0), class));
                assert_eq!(truth.vt1_vo2.is_some(), class.has_vt1(), "{class:?} {seed}");
                assert_eq!(truth.vt2_vo2.is_some(), class.has_vt2(), "{class:?} {seed}");
                if let (Some(one), Some(two)) = (truth.vt1_s, truth.vt2_s) {
                    assert!(one < two, "{class:?} {seed}");
                    assert!(two < truth.phases.recovery.unwrap(), "{class:?} {seed}");
                }
            }
        }
    }

    /// Physiology of every second of every noise-free test: wide limits of what is ever seen
    /// (common practice), so that no table is calibrated on impossible people.
    #[test]
    fn nobody_is_impossible() {
        for protocol in [Protocol::Ramp(8.0), Protocol::Ramp(15.0), Protocol::Steps(10.0)] {
            for seed in 0..60 {
                let plan = draw(seed, protocol, Class::Both);
                let response = plan.response();
                let end = plan.schedule.end_at() as usize;
                for (t, now) in response.seconds.iter().enumerate() {
                    let rer = now.vco2 / now.vo2;
                    // Recovery enters no calibrated gas figure; its overshoot is steep in fast people.
                    let limit = if t < end { 1.5 } else { 2.1 };
                    // CO₂ stores fill while pedalling begins: seconds of low RER, deeper here than
                    // people show, and long over when the increments begin.
                    let least = if t < plan.schedule.ramp_at() as usize { 0.4 } else { 0.7 };
                    assert!((least..limit).contains(&rer), "{seed} {t}: RER {rer}");
                    assert!((24.0..54.0).contains(&now.paco2), "{seed} {t}: {}", now.paco2);
                    let rate = now.ve / now.vt;
                    assert!((7.0..75.0).contains(&rate), "{seed} {t}: fR {rate}");
                    assert!((50.0..215.0).contains(&now.hr), "{seed} {t}: HR {}", now.hr);
                }
            }
        }
    }
}
