//! Cost of a whole derivation on one demo test, and its growth with the number of breaths.

use std::hint::black_box;

use analysis::breaths::Breaths;
use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Rhythm};
use analysis::model::course_sim::{Design, Null, simulate};
use analysis::model::plan::Plan;
use analysis::model::test::generate;
use analysis::o2_pulse::classify;
use analysis::quantity::Quantity;
use analysis::reasoning::robustness::robustness;
use analysis::recording::{Recording, Trace};
use analysis::settings::Settings;
use criterion::{BenchmarkId, Criterion, Throughput, criterion_group, criterion_main};

fn facts() -> Facts {
    let mut facts = Facts::default();
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    facts.subject.age_years = Some(45.0);
    facts.subject.mass_kg = Some(80.0);
    facts.subject.height_cm = Some(178.0);
    facts
}

/// A test of about 900 breaths: small breaths of a small dead space.
fn recording() -> Recording {
    let mut plan = Plan::healthy(1);
    let v = &mut plan.ventilation;
    (v.vt_rest, v.vt_max, v.dead_space, v.dead_space_share) = (0.32, 0.95, 0.07, 0.04);
    generate(&plan).0
}

/// `n` rows that rise and fall like one test.
fn long(n: usize) -> Recording {
    let t_s: Vec<f64> = (1..=n).map(|k| 2.0 * k as f64).collect();
    let rise = |i: usize| {
        let x = i as f64 / n as f64;
        if (0.3..0.8).contains(&x) { 2.0 * (x - 0.3) } else { 0.0 }
    };
    let wobble = |i: usize| 1.0 + 0.01 * (i * i % 11) as f64;
    let column = |low: f64, high: f64| {
        (0..n).map(|i| Some((low + (high - low) * rise(i)) * wobble(i))).collect()
    };
    let columns = [
        (Quantity::Vo2, column(400.0, 2000.0)),
        (Quantity::Vco2, column(350.0, 2200.0)),
        (Quantity::Ve, column(12.0, 80.0)),
        (Quantity::Hr, column(70.0, 160.0)),
        (Quantity::Petco2, column(36.0, 42.0)),
    ];
    let load = Trace { value: (0..n).map(|i| 200.0 * rise(i)).collect(), t_s: t_s.clone() };
    let breaths = Breaths::new(t_s, None, columns.into()).unwrap_or_default();
    Recording { breaths, load, ..Recording::default() }
}

fn length(c: &mut Criterion) {
    let (mut facts, decisions, settings) = (facts(), Decisions::default(), Settings::default());
    facts.test.rhythm = None;
    let mut group = c.benchmark_group("derive by rows");
    group.sample_size(10);
    for n in [2_000, 20_000, 200_000] {
        let recording = long(n);
        group.throughput(Throughput::Elements(n as u64));
        group.bench_function(BenchmarkId::from_parameter(n), |b| {
            b.iter(|| analysis::derive(black_box(&recording), &facts, &decisions, &settings));
        });
    }
    group.finish();
}

fn whole_test(c: &mut Criterion) {
    let recording = recording();
    let (facts, decisions, settings) = (facts(), Decisions::default(), Settings::default());
    let mut group = c.benchmark_group("derive");
    group.throughput(Throughput::Elements(recording.breaths.len() as u64));
    group.bench_function(BenchmarkId::new("breaths", recording.breaths.len()), |b| {
        b.iter(|| analysis::derive(black_box(&recording), &facts, &decisions, &settings));
    });
    let mut unstated = facts.clone();
    unstated.test.rhythm = None;
    group.bench_function("without the course", |b| {
        b.iter(|| analysis::derive(black_box(&recording), &unstated, &decisions, &settings));
    });
    group.finish();
}

/// The course alone, and the strip of 27 derivations.
fn circulation(c: &mut Criterion) {
    let ramp = simulate(&Design::normal(Null::Matched, 12.0), 1);
    let input = ramp.input();
    let mut group = c.benchmark_group("circulation");
    group.bench_function("course of a 12-min ramp", |b| b.iter(|| classify(black_box(&input))));
    let (recording, _) = generate(&Plan::healthy(1));
    let (facts, decisions, settings) = (facts(), Decisions::default(), Settings::default());
    group.sample_size(20);
    group.bench_function("robustness", |b| {
        b.iter(|| robustness(black_box(&recording), &facts, &decisions, &settings));
    });
    group.finish();
}

criterion_group!(benches, whole_test, length, circulation);
criterion_main!(benches);
