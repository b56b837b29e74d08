//! The error rates that statements name are those of the project's own table.

use std::fs;

use record::presentation::wording;

/// Per cent in column `column` of the row of null b under the heading on ramps of 8 to 12 min.
fn tabled(column: usize) -> f64 {
    let path = xtask::root().join("assets/references/errors.md");
    let table = fs::read_to_string(path).unwrap();
    let (_, after) = table.split_once("## Normals, ramps of 8, 10 and 12 min together").unwrap();
    let row = after.lines().find(|line| line.starts_with("| b |")).unwrap();
    let cell = row.split('|').nth(column).unwrap().trim();
    cell.split(' ').next().unwrap().parse().unwrap()
}

/// The N of "About N in 100 simulated normal ramps".
fn stated(code: &str) -> f64 {
    let text = wording::template(code).unwrap();
    let (_, after) = text.split_once("About ").unwrap();
    let (number, rest) = after.split_once(' ').unwrap();
    assert!(rest.starts_with("in 100 simulated normal ramps"), "{text}");
    number.parse().unwrap()
}

#[test]
fn statements_name_the_rates_of_the_table() {
    assert_eq!(stated("course-rising-slowed"), tabled(3).round());
    assert_eq!(stated("course-flattened"), tabled(4).round());
}
