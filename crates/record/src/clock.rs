//! Instants are given from outside: nothing in this crate asks the machine for the time.

use time::format_description::well_known::Rfc3339;
use time::macros::format_description;
use time::{OffsetDateTime, UtcOffset};

use crate::problem::Problem;

/// The instant `text` names, RFC 3339 with offset.
///
/// # Errors
/// It is no such instant.
pub fn parse(text: &str) -> Result<OffsetDateTime, Problem> {
    OffsetDateTime::parse(text, &Rfc3339).map_err(|_| {
        Problem::new(
            "time-not-rfc3339",
            "the clock",
            format!("“{text}” is not a time with date and offset."),
            "Write it as 2026-11-24T10:51:00+01:00.",
        )
    })
}

/// `instant` as RFC 3339, to the second, with its own offset.
#[must_use]
pub fn write(instant: OffsetDateTime) -> String {
    let whole = instant.replace_nanosecond(0).unwrap_or(instant);
    whole.format(&Rfc3339).unwrap_or_default()
}

/// The instant of `SOURCE_DATE_EPOCH`, in UTC.
///
/// # Errors
/// It is not a number of seconds that a calendar holds.
pub fn from_epoch(seconds: &str) -> Result<String, Problem> {
    seconds
        .trim()
        .parse()
        .ok()
        .and_then(|s: i64| OffsetDateTime::from_unix_timestamp(s).ok())
        .map(|t| write(t.to_offset(UtcOffset::UTC)))
        .ok_or_else(|| {
            Problem::new(
                "time-not-rfc3339",
                "SOURCE_DATE_EPOCH",
                format!("“{seconds}” is not a number of seconds."),
                "Give whole seconds since 1 January 1970.",
            )
        })
}

/// Date and clock time for people, `24 Nov 2026, 10:26 h`; the text itself where it is none.
#[must_use]
pub fn shown(text: &str) -> String {
    let form =
        format_description!("[day padding:none] [month repr:short] [year], [hour]:[minute] h");
    parse(text).ok().and_then(|t| t.format(form).ok()).unwrap_or_else(|| text.to_owned())
}

/// The same with the offset, `24 Nov 2026, 10:26 h (UTC+01:00)`, for signatures.
#[must_use]
pub fn shown_with_offset(text: &str) -> String {
    let Ok(instant) = parse(text) else { return text.to_owned() };
    let (h, m, _) = instant.offset().as_hms();
    let sign = if h < 0 || m < 0 { '−' } else { '+' };
    format!("{} (UTC{sign}{:02}:{:02})", shown(text), h.unsigned_abs(), m.unsigned_abs())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn instants_are_read_and_shown() {
        let text = "2026-11-24T10:51:07+01:00";
        assert_eq!(write(parse(text).expect("reads")), text);
        assert_eq!(shown(text), "24 Nov 2026, 10:51 h");
        assert_eq!(shown_with_offset(text), "24 Nov 2026, 10:51 h (UTC+01:00)");
        // 86 400 s after the epoch is the start of its second day.
        assert_eq!(from_epoch("86400").expect("reads"), "1970-01-02T00:00:00Z");
        assert!(parse("yesterday").is_err() && from_epoch("x").is_err());
    }
}
