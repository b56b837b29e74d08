//! A list of outcomes with both intervals, for the side of a view.

use egui::{Align, Rect, Ui, pos2};

use crate::context::Context;
use crate::shown;
use crate::theme::size;
use crate::widgets::text::{self, Key, Run};

/// Draws the primary outcomes of `ids`, wherever in the test they belong.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect, title: &str, ids: &[&str]) {
    let t = cx.tokens;
    let mut y = rect.top() + 14.0;
    text::plain(ui, pos2(rect.left(), y), Align::Min, title, size::SECTION, t.ink);
    y += 8.0;
    for id in ids {
        for o in cx.results.outcomes.iter().filter(|o| o.primary && o.id == *id) {
            if y + 40.0 > rect.bottom() {
                return;
            }
            let shown = shown::outcome(o, cx.results);
            y += 18.0;
            text::plain(ui, pos2(rect.left(), y), Align::Min, &shown.label, size::BODY, t.ink2);
            let value = format!("{} {}", shown.value, shown.unit).trim().to_owned();
            let key = Key { id: &shown.key, name: &shown.label, value: &value };
            let runs = [
                Run::new(shown.value.clone(), size::SECTION, t.ink),
                Run::new(format!(" {}", shown.unit), size::BODY, t.ink2),
            ];
            text::number(ui, pos2(rect.right(), y), Align::Max, &runs, &key);
            let more = match (&shown.reason, &shown.recording, &shown.repeat) {
                (Some(reason), ..) => reason.clone(),
                (None, Some(a), Some(b)) => format!("recording {a}   if repeated {b}"),
                (None, Some(a), None) => format!("recording {a}"),
                _ => String::new(),
            };
            if !more.is_empty() {
                y += 15.0;
                let room = rect.width();
                let one = [Run::new(more.clone(), size::BODY, t.ink2)];
                if text::width(ui, &one) <= room {
                    text::line(ui, pos2(rect.right(), y), Align::Max, &one);
                } else {
                    let block = text::block(
                        ui,
                        pos2(rect.left(), y - 11.0),
                        room,
                        &more,
                        size::BODY,
                        t.ink2,
                    );
                    y = block.rect.bottom() - 3.0;
                }
            }
        }
    }
}
