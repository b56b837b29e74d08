//! What is written into the frame of a chart: names beside lines, and remarks.

use egui::{Align, FontId, NumExt as _, Rect, Stroke, Ui, pos2, vec2};

use super::layout::{Scale, spread};
use super::spec::Chart;
use crate::theme::{Tokens, size};
use crate::widgets::text::{self, Run};

/// Least distance of the baselines of two names, px.
const APART: f32 = 14.0;

/// Writes the names, then the remarks where they meet no name.
pub fn show(ui: &mut Ui, tokens: &Tokens, frame: Rect, chart: &Chart, x: &Scale) {
    let y = Scale { px: (frame.bottom(), frame.top()), value: (chart.y.low, chart.y.high) };
    let mut taken = names(ui, tokens, frame, chart, x, &y);
    for (at, remark) in &chart.remarks {
        let wanted = pos2(x.place(at[0]), y.place(at[1]));
        taken.push(one_remark(ui, tokens, frame, wanted, remark, &taken));
    }
}

fn names(
    ui: &mut Ui,
    tokens: &Tokens,
    frame: Rect,
    chart: &Chart,
    x: &Scale,
    y: &Scale,
) -> Vec<Rect> {
    let shown: Vec<_> = chart.labels.iter().filter(|l| x.holds(l.at[0])).collect();
    let runs: Vec<[Run; 1]> =
        shown.iter().map(|l| [Run::new(l.text.clone(), size::BODY, l.color)]).collect();
    let widths: Vec<f32> = runs.iter().map(|r| text::width(ui, r)).collect();
    let line_y = |i: usize| y.place(shown[i].at[1]).at_most(frame.bottom()).at_least(frame.top());
    let after = |i: usize| x.place(shown[i].at[0]) + 26.0 + widths[i] <= frame.right() - 2.0;
    // Without room after its line a name stands under it, or over it near the bottom.
    let wanted: Vec<f32> = (0..shown.len())
        .map(|i| match (after(i), line_y(i)) {
            (true, y) => y,
            (false, y) if y + 21.0 < frame.bottom() => y + 13.0,
            (false, y) => y - 13.0,
        })
        .collect();
    let placed = spread(&wanted, APART, (frame.top() + 8.0, frame.bottom() - 8.0));
    (0..shown.len())
        .map(|i| {
            let line_x = x.place(shown[i].at[0]);
            let leader = after(i) && ((wanted[i] - placed[i]).abs() > 3.0 || shown.len() > 1);
            let left = match (after(i), leader) {
                (true, true) => line_x + 26.0,
                (true, false) => line_x + 10.0,
                (false, _) => frame.right() - 6.0 - widths[i],
            };
            if leader {
                let stroke = Stroke::new(1.0, shown[i].color.gamma_multiply(0.7));
                let ends = [pos2(line_x + 2.0, wanted[i]), pos2(left - 3.0, placed[i])];
                ui.painter().line_segment(ends, stroke);
            }
            let corner = pos2(left - 1.0, placed[i] - 7.0);
            let backing = Rect::from_min_size(corner, vec2(widths[i] + 2.0, 14.0));
            ui.painter().rect_filled(backing, 0.0, tokens.plot.gamma_multiply(0.85));
            text::line(ui, pos2(left, placed[i] + 4.5), Align::Min, &runs[i]);
            backing
        })
        .collect()
}

/// A remark as near to `wanted` as the frame and what is `taken` let it stand.
fn one_remark(
    ui: &mut Ui,
    tokens: &Tokens,
    frame: Rect,
    wanted: egui::Pos2,
    words: &str,
    taken: &[Rect],
) -> Rect {
    let room = (frame.width() - 8.0).max(1.0);
    let font = FontId::proportional(size::BODY);
    let galley = ui.painter().layout(words.to_owned(), font, tokens.ink2, room);
    let corner = wanted - vec2(2.0, 0.5 * APART);
    let backing = Rect::from_min_size(corner, galley.size() + vec2(4.0, 1.0));
    let place = free(backing, frame.shrink(1.0), taken);
    ui.painter().rect_filled(place, 0.0, tokens.plot.gamma_multiply(0.85));
    text::block(ui, place.min + vec2(2.0, 0.5), room, words, size::BODY, tokens.ink2);
    place
}

/// The place nearest to `wanted`, above or below it, that lies in `frame` and meets nothing that is
/// `taken`; where there is none, its own.
#[must_use]
pub fn free(wanted: Rect, frame: Rect, taken: &[Rect]) -> Rect {
    let rightmost = (frame.right() - wanted.width()).max(frame.left());
    let lowest = (frame.bottom() - wanted.height()).max(frame.top());
    let at = |shift: f32| {
        let left = wanted.left().at_most(rightmost).at_least(frame.left());
        let top = (wanted.top() + shift).at_most(lowest).at_least(frame.top());
        Rect::from_min_size(pos2(left, top), wanted.size())
    };
    let meets_none = |rect: &Rect| taken.iter().all(|t| !t.intersects(*rect));
    let step = 0.5 * APART;
    (0..48)
        .flat_map(|n| [at(n as f32 * step), at(-(n as f32) * step)])
        .find(meets_none)
        .unwrap_or_else(|| at(0.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn rect(left: f32, top: f32) -> Rect {
        Rect::from_min_size(pos2(left, top), vec2(40.0, 12.0))
    }

    #[test]
    fn a_free_place_is_kept_and_a_taken_one_left() {
        let frame = Rect::from_min_size(pos2(0.0, 0.0), vec2(100.0, 100.0));
        assert_eq!(free(rect(10.0, 50.0), frame, &[rect(60.0, 50.0)]), rect(10.0, 50.0));
        // Half a line steps: 50 + 2 · 7 = 64 is the first that clears 50..62.
        assert_eq!(free(rect(10.0, 50.0), frame, &[rect(10.0, 50.0)]), rect(10.0, 64.0));
        assert_eq!(free(rect(90.0, -5.0), frame, &[]), rect(60.0, 0.0));
        // A frame too small for it does not upset anyone.
        assert_eq!(
            free(rect(5.0, 5.0), Rect::from_min_size(pos2(0.0, 0.0), vec2(9.0, 3.0)), &[]),
            rect(0.0, 0.0)
        );
    }
}
