//! Looks for a real graphics card. Runs in a process of its own, because drivers crash.

use super::words;

/// Kernel drivers of cards that draw faster than the processor does.
const FAST: [&str; 16] = [
    "amdgpu", "apple", "asahi", "etnaviv", "i915", "lima", "msm", "msm_drm", "nouveau", "nvidia",
    "panfrost", "panthor", "radeon", "v3d", "vc4", "xe",
];

/// Drivers of this machine's render nodes (Linux), in order.
#[must_use]
pub fn drivers() -> Vec<String> {
    let Ok(entries) = std::fs::read_dir("/sys/class/drm") else {
        return Vec::new();
    };
    let mut names: Vec<String> = entries
        .filter_map(Result::ok)
        .filter(|entry| entry.file_name().to_string_lossy().starts_with("renderD"))
        .filter_map(|entry| std::fs::read_link(entry.path().join("device/driver")).ok())
        .filter_map(|link| Some(link.file_name()?.to_string_lossy().into_owned()))
        .collect();
    names.sort();
    names.dedup();
    names
}

/// The answer of `rampcrest probe`: `gpu: yes …` or `gpu: no …`. Opening a real window decides
/// where the drivers leave it open, so this may end the process.
#[must_use]
pub fn answer() -> String {
    if !super::display_is_named() {
        return format!("gpu: no ({})", words::no_display());
    }
    if cfg!(target_os = "linux") {
        if is_remote() {
            return "gpu: no (the display is on another machine)".to_owned();
        }
        let drivers = drivers();
        if !drivers.iter().any(|name| FAST.contains(&name.as_str())) {
            return format!("gpu: no (drivers: {})", drivers.join(" "));
        }
    } else if cfg!(windows) {
        return "gpu: no (this system does not say; choose with --renderer gpu)".to_owned();
    }
    super::gpu::try_context()
}

/// X11 forwarded over a network: the card here does not reach the screen there.
fn is_remote() -> bool {
    let display = std::env::var("DISPLAY").unwrap_or_default();
    let wayland = std::env::var_os("WAYLAND_DISPLAY").is_some();
    !wayland && !display.starts_with(':') && !display.starts_with("unix:")
}
