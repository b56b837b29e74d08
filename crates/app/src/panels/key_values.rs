//! Key values of the sheet: four at 24 with both intervals, four lesser without.

use analysis::results::At;
use egui::{Align, Rect, Stroke, Ui, pos2};
use record::presentation::key_table::short_names;
use record::presentation::wording;

use crate::context::Context;
use crate::shown::{self, Shown};
use crate::theme::size;
use crate::widgets::text::{self, Key, Run};

/// Draws the values from the top of `rect`; returns where they end.
pub fn show(ui: &mut Ui, cx: &Context<'_>, rect: Rect) -> f32 {
    let big = [
        ("vo2-peak", At::Peak, "Peak V̇O₂"),
        ("o2-pulse-at-peak", At::Peak, "O₂ pulse at peak"),
        ("o2-pulse-course", At::Ramp, "O₂-pulse course"),
        ("vt1-vo2", At::Vt1, "VT1"),
    ];
    let small = [
        ("hr-peak", At::Peak, "HR peak"),
        ("rer-peak", At::Peak, "RER peak"),
        ("ve-vco2-slope-to-vt2", At::Ramp, "V̇E/V̇CO₂ slope to VT2"),
        ("breathing-reserve", At::Peak, "Breathing reserve"),
    ];
    let mut y = rect.top();
    if !cx.grid.narrow {
        let cols = interval_columns(rect);
        let base = y + 16.0;
        let t = cx.tokens;
        text::plain(ui, pos2(rect.left(), base), Align::Min, "90 % intervals", size::BODY, t.ink2);
        text::plain(ui, pos2(cols.0, base), Align::Max, "this recording", size::BODY, t.ink2);
        text::plain(ui, pos2(cols.1, base), Align::Max, "if repeated", size::BODY, t.ink2);
        y += 24.0;
        ui.painter().hline(rect.x_range(), y, Stroke::new(1.0, t.grid));
    }
    for (i, (id, at, name)) in big.into_iter().enumerate() {
        if i > 0 {
            ui.painter().hline(rect.x_range(), y, Stroke::new(1.0, cx.tokens.grid));
        }
        let mut shown = one(cx, id, at);
        if id == "o2-pulse-course" {
            // The word has no interval; that of the late slope stands for it.
            let slope = shown::primary(cx.results, "o2-pulse-late-slope", At::Ramp);
            shown.recording = slope.and_then(|s| s.recording);
        }
        let value = Value { name, shown: &shown, against: &against(cx, id) };
        y = if cx.grid.narrow {
            large_narrow(ui, cx, rect, y, &value)
        } else {
            large(ui, cx, rect, y, &value)
        };
    }
    ui.painter().hline(rect.x_range(), y, Stroke::new(1.0, cx.tokens.grid));
    y += 4.0;
    for (id, at, name) in small {
        let value = Value { name, shown: &one(cx, id, at), against: &against(cx, id) };
        lesser(ui, cx, rect, y, &value);
        y += if cx.grid.narrow { 19.0 } else { 22.0 };
    }
    y + 4.0
}

/// One value of the sheet.
struct Value<'a> {
    name: &'a str,
    shown: &'a Shown,
    /// What it is held against.
    against: &'a str,
}

fn one(cx: &Context<'_>, id: &str, at: At) -> Shown {
    shown::primary(cx.results, id, at).unwrap_or_else(|| Shown {
        key: format!("{id}@{}", at.code()),
        value: "–".into(),
        ..Shown::default()
    })
}

fn interval_columns(rect: Rect) -> (f32, f32) {
    (rect.right() - rect.width() * 0.30, rect.right())
}

/// What a key value is held against.
fn against(cx: &Context<'_>, id: &str) -> String {
    let said = |id: &str, at: At| {
        let shown = shown::primary(cx.results, id, at).filter(|s| s.reason.is_none())?;
        Some(record::presentation::values::joined(&shown.value, &shown.unit))
    };
    let parts = match id {
        "vo2-peak" => {
            vec![said("vo2-peak-per-kg", At::Peak), of_predicted(cx, "vo2-peak-percent", At::Peak)]
        }
        "o2-pulse-at-peak" => vec![of_predicted(cx, "o2-pulse-percent", At::Peak)],
        "hr-peak" => vec![of_predicted(cx, "hr-peak-percent", At::Peak)],
        "o2-pulse-course" => {
            let slope = said("o2-pulse-late-slope", At::Ramp);
            vec![slope.map(|slope| wording::with("sheet-late-slope", &[("slope", slope)]))]
        }
        "vt1-vo2" => {
            let of_peak = said("vt1-vo2-of-peak", At::Vt1);
            let mark =
                if cx.decisions.vt1_s.is_some() { "sheet-readers-mark" } else { "sheet-proposal" };
            vec![
                of_peak.map(|percent| wording::with("page-of-peak", &[("percent", percent)])),
                said("vt1-vo2-percent-predicted", At::Vt1).map(|percent| {
                    wording::with("sheet-of-predicted-peak", &[("percent", percent)])
                }),
                Some(wording::plain_text(mark)),
            ]
        }
        _ => Vec::new(),
    };
    parts.into_iter().flatten().collect::<Vec<_>>().join("  ·  ")
}

/// "92 % of Hansen 1984": the outcome that gives the per cent, and the set behind it.
fn of_predicted(cx: &Context<'_>, id: &str, at: At) -> Option<String> {
    let outcome = cx.results.primary(id, at).filter(|o| o.reason.is_none())?;
    let percent = record::presentation::values::shown(outcome).with_unit();
    let set = short_names(&outcome.method, cx.settings);
    Some(wording::with("page-of-predicted", &[("percent", percent), ("set", set)]))
}

fn value_text(cx: &Context<'_>, shown: &Shown) -> String {
    // A reading that changes under a moving handle is provisional until release.
    let word = shown.unit.is_empty() && shown.value.chars().next().is_some_and(char::is_alphabetic);
    if cx.provisional && word { format!("({})", shown.value) } else { shown.value.clone() }
}

fn large(ui: &mut Ui, cx: &Context<'_>, rect: Rect, top: f32, value: &Value<'_>) -> f32 {
    let t = cx.tokens;
    let Value { name, shown, against } = *value;
    text::plain(ui, pos2(rect.left(), top + 17.0), Align::Min, name, size::BODY, t.ink2);
    let at = pos2(rect.right(), top + 17.0);
    text::plain(ui, at, Align::Max, against, size::BODY, t.ink2);
    let base = top + 42.0;
    let value = value_text(cx, shown);
    let key = Key { id: &shown.key, name, value: &shown.spoken(), cx };
    let runs = [
        Run::new(value, size::KEY, t.ink),
        Run::new(format!("  {}", shown.unit), size::BODY, t.ink2),
    ];
    let response = text::number(ui, pos2(rect.left(), base), Align::Min, &runs, &key);
    let end = response.rect.right();
    let cols = interval_columns(rect);
    if let Some(reason) = &shown.reason {
        let room = rect.right() - end - 12.0;
        let galley_height = text::block_height(ui, room, reason, size::BODY);
        let y = if galley_height > 20.0 { top + 22.0 } else { base - 12.0 };
        text::block(ui, pos2(end + 12.0, y), room, reason, size::BODY, t.ink2);
        return top + 52.0_f32.max(24.0 + galley_height);
    }
    let dash = || "–".to_owned();
    let recording = shown.recording.clone().unwrap_or_else(dash);
    text::plain(ui, pos2(cols.0, base - 3.0), Align::Max, recording, size::BODY, t.ink);
    match &shown.repeat {
        Some(i) => text::plain(ui, pos2(cols.1, base - 3.0), Align::Max, i, size::BODY, t.ink),
        None => {
            let words = "not published";
            text::plain(ui, pos2(cols.1, base - 3.0), Align::Max, words, size::BODY, t.ink2)
        }
    };
    top + 52.0
}

fn large_narrow(ui: &mut Ui, cx: &Context<'_>, rect: Rect, top: f32, value: &Value<'_>) -> f32 {
    let t = cx.tokens;
    let Value { name, shown, .. } = *value;
    let left = rect.left();
    text::plain(ui, pos2(left, top + 16.0), Align::Min, name, size::BODY, t.ink2);
    let key = Key { id: &shown.key, name, value: &shown.spoken(), cx };
    let runs = [
        Run::new(value_text(cx, shown), size::KEY, t.ink),
        Run::new(format!("  {}", shown.unit), size::BODY, t.ink2),
    ];
    text::number(ui, pos2(left, top + 40.0), Align::Min, &runs, &key);
    if let Some(reason) = &shown.reason {
        let at = pos2(left, top + 46.0);
        let block = text::block(ui, at, rect.width(), reason, size::BODY, t.ink2);
        return block.rect.bottom().max(top + 76.0) + 6.0;
    }
    let dash = || "–".to_owned();
    let recording = format!("recording {}", shown.recording.clone().unwrap_or_else(dash));
    text::plain(ui, pos2(left, top + 58.0), Align::Min, recording, size::BODY, t.ink2);
    let repeat = match &shown.repeat {
        Some(i) => format!("if repeated {i}"),
        None => "if repeated: not published".into(),
    };
    text::plain(ui, pos2(left, top + 74.0), Align::Min, repeat, size::BODY, t.ink);
    top + 83.0
}

fn lesser(ui: &mut Ui, cx: &Context<'_>, rect: Rect, top: f32, value: &Value<'_>) {
    let t = cx.tokens;
    let Value { name, shown, against } = *value;
    let base = top + 16.0;
    text::plain(ui, pos2(rect.left(), base), Align::Min, name, size::BODY, t.ink2);
    let key = Key { id: &shown.key, name, value: &shown.spoken(), cx };
    let unit = if shown.unit.is_empty() { String::new() } else { format!(" {}", shown.unit) };
    let runs =
        [Run::new(shown.value.clone(), size::SECTION, t.ink), Run::new(unit, size::BODY, t.ink2)];
    let (x, align) = if cx.grid.narrow {
        (rect.right(), Align::Max)
    } else {
        (rect.left() + rect.width() * 0.42, Align::Min)
    };
    let response = text::number(ui, pos2(x, base), align, &runs, &key);
    let end = response.rect.right();
    if cx.grid.narrow {
        return;
    }
    let words = shown.reason.clone().unwrap_or_else(|| against.to_owned());
    let run = [Run::new(words.clone(), size::BODY, t.ink2)];
    if end + 10.0 + text::width(ui, &run) <= rect.right() {
        text::line(ui, pos2(rect.right(), base), Align::Max, &run);
    } else if shown.reason.is_some() {
        let short = [Run::new("withheld", size::BODY, t.ink2)];
        text::line(ui, pos2(rect.right(), base), Align::Max, &short).on_hover_text(words);
    }
}
