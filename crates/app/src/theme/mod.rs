//! Colours and type of the window.

pub mod fonts;
pub mod tokens;

pub use tokens::{Family, Tokens};

use egui::{CornerRadius, FontFamily, FontId, Stroke, TextStyle, Theme, Vec2};

/// Type sizes at 1×, px.
pub mod size {
    /// Key values.
    pub const KEY: f32 = 24.0;
    /// The O₂-pulse course.
    pub const COURSE: f32 = 20.0;
    /// Case, sheet title, cursor time.
    pub const TITLE: f32 = 18.0;
    /// Section titles, strip values, the conditional sentence.
    pub const SECTION: f32 = 14.0;
    /// Statements and tabs.
    pub const STATEMENT: f32 = 13.0;
    /// Everything else.
    pub const BODY: f32 = 12.0;
    /// The caution line where the window is narrow.
    pub const SMALL: f32 = 11.0;
}

/// Sets fonts and both styles on `ctx`; called once, before the first frame.
pub fn install(ctx: &egui::Context) {
    fonts::install(ctx);
    for theme in [Theme::Light, Theme::Dark] {
        let tokens = Tokens::of(theme);
        ctx.style_mut_of(theme, |style| apply(style, tokens));
    }
}

fn apply(style: &mut egui::Style, tokens: &Tokens) {
    let font = |size| FontId::new(size, FontFamily::Proportional);
    style.text_styles = [
        (TextStyle::Small, font(size::SMALL)),
        (TextStyle::Body, font(size::BODY)),
        (TextStyle::Button, font(size::BODY)),
        (TextStyle::Monospace, font(size::BODY)),
        (TextStyle::Heading, font(size::TITLE)),
    ]
    .into();
    style.animation_time = 0.0;
    style.spacing.item_spacing = Vec2::new(8.0, 6.0);
    style.spacing.button_padding = Vec2::new(10.0, 4.0);
    style.spacing.interact_size = Vec2::new(24.0, 24.0);
    style.spacing.icon_width = 14.0;
    style.spacing.icon_width_inner = 9.0;
    let v = &mut style.visuals;
    v.dark_mode = tokens.dark;
    // What cannot be used now is still read.
    v.disabled_alpha = 0.62;
    v.override_text_color = None;
    v.weak_text_color = Some(tokens.ink2);
    v.panel_fill = tokens.window;
    v.window_fill = tokens.panel;
    v.window_stroke = Stroke::new(1.0, tokens.control_edge);
    v.window_corner_radius = CornerRadius::same(3);
    v.menu_corner_radius = CornerRadius::same(3);
    v.window_shadow = egui::Shadow::NONE;
    v.popup_shadow = egui::Shadow::NONE;
    v.extreme_bg_color = tokens.plot;
    v.faint_bg_color = tokens.window;
    v.hyperlink_color = tokens.ink;
    v.selection.bg_fill = tokens.band_edge;
    v.selection.stroke = Stroke::new(2.0, tokens.ink);
    v.warn_fg_color = tokens.ink;
    v.error_fg_color = tokens.ink;
    let w = &mut v.widgets;
    for visuals in
        [&mut w.noninteractive, &mut w.inactive, &mut w.hovered, &mut w.active, &mut w.open]
    {
        visuals.corner_radius = CornerRadius::same(3);
        visuals.expansion = 0.0;
        visuals.fg_stroke = Stroke::new(1.0, tokens.ink);
        visuals.bg_fill = tokens.control;
        visuals.weak_bg_fill = tokens.control;
        visuals.bg_stroke = Stroke::new(1.0, tokens.control_edge);
    }
    w.noninteractive.bg_stroke = Stroke::new(1.0, tokens.frame);
    w.noninteractive.bg_fill = tokens.panel;
    w.hovered.bg_stroke = Stroke::new(1.0, tokens.ink);
    w.active.bg_stroke = Stroke::new(2.0, tokens.ink);
}
