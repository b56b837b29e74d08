//! A list of outcomes with both intervals, for the side of a view.

use egui::{Align, Rect, ScrollArea, Sense, Ui, UiBuilder, pos2};

use crate::context::Context;
use crate::shown::{self, Shown};
use crate::theme::size;
use crate::widgets::text::{self, Key, Run};

/// Draws the primary outcomes whose id is `wanted`, wherever in the test they belong.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect, title: &str, wanted: impl Fn(&str) -> bool) {
    let at = pos2(rect.left(), rect.top() + 14.0);
    text::plain(ui, at, Align::Min, title, size::SECTION, cx.tokens.ink);
    let list = Rect::from_min_max(pos2(rect.left(), rect.top() + 22.0), rect.max);
    let child = &mut ui.new_child(UiBuilder::new().max_rect(list).id_salt(title));
    ScrollArea::vertical().auto_shrink(false).show(child, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        let width = list.width() - 12.0;
        for o in cx.results.outcomes.iter().filter(|o| o.primary && wanted(&o.id)) {
            row(ui, cx, width, &shown::outcome(o, cx.results));
        }
    });
}

/// Name and value in a line, what else there is to say under it.
fn row(ui: &mut Ui, cx: &Context<'_>, width: f32, shown: &Shown) {
    let t = cx.tokens;
    let top = ui.cursor().min;
    let right = top.x + width;
    let spoken = shown.spoken();
    let key = Key { id: &shown.key, name: &shown.label, value: &spoken, cx };
    let runs = [
        Run::new(shown.value.clone(), size::SECTION, t.ink),
        Run::new(format!(" {}", shown.unit), size::BODY, t.ink2),
    ];
    let value = text::number(ui, pos2(right, top.y + 15.0), Align::Max, &runs, &key);
    let room = (value.rect.left() - 10.0 - top.x).max(40.0);
    let name = text::block(ui, pos2(top.x, top.y + 3.0), room, &shown.label, size::BODY, t.ink2);
    let mut y = name.rect.bottom().max(value.rect.bottom());
    let more = match (&shown.reason, &shown.recording, &shown.repeat) {
        (Some(reason), ..) => reason.clone(),
        (None, Some(a), Some(b)) => format!("recording {a}   if repeated {b}"),
        (None, Some(a), None) => format!("recording {a}"),
        _ => String::new(),
    };
    if !more.is_empty() {
        let at = pos2(top.x, y);
        y = text::block(ui, at, width, &more, size::BODY, t.ink2).rect.bottom();
    }
    ui.allocate_rect(Rect::from_min_max(top, pos2(right, y + 2.0)), Sense::hover());
}
