//! Published forms of C(a−v̄)O₂ in exercise. They disagree, so both are always shown.

/// Stringer, Hansen, Wasserman 1997 (J Appl Physiol 82:908): mL/dL at a share of own peak V̇O₂, %.
#[must_use]
pub fn stringer(percent_of_peak: f64) -> f64 {
    5.72 + 0.105 * percent_of_peak
}

/// Intercept of output on V̇O₂, L/min, with its SD between people.
pub(crate) const Q0: (f64, f64) = (4.0, 0.7);
/// Rise of output per V̇O₂, L/L, with its SD between people.
pub(crate) const Q_SLOPE: (f64, f64) = (5.5, 0.5);

/// Output, L/min, when it rises in proportion to V̇O₂ (mL/min).
#[must_use]
pub fn linear_output(vo2_ml_min: f64) -> f64 {
    Q0.0 + Q_SLOPE.0 * vo2_ml_min / 1000.0
}

/// C(a−v̄)O₂, mL/dL, under a linear output: V̇O₂ ÷ output.
#[must_use]
pub fn from_linear_output(vo2_ml_min: f64) -> f64 {
    vo2_ml_min / (10.0 * linear_output(vo2_ml_min))
}

/// Crisafulli 2007: extraction as a fraction of arterial content, 0.30 at rest rising linearly with
/// work to 0.80 at peak work. `work` = fraction of peak work, 0 to 1.
#[must_use]
pub fn crisafulli_fraction(work: f64) -> f64 {
    0.30 + 0.50 * work.clamp(0.0, 1.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Values of the published line, by arithmetic: 5.72 + 0.105 · 25 = 8.345 and so on.
    #[test]
    fn stringer_line() {
        for (percent, c) in
            [(25.0, 8.3), (40.0, 9.9), (50.0, 11.0), (60.0, 12.0), (75.0, 13.6), (100.0, 16.2)]
        {
            assert!((stringer(percent) - c).abs() < 0.051, "{percent}");
        }
    }

    /// From 60 to 100 % of peak the extraction rises 30 % (ln) by Stringer, but 22, 16, 12, 10 %
    /// for peaks of 1.2, 2, 3, 4 L/min by output = 4 + 5.5 V̇O₂.
    #[test]
    fn the_two_forms_disagree() {
        let rise = |a: f64, b: f64| 100.0 * libm::log(b / a);
        assert!((rise(stringer(60.0), stringer(100.0)) - 30.0).abs() < 0.5);
        for (peak, percent) in [(1200.0, 22.0), (2000.0, 16.0), (3000.0, 12.0), (4000.0, 10.0)] {
            let r = rise(from_linear_output(0.6 * peak), from_linear_output(peak));
            assert!((r - percent).abs() < 0.6, "{peak}: {r}");
        }
    }

    /// V̇O₂, HR, output → O₂ pulse, stroke volume, extraction: rows by V̇O₂ ÷ HR, output ÷ HR,
    /// V̇O₂ ÷ output; the last two are group means of heart failure and control on the cycle.
    #[test]
    fn fick_vectors() {
        for (vo2, hr, q, pulse, sv, c) in [
            (250.0, 70.0, 5.0, 3.57, 71.4, 5.00),
            (1000.0, 110.0, 9.5, 9.09, 86.4, 10.53),
            (2000.0, 150.0, 15.0, 13.33, 100.0, 13.33),
            (3000.0, 180.0, 20.0, 16.67, 111.1, 15.00),
            (4500.0, 190.0, 28.0, 23.68, 147.4, 16.07),
            (900.0, 130.0, 6.5, 6.92, 50.0, 13.85),
            (1520.0, 148.0, 10.4, 10.27, 70.3, 14.6),
            (2030.0, 156.0, 15.5, 13.01, 99.4, 13.1),
        ] {
            let p: f64 = vo2 / hr;
            let content: f64 = vo2 / (10.0 * q);
            assert!((p - pulse).abs() < 0.006);
            assert!((content - c).abs() < 0.06);
            let stroke = crate::fick::equal_pulse_sv(p, content);
            assert!((stroke - sv).abs() < 0.06, "{stroke} {sv}");
            assert!((stroke - 1000.0 * q / hr).abs() < 1e-9);
        }
    }

    #[test]
    fn fraction_of_content() {
        assert_eq!(crisafulli_fraction(0.0), 0.30);
        assert!((crisafulli_fraction(1.0) - 0.80).abs() < 1e-12);
        assert!((crisafulli_fraction(0.5) - 0.55).abs() < 1e-12);
    }
}
