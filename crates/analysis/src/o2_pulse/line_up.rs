//! The measured course among simulated ones of people without disease: can the eye find it?
//!
//! The others have this test's ramp, its early slopes of V̇O₂ and HR carried on, and its noise; each
//! has a natural bend of its own, drawn from the spread of trained adults that the recipe itself
//! assumes. After Buja et al. 2009 (a line-up as a test by eye; from memory).

use super::bins::LEAD_S;
use super::detail::{Bin, CourseDetail, CurvePoint};
use super::fit::Variable;
use crate::model::rng::Rng;

/// Courses shown, the measured one among them.
pub const COURSES: usize = 12;

/// Twelve courses of the O₂ pulse.
#[derive(Clone, Debug, PartialEq)]
pub struct LineUp {
    /// Each course: (s, mL/beat) in 10-s bins.
    pub courses: Vec<Vec<(f64, f64)>>,
    /// Place of the measured one, from 0.
    pub own: usize,
}

/// Slow and white noise of one variable about its curve, as this test has it early and late.
struct Noise {
    sd: (f64, f64),
    lag_one: f64,
}

impl Noise {
    fn of(residual: &[f64]) -> Self {
        let half = residual.len() / 2;
        let sd = |x: &[f64]| (x.iter().map(|r| r * r).sum::<f64>() / x.len().max(1) as f64).sqrt();
        let square: f64 = residual.iter().map(|r| r * r).sum();
        let next: f64 = residual.windows(2).map(|w| w[0] * w[1]).sum();
        let lag_one = if square > 0.0 { (next / square).clamp(0.0, 0.8) } else { 0.0 };
        Self { sd: (sd(&residual[..half]), sd(&residual[half..])), lag_one }
    }

    fn draw(&self, n: usize, rng: &mut Rng) -> Vec<f64> {
        let fresh = (1.0 - self.lag_one * self.lag_one).sqrt();
        let mut state = rng.normal();
        (0..n)
            .map(|k| {
                let along = k as f64 / (n - 1).max(1) as f64;
                let value = state * (self.sd.0 + (self.sd.1 - self.sd.0) * along);
                state = self.lag_one * state + fresh * rng.normal();
                value
            })
            .collect()
    }
}

/// One variable of a person without disease: early line and natural bend.
fn natural(variable: Variable, start: f64, rise: f64, along: &[f64], rng: &mut Rng) -> Vec<f64> {
    let prior = variable.prior(rise.abs());
    let even = prior.mean.0 + prior.sd.0 * rng.normal();
    let odd = prior.mean.1 + prior.sd.1 * rng.normal();
    along
        .iter()
        .map(|u| {
            let bend = even * (u * u - u) + odd * (u * u * u - 1.5 * u * u + 0.5 * u);
            start + rise * u + bend
        })
        .collect()
}

/// A seed from the bits of the data, so that one test always gives one line-up.
fn seed(bins: &[Bin]) -> u64 {
    bins.iter().fold(0x9E37_79B9_7F4A_7C15, |seed: u64, bin| {
        (seed.rotate_left(7) ^ bin.vo2.to_bits() ^ bin.hr.to_bits().rotate_left(23))
            .wrapping_mul(0x0000_0100_0000_01B3)
    })
}

fn residual(bins: &[Bin], curve: &[CurvePoint], of: impl Fn(&Bin, &CurvePoint) -> f64) -> Vec<f64> {
    bins.iter().zip(curve).map(|(b, c)| of(b, c)).collect()
}

/// The line-up of a fitted course; `None` where there are no curves.
#[must_use]
pub fn line_up(detail: &CourseDetail) -> Option<LineUp> {
    let (bins, early) = (&detail.bins, detail.early?);
    let (first, last) = (bins.first()?.t_s, bins.last()?.t_s);
    if bins.len() < 12 || detail.curve.len() != bins.len() || last <= first {
        return None;
    }
    let vo2_noise = Noise::of(&residual(bins, &detail.curve, |b, c| b.vo2 - c.vo2));
    let hr_noise = Noise::of(&residual(bins, &detail.curve, |b, c| b.hr - c.hr));
    let (from, to) = (detail.ramp_s.0 + LEAD_S, last);
    let along: Vec<f64> = bins.iter().map(|b| (b.t_s - from) / (to - from)).collect();
    let (at_start, at_end) = (early.at(from), early.at(to));
    let seed = seed(bins);
    let own = (Rng::new(seed, 0).uniform() * COURSES as f64) as usize % COURSES;
    let courses = (0..COURSES)
        .map(|place| {
            if place == own {
                return bins.iter().map(|b| (b.t_s, b.vo2 / b.hr)).collect();
            }
            let mut rng = Rng::new(seed, 1 + place as u32);
            let (v, h) = (at_start.0, at_start.1);
            let vo2 = natural(Variable::Vo2, v, at_end.0 - v, &along, &mut rng);
            let hr = natural(Variable::Hr, h, at_end.1 - h, &along, &mut rng);
            let noise = (vo2_noise.draw(bins.len(), &mut rng), hr_noise.draw(bins.len(), &mut rng));
            (0..bins.len())
                .map(|k| (bins[k].t_s, (vo2[k] + noise.0[k]) / (hr[k] + noise.1[k])))
                .collect()
        })
        .collect();
    Some(LineUp { courses, own })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::model::course_sim::{Break, Design, Null, simulate};
    use crate::o2_pulse::classify;

    fn detail(broken: Break, seed: u64) -> CourseDetail {
        let s = simulate(&Design { broken, ..Design::normal(Null::Matched, 10.0) }, seed);
        classify(&s.input()).unwrap()
    }

    #[test]
    fn one_test_gives_one_line_up_and_its_own_course_stands_in_it() {
        let detail = detail(Break::None, 4);
        let (a, b) = (line_up(&detail).unwrap(), line_up(&detail).unwrap());
        assert_eq!(a, b);
        assert_eq!(a.courses.len(), COURSES);
        let own = &a.courses[a.own];
        assert!(own.iter().zip(&detail.bins).all(|(p, b)| *p == (b.t_s, b.vo2 / b.hr)));
        assert!(a.courses.iter().flatten().all(|p| p.1.is_finite() && p.1 > 0.0));
    }

    #[test]
    fn places_differ_between_tests() {
        let places: Vec<usize> =
            (0..20).map(|s| line_up(&detail(Break::None, s)).unwrap().own).collect();
        let mut distinct = places.clone();
        distinct.sort_unstable();
        distinct.dedup();
        assert!(distinct.len() > 4, "{places:?}");
    }

    /// Change of the O₂ pulse from the middle third to the last: a steep fall is the lowest of the
    /// twelve, a normal course is not always.
    #[test]
    fn a_steep_fall_stands_out_and_a_normal_course_does_not() {
        let rank = |detail: &CourseDetail| {
            let l = line_up(detail).unwrap();
            let change = |c: &Vec<(f64, f64)>| {
                let n = c.len() / 3;
                let mean = |x: &[(f64, f64)]| x.iter().map(|p| p.1).sum::<f64>() / x.len() as f64;
                mean(&c[2 * n..]) / mean(&c[n..2 * n])
            };
            let own = change(&l.courses[l.own]);
            l.courses.iter().filter(|c| change(c) < own).count()
        };
        let fall = Break::Ratio { ratio: 0.15, before_end_min: 4.0 };
        let falls: Vec<usize> = (0..10).map(|s| rank(&detail(fall, s))).collect();
        assert!(falls.iter().filter(|r| **r <= 1).count() >= 9, "{falls:?}");
        let normal: usize = (0..20).map(|s| rank(&detail(Break::None, s))).sum();
        // Uniform places have a mean rank of 5.5; the mean of 20 has an SD of 0.8.
        assert!((60..165).contains(&normal), "{normal}");
    }

    #[test]
    fn without_curves_there_is_none() {
        assert_eq!(line_up(&CourseDetail::default()), None);
    }
}
