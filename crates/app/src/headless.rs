//! The user interface without a window system: the same code, fed with empty input until it
//! settles. Pictures, descriptions and interface tests come from here.

use egui::{Context, FullOutput, RawInput, Rect, Theme, Ui, Vec2, pos2};
use raster::{Canvas, Rasteriser};

/// Frames after which a restless interface is taken as it is.
const MOST_FRAMES: usize = 12;

/// Size and looks of a window that nobody sees.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Screen {
    /// Width in pixels.
    pub width: usize,
    /// Height in pixels.
    pub height: usize,
    /// Pixels per point.
    pub scale: f32,
    /// Light or dark.
    pub theme: Theme,
}

impl Default for Screen {
    fn default() -> Self {
        Self { width: 1920, height: 1080, scale: 1.0, theme: Theme::Light }
    }
}

/// A window without a window system.
pub struct Headless {
    ctx: Context,
    rasteriser: Rasteriser,
    screen: Screen,
    frames: u32,
}

impl Headless {
    /// A window of this size, with `setup` (fonts, styles) done before the first frame.
    pub fn new(screen: Screen, setup: impl FnOnce(&Context)) -> Self {
        let ctx = Context::default();
        ctx.set_theme(screen.theme);
        setup(&ctx);
        Self { ctx, rasteriser: Rasteriser::new(), screen, frames: 0 }
    }

    /// The egui context, e.g. to enable the accessibility tree.
    #[must_use]
    pub fn ctx(&self) -> &Context {
        &self.ctx
    }

    /// What paints, with the textures of all frames so far.
    #[must_use]
    pub fn rasteriser(&self) -> &Rasteriser {
        &self.rasteriser
    }

    /// Runs one frame with `events`; the clock advances by a sixtieth of a second.
    pub fn frame(&mut self, events: Vec<egui::Event>, ui: impl FnMut(&mut Ui)) -> FullOutput {
        let Screen { width, height, scale, theme } = self.screen;
        let size = Vec2::new(width as f32, height as f32) / scale;
        let mut input = RawInput {
            screen_rect: Some(Rect::from_min_size(pos2(0.0, 0.0), size)),
            time: Some(f64::from(self.frames) / 60.0),
            system_theme: Some(theme),
            max_texture_side: Some(8192),
            focused: true,
            events,
            ..RawInput::default()
        };
        let viewport = input.viewports.entry(egui::ViewportId::ROOT).or_default();
        viewport.native_pixels_per_point = Some(scale);
        self.frames += 1;
        let mut output = self.ctx.run_ui(input, ui);
        self.rasteriser.set_textures(&mut output.textures_delta);
        output.textures_delta.clear();
        output
    }

    /// Runs frames until the interface asks for no further one; returns the last.
    pub fn settle(&mut self, mut ui: impl FnMut(&mut Ui)) -> FullOutput {
        let mut output = self.frame(Vec::new(), &mut ui);
        for _ in 1..MOST_FRAMES {
            let restless =
                output.viewport_output.values().any(|viewport| viewport.repaint_delay.is_zero());
            // The second frame knows the sizes that the first one measured.
            if !restless && self.frames > 2 {
                break;
            }
            output = self.frame(Vec::new(), &mut ui);
        }
        output
    }

    /// Paints what a frame drew.
    #[must_use]
    pub fn paint(&self, output: &mut FullOutput, threads: usize) -> Canvas {
        let shapes = std::mem::take(&mut output.shapes);
        let scale = output.pixels_per_point;
        let primitives = self.ctx.tessellate(shapes, scale);
        let background = self.ctx.global_style().visuals.panel_fill;
        let mut canvas = Canvas::new(self.screen.width, self.screen.height, background);
        let frame = raster::Frame { threads, ..raster::Frame::new(&primitives, scale) };
        self.rasteriser.paint(&mut canvas.target(), &frame);
        canvas
    }
}
