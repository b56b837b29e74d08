//! The noise-free response of a [`Plan`] on a grid of one second.

use super::plan::Plan;

/// Lag of the CO₂ stores behind arterial tension, s (assumed).
const STORE_LAG_S: f64 = 25.0;

/// One second of the noise-free response.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Instant {
    /// V̇O₂ at the lung, mL/min STPD.
    pub vo2: f64,
    /// V̇CO₂ at the lung, mL/min STPD.
    pub vco2: f64,
    /// V̇E, L/min BTPS.
    pub ve: f64,
    /// Tidal volume, L BTPS.
    pub vt: f64,
    /// Arterial CO₂ tension, mmHg.
    pub paco2: f64,
    /// End-tidal minus arterial CO₂ tension, mmHg.
    pub pet_gap: f64,
    /// Heart rate, /min.
    pub hr: f64,
    /// Oxygen saturation, %.
    pub spo2: f64,
}

/// The noise-free response.
#[derive(Clone, Debug, PartialEq)]
pub struct Response {
    /// One entry per second from 0.
    pub seconds: Vec<Instant>,
}

macro_rules! lerp_fields {
    ($a:ident, $b:ident, $w:ident; $($f:ident)*) => {
        Instant { $($f: $a.$f + $w * ($b.$f - $a.$f)),* }
    };
}

impl Response {
    /// The response at `t_s`, linear between seconds, held at the ends.
    #[must_use]
    pub fn at(&self, t_s: f64) -> Instant {
        let last = self.seconds.len() - 1;
        let x = t_s.max(0.0).min(last as f64);
        let i = (x as usize).min(last.saturating_sub(1));
        let (a, b, w) = (self.seconds[i], self.seconds[(i + 1).min(last)], x - i as f64);
        lerp_fields!(a, b, w; vo2 vco2 ve vt paco2 pet_gap hr spo2)
    }
}

/// w ln(1 + exp(x/w)): zero below a corner, slope one above, soft over `w`.
fn soft_corner(x: f64, w: f64) -> f64 {
    let z = x / w;
    if z > 30.0 { x } else { w * libm::log1p(libm::exp(z)) }
}

/// Logistic step of unit height.
fn soft_step(x: f64, w: f64) -> f64 {
    1.0 / (1.0 + libm::exp(-x / w))
}

/// First-order lag of a series on the one-second grid.
fn lagged(demand: &[f64], tau_s: f64) -> Vec<f64> {
    let a = 1.0 - libm::exp(-1.0 / tau_s);
    let mut y = demand.first().copied().unwrap_or(0.0);
    demand
        .iter()
        .map(|x| {
            y += a * (x - y);
            y
        })
        .collect()
}

impl Plan {
    /// Muscle V̇CO₂ that belongs to a steady V̇O₂, mL/min.
    fn muscle_vco2(&self, vo2: f64) -> f64 {
        let m = &self.metabolism;
        let base = m.rer_rest * m.vo2_rest + m.v_slope * (vo2 - m.vo2_rest);
        base + m.v_slope_rise * soft_corner(vo2 - m.vt1_vo2, m.corner)
    }

    /// V̇O₂ demand during load, mL/min, before any lag.
    fn vo2_demand(&self, t: f64) -> f64 {
        let (s, m) = (&self.schedule, &self.metabolism);
        if t < s.rest_s {
            return m.vo2_rest;
        }
        let end = s.end_at();
        let t = t.min(end - m.plateau_s);
        let bent = self.bent_load(t, self.circulation.bend.map_or(1.0, |b| b.vo2_factor));
        m.vo2_unloaded + m.gain * bent
    }

    /// Load with its rise multiplied by `factor` after the bend, W.
    fn bent_load(&self, t: f64, factor: f64) -> f64 {
        let s = &self.schedule;
        let w = s.load(t.min(s.end_at() - 1e-9));
        match self.circulation.bend {
            Some(b) => {
                let at = s.end_at() - b.before_end_s;
                if t > at { s.load(at) + factor * (w - s.load(at)) } else { w }
            }
            None => w,
        }
    }

    fn hr_demand(&self, t: f64) -> f64 {
        let (s, c) = (&self.schedule, &self.circulation);
        if t < s.rest_s {
            return c.hr_rest;
        }
        let span = s.w_per_min * s.ramp_s / 60.0;
        // Scaled so that the lagged line, not the demand, ends at `hr_peak`.
        let lost = c.lag_s / s.ramp_s * (1.0 - libm::exp(-s.ramp_s / c.lag_s));
        let top = s.load(s.end_at() - 1e-9) - s.base_w;
        let x = (self.bent_load(t, c.bend.map_or(1.0, |b| b.hr_factor)) - s.base_w) / span;
        let curved = x + c.curve * (x * x - x);
        c.hr_unloaded + (c.hr_peak - c.hr_unloaded) * curved / (1.0 - lost) * span / top
    }

    /// V̇O₂ and HR on the grid, with recovery.
    fn delivery(&self) -> (Vec<f64>, Vec<f64>) {
        let (s, m, c) = (&self.schedule, &self.metabolism, &self.circulation);
        let loaded = libm::ceil(s.end_at()) as usize;
        let n = libm::ceil(s.total_s()) as usize + 1;
        let demand: Vec<f64> = (0..loaded).map(|i| self.vo2_demand(i as f64)).collect();
        let mut vo2 = lagged(&demand, m.lag_s);
        let demand: Vec<f64> = (0..loaded).map(|i| self.hr_demand(i as f64)).collect();
        let mut hr = lagged(&demand, c.lag_s);
        let (v_end, h_end) = (vo2[loaded - 1], hr[loaded - 1]);
        let (v_base, h_base) = (m.vo2_rest * 1.15, c.hr_rest + 6.0);
        for i in loaded..n {
            let dt = (i + 1 - loaded) as f64;
            // A short carry-over, then a fast and a slow part.
            let fast = libm::exp(-(dt - 8.0).max(0.0) / (m.lag_s + 22.0));
            let slow = libm::exp(-dt / 260.0);
            vo2.push(v_base + (v_end - v_base) * (0.86 * fast + 0.14 * slow));
            let fast = libm::exp(-(dt - 4.0).max(0.0) / c.recovery_s);
            hr.push(h_base + (h_end - h_base) * (0.68 * fast + 0.32 * slow));
        }
        (vo2, hr)
    }

    /// Weight of the open shunt at `t`, 0–1.
    fn shunt_open(&self, t: f64) -> f64 {
        self.circulation.shunt.map_or(0.0, |h| {
            let end = self.schedule.end_at();
            let closing = libm::exp(-(t - end).max(0.0) / 60.0);
            soft_step(t - (end - h.before_end_s), 4.0) * closing
        })
    }

    /// V̇CO₂ that the muscle and the buffering of lactate deliver to the lung, before washout.
    fn delivered_vco2(&self, vo2: &[f64]) -> Vec<f64> {
        let (s, m) = (&self.schedule, &self.metabolism);
        let end = libm::ceil(s.end_at()) as usize;
        let steady: Vec<f64> = (0..vo2.len())
            .map(|i| {
                if i < end {
                    return self.muscle_vco2(vo2[i]);
                }
                // After load the buffered excess decays more slowly than V̇O₂: RER overshoots.
                let v_end = vo2[end - 1];
                let excess = (self.muscle_vco2(v_end) - 0.86 * v_end).max(0.0);
                let dt = (i - end) as f64;
                0.86 * vo2[i]
                    + excess * libm::exp(-dt / 150.0)
                    + 0.022 * v_end * dt / 40.0 * libm::exp(-dt / 55.0)
            })
            .collect();
        let mut out = lagged(&steady, m.vco2_lag_s);
        // The stores follow more slowly when V̇O₂ falls.
        let slow = lagged(&steady, m.vco2_lag_s + 14.0);
        out[end..].copy_from_slice(&slow[end..]);
        if end < out.len() {
            let jump = out[end - 1] - out[end];
            for (k, v) in out[end..].iter_mut().enumerate() {
                *v += jump * libm::exp(-(k as f64) / 20.0);
            }
        }
        out
    }

    /// V̇E for the delivered V̇CO₂ at `t`, L/min.
    fn ventilation_for(&self, vco2: &[f64]) -> Vec<f64> {
        let (s, v) = (&self.schedule, &self.ventilation);
        let corner = v.vt2_vo2.map(|at| self.muscle_vco2(at) / 1000.0);
        let end = libm::ceil(s.end_at()) as usize;
        let mut extra_end = 0.0;
        let mut out = Vec::with_capacity(vco2.len());
        for (i, q) in vco2.iter().enumerate() {
            let t = i as f64;
            let litres = q / 1000.0;
            let mut extra = corner
                .map_or(0.0, |k| v.slope * (v.vt2_factor - 1.0) * soft_corner(litres - k, 0.03));
            if i < end {
                extra_end = extra;
            } else {
                extra = extra.max(extra_end * libm::exp(-(t - end as f64) / 75.0));
            }
            let mut ve = v.intercept + v.slope * litres + extra;
            ve *= 1.0 + v.anticipation * self.anticipation(t);
            if let Some(h) = self.circulation.shunt {
                ve *= 1.0 + 1.1 * h.fraction * self.shunt_open(t);
            }
            out.push(v.ceiling - soft_corner(v.ceiling - ve, 2.0));
        }
        out
    }

    /// Weight of hyperventilation before and early in exercise, 0–1.
    fn anticipation(&self, t: f64) -> f64 {
        let until = self.schedule.ramp_at() + 60.0;
        soft_step(t - 40.0, 15.0) * (1.0 - soft_step(t - until, 25.0))
    }

    /// Weight of oscillation at `t`, 0–1.
    fn oscillation_weight(&self, t: f64) -> f64 {
        self.ventilation.oscillation.map_or(0.0, |o| {
            let fade = self.schedule.ramp_at() + o.until * self.schedule.ramp_s;
            1.0 - soft_step(t - fade, 15.0)
        })
    }

    fn tidal_volume(&self, ve: f64) -> f64 {
        let v = &self.ventilation;
        let rest =
            v.intercept + v.slope * self.metabolism.rer_rest * self.metabolism.vo2_rest / 1000.0;
        let rise = 1.0 - libm::exp(-(ve - rest) / v.vt_scale);
        (v.vt_rest + (v.vt_max - v.vt_rest) * rise).max(0.3)
    }

    /// The whole noise-free response.
    #[must_use]
    pub fn response(&self) -> Response {
        let (vo2, hr) = self.delivery();
        let delivered = self.delivered_vco2(&vo2);
        let ve = self.ventilation_for(&delivered);
        let (v, c, m) = (&self.ventilation, &self.circulation, &self.metabolism);
        let vo2_span = (vo2.iter().copied().fold(0.0, f64::max) - m.vo2_rest).max(1.0);
        let mut seconds: Vec<Instant> = Vec::with_capacity(vo2.len());
        let (mut saturation_open, mut stored) = (0.0, f64::NAN);
        for i in 0..vo2.len() {
            let t = i as f64;
            let mut now = Instant { vo2: vo2[i], hr: hr[i], ..Instant::default() };
            let swing = v.oscillation.map_or(0.0, |o| {
                let phase = 2.0 * core::f64::consts::PI * t / o.period_s;
                now.vo2 *=
                    1.0 + 0.65 * o.amplitude * self.oscillation_weight(t) * libm::sin(phase + 0.7);
                o.amplitude * self.oscillation_weight(t) * libm::sin(phase)
            });
            now.ve = ve[i] * (1.0 + swing);
            now.vt = self.tidal_volume(ve[i]) * (1.0 + 0.8 * swing);
            let vd = self.dead_space(now.vt);
            let va = now.ve * (1.0 - vd / now.vt);
            now.paco2 = 863.0 * delivered[i] * (1.0 + 0.6 * swing) / 1000.0 / va;
            if i == 0 {
                stored = now.paco2;
            }
            // The stores follow arterial tension with a lag; what they take the lung does not give.
            let change = (now.paco2 - stored) / STORE_LAG_S;
            stored += change;
            now.vco2 = delivered[i] * (1.0 + 0.6 * swing) - m.washout * change * 60.0;
            let share = ((now.vo2 - m.vo2_rest) / vo2_span).clamp(0.0, 1.0);
            now.pet_gap = v.pet_gap_rest + v.pet_gap_rise * share.sqrt();
            // At a fixed mixed-venous floor V̇O₂ falls by exactly the shunt fraction; CO₂ crosses
            // with little loss, since the rest of the lung is ventilated more.
            let lost = c.shunt.map_or(0.0, |h| h.fraction * self.shunt_open(t));
            now.vo2 *= 1.0 - lost;
            now.vco2 *= 1.0 - 0.25 * lost;
            saturation_open += (self.shunt_open(t) - saturation_open) / 20.0;
            let shunt = c.shunt.map_or(0.0, |h| 45.0 * h.fraction * saturation_open);
            now.pet_gap -= c.shunt.map_or(0.0, |h| 12.0 * h.fraction * self.shunt_open(t));
            now.spo2 = c.spo2_rest - c.spo2_fall * share * share - shunt;
            seconds.push(now);
        }
        Response { seconds }
    }

    /// Dead space of a breath of `vt` litres, L.
    #[must_use]
    pub fn dead_space(&self, vt: f64) -> f64 {
        let v = &self.ventilation;
        (v.dead_space + v.dead_space_share * vt).min(0.75 * vt)
    }

    /// V̇CO₂ at which ventilation turns, mL/min.
    #[must_use]
    pub fn vt2_vco2(&self) -> Option<f64> {
        self.ventilation.vt2_vo2.map(|at| self.muscle_vco2(at))
    }
}
