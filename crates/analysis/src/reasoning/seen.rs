//! What this test shows, gathered once from facts and outcomes for the rules.

use crate::facts::Sex;
use crate::fick::spo2_usable;
use crate::predicted::sets::Predicts;
use crate::results::{At, Outcome};
use crate::stage::Stage;

/// What the rules may ask; `None` = not measured or not stated.
#[derive(Clone, Debug, Default, PartialEq)]
pub(crate) struct Seen {
    pub course: Option<&'static str>,
    pub low_from_start: Option<bool>,
    pub terminal: Option<bool>,
    pub pulse_low: Option<bool>,
    pub vo2_slowed: Option<bool>,
    pub hr_accelerated: Option<bool>,
    pub rate_low: Option<bool>,
    pub rate_drug: Option<bool>,
    pub submaximal: Option<bool>,
    pub ecg_change: Option<bool>,
    pub pressure_rise: Option<f64>,
    pub work_slope: Option<f64>,
    pub ve_vco2: Option<f64>,
    pub petco2_low: Option<bool>,
    pub spo2_fall: Option<f64>,
    pub shunt: Option<bool>,
    pub hb_low: Option<bool>,
    pub cohb: Option<f64>,
    pub reserve_low: Option<bool>,
    pub rer: Option<f64>,
    pub hr_recovery: Option<f64>,
    pub vt1_share: Option<f64>,
    pub recovery_higher: Option<bool>,
}

/// Chronotropic limits, both with 220 − age: without and with a rate-slowing drug.
const CHRONOTROPIC: (f64, f64) = (0.80, 0.62);

impl Seen {
    /// From what is derived so far.
    pub fn of(stage: &Stage<'_>) -> Self {
        let results = &stage.results;
        let facts = stage.facts;
        let number = |id: &str, at| results.number(id, at);
        let course = results.course.as_ref();
        let word = course.and_then(|c| c.course);
        let doubt =
            |code| word.map(|_| course.is_some_and(|c| c.doubts.iter().any(|d| d.code == code)));
        let below_zero = |id: &str| {
            let outcome = results.primary(id, At::Ramp)?;
            outcome.recording.map(|i| i.high < 0.0)
        };
        let drug = facts.test.rate_slowing_drug.taken;
        let limit = if drug == Some(true) { CHRONOTROPIC.1 } else { CHRONOTROPIC.0 };
        let pair = |id: &str, first, second| Some((number(id, first)?, number(id, second)?));
        let reserve = number("breathing-reserve", At::Peak);
        Self {
            course: word.map(crate::o2_pulse::Course::code),
            low_from_start: doubt("low-from-start"),
            terminal: doubt("terminal-compatible-with-plateau"),
            pulse_low: pulse_low(stage),
            vo2_slowed: below_zero("o2-pulse-deficit-vo2-part"),
            hr_accelerated: below_zero("o2-pulse-deficit-hr-part"),
            rate_low: number("chronotropic-index", At::Peak).map(|x| x < limit),
            rate_drug: drug,
            submaximal: results
                .primary("effort", At::Test)
                .and_then(Outcome::word)
                .map(|w| w == "submaximal-without-limit"),
            ecg_change: facts.test.ecg.change,
            pressure_rise: pair("sys-bp", At::Rest, At::Peak).map(|(a, b)| b - a),
            work_slope: number("dvo2-dwr", At::Ramp),
            ve_vco2: number("ve-vco2-slope-full", At::Ramp),
            petco2_low: number("petco2", At::Peak).map(|peak| {
                peak < 33.0 && number("petco2", At::Vt1).is_none_or(|vt1| peak <= vt1 - 1.0)
            }),
            spo2_fall: number("spo2", At::Rest)
                .zip(number("spo2-lowest", At::Ramp))
                .filter(|_| spo2_usable(stage))
                .map(|(rest, lowest)| rest - lowest),
            shunt: results
                .primary("fick-shunt-signature", At::Ramp)
                .and_then(Outcome::word)
                .filter(|w| *w != "indeterminate")
                .map(|w| w == "present"),
            hb_low: facts
                .subject
                .hb
                .zip(facts.subject.sex)
                .map(|(hb, sex)| hb.g_per_l < if sex == Sex::Male { 130.0 } else { 120.0 }),
            cohb: facts.subject.cohb,
            reserve_low: reserve.map(|r| r < stage.settings.breathing_reserve_pct),
            rer: number("rer-peak", At::Peak),
            hr_recovery: number("hr-recovery-1min", At::Recovery1Min),
            vt1_share: number("vt1-vo2", At::Vt1)
                .zip(number("predicted-vo2-peak", At::Peak))
                .map(|(vt1, predicted)| 100.0 * vt1 / predicted),
            recovery_higher: pair("o2-pulse", At::Peak, At::Recovery1Min)
                .map(|(a, b)| b > 1.03 * a),
        }
    }
}

/// How many of the sets in range that have a limit call `value` low, and how many there are.
pub(crate) fn low_in(stage: &Stage<'_>, predicts: Predicts, value: f64) -> (usize, usize) {
    crate::predicted::votes(stage, predicts, value)
}

/// Low only if low in every set in range.
fn pulse_low(stage: &Stage<'_>) -> Option<bool> {
    let value = stage.results.number("o2-pulse-at-peak", At::Peak)?;
    let (low, all) = low_in(stage, Predicts::O2Pulse, value);
    (all > 0).then_some(low == all)
}
