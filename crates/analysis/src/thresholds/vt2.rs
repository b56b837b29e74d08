//! VT2 (respiratory compensation point): the time at which V̇E bends up on V̇CO₂ and PETCO₂ begins
//! to fall, found together. Acceptance rules tuned on simulated tests of seeds below 10,000;
//! `assets/references/coverage.md` reports on others.

use super::guards::Checks;
use super::{Proposal, Threshold};
use crate::hinge::{self, Points, Profile};
use crate::note::Note;
use crate::quantity::Quantity;
use crate::ramp_series::{self, RampSeries};
use crate::smooth;
use crate::stage::Stage;

/// Candidates begin at this share of the increments and end this long before load end, s.
const FIRST_SHARE: f64 = 0.50;
const LAST_S: f64 = 30.0;
/// Least evidence of the V̇E bend, the PETCO₂ bend and of both.
const T_VE: f64 = 5.0;
const T_PETCO2: f64 = 6.0;
const T_SUM: f64 = 22.0;
/// Evidence below which VT2 counts as not seen.
const T_NOT_SEEN: f64 = 4.0;
/// Admissible relative rise of the V̇E–V̇CO₂ slope.
const RISE: (f64, f64) = (0.18, 4.0);
/// PETCO₂ afterwards falls at least this fast, and this much faster than before, mmHg/min.
const FALL: f64 = 0.4;
const FASTER: f64 = 0.5;
/// PETCO₂ before rises no faster than this, mmHg/min: after hyperventilation the CO₂ stores fill, and
/// the end of filling looks like the beginning of a fall.
const REFILL: f64 = 0.75;
/// Spread of the evidence when candidate times are averaged.
const TEMPER: f64 = 6.0;
/// Candidates at each end at which a maximum is no maximum.
const EDGE: usize = 3;
/// Drop of the evidence that bounds the 90 % interval, and its least arm, s.
const Q: f64 = 14.0;
const LEAST_ARM_S: f64 = 30.0;

/// Proposes VT2 and fills its evidence over time.
pub(super) fn propose(
    stage: &Stage<'_>,
    checks: &Checks,
    evidence: &mut Vec<(f64, f64, f64)>,
) -> Proposal {
    let needed = [Quantity::Vo2, Quantity::Vco2, Quantity::Ve, Quantity::Petco2];
    if let Some(reason) = stage.missing(&needed) {
        return Proposal::Absent(reason);
    }
    let Some(series) = &stage.ramp_series else { return Proposal::Absent(stage.no_ramp()) };
    let (from, to) = series.ramp;
    let times = hinge::candidate_times(from + FIRST_SHARE * (to - from), to - LAST_S);
    if series.len() < 30 || to - from < 240.0 {
        return Proposal::Indeterminate(Note::new("ramp-too-short"));
    }
    let Some((ve, petco2)) = profiles(series, &times) else {
        return Proposal::Indeterminate(Note::new("too-few-breaths"));
    };
    let sum: Vec<f64> = ve.t.iter().zip(&petco2.t).map(|(a, b)| a + b).collect();
    evidence.extend((0..times.len()).map(|i| (times[i], ve.t[i], petco2.t[i])));
    let best = (0..sum.len()).max_by(|a, b| sum[*a].total_cmp(&sum[*b])).unwrap_or(0);
    if let Some(reason) = checks.failed() {
        return Proposal::Indeterminate(reason);
    }
    if let Some(reason) = refused(&ve, &petco2, best) {
        return if sum[best] < T_NOT_SEEN {
            Proposal::NotReached(Note::new("vt2-not-seen"))
        } else {
            Proposal::Indeterminate(reason)
        };
    }
    threshold(series, &times, &sum, best).map_or_else(
        || Proposal::Indeterminate(Note::new("too-few-breaths")),
        |mut found| {
            found.doubts.extend(checks.unchecked());
            Proposal::Proposed(found)
        },
    )
}

/// Hinge of V̇E* on V̇CO₂^ and of −PETCO₂* on time, at common times.
fn profiles(series: &RampSeries, times: &[f64]) -> Option<(Profile, Profile)> {
    let (vco2, ve, petco2) = (series.vco2.as_ref()?, series.ve.as_ref()?, series.petco2.as_ref()?);
    let top = ramp_series::running_max(&vco2.hat);
    let knots: Vec<f64> = times.iter().filter_map(|t| series.at(&top, *t)).collect();
    let mean = crate::regression::mean(&vco2.hat);
    let w: Vec<f64> = vco2.hat.iter().map(|x| (mean / x) * (mean / x)).collect();
    let y = smooth::cleaned(ve, vco2);
    let on_vco2 = Points { t_s: &series.t_s, x: &vco2.hat, y: &y, w: &w };
    let ve_profile = hinge::profile(&on_vco2, &knots, series.ramp.0, |f| f.change > 0.0);

    let hat = smooth::local_line(&series.t_s, petco2, smooth::HALF_S);
    let mut falling = smooth::cleaned_tension(petco2, &hat, &ve.relative);
    falling.iter_mut().for_each(|p| *p = -*p);
    let on_time = Points { t_s: &series.t_s, x: &series.t_s, y: &falling, w: &[] };
    let admissible = |f: &hinge::Fit| f.change > 0.0 && f.after() > 0.0;
    let petco2_profile = hinge::profile(&on_time, times, series.ramp.0, admissible);
    (ve_profile.t.len() == times.len()).then_some((ve_profile, petco2_profile))
}

/// Which acceptance rule fails at the best time.
fn refused(ve: &Profile, petco2: &Profile, best: usize) -> Option<Note> {
    let (v, p) = (&ve.fits[best], &petco2.fits[best]);
    let rise = v.change / v.before;
    // Slopes of PETCO₂ itself, mmHg/min.
    let (before, after) = (-60.0 * p.before, -60.0 * p.after());
    let code = if ve.t[best] <= T_VE {
        "vt2-ventilation-does-not-bend"
    } else if petco2.t[best] <= T_PETCO2 {
        "vt2-petco2-does-not-bend"
    } else if ve.t[best] + petco2.t[best] <= T_SUM {
        "vt2-evidence-weak"
    } else if !(RISE.0..=RISE.1).contains(&rise) || v.before <= 0.0 {
        "vt2-slope-rise-out-of-range"
    } else if after >= -FALL || after > before - FASTER {
        "vt2-petco2-does-not-fall"
    } else if before >= REFILL {
        "vt2-petco2-refills"
    } else if best < EDGE || best + EDGE >= ve.t.len() {
        "threshold-at-edge"
    } else {
        return None;
    };
    Some(Note::new(code))
}

/// Mean of the candidate times, each weighted by its evidence (steadier than the best one alone).
fn mean_time(times: &[f64], sum: &[f64], best: usize) -> f64 {
    let (mut weighted, mut total) = (0.0, 0.0);
    for (t, evidence) in times.iter().zip(sum) {
        let weight = libm::exp((evidence - sum[best]) / TEMPER);
        weighted += weight * t;
        total += weight;
    }
    weighted / total
}

/// Value and interval: times whose evidence is within Q of the best, each arm at least 30 s, and
/// the noise of V̇O₂^ at that time.
fn threshold(series: &RampSeries, times: &[f64], sum: &[f64], best: usize) -> Option<Threshold> {
    let t_s = mean_time(times, sum, best);
    let vo2 = series.at(&series.vo2.as_ref()?.hat, t_s)?;
    let rise = series.vo2_rise()?.max(0.0);
    let noise = 1.645 * series.vo2_error(t_s, vo2)?;
    let near = |i: &usize| sum[best] - sum[*i] <= Q;
    let first = (0..times.len()).find(near).unwrap_or(best);
    let last = (0..times.len()).rfind(near).unwrap_or(best);
    let arm = |s: f64| {
        let along = rise * s.max(LEAST_ARM_S);
        (along * along + noise * noise).sqrt()
    };
    let mut doubts = Vec::new();
    if first == 0 || last + 1 == times.len() {
        doubts.push(Note::new("interval-at-limit"));
    }
    let (low, high) = (vo2 - arm(t_s - times[first]), vo2 + arm(times[last] - t_s));
    Some(Threshold { t_s, vo2, low, high, doubts })
}
