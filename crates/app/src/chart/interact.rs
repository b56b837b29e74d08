//! The drag of a handle: plain structs, read at the start of a frame so that every panel of that
//! same frame shows what follows.

use egui::{Id, Key, Rect, Ui};

use super::handles::{Handle, HandleKind};
use super::layout::Scale;

/// Reach of a handle on each side, px at 1×.
pub const REACH: f32 = 12.0;

/// Places that may show time in one view.
pub const COLUMNS: usize = 9;

/// Where a time column stood in the last frame.
#[derive(Clone, Debug, PartialEq)]
pub struct Geometry {
    /// Its number.
    pub column: usize,
    /// x of time.
    pub scale: Scale,
    /// Frames and ribbon.
    pub span: Rect,
}

/// A handle under way.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Drag {
    /// Which.
    pub kind: HandleKind,
    /// Where it was, s.
    pub was_s: f64,
    /// Where it is, s.
    pub t_s: f64,
    /// The column in which it is held.
    pub column: usize,
    /// Distance of the pointer from the line when it was taken, px.
    pub grab_px: f32,
    /// How far it may move, s.
    pub range_s: (f64, f64),
    /// Whether it has moved at all.
    pub moved: bool,
}

impl Drag {
    /// Takes `handle` in `column` at screen x `px`.
    #[must_use]
    pub fn take(handle: &Handle, column: usize, scale: &Scale, px: f32) -> Self {
        Self {
            kind: handle.kind,
            was_s: handle.t_s,
            t_s: handle.t_s,
            column,
            grab_px: px - scale.place(handle.t_s),
            range_s: handle.range_s,
            moved: false,
        }
    }

    /// Moves it to screen x `px`; it snaps to `ends` unless `free`.
    pub fn to(&mut self, scale: &Scale, px: f32, ends: &[f64], free: bool) {
        let wanted = scale.value_at(px - self.grab_px);
        let t_s = place(wanted, ends, free, self.range_s);
        if (t_s - self.t_s).abs() > 1e-9 {
            self.t_s = t_s;
            self.moved = true;
        }
    }
}

/// `wanted` within `range`, on the nearest of the rising `ends` unless `free`.
#[must_use]
pub fn place(wanted: f64, ends: &[f64], free: bool, range: (f64, f64)) -> f64 {
    let wanted = wanted.clamp(range.0, range.1.max(range.0));
    if free {
        return wanted;
    }
    let inside = |t: &f64| *t >= range.0 && *t <= range.1;
    let i = ends.partition_point(|t| *t < wanted);
    let near = [i.checked_sub(1), Some(i)].into_iter().flatten().filter_map(|i| ends.get(i));
    near.filter(|t| inside(t))
        .min_by(|a, b| (*a - wanted).abs().total_cmp(&(*b - wanted).abs()))
        .copied()
        .unwrap_or(wanted)
}

/// The breath end `steps` breaths from `t_s`.
#[must_use]
pub fn step(t_s: f64, ends: &[f64], steps: i32) -> f64 {
    if ends.is_empty() {
        return t_s;
    }
    let below = ends.partition_point(|t| *t < t_s - 1e-6) as i64;
    let on = ends.get(below as usize).is_some_and(|t| (*t - t_s).abs() <= 1e-6);
    let from = if steps > 0 && !on { below - 1 } else { below };
    let i = (from + i64::from(steps)).clamp(0, ends.len() as i64 - 1);
    ends[i as usize]
}

/// Id of the pointer area of a handle in a column.
#[must_use]
pub fn pointer_id(kind: HandleKind, column: usize) -> Id {
    Id::unique(("handle", kind.code(), column))
}

/// Id of the focusable slider of a handle.
#[must_use]
pub fn slider_id(kind: HandleKind) -> Id {
    Id::unique(("handle slider", kind.code()))
}

/// What happened to handles in this frame's input.
#[derive(Clone, Debug, PartialEq)]
pub enum Moved {
    /// Released at a new place, or moved by a key.
    To(HandleKind, f64),
}

/// Reads pointer and keys for `handles`, using where they stood in the last frame.
pub fn read(
    ui: &Ui,
    drag: &mut Option<Drag>,
    handles: &[Handle],
    geometry: &[Geometry],
    ends: &[f64],
) -> Vec<Moved> {
    let mut moved = Vec::new();
    if drag.is_some() && ui.input_mut(|i| i.consume_key(egui::Modifiers::NONE, Key::Escape)) {
        *drag = None;
        ui.ctx().stop_dragging();
        return moved;
    }
    for handle in handles {
        for place in geometry {
            pointer(ui, drag, handle, place, ends, &mut moved);
        }
        keys(ui, handle, ends, &mut moved);
    }
    moved
}

fn pointer(
    ui: &Ui,
    drag: &mut Option<Drag>,
    handle: &Handle,
    place: &Geometry,
    ends: &[f64],
    moved: &mut Vec<Moved>,
) {
    let Some(response) = ui.ctx().read_response(pointer_id(handle.kind, place.column)) else {
        return;
    };
    let free = ui.input(|i| i.modifiers.alt);
    if response.drag_started() {
        let px = ui.input(|i| i.pointer.press_origin()).or(response.interact_pointer_pos());
        if let Some(px) = px {
            *drag = Some(Drag::take(handle, place.column, &place.scale, px.x));
        }
    }
    let Some(held) = drag.as_mut() else {
        return;
    };
    if held.kind != handle.kind || held.column != place.column {
        return;
    }
    if let Some(pos) = response.interact_pointer_pos()
        && (response.dragged() || response.drag_stopped())
    {
        held.to(&place.scale, pos.x, ends, free);
    }
    if response.drag_stopped() {
        if held.moved {
            moved.push(Moved::To(held.kind, held.t_s));
        }
        *drag = None;
    }
}

fn keys(ui: &Ui, handle: &Handle, ends: &[f64], moved: &mut Vec<Moved>) {
    if ui.ctx().memory(|m| m.focused()) != Some(slider_id(handle.kind)) {
        return;
    }
    let none = egui::Modifiers::NONE;
    let from = handle.t_s;
    let to = ui.input_mut(|i| {
        let shift = egui::Modifiers::SHIFT;
        if i.consume_key(shift, Key::ArrowLeft) {
            Some(from - 10.0)
        } else if i.consume_key(shift, Key::ArrowRight) {
            Some(from + 10.0)
        } else if i.consume_key(none, Key::ArrowLeft) {
            Some(step(from, ends, -1))
        } else if i.consume_key(none, Key::ArrowRight) {
            Some(step(from, ends, 1))
        } else {
            None
        }
    });
    // Focus alone moves nothing, even where a proposal stands between two breaths.
    if let Some(to) = to.map(|to| place(to, ends, false, handle.range_s))
        && (to - from).abs() > 1e-9
    {
        moved.push(Moved::To(handle.kind, to));
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use analysis::decisions::Phase;

    const ENDS: [f64; 6] = [0.0, 3.0, 6.0, 9.0, 12.0, 15.0];

    #[test]
    fn it_snaps_to_breaths_and_alt_frees_it() {
        assert_eq!(place(7.0, &ENDS, false, (0.0, 15.0)), 6.0);
        assert_eq!(place(7.0, &ENDS, true, (0.0, 15.0)), 7.0);
        // Beyond its range it stops at the last breath inside.
        assert_eq!(place(40.0, &ENDS, false, (0.0, 13.0)), 12.0);
        assert_eq!(place(40.0, &ENDS, true, (0.0, 13.0)), 13.0);
    }

    #[test]
    fn a_step_is_one_breath() {
        assert_eq!(step(6.0, &ENDS, 1), 9.0);
        assert_eq!(step(6.0, &ENDS, -1), 3.0);
        assert_eq!(step(7.0, &ENDS, 1), 9.0);
        assert_eq!(step(7.0, &ENDS, -1), 6.0);
        assert_eq!(step(15.0, &ENDS, 1), 15.0);
    }

    #[test]
    fn a_drag_keeps_the_distance_of_the_pointer() {
        let scale = Scale { px: (0.0, 150.0), value: (0.0, 15.0) };
        let handle = Handle {
            kind: HandleKind::Boundary(Phase::Ramp),
            t_s: 6.0,
            proposed: true,
            range_s: (1.0, 14.0),
        };
        let mut drag = Drag::take(&handle, 0, &scale, 64.0);
        drag.to(&scale, 65.0, &ENDS, false);
        assert!(!drag.moved);
        drag.to(&scale, 94.0, &ENDS, false);
        assert_eq!((drag.t_s, drag.moved, drag.was_s), (9.0, true, 6.0));
    }
}
