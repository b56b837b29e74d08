//! Person, test and safety in words. What is not stated prints as such.

use analysis::decisions::Phase;
use analysis::recording::Recording;
use analysis::results::Results;

use crate::clock;
use crate::facts_file::{EventKind, FactsFile, Mode, ProtocolKind, Rhythm, Sex};
use crate::presentation::values::{fixed, time};
use crate::presentation::wording::{plain_text as t, with};

/// The text, or "not stated".
pub(super) fn stated(text: Option<&str>) -> String {
    text.map(str::trim).filter(|s| !s.is_empty()).map_or_else(|| t("not-stated"), str::to_owned)
}

fn unstated(label: &str) -> String {
    with("fact-not-stated", &[("fact", t(label))])
}

/// A number with as many decimals as it was entered with, at most two.
fn entered(value: f64) -> String {
    let places = (0..2).find(|d| (value * 10_f64.powi(*d)).fract().abs() < 1e-9).unwrap_or(2);
    fixed(value, places as usize)
}

/// Laboratory, case, time of the test.
pub(super) fn identity(facts: &FactsFile) -> Vec<String> {
    let i = &facts.identity;
    let mut out = Vec::new();
    out.extend(i.lab.clone());
    out.extend(i.label.as_ref().map(|l| with("page-case", &[("label", l.clone())])));
    out.extend(i.number.as_ref().map(|n| with("page-number", &[("number", n.clone())])));
    out.extend(i.birth_date.as_ref().map(|d| with("page-born", &[("date", d.clone())])));
    out.extend(i.test_time.as_ref().map(|s| with("page-test-of", &[("time", clock::shown(s))])));
    if out.is_empty() {
        out.push(t("page-no-identity"));
    }
    out
}

/// The person.
pub(super) fn person(facts: &FactsFile) -> Vec<String> {
    let s = &facts.subject;
    let number = |value: Option<f64>, code: &str, label: &str, decimals: usize| {
        value.map_or_else(|| unstated(label), |v| with(code, &[("n", fixed(v, decimals))]))
    };
    let hb = s.hb.as_ref().and_then(|h| Some((h.value?, h.unit?, h.at)));
    vec![
        t(match s.sex {
            Some(Sex::Male) => "person-man",
            Some(Sex::Female) => "person-woman",
            None => "person-sex-unknown",
        }),
        number(s.age_years, "person-age", "fact-label-age", 0),
        number(s.height_cm, "person-height", "fact-label-height", 0),
        number(s.mass_kg, "person-mass", "fact-label-mass", 1),
        hb.map_or_else(
            || unstated("fact-label-hb"),
            |(value, unit, at)| {
                let code = match at {
                    Some(crate::facts_file::HbTime::Rest) => "person-hb-rest",
                    Some(crate::facts_file::HbTime::Peak) => "person-hb-peak",
                    None => "person-hb",
                };
                with(code, &[("value", format!("{} {}", entered(value), unit.code()))])
            },
        ),
        s.fev1_l.map_or_else(
            || unstated("fact-label-fev1"),
            |v| with("person-fev1", &[("n", entered(v))]),
        ),
        with("person-drug", &[("value", drug(facts))]),
        with("person-devices", &[("value", devices(facts))]),
        with("person-diagnoses", &[("value", diagnoses(facts))]),
    ]
}

fn drug(facts: &FactsFile) -> String {
    let Some(drug) = &facts.test.rate_slowing_drug else { return t("not-stated") };
    match drug.taken {
        None => t("not-stated"),
        Some(false) => t("person-none"),
        Some(true) => {
            let name = drug.name.clone().unwrap_or_else(|| t("person-drug-taken"));
            match drug.last_dose_h {
                Some(h) => with("person-drug-dose", &[("name", name), ("n", entered(h))]),
                None => name,
            }
        }
    }
}

fn list(items: Vec<String>) -> String {
    if items.is_empty() { t("person-none") } else { items.join(", ") }
}

fn devices(facts: &FactsFile) -> String {
    facts.test.devices.as_ref().map_or_else(
        || t("not-stated"),
        |d| list(d.iter().map(|d| d.code().replace('-', " ")).collect()),
    )
}

fn diagnoses(facts: &FactsFile) -> String {
    let words = |d: &crate::facts_file::Diagnosis| {
        d.text.clone().unwrap_or_else(|| d.code.code().replace('-', " "))
    };
    facts
        .test
        .diagnoses
        .as_ref()
        .map_or_else(|| t("not-stated"), |d| list(d.iter().map(words).collect()))
}

/// The test.
pub(super) fn test(facts: &FactsFile, results: &Results, recording: &Recording) -> Vec<String> {
    let f = &facts.test;
    let mut out = vec![
        match f.mode {
            Some(Mode::Cycle) => t("test-cycle"),
            Some(Mode::Treadmill) => t("test-treadmill"),
            None => unstated("fact-label-mode"),
        },
        protocol(facts, results, recording),
        match f.rhythm {
            Some(Rhythm::Sinus) => t("test-rhythm-sinus"),
            Some(Rhythm::AtrialFibrillation) => t("test-rhythm-af"),
            Some(Rhythm::Paced) => t("test-rhythm-paced"),
            Some(Rhythm::Other) => t("test-rhythm-other"),
            None => unstated("fact-label-rhythm"),
        },
        f.fio2.map_or_else(
            || t("test-air"),
            |x| with("test-fio2", &[("n", fixed(x, if x < 0.22 { 4 } else { 2 }))]),
        ),
        f.stop_reason.as_ref().map_or_else(
            || unstated("fact-label-stop"),
            |r| with("test-stopped", &[("reason", r.clone())]),
        ),
    ];
    out.push(f.limiting_symptom.as_ref().map_or_else(
        || unstated("fact-label-symptom"),
        |s| with("test-symptom", &[("symptom", s.clone())]),
    ));
    out.push(f.borg.as_ref().map_or_else(
        || unstated("fact-label-borg"),
        |b| {
            let n = |v: Option<f64>| v.map_or_else(|| t("not-stated"), entered);
            let scale = b.scale.map_or_else(|| t("not-stated"), |s| s.code().replace('-', "–"));
            let args =
                [("scale", scale), ("breathlessness", n(b.breathlessness)), ("legs", n(b.legs))];
            with("test-borg", &args)
        },
    ));
    out
}

fn protocol(facts: &FactsFile, results: &Results, recording: &Recording) -> String {
    let stated = facts.test.protocol.as_ref();
    let Some(kind) = stated.and_then(|p| p.kind) else { return unstated("fact-label-protocol") };
    let rate = stated.and_then(|p| p.w_per_min);
    let ramp = match (kind, rate) {
        (ProtocolKind::Ramp, Some(r)) => with("test-ramp", &[("rate", entered(r))]),
        (ProtocolKind::Steps, Some(r)) => with("test-steps", &[("rate", entered(r))]),
        (ProtocolKind::Ramp, None) => t("test-ramp-unrated"),
        (ProtocolKind::Steps, None) => t("test-steps-unrated"),
    };
    let Some((from, to)) = results.phases.window(Phase::Ramp) else { return ramp };
    let lasted = ("time", time(to - from));
    let top = recording.load.t_s.iter().zip(&recording.load.value);
    let top = top.filter(|(t, _)| **t <= to).map(|(_, w)| *w).fold(f64::NAN, f64::max);
    if top.is_nan() {
        return with("test-lasted-unloaded", &[("ramp", ramp), lasted]);
    }
    let watts = ("watts", format!("{} W", fixed(top, 0)));
    with("test-lasted", &[("ramp", ramp), lasted, watts])
}

/// The safety line: events, ECG, urgent finding, treatment.
pub(super) fn safety(facts: &FactsFile) -> Vec<String> {
    let mut out = Vec::new();
    let notable =
        |k: EventKind| matches!(k, EventKind::Ecg | EventKind::Arrhythmia | EventKind::Symptom);
    for event in facts.events.iter().filter(|e| notable(e.kind)) {
        let what = event.text.clone().unwrap_or_else(|| event.kind.code().to_owned());
        out.push(with("safety-event", &[("what", what), ("time", time(event.t_s))]));
    }
    if let Some(ecg) = &facts.test.ecg {
        let reader = stated(ecg.read_by.as_deref());
        match ecg.change {
            Some(true) => out.push(with("safety-ecg-change", &[("reader", reader)])),
            Some(false) => out.push(with("safety-ecg-no-change", &[("reader", reader)])),
            None => out.push(t("safety-ecg-unread")),
        }
    } else {
        out.push(t("safety-ecg-unread"));
    }
    match &facts.test.urgent {
        Some(u) if u.fact.is_some() => {
            let args = [
                ("fact", stated(u.fact.as_deref())),
                ("to", stated(u.told_to.as_deref())),
                ("by", stated(u.by.as_deref())),
                ("at", u.at.as_ref().map_or_else(|| t("not-stated"), |at| clock_time(at))),
            ];
            out.push(with("safety-urgent", &args));
        }
        _ => out.push(t("safety-urgent-none")),
    }
    let treatments: Vec<&crate::facts_file::Event> =
        facts.events.iter().filter(|e| e.kind == EventKind::Treatment).collect();
    if treatments.is_empty() {
        out.push(t("safety-no-treatment"));
    }
    for event in treatments {
        let what = stated(event.text.as_deref());
        out.push(with("safety-event", &[("what", what), ("time", time(event.t_s))]));
    }
    out
}

/// A clock time ends in `h`, so that it is not read as a test time.
fn clock_time(at: &str) -> String {
    if clock::parse(at).is_ok() {
        return clock::shown(at);
    }
    let digits = at.chars().all(|c| c.is_ascii_digit() || c == ':');
    if digits { format!("{at} h") } else { at.to_owned() }
}
