//! Bytes to text: UTF-8 with or without mark, UTF-16 with or without mark, else Windows-1252.

use serde::{Deserialize, Serialize};

use super::issue;
use crate::problem::Problem;

/// Largest file read, bytes.
pub const MAX_BYTES: usize = 32 << 20;

/// How the bytes of a table stand for text.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum Encoding {
    /// UTF-8.
    Utf8,
    /// UTF-16, low byte first.
    Utf16Le,
    /// UTF-16, high byte first.
    Utf16Be,
    /// Windows code page 1252.
    Windows1252,
}

/// Finds the encoding of `bytes`.
///
/// # Errors
/// Empty, too large, a spreadsheet or another binary file.
pub fn sniff(bytes: &[u8]) -> Result<Encoding, Problem> {
    if bytes.iter().all(u8::is_ascii_whitespace) {
        return Err(issue::empty());
    }
    if bytes.len() > MAX_BYTES {
        return Err(issue::too_large(bytes.len(), MAX_BYTES));
    }
    if bytes.starts_with(b"PK\x03\x04") || bytes.starts_with(&[0xD0, 0xCF, 0x11, 0xE0]) {
        return Err(issue::spreadsheet());
    }
    let encoding = match encoding_rs::Encoding::for_bom(bytes) {
        Some((found, _)) if found == encoding_rs::UTF_16LE => Encoding::Utf16Le,
        Some((found, _)) if found == encoding_rs::UTF_16BE => Encoding::Utf16Be,
        Some(_) => Encoding::Utf8,
        None => without_mark(bytes),
    };
    let text = decode(bytes, encoding);
    let odd = text.chars().filter(|c| is_binary(*c)).count();
    if odd * 200 > text.chars().count() {
        return Err(issue::binary());
    }
    Ok(encoding)
}

fn is_binary(c: char) -> bool {
    (c.is_control() && !matches!(c, '\t' | '\n' | '\r' | '\u{c}' | '\u{85}'))
        || c == char::REPLACEMENT_CHARACTER
}

/// ASCII written as UTF-16 has a NUL in every other byte.
fn without_mark(bytes: &[u8]) -> Encoding {
    let head = &bytes[..bytes.len().min(4096)];
    let nul = |phase: usize| head.iter().skip(phase).step_by(2).filter(|b| **b == 0).count();
    let half = head.len() / 2;
    if half > 0 && nul(1) * 10 > half * 7 && nul(0) * 10 < half {
        Encoding::Utf16Le
    } else if half > 0 && nul(0) * 10 > half * 7 && nul(1) * 10 < half {
        Encoding::Utf16Be
    } else if std::str::from_utf8(bytes).is_ok() {
        Encoding::Utf8
    } else {
        Encoding::Windows1252
    }
}

/// The text of `bytes`, without byte-order mark. What does not decode becomes U+FFFD.
#[must_use]
pub fn decode(bytes: &[u8], encoding: Encoding) -> String {
    let table = match encoding {
        Encoding::Utf8 => encoding_rs::UTF_8,
        Encoding::Utf16Le => encoding_rs::UTF_16LE,
        Encoding::Utf16Be => encoding_rs::UTF_16BE,
        Encoding::Windows1252 => encoding_rs::WINDOWS_1252,
    };
    table.decode_with_bom_removal(bytes).0.into_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn utf16(text: &str, low_first: bool, mark: bool) -> Vec<u8> {
        let mark = mark.then_some(0xFEFF_u16);
        mark.into_iter()
            .chain(text.encode_utf16())
            .flat_map(|u| if low_first { u.to_le_bytes() } else { u.to_be_bytes() })
            .collect()
    }

    #[test]
    fn the_same_header_is_read_from_every_encoding() {
        let text = "Zeit;V’O2;Gefälle\n0;1;2\n";
        let mut with_mark = vec![0xEF, 0xBB, 0xBF];
        with_mark.extend_from_slice(text.as_bytes());
        // Windows-1252: ’ is 0x92, ä is 0xE4 (code page table).
        let cp1252: Vec<u8> = b"Zeit;V\x92O2;Gef\xE4lle\n0;1;2\n".to_vec();
        for (bytes, expected) in [
            (text.as_bytes().to_vec(), Encoding::Utf8),
            (with_mark, Encoding::Utf8),
            (utf16(text, true, true), Encoding::Utf16Le),
            (utf16(text, false, true), Encoding::Utf16Be),
            (utf16(text, true, false), Encoding::Utf16Le),
            (utf16(text, false, false), Encoding::Utf16Be),
            (cp1252, Encoding::Windows1252),
        ] {
            assert_eq!(sniff(&bytes), Ok(expected));
            assert_eq!(decode(&bytes, expected), text);
        }
    }

    #[test]
    fn what_is_no_table_of_text_is_refused_by_name() {
        let noise: Vec<u8> =
            (0..4000_u32).map(|i| (i.wrapping_mul(2_654_435_761) >> 24) as u8).collect();
        for (bytes, code) in [
            (&b""[..], "import-empty"),
            (b" \r\n \t", "import-empty"),
            (b"PK\x03\x04....", "import-spreadsheet"),
            (&noise, "import-binary"),
        ] {
            assert_eq!(sniff(bytes).unwrap_err().code, code);
        }
    }
}
