//! The entry point: textures, strips, threads.

use std::sync::Mutex;

use egui::{ClippedPrimitive, Context, TexturesDelta};

use crate::band::Band;
use crate::canvas::{Canvas, PixelRect, Target};
use crate::texture::Textures;

/// Strips per thread: a thread that got the empty part of a window takes the next strip.
const STRIPS: usize = 4;
/// Smaller strips cost more in skipped triangles than they gain.
const LEAST_ROWS: usize = 32;

/// Paints egui's output; owns the textures that came with earlier frames.
#[derive(Default)]
pub struct Rasteriser {
    textures: Textures,
}

impl Rasteriser {
    /// A rasteriser that knows no texture yet.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Takes over new and changed textures. Call before painting the frame they came with.
    pub fn set_textures(&mut self, delta: &mut TexturesDelta) {
        self.textures.set(delta);
    }

    /// Drops textures no longer used. Call after painting the frame they came with.
    pub fn free_textures(&mut self, delta: &mut TexturesDelta) {
        self.textures.free(delta);
    }

    /// Paints over `target`, on up to `threads` threads.
    ///
    /// `primitives` are in points, `pixels_per_point` turns them into pixels. Pixels outside
    /// `damage` (if given) stay as they are. The result does not depend on `threads`. Meshes whose
    /// texture is missing, paint callbacks, and a scale that is not positive paint nothing.
    pub fn paint(
        &self,
        target: &mut Target<'_>,
        primitives: &[ClippedPrimitive],
        pixels_per_point: f32,
        damage: Option<PixelRect>,
        threads: usize,
    ) {
        let area = damage.map_or(target.bounds(), |damage| damage.intersect(target.bounds()));
        let scale_is_usable = pixels_per_point.is_finite() && pixels_per_point > 0.0;
        if area.is_empty() || !scale_is_usable {
            return;
        }
        let width = target.width;
        let threads = threads.max(1);
        let rows = (area.y1 - area.y0).div_ceil(threads * STRIPS).max(LEAST_ROWS);
        let strips = target.pixels[area.y0 * width..area.y1 * width].chunks_mut(rows * width);
        let work = Mutex::new(strips.enumerate());
        let run = || {
            loop {
                let next = work.lock().ok().and_then(|mut strips| strips.next());
                let Some((index, pixels)) = next else {
                    return;
                };
                let top = area.y0 + index * rows;
                let bottom = top + pixels.len() / width;
                let damage = PixelRect { y0: top, y1: bottom, ..area };
                let mut band = Band { pixels, width, top, damage };
                band.paint(primitives, &self.textures, pixels_per_point);
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
        self.paint(&mut canvas.target(), &primitives, scale, None, threads);
        self.free_textures(&mut output.textures_delta);
        canvas
    }
}
