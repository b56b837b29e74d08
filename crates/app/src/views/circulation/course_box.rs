//! The course in a word, its numbers, and what this test could have seen.

use analysis::results::At;
use egui::{Align, Rect, Stroke, StrokeKind, Ui, pos2, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::shown;
use crate::theme::size;
use crate::view_state::Dialog;
use crate::widgets::button;
use crate::widgets::text::{self, Key, Run};

/// The course in a line.
#[must_use]
pub fn headline(cx: &Context<'_>) -> String {
    let shown = shown::primary(cx.results, "o2-pulse-course", At::Ramp);
    let word = match &shown {
        Some(s) if s.reason.is_some() => "withheld".to_owned(),
        Some(s) => s.value.replace('-', ", "),
        None => "not derived".to_owned(),
    };
    let word = if cx.provisional { format!("({word})") } else { word };
    format!("O₂-pulse course: {word}")
}

/// Draws the box and the lines beside it.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    let wide = if cx.grid.narrow { 352.0 } else { 372.0 };
    let frame = Rect::from_min_size(rect.min, vec2(wide, rect.height()));
    let edge = Stroke::new(1.5, t.ink);
    ui.painter().rect(frame, 2.0, t.panel, edge, StrokeKind::Inside);
    let square = Rect::from_center_size(
        pos2(frame.left() + 17.0, frame.top() + if cx.grid.narrow { 18.0 } else { 24.0 }),
        vec2(11.0, 11.0),
    );
    ui.painter().rect_stroke(square, 1.5, Stroke::new(1.5, t.ink), StrokeKind::Inside);
    let words = headline(cx);
    let base = square.center().y + 7.0;
    let at = pos2(frame.left() + 32.0, base);
    let big = if cx.grid.narrow { size::TITLE } else { size::COURSE };
    let run = [Run::new(words.clone(), big, t.ink)];
    let key = Key { id: "o2-pulse-course@ramp", name: "O₂-pulse course", value: &words, cx };
    text::number(ui, at, Align::Min, &run, &key);
    let second =
        pos2(frame.left() + 32.0, frame.bottom() - if cx.grid.narrow { 9.0 } else { 17.0 });
    match why_withheld(cx) {
        Some(why) => {
            let room = frame.width() - 44.0;
            let why = shortened(ui, cx, &why, room);
            text::plain(ui, second, Align::Min, why, size::BODY, t.ink2);
        }
        None => {
            number_line(ui, cx, second, "late slope ", "o2-pulse-late-slope", "  this recording")
        }
    }
    let at = pos2(frame.right() + 18.0, rect.top());
    match why_withheld(cx) {
        Some(why) => withheld(ui, cx, out, at, rect.right() - at.x, &why),
        None => beside(ui, cx, at, rect),
    }
}

fn shortened(ui: &Ui, cx: &Context<'_>, words: &str, room: f32) -> String {
    let fits = |s: &str| text::width(ui, &[Run::new(s, size::BODY, cx.tokens.ink2)]) <= room;
    if fits(words) {
        return words.to_owned();
    }
    let mut cut: Vec<&str> = words.split(' ').collect();
    while cut.len() > 1 {
        cut.pop();
        let s = format!("{} …", cut.join(" "));
        if fits(&s) {
            return s;
        }
    }
    words.to_owned()
}

fn why_withheld(cx: &Context<'_>) -> Option<String> {
    let shown = shown::primary(cx.results, "o2-pulse-course", At::Ramp)?;
    shown.reason
}

/// A number with its interval after a lead.
fn number_line(ui: &mut Ui, cx: &Context<'_>, at: egui::Pos2, lead: &str, id: &str, tail: &str) {
    let Some(s) = shown::primary(cx.results, id, At::Ramp) else {
        return;
    };
    let t = cx.tokens;
    let interval = s.recording.clone().map_or(String::new(), |i| format!(" {i}"));
    let runs = [
        Run::new(lead, size::BODY, t.ink2),
        Run::new(s.value.clone(), size::SECTION, t.ink),
        Run::new(format!("\u{a0}{}", s.unit), size::BODY, t.ink2),
        Run::new(interval.clone(), size::BODY, t.ink),
        Run::new(tail, size::BODY, t.ink2),
    ];
    let value = format!("{} {}{interval}", s.value, s.unit);
    let key = Key { id: &s.key, name: lead.trim(), value: &value, cx };
    text::number(ui, at, Align::Min, &runs, &key);
}

/// Why there is no course, what follows, and what to do.
fn withheld(
    ui: &mut Ui,
    cx: &Context<'_>,
    out: &mut Outbox,
    at: egui::Pos2,
    width: f32,
    why: &str,
) {
    let t = cx.tokens;
    let block = text::block(ui, at, width, why, size::BODY, t.ink);
    let then = "Magnitude is shown; a course needs sinus rhythm and a ramp of six minutes or more.";
    let below = pos2(at.x, block.rect.bottom() + 2.0);
    let block = text::block(ui, below, width, then, size::BODY, t.ink2);
    let command = Command::Show(Dialog::Facts);
    let place = Rect::from_min_size(pos2(at.x, block.rect.bottom() + 4.0), vec2(110.0, 22.0));
    button::at(ui, cx, out, place, &command, "State facts…  P");
}

/// The difference from the own early line and its parts, and what could have been seen.
fn beside(ui: &mut Ui, cx: &Context<'_>, at: egui::Pos2, rect: Rect) {
    const SCALE: f32 = 140.0;
    let right = rect.right() - if cx.grid.narrow { 8.0 } else { 16.0 };
    super::score::show(ui, cx, pos2(right - SCALE, at.y), SCALE);
    if cx.grid.narrow {
        return;
    }
    let mut y = at.y + 11.0;
    let step = 16.5;
    for (lead, id) in [
        ("against own early line ", "o2-pulse-deficit"),
        ("of which V̇O₂ slowing ", "o2-pulse-deficit-vo2-part"),
        ("of which HR acceleration ", "o2-pulse-deficit-hr-part"),
        ("shortest levelling it could see ", "o2-pulse-detection-limit"),
    ] {
        number_line(ui, cx, pos2(at.x, y), lead, id, "");
        y += step;
    }
    let doubts = shown::primary(cx.results, "o2-pulse-course", At::Ramp)
        .map(|s| s.doubts.join("; "))
        .unwrap_or_default();
    if !doubts.is_empty() {
        let words = shortened(ui, cx, &doubts, 460.0);
        text::plain(ui, pos2(at.x, y), Align::Min, words, size::BODY, cx.tokens.ink2);
    }
}
