//! One cell to a number, a missing value, or text. The decimal sign is decided once per file.

use serde::{Deserialize, Serialize};

/// The decimal sign of a file.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Decimal {
    /// `1712.5`.
    Point,
    /// `1712,5`.
    Comma,
}

impl Decimal {
    fn sign(self) -> char {
        if self == Decimal::Point { '.' } else { ',' }
    }
}

/// What a cell holds.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Cell {
    /// Nothing, or a spelling of "missing".
    Missing,
    /// A finite number.
    Number(f64),
    /// Anything else.
    Text,
}

/// Spellings of a missing value, in lower case.
const MISSING: &[&str] = &[
    "", "-", "--", "---", "----", "–", "—", ".", "..", "*", "**", "***", "n/a", "na", "n.a.",
    "nan", "null", "none", "#n/a", "#na", "#div/0!", "#value!", "#wert!", "#num!", "#ref!", "?",
    "x", "inf", "-inf",
];

/// Whether the cell is a spelling of "missing".
#[must_use]
pub fn is_missing(cell: &str) -> bool {
    let cell = cell.trim();
    let hashes = cell.len() > 1 && cell.bytes().all(|b| b == b'#');
    hashes || (cell.len() <= 8 && MISSING.contains(&cell.to_lowercase().as_str()))
}

/// Reads one cell.
#[must_use]
pub fn cell(text: &str, decimal: Decimal) -> Cell {
    if is_missing(text) {
        return Cell::Missing;
    }
    number(text, decimal).map_or(Cell::Text, Cell::Number)
}

/// Reads a number with the file's decimal sign; thousands may be grouped in threes by the other
/// sign, an apostrophe or a space.
#[must_use]
pub fn number(text: &str, decimal: Decimal) -> Option<f64> {
    let text = text.trim();
    if text.len() > 40 || !text.contains(|c: char| c.is_ascii_digit()) {
        return None;
    }
    let (negative, body) = match text.chars().next()? {
        sign @ ('-' | '\u{2212}') => (true, &text[sign.len_utf8()..]),
        '+' => (false, &text[1..]),
        _ => (false, text),
    };
    if !body.starts_with(|c: char| c.is_ascii_digit() || c == decimal.sign()) {
        return None;
    }
    let (mantissa, exponent) = match body.split_once(['e', 'E']) {
        Some((m, e)) => (m, Some(e)),
        None => (body, None),
    };
    let (whole, fraction) = match mantissa.split_once(decimal.sign()) {
        Some((w, f)) => (w, f),
        None => (mantissa, ""),
    };
    let digits = |s: &str| s.bytes().all(|b| b.is_ascii_digit());
    if !digits(fraction) {
        return None;
    }
    let whole = ungrouped(whole, decimal)?;
    let mut plain = format!("{whole}.{fraction}0");
    if let Some(e) = exponent {
        let size = e.strip_prefix(['-', '+']).unwrap_or(e);
        if size.is_empty() || size.len() > 3 || !digits(size) {
            return None;
        }
        plain.push('e');
        plain.push_str(e);
    }
    let value: f64 = plain.parse().ok()?;
    value.is_finite().then_some(if negative { -value } else { value })
}

/// The digits of a whole part, whose groups (if any) are all of three.
fn ungrouped(whole: &str, decimal: Decimal) -> Option<String> {
    let is_group_sign = |c: char| match c {
        '\'' | '’' | ' ' | '\u{a0}' | '\u{202f}' | '\u{2009}' => true,
        '.' | ',' => c != decimal.sign(),
        _ => false,
    };
    let groups: Vec<&str> = whole.split(is_group_sign).collect();
    let valid = groups.iter().all(|g| g.bytes().all(|b| b.is_ascii_digit()))
        && (groups.len() == 1
            || ((1..=3).contains(&groups[0].len()) && groups[1..].iter().all(|g| g.len() == 3)));
    valid.then(|| if whole.is_empty() { "0".to_owned() } else { groups.concat() })
}

/// Decides the decimal sign from all cells; `None` when only cells such as `1,712` speak, which
/// are a fraction in one reading and thousands in the other.
#[must_use]
pub fn sniff<'a>(cells: impl Iterator<Item = &'a str>) -> Option<Decimal> {
    let (mut point, mut comma, mut open) = (0_usize, 0_usize, 0_usize);
    for cell in cells {
        match vote(cell) {
            Vote::For(Decimal::Point) => point += 1,
            Vote::For(Decimal::Comma) => comma += 1,
            Vote::Open => open += 1,
            Vote::None => {}
        }
    }
    match point.cmp(&comma) {
        std::cmp::Ordering::Greater => Some(Decimal::Point),
        std::cmp::Ordering::Less => Some(Decimal::Comma),
        std::cmp::Ordering::Equal if point == 0 && open == 0 => Some(Decimal::Point),
        std::cmp::Ordering::Equal => None,
    }
}

enum Vote {
    For(Decimal),
    Open,
    None,
}

fn vote(cell: &str) -> Vote {
    let cell = cell.trim().trim_start_matches(['-', '+', '\u{2212}']);
    if !cell.contains(['.', ',']) {
        return Vote::None;
    }
    match (number(cell, Decimal::Point).is_some(), number(cell, Decimal::Comma).is_some()) {
        (true, false) => Vote::For(Decimal::Point),
        (false, true) => Vote::For(Decimal::Comma),
        (false, false) => Vote::None,
        // `0,547`: thousands never begin with a zero.
        (true, true) if cell.starts_with('0') => {
            Vote::For(if cell.contains('.') { Decimal::Point } else { Decimal::Comma })
        }
        (true, true) => Vote::Open,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_as_laboratories_write_them() {
        use Decimal::{Comma, Point};
        for (text, decimal, expected) in [
            ("1712.5", Point, Some(1712.5)),
            ("1712,5", Comma, Some(1712.5)),
            ("1.712,5", Comma, Some(1712.5)),
            ("1,712.5", Point, Some(1712.5)),
            ("1 712.5", Point, Some(1712.5)),
            ("1'712", Point, Some(1712.0)),
            ("1\u{202f}712,25", Comma, Some(1712.25)),
            ("\u{2212}3,5", Comma, Some(-3.5)),
            ("-.5", Point, Some(-0.5)),
            ("1.2E3", Point, Some(1200.0)),
            ("1e400", Point, None),
            ("12,5", Point, None),
            ("1,71,2", Point, None),
            ("12.5 W", Point, None),
            ("--5", Point, None),
            ("e5", Point, None),
            ("1:30", Point, None),
        ] {
            assert_eq!(number(text, decimal), expected, "{text}");
        }
    }

    #[test]
    fn missing_is_not_zero_and_not_text() {
        for text in ["", " ", "-", "---", "n/a", "NaN", "#DIV/0!", "####", "*", "."] {
            assert_eq!(cell(text, Decimal::Point), Cell::Missing, "{text:?}");
        }
        assert_eq!(cell("0", Decimal::Point), Cell::Number(0.0));
        assert_eq!(cell("cough", Decimal::Point), Cell::Text);
    }

    #[test]
    fn the_sign_is_decided_by_the_whole_file() {
        let sniff = |cells: &[&str]| super::sniff(cells.iter().copied());
        assert_eq!(sniff(&["1,712", "0,3", "12"]), Some(Decimal::Comma));
        assert_eq!(sniff(&["1,712", "12.5"]), Some(Decimal::Point));
        assert_eq!(sniff(&["1.712,5", "1.712"]), Some(Decimal::Comma));
        assert_eq!(sniff(&["1,712", "2,001"]), None);
        assert_eq!(sniff(&["1", "2"]), Some(Decimal::Point));
    }
}
