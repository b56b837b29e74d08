//! Oxygen content of arterial blood, its ceilings, and the law of a right-to-left shunt.

/// Solubility of oxygen in plasma, mL/dL per mmHg.
const SOLUBILITY: f64 = 0.0031;
/// Arterial PO₂ that is assumed for the dissolved part, mmHg.
pub(crate) const PAO2_ASSUMED: f64 = 100.0;

/// Arterial O₂ content, mL/dL: `hufner` (mL/g) × Hb (g/dL) × saturation (fraction) + dissolved.
#[must_use]
pub fn arterial_content(hufner: f64, hb_g_dl: f64, saturation: f64, pao2_mmhg: f64) -> f64 {
    hufner * hb_g_dl * saturation + SOLUBILITY * pao2_mmhg
}

/// Haemoglobin that can carry oxygen, g/dL, with a fraction bound to carbon monoxide.
#[must_use]
pub fn effective_hb(hb_g_dl: f64, cohb: f64) -> f64 {
    hb_g_dl * (1.0 - cohb)
}

/// Arterial content (mL/dL) when a fraction of the output bypasses the lung, at a fixed mixed venous
/// content: `(1 − f) Cc + f Cv`.
#[must_use]
pub fn shunted_content(capillary: f64, venous: f64, fraction: f64) -> f64 {
    (1.0 - fraction) * capillary + fraction * venous
}

/// Body surface area, m² (Mosteller 1987, √(cm · kg ÷ 3600); formula from memory).
#[must_use]
pub fn body_surface(height_cm: f64, mass_kg: f64) -> f64 {
    (height_cm * mass_kg / 3600.0).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn near(a: f64, b: f64, tolerance: f64) {
        assert!((a - b).abs() <= tolerance, "{a} is not {b} ± {tolerance}");
    }

    /// Published constants k = 1.34, 1.36, 1.39 mL/g at Hb 15 g/dL, SaO₂ 0.98, PaO₂ 100 mmHg:
    /// e.g. 1.34 · 15 · 0.98 + 0.31 = 20.008.
    #[test]
    fn content_under_three_constants() {
        for (k, content) in [(1.34, 20.01), (1.36, 20.30), (1.39, 20.74)] {
            near(arterial_content(k, 15.0, 0.98, 100.0), content, 0.005);
        }
    }

    /// Ceilings at 75, 80, 85 and 90 % of the content, by arithmetic from the same formula. The
    /// last row of the table (SaO₂ 0.85) carries PaO₂ of about 50 mmHg: 1.34·15·0.85 + 0.155.
    #[test]
    fn ceilings_of_extraction() {
        let rows = [
            (15.0, 0.98, 100.0, 20.0, [15.0, 16.0, 17.0, 18.0]),
            (13.0, 0.98, 100.0, 17.4, [13.0, 13.9, 14.8, 15.6]),
            (10.0, 0.98, 100.0, 13.4, [10.1, 10.8, 11.4, 12.1]),
            (8.0, 0.98, 100.0, 10.8, [8.1, 8.7, 9.2, 9.7]),
            (15.0, 0.85, 50.0, 17.3, [12.9, 13.8, 14.7, 15.5]),
        ];
        for (hb, sat, pao2, content, ceilings) in rows {
            let c = arterial_content(1.34, hb, sat, pao2);
            near(c, content, 0.06);
            for (share, ceiling) in [0.75, 0.80, 0.85, 0.90].iter().zip(ceilings) {
                near(share * c, ceiling, 0.12);
            }
        }
    }

    /// At the same output and 78 % extraction the O₂ pulse falls with the content: Hb 12 −20 %,
    /// Hb 9 −39 %, SaO₂ 0.88 −11 %, 0.80 −19 %, COHb 8 % −8 %.
    #[test]
    fn relative_loss_of_pulse() {
        let base = arterial_content(1.34, 15.0, 0.98, 100.0);
        let loss = |c: f64| 100.0 * (c / base - 1.0);
        near(loss(arterial_content(1.34, 12.0, 0.98, 100.0)), -20.0, 0.5);
        near(loss(arterial_content(1.34, 9.0, 0.98, 100.0)), -39.0, 0.6);
        // Dissolved part at the lower PaO₂ of about 55 and 45 mmHg.
        near(loss(arterial_content(1.34, 15.0, 0.88, 55.0)), -11.0, 0.6);
        near(loss(arterial_content(1.34, 15.0, 0.80, 45.0)), -19.0, 0.8);
        near(loss(arterial_content(1.34, effective_hb(15.0, 0.08), 0.98, 100.0)), -8.0, 0.5);
    }

    /// Cc 20.43, Cv 4.0 mL/dL: the O₂ pulse falls by exactly the shunt fraction.
    #[test]
    fn shunt_identity() {
        let (cc, cv) = (20.43, 4.0);
        for (f, ca, c, vo2) in [
            (0.0, 20.43, 16.43, 1643.0),
            (0.1, 18.78, 14.78, 1478.0),
            (0.2, 17.14, 13.14, 1314.0),
            (0.3, 15.50, 11.50, 1150.0),
        ] {
            let arterial = shunted_content(cc, cv, f);
            near(arterial, ca, 0.01);
            near(arterial - cv, c, 0.01);
            // V̇O₂ = Q · C · 10 with Q = 10 L/min.
            near(100.0 * (arterial - cv), vo2, 1.0);
            near((arterial - cv) / (cc - cv), 1.0 - f, 1e-12);
            if f > 0.0 {
                near((cc - arterial) / (cc - cv), f, 1e-12);
                // Ca = Cc − f/(1 − f) · C.
                near(cc - f / (1.0 - f) * (arterial - cv), arterial, 1e-9);
            }
        }
    }

    /// √(180 · 80 ÷ 3600) = 2.
    #[test]
    fn surface() {
        near(body_surface(180.0, 80.0), 2.0, 1e-12);
    }
}
