//! Every published cut-off of `assets/references/cut-offs.csv`, through the public interface: just
//! below, at, and just above.

use analysis::decisions::{Decisions, PhaseStarts};
use analysis::facts::{Event, EventKind, Facts};
use analysis::predicted::classes::{
    Class, ISHLT, ISHLT_BLOCKED, ISHLT_PERCENT, ISHLT_SLOPE, TABLE,
};
use analysis::quantity::Quantity;
use analysis::recording::Recording;
use analysis::results::{At, Results};
use analysis::settings::Settings;

/// How far "just" is, relative.
const STEP: f64 = 1e-6;

struct Row {
    outcome: String,
    method: String,
    case: String,
    cut_off: f64,
    /// Words below, at and above.
    words: [String; 3],
    doi: String,
}

fn rows() -> Vec<Row> {
    let table = include_str!("../../../assets/references/cut-offs.csv");
    let mut reader = csv::ReaderBuilder::new().comment(Some(b'#')).from_reader(table.as_bytes());
    let header = reader.headers().expect("a header").clone();
    reader
        .records()
        .map(|record| {
            let record = record.expect("a row");
            let cell = |name: &str| {
                let at = header.iter().position(|h| h == name).expect("a column of that name");
                record[at].to_owned()
            };
            Row {
                outcome: cell("outcome"),
                method: cell("method"),
                case: cell("case"),
                cut_off: cell("cut_off").parse().expect("a number"),
                words: ["below", "at", "above"].map(cell),
                doi: cell("doi"),
            }
        })
        .collect()
}

fn classes() -> impl Iterator<Item = &'static Class> {
    TABLE.iter().chain([&ISHLT, &ISHLT_BLOCKED, &ISHLT_PERCENT, &ISHLT_SLOPE])
}

/// A test whose values are whole numbers held through each stretch, so that means are exact.
struct Steady {
    rest: (f64, f64),
    /// V̇O₂ of the last two minutes; it rises on where `rising`.
    peak_vo2: f64,
    rising: bool,
    peak_vco2: f64,
    peak_ve: f64,
    peak_hr: f64,
}

impl Default for Steady {
    fn default() -> Self {
        Self {
            rest: (300.0, 240.0),
            peak_vo2: 2000.0,
            rising: false,
            peak_vco2: 1800.0,
            peak_ve: 60.0,
            peak_hr: 120.0,
        }
    }
}

impl Steady {
    /// Breaths of 2 s: rest to 120 s, warm-up to 300 s, increments to 900 s, recovery to 1,020 s.
    fn results(&self, facts: &Facts) -> Results {
        let end: Vec<f64> = (1..=510).map(|k| 2.0 * f64::from(k)).collect();
        let of = |rest: f64, peak: f64, rising: bool| {
            let value = move |t: &f64| {
                Some(match *t {
                    t if t <= 120.0 || t > 900.0 => rest,
                    t if t <= 300.0 => 1.5 * rest,
                    t if t > 780.0 && rising => peak + (t - 900.0),
                    t if t > 780.0 => peak,
                    t => 1.5 * rest + 0.8 * (peak - 1.5 * rest) * (t - 300.0) / 480.0,
                })
            };
            end.iter().map(value).collect()
        };
        let columns = [
            (Quantity::Vo2, of(self.rest.0, self.peak_vo2, self.rising)),
            (Quantity::Vco2, of(self.rest.1, self.peak_vco2, false)),
            (Quantity::Ve, of(9.0, self.peak_ve, false)),
            (Quantity::Hr, of(60.0, self.peak_hr, false)),
        ];
        let breaths = analysis::breaths::Breaths::new(end.clone(), None, columns.into());
        let recording = Recording { breaths: breaths.expect("rising times"), ..Default::default() };
        let decisions = Decisions {
            phases: PhaseStarts {
                rest: Some(0.0),
                warm_up: Some(120.0),
                ramp: Some(300.0),
                recovery: Some(900.0),
            },
            ..Default::default()
        };
        analysis::derive(&recording, facts, &decisions, &Settings::default())
    }
}

fn word(results: &Results, id: &str, at: At) -> String {
    let outcome = results.primary(id, at).expect("an outcome");
    outcome.word().unwrap_or_else(|| panic!("{id}: {:?}", outcome.reason)).to_owned()
}

fn present(yes: bool) -> String {
    String::from(if yes { "present" } else { "absent" })
}

/// What the program says where the deciding value is `value`.
fn said(row: &Row, value: f64) -> String {
    if row.outcome.starts_with("class-") {
        let class = classes()
            .find(|c| c.id == row.outcome && c.method == row.method)
            .unwrap_or_else(|| panic!("no class {} {}", row.outcome, row.method));
        return class.band(value).word.to_owned();
    }
    let mut facts = Facts::default();
    facts.subject.age_years = row.case.strip_prefix("age ").map(|age| age.parse().expect("years"));
    let steady = Steady::default();
    match (row.outcome.as_str(), row.case.as_str()) {
        ("effort-rer", _) => {
            let peak_vco2 = 2000.0 * value;
            word(&Steady { peak_vco2, ..steady }.results(&facts), "effort-rer", At::Peak)
        }
        ("effort-hr", _) => {
            word(&Steady { peak_hr: value, ..steady }.results(&facts), "effort-hr", At::Peak)
        }
        ("effort-lactate", _) => {
            facts.events = vec![Event { t_s: 930.0, kind: EventKind::Lactate(Some(value)) }];
            word(&steady.results(&facts), "effort-lactate", At::Peak)
        }
        ("limit-ventilatory", case) => {
            // Where the share decides 15 L/min are left, where the litres decide 17 %.
            let mvv = if case == "share" { 100.0 } else { 64.0 };
            facts.subject.mvv_l_min = Some(mvv);
            let peak_ve = mvv - value;
            let results = Steady { rising: true, peak_ve, ..steady }.results(&facts);
            let effort = results.primary("effort", At::Test).expect("effort");
            let limit = effort.doubts.iter().any(|d| d.code == "limit-ventilatory");
            assert_eq!(effort.word() == Some("stopped-at-limit"), limit);
            present(limit)
        }
        ("rest-rer", _) => {
            present(found(&Steady { rest: (300.0, 300.0 * value), ..steady }, &facts, "rest-rer"))
        }
        ("rest-vo2", _) => {
            facts.subject.mass_kg = Some(80.0);
            let rest = (80.0 * value, 64.0 * value);
            present(found(&Steady { rest, ..steady }, &facts, "rest-vo2"))
        }
        other => panic!("no check of {other:?}"),
    }
}

fn found(steady: &Steady, facts: &Facts, code: &str) -> bool {
    steady.results(facts).quality.iter().any(|f| f.note.code == code)
}

#[test]
fn every_cut_off_falls_on_its_published_side() {
    for row in rows() {
        let places = [row.cut_off * (1.0 - STEP), row.cut_off, row.cut_off * (1.0 + STEP)];
        let said = places.map(|value| said(&row, value));
        assert_eq!(said, row.words, "{} {} at {}", row.outcome, row.case, row.cut_off);
    }
}

#[test]
fn the_table_holds_every_bound_of_every_class() {
    let rows = rows();
    for class in classes() {
        let mut bounds: Vec<f64> = rows
            .iter()
            .filter(|r| r.outcome == class.id && r.method == class.method)
            .map(|r| r.cut_off)
            .collect();
        bounds.sort_by(f64::total_cmp);
        let expected: Vec<f64> = class.bands.iter().skip(1).map(|b| b.from).collect();
        assert_eq!(bounds, expected, "{} {}", class.id, class.method);
    }
    for row in rows {
        let published = row.doi.starts_with("10.") && row.doi.contains('/');
        assert!(published || row.doi.is_empty(), "{}: {}", row.outcome, row.doi);
        assert!(published || !row.outcome.starts_with("class-"), "{} has no DOI", row.outcome);
    }
}
