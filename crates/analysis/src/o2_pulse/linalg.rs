//! Small dense linear algebra: Cholesky factor of a symmetric positive definite matrix.

/// A square matrix, row by row.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Square {
    n: usize,
    x: Vec<f64>,
}

impl Square {
    /// All zeros, `n` × `n`.
    pub fn zeros(n: usize) -> Self {
        Self { n, x: vec![0.0; n * n] }
    }

    /// Order.
    pub fn n(&self) -> usize {
        self.n
    }

    /// Element (i, j).
    pub fn at(&self, i: usize, j: usize) -> f64 {
        self.x[i * self.n + j]
    }

    /// Sets element (i, j).
    pub fn set(&mut self, i: usize, j: usize, value: f64) {
        self.x[i * self.n + j] = value;
    }

    /// `a' M b`.
    pub fn form(&self, a: &[f64], b: &[f64]) -> f64 {
        (0..self.n).map(|i| a[i] * (0..self.n).map(|j| self.at(i, j) * b[j]).sum::<f64>()).sum()
    }
}

/// Lower triangular factor `L` with `M = L L'`.
#[derive(Clone, Debug)]
pub(crate) struct Cholesky {
    l: Square,
}

impl Cholesky {
    /// Factors `m`; `None` where it is not positive definite.
    pub fn new(m: &Square) -> Option<Self> {
        let n = m.n();
        let mut l = Square::zeros(n);
        for j in 0..n {
            let head: f64 = (0..j).map(|k| l.at(j, k) * l.at(j, k)).sum();
            let pivot = m.at(j, j) - head;
            if !(pivot > 0.0 && pivot.is_finite()) {
                return None;
            }
            let root = pivot.sqrt();
            l.set(j, j, root);
            for i in j + 1..n {
                let dot: f64 = (0..j).map(|k| l.at(i, k) * l.at(j, k)).sum();
                l.set(i, j, (m.at(i, j) - dot) / root);
            }
        }
        Some(Self { l })
    }

    /// `ln |M|`.
    pub fn ln_det(&self) -> f64 {
        2.0 * (0..self.l.n()).map(|i| libm::log(self.l.at(i, i))).sum::<f64>()
    }

    /// `M⁻¹ b`.
    pub fn solve(&self, b: &[f64]) -> Vec<f64> {
        let n = self.l.n();
        let mut x = b.to_vec();
        for i in 0..n {
            let dot: f64 = (0..i).map(|k| self.l.at(i, k) * x[k]).sum();
            x[i] = (x[i] - dot) / self.l.at(i, i);
        }
        for i in (0..n).rev() {
            let dot: f64 = (i + 1..n).map(|k| self.l.at(k, i) * x[k]).sum();
            x[i] = (x[i] - dot) / self.l.at(i, i);
        }
        x
    }

    /// `M⁻¹`.
    pub fn inverse(&self) -> Square {
        let n = self.l.n();
        let mut inverse = Square::zeros(n);
        for j in 0..n {
            let mut unit = vec![0.0; n];
            unit[j] = 1.0;
            for (i, value) in self.solve(&unit).into_iter().enumerate() {
                inverse.set(i, j, value);
            }
        }
        inverse
    }
}

/// Inner product.
pub(crate) fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn factor_solve_and_determinant_by_hand() {
        // M = L L' with L = [[2, 0], [1, 3]]: M = [[4, 2], [2, 10]], |M| = 36.
        let mut m = Square::zeros(2);
        m.set(0, 0, 4.0);
        m.set(0, 1, 2.0);
        m.set(1, 0, 2.0);
        m.set(1, 1, 10.0);
        let factor = Cholesky::new(&m).unwrap();
        assert!((factor.ln_det() - libm::log(36.0)).abs() < 1e-12);
        // M (1, -1)' = (2, -8)'.
        let x = factor.solve(&[2.0, -8.0]);
        assert!((x[0] - 1.0).abs() < 1e-12 && (x[1] + 1.0).abs() < 1e-12);
        // M⁻¹ = [[10, -2], [-2, 4]] / 36.
        let inverse = factor.inverse();
        assert!((inverse.at(0, 1) + 2.0 / 36.0).abs() < 1e-12);
        assert!((inverse.form(&[1.0, 0.0], &[1.0, 0.0]) - 10.0 / 36.0).abs() < 1e-12);
    }

    #[test]
    fn not_positive_definite_is_refused() {
        let mut m = Square::zeros(2);
        m.set(0, 0, 1.0);
        m.set(1, 0, 2.0);
        m.set(0, 1, 2.0);
        m.set(1, 1, 1.0);
        assert!(Cholesky::new(&m).is_none());
    }
}
