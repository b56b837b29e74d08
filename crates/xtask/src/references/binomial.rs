//! Exact limits of a proportion (Clopper and Pearson 1934) by the beta distribution.

use statrs::function::beta::inv_beta_reg;

/// Count out of a number of trials.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Count {
    /// Hits.
    pub k: u64,
    /// Trials.
    pub n: u64,
}

impl Count {
    /// Counts the true ones.
    pub fn of(hits: impl IntoIterator<Item = bool>) -> Self {
        let mut c = Self::default();
        for hit in hits {
            c.add(hit);
        }
        c
    }

    /// Adds one trial.
    pub fn add(&mut self, hit: bool) {
        self.k += u64::from(hit);
        self.n += 1;
    }

    /// The proportion.
    #[must_use]
    pub fn rate(self) -> f64 {
        self.k as f64 / self.n as f64
    }

    /// Exact 95 % limits.
    #[must_use]
    pub fn limits(self) -> (f64, f64) {
        let (k, n) = (self.k as f64, self.n as f64);
        let low = if self.k == 0 { 0.0 } else { inv_beta_reg(k, n - k + 1.0, 0.025) };
        let high = if self.k == self.n { 1.0 } else { inv_beta_reg(k + 1.0, n - k, 0.975) };
        (low, high)
    }

    /// `12.3 [11.0, 13.7]` in per cent.
    #[must_use]
    pub fn percent(self) -> String {
        if self.n == 0 {
            return String::from("–");
        }
        let (low, high) = self.limits();
        format!("{:.1} [{:.1}, {:.1}]", 100.0 * self.rate(), 100.0 * low, 100.0 * high)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 0 of n: upper limit 1 - 0.025^(1/n). n of n mirrors it. 5 of 10: symmetric about one half.
    #[test]
    fn limits_by_closed_forms() {
        let (low, high) = Count { k: 0, n: 20 }.limits();
        assert_eq!(low, 0.0);
        assert!((high - (1.0 - 0.025_f64.powf(1.0 / 20.0))).abs() < 1e-9, "{high}");
        let (low, high) = Count { k: 20, n: 20 }.limits();
        assert_eq!(high, 1.0);
        assert!((low - 0.025_f64.powf(1.0 / 20.0)).abs() < 1e-9, "{low}");
        let (low, high) = Count { k: 5, n: 10 }.limits();
        assert!((low + high - 1.0).abs() < 1e-9);
    }

    /// Against statsmodels (`tests/golden`, first line of the table).
    #[test]
    fn limits_agree_with_statsmodels() {
        let table = include_str!("../../../../tests/golden/exact-limits-py.csv");
        for line in table.lines().skip(2) {
            let row: Vec<f64> = line.split(',').map(|cell| cell.parse().unwrap()).collect();
            let (low, high) = Count { k: row[0] as u64, n: row[1] as u64 }.limits();
            assert!((low - row[2]).abs() < 1e-9 && (high - row[3]).abs() < 1e-9, "{line}");
        }
    }

    /// At the limit itself the tail probability is 2.5 %: checked by summing the binomial.
    #[test]
    fn limits_leave_the_tails_they_name() {
        let c = Count { k: 7, n: 40 };
        let (low, high) = c.limits();
        let pmf = |p: f64, k: u64| {
            let choose = (0..k).fold(1.0, |a, i| a * (40 - i) as f64 / (i + 1) as f64);
            choose * p.powi(k as i32) * (1.0 - p).powi(40 - k as i32)
        };
        let above: f64 = (7..=40).map(|k| pmf(low, k)).sum();
        let below: f64 = (0..=7).map(|k| pmf(high, k)).sum();
        assert!((above - 0.025).abs() < 1e-8, "{above}");
        assert!((below - 0.025).abs() < 1e-8, "{below}");
    }
}
