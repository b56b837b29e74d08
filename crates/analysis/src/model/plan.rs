//! What is asked of the generator: person, protocol, true physiology, noise.

/// A change of slope some time before load end.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bend {
    /// How long before load end, s.
    pub before_end_s: f64,
    /// Factor on the slope of the V̇O₂ demand.
    pub vo2_factor: f64,
    /// Factor on the slope of the HR demand.
    pub hr_factor: f64,
}

/// A right-to-left shunt that opens abruptly.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shunt {
    /// How long before load end it opens, s.
    pub before_end_s: f64,
    /// Shunt fraction.
    pub fraction: f64,
}

/// Oscillatory ventilation: amplitude as a fraction of the mean, period in s.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Oscillation {
    /// Amplitude of V̇E, fraction.
    pub amplitude: f64,
    /// Period, s.
    pub period_s: f64,
    /// Fraction of the ramp after which it fades.
    pub until: f64,
}

/// The protocol.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Schedule {
    /// Rest, s.
    pub rest_s: f64,
    /// Warm-up, s.
    pub warm_up_s: f64,
    /// Increments, s.
    pub ramp_s: f64,
    /// Recovery, s.
    pub recovery_s: f64,
    /// Work rate in warm-up and recovery, W.
    pub base_w: f64,
    /// Rise, W/min.
    pub w_per_min: f64,
    /// Length of a step, s; `None` = continuous ramp.
    pub step_s: Option<f64>,
}

/// Metabolism: mL/min STPD.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Metabolism {
    /// V̇O₂ at rest.
    pub vo2_rest: f64,
    /// V̇O₂ in unloaded cycling.
    pub vo2_unloaded: f64,
    /// Rise of the demand, mL/min per W.
    pub gain: f64,
    /// Lag of V̇O₂ behind demand, s.
    pub lag_s: f64,
    /// Terminal plateau of the demand, s.
    pub plateau_s: f64,
    /// V̇CO₂ ÷ V̇O₂ at rest.
    pub rer_rest: f64,
    /// V-slope below VT1.
    pub v_slope: f64,
    /// Rise of the V-slope above VT1 (0 = straight).
    pub v_slope_rise: f64,
    /// V̇O₂ at VT1.
    pub vt1_vo2: f64,
    /// Half-width of the soft corner.
    pub corner: f64,
    /// Further lag of V̇CO₂, s.
    pub vco2_lag_s: f64,
    /// CO₂ washed out per fall of PaCO₂, mL/mmHg.
    pub washout: f64,
}

/// Ventilation and gas exchange.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ventilation {
    /// V̇E at no V̇CO₂, L/min.
    pub intercept: f64,
    /// V̇E per V̇CO₂ below VT2.
    pub slope: f64,
    /// V̇O₂ at VT2, mL/min; `None` = no VT2.
    pub vt2_vo2: Option<f64>,
    /// Factor on the slope above VT2.
    pub vt2_factor: f64,
    /// Highest V̇E that can be sustained, L/min.
    pub ceiling: f64,
    /// Tidal volume at rest, L.
    pub vt_rest: f64,
    /// Highest tidal volume, L.
    pub vt_max: f64,
    /// V̇E over which tidal volume approaches its highest, L/min.
    pub vt_scale: f64,
    /// Dead space that does not change, L.
    pub dead_space: f64,
    /// Dead space per tidal volume.
    pub dead_space_share: f64,
    /// PETCO₂ − PaCO₂ at rest, mmHg.
    pub pet_gap_rest: f64,
    /// Change of that gap to peak, mmHg.
    pub pet_gap_rise: f64,
    /// Hyperventilation before and early in exercise, fraction of V̇E.
    pub anticipation: f64,
    /// End-expiratory lung volume, L.
    pub eelv: f64,
    /// Oscillatory ventilation.
    pub oscillation: Option<Oscillation>,
}

/// Heart and blood.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Circulation {
    /// HR at rest, /min.
    pub hr_rest: f64,
    /// HR in unloaded cycling, /min.
    pub hr_unloaded: f64,
    /// HR at load end if no bend occurred, /min.
    pub hr_peak: f64,
    /// Quadratic bend of HR on load, fraction of its range (negative = eases off late).
    pub curve: f64,
    /// Lag, s.
    pub lag_s: f64,
    /// Time constant of recovery, s.
    pub recovery_s: f64,
    /// SpO₂ at rest, %.
    pub spo2_rest: f64,
    /// Fall of SpO₂ to load end, points.
    pub spo2_fall: f64,
    /// Abrupt change of slope of V̇O₂ and HR.
    pub bend: Option<Bend>,
    /// Shunt.
    pub shunt: Option<Shunt>,
}

/// Noise of breaths and beats.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Noise {
    /// Multiplier on the breath noise (1 = V̇O₂ 7–8 %).
    pub breath: f64,
    /// Multiplier on the slow drift.
    pub drift: f64,
    /// Probability of a sigh.
    pub sighs: f64,
    /// Probability of a swallow.
    pub swallows: f64,
    /// Probability of a leak.
    pub leaks: f64,
    /// Extra irregularity of depth and timing, fraction.
    pub irregular: f64,
    /// White and slow HR noise, multiplier.
    pub hr: f64,
    /// Irregular rhythm: SD of HR between breaths, /min.
    pub hr_irregular: f64,
    /// Running mean over this many breaths, as some exports do (1 = none).
    pub smoothed: usize,
    /// SpO₂ without signal: from, to (s).
    pub spo2_gap: Option<(f64, f64)>,
}

/// Everything the generator needs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Plan {
    /// Seed of every random number.
    pub seed: u64,
    /// The protocol.
    pub schedule: Schedule,
    /// Metabolism.
    pub metabolism: Metabolism,
    /// Ventilation.
    pub ventilation: Ventilation,
    /// Circulation.
    pub circulation: Circulation,
    /// Noise.
    pub noise: Noise,
}

impl Noise {
    /// No noise at all: breaths by the mean response, one after the other.
    pub const SILENT: Self = Self {
        breath: 0.0,
        drift: 0.0,
        sighs: 0.0,
        swallows: 0.0,
        leaks: 0.0,
        irregular: 0.0,
        hr: 0.0,
        hr_irregular: 0.0,
        smoothed: 1,
        spo2_gap: None,
    };
}

impl Schedule {
    /// Start of warm-up, s.
    #[must_use]
    pub fn warm_up_at(&self) -> f64 {
        self.rest_s
    }

    /// Start of the increments, s.
    #[must_use]
    pub fn ramp_at(&self) -> f64 {
        self.rest_s + self.warm_up_s
    }

    /// Load end, s.
    #[must_use]
    pub fn end_at(&self) -> f64 {
        self.ramp_at() + self.ramp_s
    }

    /// End of the record, s.
    #[must_use]
    pub fn total_s(&self) -> f64 {
        self.end_at() + self.recovery_s
    }

    /// Work rate at `t_s`, W.
    #[must_use]
    pub fn load(&self, t_s: f64) -> f64 {
        let into = t_s - self.ramp_at();
        if t_s < self.rest_s {
            0.0
        } else if into < 0.0 || into >= self.ramp_s {
            self.base_w
        } else {
            match self.step_s {
                None => self.base_w + self.w_per_min * into / 60.0,
                Some(step) => {
                    let n = libm::floor(into / step) + 1.0;
                    self.base_w + self.w_per_min * step / 60.0 * n
                }
            }
        }
    }
}

impl Plan {
    /// A healthy adult of ordinary build: V̇O₂ from 300 to about 2,200 mL/min in a 10-min ramp of
    /// 20 W/min. The cases are made from it by changing what makes them.
    #[must_use]
    pub fn healthy(seed: u64) -> Self {
        Self {
            seed,
            schedule: Schedule {
                rest_s: 180.0,
                warm_up_s: 180.0,
                ramp_s: 560.0,
                recovery_s: 300.0,
                base_w: 0.0,
                w_per_min: 20.0,
                step_s: None,
            },
            metabolism: Metabolism {
                vo2_rest: 260.0,
                vo2_unloaded: 560.0,
                gain: 10.0,
                lag_s: 38.0,
                plateau_s: 0.0,
                rer_rest: 0.81,
                v_slope: 0.93,
                v_slope_rise: 0.55,
                vt1_vo2: 1200.0,
                corner: 50.0,
                vco2_lag_s: 7.0,
                washout: 15.0,
            },
            ventilation: Ventilation {
                intercept: 2.6,
                slope: 24.5,
                vt2_vo2: Some(1850.0),
                vt2_factor: 1.45,
                ceiling: 400.0,
                vt_rest: 0.62,
                vt_max: 2.1,
                vt_scale: 22.0,
                dead_space: 0.19,
                dead_space_share: 0.05,
                pet_gap_rest: -0.5,
                pet_gap_rise: 3.0,
                anticipation: 0.0,
                eelv: 2.6,
                oscillation: None,
            },
            circulation: Circulation {
                hr_rest: 68.0,
                hr_unloaded: 88.0,
                hr_peak: 182.0,
                curve: -0.15,
                lag_s: 38.0,
                recovery_s: 60.0,
                spo2_rest: 97.8,
                spo2_fall: 1.0,
                bend: None,
                shunt: None,
            },
            noise: Noise {
                breath: 0.9,
                drift: 1.0,
                sighs: 0.006,
                swallows: 0.006,
                leaks: 0.002,
                irregular: 0.0,
                hr: 1.0,
                hr_irregular: 0.0,
                smoothed: 1,
                spo2_gap: None,
            },
        }
    }
}
