//! Where everything stands: the grid of the window by its logical width, and columns of frames.

use egui::{Rect, Vec2, pos2, vec2};

/// The smallest window for which the layout is made, px at 1×: a laptop of 1280 × 720 less a task
/// bar.
pub const LEAST: Vec2 = vec2(1240.0, 660.0);

/// Measures of the window, px at 1×.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Grid {
    /// Height of the top bar.
    pub top_bar: f32,
    /// Height of the row of views.
    pub view_row: f32,
    /// Outer margin.
    pub margin: f32,
    /// Height of the caution line.
    pub caution: f32,
    /// Height of the value strip.
    pub strip: f32,
    /// Width of the findings sheet.
    pub sheet: f32,
    /// Gap between columns.
    pub gap: f32,
    /// Left ticks, right ticks of a column.
    pub ticks: (f32, f32),
    /// Title line above a frame, gap between rows.
    pub title: f32,
    /// Gap under a frame.
    pub row_gap: f32,
    /// Time labels, ribbon, notes.
    pub foot: (f32, f32, f32),
    /// Whether the window is narrow: shorter words, fewer cells.
    pub narrow: bool,
}

impl Grid {
    /// The grid for a window `width` px wide.
    #[must_use]
    pub fn of(width: f32) -> Self {
        if width < 1600.0 {
            Self {
                top_bar: 36.0,
                view_row: 32.0,
                margin: 12.0,
                caution: 20.0,
                strip: 40.0,
                sheet: 252.0,
                gap: 10.0,
                ticks: (34.0, 50.0),
                title: 17.0,
                row_gap: 2.0,
                foot: (16.0, 20.0, 30.0),
                narrow: true,
            }
        } else {
            Self {
                top_bar: 44.0,
                view_row: 36.0,
                margin: 16.0,
                caution: 24.0,
                strip: 46.0,
                sheet: (360.0 + (width - 1600.0) * 0.2).min(if width < 2400.0 {
                    424.0
                } else {
                    480.0
                }),
                gap: 20.0,
                ticks: (38.0, 58.0),
                title: 20.0,
                row_gap: 6.0,
                foot: (18.0, 24.0, 36.0),
                narrow: false,
            }
        }
    }

    /// Gap between the charts and the sheet.
    #[must_use]
    pub fn sheet_gap(&self) -> f32 {
        if self.narrow { 10.0 } else { 16.0 }
    }
}

/// The parts of the window.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Parts {
    /// Top bar.
    pub top_bar: Rect,
    /// Row of views.
    pub view_row: Rect,
    /// Value strip.
    pub strip: Rect,
    /// Where the view stands.
    pub view: Rect,
    /// Findings sheet.
    pub sheet: Rect,
    /// Caution line.
    pub caution: Rect,
}

impl Parts {
    /// Divides `window`.
    #[must_use]
    pub fn of(window: Rect, grid: &Grid) -> Self {
        let row = |top: f32, height: f32| {
            Rect::from_min_size(pos2(window.left(), top), vec2(window.width(), height.max(1.0)))
        };
        let top_bar = row(window.top(), grid.top_bar);
        let view_row = row(top_bar.bottom(), grid.view_row);
        let caution = row(window.bottom() - grid.caution, grid.caution);
        let top = view_row.bottom() + if grid.narrow { 5.0 } else { 8.0 };
        let bottom = (caution.top() - if grid.narrow { 4.0 } else { 8.0 }).max(top + 1.0);
        let right = window.right() - grid.margin;
        let sheet_left = (right - grid.sheet).max(window.left() + grid.margin);
        let sheet = Rect::from_min_max(pos2(sheet_left, top), pos2(right, bottom));
        let left = window.left() + grid.margin;
        let view_right = (sheet_left - grid.sheet_gap()).max(left + 1.0);
        let strip = Rect::from_min_size(pos2(left, top), vec2(view_right - left, grid.strip));
        let view_top = (strip.bottom() + if grid.narrow { 4.0 } else { 6.0 }).min(bottom - 1.0);
        let view = Rect::from_min_max(pos2(left, view_top), pos2(view_right, bottom));
        Self { top_bar, view_row, strip, view, sheet, caution }
    }
}

/// Frames of equal left and right edge under each other, and what stands under them.
#[derive(Clone, Debug, PartialEq)]
pub struct Column {
    /// The frames, top to bottom.
    pub frames: Vec<Rect>,
    /// Time labels.
    pub labels: Rect,
    /// Phase ribbon.
    pub ribbon: Rect,
    /// Notes.
    pub notes: Rect,
}

impl Column {
    /// Divides `rect` into frames whose heights are as `weights`, with a foot.
    #[must_use]
    pub fn of(rect: Rect, grid: &Grid, weights: &[f32]) -> Self {
        let (left, right) = (rect.left() + grid.ticks.0, rect.right() - grid.ticks.1);
        let right = right.max(left + 1.0);
        let (labels_h, ribbon_h, notes_h) = grid.foot;
        let foot = labels_h + ribbon_h + notes_h + 6.0;
        let n = weights.len() as f32;
        let total: f32 = weights.iter().sum::<f32>().max(1e-3);
        let free = rect.height() - foot - n * grid.title - (n - 1.0) * grid.row_gap;
        let unit = (free / total).max(1.0);
        let mut y = rect.top();
        let mut frames = Vec::with_capacity(weights.len());
        for weight in weights {
            y += grid.title;
            let height = (unit * weight).floor().max(1.0);
            frames.push(Rect::from_min_max(pos2(left, y), pos2(right, y + height)));
            y += height + grid.row_gap;
        }
        let bottom = rect.bottom();
        let strip = |bottom: f32, height: f32| {
            Rect::from_min_max(pos2(left, bottom - height), pos2(right, bottom))
        };
        let notes = strip(bottom, notes_h);
        let ribbon = strip(notes.top() - 6.0, ribbon_h);
        let labels = strip(ribbon.top(), labels_h);
        Self { frames, labels, ribbon, notes }
    }

    /// What the vertical lines of this column cross.
    #[must_use]
    pub fn span(&self) -> Rect {
        let first = self.frames.first().copied().unwrap_or(self.ribbon);
        Rect::from_min_max(first.min, self.ribbon.max)
    }
}

/// Splits `rect` into `n` columns.
#[must_use]
pub fn columns(rect: Rect, n: usize, gap: f32) -> Vec<Rect> {
    let n_f = n.max(1) as f32;
    let width = ((rect.width() - gap * (n_f - 1.0)) / n_f).floor();
    (0..n)
        .map(|i| {
            let left = rect.left() + i as f32 * (width + gap);
            Rect::from_min_size(pos2(left, rect.top()), vec2(width, rect.height()))
        })
        .collect()
}

/// x between plot and screen.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Scale {
    /// Screen, px.
    pub px: (f32, f32),
    /// Value at both ends.
    pub value: (f64, f64),
}

impl Scale {
    /// A scale over the width of `frame`.
    #[must_use]
    pub fn over(frame: Rect, value: (f64, f64)) -> Self {
        Self { px: (frame.left(), frame.right()), value }
    }

    /// Screen place of `value`.
    #[must_use]
    pub fn place(&self, value: f64) -> f32 {
        let share = (value - self.value.0) / (self.value.1 - self.value.0);
        self.px.0 + (share as f32) * (self.px.1 - self.px.0)
    }

    /// Value at a screen place.
    #[must_use]
    pub fn value_at(&self, px: f32) -> f64 {
        let share = f64::from((px - self.px.0) / (self.px.1 - self.px.0));
        self.value.0 + share * (self.value.1 - self.value.0)
    }

    /// Whether `value` stands within the frame.
    #[must_use]
    pub fn holds(&self, value: f64) -> bool {
        value >= self.value.0 && value <= self.value.1
    }
}

/// Pushes places apart to at least `gap`, keeping their order and as near as can be to where they
/// were, within `range`.
#[must_use]
pub fn spread(places: &[f32], gap: f32, range: (f32, f32)) -> Vec<f32> {
    let mut order: Vec<usize> = (0..places.len()).collect();
    order.sort_by(|a, b| places[*a].total_cmp(&places[*b]));
    let mut out = places.to_vec();
    let mut floor = range.0;
    for i in &order {
        out[*i] = out[*i].max(floor);
        floor = out[*i] + gap;
    }
    let mut ceiling = range.1;
    for i in order.iter().rev() {
        out[*i] = out[*i].min(ceiling);
        ceiling = out[*i] - gap;
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_grid_is_that_of_the_drawings() {
        // 1920 − 2·16 − 424 − 16 = 1448 = 714 + 20 + 714; frame 714 − 38 − 58 = 618.
        let window = Rect::from_min_size(pos2(0.0, 0.0), vec2(1920.0, 1080.0));
        let grid = Grid::of(1920.0);
        let parts = Parts::of(window, &grid);
        let cols = columns(parts.view, 2, grid.gap);
        assert_eq!(cols[0].width(), 714.0);
        let column = Column::of(cols[0], &grid, &[3.0, 3.0, 2.0, 2.0]);
        assert_eq!(column.frames[0].width(), 618.0);
        let heights: Vec<f32> = column.frames.iter().map(Rect::height).collect();
        assert_eq!(heights[0], heights[1]);
        assert_eq!(heights[2], heights[3]);
        assert!(heights[0] >= 215.0, "{heights:?}");
        assert!(column.frames[3].bottom() <= column.labels.top());
    }

    #[test]
    fn the_narrow_grid_has_two_columns_of_492() {
        // 1280 − 2·12 − 252 − 10 = 994 = 492 + 10 + 492.
        let window = Rect::from_min_size(pos2(0.0, 0.0), vec2(1280.0, 800.0));
        let grid = Grid::of(1280.0);
        let cols = columns(Parts::of(window, &grid).view, 2, grid.gap);
        assert_eq!(cols[1].width(), 492.0);
        assert_eq!(Column::of(cols[1], &grid, &[1.0]).frames[0].width(), 408.0);
    }

    #[test]
    fn labels_are_pushed_apart_in_order() {
        assert_eq!(spread(&[10.0, 12.0, 50.0], 14.0, (0.0, 100.0)), vec![10.0, 24.0, 50.0]);
        assert_eq!(spread(&[98.0, 99.0], 14.0, (0.0, 100.0)), vec![86.0, 100.0]);
    }

    #[test]
    fn scale_goes_both_ways() {
        let scale = Scale { px: (100.0, 300.0), value: (0.0, 1000.0) };
        assert_eq!(scale.place(500.0), 200.0);
        assert_eq!(scale.value_at(200.0), 500.0);
    }
}
