//! How a number was computed: method, formula and citation in words.

use analysis::facts::{Facts, Sex};
use analysis::predicted::sets::{Formula, Input, Limits, PredictedSet, Predicts, Term};
use analysis::results::{Outcome, Results};
use analysis::settings::Settings;

use super::key_table::set_names;
use super::labels::label;
use super::{values, wording};

/// The lines that tell how `outcome` was computed.
#[must_use]
pub fn computed(
    outcome: &Outcome,
    results: &Results,
    settings: &Settings,
    facts: &Facts,
) -> Vec<String> {
    let mut lines = vec![label(&outcome.id, outcome.at)];
    let code = outcome.method.as_ref();
    let sets: Vec<&PredictedSet> =
        settings.sets.iter().filter(|s| parts(code).any(|part| part == s.id)).collect();
    match analysis::methods::describe(code) {
        Some(how) => lines.push(format!("{}: {how}", wording::method(code))),
        None if !sets.is_empty() => lines.push(set_names(code, settings)),
        None => lines.push(wording::method(code)),
    }
    if let Some(method) = analysis::methods::find(code).filter(|m| !m.source.is_empty()) {
        lines.push(wording::with("how-source", &[("source", method.source.to_owned())]));
    }
    for set in sets {
        for quantity in predicted_by(set, outcome) {
            lines.push(formula(set, quantity, facts.subject.sex));
        }
        lines.push(wording::with("how-source", &[("source", set.citation.clone())]));
    }
    if let Some((from, to)) = outcome.basis.window_s {
        let args = [
            ("from", values::time(from)),
            ("to", values::time(to)),
            ("breaths", outcome.basis.breaths.to_string()),
        ];
        lines.push(wording::with("how-basis", &args));
    }
    lines.extend(outcome.reason.iter().map(|n| wording::text(n, results)));
    lines.extend(outcome.doubts.iter().map(|n| wording::text(n, results)));
    lines
}

/// The set ids in a method such as `hansen-1984/hansen-hr` or `hansen-1984-on-this-ramp`.
fn parts(code: &str) -> impl Iterator<Item = &str> {
    code.split('/').map(|part| part.strip_suffix("-on-this-ramp").unwrap_or(part))
}

/// The quantities of `set` that went into `outcome`.
fn predicted_by(set: &PredictedSet, outcome: &Outcome) -> Vec<Predicts> {
    let of = |q: &Predicts| {
        let id = q.predicted_id();
        outcome.id == id
            || q.measured_id().is_some_and(|m| {
                let stem = m.strip_suffix("-at-peak").unwrap_or(m);
                let stem = stem.strip_suffix("-peak").unwrap_or(stem);
                outcome.id.starts_with(m) || outcome.id.starts_with(stem)
            })
    };
    let given = || set.equations.iter().map(|e| e.predicts);
    let direct: Vec<Predicts> = given().filter(of).collect();
    if !direct.is_empty() {
        return direct;
    }
    // A quotient or a share rests on peak V̇O₂ and peak HR.
    given().filter(|q| matches!(q, Predicts::Vo2Peak | Predicts::HrPeak)).collect()
}

/// The equation of `set` for `quantity` as its paper prints it, of both sexes where that of the
/// person is not known.
#[must_use]
pub fn formula(set: &PredictedSet, quantity: Predicts, sex: Option<Sex>) -> String {
    let Some(equation) = set.equation(quantity) else { return set.name.clone() };
    let sexes = sex.map_or(vec![Sex::Male, Sex::Female], |s| vec![s]);
    let arms = sexes.into_iter().filter_map(|s| {
        let arm = equation.arm(s)?;
        Some(format!("{} {}", written(&arm.formula), equation.unit.shown()))
    });
    let mut texts: Vec<String> = arms.collect();
    texts.dedup();
    let see = sex.and_then(|s| equation.arm(s)).and_then(|a| match a.limits {
        Limits::See(see) => Some(wording::with("how-see", &[("see", format!("{see}"))])),
        _ => None,
    });
    let args = [
        ("quantity", label(quantity.predicted_id(), quantity.at())),
        ("set", set.name.clone()),
        ("formula", texts.join(" | ")),
    ];
    let words = wording::with("how-formula", &args);
    see.map_or(words.clone(), |see| format!("{words}; {see}"))
}

fn written(formula: &Formula) -> String {
    match formula {
        Formula::Sum(terms) => sum(terms),
        Formula::MassBranches { predicted_mass, factor, added_kg, over_per_kg } => {
            let args = [
                ("p", sum(predicted_mass)),
                ("k", sum(factor)),
                ("c", number(*added_kg)),
                ("over", number(*over_per_kg)),
            ];
            wording::with("how-mass-branches", &args)
        }
        Formula::Logistic { numerator, rate, centre_years } => {
            let top = sum(numerator);
            format!("({top}) ÷ (1 + exp({} · (A − {})))", number(*rate), number(*centre_years))
        }
    }
}

fn number(v: f64) -> String {
    format!("{v}").replace('-', "−")
}

fn sum(terms: &[Term]) -> String {
    let mut text = String::new();
    for term in terms {
        let sign = match (text.is_empty(), term.times < 0.0) {
            (true, false) => "",
            (true, true) => "−",
            (false, false) => " + ",
            (false, true) => " − ",
        };
        text.push_str(sign);
        let factors: Vec<String> = term.of.iter().map(|(i, power)| factor(*i, *power)).collect();
        let times = number(term.times.abs());
        match (factors.is_empty(), times == "1") {
            (true, _) => text.push_str(&times),
            (false, true) => text.push_str(&factors.join(" · ")),
            (false, false) => text.push_str(&format!("{times} · {}", factors.join(" · "))),
        }
    }
    text
}

fn factor(input: Input, power: f64) -> String {
    let name = wording::plain_text(&format!("how-input-{}", input.code().replace('_', "-")));
    if power == 1.0 { name } else { format!("{name}^{}", number(power)) }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::predicted_sets::bundled;

    fn of(id: &str, quantity: Predicts) -> String {
        let sets = bundled();
        let set = sets.iter().find(|s| s.id == id).expect("bundled");
        formula(set, quantity, Some(Sex::Male))
    }

    #[test]
    fn formulas_read_as_their_papers_print_them() {
        // Jones 1985: 0.046·H − 0.021·A − 0.62·sex − 4.31 L/min, SEE 0.458.
        let jones = of("jones-1985", Predicts::Vo2Peak);
        for part in ["0.046", "0.021", "0.62", "4.31", "0.458"] {
            assert!(jones.contains(part), "{part}: {jones}");
        }
        // Hansen: predicted mass 0.79·H − 60.7, k = 50.72 − 0.372·A.
        let hansen = of("hansen-1984", Predicts::Vo2Peak);
        for part in ["0.79", "60.7", "50.72 − 0.372"] {
            assert!(hansen.contains(part), "{part}: {hansen}");
        }
    }

    #[test]
    fn every_formula_of_the_program_has_its_words() {
        for set in bundled().iter() {
            for equation in &set.equations {
                let text = formula(set, equation.predicts, None);
                assert!(!text.contains(['[', '{']), "{text}");
            }
        }
    }
}
