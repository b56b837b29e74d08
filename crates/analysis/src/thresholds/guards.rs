//! What stands beside the proposals: conditions that must hold before a threshold is proposed, and
//! the classical readings (equivalents, end-tidals, slope-1 line) for the eye.

use crate::decisions::Phase;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::robust;
use crate::stage::Stage;
use crate::unit::Unit;

/// Unloaded RER at or above which CO₂ stores are being emptied by hyperventilation.
const RER_MAX: f64 = 1.0;
/// Unloaded PETCO₂ at or below which they are empty already, mmHg.
const PETCO2_MIN: f64 = 30.0;

/// Conditions before exercise that make a false threshold likely.
pub(super) struct Checks {
    rer: Option<f64>,
    petco2: Option<f64>,
    oscillating: bool,
}

impl Checks {
    pub fn new(stage: &Stage<'_>) -> Self {
        let window = [Phase::WarmUp, Phase::Rest].into_iter().find_map(|p| stage.end_of(p, 60.0));
        let mean = |q| window.and_then(|w| stage.window_mean(q, w));
        Self {
            rer: mean(Quantity::Rer),
            petco2: mean(Quantity::Petco2),
            oscillating: stage.oscillating,
        }
    }

    /// The condition that fails, if one does.
    pub fn failed(&self) -> Option<Note> {
        if self.oscillating {
            return Some(Note::new("guard-oscillation"));
        }
        if let Some(rer) = self.rer.filter(|r| *r >= RER_MAX) {
            return Some(Note::new("guard-rer").with("rer", Arg::Number(rer, Unit::One)));
        }
        let low = self.petco2.filter(|p| *p <= PETCO2_MIN)?;
        Some(Note::new("guard-petco2").with("petco2", Arg::Number(low, Unit::MmHg)))
    }

    /// Conditions that could not be looked at.
    pub fn unchecked(&self) -> Vec<Note> {
        let open = |known: Option<f64>, q| {
            known
                .is_none()
                .then(|| Note::new("guard-not-checked").with("channel", Arg::Quantity(q)))
        };
        open(self.rer, Quantity::Rer)
            .into_iter()
            .chain(open(self.petco2, Quantity::Petco2))
            .collect()
    }
}

/// Classical readings of the first threshold, for display only.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Guards {
    /// Lowest V̇E/V̇O₂ between the first minute of the increments and VT2, s.
    pub eq_o2_nadir_s: Option<f64>,
    /// Lowest V̇E/V̇CO₂, s.
    pub eq_co2_nadir_s: Option<f64>,
    /// Lowest PETO₂, s.
    pub peto2_nadir_s: Option<f64>,
    /// Highest PETCO₂, s.
    pub petco2_top_s: Option<f64>,
    /// V̇CO₂ − V̇O₂ of the line of slope 1 through the early increments, mL/min.
    pub slope_one_intercept: Option<f64>,
    /// Time at which V̇CO₂ leaves that line upward for good, s.
    pub slope_one_departure_s: Option<f64>,
}

/// Derives the readings up to VT2 or load end.
pub(super) fn derive(stage: &Stage<'_>, vt2_s: Option<f64>) -> Guards {
    let Some(series) = &stage.ramp_series else { return Guards::default() };
    let upper = vt2_s.unwrap_or(series.ramp.1);
    let n = series.until(upper);
    let t = &series.t_s[..n];
    let ratio = |above: &Option<crate::smooth::Smoothed>,
                 below: &Option<crate::smooth::Smoothed>| {
        let (a, b) = (above.as_ref()?, below.as_ref()?);
        lowest(t, a.hat.iter().zip(&b.hat).map(|(a, b)| a / b))
    };
    let mut guards = Guards {
        eq_o2_nadir_s: ratio(&series.ve, &series.vo2),
        eq_co2_nadir_s: ratio(&series.ve, &series.vco2),
        peto2_nadir_s: tension(stage, Quantity::Peto2, series.ramp.0, upper, 1.0),
        petco2_top_s: tension(stage, Quantity::Petco2, series.ramp.0, upper, -1.0),
        ..Guards::default()
    };
    if let (Some(vo2), Some(vco2)) = (&series.vo2, &series.vco2) {
        let excess: Vec<f64> = vco2.hat[..n].iter().zip(&vo2.hat).map(|(c, o)| c - o).collect();
        let early = series.until(series.ramp.0 + 0.4 * (series.ramp.1 - series.ramp.0)).min(n);
        slope_one(t, &excess, early, &mut guards);
    }
    guards
}

/// The line of slope 1 (Sue et al., Chest 1988): through the median excess of the early part; the
/// departure is the last crossing before the excess stays above it by two robust SD for ≥ 60 s.
fn slope_one(t: &[f64], excess: &[f64], early: usize, guards: &mut Guards) {
    if early < 8 || excess.len() < 16 {
        return;
    }
    let mut head = excess[..early].to_vec();
    let level = robust::median(&mut head);
    let mut around: Vec<f64> = excess[..early].iter().map(|z| z - level).collect();
    let limit = level + 2.0 * robust::scale(&mut around);
    guards.slope_one_intercept = Some(level);
    let stays = excess.iter().rposition(|z| *z <= limit).map_or(0, |i| i + 1);
    if stays < t.len() && t[t.len() - 1] - t[stays] >= 60.0 {
        let crossing = excess[..stays].iter().rposition(|z| *z <= level).unwrap_or(0);
        guards.slope_one_departure_s = Some(t[crossing]);
    }
}

fn lowest(t: &[f64], x: impl Iterator<Item = f64>) -> Option<f64> {
    t.iter().zip(x).min_by(|a, b| a.1.total_cmp(&b.1)).map(|(t, _)| *t)
}

/// Middle of the 30-s window with the lowest (`sign` 1) or highest (−1) mean tension.
fn tension(stage: &Stage<'_>, q: Quantity, ramp_s: f64, upper: f64, sign: f64) -> Option<f64> {
    let within = (ramp_s + 60.0, upper);
    let found = if sign > 0.0 {
        stage.means.lowest(q, 30.0, within)
    } else {
        stage.means.highest(q, 30.0, within)
    };
    found.map(|(_, (from, to))| 0.5 * (from + to))
}
