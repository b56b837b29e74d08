//! The one bundled face: DejaVu Sans, which sets the combining marks of V̇ and v̄ properly.

use std::sync::Arc;

use egui::{FontData, FontDefinitions, FontFamily};

/// DejaVu Sans 2.37; its licence stands beside it.
pub const DEJAVU_SANS: &[u8] = include_bytes!("../../../../assets/DejaVuSans.ttf");

/// Makes DejaVu Sans the only face of `ctx`.
pub fn install(ctx: &egui::Context) {
    let mut fonts = FontDefinitions::empty();
    fonts.font_data.insert("dejavu".into(), Arc::new(FontData::from_static(DEJAVU_SANS)));
    for family in [FontFamily::Proportional, FontFamily::Monospace] {
        fonts.families.insert(family, vec!["dejavu".into()]);
    }
    ctx.set_fonts(fonts);
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_face_has_every_character_of_the_trade() {
        let ctx = egui::Context::default();
        install(&ctx);
        let mut missing = String::new();
        let mut output = ctx.run_ui(egui::RawInput::default(), |ui| {
            let id = egui::FontId::proportional(12.0);
            let trade = "V\u{307}v\u{304}Q\u{307}₂₁−·≥≤±‰θΔ→←×÷°µ²½–“”’…▾";
            missing =
                ui.ctx().fonts_mut(|f| trade.chars().filter(|c| !f.has_glyph(&id, *c)).collect());
        });
        output.textures_delta.clear();
        assert_eq!(missing, "");
    }
}
