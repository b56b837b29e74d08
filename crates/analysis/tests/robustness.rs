//! No input makes the engine panic: what cannot be derived is a reason.

use analysis::breaths::{Breaths, BreathsError, Column};
use analysis::decisions::{Decisions, Exclusion, PhaseStarts};
use analysis::derive;
use analysis::facts::Facts;
use analysis::quantity::{Quantity, TABLE};
use analysis::recording::{Gap, Recording, RowKind, Trace};
use analysis::results::Results;
use analysis::settings::Settings;
use proptest::prelude::*;

fn run(recording: &Recording, decisions: &Decisions) -> Results {
    let results = derive(recording, &Facts::default(), decisions, &Settings::default());
    for o in &results.outcomes {
        assert_eq!(o.value.is_none(), o.reason.is_some(), "{}", o.id);
        assert!(o.number().is_none_or(f64::is_finite), "{}", o.id);
    }
    results
}

fn table(n: usize, value: impl Fn(Quantity, usize) -> Option<f64>) -> Breaths {
    let end = (1..=n).map(|k| 3.0 * k as f64).collect();
    let columns = TABLE
        .iter()
        .map(|row| (row.quantity, (0..n).map(|i| value(row.quantity, i)).collect::<Column>()))
        .collect();
    Breaths::new(end, None, columns).unwrap()
}

fn ramp_load(n: usize) -> Trace {
    let total = 3.0 * n as f64;
    let t_s: Vec<f64> = (0..n).map(|k| 3.0 * k as f64).collect();
    let value = t_s
        .iter()
        .map(|t| if *t > 0.3 * total && *t < 0.8 * total { 0.2 * (t - 0.3 * total) } else { 0.0 })
        .collect();
    Trace { t_s, value }
}

#[test]
fn nothing_one_breath_and_constant_columns() {
    for n in [0, 1, 2, 3, 7, 40, 300] {
        let all_equal = Recording { breaths: table(n, |_, _| Some(50.0)), ..Recording::default() };
        run(&all_equal, &Decisions::default());
        let loaded = Recording { load: ramp_load(n), ..all_equal };
        run(&loaded, &Decisions::default());
        let empty = Recording { breaths: table(n, |_, _| None), ..loaded };
        let results = run(&empty, &Decisions::default());
        assert!(results.number("vo2-peak", analysis::results::At::Peak).is_none());
    }
}

/// Time that goes back, stands still or is no number never becomes a table.
#[test]
fn time_only_rises() {
    for bad in [3.0, 6.0, f64::NAN, f64::INFINITY] {
        let formed = Breaths::new(vec![3.0, 6.0, bad, 12.0], None, Default::default());
        assert_eq!(formed.err(), Some(BreathsError::Time(2)), "{bad}");
    }
}

#[test]
fn zeros_and_negatives() {
    for x in [0.0, -1.0, -1e9, 1e300, f64::MIN_POSITIVE] {
        let breaths = table(300, |q, i| Some(if q == Quantity::Hr { x } else { x * i as f64 }));
        run(
            &Recording { breaths, load: ramp_load(300), ..Recording::default() },
            &Decisions::default(),
        );
    }
}

#[test]
fn two_hundred_thousand_rows() {
    let n = 200_000;
    let breaths = table(n, |q, i| {
        let (low, high) = q.row().plausible;
        Some(low + (high - low) * (0.3 + 0.4 * i as f64 / n as f64 + 0.01 * (i % 7) as f64))
    });
    let recording = Recording { breaths, load: ramp_load(n), ..Recording::default() };
    run(&recording, &Decisions::default());
}

fn any_value() -> impl Strategy<Value = Option<f64>> {
    prop_oneof![
        1 => Just(None),
        1 => Just(Some(0.0)),
        1 => any::<f64>().prop_map(Some),
        6 => (-10.0..4000.0f64).prop_map(Some),
    ]
}

fn any_recording() -> impl Strategy<Value = Recording> {
    (0usize..160).prop_flat_map(|n| {
        let steps = prop::collection::vec(0.05f64..20.0, n);
        let columns = prop::collection::vec(prop::collection::vec(any_value(), n), TABLE.len());
        let held = prop::collection::vec(0.0f64..400.0, n);
        (steps, columns, held, 0usize..3, prop::bool::ANY).prop_map(
            |(steps, columns, held, kind, gap)| {
                let mut t = -50.0;
                let end: Vec<f64> = steps
                    .iter()
                    .map(|s| {
                        t += s;
                        t
                    })
                    .collect();
                let load = Trace { t_s: end.clone(), value: held };
                let gaps = if gap { vec![Gap { from_s: 0.0, to_s: 100.0 }] } else { Vec::new() };
                let columns = TABLE.iter().map(|r| r.quantity).zip(columns).collect();
                let row_kind =
                    [RowKind::Breath, RowKind::Beat, RowKind::Averaged { step_s: 10.0 }][kind];
                let breaths = Breaths::new(end, None, columns).unwrap();
                Recording { breaths, row_kind, load, gaps, ..Recording::default() }
            },
        )
    })
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(96))]

    #[test]
    fn any_table_and_any_decision(
        recording in any_recording(),
        starts in prop::array::uniform4(prop::option::of(-200.0f64..2000.0)),
        marks in prop::array::uniform2(prop::option::of(-200.0f64..2000.0)),
        excluded in prop::option::of((-100.0f64..500.0, 0.0f64..500.0)),
    ) {
        let phases = PhaseStarts {
            rest: starts[0],
            warm_up: starts[1],
            ramp: starts[2],
            recovery: starts[3],
        };
        let excluded = excluded
            .map(|(from_s, length)| Exclusion { from_s, to_s: from_s + length })
            .into_iter()
            .collect();
        let decisions =
            Decisions { phases, excluded, vt1_s: marks[0], vt2_s: marks[1], two_factor_s: None };
        let results = run(&recording, &decisions);
        for pair in results.phases.spans.windows(2) {
            prop_assert!(pair[0].from_s < pair[1].from_s);
            prop_assert_eq!(pair[0].to_s, pair[1].from_s);
        }
    }
}
