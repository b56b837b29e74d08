//! The plane of stroke volume × extraction: bounds, curves of equal O₂ pulse, the test's path.

use super::bound::Blood;
use super::content::{PAO2_ASSUMED, arterial_content, body_surface};
use super::detail::{Model, Path, PathPoint, Ranged, Region, equal_pulse_sv};
use super::extraction::{Q_SLOPE, Q0, from_linear_output, linear_output, stringer};
use super::factors::{PULSE_SD, Point};
use crate::results::Interval;
use crate::settings::FickSettings;

/// Lowest extraction considered, mL/dL.
const CONTENT_LOW: f64 = 4.0;
/// Stroke volume per body surface that can be, mL/m².
const STROKE_INDEX: (f64, f64) = (20.0, 95.0);
/// Haemoglobin drawn where none is stated, g/dL.
pub(crate) const HB_BAND: (f64, f64) = (8.0, 18.0);
/// Share of own peak V̇O₂ from which stroke volume is held under B, %.
const CONSTANT_FROM: f64 = 50.0;

/// Arterial content, mL/dL: a point with Hb, a band without.
pub(crate) fn arterial_band(blood: Option<&Blood>, s: &FickSettings) -> Interval {
    match blood {
        Some(blood) => Interval { low: blood.content(s), high: blood.content_upper(s) },
        None => Interval {
            low: arterial_content(s.hufner, HB_BAND.0, 0.98, PAO2_ASSUMED),
            high: arterial_content(s.hufner, HB_BAND.1, s.sao2_upper, PAO2_ASSUMED),
        },
    }
}

/// Bounds of the plane.
pub(crate) fn region(
    blood: Option<&Blood>,
    size: (Option<f64>, Option<f64>),
    s: &FickSettings,
) -> Region {
    let point = |x: f64| Interval { low: x, high: x };
    let (usual, limit) = match blood {
        Some(b) => (
            point(s.extraction_usual * b.content(s)),
            point(s.extraction_limit * b.content_upper(s)),
        ),
        None => {
            let band = arterial_band(None, s);
            let scaled = |f: f64| Interval { low: f * band.low, high: f * band.high };
            (scaled(s.extraction_usual), scaled(s.extraction_limit))
        }
    };
    let stroke_volume = match size {
        (Some(height), Some(mass)) if height > 0.0 && mass > 0.0 => {
            let surface = body_surface(height, mass);
            Some(Interval { low: STROKE_INDEX.0 * surface, high: STROKE_INDEX.1 * surface })
        }
        _ => None,
    };
    Region { content_low: CONTENT_LOW, content_usual: usual, content_limit: limit, stroke_volume }
}

/// Whether no point of the curve of `pulse` within the extraction bounds has a stroke volume that
/// can be: then a measurement or calibration error is likely.
pub(crate) fn cannot_be(pulse: f64, region: &Region) -> bool {
    region.stroke_volume.is_some_and(|sv| {
        let least = equal_pulse_sv(pulse, region.content_limit.high);
        let most = equal_pulse_sv(pulse, region.content_low);
        least > sv.high || most < sv.low
    })
}

/// Values of the O₂ pulse whose curves are drawn: even numbers around those of the test.
pub(crate) fn equal_curves(points: &[Point]) -> Vec<f64> {
    let low = points.iter().map(|p| p.pulse).fold(f64::INFINITY, f64::min);
    let high = points.iter().map(|p| p.pulse).fold(0.0, f64::max);
    if !low.is_finite() {
        return Vec::new();
    }
    let step = if high - low > 12.0 { 4.0 } else { 2.0 };
    let from = (libm::floor(low / step) * step).max(step);
    // Beyond every plausible O₂ pulse no curve helps.
    let count = libm::ceil((high + step - from) / step).clamp(0.0, 40.0) as usize + 1;
    (0..count).map(|k| from + step * k as f64).collect()
}

fn ranged(value: f64, sd: f64) -> Ranged {
    let width = libm::exp(1.645 * sd);
    Ranged { value, interval: Interval { low: value / width, high: value * width } }
}

fn path_point(p: &Point, content: f64, sd: f64) -> PathPoint {
    let pulse_sd = (sd * sd + PULSE_SD * PULSE_SD).sqrt();
    PathPoint {
        t_s: p.t_s,
        pulse: p.pulse,
        content: ranged(content, sd),
        stroke_volume: ranged(equal_pulse_sv(p.pulse, content), pulse_sd),
    }
}

/// The test's path under each assumption.
pub(crate) fn paths(points: &[Point], peak_vo2: f64, content_sd: f64) -> Vec<Path> {
    let share = |p: &Point| (100.0 * p.vo2 / peak_vo2).min(100.0);
    let a1 = points.iter().map(|p| path_point(p, stringer(share(p)), content_sd)).collect();
    let a2 = points
        .iter()
        .map(|p| {
            let q = linear_output(p.vo2);
            let q0 = Q0.1 / q;
            let slope = Q_SLOPE.1 * p.vo2 / 1000.0 / q;
            let sd = (content_sd * content_sd + q0 * q0 + slope * slope).sqrt();
            path_point(p, from_linear_output(p.vo2), sd)
        })
        .collect();
    let mut paths =
        vec![Path { model: Model::A1, points: a1 }, Path { model: Model::A2, points: a2 }];
    let a3: Vec<PathPoint> =
        points.iter().filter_map(|p| Some(path_point(p, p.fraction_content?, 0.11))).collect();
    if a3.len() == points.len() {
        paths.push(Path { model: Model::A3, points: a3 });
    }
    if let Some(first) = points.iter().position(|p| share(p) >= CONSTANT_FROM) {
        let anchor = &points[first];
        let stroke = equal_pulse_sv(anchor.pulse, stringer(share(anchor)));
        let b = points[first..]
            .iter()
            .map(|p| path_point(p, 100.0 * p.pulse / stroke, content_sd))
            .collect();
        paths.push(Path { model: Model::B, points: b });
    }
    paths
}

#[cfg(test)]
mod tests {
    use super::*;

    fn point(vo2: f64, pulse: f64) -> Point {
        Point { t_s: 0.0, vo2, pulse, fraction_content: None }
    }

    #[test]
    fn every_point_lies_on_its_curve_and_b_holds_stroke_volume() {
        let points = [point(800.0, 9.0), point(1500.0, 12.0), point(2000.0, 14.0)];
        let paths = paths(&points, 2000.0, 0.09);
        assert_eq!(paths.len(), 3);
        for path in &paths {
            for p in &path.points {
                let product = p.stroke_volume.value * p.content.value / 100.0;
                assert!((product - p.pulse).abs() < 1e-9);
            }
        }
        let b = &paths[2].points;
        // 800 of 2000 is 40 %: the first point is before B.
        assert_eq!(b.len(), 2);
        assert!((b[0].stroke_volume.value - b[1].stroke_volume.value).abs() < 1e-9);
    }

    #[test]
    fn without_hb_the_bounds_are_a_band_and_without_size_there_is_no_stroke_range() {
        let s = FickSettings::default();
        let r = region(None, (Some(180.0), None), &s);
        assert!(r.content_limit.low < r.content_limit.high);
        assert!(r.stroke_volume.is_none());
        // BSA 2.0: 40 to 190 mL.
        let r = region(None, (Some(180.0), Some(80.0)), &s);
        assert_eq!(r.stroke_volume, Some(Interval { low: 40.0, high: 190.0 }));
        // 100 · 45 ÷ (0.92 · (1.34 · 18 + 0.31)) = 200 mL > 190; at 12 mL/beat all is possible.
        assert!(cannot_be(45.0, &r) && !cannot_be(12.0, &r));
        // 100 · 1.5 ÷ 4 = 37.5 mL < 40.
        assert!(cannot_be(1.5, &r));
    }

    #[test]
    fn curves_are_even_numbers_around_the_test() {
        let c = equal_curves(&[point(800.0, 8.3), point(2000.0, 14.1)]);
        assert_eq!(c, vec![8.0, 10.0, 12.0, 14.0, 16.0, 18.0]);
        assert!(equal_curves(&[]).is_empty());
    }
}
