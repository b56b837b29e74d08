//! Cost of a whole derivation on one demo test, and its growth with the number of breaths.

use std::hint::black_box;

use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Rhythm};
use analysis::model::plan::Plan;
use analysis::model::test::generate;
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

fn whole_test(c: &mut Criterion) {
    let (recording, _) = generate(&Plan::healthy(1));
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

criterion_group!(benches, whole_test);
criterion_main!(benches);
