//! Averages over time: every breath counts with its duration, ratios are mean over mean on the
//! same breaths, gaps stay gaps.
//!
//! A breath is a step: its rate holds over its duration. A mean over a window is the integral of
//! that staircase over the window divided by the covered time, so every mean costs two look-ups.

use std::collections::BTreeMap;

use crate::breaths::{Breaths, Column};
use crate::quantity::Quantity;
use crate::recording::Gap;
use crate::results::Series;
use crate::settings::Averaging;

/// Share of a window that must be covered by breaths for a mean to stand (common practice).
const COVERED_SHARE: f64 = 0.5;

/// Ratios, formed as mean over mean: (ratio, numerator, denominator, unit factor).
pub(crate) const RATIOS: [(Quantity, Quantity, Quantity, f64); 4] = [
    (Quantity::O2Pulse, Quantity::Vo2, Quantity::Hr, 1.0),
    (Quantity::Rer, Quantity::Vco2, Quantity::Vo2, 1.0),
    (Quantity::EqO2, Quantity::Ve, Quantity::Vo2, 1000.0),
    (Quantity::EqCo2, Quantity::Ve, Quantity::Vco2, 1000.0),
];

/// Start and end of each breath as a step, s, without overlap.
#[derive(Clone, Debug, Default)]
pub(crate) struct Timeline {
    start: Vec<f64>,
    end: Vec<f64>,
}

/// Where an instant falls among the breaths.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Place {
    /// The breath that holds the instant, or the next one.
    breath: usize,
    /// Time of that breath that has passed, s.
    inside_s: f64,
}

impl Timeline {
    fn new(breaths: &Breaths, gaps: &[Gap]) -> Self {
        let end = breaths.end_s().to_vec();
        let mut start: Vec<f64> =
            end.iter().zip(breaths.duration_s()).map(|(e, d)| e - d).collect();
        for i in 1..end.len() {
            start[i] = start[i].max(end[i - 1]);
        }
        for gap in gaps {
            let i = end.partition_point(|e| *e <= gap.from_s);
            if let Some(s) = start.get_mut(i).filter(|s| **s < gap.to_s) {
                *s = gap.to_s.min(end[i]);
            }
        }
        Self { start, end }
    }

    fn place(&self, t_s: f64) -> Place {
        self.place_from(self.end.partition_point(|e| *e <= t_s), t_s)
    }

    /// The same for rising instants, going on from where the last one fell.
    fn place_after(&self, last: &mut usize, t_s: f64) -> Place {
        while self.end.get(*last).is_some_and(|e| *e <= t_s) {
            *last += 1;
        }
        self.place_from(*last, t_s)
    }

    fn place_from(&self, breath: usize, t_s: f64) -> Place {
        let inside_s = self.start.get(breath).map_or(0.0, |s| (t_s - s).max(0.0));
        Place { breath, inside_s }
    }
}

/// Integral of a staircase.
#[derive(Clone, Debug, Default)]
struct Integral {
    /// Up to the start of each breath, and over all.
    before: Vec<f64>,
    /// Rate in each breath, and 0 after the last.
    rate: Vec<f64>,
}

impl Integral {
    fn new(timeline: &Timeline, rate: impl Iterator<Item = f64>) -> Self {
        let n = timeline.end.len();
        let mut before = Vec::with_capacity(n + 1);
        let mut rates = Vec::with_capacity(n + 1);
        let mut sum = 0.0;
        for ((r, s), e) in rate.zip(&timeline.start).zip(&timeline.end) {
            before.push(sum);
            rates.push(r);
            sum += r * (e - s);
        }
        before.push(sum);
        rates.push(0.0);
        Self { before, rate: rates }
    }

    fn at(&self, place: Place) -> f64 {
        self.before[place.breath] + self.rate[place.breath] * place.inside_s
    }

    fn between(&self, from: Place, to: Place) -> f64 {
        self.at(to) - self.at(from)
    }
}

/// What is needed for the mean of one quantity over any window.
#[derive(Clone, Debug)]
struct MeanOf {
    numerator: Integral,
    /// `None`: the covered time itself.
    denominator: Option<Integral>,
    covered: Integral,
}

impl MeanOf {
    fn mean(&self, from: Place, to: Place, needed_s: f64) -> Option<f64> {
        let covered = self.covered.between(from, to);
        let below = self.denominator.as_ref().map_or(covered, |d| d.between(from, to));
        if covered < needed_s || covered <= 0.0 || below <= 0.0 {
            return None;
        }
        Some(self.numerator.between(from, to) / below).filter(|x| x.is_finite())
    }
}

/// Means of every quantity of a breath table over any window.
#[derive(Clone, Debug, Default)]
pub(crate) struct Means {
    timeline: Timeline,
    gaps: Vec<Gap>,
    of: BTreeMap<Quantity, MeanOf>,
}

impl Means {
    /// Prepares the means of all columns and of the ratios that can be formed.
    pub fn new(breaths: &Breaths, gaps: &[Gap]) -> Self {
        let timeline = Timeline::new(breaths, gaps);
        let mut of = BTreeMap::new();
        for (quantity, column) in breaths.columns() {
            if !breaths.has(quantity) {
                continue;
            }
            let mean = if quantity == Quantity::Vt {
                per_breath(&timeline, breaths, column)
            } else {
                per_time(&timeline, column)
            };
            of.insert(quantity, mean);
        }
        for (ratio, above, below, factor) in RATIOS {
            if let (Some(a), Some(b)) = (breaths.column(above), breaths.column(below))
                && breaths.has(above)
                && breaths.has(below)
            {
                of.insert(ratio, mean_over_mean(&timeline, a, b, factor));
            }
        }
        Self { timeline, gaps: gaps.to_vec(), of }
    }

    /// Whether means of `quantity` exist at all.
    pub fn has(&self, quantity: Quantity) -> bool {
        self.of.contains_key(&quantity)
    }

    /// Mean of `quantity` over `window` (s), where at least half of it is covered.
    pub fn over(&self, quantity: Quantity, window: (f64, f64)) -> Option<f64> {
        let mean = self.of.get(&quantity)?;
        let (from, to) = (self.timeline.place(window.0), self.timeline.place(window.1));
        mean.mean(from, to, COVERED_SHARE * (window.1 - window.0))
    }

    /// Means over `width_s` (cut at the ends of `within`) about each second of `within`.
    pub fn each_second(
        &self,
        quantity: Quantity,
        width_s: f64,
        within: (f64, f64),
    ) -> Vec<Option<f64>> {
        let Some(mean) = self.of.get(&quantity) else { return Vec::new() };
        let mut ends = (0, 0);
        whole_steps(within.0, within.1, 1.0)
            .map(|t| {
                let from = (t - width_s / 2.0).max(within.0);
                let to = (t + width_s / 2.0).min(within.1);
                let a = self.timeline.place_after(&mut ends.0, from);
                let b = self.timeline.place_after(&mut ends.1, to);
                mean.mean(a, b, COVERED_SHARE * (to - from))
            })
            .collect()
    }

    /// Number of breaths that reach into `window`.
    pub fn breaths_in(&self, window: (f64, f64)) -> usize {
        let first = self.timeline.end.partition_point(|e| *e <= window.0);
        let last = self.timeline.start.partition_point(|s| *s < window.1);
        last.saturating_sub(first)
    }

    /// Highest mean of `quantity` over `width_s` on a 1-s grid with the window inside `within`,
    /// and that window. At least 80 % of a window must be covered.
    pub fn highest(
        &self,
        quantity: Quantity,
        width_s: f64,
        within: (f64, f64),
    ) -> Option<(f64, (f64, f64))> {
        self.extreme(quantity, width_s, within, 1.0)
    }

    /// The same for the lowest mean.
    pub fn lowest(
        &self,
        quantity: Quantity,
        width_s: f64,
        within: (f64, f64),
    ) -> Option<(f64, (f64, f64))> {
        self.extreme(quantity, width_s, within, -1.0)
    }

    fn extreme(
        &self,
        quantity: Quantity,
        width_s: f64,
        within: (f64, f64),
        sign: f64,
    ) -> Option<(f64, (f64, f64))> {
        let mean = self.of.get(&quantity)?;
        let steps = within.1 - width_s - within.0;
        if !(steps >= 0.0 && steps.is_finite()) {
            return None;
        }
        let mut best: Option<(f64, (f64, f64))> = None;
        let mut ends = (0, 0);
        // The last window ends exactly at the end of `within`, wherever the grid falls.
        for k in 0..=(steps as usize + 1) {
            let from = within.0 + (k as f64).min(steps);
            let window = (from, from + width_s);
            let a = self.timeline.place_after(&mut ends.0, window.0);
            let b = self.timeline.place_after(&mut ends.1, window.1);
            if let Some(x) = mean.mean(a, b, 0.8 * width_s)
                && best.is_none_or(|(y, _)| sign * x > sign * y)
            {
                best = Some((x, window));
            }
        }
        best
    }

    /// Averaged columns of all quantities. `anchor_s` is the start of the ramp, to which bins are
    /// tied.
    pub fn series(&self, averaging: Averaging, anchor_s: f64) -> Series {
        let windows = self.windows(averaging, anchor_s);
        let mut ends = (0, 0);
        let places: Vec<(Place, Place, f64)> = windows
            .iter()
            .map(|(_, from, to)| {
                let needed = COVERED_SHARE * (to - from);
                let a = self.timeline.place_after(&mut ends.0, *from);
                (a, self.timeline.place_after(&mut ends.1, *to), needed)
            })
            .collect();
        let in_gap: Vec<bool> = windows
            .iter()
            .map(|(t, ..)| self.gaps.iter().any(|g| g.from_s < *t && *t < g.to_s))
            .collect();
        let column = |mean: &MeanOf| -> Column {
            places
                .iter()
                .zip(&in_gap)
                .map(|((a, b, need), gap)| if *gap { None } else { mean.mean(*a, *b, *need) })
                .collect()
        };
        Series {
            t_s: windows.iter().map(|(t, ..)| *t).collect(),
            columns: self.of.iter().map(|(q, mean)| (*q, column(mean))).collect(),
        }
    }

    /// Grid point, start and end of each averaging window, s.
    fn windows(&self, averaging: Averaging, anchor_s: f64) -> Vec<(f64, f64, f64)> {
        let (Some(first), Some(last)) = (self.timeline.start.first(), self.timeline.end.last())
        else {
            return Vec::new();
        };
        match averaging {
            Averaging::RollingSeconds(width) => {
                let half = f64::from(width.max(1)) / 2.0;
                whole_steps(first.ceil(), *last, 1.0).map(|t| (t, t - half, t + half)).collect()
            }
            Averaging::RollingBreaths(count) => {
                let (n, half) = (self.timeline.end.len(), (count.max(1) as usize - 1) / 2);
                let (start, end) = (&self.timeline.start, &self.timeline.end);
                (0..n)
                    .map(|i| {
                        // Shrink symmetrically at the ends.
                        let h = half.min(i).min(n - 1 - i);
                        (0.5 * (start[i] + end[i]), start[i - h], end[i + h])
                    })
                    .collect()
            }
            Averaging::BinSeconds(width) => {
                let width = f64::from(width.max(1));
                let before = ((anchor_s - first) / width).ceil().max(0.0);
                whole_steps(anchor_s - before * width, *last, width)
                    .map(|t| (t + 0.5 * width, t, t + width))
                    .collect()
            }
        }
    }
}

/// `from`, `from + step`, … up to `to`; at most a million points.
fn whole_steps(from: f64, to: f64, step: f64) -> impl Iterator<Item = f64> {
    let count = ((to - from) / step).floor();
    let count = if count >= 0.0 { (count as usize).min(1_000_000) + 1 } else { 0 };
    (0..count).map(move |k| from + k as f64 * step)
}

fn per_time(timeline: &Timeline, column: &[Option<f64>]) -> MeanOf {
    MeanOf {
        numerator: Integral::new(timeline, column.iter().map(|v| v.unwrap_or(0.0))),
        denominator: None,
        covered: Integral::new(timeline, column.iter().map(|v| f64::from(v.is_some()))),
    }
}

/// A volume per breath counts once per breath, not per second, so that V̇E = VT × fR holds for
/// means as well.
fn per_breath(timeline: &Timeline, breaths: &Breaths, column: &[Option<f64>]) -> MeanOf {
    let d = breaths.duration_s();
    let mut mean = per_time(timeline, column);
    let each = column.iter().zip(d);
    mean.numerator = Integral::new(timeline, each.clone().map(|(v, d)| v.unwrap_or(0.0) / d));
    mean.denominator = Some(Integral::new(timeline, each.map(|(v, d)| f64::from(v.is_some()) / d)));
    mean
}

fn mean_over_mean(
    timeline: &Timeline,
    above: &[Option<f64>],
    below: &[Option<f64>],
    factor: f64,
) -> MeanOf {
    let both = |i: usize| above[i].zip(below[i]);
    let n = above.len();
    MeanOf {
        numerator: Integral::new(timeline, (0..n).map(|i| both(i).map_or(0.0, |b| factor * b.0))),
        denominator: Some(Integral::new(timeline, (0..n).map(|i| both(i).map_or(0.0, |b| b.1)))),
        covered: Integral::new(timeline, (0..n).map(|i| f64::from(both(i).is_some()))),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn table(durations: &[f64], columns: &[(Quantity, &[f64])]) -> Breaths {
        let mut t = 0.0;
        let end = durations.iter().map(|d| {
            t += d;
            t
        });
        Breaths::new(
            end.collect(),
            Some(durations.to_vec()),
            columns.iter().map(|(q, c)| (*q, c.iter().map(|x| Some(*x)).collect())).collect(),
        )
        .unwrap()
    }

    #[test]
    fn a_mean_weights_each_breath_by_its_duration() {
        // (1000·2 + 1600·4) / 6 = 1400; over 1 s to 4 s: (1000·1 + 1600·2) / 3 = 1400.
        let breaths = table(&[2.0, 4.0], &[(Quantity::Vo2, &[1000.0, 1600.0])]);
        let means = Means::new(&breaths, &[]);
        assert_eq!(means.over(Quantity::Vo2, (0.0, 6.0)), Some(1400.0));
        assert_eq!(means.over(Quantity::Vo2, (1.0, 4.0)), Some(1400.0));
        assert_eq!(means.over(Quantity::Vo2, (1.5, 2.5)), Some(1300.0));
        assert_eq!(means.over(Quantity::Vo2, (7.0, 9.0)), None);
    }

    #[test]
    fn a_ratio_is_mean_over_mean() {
        // V̇O₂ 1000 and 2000 mL/min, HR 100 and 150: 3000 / 250 = 12, not (10 + 13.3) / 2.
        let columns: [(Quantity, &[f64]); 2] =
            [(Quantity::Vo2, &[1000.0, 2000.0]), (Quantity::Hr, &[100.0, 150.0])];
        let means = Means::new(&table(&[3.0, 3.0], &columns), &[]);
        assert_eq!(means.over(Quantity::O2Pulse, (0.0, 6.0)), Some(12.0));
    }

    #[test]
    fn tidal_volume_counts_per_breath() {
        // Breaths of 2 s and 4 s with 1 L and 2 L: 1.5 L at 20 /min is 3 L in 6 s = 30 L/min.
        let columns: [(Quantity, &[f64]); 2] =
            [(Quantity::Vt, &[1.0, 2.0]), (Quantity::Ve, &[30.0, 30.0])];
        let means = Means::new(&table(&[2.0, 4.0], &columns), &[]);
        assert_eq!(means.over(Quantity::Vt, (0.0, 6.0)), Some(1.5));
    }

    #[test]
    fn gaps_stay_gaps() {
        let breaths = Breaths::new(
            vec![10.0, 20.0, 60.0, 70.0],
            None,
            [(Quantity::Vo2, vec![Some(1.0); 4])].into(),
        )
        .unwrap();
        let means = Means::new(&breaths, &[Gap { from_s: 20.0, to_s: 55.0 }]);
        assert_eq!(means.over(Quantity::Vo2, (22.0, 52.0)), None);
        let series = means.series(Averaging::RollingSeconds(10), 0.0);
        for (t, x) in series.t_s.iter().zip(&series.columns[&Quantity::Vo2]) {
            assert!(x.is_none() || !(20.0 < *t && *t < 55.0), "{t}");
        }
    }

    #[test]
    fn the_highest_window_lies_inside() {
        let breaths = table(&[10.0; 6], &[(Quantity::Vo2, &[1.0, 2.0, 3.0, 4.0, 9.0, 9.0])]);
        let means = Means::new(&breaths, &[]);
        let (x, window) = means.highest(Quantity::Vo2, 20.0, (0.0, 40.0)).unwrap();
        assert_eq!((x, window), (3.5, (20.0, 40.0)));
        assert_eq!(means.highest(Quantity::Vo2, 50.0, (0.0, 40.0)), None);
    }

    #[test]
    fn bins_are_tied_to_the_anchor() {
        let breaths = table(&[5.0; 8], &[(Quantity::Vo2, &[1.0; 8])]);
        let series = Means::new(&breaths, &[]).series(Averaging::BinSeconds(10), 15.0);
        assert_eq!(series.t_s, [0.0, 10.0, 20.0, 30.0, 40.0]);
    }
}
