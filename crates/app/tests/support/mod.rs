//! Interface tests paint with the project's own rasteriser: no display, no graphics driver.

use egui::{Context, FullOutput, TexturesDelta};
use egui_kittest::TestRenderer;
use raster::{Canvas, Frame, Rasteriser};

/// Paints the harness' frames on the CPU.
#[derive(Default)]
pub struct CpuRenderer(Rasteriser);

impl TestRenderer for CpuRenderer {
    fn handle_delta(&mut self, delta: &mut TexturesDelta) {
        self.0.set_textures(delta);
        delta.free.clear();
    }

    fn render(&mut self, ctx: &Context, output: &FullOutput) -> Result<image::RgbaImage, String> {
        let scale = ctx.pixels_per_point();
        let size = ctx.content_rect().size() * scale;
        let (width, height) = (size.x.round() as usize, size.y.round() as usize);
        let primitives = ctx.tessellate(output.shapes.clone(), scale);
        let mut canvas = Canvas::new(width, height, ctx.global_style().visuals.panel_fill);
        self.0.paint(&mut canvas.target(), &Frame::new(&primitives, scale));
        image::RgbaImage::from_raw(width as u32, height as u32, canvas.to_rgba())
            .ok_or_else(|| format!("{width} × {height} pixels make no picture"))
    }
}
