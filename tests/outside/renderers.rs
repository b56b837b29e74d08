//! The CPU raster against an independent renderer: OpenGL as Mesa's llvmpipe draws it.

use xtask::display::Display;
use xtask::program::demo;

use crate::tools::{Open, differing, rampcrest, run};

/// Of a hundred thousand pixels, so many may differ by more than two levels: 0.05 %.
const FEW: usize = 50;

fn screen(renderer: &str, case: &str, size: [u16; 2]) -> Vec<u8> {
    let display = Display::start(size).expect("Xvfb");
    let open = Open::new(display, renderer, &demo(case));
    // Away from all that lights up under the mouse.
    open.display.point(1, i32::from(size[1]) - 1).expect("the mouse");
    open.still()
}

#[test]
fn both_shells_show_the_same_pixels() {
    for (case, size) in [("dunlin", [1920, 1080]), ("curlew", [1280, 800])] {
        let (cpu, gpu) = (screen("cpu", case, size), screen("gpu", case, size));
        let (pixels, unlike) = (cpu.len() / 4, differing(&cpu, &gpu, 2));
        assert!(
            unlike * 100_000 <= pixels * FEW,
            "{case}: {unlike} of {pixels} pixels differ by more than two levels"
        );
        // They are not the same picture of the same renderer.
        assert!(differing(&cpu, &gpu, 0) > 0, "{case}: both windows were painted alike");
    }
}

#[test]
fn the_headless_picture_is_the_window() {
    let size = [1920, 1080];
    let window = screen("cpu", "dunlin", size);
    let folder = tempfile::tempdir().expect("temporary folder");
    let out = folder.path().join("picture.png");
    run(std::process::Command::new(rampcrest())
        .arg("picture")
        .arg(demo("dunlin"))
        .args(["--view", "time-course", "--size", "1920x1080", "-o"])
        .arg(&out));
    let file = std::io::BufReader::new(std::fs::File::open(&out).expect("the picture"));
    let mut reader = png::Decoder::new(file).read_info().expect("a PNG");
    let mut pixels = vec![0; reader.output_buffer_size().expect("a size")];
    let info = reader.next_frame(&mut pixels).expect("pixels");
    let channels = info.color_type.samples();
    // The display keeps blue first.
    let picture: Vec<u8> =
        pixels.chunks_exact(channels).flat_map(|p| [p[2], p[1], p[0], 0]).collect();
    let unlike = differing(&window, &picture, 2);
    assert!(unlike * 100_000 <= picture.len() / 4 * FEW, "{unlike} pixels differ");
}
