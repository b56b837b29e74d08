//! Thresholds: where do lactate and compensation begin?

use analysis::decisions::Mark as Threshold;
use analysis::quantity::Quantity as Q;
use analysis::results::At;
use analysis::thresholds::Proposal;
use egui::{Align, Rect, ScrollArea, Sense, Ui, UiBuilder, pos2, vec2};
use record::presentation::wording;

use super::{time_charts as charts, xy};
use crate::chart::column::{self, Side};
use crate::chart::interact::Geometry;
use crate::chart::layout::columns;
use crate::chart::spec::{CARRIED, Chart, Item, Mark, Title};
use crate::chart::ticks::clock;
use crate::command::Outbox;
use crate::context::Context;
use crate::theme::{Family, size};
use crate::widgets::text::{self, Key, Run};

/// Draws the view.
pub fn show(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, rect: Rect) -> Vec<Geometry> {
    let places = columns(rect, 2, cx.grid.gap);
    let time = vec![
        (3.0, charts::equivalents(cx)),
        (2.0, charts::end_tidal(cx)),
        (2.0, charts::exchange_ratio(cx)),
        (2.0, charts::ventilation(cx)),
    ];
    let geometry = column::show(ui, cx, out, places[0], 0, Side::Breath, time);
    let right = places[1];
    let split = right.top() + right.height() * 0.62;
    let upper = Rect::from_min_max(right.min, pos2(right.right(), split));
    v_slope(ui, cx, xy::frame(upper));
    let lower = Rect::from_min_max(pos2(right.left() + 38.0, split + 14.0), right.max);
    let child = &mut ui.new_child(UiBuilder::new().max_rect(lower).id_salt("thresholds"));
    ScrollArea::vertical().auto_shrink(false).show(child, |ui| {
        ui.spacing_mut().item_spacing.y = 0.0;
        summary(ui, cx, lower.width());
    });
    vec![geometry]
}

/// V̇CO₂ on V̇O₂ with the hinge, equal scales.
pub fn v_slope(ui: &mut Ui, cx: &Context<'_>, frame: Rect) {
    let mut chart = xy::chart(cx, "v-slope", Q::Vo2, Q::Vco2, xy::ramp(cx), true);
    chart.title = vec![
        Title::name("V̇CO₂", Family::CarbonDioxide),
        Title::grey("against V̇O₂, L/min  ·  V-slope"),
    ];
    if let Some(v) = &cx.results.thresholds.v_slope {
        let points: Vec<[f64; 2]> =
            v.vo2.iter().zip(&v.vco2).map(|(x, y)| [x / 1000.0, y / 1000.0]).collect();
        let color = cx.tokens.raw(Family::CarbonDioxide);
        chart.items.insert(0, Item::Points { points, mark: Mark::Level, radius: 2.0, color });
        if let Some(knot) = v.knot {
            hinge(cx, &mut chart, v, knot);
        }
    }
    mark(cx, &mut chart);
    xy::draw(ui, cx, frame, chart, "L/min");
}

fn hinge(cx: &Context<'_>, chart: &mut Chart, v: &analysis::thresholds::VSlope, knot: f64) {
    let ink = cx.tokens.ink;
    let (Some(low), Some(high)) =
        (v.vo2.iter().copied().reduce(f64::min), v.vo2.iter().copied().reduce(f64::max))
    else {
        return;
    };
    let y = |vo2: f64, slope: f64| (v.at_knot + slope * (vo2 - knot)) / 1000.0;
    let l = |vo2: f64| vo2 / 1000.0;
    let before = vec![vec![[l(low), y(low, v.before)], [l(knot), y(knot, v.before)]]];
    let after = vec![vec![[l(knot), y(knot, v.after)], [l(high), y(high, v.after)]]];
    let carried = vec![vec![[l(knot), y(knot, v.before)], [l(high), y(high, v.before)]]];
    for (pieces, dash) in [(before, None), (after, None), (carried, CARRIED)] {
        chart.items.push(Item::Line { pieces, width: 1.4, color: ink, dash });
    }
}

/// VT1 on the V-slope: its V̇O₂ with the interval as a bar on the base line.
fn mark(cx: &Context<'_>, chart: &mut Chart) {
    let Some(outcome) = cx.results.primary("vt1-vo2", At::Vt1) else {
        return;
    };
    let Some(vo2) = outcome.number().map(|v| v / 1000.0) else {
        return;
    };
    let color = cx.tokens.movable_edge;
    let (low, high) = (chart.y.low, chart.y.high);
    chart.items.push(Item::Line {
        pieces: vec![vec![[vo2, low], [vo2, high]]],
        width: 1.2,
        color,
        dash: Some(crate::chart::spec::Dash(1.2, 4.0)),
    });
    let y = low + 0.04 * (high - low);
    if let Some(i) = outcome.recording {
        let line = vec![vec![[i.low / 1000.0, y], [i.high / 1000.0, y]]];
        chart.items.push(Item::Line { pieces: line, width: 2.0, color: cx.tokens.ink, dash: None });
    }
    chart.remarks.push(([vo2, y + 0.05 * (high - low)], "VT1".into()));
}

/// Both thresholds with every method, and why where there is none.
fn summary(ui: &mut Ui, cx: &Context<'_>, width: f32) {
    let t = cx.tokens;
    let rect = Rect::from_min_size(ui.cursor().min, vec2(width, 0.0));
    let head = [Run::new("Thresholds", size::SECTION, t.ink)];
    text::line(ui, pos2(rect.left(), rect.top() + 14.0), Align::Min, &head);
    let x = [0.50, 0.70, 0.875, 0.98].map(|s| rect.left() + rect.width() * s);
    let mut y = rect.top() + 36.0;
    for (x, words) in x.into_iter().zip(["V̇O₂, L/min", "this recording", "if repeated", "time"])
    {
        text::plain(ui, pos2(x, y), Align::Max, words, size::BODY, t.ink2);
    }
    for (name, mark, id, at) in
        [("VT1", Threshold::Vt1, "vt1-vo2", At::Vt1), ("VT2", Threshold::Vt2, "vt2-vo2", At::Vt2)]
    {
        y += 8.0;
        ui.painter().hline(rect.x_range(), y - 2.0, egui::Stroke::new(1.0, t.grid));
        for outcome in cx.results.outcomes.iter().filter(|o| o.id == id && o.at == at) {
            y += 18.0;
            let shown = crate::shown::outcome(outcome, cx.results);
            let label = format!("{name}  ·  {}", wording::method(&outcome.method));
            let ink = if outcome.primary { t.ink } else { t.ink2 };
            text::plain(ui, pos2(rect.left(), y), Align::Min, label, size::BODY, ink);
            if let Some(reason) = &shown.reason {
                let at = pos2(rect.left() + 12.0, y + 4.0);
                let room = rect.width() - 12.0;
                let why = text::block(ui, at, room, reason, size::BODY, t.ink2);
                y = why.rect.bottom() - 3.0;
                continue;
            }
            let value = format!("{} {}", shown.value, shown.unit);
            let run = [Run::new(shown.value.clone(), size::BODY, ink)];
            if outcome.primary {
                let key = Key { id: &shown.key, name, value: &value, cx };
                text::number(ui, pos2(x[0], y), Align::Max, &run, &key);
            } else {
                text::line(ui, pos2(x[0], y), Align::Max, &run);
            }
            for (x, interval) in [(x[1], &shown.recording), (x[2], &shown.repeat)] {
                let words = interval.clone().unwrap_or_else(|| "–".into());
                text::plain(ui, pos2(x, y), Align::Max, words, size::BODY, ink);
            }
            if let (true, Some(t_s)) = (outcome.primary, time(cx, mark)) {
                text::plain(ui, pos2(x[3], y), Align::Max, clock(t_s), size::BODY, ink);
            }
        }
        if let Some(words) = why(cx, mark) {
            let at = pos2(rect.left(), y + 7.0);
            y = text::block(ui, at, rect.width(), &words, size::BODY, t.ink2).rect.bottom() - 3.0;
        }
    }
    ui.allocate_rect(rect.with_max_y(y + 6.0), Sense::hover());
}

fn time(cx: &Context<'_>, mark: Threshold) -> Option<f64> {
    match mark {
        Threshold::Vt1 => cx.results.thresholds.vt1_s,
        Threshold::Vt2 => cx.results.thresholds.vt2_s,
    }
}

fn why(cx: &Context<'_>, mark: Threshold) -> Option<String> {
    let proposal = match mark {
        Threshold::Vt1 => &cx.results.thresholds.vt1,
        Threshold::Vt2 => &cx.results.thresholds.vt2,
    };
    match proposal {
        Proposal::Proposed(t) => t.doubts.first().map(|n| crate::words::note(n, cx.results)),
        Proposal::NotReached(n) | Proposal::Indeterminate(n) | Proposal::Absent(n) => {
            Some(crate::words::note(n, cx.results))
        }
    }
}
