//! How the statements hold over every defensible choice, in one row, and the way to the line-up.

use analysis::reasoning::robustness::Robustness;
use egui::{Align, Rect, Stroke, StrokeKind, Ui, pos2, vec2};
use record::presentation::wording;

use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::theme::size;
use crate::view_state::Dialog;
use crate::widgets::button;
use crate::widgets::text::{self, Run};

/// Height of the row.
pub const HEIGHT: f32 = 26.0;
const BAR: f32 = 44.0;

/// One entry: what, how often, of how many.
#[derive(Clone, Debug, PartialEq)]
struct Share {
    what: String,
    count: usize,
    of: usize,
}

impl Share {
    fn words(&self) -> String {
        let args = [("count", self.count.to_string()), ("of", self.of.to_string())];
        wording::with("strip-count", &args)
    }
}

/// Course words, lows over all sets, then every other statement.
fn shares(robustness: &Robustness) -> Vec<Share> {
    let course = robustness.course.iter().map(|tally| Share {
        what: wording::with("strip-course", &[("word", wording::reading(&tally.word))]),
        count: tally.count,
        of: robustness.variants,
    });
    let lows = [("strip-pulse-low", robustness.pulse_low), ("strip-vo2-low", robustness.vo2_low)];
    let lows = lows.into_iter().filter(|(_, (_, of))| *of > 0).map(|(code, (count, of))| Share {
        what: wording::plain_text(code),
        count,
        of,
    });
    let apart = ["o2-pulse-course", "o2-pulse-magnitude", "circulation-caveat"];
    let others = robustness.statements.iter().filter(|s| !apart.contains(&s.id)).map(|s| Share {
        what: wording::plain_text(&format!("strip-{}", s.id)),
        count: s.same,
        of: robustness.variants,
    });
    course.chain(lows).chain(others).collect()
}

/// Draws the row.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) {
    let t = cx.tokens;
    let command = Command::Show(Dialog::LineUp);
    let has_course = cx.results.course.as_ref().is_some_and(|c| c.numbers.is_some());
    let mut right = rect.right();
    if has_course {
        let wide = button::width(ui, &command);
        let place = Rect::from_min_size(pos2(right - wide, rect.top() + 1.0), vec2(wide, 24.0));
        button::at(ui, cx, out, place, &command, &command.label());
        right = place.left() - 12.0;
    }
    let base = rect.top() + 17.0;
    let Some(robustness) = cx.robustness.filter(|r| r.variants > 0) else {
        let words = wording::plain_text("strip-none");
        text::plain(ui, pos2(rect.left(), base), Align::Min, words, size::BODY, t.ink2);
        return;
    };
    let all = shares(robustness);
    let code = if cx.robustness_behind { "strip-title-behind" } else { "strip-title" };
    let title = wording::with(code, &[("variants", robustness.variants.to_string())]);
    let whole: Vec<String> = all.iter().map(|s| format!("{}: {}", s.what, s.words())).collect();
    let whole = format!("{title} {}", whole.join("; "));
    let head = [Run::new(title, size::BODY, t.ink2)];
    let response = text::line(ui, pos2(rect.left(), base), Align::Min, &head);
    response.on_hover_text(format!("{whole}.\n{}", wording::plain_text("strip-about")));
    let mut x = rect.left() + text::width(ui, &head) + 16.0;
    for share in &all {
        let runs = [
            Run::new(format!("{} ", share.what), size::BODY, t.ink2),
            Run::new(share.words(), size::BODY, t.ink),
        ];
        let wide = BAR + 6.0 + text::width(ui, &runs);
        if x + wide > right {
            break;
        }
        bar(ui, cx, pos2(x, base - 9.0), share);
        text::line(ui, pos2(x + BAR + 6.0, base), Align::Min, &runs);
        x += wide + 18.0;
    }
}

/// A frame filled by the share.
fn bar(ui: &Ui, cx: &Context<'_>, at: egui::Pos2, share: &Share) {
    let t = cx.tokens;
    let frame = Rect::from_min_size(at, vec2(BAR, 9.0));
    let part = share.count as f32 / share.of.max(1) as f32;
    let filled = Rect::from_min_size(at, vec2(BAR * part, 9.0));
    ui.painter().rect_filled(filled, 0.0, t.ink2);
    ui.painter().rect_stroke(frame, 0.0, Stroke::new(1.0, t.ink2), StrokeKind::Inside);
}

#[cfg(test)]
mod tests {
    use super::*;
    use analysis::reasoning::robustness::{Held, Tally};

    #[test]
    fn every_statement_has_its_share_in_words() {
        let r = Robustness {
            variants: 27,
            course: vec![
                Tally { word: "flattened".into(), count: 18 },
                Tally { word: "rising-slowed".into(), count: 9 },
            ],
            statements: vec![
                Held { id: "o2-pulse-course", same: 18 },
                Held { id: "circulation-pattern", same: 20 },
                Held { id: "circulation-caveat", same: 27 },
            ],
            pulse_low: (46, 81),
            vo2_low: (0, 0),
        };
        let all = shares(&r);
        let words: Vec<String> = all.iter().map(|s| format!("{}: {}", s.what, s.words())).collect();
        assert_eq!(all.len(), 4, "{words:?}");
        assert!(words[0].contains("flattened") && words[0].ends_with("18 of 27"), "{words:?}");
        assert!(words[2].ends_with("46 of 81"), "{words:?}");
        assert!(words.iter().all(|w| !w.contains('[')), "{words:?}");
    }
}
