//! Noise of bins: a slow drift with an exponential kernel plus white noise, whitened in O(n), and
//! its size by restricted maximum likelihood (step 5).

use super::design::{Design, PRIOR_ONSETS};
use super::detail::Bin;
use super::linalg::{Cholesky, Square, dot};

/// Columns of the joint fit: outcome, constant, load, two bends, six breaks.
pub(crate) const COLUMNS: usize = 11;
/// Column of the outcome (less its prior mean).
pub(crate) const OUTCOME: usize = 0;
/// Column of the constant.
pub(crate) const CONSTANT: usize = 1;
/// Column of the lagged load.
pub(crate) const LOAD: usize = 2;
/// Column of the even bend.
pub(crate) const BEND_EVEN: usize = 3;
/// Column of the odd bend.
pub(crate) const BEND_ODD: usize = 4;
/// First column of the breaks.
pub(crate) const BREAKS: usize = 5;

/// Prior of bend and break of one variable, already scaled to it.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Prior {
    /// Mean of the two bend coefficients.
    pub mean: (f64, f64),
    /// SD of the two bend coefficients.
    pub sd: (f64, f64),
    /// SD of each break coefficient.
    pub break_sd: f64,
}

/// Where the noise of one variable may lie.
#[derive(Clone, Debug)]
pub(crate) struct NoiseShape {
    /// Drift of unit size at each bin (value units per unit of d).
    pub drift: Vec<f64>,
    /// Time constant of the drift, s.
    pub tau_s: f64,
    /// White SD of unit size at each bin (value units per unit of w).
    pub white: Vec<f64>,
    /// Lowest and highest d of the grid.
    pub d_range: (f64, f64),
    /// Mean and SD of ln d.
    pub d_prior: (f64, f64),
    /// Grid of w.
    pub w_grid: Vec<f64>,
}

/// Columns whitened by the chosen noise, as inner products.
#[derive(Clone, Debug)]
pub(crate) struct Whitened {
    /// Inner products of the columns.
    pub gram: Square,
    /// ln of the determinant of the noise covariance.
    pub ln_det: f64,
}

/// Raw columns of one variable.
pub(crate) fn columns(y: &[f64], design: &Design, prior: &Prior) -> Vec<Vec<f64>> {
    let mean = prior_mean(design, prior);
    let mut columns = Vec::with_capacity(COLUMNS);
    columns.push(y.iter().zip(&mean).map(|(y, m)| y - m).collect());
    columns.push(vec![1.0; y.len()]);
    columns.push(design.u.clone());
    columns.push(design.q.clone());
    columns.push(design.c.clone());
    columns.extend(design.h.iter().cloned());
    columns
}

/// Prior mean of the bend at each bin.
pub(crate) fn prior_mean(design: &Design, prior: &Prior) -> Vec<f64> {
    design.q.iter().zip(&design.c).map(|(q, c)| prior.mean.0 * q + prior.mean.1 * c).collect()
}

/// Whitens `columns` by the innovations of the Kalman filter of "Ornstein–Uhlenbeck drift + white
/// noise": the same as multiplying by the inverse Cholesky factor of the covariance, in O(n).
pub(crate) fn whiten(
    bins: &[Bin],
    shape: &NoiseShape,
    d: f64,
    w: f64,
    columns: &[Vec<f64>],
) -> Whitened {
    let m = columns.len();
    let mut gram = Square::zeros(m);
    let mut ln_det = 0.0;
    let mut state = vec![0.0; m];
    let mut innovation = vec![0.0; m];
    let mut variance = 1.0;
    for k in 0..bins.len() {
        if k > 0 {
            let keep = libm::exp(-(bins[k].t_s - bins[k - 1].t_s) / shape.tau_s);
            state.iter_mut().for_each(|x| *x *= keep);
            variance = keep * keep * variance + (1.0 - keep * keep);
        }
        let size = d * shape.drift[k];
        let white = w * shape.white[k];
        let total = size * size * variance + white * white;
        let gain = variance * size / total;
        ln_det += libm::log(total);
        let root = total.sqrt();
        for j in 0..m {
            let surprise = columns[j][k] - size * state[j];
            state[j] += gain * surprise;
            innovation[j] = surprise / root;
        }
        variance *= 1.0 - gain * size;
        for i in 0..m {
            for j in 0..=i {
                gram.set(i, j, gram.at(i, j) + innovation[i] * innovation[j]);
            }
        }
    }
    for i in 0..m {
        for j in i + 1..m {
            gram.set(i, j, gram.at(j, i));
        }
    }
    Whitened { gram, ln_det }
}

/// The mean columns and random columns of the joint fit, with the precision of their prior.
pub(crate) fn terms(prior: &Prior) -> ([usize; 7], [f64; 7]) {
    let precision = |sd: f64| 1.0 / (sd * sd);
    let p = precision(prior.break_sd);
    let mut index = [CONSTANT, LOAD, BEND_EVEN, BEND_ODD, 0, 0, 0];
    for (slot, onset) in PRIOR_ONSETS.iter().enumerate() {
        index[4 + slot] = BREAKS + onset;
    }
    (index, [0.0, 0.0, precision(prior.sd.0), precision(prior.sd.1), p, p, p])
}

/// Restricted log likelihood (up to a constant) of whitened columns under the prior.
fn restricted(white: &Whitened, index: &[usize], precision: &[f64]) -> Option<f64> {
    let (factor, right) = normal(&white.gram, index, precision)?;
    let theta = factor.solve(&right);
    let fit = white.gram.at(OUTCOME, OUTCOME) - dot(&right, &theta);
    Some(-0.5 * (white.ln_det + factor.ln_det() + fit))
}

/// Factor of the penalised normal equations on the columns `index`, and their right-hand side.
pub(crate) fn normal(
    gram: &Square,
    index: &[usize],
    precision: &[f64],
) -> Option<(Cholesky, Vec<f64>)> {
    let mut matrix = Square::zeros(index.len());
    for (i, &a) in index.iter().enumerate() {
        for (j, &b) in index.iter().enumerate() {
            let ridge = if i == j { precision[i] } else { 0.0 };
            matrix.set(i, j, gram.at(a, b) + ridge);
        }
    }
    let right = index.iter().map(|&a| gram.at(a, OUTCOME)).collect();
    Some((Cholesky::new(&matrix)?, right))
}

/// Picks (d, w) by the highest restricted likelihood plus log prior, and whitens with them.
pub(crate) fn choose(
    bins: &[Bin],
    shape: &NoiseShape,
    prior: &Prior,
    columns: &[Vec<f64>],
) -> Option<Whitened> {
    let (index, precision) = terms(prior);
    let (low, high) = (libm::log(shape.d_range.0), libm::log(shape.d_range.1));
    let mut best: Option<(f64, Whitened)> = None;
    for step in 0..8 {
        let ln_d = low + (high - low) * f64::from(step) / 7.0;
        let z = (ln_d - shape.d_prior.0) / shape.d_prior.1;
        for &w in &shape.w_grid {
            let white = whiten(bins, shape, libm::exp(ln_d), w, columns);
            let Some(likelihood) = restricted(&white, &index, &precision) else { continue };
            let score = likelihood - 0.5 * z * z;
            if best.as_ref().is_none_or(|(top, _)| score > *top) {
                best = Some((score, white));
            }
        }
    }
    best.map(|(_, white)| white)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The filter against the dense covariance, built entry by entry and factored.
    #[test]
    fn whitening_equals_the_dense_inverse() {
        let bins: Vec<Bin> = [0.0, 10.0, 20.0, 50.0, 60.0]
            .iter()
            .map(|&t_s| Bin { t_s, ..Bin::default() })
            .collect();
        let shape = NoiseShape {
            drift: vec![1.0, 1.2, 0.9, 0.8, 0.7],
            tau_s: 30.0,
            white: vec![0.5, 0.4, 0.6, 0.5, 0.3],
            d_range: (1.0, 2.0),
            d_prior: (0.0, 1.0),
            w_grid: vec![1.0],
        };
        let (d, w) = (1.3, 0.7);
        let mut dense = Square::zeros(5);
        for i in 0..5 {
            for j in 0..5 {
                let gap = (bins[i].t_s - bins[j].t_s).abs();
                let slow = d * d * shape.drift[i] * shape.drift[j] * libm::exp(-gap / 30.0);
                let white = if i == j { w * w * shape.white[i] * shape.white[i] } else { 0.0 };
                dense.set(i, j, slow + white);
            }
        }
        let a = vec![1.0, -2.0, 0.5, 3.0, 1.0];
        let b = vec![0.3, 1.0, 1.0, -1.0, 2.0];
        let factor = Cholesky::new(&dense).unwrap();
        let white = whiten(&bins, &shape, d, w, &[a.clone(), b.clone()]);
        assert!((white.ln_det - factor.ln_det()).abs() < 1e-10);
        assert!((white.gram.at(0, 1) - dot(&a, &factor.solve(&b))).abs() < 1e-10);
        assert!((white.gram.at(1, 1) - dot(&b, &factor.solve(&b))).abs() < 1e-10);
    }
}
