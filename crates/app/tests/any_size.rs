//! No size of the window ends the program, in any view.

use app::App;
use app::headless::{Headless, Screen};
use app::view_state::View;

#[test]
fn every_view_is_drawn_in_windows_too_small_and_too_large_for_it() {
    let sizes = [[1, 1], [300, 200], [640, 1200], [1000, 640], [2400, 90], [16_384, 40]];
    for view in View::TABS.into_iter().chain([View::Findings]) {
        for [width, height] in sizes {
            for scale in [1.0, 2.5] {
                let mut app = App::on_demo();
                app.view.view = view;
                let screen = Screen { width, height, scale, ..Screen::default() };
                let mut headless = Headless::new(screen, |ctx| app.setup(ctx));
                let mut output = headless.settle(|ui| app.ui(ui));
                let picture = headless.paint(&mut output, 2);
                assert_eq!([picture.width(), picture.height()], [width, height], "{view:?}");
            }
        }
    }
}
