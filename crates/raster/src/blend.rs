//! Arithmetic on premultiplied pixels packed as `0xAARRGGBB`, two channels at a time.

/// Bits of the red and blue channels.
const RB: u32 = 0x00ff_00ff;

/// Packs an egui colour (premultiplied, gamma space).
#[inline]
pub fn pack(colour: egui::Color32) -> u32 {
    let [r, g, b, a] = colour.to_array();
    u32::from_be_bytes([a, r, g, b])
}

/// `x * factor / 255`, rounded to nearest, in each of the four channels; `factor` is 0..=255.
#[inline]
pub fn scale(pixel: u32, factor: u32) -> u32 {
    // Each lane holds at most 255 * 255 + 128 + 254 < 65536, so no lane runs into the next.
    let rb = (pixel & RB) * factor + 0x0080_0080;
    let ag = ((pixel >> 8) & RB) * factor + 0x0080_0080;
    let rb = ((rb + ((rb >> 8) & RB)) >> 8) & RB;
    let ag = (ag + ((ag >> 8) & RB)) & !RB;
    rb | ag
}

/// Channel-wise sum that stops at 255.
#[inline]
fn add_saturating(a: u32, b: u32) -> u32 {
    let rb = (a & RB) + (b & RB);
    let ag = ((a >> 8) & RB) + ((b >> 8) & RB);
    let rb = rb | (((rb >> 8) & 0x0001_0001) * 255);
    let ag = ag | (((ag >> 8) & 0x0001_0001) * 255);
    (rb & RB) | ((ag & RB) << 8)
}

/// Source over destination, both premultiplied.
#[inline]
pub fn over(source: u32, destination: u32) -> u32 {
    add_saturating(source, scale(destination, 255 - (source >> 24)))
}

/// Product of two pixels, channel by channel, as the shader multiplies colour and texel.
#[inline]
pub fn modulate(pixel: u32, texel: u32) -> u32 {
    let alpha = texel & 0xff;
    if texel == alpha * 0x0101_0101 {
        return match alpha {
            255 => pixel,
            _ => scale(pixel, alpha),
        };
    }
    let mut product = 0;
    for shift in [0, 8, 16, 24] {
        let x = ((pixel >> shift) & 0xff) * ((texel >> shift) & 0xff) + 128;
        product |= ((x + (x >> 8)) >> 8) << shift;
    }
    product
}
