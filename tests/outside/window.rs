//! The real window under a virtual display, with real mouse moves and keys.

use std::time::Duration;

use xtask::display::Display;
use xtask::drag::Drag;
use xtask::program::demo;

use crate::tools::{Open, differing, rampcrest};

const SIZE: [u16; 2] = [1920, 1080];
/// X key symbols (X11/keysymdef.h).
const CONTROL: u32 = 0xffe3;
const Z: u32 = 0x7a;

/// Frames of the long drag.
const FRAMES: usize = 10_000;
/// Resident memory may rise by this from its first frames to its last, KiB: half a kilobyte a frame.
/// The allocator takes and gives back up to 3 MiB meanwhile.
const FLAT: u64 = 5_120;

fn window(renderer: &str, managed: bool) -> (Open, std::path::PathBuf) {
    let session = demo("dunlin");
    let mut display = Display::start(SIZE).expect("Xvfb");
    if managed {
        display.manage().expect("openbox");
    }
    (Open::new(display, renderer, &session), session)
}

fn drag_and_undo(renderer: &str, managed: bool) {
    let (open, session) = window(renderer, managed);
    let before = open.still();
    let distinct: std::collections::BTreeSet<&[u8]> = before.chunks(4).collect();
    assert!(distinct.len() > 16, "the window is blank");
    let drag = Drag::grip(&open.display, &rampcrest(), &session, 1).expect("a handle");
    drag.times(&open.display, 12, Duration::from_millis(20)).expect("every move shows");
    let during = open.still();
    assert!(differing(&before, &during, 0) > 2_000, "the drag moved nothing");
    drag.release(&open.display).expect("released");
    open.still();
    open.display.chord(&[CONTROL, Z]).expect("keys");
    open.display.point(5, 5).expect("the mouse");
    let undone = open.still();
    assert!(
        differing(&before, &undone, 0) < differing(&before, &during, 0) / 2,
        "undo did not bring the boundary back"
    );
}

#[test]
fn a_boundary_dragged_in_the_gpu_shell_moves_and_is_undone() {
    drag_and_undo("gpu", false);
}

#[test]
fn a_boundary_dragged_in_the_cpu_shell_moves_and_is_undone() {
    drag_and_undo("cpu", false);
}

#[test]
fn the_same_holds_under_a_window_manager() {
    drag_and_undo("cpu", true);
}

#[test]
fn ten_thousand_frames_of_a_drag_leave_memory_flat() {
    let (open, session) = window("cpu", false);
    let drag = Drag::grip(&open.display, &rampcrest(), &session, 1).expect("a handle");
    drag.times(&open.display, 200, Duration::ZERO).expect("every move shows");
    let before = open.program.resident_kib().expect("memory");
    drag.times(&open.display, FRAMES, Duration::ZERO).expect("every move shows");
    let after = open.program.resident_kib().expect("memory");
    assert!(after <= before + FLAT, "{before} KiB became {after} KiB");
    drag.release(&open.display).expect("released");
}

fn resized_while_dragging(renderer: &str) {
    let (mut open, session) = window(renderer, false);
    let drag = Drag::grip(&open.display, &rampcrest(), &session, 1).expect("a handle");
    for [width, height] in [[1400, 900], [1000, 640], [1, 1], [1700, 1000], SIZE] {
        drag.times(&open.display, 3, Duration::ZERO).unwrap_or_default();
        open.display.place(open.window, [0, 0, width, height]).expect("a size");
        open.still();
        assert!(open.program.is_running(), "ended at {width} × {height}");
    }
    drag.release(&open.display).expect("released");
    open.display.point(5, 5).expect("the mouse");
    let resized = open.still();
    let [_, _, width, height] = open.display.place_of(open.window).expect("a place");
    assert_eq!([width, height], SIZE);
    // The last column of pixels is painted like its neighbour: window ground all the way down.
    let last = |x: u16| open.display.pixels([x, 700, 1, 200]).expect("pixels");
    assert_eq!(last(SIZE[0] - 1), last(SIZE[0] - 2));
    assert!(resized.chunks(4).any(|pixel| pixel[..3] != resized[..3]), "the window is blank");
}

#[test]
fn the_cpu_shell_is_resized_while_a_boundary_is_held() {
    resized_while_dragging("cpu");
}

#[test]
fn the_gpu_shell_is_resized_while_a_boundary_is_held() {
    resized_while_dragging("gpu");
}

fn minimised(renderer: &str) {
    let (mut open, _) = window(renderer, true);
    open.display.point(5, 1075).expect("the mouse");
    let before = open.still();
    open.display.minimise(open.window, true).expect("minimised");
    let away = open.still();
    assert!(differing(&before, &away, 0) > 100_000, "the window is still there");
    open.display.minimise(open.window, false).expect("restored");
    let after = open.still();
    assert!(open.program.is_running());
    assert_eq!(differing(&before, &after, 0), 0, "the window came back otherwise");
}

#[test]
fn the_cpu_shell_comes_back_as_it_was_from_being_minimised() {
    minimised("cpu");
}

#[test]
fn the_gpu_shell_comes_back_as_it_was_from_being_minimised() {
    minimised("gpu");
}
