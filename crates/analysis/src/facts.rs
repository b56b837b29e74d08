//! What is known about the person and the test, apart from the breaths. Every field may be unknown.
//!
//! Identity (name, number, dates) is deliberately absent: it never enters this crate.

/// Sex as the prediction equations define it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sex {
    /// Male.
    Male,
    /// Female.
    Female,
}

/// When haemoglobin was sampled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum HbTime {
    /// At rest.
    Rest,
    /// At peak exercise: haemoconcentration is already in it.
    Peak,
}

/// Haemoglobin.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Haemoglobin {
    /// g/L.
    pub g_per_l: f64,
    /// When it was sampled; not stated is read as at rest.
    pub at: Option<HbTime>,
}

/// The person, without identity.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Subject {
    /// Age at the test, years.
    pub age_years: Option<f64>,
    /// Sex for the equations.
    pub sex: Option<Sex>,
    /// Height, cm.
    pub height_cm: Option<f64>,
    /// Body mass, kg.
    pub mass_kg: Option<f64>,
    /// Haemoglobin.
    pub hb: Option<Haemoglobin>,
    /// Carboxyhaemoglobin, fraction 0–1, where measured.
    pub cohb: Option<f64>,
    /// FEV₁ before the test, L.
    pub fev1_l: Option<f64>,
    /// Total lung capacity, L.
    pub tlc_l: Option<f64>,
    /// Measured maximal voluntary ventilation, L/min.
    pub mvv_l_min: Option<f64>,
}

/// Cardiac rhythm during the test.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rhythm {
    /// Sinus rhythm.
    Sinus,
    /// Atrial fibrillation.
    AtrialFibrillation,
    /// Paced.
    Paced,
    /// Another rhythm.
    Other,
}

/// Ergometer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Mode {
    /// Cycle ergometer.
    Cycle,
    /// Treadmill.
    Treadmill,
}

/// Increment of the protocol as stated.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ProtocolKind {
    /// Continuous ramp.
    Ramp,
    /// Steps.
    Steps,
}

/// Stated protocol.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Protocol {
    /// Ramp or steps.
    pub kind: Option<ProtocolKind>,
    /// Rise, W/min.
    pub w_per_min: Option<f64>,
}

/// A recorded diagnosis: context, never re-offered as a candidate.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Diagnosis {
    /// Intracardiac or intrapulmonary shunt.
    Shunt,
    /// Fontan circulation.
    Fontan,
    /// Transplanted heart.
    Transplant,
    /// Congenital heart disease.
    Congenital,
    /// Pregnancy.
    Pregnancy,
    /// Heart failure.
    HeartFailure,
    /// Pulmonary hypertension.
    PulmonaryHypertension,
    /// Chronic obstructive pulmonary disease.
    Copd,
    /// Interstitial lung disease.
    Ild,
    /// Another one (its text stays in `record`).
    Other,
}

/// Implanted device.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Device {
    /// Pacemaker.
    Pacemaker,
    /// Implantable defibrillator.
    Icd,
    /// Left-ventricular assist device.
    Lvad,
    /// Another device.
    Other,
}

/// Why the test was asked for; chooses the lens under which published classes appear.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Indication {
    /// Heart failure.
    HeartFailure,
    /// Pre-operative.
    Preoperative,
    /// Pulmonary hypertension.
    PulmonaryHypertension,
    /// Chronic lung disease.
    ChronicLung,
    /// Unexplained breathlessness.
    UnexplainedBreathlessness,
    /// Athlete.
    Athlete,
    /// Stated as none of these.
    None,
}

/// Drug that slows the heart.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct RateSlowingDrug {
    /// Whether one was taken; `None` = not stated.
    pub taken: Option<bool>,
    /// Hours since the last dose.
    pub last_dose_h: Option<f64>,
    /// Whether it is a beta-blocker, where stated.
    pub beta_blocker: Option<bool>,
}

/// Kind of stop reason, closed set beside the free text (which stays in `record`).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StopKind {
    /// Leg fatigue or general exhaustion.
    Fatigue,
    /// Breathlessness.
    Breathlessness,
    /// Ischaemic symptom or ECG change.
    Ischaemia,
    /// Blood pressure.
    BloodPressure,
    /// Rhythm.
    Rhythm,
    /// Fall of oxygen saturation.
    Desaturation,
    /// Anything else.
    Other,
}

/// Kind of a planned operation, closed set beside the free text (which stays in `record`).
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum OperationKind {
    /// Lung resection.
    LungResection,
    /// Major abdominal surgery other than colorectal.
    MajorAbdominal,
    /// Colorectal surgery.
    Colorectal,
    /// Any other.
    Other,
}

/// The ECG as read by a person.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Ecg {
    /// Whether a change was read; `None` = not stated.
    pub change: Option<bool>,
}

/// The test.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct TestFacts {
    /// Indication lens.
    pub indication: Option<Indication>,
    /// Recorded diagnoses; `None` = not stated, empty = stated as none.
    pub diagnoses: Option<Vec<Diagnosis>>,
    /// Devices; `None` = not stated.
    pub devices: Option<Vec<Device>>,
    /// Rhythm; `None` = not stated.
    pub rhythm: Option<Rhythm>,
    /// Whether ectopy was frequent.
    pub frequent_ectopy: Option<bool>,
    /// Rate-slowing drug.
    pub rate_slowing_drug: RateSlowingDrug,
    /// Ergometer.
    pub mode: Option<Mode>,
    /// Stated protocol.
    pub protocol: Option<Protocol>,
    /// Inspired oxygen fraction; `None` = room air assumed.
    pub fio2: Option<f64>,
    /// Closed kind of the planned operation.
    pub operation: Option<OperationKind>,
    /// Closed kind of the stop reason.
    pub stop: Option<StopKind>,
    /// ECG.
    pub ecg: Ecg,
    /// Whether the oximeter trace was confirmed by the reader.
    pub spo2_confirmed: Option<bool>,
    /// Perceived breathlessness and legs at the end, as numbers, with the scale's top.
    pub borg: Option<Borg>,
    /// The person's own earlier or off-drug test.
    pub own_test: Option<OwnTest>,
    /// Recovery posture and activity; `None` = not stated.
    pub recovery_mode: Option<RecoveryMode>,
}

/// Numbers on a perceived-exertion scale.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Borg {
    /// Top of the scale (10 or 20).
    pub top: f64,
    /// Breathlessness.
    pub breathlessness: Option<f64>,
    /// Legs.
    pub legs: Option<f64>,
}

/// The person's own earlier or off-drug test, as two instants of it: V̇O₂ (mL/min) and HR (/min).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OwnTest {
    /// At a low load.
    pub low: (f64, f64),
    /// At its peak.
    pub peak: (f64, f64),
}

/// How the person recovered.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RecoveryMode {
    /// Active cool-down, upright.
    Active,
    /// Passive, seated.
    Passive,
    /// Supine.
    Supine,
}

/// What a timed event was.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum EventKind {
    /// Blood pressure, mmHg.
    Bp {
        /// Systolic.
        sys: Option<f64>,
        /// Diastolic.
        dia: Option<f64>,
    },
    /// Saturation by pulse oximetry, %.
    Spo2(Option<f64>),
    /// Perceived exertion.
    Borg {
        /// Breathlessness.
        breathlessness: Option<f64>,
        /// Legs.
        legs: Option<f64>,
    },
    /// ECG note.
    Ecg,
    /// Arrhythmia.
    Arrhythmia,
    /// Symptom.
    Symptom,
    /// Arterial or capillary gases.
    GasSample {
        /// PaO₂, mmHg.
        pao2: Option<f64>,
        /// PaCO₂, mmHg.
        paco2: Option<f64>,
        /// SaO₂, fraction.
        sao2: Option<f64>,
        /// COHb, fraction.
        cohb: Option<f64>,
    },
    /// Lactate, mmol/L.
    Lactate(Option<f64>),
    /// Inspiratory-capacity manoeuvre, L.
    IcManoeuvre(Option<f64>),
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

/// A timed event; its text stays in `record`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Event {
    /// Time, s, the file's own time.
    pub t_s: f64,
    /// What it was.
    pub kind: EventKind,
}

/// Everything the engine knows besides the breaths.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Facts {
    /// The person.
    pub subject: Subject,
    /// The test.
    pub test: TestFacts,
    /// Timed events, in the order of time.
    pub events: Vec<Event>,
}
