//! The window painted by the processor: winit for events, softbuffer for pixels.

use std::collections::VecDeque;
use std::num::NonZeroU32;
use std::rc::Rc;
use std::time::{Duration, Instant};

use egui::{Context, ViewportCommand, ViewportEvent, ViewportId, ViewportInfo};
use egui_winit::accesskit_winit::{Event as AccessEvent, WindowEvent as AccessWindowEvent};
use raster::{Frame, PixelRect, Rasteriser, Target, Tiles};
use winit::application::ApplicationHandler;
use winit::event::{StartCause, WindowEvent};
use winit::event_loop::{ActiveEventLoop, ControlFlow, EventLoop, EventLoopProxy};
use winit::window::{Window, WindowId};

use super::words;
use super::{Content, Paint, StartError, start_error, viewport};

/// What other threads, and assistive technology, want of the event loop.
#[derive(Debug)]
enum Wish {
    Repaint { after: Duration, pass: u64 },
    Access(AccessEvent),
}

impl From<AccessEvent> for Wish {
    fn from(event: AccessEvent) -> Self {
        Self::Access(event)
    }
}

/// Shows the window until it is closed.
pub fn run(content: Content) -> Result<(), StartError> {
    let events =
        EventLoop::<Wish>::with_user_event().build().map_err(|error| start_error(&error))?;
    let mut shell =
        Shell { content: Some(content), proxy: events.create_proxy(), open: None, failure: None };
    events.run_app(&mut shell).map_err(|error| start_error(&error))?;
    shell.failure.map_or(Ok(()), Err)
}

struct Shell {
    content: Option<Content>,
    proxy: EventLoopProxy<Wish>,
    open: Option<OpenWindow>,
    failure: Option<StartError>,
}

impl ApplicationHandler<Wish> for Shell {
    fn resumed(&mut self, events: &ActiveEventLoop) {
        let Some(content) = self.content.take() else {
            return;
        };
        match OpenWindow::new(events, content, &self.proxy) {
            Ok(open) => self.open = Some(open),
            Err(error) => {
                self.failure = Some(error);
                events.exit();
            }
        }
    }

    fn new_events(&mut self, _events: &ActiveEventLoop, cause: StartCause) {
        if let (StartCause::ResumeTimeReached { .. }, Some(open)) = (cause, &mut self.open) {
            open.repaint_at = None;
            open.redraw();
        }
    }

    fn user_event(&mut self, _events: &ActiveEventLoop, wish: Wish) {
        if let Some(open) = &mut self.open {
            open.fulfil(wish);
        }
    }

    fn window_event(&mut self, events: &ActiveEventLoop, _id: WindowId, event: WindowEvent) {
        let Some(open) = &mut self.open else {
            return;
        };
        if let Err(error) = open.on_event(events, &event) {
            self.failure = Some(error);
            events.exit();
        }
    }

    fn about_to_wait(&mut self, events: &ActiveEventLoop) {
        let wake = self.open.as_ref().and_then(|open| open.repaint_at);
        events.set_control_flow(wake.map_or(ControlFlow::Wait, ControlFlow::WaitUntil));
    }

    fn exiting(&mut self, _events: &ActiveEventLoop) {
        // The surface goes before the connection to the display does.
        self.open = None;
    }
}

struct OpenWindow {
    surface: softbuffer::Surface<Rc<Window>, Rc<Window>>,
    window: Rc<Window>,
    state: egui_winit::State,
    info: ViewportInfo,
    paint: Paint,
    rasteriser: Rasteriser,
    threads: usize,
    /// What the latest frames showed, the latest first.
    shown: VecDeque<Tiles>,
    repaint_at: Option<Instant>,
    hidden: bool,
    /// Whether the next request to draw comes from here; others mean that pixels were lost.
    asked: bool,
}

/// Buffers that a window system takes turns with, at most.
const BUFFERS: usize = 4;

impl OpenWindow {
    fn new(
        events: &ActiveEventLoop,
        content: Content,
        proxy: &EventLoopProxy<Wish>,
    ) -> Result<Self, StartError> {
        let ctx = Context::default();
        // Assistive technology must be told before the window is first shown.
        let builder = viewport(&content.title).with_visible(false);
        let window = egui_winit::create_window(&ctx, events, &builder)
            .map_err(|error| start_error(&error))?;
        let window = Rc::new(window);
        let display = softbuffer::Context::new(window.clone()).map_err(failed)?;
        let surface = softbuffer::Surface::new(&display, window.clone()).map_err(failed)?;
        let scale = Some(window.scale_factor() as f32);
        let theme = window.theme();
        let mut state = egui_winit::State::new(
            ctx.clone(),
            ViewportId::ROOT,
            &window,
            scale,
            theme,
            Some(8192),
        );
        state.init_accesskit(events, &window, proxy.clone());
        let waker = proxy.clone();
        ctx.set_request_repaint_callback(move |info| {
            let (after, pass) = (info.delay, info.current_cumulative_pass_nr);
            waker.send_event(Wish::Repaint { after, pass }).ok();
        });
        let paint = (content.build)(&ctx);
        let mut info = ViewportInfo::default();
        egui_winit::update_viewport_info(&mut info, &ctx, &window, true);
        window.set_visible(true);
        window.request_redraw();
        let threads = std::thread::available_parallelism().map_or(1, usize::from).min(8);
        Ok(Self {
            surface,
            window,
            state,
            info,
            paint,
            rasteriser: Rasteriser::new(),
            threads,
            shown: VecDeque::new(),
            repaint_at: None,
            hidden: false,
            asked: false,
        })
    }

    fn redraw(&mut self) {
        self.asked = true;
        self.window.request_redraw();
    }

    fn fulfil(&mut self, wish: Wish) {
        match wish {
            Wish::Repaint { after, pass } => {
                // A wish from before the last frame has been fulfilled by it.
                let now = self.state.egui_ctx().cumulative_pass_nr();
                if now == pass || now == pass + 1 {
                    self.repaint_after(after);
                }
            }
            Wish::Access(event) => {
                match event.window_event {
                    AccessWindowEvent::InitialTreeRequested => {
                        self.state.egui_ctx().enable_accesskit()
                    }
                    AccessWindowEvent::ActionRequested(request) => {
                        self.state.on_accesskit_action_request(request);
                    }
                    AccessWindowEvent::AccessibilityDeactivated => {
                        self.state.egui_ctx().disable_accesskit();
                    }
                }
                self.redraw();
            }
        }
    }

    fn repaint_after(&mut self, delay: Duration) {
        if delay.is_zero() {
            self.redraw();
        } else if let Some(at) = Instant::now().checked_add(delay) {
            self.repaint_at = Some(self.repaint_at.map_or(at, |sooner| sooner.min(at)));
        }
    }

    fn on_event(
        &mut self,
        events: &ActiveEventLoop,
        event: &WindowEvent,
    ) -> Result<(), StartError> {
        let response = self.state.on_window_event(&self.window, event);
        match event {
            WindowEvent::RedrawRequested => {
                // Only here is a lost pixel never told together with a wish of our own.
                if !std::mem::take(&mut self.asked) || !cfg!(target_os = "linux") {
                    self.shown.clear();
                }
                if !self.hidden {
                    self.frame(events)?;
                }
            }
            WindowEvent::Occluded(hidden) => {
                self.hidden = *hidden;
                self.shown.clear();
                self.redraw();
            }
            WindowEvent::CloseRequested => {
                // The content may keep the window open, e.g. to ask about unsaved work; it is
                // asked even while the window is hidden.
                self.info.events.push(ViewportEvent::Close);
                self.frame(events)?;
            }
            _ if response.repaint => self.redraw(),
            _ => {}
        }
        Ok(())
    }

    fn frame(&mut self, events: &ActiveEventLoop) -> Result<(), StartError> {
        let ctx = self.state.egui_ctx().clone();
        egui_winit::update_viewport_info(&mut self.info, &ctx, &self.window, false);
        let mut input = self.state.take_egui_input(&self.window);
        let closing = self.info.events.contains(&ViewportEvent::Close);
        let info =
            ViewportInfo { events: std::mem::take(&mut self.info.events), ..self.info.clone() };
        input.viewports.insert(ViewportId::ROOT, info);
        let mut output = ctx.run_ui(input, &mut self.paint);
        self.state.handle_platform_output_with_event_loop(
            &self.window,
            events,
            std::mem::take(&mut output.platform_output),
        );
        self.rasteriser.set_textures(&mut output.textures_delta);
        let shapes = std::mem::take(&mut output.shapes);
        let painted = self.show(&ctx, shapes, output.pixels_per_point);
        self.rasteriser.free_textures(&mut output.textures_delta);
        let commands: Vec<ViewportCommand> = output
            .viewport_output
            .remove(&ViewportId::ROOT)
            .map(|viewport| viewport.commands)
            .unwrap_or_default();
        if closing && !commands.contains(&ViewportCommand::CancelClose) {
            events.exit();
            return Ok(());
        }
        self.obey(commands);
        painted
    }

    fn obey(&mut self, commands: Vec<ViewportCommand>) {
        let ctx = self.state.egui_ctx().clone();
        let mut wanted = Vec::new();
        egui_winit::process_viewport_commands(
            &ctx,
            &mut self.info,
            commands,
            &self.window,
            &mut wanted,
        );
        for action in wanted {
            let event = match action {
                egui_winit::ActionRequested::Cut => Some(egui::Event::Cut),
                egui_winit::ActionRequested::Copy => Some(egui::Event::Copy),
                egui_winit::ActionRequested::Paste => {
                    self.state.clipboard_text().map(egui::Event::Paste)
                }
                _ => None,
            };
            self.state.egui_input_mut().events.extend(event);
        }
        if !self.info.events.is_empty() || !self.state.egui_input().events.is_empty() {
            self.redraw();
        }
    }

    fn show(
        &mut self,
        ctx: &Context,
        shapes: Vec<egui::epaint::ClippedShape>,
        scale: f32,
    ) -> Result<(), StartError> {
        let size = self.window.inner_size();
        let (Some(width), Some(height)) =
            (NonZeroU32::new(size.width), NonZeroU32::new(size.height))
        else {
            return Ok(());
        };
        let primitives = ctx.tessellate(shapes, scale);
        self.surface.resize(width, height).map_err(failed)?;
        let mut buffer = self.surface.buffer_mut().map_err(failed)?;
        let whole = Frame {
            background: Some(ctx.global_style().visuals.panel_fill),
            threads: self.threads,
            ..Frame::new(&primitives, scale)
        };
        let [wide, high] = [size.width, size.height].map(|side| side as usize);
        let tiles = self.rasteriser.tiles(&whole, [wide, high]);
        let all = PixelRect { x0: 0, y0: 0, x1: wide, y1: high };
        let since = |frames: usize| match self.shown.get(frames) {
            Some(earlier) => tiles.changed_since(earlier),
            None => vec![all],
        };
        // The window shows the latest frame, the buffer perhaps an older one or nothing.
        let on_screen: Vec<softbuffer::Rect> = since(0).iter().filter_map(damage).collect();
        let in_buffer = usize::from(buffer.age()).checked_sub(1).map_or(vec![all], since);
        self.shown.push_front(tiles);
        self.shown.truncate(BUFFERS);
        let mut target = Target::new(&mut buffer, wide, high);
        self.rasteriser.paint(&mut target, &Frame { damage: Some(&in_buffer), ..whole });
        if on_screen.is_empty() {
            return Ok(());
        }
        self.window.pre_present_notify();
        buffer.present_with_damage(&on_screen).map_err(failed)
    }
}

fn damage(part: &PixelRect) -> Option<softbuffer::Rect> {
    let side = |from: usize, to: usize| NonZeroU32::new(u32::try_from(to - from).ok()?);
    Some(softbuffer::Rect {
        x: u32::try_from(part.x0).ok()?,
        y: u32::try_from(part.y0).ok()?,
        width: side(part.x0, part.x1)?,
        height: side(part.y0, part.y1)?,
    })
}

fn failed(error: softbuffer::SoftBufferError) -> StartError {
    StartError::Other(words::no_window(&error.to_string()))
}
