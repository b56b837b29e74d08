//! The bundled sets: their worked values (checked while they are read), what is locked, the traps
//! of coding and units, and a laboratory's own file.

use analysis::facts::{Mode, Sex};
use analysis::predicted::evaluate;
use analysis::predicted::sets::{
    Formula, Input, Person, PredictedSet, Predicts, Provenance, Term, WorkedOrigin,
};
use proptest::prelude::*;
use record::predicted_sets::{bundled, parse};

fn set(id: &str) -> PredictedSet {
    bundled().iter().find(|s| s.id == id).cloned().unwrap_or_else(|| panic!("no set {id}"))
}

fn person(sex: Sex, age: f64, height: f64, mass: f64, mode: Mode) -> Person {
    Person {
        age_years: Some(age),
        sex: Some(sex),
        height_cm: Some(height),
        mass_kg: Some(mass),
        fev1_l: None,
        mode: Some(mode),
    }
}

fn value(id: &str, predicts: Predicts, person: &Person) -> f64 {
    evaluate(&set(id), predicts, person, false).unwrap_or_else(|n| panic!("{id}: {}", n.code)).value
}

/// Sets with coefficients seen in a source, each quantity of them with two worked values that were
/// not inferred from the equation itself.
#[test]
fn at_least_fourteen_sets_are_selectable_and_each_is_worked() {
    let sets = bundled();
    let verified = |s: &&PredictedSet| {
        s.equations.iter().any(|e| {
            [&e.male, &e.female].into_iter().flatten().any(|a| a.provenance == Provenance::Verified)
        })
    };
    assert!(sets.iter().filter(verified).count() >= 14);
    for set in sets.iter() {
        for equation in &set.equations {
            let own = |o: &WorkedOrigin| *o != WorkedOrigin::InferredInputs;
            let worked = equation.worked.iter().filter(|w| own(&w.origin)).count();
            assert!(worked >= 1, "{} {}", set.id, equation.predicts.code());
        }
    }
}

#[test]
fn exactly_the_unseen_coefficients_are_locked() {
    let mut locked = Vec::new();
    for set in bundled().iter() {
        for e in &set.equations {
            for (sex, arm) in [("male", &e.male), ("female", &e.female)] {
                if arm.as_ref().is_some_and(|a| a.provenance == Provenance::Unconfirmed) {
                    locked.push(format!("{} {} {sex}", set.id, e.predicts.code()));
                }
            }
        }
    }
    locked.sort();
    // Memory only, or consistent only with printed results whose inputs were inferred.
    let both = |s: &str| [format!("{s} female"), format!("{s} male")];
    let mut expected: Vec<String> = [
        "ats-accp-2003 vo2-peak",
        "cooper-1984-mass vo2-peak",
        "fairbarn-1994 vo2-peak",
        "gellish-2007-quadratic hr-peak",
        "hollenberg-tager-2000 oues",
        "koch-2009 vo2-peak",
        "mvv-fev1-regression mvv",
        "wasserman-2012 vo2-peak",
    ]
    .iter()
    .flat_map(|s| both(s))
    .collect();
    expected.extend(
        ["blackie-1989 vo2-peak male", "inbar-1994 hr-peak male", "sun-2012 oues female"]
            .map(String::from),
    );
    expected.sort();
    assert_eq!(locked, expected);
}

/// Pistea et al. 2016 print 1.92 and 1.16 L/min for the base term without the term of excess mass,
/// for a man of 72 y, 172 cm, 80.0 kg and a woman of 72 y, 160 cm, 67.0 kg (inferred inputs). Only
/// the constant 50.75 of the 2003 form gives the man's 1.92; with 50.72 it is 1.915.
#[test]
fn the_base_term_of_hansen_gives_the_printed_values() {
    let set = set("ats-accp-2003");
    let equation = set.equation(Predicts::Vo2Peak).unwrap();
    for (sex, mass, printed) in [(Sex::Male, 80.0, 1.92), (Sex::Female, 67.0, 1.16)] {
        let Formula::MassBranches { factor, added_kg, .. } = &equation.arm(sex).unwrap().formula
        else {
            panic!("Hansen has branches");
        };
        let term = |t: &Term| t.times * if t.of.is_empty() { 1.0 } else { 72.0 };
        let k: f64 = factor.iter().map(term).sum();
        let litres = (mass + added_kg) * k / 1000.0;
        assert!((litres - printed).abs() < 0.0051, "{litres}");
    }
}

/// The difference between a man and a woman who are otherwise alike is the sex coefficient, with
/// the sign that the paper's own coding implies.
#[test]
fn sex_is_coded_inside_each_equation() {
    use Mode::{Cycle, Treadmill};
    for (id, predicts, mode, expected) in [
        // 10.9 · (2 − 1) and 13.7 · (1 − 0) mL/kg/min at 70 kg; 0.62 L/min; 288 kpm/min in W.
        ("friend-2018", Predicts::Vo2Peak, Treadmill, 10.9 * 70.0),
        ("friend-2017", Predicts::Vo2Peak, Treadmill, 13.7 * 70.0),
        ("jones-1985", Predicts::Vo2Peak, Cycle, 620.0),
        ("jones-1985", Predicts::WorkRate, Cycle, 288.0 * 9.80665 / 60.0),
        ("friend-o2-pulse-2020", Predicts::O2Pulse, Treadmill, 6.6),
        ("lowlands-wr-2018", Predicts::WorkRate, Cycle, 60.0),
        ("sun-2002", Predicts::VeVco2Nadir, Cycle, -0.97),
        ("hr-vo2-2020", Predicts::HrVo2Slope, Cycle, -14.3),
        // SHIP codes 1/2 at class 2, body mass index below 25: (8.8697 − 0.2512·2) mL/kg/min · 70.
        ("koch-2009", Predicts::Vo2Peak, Cycle, (8.8697 - 0.2512 * 2.0) * 70.0),
    ] {
        let at = |sex| value(id, predicts, &person(sex, 40.0, 172.0, 70.0, mode));
        let difference = at(Sex::Male) - at(Sex::Female);
        assert!((difference - expected).abs() < 1e-6, "{id}: {difference} for {expected}");
    }
}

#[test]
fn pounds_inches_and_metres_are_taken_as_printed() {
    let man = |height, mass| person(Sex::Male, 40.0, height, mass, Mode::Treadmill);
    // One pound less and one inch more, in mL/kg/min.
    let per_kg = |id, height, mass| value(id, Predicts::Vo2Peak, &man(height, mass)) / mass;
    let (h, m) = (172.0, 70.0);
    let pound = per_kg("friend-2018", h, m - 0.453_592_37) - per_kg("friend-2018", h, m);
    assert!((pound - 0.15).abs() < 1e-9, "{pound}");
    let inch = per_kg("friend-2018", h + 2.54, m) - per_kg("friend-2018", h, m);
    assert!((inch - 0.68).abs() < 1e-9, "{inch}");
    let pound = per_kg("friend-2017", h, m - 0.453_592_37) - per_kg("friend-2017", h, m);
    assert!((pound - 0.127).abs() < 1e-9, "{pound}");
    // Cooper takes metres: 10 cm are 449.55 mL/min.
    let boy = |height| person(Sex::Male, 12.0, height, 40.0, Mode::Cycle);
    let child = |height| value("cooper-1984", Predicts::Vo2Peak, &boy(height));
    assert!((child(150.0) - child(140.0) - 449.55).abs() < 1e-6);
    // Wohlfart's work rate takes metres; at the centre age the denominator is 2.
    let old = person(Sex::Male, 77.3, 180.0, 80.0, Mode::Cycle);
    let watts = value("wohlfart-2003", Predicts::WorkRate, &old);
    assert!((watts - (244.6 * 1.8 - 92.1) / 2.0).abs() < 1e-9, "{watts}");
}

/// SHIP takes an age class and body mass index as a flag: the prediction jumps at a birthday and
/// at an index of 25, and is level between.
#[test]
fn classes_and_flags_jump_where_the_paper_says() {
    let per_kg = |age, mass: f64| {
        // Height 200 cm: body mass index is mass / 4.
        let man = person(Sex::Male, age, 200.0, mass, Mode::Cycle);
        value("koch-2009", Predicts::Vo2Peak, &man) / mass
    };
    assert!((per_kg(35.0, 90.0) - per_kg(44.9, 90.0)).abs() < 1e-9, "level within a class");
    // From class 2 to 3 below 25 kg/m²: −0.9880 − 0.2356·(9 − 4) + 0.2512·1.
    let birthday = per_kg(45.0, 90.0) - per_kg(44.9, 90.0);
    assert!((birthday + 0.9880 + 0.2356 * 5.0 - 0.2512).abs() < 1e-9, "{birthday}");
    // An index of exactly 25 is not above it; beyond, class 2, S = 1:
    // 2.3597 − 2.0308·2 − 3.7405 + 1.3797·2.
    assert!((per_kg(40.0, 100.0) - per_kg(40.0, 90.0)).abs() < 1e-9);
    let flag = per_kg(40.0, 100.1) - per_kg(40.0, 100.0);
    assert!((flag - (2.3597 - 2.0308 * 2.0 - 3.7405 + 1.3797 * 2.0)).abs() < 1e-9, "{flag}");
}

#[test]
fn the_printed_error_of_a_median_curve_is_never_a_limit() {
    let man = person(Sex::Male, 45.0, 178.0, 80.0, Mode::Cycle);
    let prediction = evaluate(&set("lowlands-2021"), Predicts::Vo2Peak, &man, false).unwrap();
    assert_eq!((prediction.low, prediction.high, prediction.see), (None, None, None));
    assert!(prediction.doubts.iter().any(|d| d.code == "no-limit-published"));
}

/// Lower limits of the notes: Jones pred − 1.645·0.458; FRIEND 2018 pred − 10.857 mL/kg/min, which
/// for the woman of 60 on a cycle is 36 % of predicted: unreliable.
#[test]
fn lower_limits_and_their_reliability() {
    let man = person(Sex::Male, 45.0, 178.0, 80.0, Mode::Cycle);
    let woman = person(Sex::Female, 60.0, 163.0, 85.0, Mode::Cycle);
    let low = |id, p: &Person| evaluate(&set(id), Predicts::Vo2Peak, p, false).unwrap();
    let jones = low("jones-1985", &man);
    assert!((jones.low.unwrap() - 2180.0).abs() < 0.6, "{jones:?}");
    assert!((jones.z(2300.0).unwrap() + 1.38).abs() < 0.005);
    assert!(jones.doubts.iter().all(|d| d.code != "limit-unreliable"));
    let friend = low("friend-2018", &woman);
    assert!((friend.low.unwrap() / 85.0 - 6.15).abs() < 0.005, "{friend:?}");
    assert!(friend.doubts.iter().any(|d| d.code == "limit-unreliable"));
    let friend = low("friend-2018", &man);
    assert!((friend.z(2300.0).unwrap() + 1.53).abs() < 0.005);
}

const OWN: &str = include_str!("../../../assets/predicted/kleber-1997.json");

#[test]
fn a_laboratory_s_own_file_goes_through_the_same_parser() {
    let own = OWN.replace("kleber-1997", "our-lab-2024").replace("Kleber 1997", "Our laboratory");
    let set = parse(&own, "our-lab.json").unwrap();
    assert_eq!(set.id, "our-lab-2024");
    assert!(set.ranges.iter().all(|r| r.input == Input::AgeYears));
}

#[test]
fn a_malformed_file_is_refused_with_its_line_and_the_reason() {
    let line_of =
        |text: &str, part: &str| 1 + text[..text.find(part).expect("part")].matches('\n').count();
    for (from, to, reason) in [
        ("rampcrest-predicted/1", "rampcrest-predicted/9", "schema"),
        ("\"ve-vco2-slope-to-vt2\"", "\"ve-vco2-slop\"", "unknown quantity"),
        ("\"unit\": \"1\"", "\"unit\": \"W\"", "unit"),
        ("\"unit\": \"1\"", "\"unit\": \"furlong\"", "unknown unit"),
        ("\"of\": [\"age_years\"]", "\"of\": [\"shoe_size\"]", "unknown factor"),
        ("\"of\": [\"age_years\"]", "\"of\": [\"sex\"]", "sex_code"),
        ("\"low\": 16", "\"low\": 160", "down to"),
        ("\"provenance\": \"verified\"", "\"provenance\": \"sure\"", "unknown variant"),
        ("\"times\": 0.13", "\"times\": 0.14", "does not come out"),
        ("\"year\"", "\"yeer\"", "unknown field"),
        ("\"family\": \"kleber\",", "\"family\": \"kleber\"", "expected"),
    ] {
        let text = OWN.replacen(from, to, 1);
        assert_ne!(text, OWN, "{from}");
        let problem = parse(&text, "own.json").expect_err(to);
        assert_eq!(problem.code, "predicted-set-refused");
        assert!(problem.what.contains(reason), "{to}: {}", problem.what);
        let line: usize = problem.where_.rsplit(' ').next().unwrap().parse().unwrap();
        // The line of the change, or within the same object of the file.
        let changed = line_of(&text, to);
        assert!(line >= changed.saturating_sub(4) && line <= changed + 30, "{problem}: {changed}");
    }
}

#[test]
fn an_exact_line_is_named_for_a_single_field() {
    let text = OWN.replacen("\"low\": 16", "\"low\": \"sixteen\"", 1);
    let problem = parse(&text, "own.json").unwrap_err();
    let expected = 1 + text[..text.find("sixteen").unwrap()].matches('\n').count();
    assert!(problem.where_.ends_with(&format!("line {expected}")), "{problem}");
}

prop_compose! {
    fn any_person()(
        age in proptest::option::of(prop_oneof![0.0..120.0f64, any::<f64>()]),
        height in proptest::option::of(prop_oneof![40.0..230.0f64, any::<f64>()]),
        mass in proptest::option::of(prop_oneof![2.0..300.0f64, any::<f64>()]),
        fev1 in proptest::option::of(prop_oneof![0.2..7.0f64, any::<f64>()]),
        sex in proptest::option::of(prop_oneof![Just(Sex::Male), Just(Sex::Female)]),
        mode in proptest::option::of(prop_oneof![Just(Mode::Cycle), Just(Mode::Treadmill)]),
    ) -> Person {
        Person { age_years: age, sex, height_cm: height, mass_kg: mass, fev1_l: fev1, mode }
    }
}

proptest! {
    /// Whatever is typed: a finite positive value with limits on their sides, or a reason.
    #[test]
    fn any_person_gives_a_value_or_a_reason(person in any_person(), overridden in any::<bool>()) {
        for set in bundled().iter() {
            for equation in &set.equations {
                let Ok(p) = evaluate(set, equation.predicts, &person, overridden) else { continue };
                prop_assert!(p.value.is_finite() && p.value > 0.0, "{}: {p:?}", set.id);
                prop_assert!(p.low.is_none_or(|low| low <= p.value), "{}: {p:?}", set.id);
                prop_assert!(p.high.is_none_or(|high| high >= p.value), "{}: {p:?}", set.id);
                if set.adults_only {
                    prop_assert!(person.age_years.is_some_and(|a| a >= 18.0), "{}", set.id);
                }
                if !overridden {
                    for fit in &p.fits {
                        prop_assert!(fit.fit != analysis::predicted::validity::Fit::Out);
                    }
                }
            }
        }
    }

    /// No text makes the parser panic.
    #[test]
    fn any_change_of_a_file_is_read_or_refused(at in 0usize..3000, byte in any::<char>()) {
        let text: String = OWN
            .char_indices()
            .map(|(i, c)| if i == at { byte } else { c })
            .collect();
        let _ = parse(&text, "own.json");
    }
}
