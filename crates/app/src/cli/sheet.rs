//! A contact sheet: every view in both themes, at half size, for eyes that compare.

use egui::{Color32, Theme};
use raster::Canvas;

use super::args::Args;
use super::failure::{Exit, Failure};
use super::{files, open, sessions};
use crate::headless::{Headless, Screen};
use crate::view_state::View;

/// Views side by side.
const COLUMNS: usize = 4;
/// Pixels between pictures.
const GAP: usize = 8;

/// `rampcrest sheet`.
pub fn sheet(args: &Args) -> Result<Exit, Failure> {
    let out = sessions::out(args)?;
    let [width, height] = args.size.unwrap_or([1280, 800]);
    let scale = args.scale.unwrap_or(1.0);
    let mut small = Vec::new();
    for theme in [Theme::Light, Theme::Dark] {
        for view in View::TABS.into_iter().chain([View::Findings]) {
            let mut app = open::app_or_demo(args)?;
            app.view.view = view;
            app.set_theme(theme);
            let screen = Screen { width, height, scale, theme };
            let mut headless = Headless::new(screen, |ctx| app.setup(ctx));
            let mut output = headless.settle(|ui| app.ui(ui));
            small.push(halved(&headless.paint(&mut output, 2)));
        }
    }
    let sheet = tiled(&small, [width / 2, height / 2]);
    files::write(out, &crate::picture::png(&sheet).map_err(Failure::usage)?)?;
    Ok(Exit::Ok)
}

/// Each pixel the mean of four, rounded to nearest.
fn halved(picture: &Canvas) -> Canvas {
    let mut half = Canvas::new(picture.width() / 2, picture.height() / 2, Color32::BLACK);
    for y in 0..half.height() {
        for x in 0..half.width() {
            let corners = [(0, 0), (1, 0), (0, 1), (1, 1)]
                .map(|(dx, dy)| picture.pixel(2 * x + dx, 2 * y + dy).unwrap_or_default());
            let mean = [0, 1, 2].map(|channel| {
                let sum: u16 = corners.iter().map(|pixel| u16::from(pixel[channel])).sum();
                ((sum + 2) / 4) as u8
            });
            half.set(x, y, Color32::from_rgb(mean[0], mean[1], mean[2]));
        }
    }
    half
}

/// The pictures in rows, each of `size`.
fn tiled(pictures: &[Canvas], [width, height]: [usize; 2]) -> Canvas {
    let rows = pictures.len().div_ceil(COLUMNS);
    let size = |n: usize, side: usize| n * (side + GAP) + GAP;
    let mut sheet = Canvas::new(size(COLUMNS, width), size(rows, height), Color32::GRAY);
    for (n, picture) in pictures.iter().enumerate() {
        let (left, top) = (size(n % COLUMNS, width), size(n / COLUMNS, height));
        for y in 0..picture.height() {
            for x in 0..picture.width() {
                let [r, g, b, _] = picture.pixel(x, y).unwrap_or_default();
                sheet.set(left + x, top + y, Color32::from_rgb(r, g, b));
            }
        }
    }
    sheet
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_picture_is_halved_by_means_and_put_in_its_place() {
        // Means of four: (0 + 0 + 255 + 255 + 2) / 4 = 128; two pictures of one pixel each.
        let mut picture = Canvas::new(2, 2, Color32::BLACK);
        picture.set(0, 0, Color32::WHITE);
        picture.set(1, 1, Color32::WHITE);
        let half = halved(&picture);
        assert_eq!(half.pixel(0, 0), Some([128, 128, 128, 255]));
        let sheet = tiled(&[half.clone(), half], [1, 1]);
        assert_eq!((sheet.width(), sheet.height()), (COLUMNS * (1 + GAP) + GAP, 1 + 2 * GAP));
        assert_eq!(sheet.pixel(2 * GAP + 1, GAP), Some([128, 128, 128, 255]));
    }
}
