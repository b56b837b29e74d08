//! What was put into a demo test, so that anyone can score an estimate of it.

use analysis::model::demo::Case;
use analysis::model::plan::Plan;
use analysis::model::test::Truth;
use serde_json::json;

/// `rampcrest-truth/1` of a case.
#[must_use]
pub fn text(case: &Case, plan: &Plan, truth: &Truth) -> String {
    let r = |x: f64| (x * 1000.0).round() / 1000.0;
    let opt = |x: Option<f64>| x.map(r);
    let mut value = json!({
        "schema": "rampcrest-truth/1",
        "notice": "invented: the values put into the project's own seeded model",
        "case": case.name,
        "about": case.about,
        "seed": plan.seed,
        "phases_s": {
            "rest": opt(truth.phases.rest),
            "warm_up": opt(truth.phases.warm_up),
            "ramp": opt(truth.phases.ramp),
            "recovery": opt(truth.phases.recovery),
        },
        "vt1_vo2_ml_min": opt(truth.vt1_vo2),
        "vt1_s": opt(truth.vt1_s),
        "vt2_vo2_ml_min": opt(truth.vt2_vo2),
        "vt2_s": opt(truth.vt2_s),
        "vo2_peak_30s_ml_min": r(truth.vo2_peak_30s),
        "hr_at_peak_per_min": r(truth.hr_at_peak),
        "o2_pulse_at_peak_ml": r(truth.vo2_peak_30s / truth.hr_at_peak),
        "bend_s": opt(truth.bend_s),
        "late_slope_pct_per_min": r(truth.late_slope),
        "vo2_demand_ml_min_w": r(truth.gain),
    });
    value.sort_all_objects();
    format!("{value:#}\n")
}
