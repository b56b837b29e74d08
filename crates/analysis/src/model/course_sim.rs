//! Ramps for the calibration of the O₂-pulse course: V̇O₂ and HR only, with a shape matched to
//! people and a known break.
//!
//! The bend of V̇O₂ and HR on load is drawn from a hierarchical model of the stage values of Donne
//! et al. 2024 (doi:10.5281/zenodo.10841412); breath and beat noise follow the nine ramps of
//! Chabert et al. 2022 (doi:10.13026/2qs3-kh43; Goldberger et al. 2000). Lags, plateaus and the
//! way a break comes about are assumed.

use super::rng::{Drift, Rng};
use crate::o2_pulse::CourseInput;
use crate::recording::Trace;

/// How the V̇O₂–HR relation of people without disease bends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Null {
    /// As estimated from trained adults.
    Matched,
    /// Half the easing of HR, smaller spread.
    Mid,
    /// Straight V̇O₂, small spread of the HR bend.
    Lin,
}

impl Null {
    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Null::Matched => "b",
            Null::Mid => "mid",
            Null::Lin => "lin",
        }
    }
}

/// A break put in before load end.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Break {
    /// None.
    None,
    /// Slope of V̇O₂ on HR multiplied by `ratio` from `before_end_min` on.
    Ratio {
        /// Factor.
        ratio: f64,
        /// Minutes before load end.
        before_end_min: f64,
    },
    /// The ratio that levels this person's own O₂ pulse from then on.
    Level {
        /// Minutes before load end.
        before_end_min: f64,
    },
}

/// What is simulated.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Design {
    /// Shape of people without disease.
    pub null: Null,
    /// Ramp, min.
    pub ramp_min: f64,
    /// Step length, min; 0 = ramp.
    pub step_min: f64,
    /// The break.
    pub broken: Break,
    /// Everybody ends with a V̇O₂ plateau of this many s (0 = three in ten have 20–60 s).
    pub plateau_s: f64,
    /// Breath SD 10 % and drift 1.5 % instead of the usual.
    pub heavy_noise: bool,
    /// HR from about 64 to 108.
    pub hr_limited: bool,
    /// Share of a break that V̇O₂ takes by slowing, HR the rest by accelerating (of ln ratio).
    pub vo2_share: f64,
}

impl Design {
    /// A ramp of `ramp_min` minutes without a break.
    #[must_use]
    pub fn normal(null: Null, ramp_min: f64) -> Self {
        Self {
            null,
            ramp_min,
            step_min: 0.0,
            broken: Break::None,
            plateau_s: 0.0,
            heavy_noise: false,
            hr_limited: false,
            vo2_share: 0.5,
        }
    }
}

/// One simulated ramp.
#[derive(Clone, Debug, PartialEq)]
pub struct Simulated {
    /// Middles of the breaths, s.
    pub t_s: Vec<f64>,
    /// V̇O₂, mL/min.
    pub vo2: Vec<f64>,
    /// HR, /min.
    pub hr: Vec<f64>,
    /// Work rate.
    pub load: Trace,
    /// Start of the increments, s.
    pub ramp_start_s: f64,
    /// Load end, s.
    pub load_end_s: f64,
    /// True slope of ln(V̇O₂/HR) over the last 3.0 min that end 20 s before load end, %/min.
    pub late_slope: f64,
    /// The factor put in (1 = none).
    pub ratio: f64,
}

impl Simulated {
    /// What the reading of the course takes of it.
    #[must_use]
    pub fn input(&self) -> CourseInput<'_> {
        CourseInput {
            t_s: &self.t_s,
            vo2: &self.vo2,
            hr: &self.hr,
            load: &self.load,
            ramp_start_s: self.ramp_start_s,
            load_end_s: self.load_end_s,
        }
    }
}

const WARM_UP_S: f64 = 180.0;
/// Load at which people of the graded tests start, as a fraction of the last load.
const FIRST_STAGE: f64 = 0.3;

/// Demand of one variable on load, fraction 0–1 of the final load.
#[derive(Clone, Copy)]
struct Shape {
    /// Value at `from`.
    start: f64,
    rise: f64,
    from: f64,
    bend: f64,
    cubic: f64,
}

impl Shape {
    fn at(&self, x: f64) -> f64 {
        let u = (x - self.from) / (1.0 - self.from);
        let slope = 1.0 - self.bend + 0.5 * self.cubic;
        if u < 0.0 {
            return self.start + self.rise * slope * u;
        }
        let bent = self.bend * (u * u - u) + self.cubic * (u * u * u - 1.5 * u * u + 0.5 * u);
        self.start + self.rise * (u + bent)
    }
}

/// One person and one test's noise.
struct Person {
    vo2: Shape,
    hr: Shape,
    vo2_lag_s: f64,
    hr_lag_s: f64,
    plateau_s: f64,
    /// Absolute breath SD, mL/min.
    breath_sd: f64,
    /// Relative drift SD.
    drift_sd: f64,
    hr_scale: f64,
}

fn bends(null: Null, rng: &mut Rng) -> ([f64; 2], [f64; 2]) {
    let (a, b, c, d) = (rng.normal(), rng.normal(), rng.normal(), rng.normal());
    // Correlation 0.19 of the two quadratic bends.
    let b = 0.19 * a + (1.0 - 0.19_f64 * 0.19).sqrt() * b;
    match null {
        Null::Matched => {
            ([0.01 + 0.18 * a, -0.25 + 0.32 * c], [-0.31 + 0.26 * b, -0.08 + 0.40 * d])
        }
        Null::Mid => {
            ([0.005 + 0.126 * a, -0.125 + 0.224 * c], [-0.155 + 0.182 * b, -0.04 + 0.28 * d])
        }
        Null::Lin => ([0.0, 0.0], [0.20 * b, 0.0]),
    }
}

fn heart_range(design: &Design, rng: &mut Rng) -> (f64, f64, f64) {
    let (from, low, high) = match design.null {
        Null::Matched => (FIRST_STAGE, rng.gauss(117.0, 10.0), rng.gauss(187.0, 10.0)),
        Null::Mid => (FIRST_STAGE, rng.gauss(113.0, 10.0), rng.gauss(175.0, 12.0)),
        Null::Lin => (0.0, rng.gauss(92.0, 10.0), rng.gauss(162.0, 15.0)),
    };
    if design.hr_limited {
        let low = 64.0 + 0.6 * (low - 117.0) + if from > 0.0 { 11.0 } else { 0.0 };
        return (from, low, (108.0 + 0.6 * (high - 187.0)).max(low + 20.0));
    }
    (from, low, high.max(low + 30.0))
}

fn person(design: &Design, rng: &mut Rng) -> Person {
    let ([vk, vc], [hk, hc]) = bends(design.null, rng);
    let (from, h0, h1) = heart_range(design, rng);
    let (v0, v1) = match design.null {
        Null::Lin => {
            let low = rng.between(400.0, 650.0);
            (low, low + rng.between(700.0, 2600.0))
        }
        _ => {
            let top = rng.gauss(3600.0, 650.0).clamp(1800.0, 5600.0);
            (top * rng.gauss(0.445, 0.03), top)
        }
    };
    let plateau = rng.chance(0.3);
    let length = rng.between(20.0, 60.0);
    let (sd, drift) = (rng.normal(), rng.normal());
    let relative = if design.heavy_noise { 0.10 } else { 0.053 } * libm::exp(0.33 * sd);
    Person {
        vo2: Shape { start: v0, rise: v1 - v0, from, bend: vk, cubic: vc },
        hr: Shape { start: h0, rise: h1 - h0, from, bend: hk, cubic: hc },
        vo2_lag_s: rng.gauss(40.0, 8.0).clamp(15.0, 70.0),
        hr_lag_s: rng.gauss(40.0, 10.0).clamp(12.0, 75.0),
        plateau_s: if design.plateau_s > 0.0 {
            design.plateau_s
        } else if plateau {
            length
        } else {
            0.0
        },
        breath_sd: relative * v1,
        drift_sd: if design.heavy_noise { 0.015 } else { 0.007 } * libm::exp(0.5 * drift),
        hr_scale: libm::exp(0.35 * rng.normal()),
    }
}

/// Fraction of the final load at `t` minutes into the ramp.
fn load_fraction(design: &Design, minutes: f64) -> f64 {
    let m = minutes.clamp(0.0, design.ramp_min);
    if minutes < 0.0 {
        0.0
    } else if design.step_min > 0.0 {
        let steps = (design.ramp_min / design.step_min).max(1.0);
        ((libm::floor(m / design.step_min) + 1.0).min(libm::ceil(steps))) / libm::ceil(steps)
    } else {
        m / design.ramp_min
    }
}

/// The factor of this design's break for this person, and its onset in minutes of the ramp.
fn broken(design: &Design, p: &Person) -> (f64, f64) {
    match design.broken {
        Break::None => (1.0, f64::INFINITY),
        Break::Ratio { ratio, before_end_min } => (ratio, design.ramp_min - before_end_min),
        Break::Level { before_end_min } => {
            let onset = design.ramp_min - before_end_min;
            let x = onset / design.ramp_min;
            let rise = |s: &Shape| (s.at(1.0) - s.at(x)) / s.at(x);
            ((rise(&p.hr) / rise(&p.vo2)).clamp(0.02, 1.5), onset)
        }
    }
}

/// Noise-free V̇O₂ and HR on a grid of one second from the start of warm-up.
fn clean(design: &Design, p: &Person) -> (Vec<f64>, Vec<f64>, f64) {
    let (ratio, onset) = broken(design, p);
    let (end_min, share) = (design.ramp_min, design.vo2_share);
    let after = |shape: &Shape, factor: f64, minutes: f64| {
        let demand = shape.at(load_fraction(design, minutes));
        if minutes <= onset {
            return demand;
        }
        let at = shape.at(load_fraction(design, onset));
        at + factor * (demand - at)
    };
    let n = libm::ceil(WARM_UP_S + 60.0 * end_min) as usize + 1;
    let (mut v, mut h) = (p.vo2.at(0.0), p.hr.at(0.0));
    let (av, ah) = (1.0 - libm::exp(-1.0 / p.vo2_lag_s), 1.0 - libm::exp(-1.0 / p.hr_lag_s));
    let (mut vo2, mut hr) = (Vec::with_capacity(n), Vec::with_capacity(n));
    for i in 0..n {
        let minutes = (i as f64 - WARM_UP_S) / 60.0;
        let held = minutes.min(end_min - p.plateau_s / 60.0);
        v += av * (after(&p.vo2, libm::pow(ratio, share), held) - v);
        h += ah * (after(&p.hr, libm::pow(ratio, share - 1.0), minutes.min(end_min)) - h);
        vo2.push(v);
        hr.push(h);
    }
    (vo2, hr, ratio)
}

/// Noisy breaths of the ramp and of the last minute before it.
fn measured(design: &Design, p: &Person, vo2: &[f64], hr: &[f64], rng: &mut Rng) -> [Vec<f64>; 3] {
    let end = WARM_UP_S + 60.0 * design.ramp_min;
    let (mut slow_v, mut slow_h) = (Drift::new(25.0), Drift::new(30.0));
    let (low, high) = (hr[WARM_UP_S as usize], hr[hr.len() - 1]);
    let mut out = [Vec::new(), Vec::new(), Vec::new()];
    let (mut t, mut last) = (60.0, 0.0);
    loop {
        let along = ((t - WARM_UP_S) / (end - WARM_UP_S)).clamp(0.0, 1.0);
        let duration = 60.0 / (16.0 + 26.0 * along) * libm::exp(0.08 * rng.normal());
        if t + duration > end {
            return out;
        }
        let mid = t + 0.5 * duration;
        let i = mid as usize;
        let (v, h) = (vo2[i], hr[i]);
        let z = rng.normal();
        let dv = slow_v.step(duration, z);
        let dh = slow_h.step(duration, 0.2 * z + (1.0_f64 - 0.04).sqrt() * rng.normal());
        // Neighbouring breaths repay each other: lag-one correlation -0.15.
        let fresh = rng.t_unit(5);
        let mut noise = (fresh - 0.154 * last) / (1.0_f64 + 0.154 * 0.154).sqrt();
        last = fresh;
        if rng.chance(0.01) {
            noise = 0.35 * v / p.breath_sd * rng.normal();
        }
        let f = ((h - low) / (high - low).max(5.0)).clamp(0.0, 1.0);
        let sd = p.hr_scale * (3.3 - 2.6 * f * f.sqrt());
        out[0].push(mid);
        out[1].push((v * (1.0 + p.drift_sd * dv) + p.breath_sd * noise).max(50.0));
        out[2].push(h + sd * (dh + 0.8 * rng.normal()));
        t += duration;
    }
}

/// Least-squares slope of ln(V̇O₂/HR), %/min, over the 180 s that end 20 s before the end.
fn late_slope(vo2: &[f64], hr: &[f64], end: usize) -> f64 {
    let (mut sxy, mut sxx) = (0.0, 0.0);
    for k in 0..=180_usize {
        let i = end - 200 + k;
        let x = (k as f64 - 90.0) / 60.0;
        sxy += x * libm::log(vo2[i] / hr[i]);
        sxx += x * x;
    }
    100.0 * sxy / sxx
}

/// The ramp of `seed` under `design`. The person and the noise depend on the seed alone, so that
/// two designs of one seed differ by the design only.
#[must_use]
pub fn simulate(design: &Design, seed: u64) -> Simulated {
    let p = person(design, &mut Rng::new(seed, 11));
    let (vo2, hr, ratio) = clean(design, &p);
    let [t_s, v, h] = measured(design, &p, &vo2, &hr, &mut Rng::new(seed, 12));
    let load_end_s = WARM_UP_S + 60.0 * design.ramp_min;
    let grid: Vec<f64> = (0..=load_end_s as usize).map(|i| i as f64).collect();
    let watts =
        grid.iter().map(|t| 250.0 * load_fraction(design, (t - WARM_UP_S) / 60.0)).collect();
    Simulated {
        t_s,
        vo2: v,
        hr: h,
        load: Trace { t_s: grid, value: watts },
        ramp_start_s: WARM_UP_S,
        load_end_s,
        late_slope: late_slope(&vo2, &hr, load_end_s as usize),
        ratio,
    }
}

/// Noise-free functionals of the shape: late over early slope of V̇O₂ on HR and the local slope
/// over O₂ pulse at the end, as the graded tests were summarised.
#[must_use]
pub fn shape_functionals(design: &Design, seed: u64) -> (f64, f64) {
    let p = person(design, &mut Rng::new(seed, 11));
    let slope = |a: f64, b: f64| (p.vo2.at(b) - p.vo2.at(a)) / (p.hr.at(b) - p.hr.at(a));
    let late = slope(0.7, 1.0);
    let early = slope(p.vo2.from.max(0.05), 0.7);
    (late / early, late / (p.vo2.at(1.0) / p.hr.at(1.0)))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A demand that levels the O₂ pulse for 5 min has, once the lags have passed, a true late
    /// slope near zero: the lag of 40 s and the plateaus leave at most about 1.5 %/min.
    #[test]
    fn level_is_level() {
        let mut normal = Design::normal(Null::Matched, 12.0);
        let mut mean = [0.0, 0.0];
        for seed in 0..40 {
            normal.broken = Break::None;
            mean[0] += simulate(&normal, seed).late_slope / 40.0;
            normal.broken = Break::Level { before_end_min: 5.0 };
            let level = simulate(&normal, seed).late_slope;
            assert!(level.abs() < 2.5, "seed {seed}: {level}");
            mean[1] += level / 40.0;
        }
        assert!(mean[0] > 3.0 && mean[1].abs() < 0.6, "{mean:?}");
    }

    /// Steps of one minute over ten: a tenth more load at the start of each minute.
    #[test]
    fn steps_rise_at_their_start() {
        let design = Design { step_min: 1.0, ..Design::normal(Null::Lin, 10.0) };
        let s = simulate(&design, 1);
        assert_eq!(s.load.at(s.ramp_start_s - 1.0), Some(0.0));
        assert_eq!(s.load.at(s.ramp_start_s), Some(25.0));
        assert_eq!(s.load.at(s.ramp_start_s + 59.0), Some(25.0));
        assert_eq!(s.load.at(s.load_end_s - 1.0), Some(250.0));
    }

    /// A break changes the person and the noise in nothing before its onset.
    #[test]
    fn one_seed_is_one_person() {
        let normal = Design::normal(Null::Mid, 10.0);
        let broken = Break::Ratio { ratio: 0.3, before_end_min: 3.0 };
        let (a, b) = (simulate(&normal, 5), simulate(&Design { broken, ..normal }, 5));
        assert_eq!(a.t_s, b.t_s);
        let before = a.t_s.partition_point(|t| *t < a.load_end_s - 181.0);
        assert_eq!(a.vo2[..before], b.vo2[..before]);
        assert!(b.late_slope < a.late_slope - 2.0);
    }
}
