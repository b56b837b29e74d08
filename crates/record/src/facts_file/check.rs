//! What a facts file must keep to beyond its shape: ranges that only a slip leaves, numbers that
//! fit the event, phases in order.

use super::codes::EventKind;
use super::types::{Event, FactsFile, Hb, OwnPoint, OwnTest};

/// A broken rule: the path and what is wrong.
pub(super) type Broken = (String, String);

/// Outside these ranges a number is a slip of the hand or of the unit (common practice).
fn ranges(file: &FactsFile) -> Vec<(&'static str, Option<f64>, f64, f64)> {
    let (s, t) = (&file.subject, &file.test);
    let drug = t.rate_slowing_drug.as_ref();
    let protocol = t.protocol.as_ref();
    vec![
        ("subject.age_years", s.age_years, 0.0, 120.0),
        ("subject.height_cm", s.height_cm, 50.0, 250.0),
        ("subject.mass_kg", s.mass_kg, 8.0, 400.0),
        ("subject.cohb", s.cohb, 0.0, 0.6),
        ("subject.fev1_l", s.fev1_l, 0.1, 10.0),
        ("subject.tlc_l", s.tlc_l, 0.5, 15.0),
        ("subject.mvv_l_min", s.mvv_l_min, 5.0, 400.0),
        ("test.fio2", t.fio2, 0.08, 1.0),
        ("test.rate_slowing_drug.last_dose_h", drug.and_then(|d| d.last_dose_h), 0.0, 1000.0),
        ("test.protocol.w_per_min", protocol.and_then(|p| p.w_per_min), 0.0, 200.0),
    ]
}

/// The first broken rule, if any.
pub(super) fn check(file: &FactsFile) -> Result<(), Broken> {
    for (path, value, low, high) in ranges(file) {
        within(path, value, low, high)?;
    }
    if let Some(hb) = &file.subject.hb {
        check_hb(hb)?;
    }
    if let Some(borg) = &file.test.borg {
        let (low, high) = borg.scale.map_or((0.0, 20.0), super::codes::BorgScale::range);
        within("test.borg.breathlessness", borg.breathlessness, low, high)?;
        within("test.borg.legs", borg.legs, low, high)?;
    }
    if let Some(own) = &file.test.own_test {
        check_own_test(own)?;
    }
    for (i, event) in file.events.iter().enumerate() {
        check_event(event).map_err(|(path, what)| (format!("events[{i}].{path}"), what))?;
    }
    check_phases(file)
}

fn within(path: &str, value: Option<f64>, low: f64, high: f64) -> Result<(), Broken> {
    match value {
        Some(v) if !(v >= low && v <= high) => {
            Err((path.to_owned(), format!("{v} is not between {low} and {high}")))
        }
        _ => Ok(()),
    }
}

fn check_hb(hb: &Hb) -> Result<(), Broken> {
    let broken = |what: String| Err(("subject.hb".to_owned(), what));
    match (hb.value, hb.unit) {
        (Some(value), Some(unit)) => {
            let grams = value * unit.g_per_l();
            if (20.0..=260.0).contains(&grams) {
                Ok(())
            } else {
                broken(format!(
                    "{value} {} is {grams:.0} g/L, not between 20 and 260 g/L; is the unit right?",
                    unit.code()
                ))
            }
        }
        (Some(_), None) => broken("a haemoglobin needs its unit: g/L, g/dL or mmol/L".into()),
        (None, _) => Ok(()),
    }
}

/// Plausible instants, the peak above the low one in both.
fn check_own_test(own: &OwnTest) -> Result<(), Broken> {
    let get = |p: &Option<OwnPoint>| p.as_ref().map_or((None, None), |p| (p.vo2_ml_min, p.hr));
    let (low, peak) = (get(&own.low), get(&own.peak));
    for (path, point) in [("test.own_test.low", low), ("test.own_test.peak", peak)] {
        within(&format!("{path}.vo2_ml_min"), point.0, 100.0, 8000.0)?;
        within(&format!("{path}.hr"), point.1, 30.0, 240.0)?;
    }
    let (Some(v), Some(h)) = (low.0.zip(peak.0), low.1.zip(peak.1)) else { return Ok(()) };
    if v.1 < v.0 + 200.0 || h.1 <= h.0 {
        let what = "peak does not lie above the low instant: V̇O₂ by 200 mL/min and HR";
        return Err(("test.own_test.peak".into(), what.into()));
    }
    Ok(())
}

/// The numbers an event of `kind` may hold, with their ranges.
fn allowed(kind: EventKind) -> &'static [(&'static str, f64, f64)] {
    match kind {
        EventKind::Bp => &[("sys_mmhg", 20.0, 350.0), ("dia_mmhg", 0.0, 250.0)],
        EventKind::Spo2 => &[("spo2_pct", 30.0, 100.0)],
        EventKind::Borg => &[("breathlessness", 0.0, 20.0), ("legs", 0.0, 20.0)],
        EventKind::GasSample => &[
            ("pao2_mmhg", 10.0, 700.0),
            ("paco2_mmhg", 5.0, 150.0),
            ("sao2", 0.2, 1.0),
            ("cohb", 0.0, 0.6),
        ],
        EventKind::Lactate => &[("lactate_mmol_l", 0.0, 40.0)],
        EventKind::IcManoeuvre => &[("ic_l", 0.1, 10.0)],
        EventKind::OxygenChange => &[("fio2", 0.08, 1.0)],
        _ => &[],
    }
}

fn check_event(event: &Event) -> Result<(), Broken> {
    if !event.t_s.is_finite() || event.t_s.abs() > 1e6 {
        return Err(("t_s".into(), format!("{} is not a time in s", event.t_s)));
    }
    let allowed = allowed(event.kind);
    for (field, value) in event.numbers() {
        match allowed.iter().find(|(name, ..)| *name == field) {
            Some((_, low, high)) => within(field, value, *low, *high)?,
            None if value.is_some() => {
                let what = format!("an event of kind {} has no such number", event.kind.code());
                return Err((field.into(), what));
            }
            None => {}
        }
    }
    Ok(())
}

fn check_phases(file: &FactsFile) -> Result<(), Broken> {
    let p = &file.phases;
    let starts =
        [("rest", p.rest), ("warm_up", p.warm_up), ("ramp", p.ramp), ("recovery", p.recovery)];
    let mut last = f64::NEG_INFINITY;
    for (name, start) in starts {
        let Some(t) = start else { continue };
        if !t.is_finite() || t.abs() > 1e6 || t <= last {
            let what = format!("{t} s does not come after the start of the phase before it");
            return Err((format!("phases.{name}"), what));
        }
        last = t;
    }
    Ok(())
}
