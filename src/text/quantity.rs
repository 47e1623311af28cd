//! Quantities, times and ids out of a table's values; whatever is wrong becomes a finding.

use crate::finding::table::Item;
use crate::time::clock::PortClock;
use crate::time::local::TimeTextError;
use crate::time::moment::{Minutes, Moment};
use crate::units::bearing::Bearing;
use crate::units::chance::Chance;
use crate::units::length::Metres;
use crate::units::number::{NumberError, split_unit};
use crate::units::speed::Knots;
use chrono::{DateTime, NaiveTime, Utc};

/// The longest time span that a port's file may name (our choice): 30 days, far beyond any forecast.
const LONGEST: Minutes = Minutes::hours(30 * 24);

/// The longest id, in characters (our choice): it must fit a column on paper.
const LONGEST_ID: usize = 40;

/// A time span of at least one minute and at most 30 days: "1 h 15 min".
#[must_use]
pub fn lasting(item: &Item<'_>) -> Option<Minutes> {
    span_between(item, Minutes::new(1), "at least 1 min and at most 30 days, such as \"1 h 15 min\"")
}

/// A time span that may be nothing: "0 min" to 30 days.
#[must_use]
pub fn lasting_or_none(item: &Item<'_>) -> Option<Minutes> {
    span_between(item, Minutes::ZERO, "not negative and at most 30 days, such as \"45 min\"")
}

/// A time span either way: "-6 h" is earlier; at most 30 days.
#[must_use]
pub fn shift(item: &Item<'_>) -> Option<Minutes> {
    span_between(item, -LONGEST, "at most 30 days either way, such as \"9 h\" or \"-30 min\"")
}

fn span_between(item: &Item<'_>, least: Minutes, allowed: &str) -> Option<Minutes> {
    let text = quantity_text(item, "h")?;
    let Some(span) = Minutes::parse(text) else {
        item.bad_value("this is not a time span in whole minutes; units are d, h and min", allowed);
        return None;
    };
    if span < least || span > LONGEST {
        item.bad_value("this time span is out of range", allowed);
        return None;
    }
    Some(span)
}

/// A wind speed above 0 and up to 400 kt: "34 kt".
#[must_use]
pub fn speed(item: &Item<'_>) -> Option<Knots> {
    let speed = checked(item, "kt", Knots::parse(quantity_text(item, "kt")?), "a speed such as \"34 kt\"")?;
    if speed.get() <= 0.0 {
        item.bad_value("no wind at all", "more than 0 kt");
        return None;
    }
    Some(speed)
}

/// A length between `least` and `most` metres: "11.8 m".
#[must_use]
pub fn metres(item: &Item<'_>, least: f64, most: f64) -> Option<Metres> {
    let length = checked(item, "m", Metres::parse(quantity_text(item, "m")?), "a length such as \"11.8 m\"")?;
    if length.get() < least || length.get() > most {
        item.bad_value("this length is out of range", &format!("{least} m to {most} m"));
        return None;
    }
    Some(length)
}

/// A share from 0 to 100 %: "10 %".
#[must_use]
pub fn share(item: &Item<'_>) -> Option<Chance> {
    checked(item, "%", Chance::parse(quantity_text(item, "%")?), "a share such as \"10 %\"")
}

/// A direction in degrees true: "090 deg".
#[must_use]
pub fn bearing(item: &Item<'_>) -> Option<Bearing> {
    let text = quantity_text(item, "deg")?;
    let read = split_unit(text, "deg").and_then(|(degrees, unit)| match unit {
        "deg" | "\u{b0}" => Bearing::new(degrees),
        _ => Err(NumberError::Unreadable { text: text.to_owned(), units: "deg" }),
    });
    checked(item, "deg", read, "a direction true, \"000 deg\" to \"360 deg\"")
}

/// A time with its offset ("2026-09-17T06:20-03:00", "2026-09-17T09:20Z") or in the port's local time ("2026-09-17 06:20").
///
/// Without a `clock` (the port's zone is itself at fault) a local time is passed over in silence.
#[must_use]
pub fn instant(item: &Item<'_>, clock: Option<&PortClock>) -> Option<DateTime<Utc>> {
    let text = item.time_text()?;
    let Some(clock) = clock else {
        return PortClock::utc().read(text).ok();
    };
    let codes = item.page().codes();
    let found = |error: &TimeTextError| format!("{}: {error}", item.key());
    match clock.read(text) {
        Ok(time) => Some(time),
        Err(error @ TimeTextError::Twice { .. }) => {
            item.fault(codes.time_fold, found(&error), "", "write the one you mean, with its offset");
            None
        }
        Err(error @ TimeTextError::Never { .. }) => {
            item.fault(codes.time_gap, found(&error), "", "write the time you mean, with its offset");
            None
        }
        Err(error) => {
            item.fault(codes.bad_time, found(&error), "", "correct the time");
            None
        }
    }
}

/// A time of day: "06:00".
#[must_use]
pub fn time_of_day(item: &Item<'_>) -> Option<NaiveTime> {
    let text = item.time_text()?;
    let time = NaiveTime::parse_from_str(text, "%H:%M").ok();
    if time.is_none() {
        let found = format!("{} = \"{text}\" is not a time of day", item.key());
        item.fault(item.page().codes().bad_time, found, "\"00:00\" to \"23:59\"", "correct the time");
    }
    time
}

/// An id: 1 to 40 letters, digits, hyphens, underscores or full stops.
#[must_use]
pub fn id<'t>(item: &Item<'t>) -> Option<&'t str> {
    let text = item.text()?;
    let is_good = text.chars().all(|c| c.is_alphanumeric() || matches!(c, '-' | '_' | '.'));
    if !is_good || text.chars().count() > LONGEST_ID {
        item.bad_value("this cannot be an id", "1 to 40 letters, digits, - _ or . without blanks");
        return None;
    }
    Some(text)
}

/// Whether a text is meant as a time: it begins with a year.
#[must_use]
pub fn looks_like_a_time(text: &str) -> bool {
    let mut letters = text.trim().chars();
    letters.by_ref().take(4).filter(char::is_ascii_digit).count() == 4 && letters.next() == Some('-')
}

/// The moment as files may state it: to the minute, in UTC.
#[must_use]
pub fn in_utc(time: DateTime<Utc>) -> String {
    Moment::at_or_before(time).to_string()
}

/// The text of a quantity; a bare number is a finding that names the unit.
fn quantity_text<'t>(item: &Item<'t>, unit: &str) -> Option<&'t str> {
    let number =
        item.bare_number().or_else(|| item.as_text().filter(|text| text.trim().parse::<f64>().is_ok()));
    let Some(number) = number else { return item.text() };
    if number.trim().parse::<f64>().is_ok_and(f64::is_finite) {
        item.fault(
            item.page().codes().no_unit,
            format!("{} = {} has no unit", item.key(), item.written()),
            format!("a number with its unit in quotation marks, such as \"{number} {unit}\""),
            "add the unit that is meant",
        );
    } else {
        item.bad_value("this is not a number", &format!("a finite number with its unit, {unit}"));
    }
    None
}

fn checked<T>(item: &Item<'_>, unit: &str, read: Result<T, NumberError>, allowed: &str) -> Option<T> {
    match read {
        Ok(value) => Some(value),
        Err(error @ NumberError::Unreadable { .. }) => {
            item.bad_value(error.to_string(), &format!("{allowed}; the usual unit is {unit}"));
            None
        }
        Err(error) => {
            item.bad_value(error.to_string(), allowed);
            None
        }
    }
}
