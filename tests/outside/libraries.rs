//! Bare systems: libraries hidden in a mount namespace, which needs root.

use std::process::{Command, Stdio};
use std::time::Duration;

use xtask::display::Display;
use xtask::drag::Drag;
use xtask::program::demo;

use crate::tools::{Open, rampcrest};

/// Everything a graphics card is reached by.
const GRAPHICS: &str = "GL|EGL|GLX|GLX_mesa|EGL_mesa|GLdispatch|OpenGL|GLESv2|gbm|vulkan|gallium";

/// A command that runs the program where every library of these names opens as an empty file.
fn without(names: &str) -> Command {
    let script = format!(
        r#"set -e
        hidden=$(ldconfig -p | grep -oE '/[^ ]*/lib({names})(-[0-9.]+)?\.so[^ ]*$')
        test -n "$hidden"
        for file in $hidden; do mount --bind /dev/null "$(readlink -f "$file")"; done
        exec "$@""#
    );
    let mut command = Command::new("unshare");
    command.args(["--mount", "sh", "-c", &script, "sh"]).arg(rampcrest());
    command
}

#[test]
fn the_window_needs_no_graphics_library() {
    for renderer in ["cpu", "auto"] {
        let session = demo("dunlin");
        let mut command = without(GRAPHICS);
        command.args(["--renderer", renderer]).arg(&session);
        let open = Open::with(Display::start([1280, 800]).expect("Xvfb"), command);
        let drag = Drag::grip(&open.display, &rampcrest(), &session, 1).expect("a handle");
        drag.times(&open.display, 10, Duration::ZERO).expect("every move shows");
    }
}

#[test]
fn a_wish_for_the_graphics_card_says_why_not_and_shows_the_window_all_the_same() {
    let mut command = without(GRAPHICS);
    command.args(["--renderer", "gpu"]).arg(demo("dunlin")).stderr(Stdio::piped());
    let mut open = Open::with(Display::start([1280, 800]).expect("Xvfb"), command);
    assert!(open.program.is_running());
    open.display.point(1, 799).expect("the mouse");
    let said = open.program.end_and_read();
    assert!(said.contains("graphics card"), "{said}");
    assert!(!said.contains("panicked"), "{said}");
}

#[test]
fn a_missing_library_is_named_with_its_packages() {
    let cases = [
        ("X11", "libx11-6", "libX11"),
        ("Xcursor", "libxcursor1", "libXcursor"),
        ("Xi", "libxi6", "libXi"),
        ("X11-xcb", "libx11-xcb1", "libX11-xcb"),
        ("xkbcommon-x11", "libxkbcommon-x11-0", "libxkbcommon-x11"),
    ];
    let display = Display::start([800, 600]).expect("Xvfb");
    for (name, debian, fedora) in cases {
        let home = tempfile::tempdir().expect("temporary folder");
        let mut command = without(name);
        command.args(["--renderer", "cpu"]).arg(demo("dunlin"));
        command.env("DISPLAY", display.name()).env_remove("WAYLAND_DISPLAY");
        let output = command.env("XDG_CONFIG_HOME", home.path()).output().expect("unshare");
        let said = String::from_utf8_lossy(&output.stderr).into_owned();
        assert!(!output.status.success(), "{name}: {said}");
        assert!(said.contains(debian) && said.contains(fedora), "{name}: {said}");
        assert!(!said.contains("panicked"), "{name}: {said}");
    }
}
