//! Breaths left out of every number, with the reason.

use egui::Ui;
use record::presentation::wording;
use record::session::Edit;

use super::{Form, foot, line};
use crate::command::{Command, Outbox};
use crate::context::Context;

/// Draws the dialog; `stretch` is what was chosen, s, else the breath at the cursor.
pub fn show(
    ui: &mut Ui,
    cx: &Context<'_>,
    form: &mut Form,
    out: &mut Outbox,
    stretch: Option<(f64, f64)>,
) {
    let fresh = form.begin("exclude");
    if fresh && let Some((from, to)) = stretch.or_else(|| at_cursor(cx)) {
        *form.field("from_s") = format!("{from}");
        *form.field("to_s") = format!("{to}");
    }
    line(ui, form, "from_s", &wording::plain_text("exclude-from"));
    line(ui, form, "to_s", &wording::plain_text("exclude-to"));
    let reason = line(ui, form, "reason", &wording::plain_text("exclude-reason"));
    if fresh {
        reason.request_focus();
    }
    let number = |name: &str| form.get(name).trim().replace(',', ".").parse::<f64>().ok();
    let stretch = number("from_s").zip(number("to_s"));
    let n = stretch.map_or(0, |(from, to)| within(cx, from, to));
    ui.label(match n {
        1 => wording::plain_text("exclude-count-one"),
        n => wording::with("exclude-count", &[("n", n.to_string())]),
    });
    let reason = form.get("reason").trim().to_owned();
    let ready = n > 0 && !reason.is_empty();
    if foot(ui, out, &wording::plain_text("exclude-do"), ready)
        && let Some((from_s, to_s)) = stretch
    {
        out.push(Command::Edit(Edit::ExcludeBreaths { from_s, to_s, reason }));
        out.push(Command::CloseDialog);
    }
}

/// How many breaths have their middle in the stretch, which is what the engine asks.
fn within(cx: &Context<'_>, from: f64, to: f64) -> usize {
    let breaths = &cx.recording.breaths;
    (0..breaths.len()).filter(|i| (from..=to).contains(&breaths.mid_s(*i))).count()
}

/// A stretch around the middle of breath `i` that no neighbour's middle touches, s to a tenth
/// where that suffices.
#[must_use]
pub fn around(breaths: &analysis::breaths::Breaths, i: usize) -> (f64, f64) {
    let quarter = 0.25 * breaths.duration_s()[i];
    let middle = breaths.mid_s(i);
    let tenth = |t: f64| (t * 10.0).round() / 10.0;
    let (from, to) = (tenth(middle - quarter), tenth(middle + quarter));
    if from <= middle && middle <= to { (from, to) } else { (middle, middle) }
}

fn at_cursor(cx: &Context<'_>) -> Option<(f64, f64)> {
    if let Some(stretch) = cx.view.selected_s {
        return Some(stretch);
    }
    let breaths = &cx.recording.breaths;
    let far = |i: usize| (breaths.mid_s(i) - cx.cursor()).abs();
    let near = (0..breaths.len()).min_by(|a, b| far(*a).total_cmp(&far(*b)))?;
    Some(around(breaths, near))
}
