//! Circulation: do output and extraction keep growing?

mod course;
mod course_box;
mod plane;
mod score;
mod slopes;
mod strip;
mod table;

use egui::{Rect, ScrollArea, Ui, UiBuilder, pos2, vec2};

use crate::chart::interact::Geometry;
use crate::command::Outbox;
use crate::context::Context;

/// Where the parts stand.
struct Places {
    course: Rect,
    on_hr: Rect,
    against_work: Rect,
    plane: Rect,
    table: Rect,
}

impl Places {
    fn of(rect: Rect) -> Self {
        let split = rect.top() + (rect.height() * 0.51).floor();
        let row = |from: f32, to: f32, top: f32, bottom: f32| {
            let x = |share: f32| rect.left() + (rect.width() * share).floor();
            Rect::from_min_max(pos2(x(from), top), pos2(x(to), bottom))
        };
        let (top, low, bottom) = (rect.top(), split + 10.0, rect.bottom());
        Self {
            course: row(0.0, 0.65, top, split),
            on_hr: row(0.665, 1.0, top, split),
            against_work: row(0.0, 0.29, low, bottom),
            plane: row(0.295, 0.635, low, bottom),
            table: row(0.645, 1.0, low, bottom),
        }
    }

    /// On a narrow window the course takes the whole width, the table what is left.
    fn narrow(rect: Rect) -> Self {
        let split = rect.top() + (rect.height() * 0.46).floor();
        let low = split + 6.0;
        let third = (rect.width() / 3.0).floor();
        let part = |i: f32, n: f32| {
            Rect::from_min_max(
                pos2(rect.left() + third * i, low),
                pos2(rect.left() + third * (i + n) - 8.0, rect.bottom()),
            )
        };
        let course = Rect::from_min_max(rect.min, pos2(rect.right(), split));
        Self {
            course,
            on_hr: part(0.0, 1.0),
            against_work: Rect::NOTHING,
            plane: part(1.0, 1.0),
            table: part(2.0, 1.0),
        }
    }
}

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let (rect, row) = rect.split_top_bottom_at_y(rect.bottom() - strip::HEIGHT - 4.0);
    let row = Rect::from_min_max(pos2(row.left() + cx.grid.ticks.0, row.top() + 4.0), row.max);
    let places = if cx.grid.narrow { Places::narrow(rect) } else { Places::of(rect) };
    let geometry = course::show(ui, cx, out, places.course);
    slopes::on_hr(ui, cx, places.on_hr);
    if places.against_work.is_positive() {
        slopes::against_work(ui, cx, places.against_work);
    }
    plane::show(ui, cx, out, places.plane);
    let table = &mut ui.new_child(UiBuilder::new().max_rect(places.table).id_salt("two factors"));
    ScrollArea::vertical().auto_shrink(false).show(table, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        table::show(ui, cx, out, places.table.size() - vec2(4.0, 0.0));
    });
    strip::show(ui, cx, out, row);
    vec![geometry]
}
