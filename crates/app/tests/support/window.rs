//! The whole window in a harness.

use app::App;
use egui_kittest::Harness;

use crate::support::CpuRenderer;

/// The window of `app` at `size` points, settled.
pub fn open(app: App, size: [f32; 2]) -> Harness<'static, App> {
    let mut harness = Harness::<App>::builder()
        .with_size(size)
        .with_context_setup(app::theme::install)
        .renderer(CpuRenderer::default())
        .build_ui_state(|ui, app: &mut App| app.ui(ui), app);
    harness.run();
    harness
}
