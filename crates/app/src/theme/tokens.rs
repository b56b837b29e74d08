//! Colour tokens. Families are the Okabe–Ito palette (Okabe & Ito, Color Universal Design, 2008)
//! in its published order, without the hues under 3 : 1 on white: oxygen is bluish green, carbon
//! dioxide blue, circulation vermillion, ventilation reddish purple. Yellow, unusable as a line on
//! white, marks what can be moved; nothing else is yellow.

use analysis::quantity::Quantity;
use egui::{Color32, Theme};

/// A physiological family: one hue each.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Family {
    /// V̇O₂ and what follows oxygen.
    Oxygen,
    /// V̇CO₂ and what follows carbon dioxide.
    CarbonDioxide,
    /// Heart rate, O₂ pulse, blood pressure.
    Circulation,
    /// V̇E, VT, fR.
    Ventilation,
    /// Work rate.
    Work,
    /// RER and lines drawn in ink.
    Ink,
}

impl Family {
    /// The family of `quantity`.
    #[must_use]
    pub fn of(quantity: Quantity) -> Self {
        use Quantity as Q;
        match quantity {
            Q::Vo2 | Q::EqO2 | Q::Peto2 | Q::Spo2 => Family::Oxygen,
            Q::Vco2 | Q::EqCo2 | Q::Petco2 => Family::CarbonDioxide,
            Q::Hr | Q::RrInterval | Q::O2Pulse | Q::SysBp | Q::DiaBp => Family::Circulation,
            Q::Ve | Q::Vt | Q::Fr => Family::Ventilation,
            Q::WorkRate | Q::Speed | Q::Grade | Q::Cadence => Family::Work,
            Q::Rer => Family::Ink,
        }
    }
}

/// The colours of one theme.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tokens {
    /// Whether the ground is dark.
    pub dark: bool,
    /// Ground of the window.
    pub window: Color32,
    /// Ground of panels.
    pub panel: Color32,
    /// Ground of plot frames: what was measured.
    pub plot: Color32,
    /// Text.
    pub ink: Color32,
    /// Units and ticks.
    pub ink2: Color32,
    /// Ground lines.
    pub grid: Color32,
    /// Frame lines.
    pub frame: Color32,
    /// Edge of a control.
    pub control_edge: Color32,
    /// Ground of a control.
    pub control: Color32,
    line: [Color32; 5],
    text: [Color32; 5],
    /// Fill of what can be moved.
    pub movable: Color32,
    /// Edge of what can be moved.
    pub movable_edge: Color32,
    /// Text on the movable fill.
    pub on_movable: Color32,
    /// Line of the predicted response.
    pub predicted: Color32,
    /// Band of the predicted response.
    pub band: Color32,
    /// Edge of that band.
    pub band_edge: Color32,
    /// Ground of the late window.
    pub late: Color32,
    /// Hatching.
    pub hatch: Color32,
    /// Band on the Fick plane.
    pub fick_band: Color32,
    /// Phases on the ribbon: rest, warm-up, ramp, recovery.
    pub phases: [Color32; 4],
    /// Opacity of raw breaths.
    pub raw_opacity: f32,
}

const fn hex(rgb: u32) -> Color32 {
    Color32::from_rgb((rgb >> 16) as u8, (rgb >> 8) as u8, rgb as u8)
}

const LIGHT: Tokens = Tokens {
    dark: false,
    window: hex(0xF4F5F3),
    panel: hex(0xFBFBFA),
    plot: hex(0xFFFFFF),
    ink: hex(0x1A1E1C),
    ink2: hex(0x57605B),
    grid: hex(0xE6E8E5),
    frame: hex(0xB4B9B4),
    control_edge: hex(0x868E89),
    control: hex(0xE9ECE8),
    line: [hex(0x009E73), hex(0x0072B2), hex(0xD55E00), hex(0xB5568C), hex(0x7D8580)],
    text: [hex(0x00704F), hex(0x0067A3), hex(0xA84700), hex(0x96406F), hex(0x57605B)],
    movable: hex(0xF0E442),
    movable_edge: hex(0x7A6A00),
    on_movable: hex(0x1A1E1C),
    predicted: hex(0x767E79),
    band: hex(0xF0F2EF),
    band_edge: hex(0xC3C9C4),
    late: hex(0xF3F4F2),
    hatch: hex(0xC9CEC9),
    fick_band: hex(0xFBEDE3),
    phases: [hex(0xE3E6E2), hex(0xD6DAD5), hex(0xC6CCC6), hex(0xE3E6E2)],
    raw_opacity: 0.42,
};

const DARK: Tokens = Tokens {
    dark: true,
    window: hex(0x101312),
    panel: hex(0x171B19),
    plot: hex(0x0C0F0E),
    ink: hex(0xE7EBE8),
    ink2: hex(0xA7B0AA),
    grid: hex(0x242A27),
    frame: hex(0x4C554F),
    control_edge: hex(0x717B75),
    control: hex(0x262C29),
    line: [hex(0x1FB98B), hex(0x4A9FDA), hex(0xEE7A2B), hex(0xD48BB4), hex(0x8D9690)],
    text: [hex(0x3CCB9F), hex(0x6DB4E6), hex(0xF59652), hex(0xE0A3C5), hex(0xA7B0AA)],
    movable: hex(0xF0E442),
    movable_edge: hex(0xD8CC2E),
    on_movable: hex(0x1A1E1C),
    predicted: hex(0x7E8882),
    band: hex(0x1E2522),
    band_edge: hex(0x47514C),
    late: hex(0x191E1B),
    hatch: hex(0x3A403E),
    fick_band: hex(0x2A1B12),
    phases: [hex(0x202624), hex(0x2A312E), hex(0x363F3A), hex(0x202624)],
    raw_opacity: 0.50,
};

impl Tokens {
    /// The tokens of `theme`.
    #[must_use]
    pub fn of(theme: Theme) -> &'static Self {
        match theme {
            Theme::Light => &LIGHT,
            Theme::Dark => &DARK,
        }
    }

    /// Colour of a line of `family`, ≥ 3 : 1 on every ground.
    #[must_use]
    pub fn line(&self, family: Family) -> Color32 {
        match family {
            Family::Ink => self.ink,
            other => self.line[other as usize],
        }
    }

    /// Colour of text of `family`, ≥ 4.5 : 1 on every ground.
    #[must_use]
    pub fn text(&self, family: Family) -> Color32 {
        match family {
            Family::Ink => self.ink,
            other => self.text[other as usize],
        }
    }

    /// Colour of raw breaths of `family`.
    #[must_use]
    pub fn raw(&self, family: Family) -> Color32 {
        self.line(family).gamma_multiply(self.raw_opacity)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance and contrast ratio of WCAG 2.1.
    fn luminance(c: Color32) -> f64 {
        let channel = |v: u8| {
            let s = f64::from(v) / 255.0;
            if s <= 0.03928 { s / 12.92 } else { ((s + 0.055) / 1.055).powf(2.4) }
        };
        0.2126 * channel(c.r()) + 0.7152 * channel(c.g()) + 0.0722 * channel(c.b())
    }

    fn contrast(a: Color32, b: Color32) -> f64 {
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn text_has_contrast_four_and_a_half_and_lines_three() {
        use Family::{CarbonDioxide, Circulation, Ink, Oxygen, Ventilation, Work};
        for tokens in [&LIGHT, &DARK] {
            for ground in [tokens.plot, tokens.panel, tokens.window] {
                for family in [Oxygen, CarbonDioxide, Circulation, Ventilation, Work, Ink] {
                    assert!(contrast(tokens.text(family), ground) >= 4.5, "{family:?}");
                    assert!(contrast(tokens.line(family), ground) >= 3.0, "{family:?}");
                }
                assert!(contrast(tokens.ink, ground) >= 4.5);
                assert!(contrast(tokens.ink2, ground) >= 4.5);
                assert!(contrast(tokens.movable_edge, ground) >= 3.0);
                assert!(contrast(tokens.predicted, ground) >= 3.0);
            }
            assert!(contrast(tokens.on_movable, tokens.movable) >= 4.5);
        }
    }
}
