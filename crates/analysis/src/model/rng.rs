//! Counter-based random numbers: the n-th number of a stream depends on (seed, stream, n) only.
//!
//! Philox4x32-10: Salmon JK, Moraes MA, Dror RO, Shaw DE. Parallel random numbers: as easy as
//! 1, 2, 3. SC11, 2011. Deviates use `libm` alone, so that every machine draws the same bits.

const MULTIPLIERS: [u32; 2] = [0xD251_1F53, 0xCD9E_8D57];
const WEYL: [u32; 2] = [0x9E37_79B9, 0xBB67_AE85];

/// Ten rounds of Philox4x32 on `counter` under `key`.
#[must_use]
pub fn philox(counter: [u32; 4], key: [u32; 2]) -> [u32; 4] {
    let mut c = counter;
    let mut k = key;
    for _ in 0..10 {
        let p0 = u64::from(MULTIPLIERS[0]) * u64::from(c[0]);
        let p1 = u64::from(MULTIPLIERS[1]) * u64::from(c[2]);
        let (hi0, lo0) = ((p0 >> 32) as u32, p0 as u32);
        let (hi1, lo1) = ((p1 >> 32) as u32, p1 as u32);
        c = [hi1 ^ c[1] ^ k[0], lo1, hi0 ^ c[3] ^ k[1], lo0];
        k = [k[0].wrapping_add(WEYL[0]), k[1].wrapping_add(WEYL[1])];
    }
    c
}

/// One stream of deviates.
#[derive(Clone, Debug)]
pub struct Rng {
    key: [u32; 2],
    stream: u32,
    block: u64,
    spare: Option<f64>,
}

impl Rng {
    /// The stream numbered `stream` of `seed`.
    #[must_use]
    pub fn new(seed: u64, stream: u32) -> Self {
        Self { key: [seed as u32, (seed >> 32) as u32], stream, block: 0, spare: None }
    }

    fn pair(&mut self) -> (f64, f64) {
        let w = philox([self.block as u32, (self.block >> 32) as u32, self.stream, 0], self.key);
        self.block += 1;
        // 53 bits each, moved half a step off zero: strictly inside (0, 1).
        let unit = |hi: u32, lo: u32| {
            let bits = (u64::from(hi) << 21) ^ (u64::from(lo) >> 11);
            (bits as f64 + 0.5) / 9_007_199_254_740_992.0
        };
        (unit(w[0], w[1]), unit(w[2], w[3]))
    }

    /// Uniform in (0, 1).
    pub fn uniform(&mut self) -> f64 {
        self.pair().0
    }

    /// Uniform in (`low`, `high`).
    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.uniform()
    }

    /// True with probability `p`.
    pub fn chance(&mut self, p: f64) -> bool {
        self.uniform() < p
    }

    /// Standard normal (Box and Muller 1958).
    pub fn normal(&mut self) -> f64 {
        if let Some(z) = self.spare.take() {
            return z;
        }
        let (u, v) = self.pair();
        let r = (-2.0 * libm::log(u)).sqrt();
        let a = 2.0 * core::f64::consts::PI * v;
        self.spare = Some(r * libm::sin(a));
        r * libm::cos(a)
    }

    /// Normal with mean `m` and standard deviation `s`.
    pub fn gauss(&mut self, m: f64, s: f64) -> f64 {
        m + s * self.normal()
    }

    /// Student's t with `df` degrees of freedom, scaled to unit variance (`df` > 2).
    pub fn t_unit(&mut self, df: u32) -> f64 {
        let z = self.normal();
        let mut chi2 = 0.0;
        for _ in 0..df {
            let x = self.normal();
            chi2 += x * x;
        }
        let nu = f64::from(df);
        z / (chi2 / nu).sqrt() * ((nu - 2.0) / nu).sqrt()
    }
}

/// Ornstein–Uhlenbeck process of unit standard deviation.
#[derive(Clone, Copy, Debug)]
pub struct Drift {
    tau_s: f64,
    state: Option<f64>,
}

impl Drift {
    /// With correlation time `tau_s`, s.
    #[must_use]
    pub fn new(tau_s: f64) -> Self {
        Self { tau_s, state: None }
    }

    /// The value `dt_s` seconds after the last call, driven by the standard normal `z`.
    pub fn step(&mut self, dt_s: f64, z: f64) -> f64 {
        let next = match self.state {
            None => z,
            Some(x) => {
                let a = libm::exp(-dt_s / self.tau_s);
                a * x + (1.0 - a * a).sqrt() * z
            }
        };
        self.state = Some(next);
        next
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Known-answer vectors `philox4x32 10` of the Random123 distribution (from memory; a wrong
    /// digit in the algorithm or in the vectors could not agree by chance).
    #[test]
    fn philox_known_answers() {
        assert_eq!(philox([0; 4], [0; 2]), [0x6627_e8d5, 0xe169_c58d, 0xbc57_ac4c, 0x9b00_dbd8]);
        assert_eq!(
            philox([u32::MAX; 4], [u32::MAX; 2]),
            [0x408f_276d, 0x41c8_3b0e, 0xa20b_c7c6, 0x6d54_51fd]
        );
        assert_eq!(
            philox(
                [0x243f_6a88, 0x85a3_08d3, 0x1319_8a2e, 0x0370_7344],
                [0xa409_3822, 0x299f_31d0]
            ),
            [0xd16c_fe09, 0x94fd_cceb, 0x5001_e420, 0x2412_6ea1]
        );
    }

    /// Moments against theory; 4 standard errors of each at n = 40,000.
    #[test]
    fn moments() {
        let n = 40_000;
        let mut rng = Rng::new(7, 1);
        let z: Vec<f64> = (0..n).map(|_| rng.normal()).collect();
        let mean = z.iter().sum::<f64>() / n as f64;
        let var = z.iter().map(|x| x * x).sum::<f64>() / n as f64;
        assert!(mean.abs() < 4.0 / 200.0, "{mean}");
        assert!((var - 1.0).abs() < 4.0 * (2.0_f64).sqrt() / 200.0, "{var}");
        let u: Vec<f64> = (0..n).map(|_| rng.uniform()).collect();
        let mean_u = u.iter().sum::<f64>() / n as f64;
        assert!((mean_u - 0.5).abs() < 4.0 * (1.0_f64 / 12.0).sqrt() / 200.0);
        assert!(u.iter().all(|x| *x > 0.0 && *x < 1.0));
    }

    #[test]
    fn streams_differ_and_repeat() {
        let draw = |seed, stream| Rng::new(seed, stream).uniform().to_bits();
        assert_eq!(draw(1, 1), draw(1, 1));
        assert_ne!(draw(1, 1), draw(1, 2));
        assert_ne!(draw(1, 1), draw(2, 1));
    }

    /// Lag-one correlation of the drift is exp(-dt/tau); 4 standard errors at n = 20,000.
    #[test]
    fn drift_keeps_its_time_constant() {
        let mut rng = Rng::new(3, 9);
        let mut drift = Drift::new(25.0);
        let x: Vec<f64> = (0..20_000).map(|_| drift.step(5.0, rng.normal())).collect();
        let num: f64 = x.windows(2).map(|w| w[0] * w[1]).sum();
        let den: f64 = x.iter().map(|v| v * v).sum();
        let expected = libm::exp(-0.2);
        assert!((num / den - expected).abs() < 4.0 * (1.0 - expected * expected).sqrt() / 141.0);
    }
}
