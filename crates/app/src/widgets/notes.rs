//! Timed events as short notes.

use analysis::facts::EventKind;

use crate::chart::column::Side;
use crate::context::Context;

/// A note at a time.
#[derive(Clone, Debug, PartialEq)]
pub struct Note {
    /// Time, s.
    pub t_s: f64,
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

/// The notes under a column.
#[must_use]
pub fn of_side(cx: &Context<'_>, wanted: Side) -> Vec<Note> {
    cx.facts
        .events
        .iter()
        .filter(|event| side(&event.kind) == wanted)
        .map(|event| Note {
            t_s: event.t_s,
            text: words(&event.kind, cx.grid.narrow),
            strong: strong(&event.kind),
            side: wanted,
        })
        .collect()
}
