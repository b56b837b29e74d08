//! VT1: hinge of V̇CO₂, cleaned of the noise it shares with V̇O₂, on smoothed V̇O₂ (V-slope after
//! Beaver, Wasserman and Whipp, J Appl Physiol 1986, in continuous form), up to VT2. Acceptance rules
//! tuned on simulated tests of seeds below 10,000; `assets/references/coverage.md` reports on others.

use super::guards::Checks;
use super::{Proposal, Threshold, VSlope};
use crate::hinge::{self, Points, Profile};
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::ramp_series::{self, RampSeries};
use crate::smooth;
use crate::stage::Stage;
use crate::unit::Unit;

/// Least data.
const LEAST_BREATHS: usize = 30;
const LEAST_S: f64 = 180.0;
/// Share of the data at each end without candidates.
const MARGIN: f64 = 0.12;
/// Least rise of slope that counts as a bend, and that may be proposed.
const CHANGE: f64 = 0.1;
const CHANGE_PROPOSED: f64 = 0.2;
/// Least evidence of a proposal; below the second, with low RER, VT1 was not reached.
const T_PROPOSED: f64 = 14.0;
const T_NOT_REACHED: f64 = 10.0;
/// Candidates at the start (where the CO₂ stores still fill) and at the end (where few breaths hold
/// the upper slope) at which a maximum is no threshold.
const EDGE: (usize, usize) = (5, 14);
/// Drop of the evidence that bounds the sharpness test, and the widest half width, relative.
const Q_SHARP: f64 = 7.5;
const WIDEST: f64 = 0.30;
/// Drop that bounds the 90 % interval.
const Q: f64 = 7.5;
/// Agreement needed with the hinge on plain 10-s means, relative.
const AGREE: f64 = 0.20;
/// End RER above which VT1 may be proposed, and under which it may count as not reached.
const RER_PROPOSED: f64 = 0.90;
const RER_NOT_REACHED: f64 = 0.95;

/// Proposes VT1, and the V-slope picture whenever it can be drawn.
pub(super) fn propose(
    stage: &Stage<'_>,
    checks: &Checks,
    vt2_s: Option<f64>,
) -> (Proposal, Option<VSlope>) {
    if let Some(reason) = stage.missing(&[Quantity::Vo2, Quantity::Vco2]) {
        return (Proposal::Absent(reason), None);
    }
    let Some(series) = &stage.ramp_series else {
        return (Proposal::Absent(stage.no_ramp()), None);
    };
    let upper = vt2_s.unwrap_or(series.ramp.1).min(series.ramp.1);
    let Some(data) = Data::new(series, upper) else {
        return (Proposal::Indeterminate(Note::new("ramp-too-short")), None);
    };
    let picture = data.picture();
    (data.decide(checks), Some(picture))
}

/// The breaths up to the upper limit, with the hinge over the candidates.
struct Data<'a> {
    series: &'a RampSeries,
    n: usize,
    vo2: &'a [f64],
    vco2: Vec<f64>,
    times: Vec<f64>,
    knots: Vec<f64>,
    profile: Profile,
}

impl<'a> Data<'a> {
    fn new(series: &'a RampSeries, upper: f64) -> Option<Self> {
        let n = series.until(upper);
        let length = upper - series.ramp.0 - ramp_series::FROM_S;
        let (vo2, vco2) = (series.vo2.as_ref()?, series.vco2.as_ref()?);
        if n < LEAST_BREATHS || length < LEAST_S {
            return None;
        }
        let from = series.ramp.0 + ramp_series::FROM_S + MARGIN * length;
        let times = hinge::candidate_times(from, upper - MARGIN * length);
        let top = ramp_series::running_max(&vo2.hat[..n]);
        let t_s = &series.t_s[..n];
        let knots: Vec<f64> =
            times.iter().filter_map(|t| ramp_series::interpolate(t_s, &top, *t)).collect();
        let mut y = smooth::cleaned(vco2, vo2);
        y.truncate(n);
        let x = &vo2.hat[..n];
        let w = weights(x);
        let points = Points { t_s, x, y: &y, w: &w };
        let profile = hinge::profile(&points, &knots, series.ramp.0, |f| f.change > CHANGE);
        Some(Self { series, n, vo2: x, vco2: y, times, knots, profile })
    }

    fn t_s(&self) -> &[f64] {
        &self.series.t_s[..self.n]
    }

    fn decide(&self, checks: &Checks) -> Proposal {
        if let Some(reason) = checks.failed() {
            return Proposal::Indeterminate(reason);
        }
        let rer = self.end_rer();
        let best = self.profile.best();
        let evidence = best.map_or(0.0, |i| self.profile.t[i]);
        match self.refused(best, rer) {
            None => {}
            Some(_)
                if evidence < T_NOT_REACHED
                    && rer < RER_NOT_REACHED
                    && self.ventilation_evidence() < T_NOT_REACHED =>
            {
                let rer = Arg::Number(rer, Unit::One);
                return Proposal::NotReached(Note::new("vt1-not-reached").with("rer", rer));
            }
            Some(reason) => return Proposal::Indeterminate(reason),
        }
        let Some(mut found) = best.and_then(|i| self.threshold(i)) else {
            return Proposal::Indeterminate(Note::new("vt1-no-bend"));
        };
        found.doubts.extend(checks.unchecked());
        Proposal::Proposed(found)
    }

    /// Which acceptance rule fails.
    fn refused(&self, best: Option<usize>, rer: f64) -> Option<Note> {
        let Some(best) = best else { return Some(Note::new("vt1-no-bend")) };
        let knot = self.knots[best];
        if self.profile.t[best] <= T_PROPOSED {
            return Some(Note::new("vt1-evidence-weak"));
        }
        let change = self.profile.fits[best].change;
        if change <= CHANGE_PROPOSED {
            let change = Arg::Number(change, Unit::One);
            return Some(Note::new("vt1-bend-slight").with("change", change));
        }
        if best < EDGE.0 || best + EDGE.1 >= hinge::CANDIDATES {
            return Some(Note::new("threshold-at-edge"));
        }
        let (low, high) = self.set(best, Q_SHARP);
        let half = 50.0 * (self.knots[high] - self.knots[low]) / knot;
        if half > 100.0 * WIDEST {
            let half = Arg::Number(half, Unit::Percent);
            return Some(Note::new("vt1-not-sharp").with("half-width", half));
        }
        match self.ten_second_knot() {
            Some(other) if (other / knot - 1.0).abs() <= AGREE => {}
            Some(other) => {
                let other = Arg::Number(other, Unit::MlPerMin);
                return Some(Note::new("vt1-methods-disagree").with("other", other));
            }
            None => return Some(Note::new("vt1-no-bend-in-10s-means")),
        }
        if rer <= RER_PROPOSED {
            let rer = Arg::Number(rer, Unit::One);
            return Some(Note::new("vt1-rer-low").with("rer", rer));
        }
        None
    }

    /// First and last candidate whose evidence is within `q` of the best.
    fn set(&self, best: usize, q: f64) -> (usize, usize) {
        let near = |i: &usize| self.profile.t[best] - self.profile.t[*i] <= q;
        let all = 0..self.knots.len();
        (all.clone().find(near).unwrap_or(best), all.rev().find(near).unwrap_or(best))
    }

    fn threshold(&self, best: usize) -> Option<Threshold> {
        let vo2 = self.knots[best];
        let t_s = ramp_series::first_passage(self.t_s(), self.vo2, vo2)?;
        let (first, last) = self.set(best, Q);
        let mut doubts = vec![Note::new("threshold-interval-simulated")];
        if first == 0 || last + 1 == self.knots.len() {
            doubts.push(Note::new("interval-at-limit"));
        }
        Some(Threshold { t_s, vo2, low: self.knots[first], high: self.knots[last], doubts })
    }

    /// RER of the last 12 smoothed breaths.
    fn end_rer(&self) -> f64 {
        let last = self.n.saturating_sub(12)..self.n;
        let hat = self.series.vco2.as_ref().map_or(&[][..], |v| &v.hat[..]);
        let carbon: f64 = hat.get(last.clone()).unwrap_or(&[]).iter().sum();
        carbon / self.vo2[last].iter().sum::<f64>()
    }

    /// Evidence of a bend of V̇E on V̇O₂; 0 without V̇E.
    fn ventilation_evidence(&self) -> f64 {
        let Some((ve, vo2)) = self.series.ve.as_ref().zip(self.series.vo2.as_ref()) else {
            return 0.0;
        };
        let mut y = smooth::cleaned(ve, vo2);
        y.truncate(self.n);
        let w = weights(self.vo2);
        let points = Points { t_s: self.t_s(), x: self.vo2, y: &y, w: &w };
        let profile = hinge::profile(&points, &self.knots, self.series.ramp.0, |f| f.change > 0.0);
        profile.t.iter().copied().fold(0.0, f64::max)
    }

    /// Knot of the hinge on plain 10-s means, same limits.
    fn ten_second_knot(&self) -> Option<f64> {
        let (vo2, vco2) = (self.series.vo2.as_ref()?, self.series.vco2.as_ref()?);
        let (mut t, mut x, mut y) = (Vec::new(), Vec::new(), Vec::new());
        let mut current = f64::NAN;
        let mut total = 0.0;
        for i in 0..self.n {
            let bin = ((self.series.t_s[i] - self.series.ramp.0) / 10.0).floor();
            let d = self.series.d_s[i];
            if bin != current {
                (current, total) = (bin, 0.0);
                for column in [&mut t, &mut x, &mut y] {
                    column.push(0.0);
                }
            }
            total += d;
            let values = [self.series.t_s[i], vo2.raw[i], vco2.raw[i]];
            for (column, value) in [&mut t, &mut x, &mut y].into_iter().zip(values) {
                if let Some(mean) = column.last_mut() {
                    *mean += d / total * (value - *mean);
                }
            }
        }
        let w = weights(&x);
        let points = Points { t_s: &t, x: &x, y: &y, w: &w };
        let profile =
            hinge::profile(&points, &self.knots, self.series.ramp.0, |f| f.change > CHANGE);
        profile.best().map(|i| self.knots[i])
    }

    fn picture(&self) -> VSlope {
        let mut picture = VSlope {
            t_s: self.t_s().to_vec(),
            vo2: self.vo2.to_vec(),
            vco2: self.vco2.clone(),
            profile: self.times.iter().copied().zip(self.profile.t.iter().copied()).collect(),
            ..VSlope::default()
        };
        if let Some(best) = self.profile.best() {
            let (fit, knot) = (self.profile.fits[best], self.knots[best]);
            let model = |x: f64| fit.before * (x - knot) + fit.change * (x - knot).max(0.0);
            let w = weights(self.vo2);
            let total: f64 = w.iter().sum();
            let rest = (0..self.n).map(|i| w[i] * (self.vco2[i] - model(self.vo2[i])));
            picture.knot = Some(knot);
            picture.at_knot = rest.sum::<f64>() / total;
            picture.before = fit.before;
            picture.after = fit.after();
        }
        picture
    }
}

/// Noise grows with the response: (mean / x)².
fn weights(x: &[f64]) -> Vec<f64> {
    let mean = crate::regression::mean(x);
    x.iter().map(|x| (mean / x) * (mean / x)).collect()
}
