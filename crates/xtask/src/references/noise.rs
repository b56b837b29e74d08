//! Noise of real breaths and beats, and how the V̇O₂–HR line of people without disease bends:
//! aggregate constants only, beside those of the simulated ramps.

use std::fmt::Write as _;
use std::fs;
use std::ops::Range;
use std::path::{Path, PathBuf};

use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Rhythm};
use analysis::model::course_sim::{Design, Null, simulate};
use analysis::quantity::Quantity;
use analysis::settings::Settings;
use record::import::{Answers, import};

use super::bends::{self, Staged};
use super::binomial::Count;

/// Breaths of a ramp, s and mL/min and /min.
struct Ramp {
    t_s: Vec<f64>,
    vo2: Vec<f64>,
    hr: Vec<f64>,
    from_s: f64,
    to_s: f64,
    course: Option<String>,
}

/// Noise figures of one ramp.
#[derive(Clone, Copy, Debug)]
struct Figures {
    /// Robust SD of breaths about a 60-s trend, % of the trend.
    breath: f64,
    lags: [f64; 3],
    /// 10-s and 30-s bins of the last 3 min about their quadratic, %.
    late: [f64; 2],
    /// 10-s bins of the first three minutes from 2 min on, %.
    early: f64,
    /// HR, 10-s bins, early and late, /min.
    hr: [f64; 2],
}

/// The report; `seeds` are those of the simulated ramps set beside the real ones.
///
/// # Errors
/// When `RAMPCREST_OPEN_DATA` is not set or a file in it cannot be read.
pub fn report(seeds: Range<u64>) -> Result<String, String> {
    let folder = std::env::var_os("RAMPCREST_OPEN_DATA")
        .map(PathBuf::from)
        .ok_or("RAMPCREST_OPEN_DATA is not set: the folder with cycle-ramps and graded-stages")?;
    let ramps = real_ramps(&folder.join("cycle-ramps"))?;
    let mut out = String::new();
    let _ = writeln!(
        out,
        "# Noise and natural bend\n\n\
         `RAMPCREST_OPEN_DATA=… cargo xtask references noise --seeds {}..{}`. Aggregates only.\n\n\
         Ramps: Chabert et al. 2022, doi:10.13026/2qs3-kh43, with Goldberger et al. 2000 \
         (youths of 12–18 years, smoothed export, V̇O₂ and beats only). Stages: Donne et al. 2024, \
         doi:10.5281/zenodo.10841412, CC BY 4.0, cycling only, modified.\n",
        seeds.start, seeds.end
    );
    noise_table(&mut out, &ramps, &seeds);
    courses(&mut out, &ramps);
    graded(&mut out, &folder.join("graded-stages").join("cycling.csv"))?;
    Ok(out)
}

fn real_ramps(folder: &Path) -> Result<Vec<Ramp>, String> {
    let told = |e: std::io::Error| format!("{}: {e}", folder.display());
    let mut files: Vec<PathBuf> =
        fs::read_dir(folder).map_err(told)?.flatten().map(|e| e.path()).collect();
    files.retain(|f| f.file_name().is_some_and(|n| n.to_string_lossy().starts_with("test-")));
    files.sort();
    files.iter().map(|f| real_ramp(f)).collect()
}

fn real_ramp(file: &Path) -> Result<Ramp, String> {
    let bytes = fs::read(file).map_err(|e| format!("{}: {e}", file.display()))?;
    let imported =
        import(&bytes, "ramp", &Answers::default(), None).map_err(|p| p.what.to_string())?;
    let mut facts = Facts::default();
    facts.test.mode = Some(Mode::Cycle);
    facts.test.rhythm = Some(Rhythm::Sinus);
    let recording = &imported.recording;
    let results = analysis::derive(recording, &facts, &Decisions::default(), &Settings::default());
    let (from_s, to_s) = results.phases.ramp().ok_or("no increments found")?;
    let breaths = &recording.breaths;
    let (mut t_s, mut vo2, mut hr) = (Vec::new(), Vec::new(), Vec::new());
    for i in 0..breaths.len() {
        let at = (breaths.value(Quantity::Vo2, i), breaths.value(Quantity::Hr, i));
        if let (Some(v), Some(h)) = at
            && breaths.mid_s(i) > from_s
            && breaths.mid_s(i) < to_s
        {
            t_s.push(breaths.mid_s(i));
            vo2.push(v);
            hr.push(h);
        }
    }
    let course = results
        .outcomes
        .iter()
        .find(|o| o.id == "o2-pulse-course" && o.primary)
        .and_then(|o| o.word().map(String::from).or(o.reason.as_ref().map(|r| r.code.into())));
    Ok(Ramp { t_s, vo2, hr, from_s, to_s, course })
}

fn simulated(seed: u64) -> Ramp {
    let s = simulate(&Design::normal(Null::Matched, 10.0), seed);
    let first = s.t_s.partition_point(|t| *t < s.ramp_start_s);
    Ramp {
        t_s: s.t_s[first..].to_vec(),
        vo2: s.vo2[first..].to_vec(),
        hr: s.hr[first..].to_vec(),
        from_s: s.ramp_start_s,
        to_s: s.load_end_s,
        course: None,
    }
}

/// Value at `t` of the least-squares polynomial of degree `d` through the points.
fn polynomial_at(t: &[f64], y: &[f64], d: usize, at: f64) -> f64 {
    let n = d + 1;
    let mut a = vec![vec![0.0; n + 1]; n];
    let scale = t.iter().map(|x| (x - at).abs()).fold(1e-9, f64::max);
    for (x, v) in t.iter().zip(y) {
        let u = (x - at) / scale;
        let powers: Vec<f64> = (0..n).map(|k| u.powi(k as i32)).collect();
        for r in 0..n {
            for c in 0..n {
                a[r][c] += powers[r] * powers[c];
            }
            a[r][n] += powers[r] * v;
        }
    }
    solve(&mut a)
}

/// First unknown of the normal equations, by elimination from the last to the first.
fn solve(a: &mut [Vec<f64>]) -> f64 {
    let n = a.len();
    for k in (1..n).rev() {
        let pivot = a[k].clone();
        for row in a.iter_mut().take(k) {
            let f = row[k] / pivot[k];
            for c in 0..=n {
                row[c] -= f * pivot[c];
            }
        }
    }
    a[0][n] / a[0][0]
}

fn robust_sd(x: &[f64]) -> f64 {
    let mut size: Vec<f64> = x.iter().map(|v| v.abs()).collect();
    1.4826 * median(&mut size)
}

fn median(x: &mut [f64]) -> f64 {
    x.sort_by(f64::total_cmp);
    if x.is_empty() { f64::NAN } else { 0.5 * (x[(x.len() - 1) / 2] + x[x.len() / 2]) }
}

/// Relative residuals about a straight line through the breaths within ± 30 s.
fn about_trend(r: &Ramp) -> Vec<f64> {
    (0..r.t_s.len())
        .filter_map(|i| {
            let from = r.t_s.partition_point(|t| *t < r.t_s[i] - 30.0);
            let to = r.t_s.partition_point(|t| *t <= r.t_s[i] + 30.0);
            (to - from > 6).then(|| {
                let trend = polynomial_at(&r.t_s[from..to], &r.vo2[from..to], 1, r.t_s[i]);
                r.vo2[i] / trend - 1.0
            })
        })
        .collect()
}

/// Root mean square of bin means about their quadratic, corrected for its three parameters; the
/// second number is the mean of the bins.
fn binned(t: &[f64], y: &[f64], window: (f64, f64), width: f64) -> Option<(f64, f64)> {
    let (mut at, mut means) = (Vec::new(), Vec::new());
    let bins = ((window.1 - window.0) / width).floor() as usize;
    for k in 0..bins {
        let from = window.0 + width * k as f64;
        let (a, b) = (t.partition_point(|x| *x < from), t.partition_point(|x| *x < from + width));
        if b > a {
            at.push(from + 0.5 * width);
            means.push(y[a..b].iter().sum::<f64>() / (b - a) as f64);
        }
    }
    if means.len() < 5 {
        return None;
    }
    let left: f64 =
        (0..at.len()).map(|i| (means[i] - polynomial_at(&at, &means, 2, at[i])).powi(2)).sum();
    let mean = means.iter().sum::<f64>() / means.len() as f64;
    Some(((left / (at.len() - 3) as f64).sqrt(), mean))
}

fn figures(r: &Ramp) -> Option<Figures> {
    let e = about_trend(r);
    let total: f64 = e.iter().map(|x| x * x).sum();
    let lag = |k: usize| e.windows(k + 1).map(|w| w[0] * w[k]).sum::<f64>() / total;
    let late = (r.to_s - 200.0, r.to_s - 20.0);
    let early = (r.from_s + 120.0, r.from_s + 300.0);
    let pct = |x: (f64, f64)| 100.0 * x.0 / x.1;
    Some(Figures {
        breath: 100.0 * robust_sd(&e),
        lags: [lag(1), lag(2), lag(3)],
        late: [pct(binned(&r.t_s, &r.vo2, late, 10.0)?), pct(binned(&r.t_s, &r.vo2, late, 30.0)?)],
        early: pct(binned(&r.t_s, &r.vo2, early, 10.0)?),
        hr: [binned(&r.t_s, &r.hr, early, 10.0)?.0, binned(&r.t_s, &r.hr, late, 10.0)?.0],
    })
}

fn noise_table(out: &mut String, ramps: &[Ramp], seeds: &Range<u64>) {
    let real: Vec<Figures> = ramps.iter().filter_map(figures).collect();
    let sim: Vec<Figures> = super::pool::over(seeds.clone(), |s| figures(&simulated(s)))
        .into_iter()
        .flatten()
        .collect();
    let _ = writeln!(
        out,
        "## Noise, median over tests\n\n| figure | real, n = {} | simulated for the course, n = {} |\n\
         |---|---|---|",
        real.len(),
        sim.len()
    );
    type Pick = fn(&Figures) -> f64;
    let rows: [(&str, Pick); 9] = [
        ("breath V̇O₂ about a 60-s trend, robust SD, %", |f| f.breath),
        ("lag 1 of breaths", |f| f.lags[0]),
        ("lag 2", |f| f.lags[1]),
        ("lag 3", |f| f.lags[2]),
        ("V̇O₂, 10-s bins, early 3 min, %", |f| f.early),
        ("V̇O₂, 10-s bins, last 3 min to 20 s before load end, %", |f| f.late[0]),
        ("V̇O₂, 30-s bins, same, %", |f| f.late[1]),
        ("HR, 10-s bins, early, /min", |f| f.hr[0]),
        ("HR, 10-s bins, late, /min", |f| f.hr[1]),
    ];
    for (name, pick) in rows {
        let at = |set: &[Figures]| median(&mut set.iter().map(pick).collect::<Vec<f64>>());
        let _ = writeln!(out, "| {name} | {:.2} | {:.2} |", at(&real), at(&sim));
    }
}

fn courses(out: &mut String, ramps: &[Ramp]) {
    let count = |words: &[&str]| {
        Count::of(ramps.iter().map(|r| r.course.as_deref().is_some_and(|c| words.contains(&c))))
    };
    let _ = writeln!(
        out,
        "\n## The real ramps' own courses\n\nRhythm is not stated in the data; sinus is assumed \
         for this count only. The same ramps served the noise model: no independent check.\n\n\
         | reading | count | per cent [exact 95 % limits] |\n|---|---|---|"
    );
    for (name, words) in [
        ("rising", &["rising"][..]),
        ("rising-slowed", &["rising-slowed"]),
        ("flattened", &["flattened"]),
        ("falling", &["falling"]),
        ("indeterminate", &["indeterminate"]),
        ("slowed, flattened or falling", &["rising-slowed", "flattened", "falling"]),
    ] {
        let c = count(words);
        let _ = writeln!(out, "| {name} | {} of {} | {} |", c.k, c.n, c.percent());
    }
    let mut other: Vec<&str> = ramps
        .iter()
        .filter_map(|r| r.course.as_deref())
        .filter(|c| {
            !["rising", "rising-slowed", "flattened", "falling", "indeterminate"].contains(c)
        })
        .collect();
    other.sort_unstable();
    if !other.is_empty() {
        let _ = writeln!(out, "\nWithheld: {}.", other.join(", "));
    }
}

/// One graded test: load W, HR /min, V̇O₂ mL/kg/min of each stage.
type Graded = Vec<[f64; 3]>;

fn read_graded(file: &Path) -> Result<Vec<Graded>, String> {
    let text = fs::read_to_string(file).map_err(|e| format!("{}: {e}", file.display()))?;
    let mut lines = text.lines();
    let header: Vec<&str> = lines.next().unwrap_or_default().split(',').collect();
    let column =
        |name: &str| header.iter().position(|h| *h == name).ok_or(format!("no column {name}"));
    let (test, load) = (column("test")?, column("load_w")?);
    let (hr, vo2) = (column("hr_per_min")?, column("vo2_ml_kg_min")?);
    let mut all: Vec<(String, Graded)> = Vec::new();
    for line in lines {
        let cells: Vec<&str> = line.split(',').collect();
        let at = |i: usize| cells.get(i).and_then(|c| c.parse::<f64>().ok());
        let (Some(w), Some(h), Some(v)) = (at(load), at(hr), at(vo2)) else { continue };
        let id = cells[test].to_owned();
        match all.last_mut() {
            Some((last, stages)) if *last == id => stages.push([w, h, v]),
            _ => all.push((id, vec![[w, h, v]])),
        }
    }
    Ok(all.into_iter().map(|t| t.1).filter(|t| t.len() >= 6).collect())
}

fn slope(stages: &[[f64; 3]]) -> f64 {
    let n = stages.len() as f64;
    let (mh, mv) = (
        stages.iter().map(|s| s[1]).sum::<f64>() / n,
        stages.iter().map(|s| s[2]).sum::<f64>() / n,
    );
    let sxy: f64 = stages.iter().map(|s| (s[1] - mh) * (s[2] - mv)).sum();
    sxy / stages.iter().map(|s| (s[1] - mh).powi(2)).sum::<f64>()
}

/// A variable of a test over its range on load (its least-squares rise).
fn staged(test: &Graded, which: usize) -> Staged {
    let (w0, w1) = (test[0][0], test[test.len() - 1][0]);
    let x: Vec<f64> = test.iter().map(|s| (s[0] - w0) / (w1 - w0)).collect();
    let n = x.len() as f64;
    let (mx, my) = (x.iter().sum::<f64>() / n, test.iter().map(|s| s[which]).sum::<f64>() / n);
    let sxy: f64 = x.iter().zip(test).map(|(a, s)| (a - mx) * (s[which] - my)).sum();
    let range = sxy / x.iter().map(|a| (a - mx).powi(2)).sum::<f64>();
    Staged { y: test.iter().map(|s| s[which] / range).collect(), x }
}

fn graded(out: &mut String, file: &Path) -> Result<(), String> {
    let tests = read_graded(file)?;
    let pulse = |s: &[f64; 3]| s[2] / s[1];
    let ratio = |t: &Graded| slope(&t[t.len() - 3..]) / slope(&t[..t.len() - 2]);
    let rho = |t: &Graded| slope(&t[t.len() - 3..]) / pulse(&t[t.len() - 1]);
    let rise = |t: &Graded| 100.0 * (pulse(&t[t.len() - 1]) / pulse(&t[t.len() / 2]) - 1.0);
    let _ = writeln!(
        out,
        "\n## Natural shape, {} graded tests of trained adults with six stages or more\n\n\
         | raw figure | 1st | 5th | 25th | 50th | 75th | 95th centile |\n|---|---|---|---|---|---|---|",
        tests.len()
    );
    let mut row = |name: &str, f: &dyn Fn(&Graded) -> f64| {
        let mut x: Vec<f64> = tests.iter().map(f).filter(|v| v.is_finite()).collect();
        x.sort_by(f64::total_cmp);
        let at = |p: usize| x[((x.len() - 1) * p + 50) / 100];
        let cells: Vec<String> =
            [1, 5, 25, 50, 75, 95].iter().map(|p| format!("{:.2}", at(*p))).collect();
        let _ = writeln!(out, "| {name} | {} |", cells.join(" | "));
    };
    row("late over early slope of V̇O₂ on HR", &ratio);
    row("late slope over O₂ pulse", &rho);
    row("rise of the O₂ pulse over the second half, %", &rise);
    let _ = writeln!(
        out,
        "\nBend on load in fractions of the range, hierarchical model with level and slope free \
         per test; mean (SD between tests):\n\n| | quadratic | cubic | noise of a stage, % of range |\n\
         |---|---|---|---|"
    );
    for (name, which) in [("V̇O₂", 2), ("HR", 1)] {
        let b = bends::fit(&tests.iter().map(|t| staged(t, which)).collect::<Vec<_>>());
        let _ = writeln!(
            out,
            "| {name} | {:+.2} ({:.2}) | {:+.2} ({:.2}) | {:.1} |",
            b.mean[0],
            b.sd[0],
            b.mean[1],
            b.sd[1],
            100.0 * b.noise
        );
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A quadratic through its own points is itself: 2 + 3 t + 0.5 t² at t = 4 is 22.
    #[test]
    fn polynomials_reproduce_themselves() {
        let t: Vec<f64> = (0..9).map(f64::from).collect();
        let y: Vec<f64> = t.iter().map(|t| 2.0 + 3.0 * t + 0.5 * t * t).collect();
        assert!((polynomial_at(&t, &y, 2, 4.0) - 22.0).abs() < 1e-9);
        let y: Vec<f64> = t.iter().map(|t| 1.0 - t).collect();
        assert!((polynomial_at(&t, &y, 1, 7.5) + 6.5).abs() < 1e-9);
    }

    /// Bins of alternating ± 1 about a line, 20 of them: the sum of squares left by the quadratic
    /// is at most 20 and at least 20 less what three parameters can take (3), over 17 degrees.
    #[test]
    fn bins_give_the_noise_about_their_quadratic() {
        let t: Vec<f64> = (0..200).map(|i| f64::from(i) + 0.5).collect();
        let y: Vec<f64> = t
            .iter()
            .map(|t| 100.0 + t + if (t / 10.0) as i64 % 2 == 0 { 1.0 } else { -1.0 })
            .collect();
        let (rms, mean) = binned(&t, &y, (0.0, 200.0), 10.0).unwrap();
        assert!(rms * rms * 17.0 <= 20.0 && rms * rms * 17.0 >= 17.0, "{rms}");
        assert!((mean - 200.0).abs() < 1e-9);
        assert!(binned(&t, &y, (0.0, 40.0), 10.0).is_none());
    }

    #[test]
    fn graded_slope_is_the_least_squares_line() {
        // V̇O₂ 10, 20, 30 at HR 100, 120, 140: 0.5 per beat.
        let stages = [[50.0, 100.0, 10.0], [75.0, 120.0, 20.0], [100.0, 140.0, 30.0]];
        assert!((slope(&stages) - 0.5).abs() < 1e-12);
    }
}
