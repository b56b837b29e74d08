//! The protocol as the load shows it, against the one that was stated.

use crate::note::{Arg, Note};
use crate::o2_pulse::suppress::load_fades;
use crate::quality::{Finding, Severity};
use crate::quantity::Quantity;
use crate::results::{At, LoadShape, Outcome};
use crate::stage::Stage;
use crate::unit::Unit;

/// Deviation that is marked: above both, W and share of the rise (common practice).
const STRAYS_W: f64 = 3.0;
const STRAYS_SHARE: f64 = 0.05;
/// Difference from the stated rise that is marked, relative (common practice).
const STATED_SHARE: f64 = 0.10;
/// Closing stretch in which load and cadence are looked at, s.
const LATE_S: f64 = 60.0;
/// Cadence under which pedalling is no longer regular, and a fall that counts, /min (common practice).
const CADENCE_LOW: f64 = 40.0;
const CADENCE_FALL: f64 = 10.0;

/// The load rebuilt from its regular increments.
#[derive(Clone, Copy)]
struct Rebuilt {
    from_s: f64,
    before_w: f64,
    shape: LoadShape,
}

impl Rebuilt {
    fn at(&self, t_s: f64) -> f64 {
        let into = t_s - self.from_s;
        match self.shape {
            LoadShape::Steps { step_w, length_s } => {
                self.before_w + step_w * ((into / length_s).floor() + 1.0)
            }
            LoadShape::Ramp(rate) => self.before_w + rate * into / 60.0,
            _ => f64::NAN,
        }
    }
}

/// Derives rise, step and deviation of the load.
pub(crate) fn derive(stage: &mut Stage<'_>) {
    let rebuilt = rebuilt(stage);
    let given = |id: &'static str, unit: Unit, value: Result<f64, Note>| match value {
        Ok(value) => Outcome::quantity(id, At::Ramp, "load-rebuilt", unit, value),
        Err(why) => Outcome::absent(id, At::Ramp, "load-rebuilt", why).in_unit(unit),
    };
    let step = |part: fn(f64, f64) -> f64| match rebuilt.as_ref().map_err(Clone::clone)?.shape {
        LoadShape::Steps { step_w, length_s } => Ok(part(step_w, length_s)),
        _ => Err(Note::new("load-without-steps")),
    };
    let rate = || stage.ramp_rate().filter(|r| r.is_finite()).ok_or_else(|| stage.no_ramp());
    let rise = rebuilt.clone().and_then(|_| rate());
    let off = rebuilt.clone().and_then(|r| deviation(stage, &r).ok_or_else(|| stage.no_ramp()));
    let outcomes = [
        given("load-rise", Unit::WattPerMin, rise),
        given("load-step", Unit::Watt, step(|w, _| w)),
        given("load-step-length", Unit::Second, step(|_, s| s)),
        given("load-deviation", Unit::Watt, off),
    ];
    for outcome in outcomes {
        stage.push(outcome);
    }
}

fn rebuilt(stage: &Stage<'_>) -> Result<Rebuilt, Note> {
    if let Some(why) = stage.missing(&[Quantity::WorkRate]) {
        return Err(why);
    }
    let (from_s, _) = stage.results.phases.ramp().ok_or_else(|| stage.no_ramp())?;
    let before_w = stage.recording.load.at(from_s - 1.0).unwrap_or(0.0);
    match stage.results.phases.load_shape {
        Some(shape @ (LoadShape::Ramp(_) | LoadShape::Steps { .. })) => {
            Ok(Rebuilt { from_s, before_w, shape })
        }
        _ => Err(Note::new("not-incremental")),
    }
}

/// Root mean square distance of the load from the rebuilt one, once a second, W.
fn deviation(stage: &Stage<'_>, rebuilt: &Rebuilt) -> Option<f64> {
    let (from, to) = stage.results.phases.ramp()?;
    let seconds = ((to - from).floor().clamp(0.0, 1e5)) as usize;
    let squares: f64 = (0..seconds)
        .filter_map(|k| {
            let t = from + k as f64 + 0.5;
            let off = stage.recording.load.at(t)? - rebuilt.at(t);
            Some(off * off)
        })
        .sum();
    Some((squares / seconds as f64).sqrt()).filter(|x| x.is_finite())
}

/// What the load and the cadence give to remark.
pub(crate) fn look(stage: &Stage<'_>, found: &mut Vec<Finding>) {
    let Some((from, to)) = stage.results.phases.ramp() else { return };
    let mut add = |note: Note, window_s: (f64, f64)| {
        found.push(Finding { note, severity: Severity::Caution, window_s: Some(window_s) });
    };
    // At load end itself the load is taken off.
    let late = ((to - LATE_S).max(from), to - 1.0);
    if let Some(note) = against_stated(stage) {
        add(note, (from, to));
    }
    if let Some(off) = stage.results.number("load-deviation", At::Ramp)
        && let Some(rate) = stage.ramp_rate()
        && off > STRAYS_W
        && off > STRAYS_SHARE * (rate * (to - from) / 60.0).abs()
    {
        add(Note::new("load-strays").with("deviation", Arg::Number(off, Unit::Watt)), (from, to));
    }
    if load_fades(&stage.recording.load, late, stage.results.phases.load_shape) {
        add(Note::new("load-fades").with("time", Arg::Instant(late.0)), late);
    }
    if let Some(note) = cadence(stage, (from, late.0), late) {
        add(note, late);
    }
}

/// The stated rise, where the load shows another one.
fn against_stated(stage: &Stage<'_>) -> Option<Note> {
    let stated = stage.facts.test.protocol?.w_per_min.filter(|w| *w > 0.0)?;
    let found = stage.results.number("load-rise", At::Ramp)?;
    ((found / stated - 1.0).abs() > STATED_SHARE).then(|| {
        Note::new("protocol-differs")
            .with("found", Arg::Number(found, Unit::WattPerMin))
            .with("stated", Arg::Number(stated, Unit::WattPerMin))
    })
}

/// Cadence that is low at the end, or fell by more than a little.
fn cadence(stage: &Stage<'_>, early: (f64, f64), late: (f64, f64)) -> Option<Note> {
    let before = stage.window_mean(Quantity::Cadence, early)?;
    let after = stage.window_mean(Quantity::Cadence, late)?;
    let fades = after < CADENCE_LOW || after < before - CADENCE_FALL;
    (fades && before > 0.0).then(|| {
        Note::new("cadence-fades")
            .with("before", Arg::Number(before, Unit::RevPerMin))
            .with("after", Arg::Number(after, Unit::RevPerMin))
    })
}

#[cfg(test)]
mod tests {
    use crate::breaths::{Breaths, Column};
    use crate::decisions::Decisions;
    use crate::facts::{Facts, Protocol};
    use crate::quantity::Quantity;
    use crate::recording::{Recording, Trace};
    use crate::results::{At, Results};
    use crate::settings::Settings;

    /// 3 min at 0 W, then `load` (s into the increments → W) for 10 min, 3 min at 0 W.
    fn run(load: impl Fn(f64) -> f64, cadence: impl Fn(f64) -> f64, stated: f64) -> Results {
        let t_s: Vec<f64> = (0..960).map(f64::from).collect();
        let w = |t: f64| if (180.0..780.0).contains(&t) { load(t - 180.0) } else { 0.0 };
        let value = t_s.iter().map(|t| w(*t)).collect();
        let end: Vec<f64> = (1..=320).map(|k| 3.0 * f64::from(k)).collect();
        let column =
            |f: &dyn Fn(f64) -> f64| -> Column { end.iter().map(|t| Some(f(*t))).collect() };
        let columns = [
            (Quantity::Vo2, column(&|t| 400.0 + 8.0 * w(t - 30.0))),
            (Quantity::Cadence, column(&cadence)),
        ];
        let recording = Recording {
            breaths: Breaths::new(end.clone(), None, columns.into()).unwrap(),
            load: Trace { t_s, value },
            ..Recording::default()
        };
        let mut facts = Facts::default();
        facts.test.protocol = Some(Protocol { kind: None, w_per_min: Some(stated) });
        crate::derive(&recording, &facts, &Decisions::default(), &Settings::default())
    }

    fn codes(results: &Results) -> Vec<&'static str> {
        results.quality.iter().map(|f| f.note.code).collect()
    }

    #[test]
    fn steps_are_rebuilt_with_size_and_length() {
        // 25 W each 2 min: 12.5 W/min, exactly as stated.
        let steps = |t: f64| 25.0 * ((t / 120.0).floor() + 1.0);
        let results = run(steps, |_| 60.0, 12.5);
        let value = |id| results.number(id, At::Ramp).unwrap();
        assert!((value("load-rise") - 12.5).abs() < 1e-9);
        assert!((value("load-step") - 25.0).abs() < 1e-9);
        assert!((value("load-step-length") - 120.0).abs() < 1e-9);
        assert!(value("load-deviation") < 1e-9);
        for code in ["protocol-differs", "load-strays", "load-fades", "cadence-fades"] {
            assert!(!codes(&results).contains(&code), "{code}");
        }
    }

    #[test]
    fn another_rise_than_stated_and_a_fading_cadence_are_marked() {
        let results = run(|t| t / 3.0, |t| if t < 720.0 { 62.0 } else { 45.0 }, 15.0);
        assert!((results.number("load-rise", At::Ramp).unwrap() - 20.0).abs() < 0.1);
        let step = results.primary("load-step", At::Ramp).unwrap();
        assert_eq!(step.reason.as_ref().unwrap().code, "load-without-steps");
        let codes = codes(&results);
        assert!(codes.contains(&"protocol-differs") && codes.contains(&"cadence-fades"));
        assert!(!codes.contains(&"load-fades"));
    }

    #[test]
    fn a_load_that_falls_before_the_end_is_marked() {
        let fading = |t: f64| if t < 560.0 { t / 3.0 } else { 150.0 };
        let codes = codes(&run(fading, |_| 60.0, 20.0));
        assert!(codes.contains(&"load-fades"), "{codes:?}");
    }
}
