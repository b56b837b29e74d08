//! The continuous broken line y = a + b·x + c·(x − k)₊ with the knot anywhere: exact least squares,
//! and block replicates of it.
//!
//! With r the residual of y from one line and h the hinge (x − k)₊ made orthogonal to [1, x], the
//! sum of squares falls by (h·r)²/(h·h). Between two neighbouring x the numerator is (A − k·B)²
//! with A = Σ x·r and B = Σ r over the points beyond, and the denominator is a square in k of x
//! alone, so the best knot of each interval is closed form and one pass over the points is exact.

use core::array;

use crate::model::rng::philox;

/// Replicates computed side by side.
const LANES: usize = 8;

/// The broken line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BrokenLine {
    /// Where the slope changes, in the unit of x.
    pub knot: f64,
    /// Slope before the knot.
    pub before: f64,
    /// Slope after the knot.
    pub after: f64,
    /// Value at x = 0.
    pub intercept: f64,
    /// Sum of squared residuals.
    pub rss: f64,
}

impl BrokenLine {
    /// The value at `x`.
    #[must_use]
    pub fn at(&self, x: f64) -> f64 {
        self.intercept + self.before * x + (self.after - self.before) * (x - self.knot).max(0.0)
    }
}

/// One interval between neighbouring x: its upper end is a candidate, points from there lie beyond.
#[derive(Clone, Copy, Debug)]
struct Interval {
    from: f64,
    to: f64,
    /// h·h = q0 + q1·k + q2·k².
    q: [f64; 3],
    /// Σ 1, Σ u, Σ u² over the points beyond.
    beyond: [f64; 3],
}

impl Interval {
    fn square(&self, k: f64) -> f64 {
        self.q[0] + k * (self.q[1] + k * self.q[2])
    }

    /// The best knot inside and its gain, from A and B.
    fn best(&self, a: f64, b: f64) -> (f64, f64) {
        let [q0, q1, q2] = self.q;
        let inner = -(2.0 * b * q0 + a * q1) / (2.0 * a * q2 + b * q1);
        let inner = if inner.is_finite() { inner.clamp(self.from, self.to) } else { self.from };
        let gain = |k: f64| (a - k * b) * (a - k * b) / self.square(k);
        // The stationary point may be the least of the interval; its ends are tried as well.
        [inner, self.from, self.to]
            .map(|k| (k, gain(k)))
            .into_iter()
            .fold((inner, 0.0), |m, c| if c.1 > m.1 { c } else { m })
    }
}

/// All that depends on x alone, shared by the replicates.
#[derive(Clone, Debug)]
pub struct Design {
    /// x less its mean, rising.
    u: Vec<f64>,
    mean: f64,
    uu: f64,
    /// First point that may lie beyond a knot, and the intervals from there.
    margin: usize,
    intervals: Vec<Interval>,
}

impl Design {
    /// For rising `x`, with at least `margin` (one or more) points on either side of the knot.
    /// `None` where no knot is possible.
    #[must_use]
    pub fn new(x: &[f64], margin: usize) -> Option<Self> {
        let n = x.len();
        if margin == 0 || n < 2 * margin + 1 || !x.windows(2).all(|w| w[0] <= w[1]) {
            return None;
        }
        let mean = x.iter().sum::<f64>() / n as f64;
        let u: Vec<f64> = x.iter().map(|x| x - mean).collect();
        let uu: f64 = u.iter().map(|u| u * u).sum();
        let count = n as f64;
        let mut beyond = [0.0; 3];
        let mut intervals = Vec::with_capacity(n - 2 * margin);
        for i in (margin..n).rev() {
            beyond = [beyond[0] + 1.0, beyond[1] + u[i], beyond[2] + u[i] * u[i]];
            if i >= n - margin {
                continue;
            }
            let [c, s1, s2] = beyond;
            let q = [
                s2 - s1 * s1 / count - s2 * s2 / uu,
                2.0 * (s1 * c / count - s1 + s1 * s2 / uu),
                c - c * c / count - s1 * s1 / uu,
            ];
            intervals.push(Interval { from: u[i - 1], to: u[i], q, beyond });
        }
        intervals.reverse();
        (uu > 0.0 && uu.is_finite()).then_some(Self { u, mean, uu, margin, intervals })
    }

    /// The best broken line through `y`; `None` where `y` has another length or is not finite.
    #[must_use]
    pub fn fit(&self, y: &[f64]) -> Option<BrokenLine> {
        let n = self.u.len();
        if y.len() != n || !y.iter().all(|y| y.is_finite()) {
            return None;
        }
        let my = y.iter().sum::<f64>() / n as f64;
        let slope = self.u.iter().zip(y).map(|(u, y)| u * y).sum::<f64>() / self.uu;
        let r = |i: usize| y[i] - my - slope * self.u[i];
        let (mut a, mut b) = (0.0, 0.0);
        let mut best = (0, self.intervals[0].from, 0.0, 0.0);
        for i in (self.margin..n).rev() {
            (a, b) = (a + self.u[i] * r(i), b + r(i));
            let at = i - self.margin;
            if let Some(interval) = self.intervals.get(at) {
                let (k, gain) = interval.best(a, b);
                if gain > best.2 {
                    best = (at, k, gain, (a - k * b) / interval.square(k));
                }
            }
        }
        let (at, k, gain, change) = best;
        let squares: f64 = (0..n).map(|i| r(i) * r(i)).sum();
        Some(self.line(at, k, change, my, slope, squares - gain))
    }

    /// The broken line with its change of slope at the knot, from the one straight line.
    fn line(&self, at: usize, k: f64, change: f64, my: f64, slope: f64, rss: f64) -> BrokenLine {
        let [c, s1, s2] = self.intervals[at].beyond;
        let before = slope - change * (s2 - k * s1) / self.uu;
        let level = my - change * (s1 - k * c) / self.u.len() as f64;
        BrokenLine {
            knot: k + self.mean,
            before,
            after: before + change,
            intercept: level - before * self.mean,
            rss,
        }
    }

    /// Knot and later slope of `count` replicates of `fit` to `y`: its residuals drawn in blocks of
    /// `block` neighbours and added to it. Knots at observed x, moved to the best place of the two
    /// intervals beside. The same `seed` gives the same replicates. Nothing is allocated per
    /// replicate.
    #[must_use]
    pub fn replicates(
        &self,
        y: &[f64],
        fit: &BrokenLine,
        count: usize,
        block: usize,
        seed: u64,
    ) -> Vec<Replicate> {
        let n = self.u.len();
        let mut out = Vec::with_capacity(count + LANES);
        if y.len() != n || block == 0 || block > n {
            return out;
        }
        let residual: Vec<f64> =
            self.u.iter().zip(y).map(|(u, y)| y - fit.at(u + self.mean)).collect();
        let (knots, straight) = self.knots(fit);
        let mut drawn = vec![[0.0; LANES]; n];
        let mut scan = vec![Scan::default(); knots.len()];
        while out.len() < count {
            for lane in 0..LANES {
                draw(&mut drawn, lane, &residual, block, seed, out.len() + lane);
            }
            let (at, line) = self.scan(&drawn, &knots, &mut scan);
            out.extend(
                (0..LANES).map(|l| self.refined(&knots, &scan, l, at[l], line[l], straight)),
            );
        }
        out.truncate(count);
        out
    }

    /// The observed knots with the part of the fit that every replicate shares, and the slope of
    /// one straight line through the fit.
    fn knots(&self, fit: &BrokenLine) -> (Vec<Knot>, f64) {
        let n = self.u.len();
        let change = fit.after - fit.before;
        // What the fit itself adds: its hinge less the line through it.
        let bend = |u: &f64| change * (u + self.mean - fit.knot).max(0.0);
        let middle = self.u.iter().map(bend).sum::<f64>() / n as f64;
        let slope = self.u.iter().map(|u| u * bend(u)).sum::<f64>() / self.uu;
        let (mut a, mut b) = (0.0, 0.0);
        let mut knots = Vec::with_capacity(self.intervals.len());
        for i in (self.margin..n).rev() {
            let r = bend(&self.u[i]) - middle - slope * self.u[i];
            (a, b) = (a + self.u[i] * r, b + r);
            if let Some(interval) = self.intervals.get(i - self.margin) {
                let ([c, s1, s2], k) = (interval.beyond, interval.to);
                let square = interval.square(k);
                let per_square = if square > 0.0 { 1.0 / square } else { 0.0 };
                let (h1, hu) = (s1 - k * c, s2 - k * s1);
                knots.push(Knot { own: a - k * b, h1, hu, per_square, a, b });
            }
        }
        knots.reverse();
        (knots, fit.before + slope)
    }

    /// One pass from the right over all lanes: the best observed knot of each, and the straight
    /// line through each lane's draw. Leaves the running sums in `scan`.
    fn scan(
        &self,
        e: &[[f64; LANES]],
        knots: &[Knot],
        scan: &mut [Scan],
    ) -> ([usize; LANES], [(f64, f64); LANES]) {
        let n = self.u.len();
        let (mut sum, mut ue) = ([0.0; LANES], [0.0; LANES]);
        for (u, e) in self.u.iter().zip(e) {
            for ((sum, ue), e) in sum.iter_mut().zip(&mut ue).zip(e) {
                *sum += e;
                *ue += u * e;
            }
        }
        let level = sum.map(|s| s / n as f64);
        let slope = ue.map(|s| s / self.uu);
        let mut now = Scan::default();
        let (mut top, mut at) = ([0.0_f64; LANES], [0.0; LANES]);
        let mut right = self.u[n - 1];
        for i in (self.margin..n).rev() {
            // Σ (u − k)·e over the points beyond k, taken from one point to the next.
            let step = right - self.u[i];
            right = self.u[i];
            for ((hinge, beyond), e) in now.hinge.iter_mut().zip(&mut now.beyond).zip(&e[i]) {
                *hinge += step * *beyond;
                *beyond += e;
            }
            let place = i - self.margin;
            let Some(knot) = knots.get(place) else { continue };
            scan[place] = now;
            for l in 0..LANES {
                let h = now.hinge[l] + knot.own - level[l] * knot.h1 - slope[l] * knot.hu;
                let gain = h * h * knot.per_square;
                at[l] = if gain > top[l] { place as f64 } else { at[l] };
                top[l] = top[l].max(gain);
            }
        }
        (at.map(|a| a as usize), array::from_fn(|l| (level[l], slope[l])))
    }

    /// The best knot of the intervals on both sides of observed knot `at` in lane `l`.
    fn refined(
        &self,
        knots: &[Knot],
        scan: &[Scan],
        l: usize,
        at: usize,
        (level, slope): (f64, f64),
        straight: f64,
    ) -> Replicate {
        let mut best = (at, self.intervals[at].to, 0.0, 0.0);
        for place in at..(at + 2).min(self.intervals.len()) {
            let (interval, knot, sums) = (&self.intervals[place], &knots[place], &scan[place]);
            let [c, s1, s2] = interval.beyond;
            let b = knot.b + sums.beyond[l] - level * c - slope * s1;
            let ue = sums.hinge[l] + interval.to * sums.beyond[l];
            let a = knot.a + ue - level * s1 - slope * s2;
            let (k, gain) = interval.best(a, b);
            if gain > best.2 {
                best = (place, k, gain, (a - k * b) / interval.square(k));
            }
        }
        let line = self.line(best.0, best.1, best.3, 0.0, straight + slope, 0.0);
        Replicate { knot: line.knot, after: line.after }
    }
}

/// What a replicate keeps.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Replicate {
    /// Where the slope changes.
    pub knot: f64,
    /// Slope after it.
    pub after: f64,
}

/// The hinge at an observed x.
struct Knot {
    /// Its product with the fit that the replicates share.
    own: f64,
    /// h·1 and h·u.
    h1: f64,
    hu: f64,
    /// 1 / (h·h) of the part orthogonal to the line.
    per_square: f64,
    /// A and B of the shared fit.
    a: f64,
    b: f64,
}

/// Sums over the points beyond a knot k of what was drawn.
#[derive(Clone, Copy, Debug, Default)]
struct Scan {
    /// Σ (u − k)·e.
    hinge: [f64; LANES],
    /// Σ e.
    beyond: [f64; LANES],
}

/// Puts the residuals of replicate number `replicate` into lane `lane`.
fn draw(
    drawn: &mut [[f64; LANES]],
    lane: usize,
    residual: &[f64],
    block: usize,
    seed: u64,
    replicate: usize,
) {
    let n = residual.len();
    let starts = (n - block + 1) as u64;
    let key = [seed as u32, (seed >> 32) as u32];
    let mut words = [0; 4];
    for (k, from) in (0..n).step_by(block).enumerate() {
        if k % 4 == 0 {
            words = philox([(k / 4) as u32, replicate as u32, 0, 0], key);
        }
        let start = ((u64::from(words[k % 4]) * starts) >> 32) as usize;
        let to = (from + block).min(n);
        for (place, r) in drawn[from..to].iter_mut().zip(&residual[start..]) {
            place[lane] = *r;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bent(noise: impl Fn(usize) -> f64) -> (Vec<f64>, Vec<f64>) {
        let x: Vec<f64> = (0..60).map(|k| 0.5 * k as f64).collect();
        let y = (0..60).map(|i| 3.0 + 2.0 * x[i] - 1.5 * (x[i] - 17.3).max(0.0) + noise(i));
        let y = y.collect();
        (x, y)
    }

    #[test]
    fn a_noiseless_bend_between_two_points_is_recovered() {
        let (x, y) = bent(|_| 0.0);
        let fit = Design::new(&x, 5).unwrap().fit(&y).unwrap();
        assert!((fit.knot - 17.3).abs() < 1e-9);
        assert!((fit.before - 2.0).abs() < 1e-12 && (fit.after - 0.5).abs() < 1e-12);
        assert!((fit.intercept - 3.0).abs() < 1e-11 && fit.rss.abs() < 1e-9);
        assert!((fit.at(20.0) - (3.0 + 40.0 - 1.5 * 2.7)).abs() < 1e-10);
    }

    #[test]
    fn no_knot_without_room_or_spread() {
        assert!(Design::new(&[1.0, 2.0, 3.0, 4.0], 2).is_none());
        assert!(Design::new(&[1.0, 2.0, 3.0, 4.0, 5.0], 2).is_some());
        assert!(Design::new(&[1.0; 20], 2).is_none());
        assert!(Design::new(&[1.0, 3.0, 2.0, 4.0, 5.0], 2).is_none());
        let design = Design::new(&[1.0, 2.0, 3.0, 4.0, 5.0], 2).unwrap();
        assert!(design.fit(&[1.0; 4]).is_none() && design.fit(&[f64::NAN; 5]).is_none());
    }

    #[test]
    fn a_replicate_is_the_fit_to_its_own_draw() {
        let (x, y) = bent(|i| [0.8, -0.5, 0.1, -0.9, 0.6, -0.2, 0.3][i % 7]);
        let design = Design::new(&x, 5).unwrap();
        let fit = design.fit(&y).unwrap();
        let all = design.replicates(&y, &fit, 20, 5, 9);
        assert_eq!(all.len(), 20);
        // A longer run begins with the shorter one.
        assert_eq!(design.replicates(&y, &fit, 50, 5, 9)[..20], all);
        assert_ne!(design.replicates(&y, &fit, 20, 5, 10), all);
        let model: Vec<f64> = x.iter().map(|x| fit.at(*x)).collect();
        let residual: Vec<f64> = y.iter().zip(&model).map(|(y, m)| y - m).collect();
        let mut drawn = vec![[0.0; LANES]; 60];
        for l in 0..LANES {
            draw(&mut drawn, l, &residual, 5, 9, 8 + l);
            let y: Vec<f64> = drawn.iter().zip(&model).map(|(row, m)| m + row[l]).collect();
            let own = design.fit(&y).unwrap();
            assert!((own.knot - all[8 + l].knot).abs() < 1e-8);
            assert!((own.after - all[8 + l].after).abs() < 1e-10);
        }
    }
}
