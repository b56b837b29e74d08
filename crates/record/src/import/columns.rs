//! Header cells to quantities: whole names of a closed table, never a part of a name.

use analysis::quantity::Quantity;
use unicode_normalization::UnicodeNormalization;

use super::units;
use crate::provenance::Target;

/// What a name may stand for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Name {
    /// Any of these.
    Reads(&'static [Target]),
    /// Understood, but nothing reads it; the code says why.
    Unread(&'static str),
}

const fn q(quantity: Quantity) -> Target {
    Target::Quantity(quantity)
}

/// Names in the form of [`plain`].
const NAMES: &[(Name, &[&str])] = &[
    (
        Name::Reads(&[Target::Time]),
        &[
            "t",
            "time",
            "zeit",
            "temps",
            "tiempo",
            "tempo",
            "elapsed",
            "elapsedtime",
            "duration",
            "clock",
            "testtime",
            "timestamp",
            "uhrzeit",
        ],
    ),
    (Name::Reads(&[q(Quantity::Vo2)]), &["vo2", "o2uptake", "oxygenuptake", "vo2stpd"]),
    (Name::Reads(&[q(Quantity::Vco2)]), &["vco2", "co2output", "carbondioxideoutput", "vco2stpd"]),
    (
        Name::Reads(&[q(Quantity::Ve)]),
        &["ve", "vebtps", "vent", "ventilation", "minuteventilation", "mv", "amv"],
    ),
    (Name::Reads(&[q(Quantity::Vt)]), &["vt", "vtbtps", "tv", "tidalvolume", "azv"]),
    (
        Name::Reads(&[q(Quantity::Fr)]),
        &[
            "bf",
            "fr",
            "f",
            "af",
            "resprate",
            "respiratoryrate",
            "breathingfrequency",
            "breaths/min",
            "fb",
        ],
    ),
    (Name::Reads(&[q(Quantity::Fr), q(Quantity::RrInterval), q(Quantity::SysBp)]), &["rr"]),
    (
        Name::Reads(&[q(Quantity::RrInterval)]),
        &["rrinterval", "rrintervals", "r-r", "r-rinterval", "rri", "nn", "ibi"],
    ),
    (
        Name::Reads(&[q(Quantity::Hr)]),
        &[
            "hr",
            "hf",
            "fc",
            "pr",
            "pulse",
            "puls",
            "heartrate",
            "herzfrequenz",
            "fh",
            "frequencecardiaque",
        ],
    ),
    (Name::Reads(&[q(Quantity::Rer)]), &["rer", "r", "rq", "rq/rer"]),
    (
        Name::Reads(&[q(Quantity::O2Pulse)]),
        &["vo2/hr", "vo2/hf", "o2pulse", "o2puls", "oxygenpulse", "vo2/fc"],
    ),
    (Name::Reads(&[q(Quantity::EqO2)]), &["ve/vo2", "eqo2", "vevo2"]),
    (Name::Reads(&[q(Quantity::EqCo2)]), &["ve/vco2", "eqco2", "vevco2"]),
    (Name::Reads(&[q(Quantity::Peto2)]), &["peto2", "eto2", "endtidalo2"]),
    (Name::Reads(&[q(Quantity::Petco2)]), &["petco2", "etco2", "endtidalco2"]),
    (
        Name::Reads(&[q(Quantity::WorkRate)]),
        &[
            "wr", "load", "power", "watt", "watts", "w", "work", "workrate", "last", "leistung",
            "charge", "workload", "p",
        ],
    ),
    (
        Name::Reads(&[q(Quantity::Speed)]),
        &["speed", "v", "belt", "beltspeed", "geschwindigkeit", "vitesse"],
    ),
    (
        Name::Reads(&[q(Quantity::Grade)]),
        &["grade", "incline", "slope", "elevation", "gefalle", "steigung", "pente"],
    ),
    (Name::Reads(&[q(Quantity::Cadence)]), &["rpm", "cadence", "revs", "drehzahl", "pedalrate"]),
    (Name::Reads(&[q(Quantity::Spo2)]), &["spo2", "sat", "o2sat"]),
    (
        Name::Reads(&[q(Quantity::SysBp)]),
        &["sbp", "bps", "sys", "bpsys", "systolic", "rrsys", "nibpsys", "sysbp"],
    ),
    (
        Name::Reads(&[q(Quantity::DiaBp)]),
        &["dbp", "bpd", "dia", "bpdia", "diastolic", "rrdia", "nibpdia", "diabp"],
    ),
    (Name::Reads(&[Target::BpPair]), &["bp", "bloodpressure", "blutdruck", "nibp", "sys/dia"]),
    (Name::Reads(&[Target::BreathDuration]), &["ttot", "breathduration", "tb"]),
    (Name::Unread("per-mass"), &["vo2/kg", "relvo2", "vo2/bw", "vo2kg", "vo2rel"]),
    (Name::Unread("fraction"), &["feto2", "fetco2", "feo2", "feco2", "fio2", "fico2"]),
    (Name::Unread("saturation-source"), &["sao2"]),
    (
        Name::Unread("event-like"),
        &[
            "borg",
            "rpe",
            "lac",
            "lactate",
            "laktat",
            "phase",
            "event",
            "comment",
            "marker",
            "stage",
            "stufe",
            "bemerkung",
        ],
    ),
    (
        Name::Unread("derived"),
        &["vd/vt", "br", "hrr", "mets", "met", "ee", "vt/ti", "ti/ttot", "at", "o2debt"],
    ),
    (
        Name::Unread("not-used"),
        &["ti", "te", "breath", "no", "nr", "index", "date", "datum", "pb", "temp", "humidity"],
    ),
];

/// A name in its plainest form: compatibility characters and marks folded, apostrophes, points,
/// underscores, brackets and spaces dropped, lower case.
#[must_use]
pub fn plain(text: &str) -> String {
    text.nfkd()
        .filter(|c| !unicode_normalization::char::is_combining_mark(*c))
        .filter(|c| !c.is_whitespace())
        .filter(|c| {
            !matches!(c, '\'' | '’' | '‘' | '´' | '`' | '.' | '_' | '(' | ')' | '[' | ']' | '˙')
        })
        .map(|c| match c {
            '–' | '\u{2212}' | '\u{2010}' | '\u{2011}' => '-',
            other => other,
        })
        .flat_map(char::to_lowercase)
        .collect()
}

/// The conditions of a gas volume that a header may state.
const CONDITIONS: &[&str] = &["stpd", "btps", "atps"];

/// A header cell taken apart.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Header {
    /// What the name may stand for; `None` where the table does not know it.
    pub name: Option<Name>,
    /// The unit text as written, if any.
    pub unit: String,
    /// Whether the unit stands in a row of units, not in the header cell.
    pub unit_below: bool,
    /// `stpd`, `btps` or `atps`, where stated.
    pub condition: Option<&'static str>,
}

fn lookup(name: &str) -> Option<Name> {
    let name = plain(name);
    NAMES.iter().find(|(_, list)| list.contains(&name.as_str())).map(|(n, _)| *n)
}

/// Takes a header cell apart: name, unit, condition.
#[must_use]
pub fn header(text: &str) -> Header {
    let (text, condition) = without_condition(text);
    for (name, unit) in splits(&text) {
        if let Some(found) = lookup(&name) {
            let unit = unit.trim().to_owned();
            return Header { name: Some(found), unit, unit_below: false, condition };
        }
    }
    Header { condition, ..Header::default() }
}

/// The condition words taken out, the first one found reported.
pub(crate) fn without_condition(text: &str) -> (String, Option<&'static str>) {
    let lower = text.to_lowercase();
    for condition in CONDITIONS {
        let bare = |c: Option<char>| c.is_none_or(|c| !c.is_alphanumeric());
        if let Some(at) = lower.find(condition)
            && lower.len() == text.len()
            && bare(lower[..at].chars().next_back())
            && bare(lower[at + 4..].chars().next())
        {
            let kept = format!("{} {}", &text[..at], &text[at + 4..]);
            let kept = kept.replace("( )", "").replace("[ ]", "").replace(", ]", "]");
            return (kept.trim().to_owned(), Some(condition));
        }
    }
    (text.to_owned(), None)
}

/// Possible (name, unit) splits, the surest first: a bracket, a comma, the whole cell, then any
/// space, slash between spaces or underscore after which a known unit stands.
fn splits(text: &str) -> Vec<(String, String)> {
    let mut out = Vec::new();
    for (open, close) in [('[', ']'), ('(', ')'), ('{', '}')] {
        if let (Some(a), Some(b)) = (text.find(open), text.rfind(close))
            && a < b
        {
            let rest = format!("{} {}", &text[..a], &text[b + close.len_utf8()..]);
            out.push((rest, text[a + 1..b].to_owned()));
        }
    }
    if let Some((name, unit)) = text.split_once([',', ';', '\n']) {
        out.push((name.to_owned(), unit.to_owned()));
    }
    out.push((text.to_owned(), String::new()));
    for (at, c) in text.char_indices().filter(|(_, c)| matches!(c, ' ' | '_')) {
        let unit = text[at + c.len_utf8()..].trim_start_matches(['/', ' ']);
        if units::is_unit_like(unit) {
            out.push((text[..at].to_owned(), unit.to_owned()));
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_unique_and_plain() {
        let mut seen = std::collections::BTreeSet::new();
        for (_, list) in NAMES {
            for name in *list {
                assert_eq!(plain(name), *name);
                assert!(seen.insert(name), "{name} twice");
            }
        }
    }

    #[test]
    fn headers_as_exports_write_them() {
        let reads = |text: &str| match header(text) {
            Header { name: Some(Name::Reads(list)), unit, .. } => (list.to_vec(), unit),
            other => panic!("{text}: {other:?}"),
        };
        let vo2 = vec![q(Quantity::Vo2)];
        for text in ["V̇O₂ [mL/min]", "V'O2 (mL/min)", "VO2, mL/min", "VO2 mL/min", "V’O2 / mL/min"]
        {
            assert_eq!(reads(text), (vo2.clone(), "mL/min".to_owned()), "{text}");
        }
        assert_eq!(reads("VO2\n[mL/min]"), (vo2.clone(), "mL/min".to_owned()));
        assert_eq!(reads("vo2_ml_min").0, vo2);
        assert_eq!(reads("hr_per_min").1, "per_min");
        assert_eq!(reads("Gefälle").0, [q(Quantity::Grade)]);
        assert_eq!(reads("time_s"), (vec![Target::Time], "s".to_owned()));
        assert_eq!(header("VE [L/min] BTPS").condition, Some("btps"));
        assert_eq!(reads("VE [L/min] BTPS").1, "L/min");
        assert_eq!(reads("VO2 (L/min STPD)").1.trim(), "L/min");
    }

    #[test]
    fn a_part_of_a_name_is_never_enough() {
        for text in ["VO2 %pred", "VO2max", "EqO2 slope", "VO2 predicted", "delta VO2", ""] {
            assert_eq!(header(text).name, None, "{text}");
        }
        assert_eq!(header("VO2/kg [mL/kg/min]").name, Some(Name::Unread("per-mass")));
    }
}
