//! The one catalogue of text: message code → template with named places, `{place}`.
//!
//! Each domain has a file of its own. A whole sentence is one template; no sentence is glued from
//! fragments, so that all of it can be translated.

mod course;
mod engine;
mod import;
mod methods;
mod page;
mod predicted;
mod signs;
mod start;
mod statements;
mod ui;

use analysis::note::{Arg, Note};
use analysis::results::Results;

use super::values;

/// Code and template.
pub type Entry = (&'static str, &'static str);

/// All files of the catalogue.
pub const FILES: &[&[Entry]] = &[
    engine::TEXTS,
    course::TEXTS,
    predicted::TEXTS,
    statements::TEXTS,
    signs::TEXTS,
    import::TEXTS,
    methods::TEXTS,
    ui::TEXTS,
    page::TEXTS,
    start::TEXTS,
];

/// The template of `code`.
#[must_use]
pub fn template(code: &str) -> Option<&'static str> {
    FILES.iter().flat_map(|file| file.iter()).find(|(c, _)| *c == code).map(|(_, t)| *t)
}

/// Every code with its template, in the order of the files.
pub fn catalogue() -> impl Iterator<Item = Entry> {
    FILES.iter().flat_map(|file| file.iter().copied())
}

/// The text of `note`. Outcomes among its arguments are looked up in `results` and rounded as
/// everywhere. A code without a text shows itself, with its arguments: nothing is hidden.
#[must_use]
pub fn text(note: &Note, results: &Results) -> String {
    let args: Vec<(&str, String)> =
        note.args.iter().map(|(name, arg)| (*name, shown(arg, results))).collect();
    match template(note.code) {
        Some(template) => fill(template, &args),
        None if args.is_empty() => format!("[{}]", note.code),
        None => {
            let list: Vec<String> = args.iter().map(|(n, v)| format!("{n}: {v}")).collect();
            format!("[{}; {}]", note.code, list.join(", "))
        }
    }
}

/// A text without places; the code in brackets where it has none.
#[must_use]
pub fn plain_text(code: &str) -> String {
    template(code).map_or_else(|| format!("[{code}]"), str::to_owned)
}

/// A text whose places are filled with `args`.
#[must_use]
pub fn with(code: &str, args: &[(&str, String)]) -> String {
    template(code).map_or_else(|| format!("[{code}]"), |t| fill(t, args))
}

/// A reading or class as a word for people; the code itself where the catalogue has no other.
#[must_use]
pub fn reading(word: &str) -> String {
    template(&format!("reading-{word}")).map_or_else(|| word.replace('-', " "), str::to_owned)
}

/// A word that stands as an argument.
#[must_use]
pub fn word(word: &str) -> String {
    template(&format!("word-{word}")).map_or_else(|| word.replace('-', " "), str::to_owned)
}

/// The name of the method with this code; the code's words where the catalogue has no name.
#[must_use]
pub fn method(code: &str) -> String {
    let mut key = String::with_capacity(code.len());
    let mut numbers: Vec<String> = Vec::new();
    for c in code.chars() {
        match (c.is_ascii_digit(), numbers.last_mut().filter(|_| key.ends_with('#'))) {
            (true, Some(number)) => number.push(c),
            (true, None) => {
                numbers.push(c.to_string());
                key.push('#');
            }
            (false, _) => key.push(c),
        }
    }
    let Some(name) = template(&format!("method-{key}")) else {
        return code.replace('-', " ");
    };
    numbers.iter().fold(name.to_owned(), |name, number| name.replacen('#', number, 1))
}

fn shown(arg: &Arg, results: &Results) -> String {
    match arg {
        Arg::Number(value, unit) => values::in_unit(*value, *unit),
        Arg::Count(n) => n.to_string(),
        Arg::Instant(s) | Arg::Duration(s) => values::time(*s),
        Arg::Quantity(quantity) => quantity.row().symbol.to_owned(),
        Arg::Outcome(id, at) => results
            .primary(id, *at)
            .map_or_else(|| values::NONE.to_owned(), |o| values::shown(o).with_unit()),
        Arg::Word(code) => word(code),
        Arg::Name(name) => name.clone().into_owned(),
    }
}

fn fill(template: &str, args: &[(&str, String)]) -> String {
    let mut out = String::with_capacity(template.len() + 32);
    let mut rest = template;
    while let Some(open) = rest.find('{') {
        out.push_str(&rest[..open]);
        let Some(length) = rest[open..].find('}') else { break };
        let name = &rest[open + 1..open + length];
        match args.iter().find(|(n, _)| *n == name) {
            Some((_, value)) => out.push_str(value),
            None => out.push_str(&rest[open..=open + length]),
        }
        rest = &rest[open + length + 1..];
    }
    out.push_str(rest);
    out
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeSet;

    #[test]
    fn no_code_stands_twice_and_templates_close_their_places() {
        let mut seen = BTreeSet::new();
        for (code, template) in catalogue() {
            assert!(seen.insert(code), "“{code}” stands twice");
            assert_eq!(template.matches('{').count(), template.matches('}').count(), "{code}");
            assert!(!template.trim().is_empty(), "{code}");
        }
    }

    #[test]
    fn places_are_filled_and_unknown_codes_show_themselves() {
        let results = Results::default();
        let note = Note::new("no-such-code").with("n", Arg::Count(3));
        assert_eq!(text(&note, &results), "[no-such-code; n: 3]");
        assert_eq!(fill("a {x} b {y}", &[("x", "1".into())]), "a 1 b {y}");
        assert_eq!(with("no-such-code", &[]), "[no-such-code]");
    }

    #[test]
    fn words_that_must_not_stand_on_paper_do_not() {
        // clinical rules 3, 7, 17.
        for (code, template) in catalogue() {
            let lower = template.to_lowercase();
            for banned in
                ["fit for surgery", "sv fell", "ischaemia detected", "poor effort", "proves"]
            {
                assert!(!lower.contains(banned), "{code}: {template}");
            }
        }
    }
}

#[cfg(test)]
mod circulation_tests;
