//! Painting a chart as SVG: ink, greys and dashes only, so that it survives a copier.

use super::html::escaped;
use crate::presentation::charts::{Axis, Chart, Series, Stroke};

/// Where a chart stands inside its drawing.
pub(super) struct Frame {
    /// Left edge of the plot.
    pub left: f64,
    /// Top edge.
    pub top: f64,
    /// Width.
    pub width: f64,
    /// Height.
    pub height: f64,
    /// Whether the horizontal axis has labels.
    pub x_labels: bool,
}

impl Frame {
    fn x(&self, axis: &Axis, v: f64) -> f64 {
        self.left + (v - axis.from) / (axis.to - axis.from) * self.width
    }

    fn y(&self, axis: &Axis, v: f64) -> f64 {
        self.top + self.height - (v - axis.from) / (axis.to - axis.from) * self.height
    }

    fn right(&self) -> f64 {
        self.left + self.width
    }

    fn bottom(&self) -> f64 {
        self.top + self.height
    }
}

/// The drawing of `charts`, each in its frame.
pub(super) fn drawing(width: f64, height: f64, title: &str, charts: &[(&Chart, Frame)]) -> String {
    let mut out = format!(
        "<svg class=\"chart\" viewBox=\"0 0 {width:.0} {height:.0}\" width=\"{width:.0}\" height=\"{height:.0}\" role=\"img\">\n<title>{}</title>\n<desc>{}</desc>\n",
        escaped(title),
        escaped(&charts.iter().map(|(c, _)| described(c)).collect::<Vec<_>>().join(" "))
    );
    for (chart, frame) in charts {
        paint(&mut out, chart, frame);
    }
    out.push_str("</svg>\n");
    out
}

/// What the chart shows, in words.
fn described(chart: &Chart) -> String {
    let line = chart.series.iter().find(|s| s.stroke == Stroke::Line);
    let points = || line.into_iter().flat_map(|s| s.runs.iter().flatten());
    let low = points().map(|p| p.1).fold(f64::INFINITY, f64::min);
    let high = points().map(|p| p.1).fold(f64::NEG_INFINITY, f64::max);
    if low > high {
        return format!("{}.", chart.described);
    }
    format!("{}: from {low:.1} to {high:.1}.", chart.described)
}

fn paint(out: &mut String, chart: &Chart, f: &Frame) {
    grid(out, chart, f);
    comb(out, chart, f);
    for series in &chart.series {
        let mut clipped = series.clone();
        for run in &mut clipped.runs {
            run.retain(|p| inside(p.0, &chart.x) && inside(p.1, &chart.y));
        }
        match series.stroke {
            Stroke::Dots => dots(out, chart, f, &clipped),
            other => line(out, chart, f, &clipped, other),
        }
    }
    marks(out, chart, f);
    if !chart.name.is_empty() {
        backed(out, f.left + 6.0, f.top + 14.0, "name", &chart.name);
    }
}

fn inside(v: f64, axis: &Axis) -> bool {
    v >= axis.from && v <= axis.to
}

fn grid(out: &mut String, chart: &Chart, f: &Frame) {
    let (right, bottom) = (f.right(), f.bottom());
    for (v, label) in &chart.y.ticks {
        let y = f.y(&chart.y, *v);
        rule(out, "grid", f.left, y, right, y);
        text(out, f.left - 5.0, y + 3.8, "tick end", label);
    }
    let last = chart.x.ticks.len().saturating_sub(1);
    for (i, (v, label)) in chart.x.ticks.iter().enumerate() {
        let x = f.x(&chart.x, *v);
        rule(out, "grid", x, f.top, x, bottom);
        if f.x_labels {
            let class = if i == last && x > right - 12.0 { "tick end" } else { "tick mid" };
            text(out, if class.ends_with("end") { right } else { x }, bottom + 13.0, class, label);
        }
    }
    rule(out, "frame", f.left, f.top, f.left, bottom);
    rule(out, "frame", f.left, bottom, right, bottom);
}

/// Least distance between the teeth of a comb.
const TOOTH: f64 = 5.0;

/// The predicted range as a comb of upright strokes with thin edges: it survives a copier and is
/// never taken for data.
fn comb(out: &mut String, chart: &Chart, f: &Frame) {
    let mut last = f64::NEG_INFINITY;
    let mut edges = (Vec::new(), Vec::new());
    for (x, low, high) in &chart.range {
        if !inside(*x, &chart.x) || *high < chart.y.from || *low > chart.y.to {
            continue;
        }
        let x = f.x(&chart.x, *x);
        let low = f.y(&chart.y, low.max(chart.y.from));
        let top = f.y(&chart.y, high.min(chart.y.to));
        edges.0.push(format!("{x:.1},{low:.1}"));
        edges.1.push(format!("{x:.1},{top:.1}"));
        if x - last >= TOOTH {
            last = x;
            rule(out, "comb", x, low, x, top);
        }
    }
    for edge in [edges.0, edges.1].into_iter().filter(|e| e.len() > 1) {
        out.push_str(&format!("<polyline class=\"edge\" points=\"{}\"/>\n", edge.join(" ")));
    }
}

fn rule(out: &mut String, class: &str, x1: f64, y1: f64, x2: f64, y2: f64) {
    out.push_str(&format!(
        "<line class=\"{class}\" x1=\"{x1:.1}\" y1=\"{y1:.1}\" x2=\"{x2:.1}\" y2=\"{y2:.1}\"/>\n"
    ));
}

fn text(out: &mut String, x: f64, y: f64, class: &str, words: &str) {
    out.push_str(&format!(
        "<text class=\"{class}\" x=\"{x:.1}\" y=\"{y:.1}\">{}</text>\n",
        escaped(words)
    ));
}

/// A name on a ground of paper, so that lines under it do not cross its letters.
fn backed(out: &mut String, x: f64, y: f64, class: &str, words: &str) {
    let width = 6.3 * words.chars().count() as f64 + 4.0;
    let left = if class.contains("end") { x - width + 2.0 } else { x - 2.0 };
    let top = y - 11.0;
    out.push_str(&format!(
        "<rect class=\"ground\" x=\"{left:.1}\" y=\"{top:.1}\" width=\"{width:.1}\" height=\"14\"/>\n"
    ));
    text(out, x, y, class, words);
}

fn dots(out: &mut String, chart: &Chart, f: &Frame, series: &Series) {
    out.push_str("<g class=\"dots\">");
    for (x, y) in series.runs.iter().flatten() {
        let (x, y) = (f.x(&chart.x, *x), f.y(&chart.y, *y));
        out.push_str(&format!("<circle cx=\"{x:.1}\" cy=\"{y:.1}\" r=\"1.3\"/>"));
    }
    out.push_str("</g>\n");
}

fn line(out: &mut String, chart: &Chart, f: &Frame, series: &Series, stroke: Stroke) {
    let class = match stroke {
        Stroke::Dashed => "dashed",
        Stroke::Thin => "thin",
        _ => "heavy",
    };
    for run in series.runs.iter().filter(|r| r.len() > 1) {
        let points: Vec<String> = run
            .iter()
            .map(|(x, y)| format!("{:.1},{:.1}", f.x(&chart.x, *x), f.y(&chart.y, *y)))
            .collect();
        out.push_str(&format!("<polyline class=\"{class}\" points=\"{}\"/>\n", points.join(" ")));
    }
    let last = series.runs.iter().flatten().next_back();
    if let (Some(label), Some((x, y))) = (&series.label, last) {
        let y = f.y(&chart.y, *y).max(f.top + 12.0);
        let left = (f.x(&chart.x, *x) + 6.0).min(f.right() - 6.3 * label.chars().count() as f64);
        backed(out, left, y + 4.0, "name", label);
    }
}

fn marks(out: &mut String, chart: &Chart, f: &Frame) {
    if let Some((x, label)) = &chart.upright {
        let x = f.x(&chart.x, *x);
        rule(out, "upright", x, f.top, x, f.bottom());
        backed(out, x - 6.0, f.bottom() - 6.0, "name end", label);
    }
    if let Some((from, to, label)) = &chart.stretch {
        let (a, b, y) = (f.x(&chart.x, *from), f.x(&chart.x, *to), f.top + 8.0);
        rule(out, "stretch", a, y, b, y);
        rule(out, "stretch", a, y - 4.0, a, y + 4.0);
        rule(out, "stretch", b, y - 4.0, b, y + 4.0);
        backed(out, a - 6.0, y + 4.0, "name end", label);
    }
}
