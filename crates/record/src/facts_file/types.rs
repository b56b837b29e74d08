//! The fields of `rampcrest-facts/1`. Every field is optional; not stated = the field is absent.

use serde::{Deserialize, Serialize};

use super::codes::{
    BorgScale, Device, DiagnosisCode, EventKind, HbTime, HbUnit, Indication, Mode, OperationKind,
    ProtocolKind, RecoveryMode, Rhythm, Sex, StopKind,
};
use crate::identity::Identity;

macro_rules! fields {
    ($($(#[$doc:meta])* $name:ident { $($(#[$fdoc:meta])* $field:ident: $kind:ty,)* })*) => {$(
        $(#[$doc])*
        #[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
        #[serde(deny_unknown_fields)]
        pub struct $name {
            $(
                $(#[$fdoc])*
                #[serde(default, skip_serializing_if = "Option::is_none")]
                pub $field: Option<$kind>,
            )*
        }
    )*};
}

/// The schema's name, the only value of the field `schema`.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum FactsSchema {
    /// `rampcrest-facts/1`.
    #[default]
    #[serde(rename = "rampcrest-facts/1")]
    V1,
}

/// A facts file: what is known about the person and the test, apart from the breaths.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct FactsFile {
    /// `rampcrest-facts/1`.
    #[serde(default)]
    pub schema: FactsSchema,
    /// Identity; never reaches the engine.
    #[serde(default, skip_serializing_if = "Identity::is_empty")]
    pub identity: Identity,
    /// The person.
    #[serde(default, skip_serializing_if = "is_default")]
    pub subject: Subject,
    /// The test.
    #[serde(default, skip_serializing_if = "is_default")]
    pub test: Test,
    /// Timed events.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub events: Vec<Event>,
    /// Starts of the phases.
    #[serde(default, skip_serializing_if = "is_default")]
    pub phases: Phases,
}

fn is_default<T: Default + PartialEq>(value: &T) -> bool {
    *value == T::default()
}

fields! {
    /// The person, without identity.
    Subject {
        /// Age at the test, years.
        age_years: f64,
        /// Sex for the prediction equations.
        sex: Sex,
        /// Height, cm.
        height_cm: f64,
        /// Body mass, kg.
        mass_kg: f64,
        /// Haemoglobin.
        hb: Hb,
        /// Carboxyhaemoglobin where measured, fraction 0–1.
        cohb: f64,
        /// FEV₁ before the test, L.
        fev1_l: f64,
        /// Total lung capacity, L.
        tlc_l: f64,
        /// Measured maximal voluntary ventilation, L/min.
        mvv_l_min: f64,
    }

    /// Haemoglobin with the unit in which it was reported.
    Hb {
        /// The number.
        value: f64,
        /// Its unit; asked, never assumed.
        unit: HbUnit,
        /// Date of the sample.
        date: String,
        /// Whether it was drawn at rest or at peak.
        at: HbTime,
    }

    /// The test.
    Test {
        /// The referrer's question.
        question: String,
        /// Indication: the lens under which published classes appear.
        indication: Indication,
        /// Recorded diagnoses; an empty list = stated as none.
        diagnoses: Vec<Diagnosis>,
        /// Implanted devices; an empty list = stated as none.
        devices: Vec<Device>,
        /// Rhythm during the test.
        rhythm: Rhythm,
        /// Whether ectopy was frequent.
        frequent_ectopy: bool,
        /// Rate-slowing drug.
        rate_slowing_drug: Drug,
        /// Ergometer.
        mode: Mode,
        /// Protocol.
        protocol: Protocol,
        /// Inspired oxygen fraction; not stated = room air assumed.
        fio2: f64,
        /// Planned operation.
        operation: String,
        /// The same, as a closed kind: published bands appear under theirs only.
        operation_kind: OperationKind,
        /// Why the test stopped, in words.
        stop_reason: String,
        /// The same, as a closed kind.
        stop_kind: StopKind,
        /// The symptom that limited.
        limiting_symptom: String,
        /// Perceived exertion at the end.
        borg: BorgScore,
        /// An urgent finding and who was told.
        urgent: Urgent,
        /// The ECG as a person read it.
        ecg: Ecg,
        /// Whether the oximeter's pulse followed the ECG, or a reader confirmed its trace.
        spo2_confirmed: bool,
        /// The person's own earlier or off-drug test.
        own_test: OwnTest,
        /// Recovery: active, passive (seated) or supine.
        recovery_mode: RecoveryMode,
    }

    /// Rate-slowing drug.
    Drug {
        /// Whether one was taken.
        taken: bool,
        /// Its name.
        name: String,
        /// Hours since the last dose.
        last_dose_h: f64,
        /// Whether it is a beta-blocker.
        beta_blocker: bool,
    }

    /// The person's own earlier or off-drug test: two instants of it.
    OwnTest {
        /// At a low load.
        low: OwnPoint,
        /// At its peak.
        peak: OwnPoint,
    }

    /// An instant of an earlier test.
    OwnPoint {
        /// V̇O₂, mL/min.
        vo2_ml_min: f64,
        /// HR, /min.
        hr: f64,
    }

    /// Protocol as stated.
    Protocol {
        /// Ramp or steps.
        kind: ProtocolKind,
        /// Rise of the load, W/min.
        w_per_min: f64,
    }

    /// Perceived exertion; numbers only.
    BorgScore {
        /// The scale's range.
        scale: BorgScale,
        /// Breathlessness.
        breathlessness: f64,
        /// Legs.
        legs: f64,
    }

    /// An urgent finding.
    Urgent {
        /// What was found.
        fact: String,
        /// Who was told.
        told_to: String,
        /// Who told.
        by: String,
        /// When.
        at: String,
    }

    /// The ECG.
    Ecg {
        /// Whether a change was read.
        change: bool,
        /// Who read it.
        read_by: String,
        /// What was read.
        text: String,
    }

    /// Starts of the phases, s, the file's own time; any of them.
    Phases {
        /// Start of rest.
        rest: f64,
        /// Start of warm-up.
        warm_up: f64,
        /// Start of the increments.
        ramp: f64,
        /// Load end.
        recovery: f64,
    }
}

/// A recorded diagnosis.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Diagnosis {
    /// Closed code.
    pub code: DiagnosisCode,
    /// In words.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub text: Option<String>,
}

/// A timed event. Which numbers it may hold follows from its kind.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Event {
    /// Time, s, the file's own time; may be negative.
    pub t_s: f64,
    /// What it was.
    pub kind: EventKind,
    /// In words.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub text: Option<String>,
    /// Systolic pressure, mmHg (`bp`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sys_mmhg: Option<f64>,
    /// Diastolic pressure, mmHg (`bp`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub dia_mmhg: Option<f64>,
    /// Saturation, % (`spo2`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub spo2_pct: Option<f64>,
    /// Breathlessness (`borg`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub breathlessness: Option<f64>,
    /// Legs (`borg`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub legs: Option<f64>,
    /// PaO₂, mmHg (`gas-sample`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub pao2_mmhg: Option<f64>,
    /// PaCO₂, mmHg (`gas-sample`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub paco2_mmhg: Option<f64>,
    /// SaO₂, fraction 0–1 (`gas-sample`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub sao2: Option<f64>,
    /// Carboxyhaemoglobin, fraction 0–1 (`gas-sample`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub cohb: Option<f64>,
    /// Lactate, mmol/L (`lactate`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub lactate_mmol_l: Option<f64>,
    /// Inspiratory capacity, L (`ic-manoeuvre`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub ic_l: Option<f64>,
    /// New inspired oxygen fraction (`oxygen-change`).
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub fio2: Option<f64>,
}

impl Event {
    /// An event without numbers.
    #[must_use]
    pub fn new(t_s: f64, kind: EventKind) -> Self {
        Self {
            t_s,
            kind,
            text: None,
            sys_mmhg: None,
            dia_mmhg: None,
            spo2_pct: None,
            breathlessness: None,
            legs: None,
            pao2_mmhg: None,
            paco2_mmhg: None,
            sao2: None,
            cohb: None,
            lactate_mmol_l: None,
            ic_l: None,
            fio2: None,
        }
    }

    /// Its numbers: field name and value, in the order of the file format.
    #[must_use]
    pub fn numbers(&self) -> [(&'static str, Option<f64>); 12] {
        [
            ("sys_mmhg", self.sys_mmhg),
            ("dia_mmhg", self.dia_mmhg),
            ("spo2_pct", self.spo2_pct),
            ("breathlessness", self.breathlessness),
            ("legs", self.legs),
            ("pao2_mmhg", self.pao2_mmhg),
            ("paco2_mmhg", self.paco2_mmhg),
            ("sao2", self.sao2),
            ("cohb", self.cohb),
            ("lactate_mmol_l", self.lactate_mmol_l),
            ("ic_l", self.ic_l),
            ("fio2", self.fio2),
        ]
    }
}
