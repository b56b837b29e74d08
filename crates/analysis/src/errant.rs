//! Errant breaths (swallow, sigh, partial leak): found by a local prediction band, then merged with
//! the next two, because the lung stores repay in them what the errant breath took or left.

use std::ops::Range;

use crate::breaths::Breaths;
use crate::quantity::Quantity;
use crate::robust;
use crate::smooth::HALF_S;

/// Neighbours used on each side at most, so that dense tables stay linear in time.
const NEIGHBOURS: usize = 40;
/// Fewest neighbours for a line.
const FEWEST: usize = 8;
/// Breaths that a run of errant ones may take in after its first.
const LONGEST_RUN: usize = 4;

/// Which breaths of `breaths` are errant, looking within each of `phases` (s) by itself.
pub(crate) fn flag(breaths: &Breaths, phases: &[(f64, f64)], k: f64) -> Vec<bool> {
    let mut errant = vec![false; breaths.len()];
    for range in phases.iter().map(|phase| rows(breaths, *phase)) {
        for quantity in [Quantity::Vo2, Quantity::Vco2] {
            if let Some(column) = breaths.column(quantity) {
                let (t, x, at) = known(breaths, column, range.clone());
                let first = outside(&t, &x, &vec![false; x.len()], k);
                let second = outside(&t, &x, &first, k);
                for (i, wild) in at.iter().zip(&second) {
                    errant[*i] |= wild;
                }
            }
        }
    }
    errant
}

/// Rows whose breath lies in `phase`.
fn rows(breaths: &Breaths, phase: (f64, f64)) -> Range<usize> {
    let from = breaths.end_s().partition_point(|e| *e <= phase.0);
    from..breaths.end_s().partition_point(|e| *e <= phase.1).max(from)
}

fn known(
    breaths: &Breaths,
    column: &[Option<f64>],
    range: Range<usize>,
) -> (Vec<f64>, Vec<f64>, Vec<usize>) {
    let (mut t, mut x, mut at) = (Vec::new(), Vec::new(), Vec::new());
    for i in range {
        if let Some(v) = column[i] {
            t.push(breaths.mid_s(i));
            x.push(v);
            at.push(i);
        }
    }
    (t, x, at)
}

/// Breaths outside k·s·√(1 + 1/n) of the line through their neighbours, `skip` left out of lines.
/// s = 1.4826 × the median absolute residual of the neighbours.
pub(crate) fn outside(t: &[f64], x: &[f64], skip: &[bool], k: f64) -> Vec<bool> {
    let n = x.len();
    let mut window = Window::default();
    // A skipped breath compares as false.
    let counted: Vec<f64> =
        x.iter().zip(skip).map(|(x, skip)| if *skip { f64::NAN } else { *x }).collect();
    (0..n)
        .map(|i| {
            window.move_to(t, x, skip, i);
            // Sums of the neighbours alone, times counted from breath i.
            let [count, su, suu, sx, sux] = window.without(t, x, skip, i);
            if (count as usize) < FEWEST {
                return false;
            }
            let slope = (sux - su * sx / count) / (suu - su * su / count);
            let here = sx / count - slope * su / count;
            let from_line = |t_j: f64, x_j: f64| (x_j - here - slope * (t_j - t[i])).abs();
            let band = k * robust::MAD_TO_SD * (1.0 + 1.0 / count).sqrt();
            // |r| > band × median ⇔ the median lies below |r| / band: counting is enough. Breath i
            // itself never counts, since band > 1.
            let limit = from_line(t[i], x[i]) / band;
            let near = t[window.from..window.to].iter().zip(&counted[window.from..window.to]);
            let below: usize =
                near.clone().map(|(t, x)| usize::from(from_line(*t, *x) < limit)).sum();
            if 2 * below != count as usize {
                return 2 * below > count as usize;
            }
            let own = counted[i];
            let mut all: Vec<f64> = near.map(|(t, x)| from_line(*t, *x)).collect();
            if own.is_finite() {
                all.swap_remove(i - window.from);
            }
            all.retain(|r| r.is_finite());
            robust::median(&mut all) < limit
        })
        .collect()
}

/// Neighbourhood of a breath with its running sums of 1, t, t², x, t·x.
#[derive(Default)]
struct Window {
    from: usize,
    to: usize,
    origin: f64,
    sums: [f64; 5],
}

impl Window {
    fn move_to(&mut self, t: &[f64], x: &[f64], skip: &[bool], i: usize) {
        if i == 0 || t[i] - self.origin > 200.0 {
            // Keeps the sums well conditioned in long records.
            self.origin = t[i];
            self.sums = [0.0; 5];
            for j in self.from..self.to {
                self.add(t, x, skip, j, 1.0);
            }
        }
        while self.to < t.len() && t[self.to] <= t[i] + HALF_S && self.to <= i + NEIGHBOURS {
            self.add(t, x, skip, self.to, 1.0);
            self.to += 1;
        }
        while t[self.from] < t[i] - HALF_S || self.from + NEIGHBOURS < i {
            self.add(t, x, skip, self.from, -1.0);
            self.from += 1;
        }
    }

    fn add(&mut self, t: &[f64], x: &[f64], skip: &[bool], j: usize, sign: f64) {
        if !skip[j] {
            let u = t[j] - self.origin;
            for (sum, term) in self.sums.iter_mut().zip([1.0, u, u * u, x[j], u * x[j]]) {
                *sum += sign * term;
            }
        }
    }

    /// The sums without breath `i`, times counted from it.
    fn without(&self, t: &[f64], x: &[f64], skip: &[bool], i: usize) -> [f64; 5] {
        let u = t[i] - self.origin;
        let own = if skip[i] { [0.0; 5] } else { [1.0, u, u * u, x[i], u * x[i]] };
        let [n, su, suu, sx, sux] = core::array::from_fn(|k| self.sums[k] - own[k]);
        [n, su - n * u, suu - 2.0 * u * su + n * u * u, sx, sux - u * sx]
    }
}

/// Groups of rows in which each errant breath is joined with the next two, never across the end
/// of a phase. Every row is in exactly one group.
pub(crate) fn groups(
    breaths: &Breaths,
    errant: &[bool],
    phases: &[(f64, f64)],
) -> Vec<Range<usize>> {
    let mut limits: Vec<usize> = phases.iter().map(|p| rows(breaths, *p).end).collect();
    limits.push(breaths.len());
    let mut groups = Vec::with_capacity(errant.len());
    let mut i = 0;
    while i < errant.len() {
        let mut last = i;
        if errant[i] {
            let limit = limits.iter().copied().filter(|l| *l > i).min().unwrap_or(errant.len());
            last = i + 2;
            let mut j = i + 1;
            while j <= last.min(limit - 1) {
                if errant[j] {
                    last = (j + 2).min(i + LONGEST_RUN);
                }
                j += 1;
            }
            last = last.min(limit - 1);
        }
        groups.push(i..last + 1);
        i = last + 1;
    }
    groups
}

#[cfg(test)]
mod tests {
    use super::*;

    fn table(vo2: &[f64]) -> Breaths {
        let end = (1..=vo2.len()).map(|k| 3.0 * k as f64).collect();
        let column = vo2.iter().map(|x| Some(*x)).collect();
        Breaths::new(end, None, [(Quantity::Vo2, column)].into()).unwrap()
    }

    #[test]
    fn a_swallow_is_flagged_and_ordinary_scatter_is_not() {
        let mut vo2: Vec<f64> = (0..100)
            .map(|k| 1000.0 + 5.0 * f64::from(k) + [40.0, -30.0, 10.0, -20.0][k as usize % 4])
            .collect();
        vo2[50] = 300.0;
        let breaths = table(&vo2);
        let errant = flag(&breaths, &[(0.0, 300.0)], 4.0);
        let found: Vec<usize> = (0..100).filter(|i| errant[*i]).collect();
        assert_eq!(found, [50]);
        let groups = groups(&breaths, &errant, &[(0.0, 300.0)]);
        assert!(groups.contains(&(50..53)));
        assert_eq!(groups.iter().map(|g| g.len()).sum::<usize>(), 100);
    }

    #[test]
    fn a_merge_stops_at_a_load_change_and_takes_in_a_following_errant_breath() {
        let breaths = table(&[1.0; 20]);
        let mut errant = vec![false; 20];
        errant[9] = true;
        errant[14] = true;
        errant[15] = true;
        let groups = groups(&breaths, &errant, &[(0.0, 33.0), (33.0, 60.0)]);
        // Row 10 ends at 33 s, where the phase ends.
        assert!(groups.contains(&(9..11)));
        assert!(groups.contains(&(14..18)));
    }
}
