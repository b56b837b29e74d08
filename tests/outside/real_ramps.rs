//! What the engine reads in the nine published ramps (citation beside the importer's checks).
//!
//! Rhythm is assumed to be sinus, for the count alone. No row, picture or page is made of them.

use std::path::PathBuf;

use analysis::decisions::Decisions;
use analysis::facts::{Facts, Mode, Rhythm};
use analysis::results::{At, Results};
use analysis::settings::Settings;
use record::import::{Answers, import};
use xtask::references::binomial::Count;

/// One person: number of the test, age, mass, height, power at the two thresholds as the authors
/// read them, W.
struct Person {
    test: u32,
    age: f64,
    mass: f64,
    height: f64,
    threshold_w: [f64; 2],
}

fn folder() -> PathBuf {
    let folder = std::env::var_os("RAMPCREST_OPEN_DATA").expect("RAMPCREST_OPEN_DATA is set");
    PathBuf::from(folder).join("cycle-ramps")
}

fn people() -> Vec<Person> {
    let text = std::fs::read_to_string(folder().join("subjects.csv")).expect("subjects.csv");
    let people: Vec<Person> = text
        .lines()
        .skip(1)
        .map(|line| {
            let cells: Vec<&str> = line.split(',').collect();
            let number = |i: usize| cells[i].parse::<f64>().expect("a number");
            Person {
                test: cells[0].parse().expect("a test"),
                age: number(1),
                mass: number(2),
                height: number(3),
                threshold_w: [number(4), number(5)],
            }
        })
        .collect();
    assert_eq!(people.len(), 9);
    people
}

fn derived(person: &Person, decisions: &Decisions) -> Results {
    let path = folder().join(format!("test-{:02}.csv", person.test));
    let bytes = std::fs::read(path).expect("a readable file");
    let read = import(&bytes, "", &Answers::none(), None).unwrap_or_else(|p| panic!("{p}"));
    let mut facts = Facts::default();
    facts.subject.age_years = Some(person.age);
    facts.subject.mass_kg = Some(person.mass);
    facts.subject.height_cm = Some(person.height);
    facts.test.rhythm = Some(Rhythm::Sinus);
    facts.test.mode = Some(Mode::Cycle);
    analysis::derive(&read.recording, &facts, decisions, &Settings::default())
}

#[test]
fn courses_of_nine_healthy_young_athletes_are_counted() {
    let mut words: Vec<String> = people()
        .iter()
        .map(|person| {
            let results = derived(person, &Decisions::default());
            let course = results.primary("o2-pulse-course", At::Ramp).or_else(|| {
                results.outcomes.iter().find(|o| o.id == "o2-pulse-course" && o.primary)
            });
            let course = course.expect("a course");
            let word = course.word().map_or("withheld", |w| w).to_owned();
            println!("test {:02}: {word} {:?}", person.test, course.reason);
            word
        })
        .collect();
    words.sort();
    let count = |word: &str| words.iter().filter(|w| *w == word).count();
    let counted = [
        ("rising", 6),
        ("rising-slowed", 1),
        ("flattened", 0),
        ("falling", 1),
        ("indeterminate", 0),
        ("withheld", 1),
    ];
    for (word, expected) in counted {
        assert_eq!(count(word), expected, "{word} among {words:?}");
    }
    let called = (words.len() - count("withheld")) as u64;
    let seen = Count { k: (count("flattened") + count("falling")) as u64, n: called };
    println!("flattened or falling in {} of {called}: {} %", seen.k, seen.percent());
    // Eight readings of healthy people cannot exclude a false call in half of them.
    let (low, high) = seen.limits();
    assert!(low < 0.01 && high > 0.5, "{low} to {high}");
}

/// Slope of breath values on the power held at their ends, by plain least squares over the rows from
/// 90 s after the first step to the last row at the highest power.
fn plain_slope(person: &Person) -> f64 {
    let path = folder().join(format!("test-{:02}.csv", person.test));
    let text = std::fs::read_to_string(path).expect("a readable file");
    let rows: Vec<[f64; 3]> = text
        .lines()
        .skip(1)
        .map(|line| {
            let cells: Vec<f64> = line.split(',').map(|c| c.parse().expect("a number")).collect();
            [cells[0], 1000.0 * cells[2], cells[3]]
        })
        .collect();
    let top = rows.iter().map(|r| r[2]).fold(0.0, f64::max);
    let base = rows.iter().find(|r| r[2] > 0.0).expect("a load")[2];
    let start = rows.iter().find(|r| r[2] > base).expect("a step")[0];
    let end = rows.iter().filter(|r| r[2] == top).map(|r| r[0]).fold(f64::MIN, f64::max);
    let inside = rows
        .windows(2)
        .filter(|w| w[1][0] >= start + 90.0 && w[1][0] <= end && w[1][1] != w[0][1])
        .map(|w| (w[1][2], w[1][1]));
    let (x, y): (Vec<f64>, Vec<f64>) = inside.unzip();
    analysis::regression::line(&x, &y).expect("a line").slope
}

#[test]
fn uptake_rises_with_work_as_in_health() {
    let mut slopes = Vec::new();
    for person in people() {
        let results = derived(&person, &Decisions::default());
        let slope = results.primary("dvo2-dwr", At::Ramp).expect("an outcome");
        let plain = plain_slope(&person);
        println!("test {:02}: {:?} {:?}, plain {plain:.2}", person.test, slope.value, slope.reason);
        let Some(value) = slope.number() else { continue };
        // Breath noise, the start of the steps as each side sees it: 12 %.
        assert!((value / plain - 1.0).abs() < 0.12, "test {:02}: {value}, {plain}", person.test);
        slopes.push(value);
    }
    // In one of the nine V̇O₂ itself fell by 0.3 L/min over the last two minutes (test 14); the
    // others lie within three SD of 10.3 ± 1.0 mL/min per W (Hansen et al., Am J Cardiol 1987).
    let usual = slopes.iter().filter(|s| (7.3..=13.3).contains(*s)).count();
    println!("{usual} of {} within 7.3 to 13.3 mL/min per W", slopes.len());
    assert!(slopes.len() >= 8 && usual + 1 >= slopes.len(), "{slopes:?}");
}

#[test]
fn without_carbon_dioxide_the_proposal_says_so_beside_the_authors_power() {
    for person in people() {
        let results = derived(&person, &Decisions::default());
        let [first, second] = person.threshold_w;
        for (id, at, watts) in [("vt1-vo2", At::Vt1, first), ("vt2-vo2", At::Vt2, second)] {
            let outcome = results.primary(id, at).expect("an outcome");
            let reason = outcome.reason.as_ref().expect("a reason");
            println!("test {:02}: authors {watts} W, here {}", person.test, reason.code);
            assert_eq!(reason.code, "channel-missing", "test {:02}: {id}", person.test);
        }
    }
}
