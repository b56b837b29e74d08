//! Outcomes of the thresholds: the reader's mark is primary where set, the engine's proposal stands
//! beside it; classical readings are alternatives.

use super::{Proposal, Threshold};
use crate::decisions::Mark;
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::repeatability::{self, CV_VT1_READER, CV_VT1_VO2, Z90};
use crate::response_time;
use crate::results::{At, Interval, Kind, Outcome, Text};
use crate::stage::Stage;
use crate::unit::Unit;

/// Window whose middle is the threshold, s.
const WINDOW_S: f64 = 30.0;
/// Method of a reader's mark.
const READER: &str = "reader-mark";

struct Ids {
    mark: Mark,
    at: At,
    vo2: &'static str,
    per_kg: &'static str,
    percent: &'static str,
    time: &'static str,
    work: &'static str,
    state: &'static str,
    method: &'static str,
}

const VT1: Ids = Ids {
    mark: Mark::Vt1,
    at: At::Vt1,
    vo2: "vt1-vo2",
    per_kg: "vt1-vo2-per-kg",
    percent: "vt1-vo2-of-peak",
    time: "vt1-time",
    work: "vt1-work-rate",
    state: "vt1-state",
    method: "v-slope-hinge",
};

const VT2: Ids = Ids {
    mark: Mark::Vt2,
    at: At::Vt2,
    vo2: "vt2-vo2",
    per_kg: "vt2-vo2-per-kg",
    percent: "vt2-vo2-of-peak",
    time: "vt2-time",
    work: "vt2-work-rate",
    state: "vt2-state",
    method: "ve-petco2-hinge",
};

/// Pushes the outcomes of both thresholds.
pub(super) fn derive(stage: &mut Stage<'_>) {
    response_time::derive(stage);
    for ids in [VT1, VT2] {
        one(stage, &ids);
    }
    classical(stage);
}

fn one(stage: &mut Stage<'_>, ids: &Ids) {
    let detail = &stage.results.thresholds;
    let proposal = if ids.mark == Mark::Vt1 { detail.vt1.clone() } else { detail.vt2.clone() };
    let mark = stage.decisions.mark(ids.mark).map(|t| marked(stage, t));
    let from_engine = vo2_of_proposal(stage, ids, &proposal);
    let time_of_engine =
        time(ids, ids.method.into(), proposal.threshold(), from_engine.reason.as_ref());
    let used = match &mark {
        Some(Ok(threshold)) => {
            let reader = vo2_outcome(stage, ids, READER.into(), threshold);
            stage.push(reader);
            stage.push(time(ids, READER.into(), Some(threshold), None));
            stage.push(from_engine.alternative());
            stage.push(time_of_engine.alternative());
            Ok((threshold.clone(), Text::from(READER)))
        }
        Some(Err(reason)) => {
            let absent =
                |id, unit| Outcome::absent(id, ids.at, READER, reason.clone()).in_unit(unit);
            stage.push(absent(ids.vo2, Unit::MlPerMin));
            stage.push(absent(ids.time, Unit::Second));
            stage.push(from_engine.alternative());
            stage.push(time_of_engine.alternative());
            Err((reason.clone(), Text::from(READER)))
        }
        None => {
            let reason = from_engine.reason.clone();
            stage.push(from_engine);
            stage.push(time_of_engine);
            match (proposal.threshold().cloned(), reason) {
                (Some(t), _) => Ok((t, Text::from(ids.method))),
                (None, reason) => {
                    Err((reason.unwrap_or_else(|| stage.no_ramp()), Text::from(ids.method)))
                }
            }
        }
    };
    let state = state(ids, &proposal, mark.is_some());
    let per_kg = crate::peak::per_kg(stage, ids.vo2, ids.per_kg, ids.at);
    let percent = of_peak(stage, ids);
    let work = work(stage, ids, used);
    for outcome in [state, per_kg, percent, work] {
        stage.push(outcome);
    }
}

/// V̇O₂ at the reader's time.
fn marked(stage: &Stage<'_>, t_s: f64) -> Result<Threshold, Note> {
    if let Some(reason) = stage.missing(&[Quantity::Vo2]) {
        return Err(reason);
    }
    let inside = stage.recording.span_s().is_some_and(|s| s.0 <= t_s && t_s <= s.1);
    if !inside {
        return Err(Note::new("mark-outside"));
    }
    let smoothed = stage.ramp_series.as_ref().and_then(|s| {
        let span = s.span()?;
        let vo2 = s.at(&s.vo2.as_ref()?.hat, t_s)?;
        (span.0 <= t_s && t_s <= span.1).then_some((vo2, s.vo2_error(t_s, vo2)))
    });
    let mean = || stage.window_mean(Quantity::Vo2, (t_s - WINDOW_S / 2.0, t_s + WINDOW_S / 2.0));
    let (vo2, error) = smoothed
        .or_else(|| mean().map(|vo2| (vo2, None)))
        .ok_or_else(|| Note::new("window-not-covered"))?;
    let half = Z90 * error.unwrap_or(f64::NAN);
    // The interval holds the noise of V̇O₂ at this time, not how sure the reader is of the time.
    let doubts = vec![Note::new("mark-time-uncertainty-not-included")];
    Ok(Threshold { t_s, vo2, low: vo2 - half, high: vo2 + half, doubts })
}

fn vo2_of_proposal(stage: &Stage<'_>, ids: &Ids, proposal: &Proposal) -> Outcome {
    match proposal {
        Proposal::Proposed(threshold) => vo2_outcome(stage, ids, ids.method.into(), threshold),
        Proposal::NotReached(reason)
        | Proposal::Indeterminate(reason)
        | Proposal::Absent(reason) => {
            Outcome::absent(ids.vo2, ids.at, ids.method, reason.clone()).in_unit(Unit::MlPerMin)
        }
    }
}

fn vo2_outcome(stage: &Stage<'_>, ids: &Ids, method: Text, threshold: &Threshold) -> Outcome {
    let recording = Some(Interval { low: threshold.low, high: threshold.high })
        .filter(|_| stage.intervals_hold());
    let repeat = (ids.mark == Mark::Vt1).then(|| {
        // The hinge follows the muscle late by up to some 10 s of V̇O₂ rise: lower end only.
        let rise = stage.ramp_series.as_ref().and_then(|s| s.vo2_rise()).unwrap_or(0.0);
        let late = if method == READER { 0.0 } else { 10.0 * rise.max(0.0) };
        let wide = recording.map(|i| Interval { low: i.low - late, high: i.high });
        repeatability::widen(threshold.vo2, wide, &[CV_VT1_VO2, CV_VT1_READER])
    });
    let t = threshold.t_s;
    let window = (t - WINDOW_S / 2.0, t + WINDOW_S / 2.0);
    let mut outcome = Outcome::quantity(ids.vo2, ids.at, method, Unit::MlPerMin, threshold.vo2)
        .recorded_within(recording)
        .repeated_within(repeat)
        .based_on(window, stage.breaths_in(window));
    outcome.doubts.extend(threshold.doubts.iter().cloned());
    outcome
}

fn time(ids: &Ids, method: Text, threshold: Option<&Threshold>, reason: Option<&Note>) -> Outcome {
    match threshold {
        Some(t) => Outcome::quantity(ids.time, ids.at, method, Unit::Second, t.t_s),
        None => {
            let reason = reason.cloned().unwrap_or_else(|| Note::new("threshold-not-known"));
            Outcome::absent(ids.time, ids.at, method, reason).in_unit(Unit::Second)
        }
    }
}

/// Whether the engine saw it: `proposed`, `not-reached`, `indeterminate`, or `reader` where marked.
fn state(ids: &Ids, proposal: &Proposal, marked: bool) -> Outcome {
    let word = |w: &'static str| Outcome::reading(ids.state, ids.at, ids.method, w);
    if marked {
        return Outcome::reading(ids.state, ids.at, READER, "reader");
    }
    match proposal {
        Proposal::Proposed(_) => word("proposed"),
        Proposal::NotReached(why) => word("not-reached").doubting(why.clone()),
        Proposal::Indeterminate(why) => word("indeterminate").doubting(why.clone()),
        Proposal::Absent(why) => {
            Outcome::absent(ids.state, ids.at, ids.method, why.clone()).of_kind(Kind::Reading)
        }
    }
}

/// V̇O₂ at the threshold as a share of measured peak V̇O₂ (information; normality uses predicted).
fn of_peak(stage: &Stage<'_>, ids: &Ids) -> Outcome {
    let absent =
        |why: Note| Outcome::absent(ids.percent, ids.at, "of-peak", why).in_unit(Unit::Percent);
    let part = |id, at| {
        let outcome = stage.results.primary(id, at);
        match outcome.and_then(Outcome::number) {
            Some(x) => Ok(x),
            None => Err(outcome
                .and_then(|o| o.reason.clone())
                .unwrap_or_else(|| Note::new("threshold-not-known"))),
        }
    };
    match (part(ids.vo2, ids.at), part("vo2-peak", At::Peak)) {
        (Ok(at), Ok(peak)) => {
            let value = 100.0 * at / peak;
            Outcome::quantity(ids.percent, ids.at, "of-peak", Unit::Percent, value)
        }
        (Err(why), _) | (_, Err(why)) => absent(why),
    }
}

fn work(stage: &Stage<'_>, ids: &Ids, used: Result<(Threshold, Text), (Note, Text)>) -> Outcome {
    let unit = Unit::Watt;
    let absent =
        |why: Note, method: Text| Outcome::absent(ids.work, ids.at, method, why).in_unit(unit);
    if let Some(why) = stage.missing(&[Quantity::WorkRate]) {
        return absent(why, ids.method.into());
    }
    match used {
        Err((why, method)) => absent(why, method),
        Ok((threshold, method)) => {
            let lag = response_time::measure(stage);
            match response_time::work_rate(stage, threshold.t_s, lag) {
                Some(value) => {
                    let lag_arg = Arg::Number(lag.lag_s, Unit::Second);
                    let code =
                        if lag.assumed { "work-rate-lag-assumed" } else { "work-rate-lag-removed" };
                    Outcome::quantity(ids.work, ids.at, method, unit, value)
                        .doubting(Note::new(code).with("lag", lag_arg))
                }
                None => absent(Note::new("window-not-covered"), method),
            }
        }
    }
}

/// The classical readings of VT1 as alternatives.
fn classical(stage: &mut Stage<'_>) {
    let guards = stage.results.thresholds.guards.clone();
    let readings = [
        ("slope-one-line", guards.slope_one_departure_s),
        ("eq-o2-nadir", guards.eq_o2_nadir_s),
        ("peto2-nadir", guards.peto2_nadir_s),
    ];
    for (method, t_s) in readings {
        let vo2 = stage.ramp_series.as_ref().and_then(|s| s.at(&s.vo2.as_ref()?.hat, t_s?));
        if let (Some(t), Some(vo2)) = (t_s, vo2) {
            let outcome = Outcome::quantity("vt1-vo2", At::Vt1, method, Unit::MlPerMin, vo2)
                .alternative()
                .doubting(Note::new("display-only"))
                .based_on((t - WINDOW_S / 2.0, t + WINDOW_S / 2.0), 0);
            stage.push(outcome);
        }
    }
}
