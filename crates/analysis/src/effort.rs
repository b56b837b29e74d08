//! Effort in three states: maximal metabolic effort, stopped at a demonstrated limit, or
//! submaximal without a demonstrated limit. RER alone never decides.

use crate::facts::{EventKind, Rhythm, StopKind};
use crate::note::{Arg, Note};
use crate::quantity::Quantity;
use crate::regression;
use crate::repeatability::Z90;
use crate::reserve::known;
use crate::results::{At, Kind, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Plateau: slope of the last minute at most this share of the slope before (Niemeyer et al.,
/// Sports Med 2021).
const PLATEAU_SHARE: f64 = 0.5;
const PLATEAU_S: f64 = 60.0;
/// Lactate that counts as a criterion, mmol/L.
const LACTATE: f64 = 8.0;

/// A criterion: met, not met, or why it cannot be judged.
type Criterion = Result<bool, Note>;

/// Derives the plateau, the criteria and the state.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let plateau = plateau(stage);
    let rer = rer(stage);
    let hr = heart_rate(stage);
    let lactate = lactate(stage);
    let limits = limits(stage);
    let state = state(&plateau, &[&rer, &hr, &lactate], limits);
    let criteria = [
        ("effort-rer", "wagner-2020-by-age", &rer),
        ("effort-hr", "wagner-2020-210-less-age", &hr),
        ("effort-lactate", "lactate-8", &lactate),
    ]
    .map(|(id, method, criterion)| match criterion {
        Ok(true) => Outcome::reading(id, At::Peak, method, "met"),
        Ok(false) => Outcome::reading(id, At::Peak, method, "not-met"),
        Err(why) => Outcome::absent(id, At::Peak, method, why.clone()).of_kind(Kind::Reading),
    });
    let plateau = match plateau {
        Ok(word) => Outcome::reading("vo2-plateau", At::Peak, "last-minute-slope", word),
        Err(why) => Outcome::absent("vo2-plateau", At::Peak, "last-minute-slope", why)
            .of_kind(Kind::Reading),
    };
    for outcome in criteria.into_iter().chain([plateau, state]) {
        stage.push(outcome);
    }
}

fn state(
    plateau: &Result<&'static str, Note>,
    criteria: &[&Criterion],
    limits: Vec<Note>,
) -> Outcome {
    let word = |w: &'static str| Outcome::reading("effort", At::Test, "three-states", w);
    let met = criteria.iter().filter(|c| ***c == Ok(true)).count();
    if *plateau == Ok("present") || met >= 2 {
        return word("maximal-metabolic");
    }
    if !limits.is_empty() {
        let mut outcome = word("stopped-at-limit");
        outcome.doubts = limits;
        return outcome;
    }
    // Criteria that might still have made it maximal: without two of them nothing is shown.
    let open: Vec<Note> = criteria.iter().filter_map(|c| c.as_ref().err().cloned()).collect();
    let judged = criteria.len() - open.len();
    if judged == 0 {
        let why = open.into_iter().next().unwrap_or_else(|| Note::new("no-ramp"));
        return Outcome::absent("effort", At::Test, "three-states", why).of_kind(Kind::Reading);
    }
    let mut outcome = word("submaximal-without-limit");
    if judged < 2 {
        outcome.doubts = open;
    }
    outcome
}

/// Peak RER by age (Wagner et al. 2020); 1.10 where the age is not stated.
fn rer(stage: &Stage<'_>) -> Criterion {
    let value = known(stage, "rer-peak", At::Peak)?;
    let limit = match stage.facts.subject.age_years {
        Some(age) if age < 40.0 => 1.13,
        Some(age) if age < 60.0 => 1.10,
        Some(_) => 1.06,
        None => 1.10,
    };
    Ok(value >= limit)
}

/// Peak HR against age, from the stage.
fn heart_rate(stage: &Stage<'_>) -> Criterion {
    let value = known(stage, "hr-peak", At::Peak)?;
    let age = stage.facts.subject.age_years.ok_or_else(|| Note::missing_fact("age"))?;
    let test = &stage.facts.test;
    let altered = test.rate_slowing_drug.taken == Some(true)
        || test.rhythm.is_some_and(|rhythm| rhythm != Rhythm::Sinus);
    rate_criterion(value, age, altered)
}

/// Peak HR by age, per cent of 210 − age (Wagner et al. 2020). Below it nothing is judged where a
/// drug or the rhythm sets the rate.
fn rate_criterion(peak: f64, age: f64, altered: bool) -> Criterion {
    let share = if age < 40.0 { 0.96 } else { 0.99 };
    match peak >= share * (210.0 - age) {
        false if altered => Err(Note::new("rate-prediction-does-not-hold")),
        met => Ok(met),
    }
}

fn lactate(stage: &Stage<'_>) -> Criterion {
    let highest = stage
        .facts
        .events
        .iter()
        .filter_map(|e| match e.kind {
            EventKind::Lactate(x) => x,
            _ => None,
        })
        .max_by(f64::total_cmp);
    highest.map(|x| x >= LACTATE).ok_or_else(|| Note::missing_fact("lactate"))
}

/// Limits that were demonstrated.
fn limits(stage: &Stage<'_>) -> Vec<Note> {
    let mut limits = Vec::new();
    let settings = stage.settings;
    let share = known(stage, "breathing-reserve", At::Peak);
    let absolute = known(stage, "breathing-reserve-absolute", At::Peak);
    if let (Ok(share), Ok(absolute)) = (share, absolute)
        && (share < settings.breathing_reserve_pct || absolute < settings.breathing_reserve_l_min)
    {
        let share = Arg::Number(share, Unit::Percent);
        limits.push(Note::new("limit-ventilatory").with("reserve", share));
    }
    let stop = match stage.facts.test.stop {
        Some(StopKind::Ischaemia) => Some("limit-ischaemic"),
        Some(StopKind::BloodPressure) => Some("limit-blood-pressure"),
        Some(StopKind::Rhythm) => Some("limit-rhythm"),
        Some(StopKind::Desaturation) if stage.facts.test.spo2_confirmed == Some(true) => {
            Some("limit-gas-exchange")
        }
        _ => None,
    };
    limits.extend(stop.map(Note::new));
    limits
}

/// Whether V̇O₂ levelled in the last minute: slope against time, with its interval, against the
/// slope before.
fn plateau(stage: &Stage<'_>) -> Result<&'static str, Note> {
    if let Some(why) = stage.missing(&[Quantity::Vo2]) {
        return Err(why);
    }
    let series = stage.ramp_series.as_ref().ok_or_else(|| stage.no_ramp())?;
    let vo2 = series.vo2.as_ref().ok_or_else(|| Note::new("too-few-breaths"))?;
    let split = series.until(series.ramp.1 - PLATEAU_S);
    let part = |r: std::ops::Range<usize>| {
        (r.len() >= 8)
            .then(|| regression::line(&series.t_s[r.clone()], &vo2.raw[r.clone()]))
            .flatten()
            .ok_or_else(|| Note::new("too-few-breaths"))
    };
    let (before, late) = (part(0..split)?, part(split..series.len())?);
    let noise = series.vo2_noise().ok_or_else(|| Note::new("too-few-breaths"))?;
    let level = regression::mean(&vo2.raw[split..]);
    let half = Z90 * noise * level / late.sxx.sqrt();
    let limit = PLATEAU_SHARE * before.slope;
    Ok(if before.slope <= 0.0 {
        "unclear"
    } else if late.slope + half <= limit {
        "present"
    } else if late.slope - half > limit {
        "absent"
    } else {
        "unclear"
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 99 % of 210 − 56 is 152.46, 96 % of 210 − 30 is 172.8.
    #[test]
    fn a_slowed_rate_cannot_fail_the_rate_criterion() {
        assert_eq!(rate_criterion(152.0, 56.0, false), Ok(false));
        assert_eq!(rate_criterion(153.0, 56.0, false), Ok(true));
        assert_eq!(rate_criterion(172.0, 30.0, false), Ok(false));
        assert_eq!(rate_criterion(173.0, 30.0, false), Ok(true));
        assert_eq!(rate_criterion(153.0, 56.0, true), Ok(true));
        let why = rate_criterion(109.0, 56.0, true).unwrap_err();
        assert_eq!(why.code, "rate-prediction-does-not-hold");
    }

    #[test]
    fn rer_alone_never_decides() {
        let (yes, no) = (Ok(true), Ok(false));
        let open: Criterion = Err(Note::missing_fact("lactate"));
        let word = |criteria: &[&Criterion], limits| {
            state(&Ok("absent"), criteria, limits).word().map(str::to_owned)
        };
        let sub = Some("submaximal-without-limit".to_owned());
        assert_eq!(word(&[&yes, &no, &open], vec![]), sub);
        assert_eq!(word(&[&no, &no, &open], vec![]), sub);
        let most = Some("maximal-metabolic".to_owned());
        assert_eq!(word(&[&yes, &yes, &open], vec![]), most);
        let stopped = Some("stopped-at-limit".to_owned());
        assert_eq!(word(&[&yes, &no, &open], vec![Note::new("limit-rhythm")]), stopped);
        assert!(state(&Ok("absent"), &[&open, &open, &open], vec![]).reason.is_some());
        assert_eq!(state(&Ok("present"), &[&open], vec![]).word(), Some("maximal-metabolic"));
    }
}
