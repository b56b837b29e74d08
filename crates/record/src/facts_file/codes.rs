//! The closed codes of `rampcrest-facts/1`, each beside what the engine calls it.

use analysis::facts as engine;
use serde::{Deserialize, Serialize};

macro_rules! closed {
    ($(#[$doc:meta])* $name:ident => $engine:ident { $($code:literal $variant:ident;)* }) => {
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
        pub enum $name {
            $(
                #[doc = concat!("`", $code, "`")]
                #[serde(rename = $code)]
                $variant,
            )*
        }

        impl $name {
            /// Every code, in the order of the file format.
            pub const ALL: &[$name] = &[$($name::$variant),*];

            /// The code as it stands in the file.
            #[must_use]
            pub fn code(self) -> &'static str {
                match self { $($name::$variant => $code),* }
            }

            /// What the engine calls it.
            #[must_use]
            pub fn to_engine(self) -> engine::$engine {
                match self { $($name::$variant => engine::$engine::$variant),* }
            }
        }
    };
}

closed! {
    /// Sex as the prediction equations define it.
    Sex => Sex { "male" Male; "female" Female; }
}

closed! {
    /// When haemoglobin was sampled.
    HbTime => HbTime { "rest" Rest; "peak" Peak; }
}

closed! {
    /// Cardiac rhythm during the test.
    Rhythm => Rhythm {
        "sinus" Sinus; "af" AtrialFibrillation; "paced" Paced; "other" Other;
    }
}

closed! {
    /// Ergometer.
    Mode => Mode { "cycle" Cycle; "treadmill" Treadmill; }
}

closed! {
    /// How the load rises.
    ProtocolKind => ProtocolKind { "ramp" Ramp; "steps" Steps; }
}

closed! {
    /// A recorded diagnosis.
    DiagnosisCode => Diagnosis {
        "shunt" Shunt; "fontan" Fontan; "transplant" Transplant; "congenital" Congenital;
        "pregnancy" Pregnancy; "heart-failure" HeartFailure;
        "pulmonary-hypertension" PulmonaryHypertension; "copd" Copd; "ild" Ild; "other" Other;
    }
}

closed! {
    /// An implanted device.
    Device => Device {
        "pacemaker" Pacemaker; "icd" Icd; "lvad" Lvad; "other" Other;
    }
}

closed! {
    /// Why the test was asked for.
    Indication => Indication {
        "heart-failure" HeartFailure; "preoperative" Preoperative;
        "pulmonary-hypertension" PulmonaryHypertension; "chronic-lung" ChronicLung;
        "unexplained-breathlessness" UnexplainedBreathlessness; "athlete" Athlete; "none" None;
    }
}

closed! {
    /// Kind of the planned operation, beside its text.
    OperationKind => OperationKind {
        "lung-resection" LungResection; "major-abdominal" MajorAbdominal;
        "colorectal" Colorectal; "other" Other;
    }
}

closed! {
    /// Kind of the stop reason, beside its text.
    StopKind => StopKind {
        "fatigue" Fatigue; "breathlessness" Breathlessness; "ischaemia" Ischaemia;
        "blood-pressure" BloodPressure; "rhythm" Rhythm; "desaturation" Desaturation;
        "other" Other;
    }
}

closed! {
    /// How the person recovered.
    RecoveryMode => RecoveryMode {
        "active" Active; "passive" Passive; "supine" Supine;
    }
}

/// Unit in which haemoglobin was entered; asked, never assumed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum HbUnit {
    /// g/L.
    #[serde(rename = "g/L")]
    GramPerL,
    /// g/dL.
    #[serde(rename = "g/dL")]
    GramPerDl,
    /// mmol/L of the monomer (one haem, one iron).
    #[serde(rename = "mmol/L")]
    MmolPerL,
}

impl HbUnit {
    /// Every unit.
    pub const ALL: &[HbUnit] = &[HbUnit::GramPerL, HbUnit::GramPerDl, HbUnit::MmolPerL];

    /// The code as it stands in the file.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            HbUnit::GramPerL => "g/L",
            HbUnit::GramPerDl => "g/dL",
            HbUnit::MmolPerL => "mmol/L",
        }
    }

    /// Grams per litre in one of this unit. The monomer of human haemoglobin weighs
    /// 16.114 g/mmol: a quarter of the tetramer's 64 458 g/mol (International Committee for
    /// Standardization in Haematology, reference method for haemoglobinometry; from memory).
    #[must_use]
    pub fn g_per_l(self) -> f64 {
        match self {
            HbUnit::GramPerL => 1.0,
            HbUnit::GramPerDl => 10.0,
            HbUnit::MmolPerL => 16.114,
        }
    }
}

/// A scale of perceived exertion, by its range only.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum BorgScale {
    /// 0 to 10.
    #[serde(rename = "0-10")]
    ZeroToTen,
    /// 6 to 20.
    #[serde(rename = "6-20")]
    SixToTwenty,
    /// A children's scale, 0 to 10.
    #[serde(rename = "child")]
    Child,
}

impl BorgScale {
    /// Every scale.
    pub const ALL: &[BorgScale] = &[BorgScale::ZeroToTen, BorgScale::SixToTwenty, BorgScale::Child];

    /// The code as it stands in the file.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            BorgScale::ZeroToTen => "0-10",
            BorgScale::SixToTwenty => "6-20",
            BorgScale::Child => "child",
        }
    }

    /// Lowest and highest number of the scale.
    #[must_use]
    pub fn range(self) -> (f64, f64) {
        match self {
            BorgScale::ZeroToTen | BorgScale::Child => (0.0, 10.0),
            BorgScale::SixToTwenty => (6.0, 20.0),
        }
    }
}

/// Kind of a timed event.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum EventKind {
    /// Blood pressure.
    Bp,
    /// Oxygen saturation by pulse oximetry.
    Spo2,
    /// Perceived exertion.
    Borg,
    /// ECG note.
    Ecg,
    /// Arrhythmia.
    Arrhythmia,
    /// Symptom.
    Symptom,
    /// Arterial or capillary gases.
    GasSample,
    /// Lactate.
    Lactate,
    /// Inspiratory-capacity manoeuvre.
    IcManoeuvre,
    /// Cough.
    Cough,
    /// Mask leak.
    Leak,
    /// Talking.
    Talking,
    /// Fading cadence.
    CadenceFade,
    /// Gripping the rail.
    RailGrip,
    /// Change of inspired oxygen.
    OxygenChange,
    /// Treatment given.
    Treatment,
    /// Comment.
    Comment,
}

impl EventKind {
    /// Every kind with its code.
    pub const ALL: &[(EventKind, &'static str)] = &[
        (EventKind::Bp, "bp"),
        (EventKind::Spo2, "spo2"),
        (EventKind::Borg, "borg"),
        (EventKind::Ecg, "ecg"),
        (EventKind::Arrhythmia, "arrhythmia"),
        (EventKind::Symptom, "symptom"),
        (EventKind::GasSample, "gas-sample"),
        (EventKind::Lactate, "lactate"),
        (EventKind::IcManoeuvre, "ic-manoeuvre"),
        (EventKind::Cough, "cough"),
        (EventKind::Leak, "leak"),
        (EventKind::Talking, "talking"),
        (EventKind::CadenceFade, "cadence-fade"),
        (EventKind::RailGrip, "rail-grip"),
        (EventKind::OxygenChange, "oxygen-change"),
        (EventKind::Treatment, "treatment"),
        (EventKind::Comment, "comment"),
    ];

    /// The code as it stands in the file.
    #[must_use]
    pub fn code(self) -> &'static str {
        EventKind::ALL.iter().find(|(k, _)| *k == self).map_or("comment", |(_, code)| code)
    }
}
