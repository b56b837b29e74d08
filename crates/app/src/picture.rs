//! A picture of the window as a PNG file, without a display.

use raster::Canvas;

/// The picture as the bytes of a PNG file; the same picture gives the same bytes.
///
/// # Errors
/// Pictures without pixels, or too large for the format.
pub fn png(canvas: &Canvas) -> Result<Vec<u8>, String> {
    let size = |n: usize| u32::try_from(n).map_err(|error| error.to_string());
    let mut bytes = Vec::new();
    let mut encoder = png::Encoder::new(&mut bytes, size(canvas.width())?, size(canvas.height())?);
    encoder.set_color(png::ColorType::Rgb);
    encoder.set_depth(png::BitDepth::Eight);
    encoder.set_compression(png::Compression::Balanced);
    let mut writer = encoder.write_header().map_err(|error| error.to_string())?;
    // The window is opaque: alpha says nothing.
    let rgb: Vec<u8> = canvas
        .pixels()
        .iter()
        .flat_map(|pixel| {
            let [_, r, g, b] = pixel.to_be_bytes();
            [r, g, b]
        })
        .collect();
    writer.write_image_data(&rgb).map_err(|error| error.to_string())?;
    writer.finish().map_err(|error| error.to_string())?;
    Ok(bytes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_picture_reads_back_as_it_was_written() {
        let canvas = Canvas::new(5, 3, egui::Color32::from_rgb(10, 200, 30));
        let bytes = png(&canvas).expect("writes");
        let mut reader =
            png::Decoder::new(std::io::Cursor::new(&bytes)).read_info().expect("reads");
        let mut pixels = vec![0; reader.output_buffer_size().expect("fits")];
        let info = reader.next_frame(&mut pixels).expect("has a frame");
        assert_eq!((info.width, info.height), (5, 3));
        assert_eq!(pixels, [10, 200, 30].repeat(15));
        assert_eq!(bytes, png(&canvas).expect("writes again"));
    }

    #[test]
    fn a_picture_without_pixels_is_an_error() {
        assert!(png(&Canvas::new(0, 3, egui::Color32::BLACK)).is_err());
    }
}
