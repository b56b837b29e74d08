//! One whole test through the engine against `tests/golden/whole_test.py`, which reads the
//! same table by the published procedures in numpy and shares no code with the engine.

use analysis::breaths::Breaths;
use analysis::decisions::{Decisions, PhaseStarts};
use analysis::facts::{Event, EventKind, Facts, Mode, Rhythm};
use analysis::quantity::Quantity;
use analysis::recording::{Recording, Trace};
use analysis::results::{At, Outcome, Results};
use analysis::settings::Settings;

/// Values in the table of the script, relative to their size; intervals hold logs and roots of sums.
const TOLERANCE: f64 = 1e-7;

/// The table: times, load and channels; a load holds from the row that first shows it.
fn recording() -> Recording {
    const COLUMNS: [Quantity; 9] = [
        Quantity::Vo2,
        Quantity::Vco2,
        Quantity::Ve,
        Quantity::Vt,
        Quantity::Fr,
        Quantity::Hr,
        Quantity::Peto2,
        Quantity::Petco2,
        Quantity::Spo2,
    ];
    let text = include_str!("../../../tests/golden/whole-test.csv");
    let rows: Vec<Vec<f64>> = text
        .lines()
        .skip(3)
        .map(|line| line.split(',').map(|cell| cell.parse().expect("a number")).collect())
        .collect();
    let column = |k: usize| rows.iter().map(|row| row[k]).collect::<Vec<f64>>();
    let columns = COLUMNS.into_iter().zip(2..);
    let columns = columns.map(|(q, k)| (q, column(k).into_iter().map(Some).collect()));
    let breaths = Breaths::new(column(0), None, columns.collect()).expect("rising times");
    let load = Trace { t_s: column(0), value: column(1) };
    Recording { breaths, load, ..Recording::default() }
}

fn derived() -> Results {
    let mut facts = Facts::default();
    facts.subject.age_years = Some(34.0);
    facts.subject.mass_kg = Some(64.0);
    facts.subject.fev1_l = Some(3.4);
    facts.test.mode = Some(Mode::Cycle);
    facts.test.rhythm = Some(Rhythm::Sinus);
    let sample = |t_s, pao2, paco2| Event {
        t_s,
        kind: EventKind::GasSample { pao2: Some(pao2), paco2: Some(paco2), sao2: None, cohb: None },
    };
    facts.events = vec![sample(150.0, 96.0, 38.0), sample(980.0, 101.0, 36.0)];
    let phases = PhaseStarts {
        rest: Some(0.0),
        warm_up: Some(182.35),
        ramp: Some(362.95),
        recovery: Some(985.15),
    };
    let decisions =
        Decisions { phases, vt1_s: Some(622.0), vt2_s: Some(834.0), ..Decisions::default() };
    analysis::derive(&recording(), &facts, &decisions, &Settings::default())
}

fn place(code: &str) -> At {
    let all =
        [At::Rest, At::WarmUp, At::Vt1, At::Vt2, At::Peak, At::Recovery1Min, At::Ramp, At::Test];
    all.into_iter().find(|at| at.code() == code).expect("a place")
}

fn outcome<'r>(results: &'r Results, id: &str, at: At, method: &str) -> &'r Outcome {
    results
        .outcomes
        .iter()
        .find(|o| {
            o.id == id
                && o.at == at
                && if method.is_empty() { o.primary } else { o.method == method }
        })
        .unwrap_or_else(|| panic!("no {id} {at:?} {method}"))
}

#[test]
fn an_independent_reading_of_the_same_test_gives_the_same_outcomes() {
    let results = derived();
    let table = include_str!("../../../tests/golden/whole-test-outcomes-py.csv");
    let mut reader = csv::ReaderBuilder::new().comment(Some(b'#')).from_reader(table.as_bytes());
    let (mut compared, mut off) = (0, Vec::new());
    for row in reader.records() {
        let row = row.expect("a row");
        let found = outcome(&results, &row[0], place(&row[1]), &row[2]);
        let interval = found.recording;
        let pairs = [
            (found.number(), &row[3]),
            (interval.map(|i| i.low), &row[4]),
            (interval.map(|i| i.high), &row[5]),
        ];
        for (found, expected) in pairs {
            if expected.is_empty() {
                continue;
            }
            let expected: f64 = expected.parse().expect("a number");
            let near = |x: f64| (x - expected).abs() <= TOLERANCE * expected.abs().max(1.0);
            if !found.is_some_and(near) {
                off.push(format!("{} {}: {found:?}, expected {expected}", &row[0], &row[1]));
            }
            compared += 1;
        }
    }
    assert!(off.is_empty(), "{}", off.join("\n"));
    assert!(compared > 120, "{compared}");
}
