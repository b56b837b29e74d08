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

/// Of a cloud of points too dense to be told apart: in each column of pixels the bar from the
/// lowest to the highest point inside the frame. `None` for a cloud that is not.
#[must_use]
pub fn cloud(points: &[Pos2], frame: Rect, pixels_per_point: f32) -> Option<Vec<Rect>> {
    let mut columns = Columns::of(points, frame, pixels_per_point)?;
    for p in points.iter().filter(|p| frame.contains(**p)) {
        columns.reach(p.x, p.y, p.y);
    }
    Some(columns.bars(1.0 / pixels_per_point))
}

/// Of a line that runs up and down within single columns of pixels: in each column the bar that
/// holds all of it, `width` high at least. `None` for a line that does not.
#[must_use]
pub fn thicket(
    points: &[Pos2],
    frame: Rect,
    width: f32,
    pixels_per_point: f32,
) -> Option<Vec<Rect>> {
    let mut columns = Columns::of(points, frame, pixels_per_point)?;
    for pair in points.windows(2) {
        // Joined to its neighbour where the line leaves a column.
        columns.reach(pair[1].x, pair[0].y, pair[1].y);
    }
    Some(columns.bars(width))
}

/// Lowest and highest y in each column of pixels of a frame.
struct Columns {
    left: f32,
    pixels_per_point: f32,
    spans: Vec<(f32, f32)>,
}

impl Columns {
    /// Empty columns for points that crowd them.
    fn of(points: &[Pos2], frame: Rect, pixels_per_point: f32) -> Option<Self> {
        let columns = (frame.width() * pixels_per_point).ceil().max(1.0) as usize;
        (points.len() > DENSE * columns).then(|| Self {
            left: frame.left(),
            pixels_per_point,
            spans: vec![(f32::INFINITY, f32::NEG_INFINITY); columns + 1],
        })
    }

    fn reach(&mut self, x: f32, y0: f32, y1: f32) {
        let column = (x - self.left) * self.pixels_per_point;
        // Points left of the frame would all be cast to its first column.
        if column >= 0.0
            && let Some(span) = self.spans.get_mut(column as usize)
        {
            *span = (span.0.min(y0).min(y1), span.1.max(y0).max(y1));
        }
    }

    fn bars(self, width: f32) -> Vec<Rect> {
        let pixel = 1.0 / self.pixels_per_point;
        let place = |(i, (low, high)): (usize, (f32, f32))| {
            let left = self.left + i as f32 * pixel;
            let (top, bottom) = (low - 0.5 * width, high + 0.5 * width);
            let corners = (pos2(left, top), pos2(left + pixel, bottom));
            (low <= high).then(|| Rect::from_min_max(corners.0, corners.1))
        };
        self.spans.into_iter().enumerate().filter_map(place).collect()
    }
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

    fn bar([left, top, right, bottom]: [f32; 4]) -> Rect {
        Rect::from_min_max(pos2(left, top), pos2(right, bottom))
    }

    /// Two columns of pixels from x = 10, ten points each (dense is more than eight).
    const FRAME: Rect = Rect { min: pos2(10.0, 0.0), max: pos2(12.0, 50.0) };

    fn points(y: impl Fn(usize) -> f32) -> Vec<Pos2> {
        (0..20).map(|i| pos2(10.05 + i as f32 * 0.1, y(i))).collect()
    }

    #[test]
    fn a_dense_cloud_becomes_one_bar_per_column() {
        let rising = points(|i| i as f32);
        let bars = cloud(&rising, FRAME, 1.0).expect("dense");
        assert_eq!(bars, [bar([10.0, -0.5, 11.0, 9.5]), bar([11.0, 9.5, 12.0, 19.5])]);
        assert_eq!(cloud(&rising[..16], FRAME, 1.0), None);
    }

    #[test]
    fn a_dense_line_fills_what_it_runs_through_and_stays_joined() {
        // Up and down between 3 and 7 in the first column, at 9 in the second.
        let line = points(|i| if i >= 10 { 9.0 } else { [3.0, 7.0][i % 2] });
        let bars = thicket(&line, FRAME, 2.0, 1.0).expect("dense");
        assert_eq!(bars, [bar([10.0, 2.0, 11.0, 8.0]), bar([11.0, 6.0, 12.0, 10.0])]);
    }
}
