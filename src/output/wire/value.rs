//! How times, numbers and whole documents are written in JSON.

use crate::output::escape::visible_json;
use crate::plan::sheet::Point;
use crate::time::moment::Moment;
use crate::units::chance::Chance;
use chrono::{DateTime, SecondsFormat, Utc};
use serde::Serialize;
use serde_json::Number;

/// The version of all documents: it rises only if a key changes its meaning or goes.
pub const SCHEMA: u32 = 1;

/// A document as text, indented, with a line end; direction marks and the like in names are written as JSON escapes.
///
/// # Errors
/// What serde_json reports; the types of this room give it no reason.
pub fn to_text(document: &impl Serialize) -> Result<String, serde_json::Error> {
    let mut text = visible_json(&serde_json::to_string_pretty(document)?);
    text.push('\n');
    Ok(text)
}

/// "2026-09-17T09:20:00Z".
#[must_use]
pub fn instant(at: DateTime<Utc>) -> String {
    at.to_rfc3339_opts(SecondsFormat::Secs, true)
}

/// "2026-09-17T09:20:00Z".
#[must_use]
pub fn time(at: Moment) -> String {
    instant(at.to_utc())
}

/// A time, or null.
#[must_use]
pub fn maybe(at: Option<Moment>) -> Option<String> {
    at.map(time)
}

/// A point of a distribution of times: a time, "after_end", or null where too few scenarios reach it.
#[must_use]
pub fn point(point: Point) -> Option<String> {
    match point {
        Point::At(at) => Some(time(at)),
        Point::AfterEnd => Some("after_end".to_owned()),
        Point::Unknown => None,
    }
}

/// A number without a needless ".0": 34, 22.5. What is not finite becomes 0; the types above allow none.
#[must_use]
pub fn number(value: f64) -> Number {
    // Speeds and positions come from decimal texts: a difference below 1e-9 is the binary's, not the writer's.
    let whole = value.round();
    if (value - whole).abs() < 1e-9 && whole.abs() < 1e9 {
        return Number::from(whole as i64);
    }
    Number::from_f64(value).unwrap_or_else(|| Number::from(0))
}

/// A chance as a share to four places: the scenarios, at most 10,000, are too few to fill more.
#[must_use]
pub fn chance(chance: Chance) -> f64 {
    (chance.get() * 10_000.0).round() / 10_000.0
}

#[cfg(test)]
mod tests {
    use super::{number, to_text};

    #[test]
    fn whole_numbers_have_no_decimal_point() {
        assert_eq!(serde_json::to_string(&[number(34.0), number(-40.8)]).unwrap(), "[34,-40.8]");
        assert_eq!(number(f64::NAN).to_string(), "0");
    }

    #[test]
    fn text_turned_round_is_written_as_an_escape() {
        assert_eq!(to_text(&["a\u{202e}b"]).unwrap(), "[\n  \"a\\u202eb\"\n]\n");
    }
}
