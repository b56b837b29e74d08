//! Signs that rules ask for: each is met, absent, or was not measured in this test.

use super::seen::Seen;
use crate::results::{Arg, At, Evidence, Note};

/// What a sign says of this test.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Answer {
    /// It is there.
    Met,
    /// It was looked for and is not there.
    Absent,
    /// It was not measured or not stated.
    NotMeasured,
}

impl Answer {
    fn of(value: Option<bool>) -> Self {
        match value {
            Some(true) => Answer::Met,
            Some(false) => Answer::Absent,
            None => Answer::NotMeasured,
        }
    }
}

macro_rules! signs {
    ($($(#[$doc:meta])* $name:ident $code:literal $absent:literal [$($id:literal $at:ident),*] $f:expr;)*) => {
        /// A sign that a rule may ask for.
        #[derive(Clone, Copy, Debug, PartialEq, Eq)]
        pub(crate) enum Sign { $($(#[$doc])* $name),* }

        impl Sign {
            /// All signs.
            #[cfg(test)]
            pub const ALL: &[Sign] = &[$(Sign::$name),*];

            /// What this test says.
            pub fn answer(self, seen: &Seen) -> Answer {
                let found: fn(&Seen) -> Option<bool> = match self { $(Sign::$name => $f),* };
                Answer::of(found(seen))
            }

            /// Message where it is met, and where it is absent.
            pub fn codes(self) -> (&'static str, &'static str) {
                match self { $(Sign::$name => ($code, $absent)),* }
            }

            /// Outcomes it rests on.
            pub fn rests_on(self) -> &'static [(&'static str, At)] {
                match self { $(Sign::$name => &[$(($id, At::$at)),*]),* }
            }
        }
    };
}

signs! {
    /// The O₂ pulse keeps rising.
    Rising "sign-rising" "sign-not-rising" ["o2-pulse-course" Ramp] |s| s.course.map(|c| c == "rising");
    /// It stopped rising.
    Flat "sign-flat" "sign-not-flat" ["o2-pulse-course" Ramp]
        |s| s.course.map(|c| c == "flattened" || c == "falling");
    /// It rises less than expected, or stopped rising.
    Loss "sign-loss" "sign-no-loss" ["o2-pulse-course" Ramp]
        |s| s.course.map(|c| matches!(c, "rising-slowed" | "flattened" | "falling"));
    /// Level from early on.
    LevelEarly "sign-level-early" "sign-not-level-early" ["vo2-hr-slope-over-pulse" Ramp] |s| s.low_from_start;
    /// Only the plateau of a true maximum.
    Terminal "sign-terminal" "sign-not-terminal" ["o2-pulse-course" Ramp] |s| s.terminal;
    /// Low against every set in range.
    PulseLow "sign-pulse-low" "sign-pulse-not-low" ["o2-pulse-at-peak" Peak] |s| s.pulse_low;
    /// V̇O₂ slowed.
    Vo2Slowed "sign-vo2-slowed" "sign-vo2-not-slowed" ["o2-pulse-deficit-vo2-part" Ramp] |s| s.vo2_slowed;
    /// HR accelerated.
    HrAccelerated "sign-hr-accelerated" "sign-hr-not-accelerated" ["o2-pulse-deficit-hr-part" Ramp] |s| s.hr_accelerated;
    /// Little of the HR reserve was used.
    RateLow "sign-rate-low" "sign-rate-not-low" ["chronotropic-index" Peak] |s| s.rate_low;
    /// A rate-slowing drug was taken.
    RateDrug "sign-rate-drug" "sign-no-rate-drug" [] |s| s.rate_drug;
    /// Effort submaximal without a demonstrated limit.
    Submaximal "sign-submaximal" "sign-not-submaximal" ["effort" Test] |s| s.submaximal;
    /// ECG change, read by a person.
    EcgChange "sign-ecg-change" "sign-no-ecg-change" [] |s| s.ecg_change;
    /// Systolic pressure rose less than 20 mmHg, or fell.
    PressureBlunted "sign-pressure-blunted" "sign-pressure-rises" ["sys-bp" Peak] |s| s.pressure_rise.map(|r| r < 20.0);
    /// V̇O₂ rose little for the work.
    WorkSlopeLow "sign-work-slope-low" "sign-work-slope-normal" ["dvo2-dwr" Ramp] |s| s.work_slope.map(|x| x < 8.4);
    /// Much ventilation for the CO₂.
    SlopeHigh "sign-ve-vco2-high" "sign-ve-vco2-not-high" ["ve-vco2-slope-full" Ramp] |s| s.ve_vco2.map(|x| x > 34.0);
    /// PETCO₂ low at peak and lower than at VT1.
    Petco2Low "sign-petco2-low" "sign-petco2-not-low" ["petco2" Peak] |s| s.petco2_low;
    /// Confirmed, gradual fall of saturation by 4 points or more.
    Desaturation "sign-desaturation" "sign-no-desaturation" ["spo2-lowest" Ramp] |s| s.spo2_fall.map(|x| x >= 4.0);
    /// The step of a shunt.
    ShuntStep "sign-shunt-step" "sign-no-shunt-step" ["fick-shunt-signature" Ramp] |s| s.shunt;
    /// Haemoglobin below 130 (men) or 120 g/L (women), the limits of the WHO.
    HbLow "sign-hb-low" "sign-hb-not-low" [] |s| s.hb_low;
    /// COHb of 3 % or more.
    CoHigh "sign-cohb-high" "sign-cohb-not-high" [] |s| s.cohb.map(|x| x >= 0.03);
    /// Breathing reserve below the limit.
    ReserveLow "sign-reserve-low" "sign-reserve-not-low" ["breathing-reserve" Peak] |s| s.reserve_low;
    /// RER of at least 1.10 at peak.
    RerHigh "sign-rer-high" "sign-rer-not-high" ["rer-peak" Peak] |s| s.rer.map(|x| x >= 1.10);
    /// HR fell by at most 12 /min in the first minute.
    RecoverySlow "sign-recovery-slow" "sign-recovery-not-slow" ["hr-recovery-1min" Recovery1Min] |s| s.hr_recovery.map(|x| x <= 12.0);
    /// VT1 below 40 % of predicted peak V̇O₂.
    Vt1Early "sign-vt1-early" "sign-vt1-not-early" ["vt1-vo2" Vt1] |s| s.vt1_share.map(|x| x < 40.0);
    /// O₂ pulse higher one minute into recovery than at peak.
    RecoveryHigher "sign-recovery-higher" "sign-recovery-not-higher" ["o2-pulse" Recovery1Min] |s| s.recovery_higher;
}

impl Sign {
    fn evidence(self, code: &'static str) -> Evidence {
        let mut note = Note::new(code);
        if let Some((id, at)) = self.rests_on().first() {
            note = note.with("value", Arg::Outcome(id, *at));
        }
        Evidence {
            note,
            rests_on: self.rests_on().iter().map(|(id, at)| ((*id).into(), *at)).collect(),
        }
    }

    /// The message that it is met.
    pub fn met(self) -> Evidence {
        self.evidence(self.codes().0)
    }

    /// The message that it is absent.
    pub fn absent(self) -> Evidence {
        self.evidence(self.codes().1)
    }

    /// "Not measured: …".
    pub fn open(self) -> Evidence {
        let note = Note::new("not-measured").with("sign", Arg::Word(self.codes().0));
        Evidence { note, rests_on: Vec::new() }
    }
}
