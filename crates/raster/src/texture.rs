//! Textures, kept up to date from egui's deltas.

use std::collections::BTreeMap;

use egui::epaint::{ImageData, ImageDelta, textures::TextureFilter, textures::TextureWrapMode};
use egui::{TextureId, TexturesDelta};

use crate::blend::pack;

/// One image, premultiplied `0xAARRGGBB`.
pub struct Texture {
    pub width: usize,
    pub height: usize,
    texels: Vec<u32>,
    nearest: bool,
    wrap: TextureWrapMode,
}

impl Texture {
    fn apply(&mut self, delta: &ImageDelta) {
        let ImageData::Color(image) = &delta.image;
        let [width, height] = image.size;
        if width == 0 || image.pixels.len() < width * height {
            return;
        }
        let [left, top] = delta.pos.unwrap_or([0, 0]);
        let columns = width.min(self.width.saturating_sub(left));
        let rows = height.min(self.height.saturating_sub(top));
        if columns == 0 {
            return;
        }
        for row in 0..rows {
            let start = (top + row) * self.width + left;
            let source = &image.pixels[row * width..row * width + columns];
            for (texel, colour) in self.texels[start..start + columns].iter_mut().zip(source) {
                *texel = pack(*colour);
            }
        }
    }

    /// One row of texels, `None` outside.
    pub fn row(&self, y: usize, x0: usize, x1: usize) -> Option<&[u32]> {
        if y >= self.height || x1 > self.width {
            return None;
        }
        self.texels.get(y * self.width + x0..y * self.width + x1)
    }

    /// Colour at texel coordinates (0..width, 0..height); texel centres lie at halves.
    #[inline]
    pub fn sample(&self, u: f64, v: f64) -> u32 {
        // Far outside every texture, and small enough to count in.
        const FAR: f64 = 1e9;
        let (u, v) = (u.clamp(-FAR, FAR), v.clamp(-FAR, FAR));
        if self.nearest {
            return self.texel(floor(u), floor(v));
        }
        let (u, v) = (u - 0.5, v - 0.5);
        let (x, y) = (floor(u), floor(v));
        let (across, down) = (weight(u - x as f64), weight(v - y as f64));
        let top = mix(self.texel(x, y), self.texel(x + 1, y), across);
        if down == 0 {
            return top;
        }
        mix(top, mix(self.texel(x, y + 1), self.texel(x + 1, y + 1), across), down)
    }

    #[inline]
    fn texel(&self, x: i64, y: i64) -> u32 {
        let x = wrap(x, self.width, self.wrap);
        let y = wrap(y, self.height, self.wrap);
        self.texels.get(y * self.width + x).copied().unwrap_or(0)
    }
}

/// Largest whole number not above `x`, without a call into the mathematics library.
#[inline]
fn floor(x: f64) -> i64 {
    let whole = x as i64;
    whole.saturating_sub(i64::from((whole as f64) > x))
}

/// A fraction in 0..1 as 0..=256.
#[inline]
fn weight(fraction: f64) -> u32 {
    (fraction * 256.0 + 0.5) as u32
}

/// Channel-wise mean of two pixels with weights `256 - t` and `t`, rounded to nearest.
#[inline]
fn mix(a: u32, b: u32, t: u32) -> u32 {
    if a == b || t == 0 {
        return a;
    }
    const RB: u32 = 0x00ff_00ff;
    let rb = (a & RB) * (256 - t) + (b & RB) * t + 0x0080_0080;
    let ag = ((a >> 8) & RB) * (256 - t) + ((b >> 8) & RB) * t + 0x0080_0080;
    ((rb >> 8) & RB) | (ag & !RB)
}

#[inline]
fn wrap(i: i64, length: usize, mode: TextureWrapMode) -> usize {
    let n = (length as i64).max(1);
    let j = match mode {
        TextureWrapMode::ClampToEdge => i.clamp(0, n - 1),
        TextureWrapMode::Repeat => i.rem_euclid(n),
        TextureWrapMode::MirroredRepeat => {
            let k = i.rem_euclid(2 * n);
            k.min(2 * n - 1 - k)
        }
    };
    j as usize
}

/// Every texture the user interface has sent so far.
#[derive(Default)]
pub struct Textures(BTreeMap<TextureId, Texture>);

impl Textures {
    /// Applies what `delta` adds or changes, and takes it out of `delta`.
    pub fn set(&mut self, delta: &mut TexturesDelta) {
        for (id, changes) in std::mem::take(&mut delta.set) {
            for change in &changes {
                self.set_one(id, change);
            }
        }
    }

    /// Whether `delta` touches what shapes drawn before may show: anything but glyphs added to
    /// free places of the font's texture.
    pub fn changes_what_is_shown(delta: &TexturesDelta) -> bool {
        delta.set.iter().any(|(id, changes)| {
            *id != TextureId::default() || changes.iter().any(|change| change.pos.is_none())
        })
    }

    /// Drops the textures `delta` frees, and takes them out of `delta`.
    pub fn free(&mut self, delta: &mut TexturesDelta) {
        for id in std::mem::take(&mut delta.free) {
            self.0.remove(&id);
        }
    }

    pub fn get(&self, id: TextureId) -> Option<&Texture> {
        self.0.get(&id)
    }

    fn set_one(&mut self, id: TextureId, change: &ImageDelta) {
        if change.pos.is_none() {
            let [width, height] = change.image.size();
            let texture = Texture {
                width,
                height,
                texels: vec![0; width * height],
                nearest: change.options.magnification == TextureFilter::Nearest,
                wrap: change.options.wrap_mode,
            };
            self.0.insert(id, texture);
        }
        // A part of a texture that was never sent has nowhere to go.
        if let Some(texture) = self.0.get_mut(&id) {
            texture.apply(change);
        }
    }
}
