//! The two-factor table: ln P = ln SV + ln C − ln 100 between two points, closed by a named
//! assumption, with log-normal propagation.

use super::detail::{FactorRow, FactorTable, Model, Ranged};
use super::extraction::{Q_SLOPE, Q0, from_linear_output, linear_output, stringer};
use crate::results::Interval;

/// Half-width of a 90 % interval in SDs.
const Z: f64 = 1.645;
/// Relative SD of extraction at one point, healthy people.
pub(crate) const CONTENT_SD: f64 = 0.09;
/// The same in heart failure.
pub(crate) const CONTENT_SD_HEART_FAILURE: f64 = 0.16;
/// Correlation of that error between two points of one person.
const CONTENT_CORRELATION: f64 = 0.6;
/// Relative SD of a 30-s mean of the O₂ pulse.
pub(crate) const PULSE_SD: f64 = 0.02;
/// Relative SD of "constant" stroke volume (B).
const STROKE_SD: f64 = 0.05;
/// Relative SD of extraction as a fraction of content (A3), from its limits of agreement.
const FRACTION_SD: f64 = 0.11;

/// One of the two points.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Point {
    /// Time, s.
    pub t_s: f64,
    /// V̇O₂, mL/min.
    pub vo2: f64,
    /// O₂ pulse, mL/beat.
    pub pulse: f64,
    /// Extraction under A3, mL/dL, where Hb and load are known.
    pub fraction_content: Option<f64>,
}

/// Log-normal: median and SD of the logarithm.
fn log_ranged(median: f64, sd: f64) -> Ranged {
    let width = libm::exp(Z * sd);
    Ranged { value: median, interval: Interval { low: median / width, high: median * width } }
}

/// Change in % with its interval, from a difference of logarithms.
fn change(ln: f64, sd: f64) -> Ranged {
    let percent = |x: f64| 100.0 * libm::expm1(x);
    let interval = Interval { low: percent(ln - Z * sd), high: percent(ln + Z * sd) };
    Ranged { value: percent(ln), interval }
}

fn hypot(parts: &[f64]) -> f64 {
    parts.iter().map(|x| x * x).sum::<f64>().sqrt()
}

/// Row of a model that states the extraction at both points. `shared` = further ln errors of the
/// extraction at the first and second point, each pair from one common cause.
fn stated(
    model: Model,
    points: (Point, Point),
    content: (f64, f64),
    sd: f64,
    shared: &[(f64, f64)],
) -> FactorRow {
    let (a, b) = points;
    let own = sd * (2.0 * (1.0 - CONTENT_CORRELATION)).sqrt();
    let common: Vec<f64> = shared.iter().map(|(x, y)| y - x).collect();
    let content_sd = hypot(&[own, hypot(&common)]);
    let content_ln = libm::log(content.1 / content.0);
    let pulse_ln = libm::log(b.pulse / a.pulse);
    let stroke_sd = hypot(&[content_sd, PULSE_SD, PULSE_SD]);
    let stroke_ln = pulse_ln - content_ln;
    let at_end: Vec<f64> = shared.iter().map(|(_, y)| *y).collect();
    let end_sd = hypot(&[sd, hypot(&at_end)]);
    FactorRow {
        model,
        content: change(content_ln, content_sd),
        stroke_volume: change(stroke_ln, stroke_sd),
        stroke_volume_assumed: false,
        stroke_volume_end: log_ranged(100.0 * b.pulse / content.1, hypot(&[end_sd, PULSE_SD])),
        content_end: log_ranged(content.1, end_sd),
        probability_lower: crate::o2_pulse::normal_cdf(-stroke_ln / stroke_sd),
    }
}

/// Row B: stroke volume did not change; solves for extraction, starting from A1's.
fn constant_stroke(points: (Point, Point), first_content: f64, sd: f64) -> FactorRow {
    let (a, b) = points;
    let pulse_ln = libm::log(b.pulse / a.pulse);
    let change_sd = hypot(&[PULSE_SD, PULSE_SD, STROKE_SD]);
    let end = first_content * b.pulse / a.pulse;
    FactorRow {
        model: Model::B,
        content: change(pulse_ln, change_sd),
        stroke_volume: change(0.0, STROKE_SD),
        stroke_volume_assumed: true,
        stroke_volume_end: log_ranged(
            100.0 * a.pulse / first_content,
            hypot(&[sd, PULSE_SD, STROKE_SD]),
        ),
        content_end: log_ranged(end, hypot(&[sd, change_sd])),
        probability_lower: 0.5,
    }
}

/// The table between two points; `peak_vo2` = own peak V̇O₂, mL/min, `content_sd` = relative SD of
/// extraction at one point.
pub(crate) fn table(points: (Point, Point), peak_vo2: f64, content_sd: f64) -> FactorTable {
    let (a, b) = points;
    let share = |p: Point| (100.0 * p.vo2 / peak_vo2).min(100.0);
    let first = stringer(share(a));
    let mut rows = vec![
        stated(Model::A1, points, (first, stringer(share(b))), content_sd, &[]),
        stated(
            Model::A2,
            points,
            (from_linear_output(a.vo2), from_linear_output(b.vo2)),
            content_sd,
            &[
                (-Q0.1 / linear_output(a.vo2), -Q0.1 / linear_output(b.vo2)),
                (
                    -Q_SLOPE.1 * a.vo2 / 1000.0 / linear_output(a.vo2),
                    -Q_SLOPE.1 * b.vo2 / 1000.0 / linear_output(b.vo2),
                ),
            ],
        ),
    ];
    if let (Some(x), Some(y)) = (a.fraction_content, b.fraction_content) {
        rows.push(stated(Model::A3, points, (x, y), FRACTION_SD, &[]));
    }
    rows.push(constant_stroke(points, first, content_sd));
    FactorTable {
        between_s: (a.t_s, b.t_s),
        pulse: (a.pulse, b.pulse),
        vo2: (a.vo2, b.vo2),
        pulse_change: change(libm::log(b.pulse / a.pulse), hypot(&[PULSE_SD, PULSE_SD])),
        rows,
    }
}

impl FactorTable {
    /// The row of `model`.
    #[must_use]
    pub fn row(&self, model: Model) -> Option<&FactorRow> {
        self.rows.iter().find(|r| r.model == model)
    }

    /// Whether both A1 and A2 point down firmly enough for the conditional sentence.
    #[must_use]
    pub fn points_down(&self) -> bool {
        let p = |model| self.row(model).map_or(0.0, |r| r.probability_lower);
        p(Model::A1) >= 0.95 && p(Model::A2) >= 0.90
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn point(vo2: f64, pulse: f64) -> Point {
        Point { t_s: 0.0, vo2, pulse, fraction_content: None }
    }

    fn near(what: &str, a: f64, b: f64, tolerance: f64) {
        assert!((a - b).abs() <= tolerance, "{what}: {a} is not {b} ± {tolerance}");
    }

    /// One case: second point, 100 × ln (5, 50, 95) of stroke volume under A1 and A2, stroke volume at
    /// the end under both, probabilities, and extraction needed under B.
    struct Case {
        vo2: f64,
        pulse: f64,
        change: [[f64; 3]; 2],
        stroke: [[f64; 3]; 2],
        lower: [f64; 2],
        needed: [f64; 3],
    }

    /// Three cases drawn 200,000 times elsewhere (extraction error 9 % per point, correlation 0.6,
    /// O₂ pulse 2 %, output slope 5.5 ± 0.5 and intercept 4.0 ± 0.7); first point 13.6 mL/beat at
    /// 1.8 L/min. The closed form must agree within the rounding of the draws (one unit).
    #[test]
    fn closed_form_agrees_with_drawn_rows() {
        let cases = [
            Case {
                vo2: 3000.0,
                pulse: 16.7,
                change: [[-23.0, -9.0, 5.0], [-6.0, 8.0, 23.0]],
                stroke: [[88.0, 103.0, 120.0], [93.0, 114.0, 139.0]],
                lower: [0.87, 0.17],
                needed: [12.4, 14.8, 17.6],
            },
            Case {
                vo2: 2550.0,
                pulse: 13.6,
                change: [[-35.0, -21.0, -7.0], [-23.0, -9.0, 5.0]],
                stroke: [[72.0, 84.0, 98.0], [78.0, 96.0, 117.0]],
                lower: [0.99, 0.85],
                needed: [11.1, 13.2, 15.7],
            },
            Case {
                vo2: 2350.0,
                pulse: 12.2,
                change: [[-41.0, -27.0, -13.0], [-32.0, -18.0, -4.0]],
                stroke: [[65.0, 75.0, 88.0], [71.0, 88.0, 107.0]],
                lower: [1.0, 0.98],
                needed: [10.4, 12.4, 14.8],
            },
        ];
        for case in cases {
            let second = point(case.vo2, case.pulse);
            let t = table((point(1800.0, 13.6), second), case.vo2, CONTENT_SD);
            for (k, model) in [Model::A1, Model::A2].into_iter().enumerate() {
                let row = t.row(model).unwrap();
                let triple = |r: Ranged| [r.interval.low, r.value, r.interval.high];
                for j in 0..3 {
                    let ln = 100.0 * libm::log1p(triple(row.stroke_volume)[j] / 100.0);
                    near("change", ln, case.change[k][j], 1.0);
                    near("stroke", triple(row.stroke_volume_end)[j], case.stroke[k][j], 1.1);
                }
                near("probability", row.probability_lower, case.lower[k], 0.011);
            }
            let b = t.row(Model::B).unwrap().content_end;
            for (got, want) in [b.interval.low, b.value, b.interval.high].iter().zip(case.needed) {
                near("needed", *got, want, 0.11);
            }
        }
    }

    /// ln(P1/P0) = ln(SV1/SV0) + ln(C1/C0) in every row.
    #[test]
    fn every_row_closes() {
        let points = (
            Point { fraction_content: Some(11.0), ..point(1500.0, 12.0) },
            Point { fraction_content: Some(14.0), ..point(2100.0, 13.0) },
        );
        let t = table(points, 2200.0, CONTENT_SD);
        assert_eq!(t.rows.len(), 4);
        for row in &t.rows {
            let factor = |r: Ranged| 1.0 + r.value / 100.0;
            let product = factor(row.content) * factor(row.stroke_volume);
            near("product", product, factor(t.pulse_change), 1e-12);
        }
    }

    /// A normal rise never gives the sentence; a fall does (rows above: A1 0.87 < 0.95 against 1.0
    /// and 0.98).
    #[test]
    fn the_sentence_needs_both_models() {
        let at = |vo2, pulse| table((point(1800.0, 13.6), point(vo2, pulse)), vo2, CONTENT_SD);
        assert!(!at(3000.0, 16.7).points_down());
        assert!(!at(2550.0, 13.6).points_down());
        assert!(at(2350.0, 12.2).points_down());
    }
}
