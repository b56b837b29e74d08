//! How the V̇O₂ and HR of graded tests bend on load: a hierarchical model fitted by EM.
//!
//! Per test a free level and slope on load x in 0–1; a random bend k (x² − x) + c (x³ − 1.5 x² +
//! 0.5 x) in fractions of the test's range. Level and slope are projected out, so that the
//! variances are restricted (REML) estimates with respect to them.

/// One variable of one test.
#[derive(Clone, Debug)]
pub struct Staged {
    /// Load, 0–1 over the test.
    pub x: Vec<f64>,
    /// The variable over its own range.
    pub y: Vec<f64>,
}

/// The fitted population.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bends {
    /// Mean of the quadratic and cubic bend.
    pub mean: [f64; 2],
    /// Their standard deviations between tests.
    pub sd: [f64; 2],
    /// Noise of a stage, fraction of the range.
    pub noise: f64,
}

type Pair = [f64; 2];
type Matrix = [[f64; 2]; 2];

fn inverse(m: Matrix) -> Matrix {
    let det = m[0][0] * m[1][1] - m[0][1] * m[1][0];
    [[m[1][1] / det, -m[0][1] / det], [-m[1][0] / det, m[0][0] / det]]
}

fn times(m: Matrix, v: Pair) -> Pair {
    [m[0][0] * v[0] + m[0][1] * v[1], m[1][0] * v[0] + m[1][1] * v[1]]
}

/// `v` less its least-squares line on `x`.
fn without_line(x: &[f64], v: &[f64]) -> Vec<f64> {
    let n = x.len() as f64;
    let (mx, mv) = (x.iter().sum::<f64>() / n, v.iter().sum::<f64>() / n);
    let sxy: f64 = x.iter().zip(v).map(|(a, b)| (a - mx) * (b - mv)).sum();
    let sxx: f64 = x.iter().map(|a| (a - mx) * (a - mx)).sum();
    x.iter().zip(v).map(|(a, b)| b - mv - sxy / sxx * (a - mx)).collect()
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

/// One test after projection.
struct Projected {
    z: [Vec<f64>; 2],
    y: Vec<f64>,
    zz: Matrix,
    freedom: f64,
}

fn projected(test: &Staged) -> Projected {
    let quadratic: Vec<f64> = test.x.iter().map(|x| x * x - x).collect();
    let cubic: Vec<f64> = test.x.iter().map(|x| x * x * x - 1.5 * x * x + 0.5 * x).collect();
    let z = [without_line(&test.x, &quadratic), without_line(&test.x, &cubic)];
    let y = without_line(&test.x, &test.y);
    let zz = [[dot(&z[0], &z[0]), dot(&z[0], &z[1])], [dot(&z[0], &z[1]), dot(&z[1], &z[1])]];
    Projected { z, y, zz, freedom: test.x.len() as f64 - 2.0 }
}

/// Fits the population by 400 steps of EM.
#[must_use]
pub fn fit(tests: &[Staged]) -> Bends {
    let tests: Vec<Projected> = tests.iter().map(projected).collect();
    let n = tests.len() as f64;
    let freedom: f64 = tests.iter().map(|t| t.freedom).sum();
    let (mut mean, mut var, mut noise2) = ([0.0, 0.0], [0.1, 0.1], 1e-3);
    for _ in 0..400 {
        let (mut sum, mut square, mut left): (Pair, Pair, f64) = ([0.0; 2], [0.0; 2], 0.0);
        let mut posts = Vec::with_capacity(tests.len());
        for t in &tests {
            let precision = [
                [t.zz[0][0] / noise2 + 1.0 / var[0], t.zz[0][1] / noise2],
                [t.zz[1][0] / noise2, t.zz[1][1] / noise2 + 1.0 / var[1]],
            ];
            let cov = inverse(precision);
            let rhs = [
                dot(&t.z[0], &t.y) / noise2 + mean[0] / var[0],
                dot(&t.z[1], &t.y) / noise2 + mean[1] / var[1],
            ];
            let b = times(cov, rhs);
            let rest: f64 = (0..t.y.len())
                .map(|i| {
                    let r = t.y[i] - b[0] * t.z[0][i] - b[1] * t.z[1][i];
                    r * r
                })
                .sum();
            let spread =
                cov[0][0] * t.zz[0][0] + 2.0 * cov[0][1] * t.zz[0][1] + cov[1][1] * t.zz[1][1];
            left += rest + spread;
            sum = [sum[0] + b[0], sum[1] + b[1]];
            posts.push((b, cov));
        }
        mean = [sum[0] / n, sum[1] / n];
        for (b, cov) in posts {
            for k in 0..2 {
                square[k] += (b[k] - mean[k]) * (b[k] - mean[k]) + cov[k][k];
            }
        }
        var = [square[0] / n, square[1] / n];
        noise2 = left / freedom;
    }
    Bends { mean, sd: [var[0].sqrt(), var[1].sqrt()], noise: noise2.sqrt() }
}

#[cfg(test)]
mod tests {
    use super::*;
    use analysis::model::rng::Rng;

    /// Tests simulated with known bends are given back within 4 standard errors of a mean or SD
    /// of 400 draws.
    #[test]
    fn known_bends_are_given_back() {
        let mut rng = Rng::new(1, 1);
        let put_in = Bends { mean: [-0.3, -0.1], sd: [0.25, 0.35], noise: 0.02 };
        let tests: Vec<Staged> = (0..400)
            .map(|_| {
                let x: Vec<f64> = (0..9).map(|i| f64::from(i) / 8.0).collect();
                let k = rng.gauss(put_in.mean[0], put_in.sd[0]);
                let c = rng.gauss(put_in.mean[1], put_in.sd[1]);
                let (level, slope) = (rng.normal(), 1.0 + 0.2 * rng.normal());
                let y = x
                    .iter()
                    .map(|x| {
                        level
                            + slope * x
                            + k * (x * x - x)
                            + c * (x * x * x - 1.5 * x * x + 0.5 * x)
                            + put_in.noise * rng.normal()
                    })
                    .collect();
                Staged { x, y }
            })
            .collect();
        let found = fit(&tests);
        for k in 0..2 {
            // The noise of one test adds to its bend: about 0.08 for k and 0.35 for c here.
            let se = (put_in.sd[k] + [0.08, 0.35][k]) / 20.0;
            assert!((found.mean[k] - put_in.mean[k]).abs() < 4.0 * se, "{found:?}");
            assert!((found.sd[k] - put_in.sd[k]).abs() < 4.0 * se, "{found:?}");
        }
        assert!((found.noise - 0.02).abs() < 0.002, "{found:?}");
    }
}
