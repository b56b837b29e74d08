//! Lines and points with no more corners than a screen can show: each costs as much to paint as a
//! visible stretch.

use egui::{Pos2, Rect, Vec2, pos2};

/// How far a thinned line may leave a point it passes over, in pixels of the screen.
const TOLERANCE: f32 = 0.1;

/// Points per column of pixels beyond which only their extremes are drawn.
const DENSE: usize = 8;

/// The line through some of `points`, nowhere further than a tenth of a pixel from the others.
/// Its ends and every turn back stay.
#[must_use]
pub fn line(points: &[Pos2], pixels_per_point: f32) -> Vec<Pos2> {
    let reach = TOLERANCE / pixels_per_point;
    let Some((&first, rest)) = points.split_first() else {
        return Vec::new();
    };
    let (mut kept, mut anchor, mut before) = (vec![first], first, first);
    let mut cone = None;
    for &p in rest {
        cone = match narrowed(cone, p - anchor, reach) {
            Some(cone) => cone,
            None => {
                kept.push(before);
                anchor = before;
                narrowed(None, p - anchor, reach).flatten()
            }
        };
        before = p;
    }
    if before != anchor {
        kept.push(before);
    }
    kept
}

/// The directions in which a straight line may go on from its last kept point.
#[derive(Clone, Copy)]
struct Cone {
    low: Vec2,
    high: Vec2,
    /// Distance of the furthest point so far.
    far: f32,
}

/// What is left of `cone` after a point at `v` from its tip; `None` if `v` lies outside it or
/// turns back. A point at the tip leaves the cone as it is, here even none.
fn narrowed(cone: Option<Cone>, v: Vec2, reach: f32) -> Option<Option<Cone>> {
    let distance = v.length();
    if let Some(cone) = &cone {
        let inside = cross(cone.low, v) >= 0.0 && cross(v, cone.high) >= 0.0;
        if !inside || distance < cone.far - reach {
            return None;
        }
    }
    if distance <= reach {
        return Some(cone);
    }
    let sine = reach / distance;
    let (along, across) = (v * (1.0 - sine * sine).sqrt(), v.rot90() * sine);
    let (low, high) = (along + across, along - across);
    let mut next = cone.unwrap_or(Cone { low, high, far: distance });
    if cross(next.low, low) > 0.0 {
        next.low = low;
    }
    if cross(high, next.high) > 0.0 {
        next.high = high;
    }
    next.far = next.far.max(distance);
    Some(Some(next))
}

fn cross(a: Vec2, b: Vec2) -> f32 {
    a.x * b.y - a.y * b.x
}

/// Of a long run of points that advances along x: in each column of pixels the first, the lowest,
/// the highest and the last, in their order. Shorter runs stay as they are.
#[must_use]
pub fn columns(points: Vec<Pos2>, width: f32, pixels_per_point: f32) -> Vec<Pos2> {
    if points.len() <= dense(width, pixels_per_point) {
        return points;
    }
    let column = |p: &Pos2| (p.x * pixels_per_point).floor();
    let mut kept = Vec::new();
    for group in points.chunk_by(|a, b| column(a) == column(b)) {
        let by_y = |i: &usize, k: &usize| group[*i].y.total_cmp(&group[*k].y);
        let low = (0..group.len()).min_by(by_y).unwrap_or(0);
        let high = (0..group.len()).max_by(by_y).unwrap_or(0);
        let mut corners = [0, low.min(high), low.max(high), group.len() - 1].to_vec();
        corners.dedup();
        kept.extend(corners.into_iter().map(|i| group[i]));
    }
    kept
}

/// Of a cloud too dense to be told apart: in each column of pixels the bar from its lowest to its
/// highest point. `None` for a cloud that is not.
#[must_use]
pub fn bars(points: &[Pos2], frame: Rect, pixels_per_point: f32) -> Option<Vec<Rect>> {
    if points.len() <= dense(frame.width(), pixels_per_point) {
        return None;
    }
    let columns = (frame.width() * pixels_per_point).ceil() as usize + 1;
    let mut spans = vec![(f32::INFINITY, f32::NEG_INFINITY); columns];
    for p in points {
        let column = ((p.x - frame.left()) * pixels_per_point) as usize;
        if let Some(span) = spans.get_mut(column) {
            *span = (span.0.min(p.y), span.1.max(p.y));
        }
    }
    let pixel = 1.0 / pixels_per_point;
    let place = |(i, (low, high)): (usize, (f32, f32))| {
        let left = frame.left() + i as f32 * pixel;
        (low <= high).then(|| Rect::from_min_max(pos2(left, low), pos2(left + pixel, high + pixel)))
    };
    Some(spans.into_iter().enumerate().filter_map(place).collect())
}

fn dense(width: f32, pixels_per_point: f32) -> usize {
    DENSE * (width * pixels_per_point).max(1.0) as usize
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Distance of `p` from the stretch between `a` and `b`.
    fn distance(p: Pos2, a: Pos2, b: Pos2) -> f32 {
        let along = (b - a).normalized();
        let share = (p - a).dot(along).clamp(0.0, a.distance(b));
        p.distance(a + along * share)
    }

    #[test]
    fn a_straight_line_is_its_two_ends() {
        let fine: Vec<Pos2> = (0..=100).map(|i| pos2(i as f32 * 0.5, i as f32 * 0.25)).collect();
        assert_eq!(line(&fine, 1.0), [fine[0], fine[100]]);
        assert_eq!(line(&[], 1.0), []);
        assert_eq!(line(&fine[..1], 1.0), fine[..1]);
    }

    #[test]
    fn a_spike_and_a_turn_back_stay() {
        let spike = [pos2(0.0, 0.0), pos2(0.2, 30.0), pos2(0.4, 0.0)];
        assert_eq!(line(&spike, 1.0), spike);
        let back = [pos2(0.0, 0.0), pos2(10.0, 0.0), pos2(5.0, 0.0)];
        assert_eq!(line(&back, 1.0), back);
    }

    #[test]
    fn no_point_is_further_from_the_thinned_line_than_told() {
        // A wave with a ripple: 400 points, none further than a tenth of a pixel at 2 per point.
        let wave = |i: i32| {
            let x = i as f32 * 0.7;
            pos2(x, 40.0 * (x / 60.0).sin() + 0.2 * (x * 1.9).sin())
        };
        let fine: Vec<Pos2> = (0..400).map(wave).collect();
        let kept = line(&fine, 2.0);
        assert!(kept.len() < fine.len());
        for p in &fine {
            let off = kept.windows(2).map(|w| distance(*p, w[0], w[1])).fold(f32::MAX, f32::min);
            assert!(off <= 0.05 + 1e-4, "{p:?} is {off} off");
        }
    }

    #[test]
    fn a_dense_run_keeps_ends_and_extremes_of_each_column() {
        // Two columns of pixels, ten points each (more than eight per column).
        let y = [3.0, 1.0, 2.0, 9.0, 4.0, 5.0, 6.0, 7.0, 8.0, 2.5];
        let points: Vec<Pos2> = (0..20).map(|i| pos2(i as f32 * 0.1, y[i % 10])).collect();
        let kept: Vec<f32> = columns(points.clone(), 2.0, 1.0).iter().map(|p| p.y).collect();
        assert_eq!(kept, [3.0, 1.0, 9.0, 2.5, 3.0, 1.0, 9.0, 2.5]);
        assert_eq!(columns(points.clone(), 3.0, 1.0), points);
    }

    #[test]
    fn a_dense_cloud_becomes_one_bar_per_column() {
        let frame = Rect::from_min_max(pos2(10.0, 0.0), pos2(12.0, 50.0));
        let points: Vec<Pos2> = (0..20).map(|i| pos2(10.0 + i as f32 * 0.1, i as f32)).collect();
        let bars = bars(&points, frame, 1.0).expect("dense");
        let wanted = [[10.0, 0.0, 11.0, 10.0], [11.0, 10.0, 12.0, 20.0]]
            .map(|[a, b, c, d]| Rect::from_min_max(pos2(a, b), pos2(c, d)));
        assert_eq!(bars, wanted);
    }
}
