//! The items of a chart as `egui_plot` draws them.

use std::ops::RangeInclusive;

use egui::emath::GuiRounding as _;
use egui::{Color32, Mesh, Pos2, Rect, Shape, Stroke, Ui, pos2, vec2};
use egui_plot::{PlotBounds, PlotGeometry, PlotItem, PlotItemBase, PlotTransform};

use super::spec::{Dash, Item, Mark, Point};
use super::thin;

/// One [`Item`] in a plot.
pub struct Drawn {
    base: PlotItemBase,
    item: Item,
}

impl Drawn {
    /// Wraps `item`.
    #[must_use]
    pub fn new(item: Item) -> Self {
        Self { base: PlotItemBase::new(String::new()), item }
    }
}

impl PlotItem for Drawn {
    fn shapes(&self, ui: &Ui, transform: &PlotTransform, shapes: &mut Vec<Shape>) {
        let frame = transform.frame();
        // As `position_from_point` does, its divisions done once: a long record has many points.
        let (low, [across, up]) = (transform.bounds().min(), transform.dpos_dvalue());
        let origin = [f64::from(frame.left()), f64::from(frame.bottom())];
        let place = |p: &Point| {
            let x = origin[0] + (p[0] - low[0]) * across;
            let y = origin[1] + (p[1] - low[1]) * up;
            pos2(x as f32, y as f32)
        };
        let pen = Pen { frame: *frame, pixels_per_point: ui.pixels_per_point() };
        match &self.item {
            Item::Line { pieces, width, color, dash } => {
                for piece in pieces {
                    let points: Vec<Pos2> = piece.iter().map(place).collect();
                    pen.stroke(&points, Stroke::new(*width, *color), *dash, shapes);
                }
            }
            Item::Points { points, mark, radius, color } => {
                pen.points(points.iter().map(place), (*mark, *radius, *color), shapes);
            }
            Item::Band { rows, fill, edge } => band(rows, *fill, *edge, &place, &pen, shapes),
            Item::Area { points, fill, edge } => {
                let points: Vec<Pos2> = points.iter().map(place).collect();
                area(&points, *fill, *edge, shapes);
            }
            Item::Bars { bars, color } => {
                let stroke = Stroke::new(1.5, *color);
                for [x, low, high] in bars {
                    let (a, b) = (place(&[*x, *low]), place(&[*x, *high]));
                    shapes.push(Shape::line_segment([a, b], stroke));
                    for end in [a, b] {
                        let cap = vec2(3.5, 0.0);
                        shapes.push(Shape::line_segment([end - cap, end + cap], stroke));
                    }
                }
            }
            Item::Stretch { from, to, fill, edge } => {
                let (a, b) = (place(&[*from, 0.0]).x, place(&[*to, 0.0]).x);
                let rect = Rect::from_x_y_ranges(a..=b, frame.y_range());
                shapes.push(Shape::rect_filled(rect, 0.0, *fill));
                if let Some(edge) = edge {
                    for x in [a, b] {
                        shapes.push(Shape::vline(x, frame.y_range(), Stroke::new(1.0, *edge)));
                    }
                }
            }
            Item::Hatch { from, to, every, color } => {
                let (a, b) = (place(&[*from, 0.0]).x, place(&[*to, 0.0]).x.min(frame.right()));
                hatch(Rect::from_x_y_ranges(a..=b, frame.y_range()), *every, *color, shapes);
            }
        }
    }

    fn initialize(&mut self, _x_range: RangeInclusive<f64>) {}

    fn color(&self) -> Color32 {
        Color32::TRANSPARENT
    }

    fn geometry(&self) -> PlotGeometry<'_> {
        PlotGeometry::None
    }

    fn bounds(&self) -> PlotBounds {
        PlotBounds::NOTHING
    }

    fn base(&self) -> &PlotItemBase {
        &self.base
    }

    fn base_mut(&mut self) -> &mut PlotItemBase {
        &mut self.base
    }
}

/// How lines and points are drawn: the frame and the screen they are drawn for.
struct Pen {
    frame: Rect,
    pixels_per_point: f32,
}

impl Pen {
    /// Adds a line with its pattern.
    fn stroke(&self, points: &[Pos2], stroke: Stroke, dash: Option<Dash>, to: &mut Vec<Shape>) {
        let scale = self.pixels_per_point;
        if let Some(mut bars) = thin::thicket(points, self.frame, stroke.width, scale) {
            if let Some(Dash(on, off)) = dash {
                bars.retain(|bar| (bar.left() - self.frame.left()).rem_euclid(on + off) < on);
            }
            self.rects(bars, stroke.color, to);
            return;
        }
        let points = thin::line(points, scale);
        match dash {
            _ if points.len() < 2 => {}
            None => to.push(Shape::line(points, stroke)),
            Some(dash) => {
                to.extend(dashes(&points, dash).into_iter().map(|d| Shape::line(d, stroke)));
            }
        }
    }

    /// Adds rectangles of whole pixels: two triangles each, in one mesh.
    fn rects(&self, rects: Vec<Rect>, color: Color32, to: &mut Vec<Shape>) {
        if rects.is_empty() {
            return;
        }
        let mut mesh = Mesh::default();
        for rect in rects {
            mesh.add_colored_rect(rect.round_to_pixels(self.pixels_per_point), color);
        }
        to.push(Shape::mesh(mesh));
    }

    /// Adds points; those above or below the frame stand as small marks at its edge.
    fn points(
        &self,
        points: impl Iterator<Item = Pos2>,
        (mark, radius, color): (Mark, f32, Color32),
        to: &mut Vec<Shape>,
    ) {
        let frame = self.frame;
        let all: Vec<Pos2> = points.collect();
        let mut last = f32::NEG_INFINITY;
        for p in &all {
            let is_beyond = frame.x_range().contains(p.x) && !frame.y_range().contains(p.y);
            // Marks within a pixel of each other are one.
            if is_beyond && (p.x - last).abs() * self.pixels_per_point >= 1.0 {
                beyond(*p, &frame, color, to);
                last = p.x;
            }
        }
        if let Some(bars) = thin::cloud(&all, frame, self.pixels_per_point) {
            self.rects(bars, color, to);
            return;
        }
        let mut squares = Vec::new();
        for p in all.into_iter().filter(|p| frame.contains(*p)) {
            match square(p, mark, radius) {
                Some(rect) => squares.push(rect),
                None => point(p, mark, radius, color, to),
            }
        }
        self.rects(squares, color, to);
    }
}

/// The drawn stretches of a dashed line, each as one line with the bends it passes.
fn dashes(points: &[Pos2], Dash(on, off): Dash) -> Vec<Vec<Pos2>> {
    let mut all = Vec::new();
    if on <= 0.0 || off <= 0.0 {
        return all;
    }
    let mut dash = vec![points[0]];
    let (mut drawing, mut left) = (true, on);
    for pair in points.windows(2) {
        let (from, to) = (pair[0], pair[1]);
        let length = from.distance(to);
        let mut done = 0.0;
        while length - done > left {
            done += left;
            let at = from + (to - from) * (done / length);
            if drawing {
                dash.push(at);
                all.push(std::mem::take(&mut dash));
            } else {
                dash = vec![at];
            }
            drawing = !drawing;
            left = if drawing { on } else { off };
        }
        left -= length - done;
        if drawing {
            dash.push(to);
        }
    }
    if drawing && dash.len() > 1 {
        all.push(dash);
    }
    all
}

/// Marks that are squares or bars of whole pixels: two triangles each, in one mesh.
fn square(p: Pos2, mark: Mark, r: f32) -> Option<Rect> {
    let half = match mark {
        // A square of this size is not told from a disc.
        Mark::Dot if r <= 1.2 => vec2(r, r),
        Mark::Square => vec2(r, r),
        Mark::Level => vec2(r, 0.5),
        _ => return None,
    };
    Some(Rect::from_min_max(p - half, p + half))
}

/// Adds one mark.
pub fn point(p: Pos2, mark: Mark, r: f32, color: Color32, shapes: &mut Vec<Shape>) {
    let thin = Stroke::new(1.0, color);
    if let Some(rect) = square(p, mark, r) {
        shapes.push(Shape::rect_filled(rect, 0.0, color));
        return;
    }
    match mark {
        Mark::Dot | Mark::Square | Mark::Level => shapes.push(Shape::circle_filled(p, r, color)),
        Mark::OpenSquare => {
            let square = Rect::from_center_size(p, vec2(2.0 * r, 2.0 * r));
            shapes.push(Shape::rect_stroke(square, 0.0, thin, egui::StrokeKind::Middle));
        }
        Mark::Triangle => shapes.push(Shape::convex_polygon(
            vec![p + vec2(0.0, -r), p + vec2(r, 0.8 * r), p + vec2(-r, 0.8 * r)],
            color,
            Stroke::NONE,
        )),
        Mark::Ring => shapes.push(Shape::circle_stroke(p, r, Stroke::new(1.5, color))),
        Mark::Cross => {
            let (a, b) = (vec2(r, r), vec2(r, -r));
            shapes.push(Shape::line_segment([p - a, p + a], thin));
            shapes.push(Shape::line_segment([p - b, p + b], thin));
        }
    }
}

/// A breath outside the frame: a small open triangle at its edge.
fn beyond(p: Pos2, frame: &Rect, color: Color32, shapes: &mut Vec<Shape>) {
    let (y, up) =
        if p.y < frame.top() { (frame.top() + 3.0, -1.0) } else { (frame.bottom() - 3.0, 1.0) };
    let c = pos2(p.x, y);
    let corners =
        vec![c + vec2(0.0, 2.5 * up), c + vec2(2.5, -2.0 * up), c + vec2(-2.5, -2.0 * up)];
    shapes.push(Shape::closed_line(corners, Stroke::new(1.0, color)));
}

fn band(
    rows: &[[f64; 3]],
    fill: Color32,
    edge: Color32,
    place: &impl Fn(&Point) -> Pos2,
    pen: &Pen,
    shapes: &mut Vec<Shape>,
) {
    let low: Vec<Pos2> = rows.iter().map(|r| place(&[r[0], r[1]])).collect();
    let high: Vec<Pos2> = rows.iter().map(|r| place(&[r[0], r[2]])).collect();
    // Rows nearer to each other than a pixel are one.
    let mut edges: Vec<(Pos2, Pos2)> = Vec::new();
    for (i, pair) in low.iter().copied().zip(high.iter().copied()).enumerate() {
        let far = edges.last().is_none_or(|e| (pair.0.x - e.0.x) * pen.pixels_per_point >= 1.0);
        if far || i + 1 == low.len() {
            edges.push(pair);
        }
    }
    let mut mesh = Mesh::default();
    for (a, b) in &edges {
        mesh.colored_vertex(*a, fill);
        mesh.colored_vertex(*b, fill);
    }
    for i in 1..edges.len() as u32 {
        mesh.add_triangle(2 * i - 2, 2 * i - 1, 2 * i);
        mesh.add_triangle(2 * i - 1, 2 * i, 2 * i + 1);
    }
    shapes.push(Shape::mesh(mesh));
    for line in [low, high] {
        pen.stroke(&line, Stroke::new(1.0, edge), None, shapes);
    }
}

fn area(points: &[Pos2], fill: Color32, edge: Color32, shapes: &mut Vec<Shape>) {
    if points.len() < 3 {
        return;
    }
    let n = points.len() as u32;
    let sum = points.iter().fold(egui::Vec2::ZERO, |s, p| s + p.to_vec2());
    let mut mesh = Mesh::default();
    mesh.colored_vertex((sum / points.len() as f32).to_pos2(), fill);
    for p in points {
        mesh.colored_vertex(*p, fill);
    }
    for i in 0..n {
        mesh.add_triangle(0, 1 + i, 1 + (i + 1) % n);
    }
    shapes.push(Shape::mesh(mesh));
    if edge != Color32::TRANSPARENT {
        shapes.push(Shape::closed_line(points.to_vec(), Stroke::new(1.0, edge)));
    }
}

fn hatch(rect: Rect, every: f32, color: Color32, shapes: &mut Vec<Shape>) {
    if rect.width() <= 0.0 || every <= 0.0 {
        return;
    }
    let stroke = Stroke::new(1.0, color);
    let mut offset = 0.0;
    while offset < rect.width() + rect.height() {
        // A stroke rising to the right, cut to the rectangle.
        let start = offset.min(rect.height());
        let x0 = rect.left() + (offset - start);
        let rise = start.min(rect.right() - x0);
        let a = pos2(x0, rect.top() + start);
        shapes.push(Shape::line_segment([a, a + vec2(rise, -rise)], stroke));
        offset += every;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn dashes_follow_the_line_round_its_bends() {
        // 10 along, 10 down; 6 on, 3 off: drawn 0–6, 9–15 (round the bend at 10), 18–20.
        let line = [pos2(0.0, 0.0), pos2(10.0, 0.0), pos2(10.0, 10.0)];
        let drawn = dashes(&line, Dash(6.0, 3.0));
        assert_eq!(
            drawn,
            [
                vec![pos2(0.0, 0.0), pos2(6.0, 0.0)],
                vec![pos2(9.0, 0.0), pos2(10.0, 0.0), pos2(10.0, 5.0)],
                vec![pos2(10.0, 8.0), pos2(10.0, 10.0)],
            ]
        );
    }
}
