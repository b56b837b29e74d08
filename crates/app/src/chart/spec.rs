//! What a chart shows, without any place on screen.

use egui::Color32;

use super::ticks::Axis;
use crate::theme::Family;

/// Pattern of a line: lengths of dash and gap, px.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Dash(pub f32, pub f32);

/// Long dash of the carbon-dioxide family.
pub const LONG: Option<Dash> = Some(Dash(8.0, 3.0));
/// Short dash of HR.
pub const SHORT: Option<Dash> = Some(Dash(5.0, 2.0));
/// Dots of breathing frequency.
pub const DOTS: Option<Dash> = Some(Dash(2.0, 3.0));
/// Fine dots of an interval.
pub const FINE: Option<Dash> = Some(Dash(2.0, 2.0));
/// A line carried on beyond its data.
pub const CARRIED: Option<Dash> = Some(Dash(7.0, 4.0));

/// Shape of a point.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mark {
    /// A small dot.
    Dot,
    /// A small filled square.
    Square,
    /// An open square.
    OpenSquare,
    /// A short level stroke.
    Level,
    /// A filled triangle.
    Triangle,
    /// An open circle.
    Ring,
    /// A small ×: a breath left out.
    Cross,
}

/// A point in the chart's own coordinates.
pub type Point = [f64; 2];

/// Something drawn in a frame.
#[derive(Clone, Debug)]
pub enum Item {
    /// A line broken into pieces at gaps.
    Line {
        /// The pieces.
        pieces: Vec<Vec<Point>>,
        /// Width, px.
        width: f32,
        /// Colour.
        color: Color32,
        /// Pattern; `None` is solid.
        dash: Option<Dash>,
    },
    /// Points.
    Points {
        /// Where.
        points: Vec<Point>,
        /// Shape.
        mark: Mark,
        /// Radius, px.
        radius: f32,
        /// Colour.
        color: Color32,
    },
    /// A band between two lines over the same x.
    Band {
        /// x, lower, upper.
        rows: Vec<[f64; 3]>,
        /// Fill.
        fill: Color32,
        /// Edge.
        edge: Color32,
    },
    /// A closed area, convex or not; drawn as a fan around its mean point.
    Area {
        /// The corners.
        points: Vec<Point>,
        /// Fill.
        fill: Color32,
        /// Edge.
        edge: Color32,
    },
    /// Upright bars with caps, never joined: x, lower, upper.
    Bars {
        /// The bars.
        bars: Vec<[f64; 3]>,
        /// Colour.
        color: Color32,
    },
    /// A shaded stretch of x over the whole height.
    Stretch {
        /// From.
        from: f64,
        /// To.
        to: f64,
        /// Fill.
        fill: Color32,
        /// Edge, `None` without edges.
        edge: Option<Color32>,
    },
    /// Hatching right of an x, over the whole height.
    Hatch {
        /// From.
        from: f64,
        /// To.
        to: f64,
        /// Distance of the strokes, px.
        every: f32,
        /// Colour.
        color: Color32,
    },
}

/// Part of a title.
#[derive(Clone, Debug, PartialEq)]
pub enum Title {
    /// A name in its family's hue.
    Name(String, Family),
    /// A unit or remark in grey.
    Grey(String),
}

impl Title {
    /// A name.
    pub fn name(text: impl Into<String>, family: Family) -> Self {
        Title::Name(text.into(), family)
    }

    /// A remark.
    pub fn grey(text: impl Into<String>) -> Self {
        Title::Grey(text.into())
    }
}

/// A name beside its line.
#[derive(Clone, Debug)]
pub struct EndLabel {
    /// Where the line is.
    pub at: Point,
    /// The name.
    pub text: String,
    /// Colour of the name.
    pub color: Color32,
}

/// What is said in a frame that has no data.
#[derive(Clone, Debug, PartialEq)]
pub struct Missing {
    /// What is missing.
    pub what: String,
    /// What follows.
    pub then: String,
    /// What to do.
    pub todo: Option<crate::command::Command>,
}

/// One chart.
#[derive(Clone, Debug)]
pub struct Chart {
    /// Stable name, unique in its view.
    pub id: &'static str,
    /// Title at the left edge.
    pub title: Vec<Title>,
    /// Title at the right edge.
    pub right_title: Vec<Title>,
    /// x range.
    pub x: (f64, f64),
    /// Ground lines and labels along x; `None` for a time chart, whose labels stand under the column.
    pub x_axis: Option<Axis>,
    /// Unit at the end of that axis.
    pub x_unit: String,
    /// y axis.
    pub y: Axis,
    /// Labels at the right edge: y, text.
    pub right: Vec<(f64, String)>,
    /// What is drawn, in order.
    pub items: Vec<Item>,
    /// Names beside lines.
    pub labels: Vec<EndLabel>,
    /// Remarks set in the frame: where, text, grey.
    pub remarks: Vec<(Point, String)>,
    /// Lines on which the cursor sets a ring: y at the cursor, colour.
    pub rings: Vec<(f64, Color32)>,
    /// Said instead of data.
    pub missing: Option<Missing>,
    /// What the chart shows, in words.
    pub description: String,
    /// Whether the model of a normal response is drawn in it.
    pub modelled: bool,
}

impl Chart {
    /// An empty chart over `x`.
    #[must_use]
    pub fn new(id: &'static str, x: (f64, f64), y: Axis) -> Self {
        Self {
            id,
            title: Vec::new(),
            right_title: Vec::new(),
            x,
            x_axis: None,
            x_unit: String::new(),
            y,
            right: Vec::new(),
            items: Vec::new(),
            labels: Vec::new(),
            remarks: Vec::new(),
            rings: Vec::new(),
            missing: None,
            description: String::new(),
            modelled: false,
        }
    }

    /// The same with a second scale tied to the first: `value = scale · y + offset` at each tick.
    #[must_use]
    pub fn tied(mut self, scale: f64, offset: f64, axis: Axis) -> Self {
        self.right =
            self.y.ticks().into_iter().map(|y| (y, axis.label(scale * y + offset))).collect();
        self
    }
}

/// Cuts a column into pieces at missing values and at steps longer than `gap_s`.
#[must_use]
pub fn pieces(xs: &[f64], ys: &[Option<f64>], gap: f64) -> Vec<Vec<Point>> {
    let mut all: Vec<Vec<Point>> = Vec::new();
    let mut last: Option<f64> = None;
    for (x, y) in xs.iter().zip(ys) {
        let Some(y) = y else {
            last = None;
            continue;
        };
        match (last, all.last_mut()) {
            (Some(before), Some(piece)) if x - before <= gap => piece.push([*x, *y]),
            _ => all.push(vec![[*x, *y]]),
        }
        last = Some(*x);
    }
    all
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn gaps_stay_gaps() {
        let xs = [0.0, 1.0, 2.0, 40.0, 41.0];
        let ys = [Some(1.0), None, Some(3.0), Some(4.0), Some(5.0)];
        let pieces = pieces(&xs, &ys, 20.0);
        assert_eq!(
            pieces,
            vec![vec![[0.0, 1.0]], vec![[2.0, 3.0]], vec![[40.0, 4.0], [41.0, 5.0]]]
        );
    }
}
