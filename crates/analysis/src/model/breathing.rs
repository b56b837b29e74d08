//! From the noise-free response to breaths: each breath is a mass balance of the lung, so that a
//! deep breath is partly repaid by the next ones.

use super::mean::{Instant, Response};
use super::plan::Plan;
use super::rng::{Drift, Rng};

/// mL STPD dry per mL BTPS at 760 mmHg: (273/310)·(713/760).
const STPD_PER_BTPS: f64 = 273.0 / 310.0 * 713.0 / 760.0;
const FIO2: f64 = 0.2093;
const FICO2: f64 = 0.0004;
const DRY_MMHG: f64 = 713.0;

/// One measured breath.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Breath {
    /// End, s.
    pub end_s: f64,
    /// Duration, s.
    pub duration_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// V̇CO₂, mL/min.
    pub vco2: f64,
    /// V̇E, L/min.
    pub ve: f64,
    /// Tidal volume, L.
    pub vt: f64,
    /// End-tidal O₂, mmHg.
    pub peto2: f64,
    /// End-tidal CO₂, mmHg.
    pub petco2: f64,
    /// HR, /min.
    pub hr: f64,
    /// SpO₂, %.
    pub spo2: f64,
}

/// Gas of the alveolar space at the end of the last expiration.
struct Lung {
    volume_ml: f64,
    fo2: f64,
    fco2: f64,
}

/// What is drawn for one breath before the gas is worked out.
struct Drawn {
    vt_ml: f64,
    duration_s: f64,
    next_eelv_ml: f64,
}

struct Exchanged {
    vo2: f64,
    vco2: f64,
}

impl Lung {
    /// Rest state that agrees with the first second of the response.
    fn settled(plan: &Plan, first: &Instant) -> Self {
        let fco2 = first.paco2 / DRY_MMHG;
        let rer = first.vco2 / first.vo2;
        let fo2 = FIO2 - fco2 * (FIO2 + (1.0 - FIO2) / rer);
        Self { volume_ml: plan.ventilation.eelv * 1000.0, fo2, fco2 }
    }

    /// One breath; returns what the mouth measures.
    fn breathe(&mut self, plan: &Plan, now: &Instant, drawn: &Drawn) -> Exchanged {
        let minutes = drawn.duration_s / 60.0;
        let vd_ml = plan.dead_space(drawn.vt_ml / 1000.0) * 1000.0;
        // Blood gives CO₂ by its tension difference, 3.5 mL/mmHg per L of flow (the slope of the
        // dissociation curve is 4 to 5, from memory; the veins follow in part). O₂ uptake is set
        // by flow.
        let flow = 5.0 + 5.5 * now.vo2 / 1000.0;
        let vco2_blood = now.vco2 + 3.5 * flow * (now.paco2 - self.fco2 * DRY_MMHG);
        let (o2_out, co2_in) = (now.vo2 * minutes, vco2_blood * minutes);
        let expired_alveolar = (drawn.vt_ml - vd_ml).max(0.05 * drawn.vt_ml) * STPD_PER_BTPS;
        let grown = (drawn.next_eelv_ml - self.volume_ml) * STPD_PER_BTPS;
        let fresh = (expired_alveolar + grown + o2_out - co2_in).max(0.0);
        let held = self.volume_ml * STPD_PER_BTPS;
        let total = held + fresh - o2_out + co2_in;
        self.fo2 = (held * self.fo2 + fresh * FIO2 - o2_out) / total;
        self.fco2 = (held * self.fco2 + fresh * FICO2 + co2_in) / total;
        self.volume_ml = drawn.next_eelv_ml;
        let expired = drawn.vt_ml * STPD_PER_BTPS;
        let share = expired_alveolar / expired;
        let feo2 = share * self.fo2 + (1.0 - share) * FIO2;
        let feco2 = share * self.fco2 + (1.0 - share) * FICO2;
        // Haldane: nitrogen in equals nitrogen out.
        let inspired = expired * (1.0 - feo2 - feco2) / (1.0 - FIO2 - FICO2);
        Exchanged {
            vo2: (inspired * FIO2 - expired * feo2) / minutes,
            vco2: (expired * feco2 - inspired * FICO2) / minutes,
        }
    }
}

/// Slow wandering of ventilation, of both gases together, and of V̇O₂ alone.
struct Drifts {
    ve: Drift,
    gas: Drift,
    vo2: Drift,
    hr: Drift,
}

/// What kind of errant breath this one is.
#[derive(Clone, Copy, PartialEq)]
enum Errant {
    None,
    Sigh,
    Swallow,
    Leak,
}

fn errant(plan: &Plan, rng: &mut Rng) -> Errant {
    let (n, u) = (&plan.noise, rng.uniform());
    if u < n.sighs {
        Errant::Sigh
    } else if u < n.sighs + n.swallows {
        Errant::Swallow
    } else if u < n.sighs + n.swallows + n.leaks {
        Errant::Leak
    } else {
        Errant::None
    }
}

fn draw(plan: &Plan, now: &Instant, ve_drift: f64, kind: Errant, rng: &mut Rng) -> Drawn {
    let n = &plan.noise;
    let depth_sd = 0.088 * n.breath + n.irregular;
    let (a, b) = (rng.normal(), rng.normal());
    // Deep breaths last longer: correlation 0.6 of depth and duration.
    let depth = depth_sd * a;
    let time_sd = 0.088 * n.breath + 0.8 * n.irregular;
    let time = time_sd * (0.6 * a + 0.8 * b) - 0.5 * time_sd * time_sd;
    let mut vt_ml = now.vt * 1000.0 * libm::exp(depth + ve_drift - 0.5 * depth_sd * depth_sd);
    let mut duration_s = 60.0 * now.vt / now.ve * libm::exp(time);
    match kind {
        Errant::Sigh => {
            vt_ml *= rng.between(1.6, 2.1);
            duration_s *= rng.between(1.2, 1.5);
        }
        Errant::Swallow => {
            vt_ml *= rng.between(0.3, 0.5);
            duration_s *= rng.between(0.5, 0.8);
        }
        _ => {}
    }
    vt_ml = vt_ml.clamp(180.0, 5200.0);
    let wander = (40.0 * n.breath + 120.0 * n.irregular) * rng.normal();
    let next_eelv_ml = (plan.ventilation.eelv * 1000.0 + wander).max(900.0);
    Drawn { vt_ml, duration_s: duration_s.max(0.6), next_eelv_ml }
}

/// Alveolar O₂ that belongs to an end-tidal CO₂ at a gas exchange ratio, mmHg.
fn alveolar_o2(petco2: f64, rer: f64) -> f64 {
    FIO2 * DRY_MMHG - petco2 * (FIO2 + (1.0 - FIO2) / rer)
}

/// Standard deviation of the HR noise at an intensity 0–1: it falls as exercise gets hard
/// (shape from nine open cycle ramps, Chabert et al. 2022, doi:10.13026/2qs3-kh43).
fn hr_sd(share: f64) -> f64 {
    let f = share.clamp(0.0, 1.0);
    3.3 - 2.6 * f * f.sqrt()
}

fn heart(plan: &Plan, now: &Instant, drift: f64, rng: &mut Rng) -> f64 {
    let c = &plan.circulation;
    let share = (now.hr - c.hr_rest) / (c.hr_peak - c.hr_rest).max(10.0);
    let sd = 0.6 * plan.noise.hr * hr_sd(share);
    let irregular = plan.noise.hr_irregular * rng.normal();
    (now.hr + sd * (drift + 0.5 * rng.normal()) + irregular).max(32.0)
}

/// All breaths of the test, from time zero to the end of recovery.
#[must_use]
pub fn breaths(plan: &Plan, response: &Response) -> Vec<Breath> {
    let mut rng = Rng::new(plan.seed, 1);
    let mut beat = Rng::new(plan.seed, 2);
    let mut drifts = Drifts {
        ve: Drift::new(25.0),
        gas: Drift::new(25.0),
        vo2: Drift::new(30.0),
        hr: Drift::new(30.0),
    };
    let mut lung = Lung::settled(plan, &response.at(0.0));
    let mut out: Vec<Breath> = Vec::new();
    let mut t = 0.0;
    // Eight breaths before zero let the lung forget how it was filled.
    for run_in in 0.. {
        let kind = if run_in < 8 { Errant::None } else { errant(plan, &mut rng) };
        let ahead = response.at(t);
        let half = 30.0 * ahead.vt / ahead.ve;
        let now = response.at(t + half);
        let k = plan.noise.drift;
        let ve_drift = 0.015 * k * drifts.ve.step(2.0 * half, rng.normal());
        let gas_drift = 0.010 * k * drifts.gas.step(2.0 * half, rng.normal());
        let vo2_drift = 0.006 * k * drifts.vo2.step(2.0 * half, rng.normal());
        let drawn = draw(plan, &now, ve_drift, kind, &mut rng);
        let gas = lung.breathe(plan, &now, &drawn);
        let hr_drift = drifts.hr.step(drawn.duration_s, beat.normal());
        if run_in < 8 {
            continue;
        }
        t += drawn.duration_s;
        if t > plan.schedule.total_s() {
            break;
        }
        let loss = if kind == Errant::Leak { rng.between(0.55, 0.8) } else { 1.0 };
        let m = 0.015 * plan.noise.breath;
        let both = m * rng.t_unit(5);
        let vo2 = gas.vo2 * loss * (1.0 + gas_drift + vo2_drift + both + m * rng.t_unit(5));
        let vco2 = gas.vco2 * loss * (1.0 + gas_drift + both + 0.6 * m * rng.t_unit(5));
        let pet_gap = now.pet_gap;
        let petco2 = lung.fco2 * DRY_MMHG + pet_gap + 0.5 * plan.noise.breath * rng.normal();
        let rer = (now.vco2 / now.vo2).max(0.5);
        let shift = lung.fo2 * DRY_MMHG - alveolar_o2(now.paco2, rer);
        let peto2 = alveolar_o2(now.paco2 + 0.5 * pet_gap, rer)
            + shift
            + 0.8 * plan.noise.breath * rng.normal();
        out.push(Breath {
            end_s: t,
            duration_s: drawn.duration_s,
            vo2: vo2.max(30.0),
            vco2: vco2.max(30.0),
            ve: drawn.vt_ml * loss / 1000.0 / drawn.duration_s * 60.0,
            vt: drawn.vt_ml * loss / 1000.0,
            peto2,
            petco2,
            hr: heart(plan, &now, hr_drift, &mut beat),
            spo2: (now.spo2 + 0.35 * plan.noise.hr * beat.normal()).min(100.0),
        });
    }
    if plan.noise.smoothed > 1 { smoothed(&out, plan.noise.smoothed) } else { out }
}

/// Running mean over `width` breaths of the gas columns, as some exports give.
fn smoothed(breaths: &[Breath], width: usize) -> Vec<Breath> {
    let half = width / 2;
    (0..breaths.len())
        .map(|i| {
            let window = &breaths[i.saturating_sub(half)..(i + half + 1).min(breaths.len())];
            let mean =
                |f: fn(&Breath) -> f64| window.iter().map(f).sum::<f64>() / window.len() as f64;
            Breath {
                vo2: mean(|b| b.vo2),
                vco2: mean(|b| b.vco2),
                ve: mean(|b| b.ve),
                vt: mean(|b| b.vt),
                peto2: mean(|b| b.peto2),
                petco2: mean(|b| b.petco2),
                ..breaths[i]
            }
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative errors of V̇O₂, V̇CO₂, V̇E of the breaths of one ramp.
    fn residuals(seed: u64) -> Vec<[f64; 3]> {
        let mut plan = Plan::healthy(seed);
        plan.noise.breath = 1.0;
        (plan.noise.sighs, plan.noise.swallows, plan.noise.leaks) = (0.0, 0.0, 0.0);
        let response = plan.response();
        let inside = |b: &&Breath| b.end_s > 420.0 && b.end_s < 910.0;
        let measured = breaths(&plan, &response);
        measured
            .iter()
            .filter(inside)
            .map(|b| {
                let now = response.at(b.end_s - 0.5 * b.duration_s);
                [b.vo2 / now.vo2 - 1.0, b.vco2 / now.vco2 - 1.0, b.ve / now.ve - 1.0]
            })
            .collect()
    }

    /// The noise is what the model was designed to have: V̇O₂ 6 to 8 %, shared between the gases
    /// and ventilation (correlations near 0.86, 0.91, 0.81), a deep breath partly repaid by the
    /// next (lag one near -0.1), means unbiased.
    #[test]
    fn noise_is_shared_and_repaid() {
        let tests: Vec<Vec<[f64; 3]>> = (100..130).map(residuals).collect();
        let all: Vec<[f64; 3]> = tests.iter().flatten().copied().collect();
        let n = all.len() as f64;
        let mean = |k: usize| all.iter().map(|r| r[k]).sum::<f64>() / n;
        let m = [mean(0), mean(1), mean(2)];
        let cov =
            |a: usize, b: usize| all.iter().map(|r| (r[a] - m[a]) * (r[b] - m[b])).sum::<f64>() / n;
        let corr = |a: usize, b: usize| cov(a, b) / (cov(a, a) * cov(b, b)).sqrt();
        assert!(m.iter().all(|x| x.abs() < 0.01), "{m:?}");
        assert!((0.06..0.08).contains(&cov(0, 0).sqrt()), "{}", cov(0, 0).sqrt());
        for ((a, b), design) in [((0, 1), 0.86), ((1, 2), 0.91), ((0, 2), 0.81)] {
            assert!((corr(a, b) - design).abs() < 0.06, "{a}{b} {}", corr(a, b));
        }
        let lag: f64 = tests.iter().flat_map(|t| t.windows(2)).map(|w| w[0][0] * w[1][0]).sum();
        let lag = lag / (n * cov(0, 0));
        assert!((-0.2..-0.03).contains(&lag), "{lag}");
    }

    /// Oxygen that the mouth takes is what the blood takes plus what the lung stores: over a
    /// steady rest of silent breaths both agree within the rounding of the start.
    #[test]
    fn silent_breaths_return_the_response() {
        let mut plan = Plan::healthy(1);
        plan.noise = crate::model::plan::Noise::SILENT;
        let response = plan.response();
        for b in breaths(&plan, &response).iter().filter(|b| b.end_s > 60.0 && b.end_s < 170.0) {
            let now = response.at(b.end_s - 0.5 * b.duration_s);
            assert!((b.vo2 / now.vo2 - 1.0).abs() < 0.01, "{} {}", b.vo2, now.vo2);
            assert!((b.vco2 / now.vco2 - 1.0).abs() < 0.01, "{} {}", b.vco2, now.vco2);
            assert!((b.petco2 - now.paco2 - now.pet_gap).abs() < 0.6);
        }
    }
}
