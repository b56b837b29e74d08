//! Median and the scale by the median absolute value.

/// Factor from the median absolute deviation to the standard deviation of a Gaussian.
pub const MAD_TO_SD: f64 = 1.4826;

/// Median (mean of the middle two for an even count); reorders `values`; NaN of nothing.
pub fn median(values: &mut [f64]) -> f64 {
    let n = values.len();
    if n == 0 {
        return f64::NAN;
    }
    let (below, middle, _) = values.select_nth_unstable_by(n / 2, f64::total_cmp);
    let middle = *middle;
    if n % 2 == 1 {
        return middle;
    }
    let lower = below.iter().copied().fold(f64::MIN, f64::max);
    0.5 * (lower + middle)
}

/// 1.4826 × the median of absolute values; reorders `residuals` and makes them absolute.
pub fn scale(residuals: &mut [f64]) -> f64 {
    for r in residuals.iter_mut() {
        *r = r.abs();
    }
    MAD_TO_SD * median(residuals)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn medians_by_counting() {
        assert_eq!(median(&mut [3.0, 1.0, 2.0]), 2.0);
        assert_eq!(median(&mut [4.0, 1.0, 3.0, 2.0]), 2.5);
        assert!(median(&mut []).is_nan());
    }

    #[test]
    fn one_wild_value_does_not_move_the_scale() {
        assert_eq!(scale(&mut [1.0, -1.0, 1.0, -1.0, 900.0]), MAD_TO_SD);
    }
}
