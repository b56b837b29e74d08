//! Cost of every curve of the overlay, and of every prediction for one person.

use std::hint::black_box;

use analysis::facts::{Mode, Sex};
use analysis::predicted::chooser::choices;
use analysis::predicted::overlay::{Inputs, Pressure, Response, Runs, over_time, over_vo2};
use analysis::predicted::sets::{Person, Predicts};
use analysis::settings::OverlaySettings;
use criterion::{Criterion, criterion_group, criterion_main};
use record::predicted_sets::default_settings;

/// The man of 45 of the worked vectors, on 20 W/min.
fn inputs(o: &OverlaySettings) -> Inputs {
    Inputs {
        rest_vo2: 280.0,
        unloaded_vo2: o.unloaded_vo2(80.0),
        vo2_peak: 2716.2,
        hr: Some((70.0, 175.0)),
        ve_slope: Some(25.75),
        warm_up_s: 180.0,
        warm_up_watts: 0.0,
        rate_w_per_min: 20.0,
    }
}

fn overlay(c: &mut Criterion) {
    let o = OverlaySettings::default();
    c.bench_function("overlay, all curves over time and V̇O₂", |b| {
        b.iter(|| {
            let inputs = black_box(inputs(&o));
            let run = |share: f64, gain| {
                Response::new(Inputs { vo2_peak: share * inputs.vo2_peak, ..inputs }, &o, gain)
            };
            let runs = Runs {
                middle: run(1.0, o.gain).expect("a model"),
                low: run(0.84, o.gain_band.0).ok(),
                high: run(1.16, o.gain_band.1).ok(),
                pressure: Some(Pressure {
                    systolic: Some(120.0),
                    diastolic: Some(80.0),
                    slope: 0.41,
                    slope_sd: 0.15,
                }),
                hr_beta_blocked: Some(132.5),
            };
            (over_time(&runs, 300.0, -180.0, 700.0), over_vo2(&runs))
        });
    });
}

fn predictions(c: &mut Criterion) {
    let settings = default_settings();
    let person = Person {
        age_years: Some(45.0),
        sex: Some(Sex::Male),
        height_cm: Some(178.0),
        mass_kg: Some(80.0),
        fev1_l: Some(3.8),
        mode: Some(Mode::Cycle),
    };
    c.bench_function("every set of every quantity for one person", |b| {
        b.iter(|| {
            let all = Predicts::all();
            all.map(|q| choices(&settings, q, black_box(&person)).len()).sum::<usize>()
        });
    });
}

criterion_group!(benches, overlay, predictions);
criterion_main!(benches);
