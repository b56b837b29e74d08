//! The entry point: textures, strips, threads.

use std::sync::Mutex;

use egui::{ClippedPrimitive, Color32, Context, TexturesDelta};

use crate::band::{Band, Reach};
use crate::canvas::{Canvas, PixelRect, Target};
use crate::changes::Tiles;
use crate::texture::Textures;

/// Strips per thread: a thread that got the empty part of a window takes the next strip.
const STRIPS: usize = 4;
/// Smaller strips cost more in skipped triangles than they gain.
const LEAST_ROWS: usize = 32;

/// What to paint, and how.
pub struct Frame<'a> {
    /// Tessellated shapes, in points.
    pub primitives: &'a [ClippedPrimitive],
    /// Pixels per point.
    pub pixels_per_point: f32,
    /// Colour to start from; `None` paints over what is there.
    pub background: Option<Color32>,
    /// The only pixels that may change, without overlap; `None` means all.
    pub damage: Option<&'a [PixelRect]>,
    /// Greatest number of threads. It never shows in the picture.
    pub threads: usize,
}

impl<'a> Frame<'a> {
    /// A frame over what is there, in full, on one thread.
    #[must_use]
    pub fn new(primitives: &'a [ClippedPrimitive], pixels_per_point: f32) -> Self {
        Self { primitives, pixels_per_point, background: None, damage: None, threads: 1 }
    }
}

/// Paints egui's output; owns the textures that came with earlier frames.
#[derive(Default)]
pub struct Rasteriser {
    textures: Textures,
    /// Rises whenever a texture sent before changes.
    changes: u64,
}

impl Rasteriser {
    /// A rasteriser that knows no texture yet.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Takes over new and changed textures. Call before painting the frame they came with.
    pub fn set_textures(&mut self, delta: &mut TexturesDelta) {
        self.changes += u64::from(Textures::changes_what_is_shown(delta));
        self.textures.set(delta);
    }

    /// What `frame` shows in each part of a target of `size` pixels, to be compared with that of
    /// another frame.
    #[must_use]
    pub fn tiles(&self, frame: &Frame<'_>, size: [usize; 2]) -> Tiles {
        Tiles::of(frame, size, self.changes)
    }

    /// Drops textures no longer used. Call after painting the frame they came with.
    pub fn free_textures(&mut self, delta: &mut TexturesDelta) {
        self.textures.free(delta);
    }

    /// Paints a frame on `target`.
    ///
    /// Meshes whose texture is missing, paint callbacks, and everything at a scale that is not a
    /// positive number paint nothing.
    pub fn paint(&self, target: &mut Target<'_>, frame: &Frame<'_>) {
        let bounds = target.bounds();
        let damage: Vec<PixelRect> = match frame.damage {
            None => vec![bounds],
            Some(damage) => damage.iter().map(|part| part.intersect(bounds)).collect(),
        };
        let empty = PixelRect { x0: 0, y0: 0, x1: 0, y1: 0 };
        let area = damage.iter().fold(empty, |area, part| area.union(*part));
        if area.is_empty() {
            return;
        }
        let width = target.width;
        let threads = frame.threads.max(1);
        let rows = (area.y1 - area.y0).div_ceil(threads * STRIPS).max(LEAST_ROWS);
        let strips = target.pixels[area.y0 * width..area.y1 * width].chunks_mut(rows * width);
        let reaches: Vec<Reach> = frame.primitives.iter().map(Reach::of).collect();
        let work = Mutex::new(strips.enumerate());
        let run = || {
            loop {
                let next = work.lock().ok().and_then(|mut strips| strips.next());
                let Some((index, pixels)) = next else {
                    return;
                };
                let top = area.y0 + index * rows;
                let bottom = top + pixels.len() / width;
                let strip = PixelRect { y0: top, y1: bottom, ..area };
                let mut band = Band { pixels, width, top, damage: strip };
                for damage in damage.iter().map(|part| part.intersect(strip)) {
                    if !damage.is_empty() {
                        band.damage = damage;
                        band.paint(frame, &reaches, &self.textures);
                    }
                }
            }
        };
        std::thread::scope(|scope| {
            for _ in 1..threads {
                scope.spawn(run);
            }
            run();
        });
    }

    /// Tessellates what a frame of `ctx` drew and paints it on a new picture.
    #[must_use]
    pub fn picture(
        &mut self,
        ctx: &Context,
        output: &mut egui::FullOutput,
        size: [usize; 2],
        background: egui::Color32,
        threads: usize,
    ) -> Canvas {
        self.set_textures(&mut output.textures_delta);
        let scale = output.pixels_per_point;
        let primitives = ctx.tessellate(std::mem::take(&mut output.shapes), scale);
        let mut canvas = Canvas::new(size[0], size[1], background);
        let frame = Frame { threads, ..Frame::new(&primitives, scale) };
        self.paint(&mut canvas.target(), &frame);
        self.free_textures(&mut output.textures_delta);
        canvas
    }
}
