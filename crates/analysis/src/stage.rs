//! What the steps of the pipeline share: the inputs, and the results as far as they are known.

use crate::averaging::Means;
use crate::breaths::Breaths;
use crate::decisions::{Decisions, Phase};
use crate::facts::Facts;
use crate::note::Note;
use crate::quantity::Quantity;
use crate::ramp_series::RampSeries;
use crate::recording::{Recording, RowKind};
use crate::results::{At, LoadShape, Outcome, Results};
use crate::settings::Settings;

/// One derivation under way.
pub(crate) struct Stage<'a> {
    pub recording: &'a Recording,
    pub facts: &'a Facts,
    pub decisions: &'a Decisions,
    pub settings: &'a Settings,
    /// Breaths used for numbers: left-out ones removed, errant ones merged.
    pub breaths: Breaths,
    /// Means of these breaths over any window.
    pub means: Means,
    /// Series of the increments for every fit; `None` without increments.
    pub ramp_series: Option<RampSeries>,
    /// Whether breathing oscillates.
    pub oscillating: bool,
    /// What is known so far.
    pub results: Results,
}

impl Stage<'_> {
    /// Adds an outcome.
    pub fn push(&mut self, mut outcome: Outcome) {
        debug_assert!(outcome.value.is_none() == outcome.reason.is_some(), "{}", outcome.id);
        let measured = outcome.number().is_some()
            && !["predicted-", "fick-"].iter().any(|p| outcome.id.starts_with(p));
        let code = "no-published-repeatability";
        if measured && outcome.repeat.is_none() && outcome.doubts.iter().all(|d| d.code != code) {
            outcome.doubts.push(Note::new(code));
        }
        self.results.outcomes.push(outcome);
    }

    /// Mean of `quantity` over `window` (s, the file's own time), duration-weighted, ratios mean
    /// over mean; `None` where less than half of the window is covered.
    pub fn window_mean(&self, quantity: Quantity, window: (f64, f64)) -> Option<f64> {
        if quantity == Quantity::WorkRate {
            return self.mean_load(window);
        }
        self.means.over(quantity, window)
    }

    /// Number of breaths that reach into `window`.
    pub fn breaths_in(&self, window: (f64, f64)) -> usize {
        self.means.breaths_in(window)
    }

    /// Mean work rate over `window`, W.
    fn mean_load(&self, window: (f64, f64)) -> Option<f64> {
        let load = &self.recording.load;
        let mut held = load.at(window.0)?;
        let (mut t, mut work) = (window.0, 0.0);
        let first = load.t_s.partition_point(|s| *s <= window.0);
        for (s, w) in load.t_s[first..].iter().zip(&load.value[first..]) {
            if *s >= window.1 {
                break;
            }
            work += held * (s - t);
            (t, held) = (*s, *w);
        }
        work += held * (window.1 - t);
        Some(work / (window.1 - window.0)).filter(|w| w.is_finite())
    }

    /// Rise of the load over the increments, W/min: as measured, else as stated.
    pub fn ramp_rate(&self) -> Option<f64> {
        match self.results.phases.load_shape {
            Some(LoadShape::Ramp(rate)) => Some(rate),
            Some(LoadShape::Steps { step_w, length_s }) => Some(60.0 * step_w / length_s),
            Some(LoadShape::Unknown) => self.facts.test.protocol.and_then(|p| p.w_per_min),
            _ => None,
        }
    }

    /// The window of peak V̇O₂, s; without V̇O₂ the last 30 s of loaded exercise.
    pub fn peak_window(&self) -> Option<(f64, f64)> {
        let at_peak = self.results.primary("vo2-peak", At::Peak).and_then(|o| o.basis.window_s);
        at_peak.or_else(|| {
            let (from, to) = self.results.phases.ramp()?;
            Some(((to - self.settings.peak_window_s).max(from), to))
        })
    }

    /// Why something needs the increments and there are none.
    pub fn no_ramp(&self) -> Note {
        match self.results.phases.load_shape {
            Some(LoadShape::Constant | LoadShape::Other) => Note::new("not-incremental"),
            _ => Note::new("no-ramp"),
        }
    }

    /// The last `longest_s` of `phase`, if that phase exists.
    pub fn end_of(&self, phase: Phase, longest_s: f64) -> Option<(f64, f64)> {
        self.results.phases.window(phase).map(|(from, to)| ((to - longest_s).max(from), to))
    }

    /// The first of `needed` that the recording lacks, as a reason.
    pub fn missing(&self, needed: &[Quantity]) -> Option<Note> {
        needed.iter().find(|q| !self.recording.has(**q)).map(|q| Note::missing_channel(*q))
    }

    /// Whether intervals of *this recording* stand: breaths, and no oscillation.
    pub fn intervals_hold(&self) -> bool {
        !self.oscillating && !matches!(self.recording.row_kind, RowKind::Averaged { .. })
    }

    /// Says on `outcome` why its interval is missing or weaker.
    pub fn doubt_interval(&self, mut outcome: Outcome) -> Outcome {
        if outcome.value.is_none() {
            return outcome;
        }
        if self.oscillating {
            outcome.doubts.push(Note::new("no-interval-oscillation"));
        } else if matches!(self.recording.row_kind, RowKind::Averaged { .. }) {
            outcome.doubts.push(Note::new("no-interval-averaged-table"));
        } else if self.ramp_series.as_ref().is_some_and(|s| s.pre_smoothed) {
            outcome.doubts.push(Note::new("pre-smoothed-export"));
        }
        outcome
    }

    /// Middle times and values of `quantity` of the whole breaths inside `window`.
    pub fn points(&self, quantity: Quantity, window: (f64, f64)) -> (Vec<f64>, Vec<f64>) {
        let (end, d) = (self.breaths.end_s(), self.breaths.duration_s());
        let from = end.partition_point(|e| *e <= window.0);
        let to = end.partition_point(|e| *e <= window.1).max(from);
        (from..to)
            .filter(|i| end[*i] - d[*i] >= window.0)
            .filter_map(|i| Some((self.breaths.mid_s(i), self.breaths.value(quantity, i)?)))
            .unzip()
    }
}
