//! The breaths of the increments as every fit uses them: whole breaths from one minute after the
//! start of the increments to load end, smoothed once.

use crate::breaths::Breaths;
use crate::long_run;
use crate::quantity::Quantity;
use crate::regression;
use crate::smooth::{self, Smoothed};

/// Start of all fits after the start of the increments, s.
pub(crate) const FROM_S: f64 = 60.0;
/// Bins of the long-run variance, s.
pub(crate) const BIN_S: f64 = 10.0;
/// Lag-1 correlation of breath residuals above which an export counts as averaged already.
const PRE_SMOOTHED: f64 = 0.3;

/// Series of the increments. A channel that the recording lacks is `None`.
#[derive(Clone, Debug, Default)]
pub(crate) struct RampSeries {
    /// Start and end of the increments, s.
    pub ramp: (f64, f64),
    /// Middle of each breath, s.
    pub t_s: Vec<f64>,
    /// Duration of each breath, s.
    pub d_s: Vec<f64>,
    pub vo2: Option<Smoothed>,
    pub vco2: Option<Smoothed>,
    pub ve: Option<Smoothed>,
    /// End-tidal CO₂, single missing values bridged.
    pub petco2: Option<Vec<f64>>,
    /// Whether the export looks averaged over a few breaths.
    pub pre_smoothed: bool,
}

impl RampSeries {
    /// Cuts and smooths the breaths of `ramp`; breaths that lack a gas channel the table otherwise
    /// holds are skipped.
    pub fn new(breaths: &Breaths, ramp: (f64, f64)) -> Self {
        let (end, d) = (breaths.end_s(), breaths.duration_s());
        let inside: Vec<usize> = (0..breaths.len())
            .filter(|i| end[*i] - d[*i] >= ramp.0 + FROM_S - 1e-9 && end[*i] <= ramp.1 + 1e-9)
            .collect();
        let filled = |q: Quantity, share: f64| {
            let column = breaths.column(q)?;
            let known = inside.iter().filter(|i| column[**i].is_some()).count();
            (known as f64 > share * inside.len() as f64).then_some(column)
        };
        let gas = [Quantity::Vo2, Quantity::Vco2, Quantity::Ve].map(|q| filled(q, 0.5));
        let rows: Vec<usize> = inside
            .iter()
            .copied()
            .filter(|i| gas.iter().flatten().all(|c| c[*i].is_some_and(|x| x > 0.0)))
            .collect();
        let t_s: Vec<f64> = rows.iter().map(|i| breaths.mid_s(*i)).collect();
        let [vo2, vco2, ve] = gas.map(|c| {
            let raw = rows.iter().map(|i| c?[*i]).collect::<Option<Vec<f64>>>()?;
            (raw.len() >= 6).then(|| Smoothed::new(&t_s, raw))
        });
        let petco2 = filled(Quantity::Petco2, 0.5)
            .and_then(|c| bridge(&t_s, &rows.iter().map(|i| c[*i]).collect::<Vec<_>>()));
        let pre_smoothed = [&vo2, &vco2, &ve]
            .into_iter()
            .flatten()
            .next()
            .is_some_and(|x| smooth::lag_one(&x.relative) > PRE_SMOOTHED);
        let d_s = rows.iter().map(|i| d[*i]).collect();
        Self { ramp, t_s, d_s, vo2, vco2, ve, petco2, pre_smoothed }
    }

    /// Breaths in the fits.
    pub fn len(&self) -> usize {
        self.t_s.len()
    }

    /// First and last instant, s.
    pub fn span(&self) -> Option<(f64, f64)> {
        Some((*self.t_s.first()?, *self.t_s.last()?))
    }

    /// Number of breaths whose middle lies before `t_s`.
    pub fn until(&self, t_s: f64) -> usize {
        self.t_s.partition_point(|t| *t <= t_s)
    }

    /// Mean rise of V̇O₂ over the increments, mL/min per s.
    pub fn vo2_rise(&self) -> Option<f64> {
        let vo2 = self.vo2.as_ref()?;
        regression::line(&self.t_s, &vo2.raw).map(|l| l.slope)
    }

    /// Relative long-run noise of V̇O₂ per breath: √LR of (V̇O₂ − cubic in time) / V̇O₂^.
    pub fn vo2_noise(&self) -> Option<f64> {
        let vo2 = self.vo2.as_ref()?;
        let mut residual = vo2.raw.clone();
        regression::remove_polynomial(&self.t_s, &mut residual, 3);
        for (r, hat) in residual.iter_mut().zip(&vo2.hat) {
            *r /= hat;
        }
        let lr = long_run::variance(&self.t_s, &residual, self.ramp.0, BIN_S);
        Some(lr.sqrt()).filter(|s| s.is_finite())
    }

    /// Value of `x` (one per breath) at `t_s`, on the line between the neighbouring breaths.
    pub fn at(&self, x: &[f64], t_s: f64) -> Option<f64> {
        interpolate(&self.t_s, x, t_s)
    }

    /// Standard error of V̇O₂^ at one instant: noise over the breaths within ±45 s.
    pub fn vo2_error(&self, t_s: f64, vo2: f64) -> Option<f64> {
        let near = self.until(t_s + smooth::HALF_S) - self.until(t_s - smooth::HALF_S);
        let error = vo2 * self.vo2_noise()? / (near.max(1) as f64).sqrt();
        Some(error).filter(|e| e.is_finite())
    }
}

/// Linear interpolation, held at the ends; `None` without points.
pub(crate) fn interpolate(t_s: &[f64], x: &[f64], t: f64) -> Option<f64> {
    let i = t_s.partition_point(|s| *s <= t);
    if i == 0 || i == t_s.len() {
        return if i == 0 { x.first().copied() } else { x.last().copied() };
    }
    let share = (t - t_s[i - 1]) / (t_s[i] - t_s[i - 1]);
    Some(x[i - 1] + share * (x[i] - x[i - 1]))
}

/// Running maximum.
pub(crate) fn running_max(x: &[f64]) -> Vec<f64> {
    let mut top = f64::MIN;
    x.iter()
        .map(|x| {
            top = top.max(*x);
            top
        })
        .collect()
}

/// Time at which the running maximum of `x` first reaches `level`.
pub(crate) fn first_passage(t_s: &[f64], x: &[f64], level: f64) -> Option<f64> {
    let i = x.iter().position(|x| *x >= level)?;
    if i == 0 || x[i] <= x[i - 1] {
        return Some(t_s[i]);
    }
    let share = (level - x[i - 1]) / (x[i] - x[i - 1]);
    Some(t_s[i - 1] + share.clamp(0.0, 1.0) * (t_s[i] - t_s[i - 1]))
}

/// Fills single missing values from their neighbours in time.
fn bridge(t_s: &[f64], column: &[Option<f64>]) -> Option<Vec<f64>> {
    let (t, x): (Vec<f64>, Vec<f64>) =
        t_s.iter().zip(column).filter_map(|(t, v)| Some((*t, (*v)?))).unzip();
    column.iter().zip(t_s).map(|(v, s)| v.or_else(|| interpolate(&t, &x, *s))).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rising(n: u32) -> Breaths {
        let end: Vec<f64> = (1..=n).map(|k| 3.0 * f64::from(k)).collect();
        let vo2 = end.iter().map(|t| Some(500.0 + 2.0 * t)).collect();
        let petco2 = (0..n).map(|k| (k % 7 != 3).then_some(40.0)).collect();
        let columns = [(Quantity::Vo2, vo2), (Quantity::Petco2, petco2)].into();
        Breaths::new(end, None, columns).unwrap()
    }

    #[test]
    fn whole_breaths_of_the_increments_only() {
        let series = RampSeries::new(&rising(200), (100.0, 500.0));
        // Breaths from 162 s to 498 s: 112 of 3 s.
        assert_eq!(series.len(), 112);
        assert_eq!(series.span(), Some((163.5, 496.5)));
        assert!(series.vco2.is_none() && !series.pre_smoothed);
        assert!((series.vo2_rise().unwrap() - 2.0).abs() < 1e-9);
        assert!(series.petco2.unwrap().iter().all(|p| *p == 40.0));
    }

    #[test]
    fn interpolation_and_first_passage() {
        let (t, x) = ([0.0, 10.0, 20.0], [1.0, 3.0, 2.0]);
        assert_eq!(interpolate(&t, &x, 5.0), Some(2.0));
        assert_eq!(interpolate(&t, &x, -1.0), Some(1.0));
        assert_eq!(interpolate(&t, &x, 99.0), Some(2.0));
        assert_eq!(first_passage(&t, &x, 2.5), Some(7.5));
        assert_eq!(first_passage(&t, &x, 4.0), None);
        assert_eq!(running_max(&x), [1.0, 3.0, 3.0]);
    }
}
