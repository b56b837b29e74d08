//! System libraries that are opened at run time, and the packages that bring them.

use super::words;

/// File name as it appears in error texts, Debian package, Fedora package. A name that begins
/// another one comes after it.
const LIBRARIES: [(&str, &str, &str); 14] = [
    ("libX11-xcb.so", "libx11-xcb1", "libX11-xcb"),
    ("libX11.so", "libx11-6", "libX11"),
    ("libXcursor.so", "libxcursor1", "libXcursor"),
    ("libXi.so", "libxi6", "libXi"),
    ("libXrandr.so", "libxrandr2", "libXrandr"),
    ("libXrender.so", "libxrender1", "libXrender"),
    ("libxkbcommon-x11.so", "libxkbcommon-x11-0", "libxkbcommon-x11"),
    ("libxkbcommon.so", "libxkbcommon0", "libxkbcommon"),
    ("libwayland-client.so", "libwayland-client0", "libwayland-client"),
    ("libwayland-cursor.so", "libwayland-cursor0", "libwayland-cursor"),
    ("libwayland-egl.so", "libwayland-egl1", "libwayland-egl"),
    ("libxcb.so", "libxcb1", "libxcb"),
    ("libEGL.so", "libegl1", "libglvnd-egl"),
    ("libGL.so", "libgl1", "libglvnd-glx"),
];

/// A sentence that names the library and its packages, if `error` speaks of one.
#[must_use]
pub fn missing(error: &str) -> Option<String> {
    LIBRARIES
        .iter()
        .find(|(library, _, _)| error.contains(library))
        .map(|(library, debian, fedora)| words::missing_library(library, debian, fedora))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_texts_of_the_window_system_lead_to_packages() {
        // Error texts as winit 0.30 and xkbcommon-dl print them when the file is absent.
        let cases = [
            (
                "Os(XNotSupported(LibraryOpenError(OpenError { kind: Library, detail: \"opening \
                 library failed (libX11.so.6: cannot open shared object file); \" })))",
                "libx11-6",
            ),
            ("opening library failed (libX11-xcb.so.1: cannot open)", "libx11-xcb1"),
            ("Library libxkbcommon-x11.so could not be loaded.", "libxkbcommon-x11-0"),
            ("Library libxkbcommon.so could not be loaded.", "libxkbcommon0"),
        ];
        for (text, package) in cases {
            let sentence = missing(text).expect("known");
            assert!(sentence.contains(&format!("package {package} ")), "{sentence}");
        }
        assert_eq!(missing("Connection refused"), None);
    }

    #[test]
    fn no_name_hides_a_later_one() {
        for (i, (name, _, _)) in LIBRARIES.iter().enumerate() {
            let first = LIBRARIES.iter().position(|(other, _, _)| name.contains(other));
            assert_eq!(first, Some(i), "{name}");
        }
    }
}
