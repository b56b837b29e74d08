//! What a frame painted, as far as the rules of the layout look at it: rows of text and the
//! filled rectangles under and over them.

use egui::epaint::{ClippedShape, TextShape};
use egui::{Color32, Rect, Shape};

/// One row of text.
#[derive(Clone, Debug)]
pub struct Text {
    /// The words of the row.
    pub words: String,
    /// Bounds of its ink, points.
    pub ink: Rect,
    /// Where painting was allowed.
    pub clip: Rect,
    /// Colour of its first letter.
    pub color: Color32,
    /// Whether words were cut off and an ellipsis set.
    pub elided: bool,
    /// Number of the text shape; rows of one text share it.
    pub of: usize,
    /// Place in the order of painting.
    pub order: usize,
}

impl Text {
    /// What of it can be seen.
    pub fn visible(&self) -> Rect {
        self.ink.intersect(self.clip)
    }
}

/// A rectangle filled with an opaque colour.
#[derive(Clone, Copy, Debug)]
pub struct Plate {
    /// Its bounds within its clip, points.
    pub rect: Rect,
    /// Its colour.
    pub fill: Color32,
    /// Place in the order of painting.
    pub order: usize,
}

/// A frame as rows and plates.
#[derive(Debug, Default)]
pub struct Painted {
    /// Rows of text in the order of painting.
    pub texts: Vec<Text>,
    /// Plates in the order of painting.
    pub plates: Vec<Plate>,
}

impl Painted {
    /// Takes a frame apart.
    pub fn of(shapes: &[ClippedShape]) -> Self {
        let mut painted = Self::default();
        let mut open: Vec<(Rect, &Shape)> =
            shapes.iter().rev().map(|s| (s.clip_rect, &s.shape)).collect();
        let mut order = 0;
        while let Some((clip, shape)) = open.pop() {
            order += 1;
            match shape {
                Shape::Vec(parts) => open.extend(parts.iter().rev().map(|s| (clip, s))),
                Shape::Rect(r) if r.fill.a() == 255 => {
                    let rect = r.rect.intersect(clip);
                    painted.plates.push(Plate { rect, fill: r.fill, order });
                }
                Shape::Text(text) => painted.rows(text, clip, order),
                _ => {}
            }
        }
        painted
    }

    fn rows(&mut self, text: &TextShape, clip: Rect, order: usize) {
        for placed in &text.galley.rows {
            let row = &placed.row;
            let bounds = row.visuals.mesh_bounds;
            let glyphs = &row.visuals.mesh.vertices[row.visuals.glyph_vertex_range.clone()];
            let Some(first) = glyphs.first().filter(|_| bounds.is_positive()) else {
                continue;
            };
            let color = text.override_text_color.unwrap_or(match first.color {
                Color32::PLACEHOLDER => text.fallback_color,
                own => own,
            });
            let at = bounds.translate(placed.pos.to_vec2());
            let ink = at.rotate_bb(egui::emath::Rot2::from_angle(text.angle));
            self.texts.push(Text {
                words: row.glyphs.iter().map(|g| g.chr).collect(),
                ink: ink.translate(text.pos.to_vec2()),
                clip,
                color: color.gamma_multiply(text.opacity_factor),
                elided: text.galley.elided,
                of: order,
                order,
            });
        }
    }

    /// Leaves only what stands on the last plate of this colour: the dialog over a view.
    pub fn only_from(&mut self, fill: Color32) {
        let from = self.plates.iter().rfind(|p| p.fill == fill).map_or(0, |p| p.order);
        self.texts.retain(|t| t.order > from);
        self.plates.retain(|p| p.order >= from);
    }

    /// The plate on which a text stands: the last one painted before it under its middle.
    pub fn ground(&self, text: &Text) -> Option<&Plate> {
        let middle = text.visible().center();
        self.plates.iter().rev().find(|p| p.order < text.order && p.rect.contains(middle))
    }

    /// Texts that no later plate hides.
    pub fn seen(&self) -> Vec<&Text> {
        let hides = |text: &Text, plate: &Plate| {
            plate.order > text.order && plate.rect.contains_rect(text.visible())
        };
        self.texts
            .iter()
            .filter(|t| t.visible().is_positive())
            .filter(|t| !self.plates.iter().any(|p| hides(t, p)))
            .collect()
    }

    /// Texts that a later plate covers in part, with that plate.
    pub fn half_covered(&self) -> Vec<(&Text, &Plate)> {
        self.seen()
            .into_iter()
            .filter_map(|t| {
                let over = self
                    .plates
                    .iter()
                    .find(|p| p.order > t.order && overlap(p.rect, t.visible()))?;
                Some((t, over))
            })
            .collect()
    }
}

/// Places are rounded to pixels, and a letter's soft edge takes up to one more.
const SLACK: f32 = 0.5;

/// Whether two rectangles share more than an edge.
pub fn overlap(a: Rect, b: Rect) -> bool {
    let common = a.intersect(b);
    common.width() > SLACK && common.height() > SLACK
}

/// Whether `inner` lies in `outer`.
pub fn within(outer: Rect, inner: Rect) -> bool {
    outer.expand(2.0 * SLACK).contains_rect(inner)
}
