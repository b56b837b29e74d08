//! Reading of the load trace: where the increments start and end, and what kind of test it was.

use crate::recording::Trace;
use crate::results::LoadShape;

/// What the load trace says about the test.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum LoadReading {
    /// No load, or never more than 5 W.
    Nothing,
    /// One regular rise.
    Incremental {
        /// First rise before the increments (start of a loaded or unloaded warm-up), s.
        warm_up_s: Option<f64>,
        /// Start of the increments, s.
        ramp_s: f64,
        /// Load end, s.
        end_s: f64,
        /// How it rose.
        shape: LoadShape,
    },
    /// One load held.
    Constant,
    /// Load up and down several times.
    Interval,
    /// Two rises with a pause.
    Repeated,
    /// A load, but no pattern we know.
    Other,
}

impl LoadReading {
    /// The same times, without saying that a load rose linearly.
    pub fn without_shape(self) -> Self {
        match self {
            Self::Incremental { warm_up_s, ramp_s, end_s, .. } => {
                Self::Incremental { warm_up_s, ramp_s, end_s, shape: LoadShape::Unknown }
            }
            other => other,
        }
    }
}

/// A change of the load: from `t_s` on, `w` is held.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Level {
    t_s: f64,
    w: f64,
}

/// Share of the highest load under which the load counts as taken off.
const OFF_SHARE: f64 = 0.5;
/// Fall, as a share of the highest load, that ends a bout.
const BOUT_SHARE: f64 = 0.3;

/// Reads the trace.
pub(crate) fn read(trace: &Trace) -> LoadReading {
    let highest = trace.value.iter().copied().fold(0.0, f64::max);
    if highest <= 5.0 {
        return LoadReading::Nothing;
    }
    let (levels, noisy) = compress(trace);
    let Some(off) = load_off(&levels, highest) else { return LoadReading::Other };
    let bouts = bouts(&levels[..off.kept], highest);
    if bouts > 2 {
        return LoadReading::Interval;
    }
    if bouts == 2 {
        return LoadReading::Repeated;
    }
    let Some(rise) = regular_rise(&levels[..off.kept], noisy) else {
        let held_s = levels[..off.kept].last().map_or(0.0, |l| off.t_s - l.t_s);
        return if held_s > 60.0 { LoadReading::Constant } else { LoadReading::Other };
    };
    let before = &levels[..rise.first];
    let warm_up_s = before.windows(2).find(|p| p[1].w > p[0].w + 1.0).map(|p| p[1].t_s);
    LoadReading::Incremental { warm_up_s, ramp_s: rise.start_s, end_s: off.t_s, shape: rise.shape }
}

/// The trace without changes below its own noise, and whether it moves at nearly every sample.
fn compress(trace: &Trace) -> (Vec<Level>, bool) {
    let w = &trace.value;
    let mut wobble: Vec<f64> =
        w.windows(3).map(|v| (v[2] - 2.0 * v[1] + v[0]).abs()).filter(|d| *d > 1e-6).collect();
    // Only a dense trace that moves at nearly every sample is noisy; steps move rarely.
    let mut apart: Vec<f64> = trace.t_s.windows(2).map(|t| t[1] - t[0]).collect();
    let noisy = wobble.len() * 2 > w.len() && median(&mut apart) < 10.0;
    let band = if noisy { (1.5 * median(&mut wobble)).max(0.5) } else { 0.5 };
    let mut levels: Vec<Level> = Vec::new();
    for (t_s, w) in trace.t_s.iter().copied().zip(w.iter().copied()) {
        if levels.last().is_none_or(|l| (w - l.w).abs() >= band) {
            levels.push(Level { t_s, w });
        }
    }
    (levels, noisy)
}

struct Off {
    /// Levels up to load end.
    kept: usize,
    t_s: f64,
}

/// Load end: the first change after the last load of at least half of the highest.
fn load_off(levels: &[Level], highest: f64) -> Option<Off> {
    let last = levels.iter().rposition(|l| l.w >= OFF_SHARE * highest)?;
    let t_s = levels.get(last + 1).map_or(f64::INFINITY, |l| l.t_s);
    Some(Off { kept: last + 1, t_s })
}

/// Number of stretches under load that are separated by a marked fall.
fn bouts(levels: &[Level], highest: f64) -> usize {
    let step = BOUT_SHARE * highest;
    let (mut count, mut top, mut bottom, mut resting) = (1, f64::MIN, f64::MAX, false);
    for level in levels {
        if resting {
            bottom = bottom.min(level.w);
            if level.w >= bottom + step {
                (count, resting, top) = (count + 1, false, level.w);
            }
        } else {
            top = top.max(level.w);
            if level.w <= top - step {
                (resting, bottom) = (true, level.w);
            }
        }
    }
    count
}

struct Rise {
    /// Index of the first increment.
    first: usize,
    start_s: f64,
    shape: LoadShape,
}

/// Goes back from load end as long as the increments stay regular in time and size.
fn regular_rise(levels: &[Level], noisy: bool) -> Option<Rise> {
    let top = levels.iter().map(|l| l.w).fold(f64::MIN, f64::max);
    let end = levels.iter().position(|l| l.w >= top)?;
    let step = |i: usize| (levels[i].t_s - levels[i - 1].t_s, levels[i].w - levels[i - 1].w);
    let late = (end / 2 + 1).max(end.saturating_sub(40)).min(end.saturating_sub(1)).max(2);
    let mut times: Vec<f64> = (late..=end).map(|i| step(i).0).collect();
    let mut rises: Vec<f64> = (late..=end).map(|i| step(i).1).collect();
    if times.is_empty() {
        return None;
    }
    let (every_s, rise_w) = (median(&mut times), median(&mut rises));
    let regular = |i: usize| {
        let (dt, dw) = step(i);
        dw > 0.25 * rise_w && dw <= 1.75 * rise_w + 1.0 && dt <= 1.6 * every_s + 5.0
    };
    // The wait before the first increment is the warm-up, so only its size must fit.
    let sized = |i: usize| {
        let dw = step(i).1;
        dw > 0.0 && dw <= 1.75 * rise_w + 1.0
    };
    let mut first = end;
    while first > 1 && regular(first) && sized(first - 1) {
        first -= 1;
    }
    if end - first < 2 || rise_w <= 0.0 {
        return None;
    }
    let chain = &levels[first..=end];
    let slope = slope_w_per_s(chain);
    if every_s >= 20.0 && !noisy {
        let shape = LoadShape::Steps { step_w: rise_w, length_s: every_s };
        return Some(Rise { first, start_s: levels[first].t_s, shape });
    }
    Some(Rise {
        first,
        start_s: line_start(levels, first, chain, slope),
        shape: LoadShape::Ramp(60.0 * slope),
    })
}

/// Where the line through the increments meets the load before them.
fn line_start(levels: &[Level], first: usize, chain: &[Level], slope: f64) -> f64 {
    let Some(before) = first.checked_sub(1).map(|i| levels[i]) else { return levels[first].t_s };
    let n = chain.len() as f64;
    let (t, w) = chain.iter().fold((0.0, 0.0), |(t, w), l| (t + l.t_s / n, w + l.w / n));
    (t - (w - before.w) / slope).clamp(before.t_s, levels[first].t_s)
}

fn slope_w_per_s(chain: &[Level]) -> f64 {
    let n = chain.len() as f64;
    let (mt, mw) = chain.iter().fold((0.0, 0.0), |(t, w), l| (t + l.t_s / n, w + l.w / n));
    let (mut tt, mut tw) = (0.0, 0.0);
    for l in chain {
        tt += (l.t_s - mt) * (l.t_s - mt);
        tw += (l.t_s - mt) * (l.w - mw);
    }
    tw / tt
}

fn median(values: &mut [f64]) -> f64 {
    values.sort_by(f64::total_cmp);
    values.get(values.len() / 2).copied().unwrap_or(0.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn trace(points: &[(f64, f64)]) -> Trace {
        Trace {
            t_s: points.iter().map(|p| p.0).collect(),
            value: points.iter().map(|p| p.1).collect(),
        }
    }

    #[test]
    fn a_held_first_load_is_warm_up() {
        // 50 W for 3 min, then 15 W each minute.
        let mut points = vec![(-180.0, 0.0), (0.0, 50.0)];
        points.extend((0..9).map(|k| (180.0 + 60.0 * f64::from(k), 65.0 + 15.0 * f64::from(k))));
        points.push((700.0, 0.0));
        let reading = read(&trace(&points));
        let shape = LoadShape::Steps { step_w: 15.0, length_s: 60.0 };
        let expected =
            LoadReading::Incremental { warm_up_s: Some(0.0), ramp_s: 180.0, end_s: 700.0, shape };
        assert_eq!(reading, expected);
    }

    #[test]
    fn a_continuous_ramp_is_read_with_its_rate() {
        // 20 W/min sampled every 3 s after 6 min at 0 W.
        let mut points: Vec<(f64, f64)> = (0..120).map(|k| (3.0 * f64::from(k), 0.0)).collect();
        points.extend((0..200).map(|k| (360.0 + 3.0 * f64::from(k), f64::from(k))));
        points.extend((0..60).map(|k| (960.0 + 3.0 * f64::from(k), 0.0)));
        let LoadReading::Incremental { ramp_s, end_s, shape: LoadShape::Ramp(rate), .. } =
            read(&trace(&points))
        else {
            panic!("not read as a ramp")
        };
        assert!((ramp_s - 360.0).abs() < 1e-6, "{ramp_s}");
        assert_eq!(end_s, 960.0);
        assert!((rate - 20.0).abs() < 1e-9, "{rate}");
    }

    #[test]
    fn a_wobbling_ramp_is_still_a_ramp() {
        let wobble = [0.0, 3.0, -2.0, 1.0, -3.0, 2.0, -1.0];
        let points: Vec<(f64, f64)> = (0..960)
            .map(|t| {
                let w = if t < 360 { 0.0 } else { f64::from(t - 360) / 3.0 };
                (f64::from(t), (w + if w > 0.0 { wobble[t as usize % 7] } else { 0.0 }).max(0.0))
            })
            .collect();
        match read(&trace(&points)) {
            LoadReading::Incremental { ramp_s, shape: LoadShape::Ramp(rate), .. } => {
                assert!((ramp_s - 360.0).abs() < 30.0, "{ramp_s}");
                assert!((rate - 20.0).abs() < 2.0, "{rate}");
            }
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn other_kinds_are_named() {
        let constant = trace(&[(0.0, 0.0), (180.0, 20.0), (360.0, 120.0), (900.0, 0.0)]);
        assert_eq!(read(&constant), LoadReading::Constant);
        let mut interval = vec![(0.0, 0.0)];
        for k in 0..5 {
            interval.push((60.0 + 120.0 * f64::from(k), 150.0));
            interval.push((120.0 + 120.0 * f64::from(k), 30.0));
        }
        assert_eq!(read(&trace(&interval)), LoadReading::Interval);
        let mut repeated = vec![(0.0, 0.0)];
        for start in [60.0, 900.0] {
            repeated.extend((1..8).map(|k| (start + 60.0 * f64::from(k), 20.0 * f64::from(k))));
            repeated.push((start + 500.0, 0.0));
        }
        assert_eq!(read(&trace(&repeated)), LoadReading::Repeated);
        assert_eq!(read(&trace(&[])), LoadReading::Nothing);
    }
}
