//! Timed events as short notes.

use analysis::facts::EventKind;

use crate::chart::column::Side;
use crate::context::Context;

/// A note at a time.
#[derive(Clone, Debug, PartialEq)]
pub struct Note {
    /// Time, s.
    pub t_s: f64,
    /// Closed code of its kind.
    pub code: &'static str,
    /// In words.
    pub text: String,
    /// Whether it is set in ink rather than grey.
    pub strong: bool,
    /// The column under which it stands.
    pub side: Side,
}

fn number(value: Option<f64>) -> String {
    value.map_or_else(|| "–".to_owned(), |v| format!("{v}"))
}

/// The note of one event; `narrow` shortens it.
#[must_use]
pub fn words(kind: &EventKind, narrow: bool) -> String {
    match kind {
        EventKind::Bp { sys, dia } => {
            let lead = if narrow { "" } else { "BP " };
            format!("{lead}{}/{}", number(*sys), number(*dia))
        }
        EventKind::Spo2(v) => format!("SpO₂ {} %", number(*v)),
        EventKind::Borg { breathlessness, legs } => {
            format!("breath {} legs {}", number(*breathlessness), number(*legs))
        }
        EventKind::Ecg => "ECG".into(),
        EventKind::Arrhythmia => "arrhythmia".into(),
        EventKind::Symptom => "symptom".into(),
        EventKind::GasSample { .. } => "gas sample".into(),
        EventKind::Lactate(v) => format!("lactate {}", number(*v)),
        EventKind::IcManoeuvre(v) => format!("IC {} L", number(*v)),
        EventKind::Cough => "cough".into(),
        EventKind::Leak => "leak".into(),
        EventKind::Talking => "talking".into(),
        EventKind::CadenceFade => "cadence fades".into(),
        EventKind::RailGrip => "grips rail".into(),
        EventKind::OxygenChange => "O₂ changed".into(),
        EventKind::Treatment => "treatment".into(),
        EventKind::Comment => "comment".into(),
    }
}

fn side(kind: &EventKind) -> Side {
    match kind {
        EventKind::Bp { .. }
        | EventKind::Spo2(_)
        | EventKind::Ecg
        | EventKind::Arrhythmia
        | EventKind::Treatment
        | EventKind::CadenceFade
        | EventKind::RailGrip => Side::Heart,
        _ => Side::Breath,
    }
}

fn strong(kind: &EventKind) -> bool {
    matches!(
        kind,
        EventKind::Ecg | EventKind::Arrhythmia | EventKind::Symptom | EventKind::Treatment
    )
}

/// The notes under a column, with the free text of the facts where there is one.
#[must_use]
pub fn of_side(cx: &Context<'_>, wanted: Side) -> Vec<Note> {
    let texts = &cx.facts_file.events;
    cx.facts
        .events
        .iter()
        .filter(|event| side(&event.kind) == wanted)
        .map(|event| {
            let free = texts
                .iter()
                .find(|e| e.t_s == event.t_s && e.kind.code() == code(&event.kind))
                .and_then(|e| e.text.clone());
            let plain = words(&event.kind, cx.grid.narrow);
            let text = match free {
                Some(free) if is_wordless(&event.kind) => free,
                Some(free) => format!("{plain}: {free}"),
                None => plain,
            };
            Note {
                t_s: event.t_s,
                code: code(&event.kind),
                text,
                strong: strong(&event.kind),
                side: wanted,
            }
        })
        .collect()
}

/// Kinds whose own name says less than the text.
fn is_wordless(kind: &EventKind) -> bool {
    matches!(kind, EventKind::Comment | EventKind::Symptom | EventKind::Treatment)
}

/// The closed code of a kind, as in the facts file.
#[must_use]
pub fn code(kind: &EventKind) -> &'static str {
    match kind {
        EventKind::Bp { .. } => "bp",
        EventKind::Spo2(_) => "spo2",
        EventKind::Borg { .. } => "borg",
        EventKind::Ecg => "ecg",
        EventKind::Arrhythmia => "arrhythmia",
        EventKind::Symptom => "symptom",
        EventKind::GasSample { .. } => "gas-sample",
        EventKind::Lactate(_) => "lactate",
        EventKind::IcManoeuvre(_) => "ic-manoeuvre",
        EventKind::Cough => "cough",
        EventKind::Leak => "leak",
        EventKind::Talking => "talking",
        EventKind::CadenceFade => "cadence-fade",
        EventKind::RailGrip => "rail-grip",
        EventKind::OxygenChange => "oxygen-change",
        EventKind::Treatment => "treatment",
        EventKind::Comment => "comment",
    }
}
