//! Regressors of the joint fit: lagged load, its natural bend, and late breaks (steps 1 and 3).

use super::bins::BIN_S;
use super::detail::Bin;
use crate::recording::Trace;

/// Onsets of a late break that are considered, min before load end.
pub(crate) const ONSETS_MIN: [f64; 6] = [2.0, 2.5, 3.0, 3.5, 4.0, 5.0];
/// Indices of [`ONSETS_MIN`] whose breaks are in the prior of the curves: 2, 3 and 4 min.
pub(crate) const PRIOR_ONSETS: [usize; 3] = [0, 2, 4];
/// Lag of V̇O₂ and HR behind the load, s.
const LAG_S: f64 = 40.0;

/// Bin means of the regressors.
#[derive(Clone, Debug)]
pub(crate) struct Design {
    /// Lagged load scaled 0 to 1 over the bins.
    pub u: Vec<f64>,
    /// Bend, even part.
    pub q: Vec<f64>,
    /// Bend, odd part.
    pub c: Vec<f64>,
    /// Late break at each of [`ONSETS_MIN`], on the scale of `u`.
    pub h: [Vec<f64>; 6],
}

/// First-order lag on a 1-s grid.
fn lagged(x: impl Iterator<Item = f64>) -> Vec<f64> {
    let a = 1.0 - libm::exp(-1.0 / LAG_S);
    let mut state: Option<f64> = None;
    x.map(|x| {
        let y = match state {
            None => x,
            Some(y) => y + a * (x - y),
        };
        state = Some(y);
        y
    })
    .collect()
}

/// Mean of a 1-s series (first value at `origin`) in each bin.
fn bin_means(series: &[f64], origin: f64, bins: &[Bin]) -> Vec<f64> {
    bins.iter()
        .map(|bin| {
            let index = |t: f64| libm::round(t - origin).max(0.0) as usize;
            let from = index(bin.t_s - 0.5 * BIN_S).min(series.len() - 1);
            let to = index(bin.t_s + 0.5 * BIN_S).clamp(from + 1, series.len());
            series[from..to].iter().sum::<f64>() / (to - from) as f64
        })
        .collect()
}

/// The regressors; `None` where the load does not rise over the bins. An empty trace stands for a
/// load that rises in proportion to time.
pub(crate) fn design(load: &Trace, start_s: f64, end_s: f64, bins: &[Bin]) -> Option<Design> {
    let origin = start_s - 1.0;
    let seconds = libm::ceil(end_s - origin) as usize + 1;
    let raw: Vec<f64> = (0..seconds)
        .map(|i| {
            let t = (origin + i as f64).min(end_s);
            // Before its first point the trace is taken as its first value.
            let held = || load.at(t).or_else(|| load.value.first().copied()).unwrap_or(0.0);
            if load.t_s.is_empty() { (t - start_s).max(0.0) } else { held() }
        })
        .collect();
    let lag = bin_means(&lagged(raw.iter().copied()), origin, bins);
    let (first, last) = (*lag.first()?, *lag.last()?);
    let range = last - first;
    if !(range > 1e-9 * last.abs() && range.is_finite()) {
        return None;
    }
    let u: Vec<f64> = lag.iter().map(|y| (y - first) / range).collect();
    let h = ONSETS_MIN.map(|minutes| {
        let at = libm::round(end_s - 60.0 * minutes - origin).max(0.0) as usize;
        let knot = raw[at.min(raw.len() - 1)];
        let late = lagged(raw.iter().map(|x| (x - knot).max(0.0)));
        bin_means(&late, origin, bins).into_iter().map(|y| y / range).collect()
    });
    let q = u.iter().map(|u| u * u - u).collect();
    let c = u.iter().map(|u| u * u * u - 1.5 * u * u + 0.5 * u).collect();
    Some(Design { u, q, c, h })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn bins(from: f64, n: usize) -> Vec<Bin> {
        (0..n).map(|k| Bin { t_s: from + 10.0 * k as f64, ..Bin::default() }).collect()
    }

    #[test]
    fn a_linear_ramp_lags_by_the_time_constant_and_breaks_begin_at_their_onset() {
        let load = Trace {
            t_s: (0..=600).map(f64::from).collect(),
            value: (0..=600).map(f64::from).collect(),
        };
        let bins = bins(125.0, 46);
        let d = design(&load, 0.0, 600.0, &bins).unwrap();
        assert_eq!((d.u[0], d.u[45]), (0.0, 1.0));
        // After several time constants a linear ramp stays linear: the middle is close to 1/2
        // (the start-up transient of exp(-125/40) = 4 % of the lag is all that remains).
        assert!((d.u[22] - 22.0 / 45.0).abs() < 0.005);
        // The break of 3 min begins at 420 s: nothing before, then less than the load itself.
        let k = bins.iter().position(|b| b.t_s > 420.0).unwrap();
        assert_eq!(d.h[2][k - 1], 0.0);
        assert!(d.h[2][45] > 0.0 && d.h[2][45] < d.u[45] - d.u[k - 1]);
        assert!(d.h[0][45] < d.h[5][45]);
        // Bends vanish at both ends.
        assert!(d.q[0].abs() + d.q[45].abs() + d.c[0].abs() + d.c[45].abs() < 1e-12);
    }

    #[test]
    fn a_constant_load_has_no_design() {
        let load = Trace { t_s: vec![0.0], value: vec![100.0] };
        assert!(design(&load, 0.0, 600.0, &bins(125.0, 46)).is_none());
    }
}
