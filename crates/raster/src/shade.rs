//! Colours one span of one triangle.

use crate::blend::{modulate, over};
use crate::setup::{Paint, round};
use crate::texture::Texture;
use crate::triangle::{Span, Triangle};

/// Blends one colour over a run of pixels.
#[inline]
pub fn solid(row: &mut [u32], colour: u32) {
    match colour >> 24 {
        255 => row.fill(colour),
        _ if colour == 0 => {}
        _ => {
            for pixel in row {
                *pixel = over(colour, *pixel);
            }
        }
    }
}

/// Interpolates the three corner colours: exact at each row's first pixel, then by steps of
/// 1/65536 of a level.
pub struct Gradient {
    /// Channel values of corner 0.
    base: [f64; 4],
    /// Differences of corners 1 and 2 to it, over the area.
    to1: [f64; 4],
    to2: [f64; 4],
    /// Change per pixel to the right.
    step: [i32; 4],
}

const ONE: f64 = 65_536.0;

impl Gradient {
    #[inline]
    pub fn new(triangle: &Triangle, [a, b, c]: [u32; 3]) -> Self {
        let (a, b, c) = (channels(a), channels(b), channels(c));
        let per_area = ONE / triangle.area as f64;
        let [right1, right2] = triangle.weight_steps();
        let (right1, right2) = (right1 as f64, right2 as f64);
        let (mut base, mut to1, mut to2, mut step) = ([0.0; 4], [0.0; 4], [0.0; 4], [0; 4]);
        for i in 0..4 {
            // Half a level up front, so that dropping the fraction rounds to nearest.
            base[i] = a[i] * ONE + 0.5 * ONE;
            to1[i] = (b[i] - a[i]) * per_area;
            to2[i] = (c[i] - a[i]) * per_area;
            // Steeper than the whole range per pixel means a span of one pixel: no step is taken.
            let slope = to1[i] * right1 + to2[i] * right2;
            step[i] = round(slope.clamp(-255.0 * ONE, 255.0 * ONE));
        }
        Self { base, to1, to2, step }
    }

    #[inline]
    fn start(&self, span: &Span) -> [i32; 4] {
        let (w1, w2) = (span.weights[0] as f64, span.weights[1] as f64);
        let mut value = [0; 4];
        for (i, value) in value.iter_mut().enumerate() {
            *value = round(self.base[i] + self.to1[i] * w1 + self.to2[i] * w2);
        }
        value
    }

    #[inline]
    fn advance(&self, value: &mut [i32; 4]) {
        for (value, step) in value.iter_mut().zip(self.step) {
            *value = value.wrapping_add(step);
        }
    }

    /// Blends the interpolated colour over the span's pixels.
    #[inline]
    pub fn paint(&self, row: &mut [u32], span: &Span) {
        let mut value = self.start(span);
        for pixel in row {
            *pixel = over(join(value), *pixel);
            self.advance(&mut value);
        }
    }
}

/// Interpolated colour times interpolated texture.
pub struct Textured<'a> {
    texture: &'a Texture,
    colour: Gradient,
    /// Texel coordinates of corner 0 and their change per weight of corners 1 and 2.
    base: [f64; 2],
    slopes: [[f64; 2]; 2],
    step: [f64; 2],
}

impl<'a> Textured<'a> {
    pub fn new(triangle: &Triangle, paints: [Paint; 3], texture: &'a Texture) -> Self {
        let size = [texture.width as f64, texture.height as f64];
        let [a, b, c] = paints.map(|paint| [0, 1].map(|i| finite(paint.uv[i]) * size[i]));
        let per_area = 1.0 / triangle.area as f64;
        let [right1, right2] = triangle.weight_steps().map(|step| step as f64);
        let slopes =
            [[0, 1].map(|i| (b[i] - a[i]) * per_area), [0, 1].map(|i| (c[i] - a[i]) * per_area)];
        Self {
            texture,
            colour: Gradient::new(triangle, paints.map(|paint| paint.colour)),
            base: a,
            step: [0, 1].map(|i| slopes[0][i] * right1 + slopes[1][i] * right2),
            slopes,
        }
    }

    pub fn paint(&self, row: &mut [u32], span: &Span) {
        let mut value = self.colour.start(span);
        let [w1, w2] = span.weights.map(|w| w as f64);
        let start = [0, 1].map(|i| self.base[i] + self.slopes[0][i] * w1 + self.slopes[1][i] * w2);
        for (n, pixel) in row.iter_mut().enumerate() {
            let [u, v] = [0, 1].map(|i| start[i] + self.step[i] * n as f64);
            let texel = self.texture.sample(u, v);
            if texel != 0 {
                *pixel = over(modulate(join(value), texel), *pixel);
            }
            self.colour.advance(&mut value);
        }
    }
}

fn finite(x: f32) -> f64 {
    if x.is_finite() { f64::from(x) } else { 0.0 }
}

/// Blue, green, red, alpha.
#[inline]
fn channels(colour: u32) -> [f64; 4] {
    let [b, g, r, a] = colour.to_le_bytes();
    [f64::from(b), f64::from(g), f64::from(r), f64::from(a)]
}

#[inline]
fn join(value: [i32; 4]) -> u32 {
    let [b, g, r, a] = value.map(|v| (v >> 16) as u32 & 0xff);
    b | g << 8 | r << 16 | a << 24
}
