//! From the file's fields to what the engine reads. Identity and free text stay behind.

use analysis::decisions::PhaseStarts;
use analysis::facts as engine;

use super::codes::{Device, EventKind};
use super::types::{Event, FactsFile, Hb, OwnPoint, OwnTest, Subject, Test};

/// The engine's facts.
pub(super) fn facts(file: &FactsFile) -> engine::Facts {
    let mut events: Vec<engine::Event> = file.events.iter().map(event).collect();
    events.sort_by(|a, b| a.t_s.total_cmp(&b.t_s));
    engine::Facts { subject: subject(&file.subject), test: test(&file.test), events }
}

/// The reader's boundaries.
pub(super) fn phases(file: &FactsFile) -> PhaseStarts {
    let p = &file.phases;
    PhaseStarts { rest: p.rest, warm_up: p.warm_up, ramp: p.ramp, recovery: p.recovery }
}

fn subject(s: &Subject) -> engine::Subject {
    engine::Subject {
        age_years: s.age_years,
        sex: s.sex.map(super::Sex::to_engine),
        height_cm: s.height_cm,
        mass_kg: s.mass_kg,
        hb: s.hb.as_ref().and_then(haemoglobin),
        cohb: s.cohb,
        fev1_l: s.fev1_l,
        tlc_l: s.tlc_l,
        mvv_l_min: s.mvv_l_min,
    }
}

fn haemoglobin(hb: &Hb) -> Option<engine::Haemoglobin> {
    Some(engine::Haemoglobin {
        g_per_l: hb.value? * hb.unit?.g_per_l(),
        at: hb.at.map(super::HbTime::to_engine),
    })
}

fn test(t: &Test) -> engine::TestFacts {
    let drug = t.rate_slowing_drug.clone().unwrap_or_default();
    engine::TestFacts {
        indication: t.indication.map(super::Indication::to_engine),
        diagnoses: t.diagnoses.as_ref().map(|d| d.iter().map(|d| d.code.to_engine()).collect()),
        devices: t.devices.as_ref().map(|d| d.iter().copied().map(Device::to_engine).collect()),
        rhythm: t.rhythm.map(super::Rhythm::to_engine),
        frequent_ectopy: t.frequent_ectopy,
        rate_slowing_drug: engine::RateSlowingDrug {
            taken: drug.taken,
            last_dose_h: drug.last_dose_h,
            beta_blocker: drug.beta_blocker,
        },
        mode: t.mode.map(super::Mode::to_engine),
        protocol: t.protocol.as_ref().map(|p| engine::Protocol {
            kind: p.kind.map(super::ProtocolKind::to_engine),
            w_per_min: p.w_per_min,
        }),
        fio2: t.fio2,
        operation: t.operation_kind.map(super::OperationKind::to_engine),
        stop: t.stop_kind.map(super::StopKind::to_engine),
        ecg: engine::Ecg { change: t.ecg.as_ref().and_then(|e| e.change) },
        spo2_confirmed: t.spo2_confirmed,
        borg: t.borg.as_ref().and_then(|b| {
            Some(engine::Borg {
                top: b.scale?.range().1,
                breathlessness: b.breathlessness,
                legs: b.legs,
            })
        }),
        own_test: t.own_test.as_ref().and_then(own_test),
        recovery_mode: t.recovery_mode.map(super::RecoveryMode::to_engine),
    }
}

fn own_test(own: &OwnTest) -> Option<engine::OwnTest> {
    let point = |p: &Option<OwnPoint>| p.as_ref().and_then(|p| Some((p.vo2_ml_min?, p.hr?)));
    Some(engine::OwnTest { low: point(&own.low)?, peak: point(&own.peak)? })
}

fn event(e: &Event) -> engine::Event {
    let kind = match e.kind {
        EventKind::Bp => engine::EventKind::Bp { sys: e.sys_mmhg, dia: e.dia_mmhg },
        EventKind::Spo2 => engine::EventKind::Spo2(e.spo2_pct),
        EventKind::Borg => {
            engine::EventKind::Borg { breathlessness: e.breathlessness, legs: e.legs }
        }
        EventKind::Ecg => engine::EventKind::Ecg,
        EventKind::Arrhythmia => engine::EventKind::Arrhythmia,
        EventKind::Symptom => engine::EventKind::Symptom,
        EventKind::GasSample => engine::EventKind::GasSample {
            pao2: e.pao2_mmhg,
            paco2: e.paco2_mmhg,
            sao2: e.sao2,
            cohb: e.cohb,
        },
        EventKind::Lactate => engine::EventKind::Lactate(e.lactate_mmol_l),
        EventKind::IcManoeuvre => engine::EventKind::IcManoeuvre(e.ic_l),
        EventKind::Cough => engine::EventKind::Cough,
        EventKind::Leak => engine::EventKind::Leak,
        EventKind::Talking => engine::EventKind::Talking,
        EventKind::CadenceFade => engine::EventKind::CadenceFade,
        EventKind::RailGrip => engine::EventKind::RailGrip,
        EventKind::OxygenChange => engine::EventKind::OxygenChange,
        EventKind::Treatment => engine::EventKind::Treatment,
        EventKind::Comment => engine::EventKind::Comment,
    };
    engine::Event { t_s: e.t_s, kind }
}
