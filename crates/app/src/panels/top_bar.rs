//! The top bar: program, case, facts in a line, and what can be done with the session.

use analysis::facts::{Facts, Mode, ProtocolKind, Rhythm, Sex};
use egui::{Align, Rect, Stroke, Ui, pos2, vec2};

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::Dialog;
use crate::widgets::button;
use crate::widgets::text::{self, Run};

/// Draws the bar.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    ui.painter().rect_filled(rect, 0.0, t.panel);
    let base = rect.center().y + 6.0;
    let mut x = rect.left() + cx.grid.margin;
    let right = buttons(ui, cx, out, rect);
    let program = text::plain(ui, pos2(x, base), Align::Min, "Rampcrest", 16.0, t.ink2);
    x = program.rect.right() + 16.0;
    if !cx.open {
        return;
    }
    let rule = Stroke::new(1.0, t.frame);
    ui.painter().vline(x, (rect.top() + 10.0)..=(rect.bottom() - 10.0), rule);
    let label = text::plain(ui, pos2(x + 17.0, base), Align::Min, cx.label, size::TITLE, t.ink);
    x = label.rect.right() + 18.0;
    let words = facts_line(ui, cx, right - x - 16.0);
    text::plain(ui, pos2(x, base - 1.0), Align::Min, words, size::BODY, t.ink2);
}

fn buttons(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> f32 {
    let height = 28.0_f32.min(rect.height() - 8.0);
    let mut right = rect.right() - cx.grid.margin;
    let all = [
        Command::Show(Dialog::Sign),
        Command::Show(Dialog::Export),
        Command::Redo,
        Command::Undo,
        Command::Show(Dialog::Open),
    ];
    for command in &all {
        let wide = button::width(ui, command);
        let top = rect.center().y - 0.5 * height;
        let at = Rect::from_min_size(pos2(right - wide, top), vec2(wide, height));
        let strong = *command == Command::Show(Dialog::Export);
        button::styled(ui, cx, out, at, command, &command.label(), strong);
        right = at.left() - 10.0;
    }
    if cx.open {
        let at = pos2(right - 4.0, rect.center().y + 4.5);
        let said = text::plain(ui, at, Align::Max, cx.state_words(), size::BODY, cx.tokens.ink2);
        right = said.rect.left();
    }
    right
}

/// Facts in one line, as many as there is room for.
fn facts_line(ui: &Ui, cx: &Context<'_>, room: f32) -> String {
    let mut words = String::new();
    for part in fact_parts(cx.facts, cx.grid.narrow) {
        let longer = if words.is_empty() { part } else { format!("{words}  ·  {part}") };
        if text::width(ui, &[Run::new(longer.clone(), size::BODY, cx.tokens.ink2)]) > room {
            break;
        }
        words = longer;
    }
    words
}

fn fact_parts(facts: &Facts, narrow: bool) -> Vec<String> {
    let s = &facts.subject;
    let mut parts = Vec::new();
    parts.push(match (s.sex, s.age_years) {
        (Some(Sex::Male), Some(age)) => format!("Man, {age:.0}\u{a0}y"),
        (Some(Sex::Female), Some(age)) => format!("Woman, {age:.0}\u{a0}y"),
        (Some(Sex::Male), None) => "Man, age not stated".into(),
        (Some(Sex::Female), None) => "Woman, age not stated".into(),
        (None, Some(age)) => format!("{age:.0}\u{a0}y, sex not stated"),
        (None, None) => "age and sex not stated".into(),
    });
    if let (Some(cm), false) = (s.height_cm, narrow) {
        parts.push(format!("{cm:.0}\u{a0}cm"));
    }
    if let Some(kg) = s.mass_kg {
        parts.push(format!("{kg:.1}\u{a0}kg"));
    }
    if let (Some(hb), false) = (s.hb, narrow) {
        parts.push(format!("Hb {:.0}\u{a0}g/L", hb.g_per_l));
    }
    parts.push(protocol(facts));
    parts.push(
        match facts.test.rhythm {
            Some(Rhythm::Sinus) => "sinus rhythm",
            Some(Rhythm::AtrialFibrillation) => "atrial fibrillation",
            Some(Rhythm::Paced) => "paced",
            Some(Rhythm::Other) => "other rhythm",
            None => "rhythm not stated",
        }
        .into(),
    );
    if !narrow {
        parts.push(
            match facts.test.rate_slowing_drug.taken {
                Some(true) => "rate-slowing drug taken",
                Some(false) => "no rate-slowing drug",
                None => "rate-slowing drug not stated",
            }
            .into(),
        );
    }
    parts.push(match facts.test.fio2 {
        None => "room air assumed".into(),
        Some(f) if (0.20..=0.21).contains(&f) => "room air".into(),
        Some(f) => format!("FIO₂ {f:.2}"),
    });
    parts
}

fn protocol(facts: &Facts) -> String {
    let mode = match facts.test.mode {
        Some(Mode::Cycle) => "cycle",
        Some(Mode::Treadmill) => "treadmill",
        None => "mode not stated",
    };
    let Some(protocol) = facts.test.protocol else {
        return mode.into();
    };
    let kind = match protocol.kind {
        Some(ProtocolKind::Ramp) => " ramp",
        Some(ProtocolKind::Steps) => " steps",
        None => "",
    };
    let rate = protocol.w_per_min.map_or(String::new(), |w| format!(" {w:.0}\u{a0}W/min"));
    format!("{mode}{kind}{rate}")
}
