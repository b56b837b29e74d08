//! Error rates of the O₂-pulse course on simulated people: normals, abnormals, trade-off, and
//! whether the printed detection limit holds.

mod abnormals;
mod limits;
mod normals;
mod trade_off;

use std::fmt::Write as _;
use std::ops::Range;

use analysis::model::course_sim::{Design, simulate};
use analysis::o2_pulse::{Course, CourseNumbers, classify};
use analysis::results::Interval;

use super::binomial::Count;
use super::pool;

/// What one simulated ramp gave.
#[derive(Clone, Copy, Debug)]
struct Read {
    course: Option<Course>,
    score: f64,
    /// The score without the bend as covariate, as it was before.
    plain_score: f64,
    slope_within: Interval,
    se: f64,
    truth: f64,
    limit: Option<f64>,
    /// Onset, minutes before load end.
    onset: Option<f64>,
}

fn read(design: &Design, seed: u64) -> Option<Read> {
    let s = simulate(design, seed);
    let detail = classify(&s.input()).ok()?;
    let n = detail.numbers?;
    Some(Read {
        course: detail.course,
        score: n.score,
        plain_score: plain_score(&n, (s.load_end_s - s.ramp_start_s) / 600.0),
        slope_within: n.late_slope_interval,
        se: n.late_slope.se,
        truth: s.late_slope,
        limit: n.detection_limit_min,
        onset: detail.onset.map(|o| o.before_end_min),
    })
}

/// Log Bayes factor and late slope alone; `k` = ramp ÷ 10 min.
fn plain_score(n: &CourseNumbers, k: f64) -> f64 {
    let (g, se) = (k * n.late_slope.value, k * n.late_slope.se);
    n.log_bayes_factor - 3.9 * (g - 2.7) / (4.6 + se * se)
}

fn cell(design: &Design, seeds: Range<u64>) -> Vec<Read> {
    pool::over(seeds, |seed| read(design, seed)).into_iter().flatten().collect()
}

fn rate(reads: &[Read], hit: impl Fn(&Read) -> bool) -> String {
    Count::of(reads.iter().map(hit)).percent()
}

fn is(course: Course) -> impl Fn(&Read) -> bool {
    move |r| r.course == Some(course)
}

fn flat_or_falling(r: &Read) -> bool {
    r.course.is_some_and(Course::is_flat_or_falling)
}

fn found(r: &Read) -> bool {
    flat_or_falling(r) || r.course == Some(Course::RisingSlowed)
}

fn covered(r: &Read) -> bool {
    r.slope_within.low <= r.truth && r.truth <= r.slope_within.high
}

fn median(mut x: Vec<f64>) -> f64 {
    x.sort_by(f64::total_cmp);
    x.get(x.len() / 2).copied().unwrap_or(f64::NAN)
}

/// A smaller set for cells that need fewer.
fn part(seeds: &Range<u64>, share: u64) -> Range<u64> {
    seeds.start..seeds.start + ((seeds.end - seeds.start) / share).max(1)
}

/// All tables for `seeds`.
#[must_use]
pub fn report(seeds: Range<u64>) -> String {
    let mut out = String::new();
    let _ = writeln!(
        out,
        "# Error rates of the O₂-pulse course\n\n\
         `cargo xtask references errors --seeds {}..{}`. Invented ramps: shape matched to stage \
         values of Donne et al. 2024 (doi:10.5281/zenodo.10841412), noise to ramps of Chabert et \
         al. 2022 (doi:10.13026/2qs3-kh43). No patient and no healthy person's own rate. \
         Per cent [exact 95 % limits].\n",
        seeds.start, seeds.end
    );
    normals::shapes(&mut out, &seeds);
    normals::rows(&mut out, &seeds);
    normals::pooled(&mut out, &seeds);
    abnormals::levelling(&mut out, &seeds);
    abnormals::rows(&mut out, &seeds);
    trade_off::tables(&mut out, &seeds);
    limits::kept(&mut out, &seeds);
    out
}
