//! The bands, as data with their sources.

use crate::facts::{Indication, OperationKind};
use crate::results::At;

/// One band of a class.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Band {
    /// Lowest value.
    pub from: f64,
    /// Whether that value itself belongs to the band.
    pub inclusive: bool,
    /// Code of the class, the outcome's value.
    pub word: &'static str,
    /// The same as a word of the catalogue.
    pub text: &'static str,
}

/// One published class.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Class {
    /// Outcome id.
    pub id: &'static str,
    /// Where it belongs.
    pub at: At,
    /// Method code.
    pub method: &'static str,
    /// The lens under which it appears.
    pub indication: Indication,
    /// The operation it concerns, where it concerns one.
    pub operation: Option<OperationKind>,
    /// Deciding outcome.
    pub deciding: &'static str,
    /// Where the deciding outcome belongs.
    pub deciding_at: At,
    /// Whether it presupposes effort.
    pub needs_effort: bool,
    /// Paper.
    pub source: &'static str,
    /// Message beside every value of it.
    pub caveat: Option<&'static str>,
    /// Bands, rising; the first has no lower end.
    pub bands: &'static [Band],
}

impl Class {
    /// The band in which `value` lies.
    #[must_use]
    pub fn band(&self, value: f64) -> &'static Band {
        let reached = |b: &&Band| if b.inclusive { value >= b.from } else { value > b.from };
        self.bands.iter().rev().find(reached).unwrap_or(&self.bands[0])
    }
}

macro_rules! bands {
    ($($from:literal $rule:ident $word:literal;)*) => {
        &[$(Band {
            from: $from, inclusive: rule!($rule), word: $word, text: concat!("class-", $word),
        }),*]
    };
}

macro_rules! rule {
    (at) => {
        true
    };
    (above) => {
        false
    };
}

const WEBER: &[Band] = bands! { -1.0e9 at "D"; 10.0 at "C"; 16.0 at "B"; 20.0 above "A"; };
const VENTILATORY: &[Band] = bands! { -1.0e9 at "I"; 30.0 at "II"; 36.0 at "III"; 45.0 at "IV"; };
const RECOVERY: &[Band] = bands! { -1.0e9 at "at-most-12"; 12.0 above "above-12"; };
const PH_VO2: &[Band] =
    bands! { -1.0e9 at "high-stratum"; 11.0 at "intermediate-stratum"; 15.0 above "low-stratum"; };
const PH_PERCENT: &[Band] =
    bands! { -1.0e9 at "high-stratum"; 35.0 at "intermediate-stratum"; 65.0 above "low-stratum"; };
const PH_SLOPE: &[Band] =
    bands! { -1.0e9 at "low-stratum"; 36.0 at "intermediate-stratum"; 45.0 at "high-stratum"; };
const RESECTION: &[Band] =
    bands! { -1.0e9 at "below-10"; 10.0 at "10-to-20"; 20.0 above "above-20"; };
const RESECTION_PERCENT: &[Band] = bands! { -1.0e9 at "below-35-percent"; 35.0 at "35-to-75-percent"; 75.0 above "above-75-percent"; };
const THRESHOLD: &[Band] = bands! { -1.0e9 at "below-8"; 8.0 at "8-to-11"; 11.0 at "at-least-11"; };
const EQUIVALENT: &[Band] = bands! { -1.0e9 at "at-most-34"; 34.0 above "above-34"; };
const COLORECTAL_VT1: &[Band] = bands! { -1.0e9 at "at-most-11.1"; 11.1 above "above-11.1"; };
const COLORECTAL_PEAK: &[Band] = bands! { -1.0e9 at "at-most-18.2"; 18.2 above "above-18.2"; };
const COLORECTAL_EQUIVALENT: &[Band] =
    bands! { -1.0e9 at "at-most-30.9"; 30.9 above "above-30.9"; };
const CUT_14: &[Band] = bands! { -1.0e9 at "at-most-14"; 14.0 above "above-14"; };
const CUT_12: &[Band] = bands! { -1.0e9 at "at-most-12"; 12.0 above "above-12"; };
const CUT_50: &[Band] = bands! { -1.0e9 at "at-most-50-percent"; 50.0 above "above-50-percent"; };
const CUT_35: &[Band] = bands! { -1.0e9 at "at-most-35"; 35.0 above "above-35"; };

const ARENA: &str = "Arena R et al. Circulation 2007;115:2410";
const WEBER_PAPER: &str = "Weber KT, Janicki JS et al. Circulation 1982;65:1213";
const COLE: &str = "Cole CR et al. N Engl J Med 1999;341:1351";
const ESC_2015: &str = "ESC/ERS guidelines on pulmonary hypertension 2015";
const BRUNELLI: &str = "ERS/ESTS guidelines on lung resection, as in PMC4283874";
const OLDER: &str = "three-tier perioperative rule after Older 1999; POETTS, Levett DZH et al. Br J Anaesth 2018;120:484";
const WEST: &str = "West MA et al. Br J Surg 2016 (colorectal surgery, n 703)";
const ISHLT_PAPER: &str = "ISHLT criteria for heart transplantation 2016";

macro_rules! classes {
    ($($id:literal $at:ident $method:literal $lens:ident $operation:expr, $deciding:literal $dat:ident
       $effort:literal $source:ident $caveat:expr, $bands:ident;)*) => {
        /// All classes.
        pub const TABLE: &[Class] = &[$(Class {
            id: $id, at: At::$at, method: $method, indication: Indication::$lens,
            operation: $operation,
            deciding: $deciding, deciding_at: At::$dat, needs_effort: $effort, source: $source,
            caveat: $caveat, bands: $bands,
        }),*];
    };
}

const LUNG: Option<OperationKind> = Some(OperationKind::LungResection);
const ABDOMINAL: Option<OperationKind> = Some(OperationKind::MajorAbdominal);
const COLORECTAL: Option<OperationKind> = Some(OperationKind::Colorectal);

classes! {
    "class-weber" Peak "weber-janicki-1982" HeartFailure None, "vo2-peak-per-kg" Peak true WEBER_PAPER None, WEBER;
    "class-ventilatory" Ramp "arena-2007" HeartFailure None, "ve-vco2-slope-full" Ramp false ARENA None, VENTILATORY;
    "class-hr-recovery" Recovery1Min "cole-1999" HeartFailure None, "hr-recovery-1min" Recovery1Min false COLE
        Some("class-recovery-posture"), RECOVERY;
    "class-ph-vo2" Peak "esc-ers-2015" PulmonaryHypertension None, "vo2-peak-per-kg" Peak true ESC_2015 None, PH_VO2;
    "class-ph-vo2-percent" Peak "esc-ers-2015" PulmonaryHypertension None, "vo2-peak-percent" Peak true ESC_2015
        Some("class-percent-of-chosen-set"), PH_PERCENT;
    "class-ph-slope" Ramp "esc-ers-2015" PulmonaryHypertension None, "ve-vco2-slope-full" Ramp false ESC_2015 None, PH_SLOPE;
    "class-resection-vo2" Peak "lung-resection" Preoperative LUNG, "vo2-peak-per-kg" Peak true BRUNELLI
        Some("class-only-lung-resection"), RESECTION;
    "class-resection-vo2-percent" Peak "lung-resection" Preoperative LUNG, "vo2-peak-percent" Peak true BRUNELLI
        Some("class-only-lung-resection"), RESECTION_PERCENT;
    "class-perioperative-vt1" Vt1 "older-three-tier" Preoperative ABDOMINAL, "vt1-vo2-per-kg" Vt1 false OLDER
        Some("class-only-major-abdominal"), THRESHOLD;
    "class-perioperative-ve-vco2" Vt1 "older-three-tier" Preoperative ABDOMINAL, "eq-co2" Vt1 false OLDER
        Some("class-only-major-abdominal"), EQUIVALENT;
    "class-colorectal-vt1" Vt1 "west-2016" Preoperative COLORECTAL, "vt1-vo2-per-kg" Vt1 false WEST
        Some("class-only-colorectal"), COLORECTAL_VT1;
    "class-colorectal-vo2" Peak "west-2016" Preoperative COLORECTAL, "vo2-peak-per-kg" Peak true WEST
        Some("class-only-colorectal"), COLORECTAL_PEAK;
    "class-colorectal-ve-vco2" Vt1 "west-2016" Preoperative COLORECTAL, "eq-co2" Vt1 false WEST
        Some("class-only-colorectal"), COLORECTAL_EQUIVALENT;
}

const fn ishlt(
    id: &'static str,
    method: &'static str,
    deciding: &'static str,
    needs_effort: bool,
    bands: &'static [Band],
) -> Class {
    Class {
        id,
        at: At::Peak,
        method,
        indication: Indication::HeartFailure,
        operation: None,
        deciding,
        deciding_at: At::Peak,
        needs_effort,
        source: ISHLT_PAPER,
        caveat: Some("class-never-vo2-alone"),
        bands,
    }
}

const ISHLT_VO2: (&str, &str) = ("class-ishlt-vo2", "vo2-peak-per-kg");
/// Without a beta-blocker.
pub const ISHLT: Class = ishlt(ISHLT_VO2.0, "ishlt-2016", ISHLT_VO2.1, true, CUT_14);
/// On a beta-blocker.
pub const ISHLT_BLOCKED: Class =
    ishlt(ISHLT_VO2.0, "ishlt-2016-beta-blocker", ISHLT_VO2.1, true, CUT_12);
/// Below 50 years, and in women.
pub const ISHLT_PERCENT: Class =
    ishlt("class-ishlt-vo2-percent", "ishlt-2016-percent", "vo2-peak-percent", true, CUT_50);
/// Where RER stayed below 1.05.
pub const ISHLT_SLOPE: Class = Class {
    at: At::Ramp,
    deciding_at: At::Ramp,
    ..ishlt("class-ishlt-slope", "ishlt-2016-slope", "ve-vco2-slope-full", false, CUT_35)
};

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bands_rise() {
        for class in TABLE.iter().chain([&ISHLT, &ISHLT_BLOCKED, &ISHLT_PERCENT, &ISHLT_SLOPE]) {
            assert!(class.bands.windows(2).all(|w| w[0].from < w[1].from), "{}", class.id);
        }
    }
}
