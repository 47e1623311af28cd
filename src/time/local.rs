//! From a local time, or the text of a time, to the instant: never guessed when clocks change.

use crate::time::moment::{Minutes, Moment};
use crate::time::zone::{Zone, ZoneOffset};
use chrono::{DateTime, Datelike, NaiveDate, NaiveDateTime, NaiveTime, TimeDelta, Utc};
use std::collections::BTreeSet;

/// The instants at which a zone's clocks show a given local time.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LocalTime {
    /// They show it once, as nearly always.
    Once(DateTime<Utc>),
    /// They show it twice, because they are put back.
    Twice {
        /// The earlier instant.
        first: DateTime<Utc>,
        /// The later instant.
        second: DateTime<Utc>,
    },
    /// They never show it, because they are put forward.
    Never {
        /// The local time at which they are put forward: the first that is never shown.
        begins: NaiveDateTime,
        /// The local time to which they are put forward.
        ends: NaiveDateTime,
        /// The instant at which that happens.
        at: DateTime<Utc>,
    },
}

/// The text of a time that gives no instant.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum TimeTextError {
    /// Not one of the forms that are read.
    #[error(
        "\"{0}\" is not a time; write 2026-09-17T06:20-03:00, 2026-09-17T09:20Z, or in local time 2026-09-17 06:20"
    )]
    Unreadable(String),
    /// The form is right, but no calendar or clock has such a day or hour.
    #[error("\"{0}\" names a day or an hour that does not exist")]
    NoSuchDay(String),
    /// Too far off to be meant.
    #[error("\"{0}\" is outside the years 1900 to 2199")]
    FarOff(String),
    /// Clocks are put back: the local time is meant once or the other time.
    #[error("\"{text}\" comes twice in {zone}, where clocks are put back: write {first} or {second}")]
    Twice {
        /// The text as found.
        text: String,
        /// The zone.
        zone: String,
        /// The earlier instant, in RFC 3339 with its offset.
        first: String,
        /// The later instant, in RFC 3339 with its offset.
        second: String,
    },
    /// Clocks are put forward: the local time is left out.
    #[error("\"{text}\" never comes in {zone}, where clocks go from {begins} straight to {ends} ({at})")]
    Never {
        /// The text as found.
        text: String,
        /// The zone.
        zone: String,
        /// The local time at which clocks are put forward.
        begins: String,
        /// The local time to which they are put forward.
        ends: String,
        /// The instant at which that happens, in UTC.
        at: String,
    },
}

/// The instants at which the clocks of `zone` show `local`.
#[must_use]
pub fn find_local(zone: &Zone, local: NaiveDateTime) -> LocalTime {
    // An instant shows `local` if the offset that holds there leads back to it. All offsets on earth lie within 14 hours,
    // so the offsets in force up to 16 hours either side are all that can matter.
    let if_utc = local.and_utc();
    let around = (-8..=8).map(|step| zone.offset_at(shift(if_utc, Minutes::hours(2 * step))).east);
    let offsets: BTreeSet<Minutes> = around.collect();
    let mut instants: Vec<DateTime<Utc>> = offsets
        .iter()
        .map(|east| (shift(if_utc, -*east), *east))
        .filter(|(instant, east)| zone.offset_at(*instant).east == *east)
        .map(|(instant, _)| instant)
        .collect();
    instants.sort_unstable();
    match (instants.first(), instants.last()) {
        (Some(first), Some(last)) if first < last => LocalTime::Twice { first: *first, second: *last },
        (Some(only), _) => LocalTime::Once(*only),
        _ => gap_around(zone, if_utc, &offsets),
    }
}

/// The jump that leaves out the local time `if_utc` (written as if it were UTC).
fn gap_around(zone: &Zone, if_utc: DateTime<Utc>, offsets: &BTreeSet<Minutes>) -> LocalTime {
    // Before the jump the smaller offset holds: read with the greater one, `local` lies before the jump, and after it
    // with the smaller one.
    let least = offsets.first().copied().unwrap_or_default();
    let most = offsets.last().copied().unwrap_or_default();
    let mut low = Moment::at_or_before(shift(if_utc, -most));
    let mut high = Moment::at_or_after(shift(if_utc, -least));
    let before = zone.offset_at(low.to_utc()).east;
    while high - low > Minutes::new(1) {
        let middle = low + Minutes::new((high - low).get() / 2);
        *(if zone.offset_at(middle.to_utc()).east == before { &mut low } else { &mut high }) = middle;
    }
    let (at, after) = (high.to_utc(), zone.offset_at(high.to_utc()).east);
    LocalTime::Never { begins: shift(at, before).naive_utc(), ends: shift(at, after).naive_utc(), at }
}

/// Reads RFC 3339 with an offset or Z, or local time in `zone`; to the minute or finer.
///
/// # Errors
/// See [`TimeTextError`].
pub fn read_time(zone: &Zone, text: &str) -> Result<DateTime<Utc>, TimeTextError> {
    let found = || text.to_owned();
    let written = split(text.trim()).ok_or_else(|| TimeTextError::Unreadable(found()))?;
    let local = written.local().ok_or_else(|| TimeTextError::NoSuchDay(found()))?;
    if !(1900..2200).contains(&local.year()) {
        return Err(TimeTextError::FarOff(found()));
    }
    if let Some(east) = written.east {
        return Ok(shift(local.and_utc(), -east));
    }
    match find_local(zone, local) {
        LocalTime::Once(instant) => Ok(instant),
        LocalTime::Twice { first, second } => Err(TimeTextError::Twice {
            text: found(),
            zone: zone.name().to_owned(),
            first: with_offset(first, &zone.offset_at(first)),
            second: with_offset(second, &zone.offset_at(second)),
        }),
        LocalTime::Never { begins, ends, at } => Err(TimeTextError::Never {
            text: found(),
            zone: zone.name().to_owned(),
            begins: begins.format("%Y-%m-%d %H:%M").to_string(),
            ends: ends.format("%H:%M").to_string(),
            at: at.format("%Y-%m-%dT%H:%MZ").to_string(),
        }),
    }
}

/// An instant in RFC 3339 with a zone's offset: "2026-11-01T01:30-04:00".
fn with_offset(instant: DateTime<Utc>, offset: &ZoneOffset) -> String {
    let (east, local) = (offset.east.get(), shift(instant, offset.east));
    let sign = if east < 0 { '-' } else { '+' };
    format!("{}{sign}{:02}:{:02}", local.format("%Y-%m-%dT%H:%M"), east.abs() / 60, east.abs() % 60)
}

/// `instant` later by `by`; at the ends of chrono's calendar, `instant`.
fn shift(instant: DateTime<Utc>, by: Minutes) -> DateTime<Utc> {
    instant.checked_add_signed(TimeDelta::minutes(by.get())).unwrap_or(instant)
}

/// The numbers of a time text, their form checked but not their sense.
struct Written {
    date: [u32; 3],
    clock: [u32; 3],
    nanosecond: u32,
    east: Option<Minutes>,
}

impl Written {
    fn local(&self) -> Option<NaiveDateTime> {
        let ([year, month, day], [hour, minute, second]) = (self.date, self.clock);
        let date = NaiveDate::from_ymd_opt(i32::try_from(year).ok()?, month, day)?;
        Some(date.and_time(NaiveTime::from_hms_nano_opt(hour, minute, second, self.nanosecond)?))
    }
}

/// Takes "2026-09-17T06:20[:30[.5]][Z|-03:00]" apart; the T may be a space or small, as may the Z.
fn split(text: &str) -> Option<Written> {
    let mut rest = text;
    let year = number(&mut rest, 4)?;
    let month = expect(&mut rest, &['-']).and_then(|()| number(&mut rest, 2))?;
    let day = expect(&mut rest, &['-']).and_then(|()| number(&mut rest, 2))?;
    let hour = expect(&mut rest, &['T', 't', ' ']).and_then(|()| number(&mut rest, 2))?;
    let minute = expect(&mut rest, &[':']).and_then(|()| number(&mut rest, 2))?;
    let (mut second, mut nanosecond) = (0, 0);
    if expect(&mut rest, &[':']).is_some() {
        second = number(&mut rest, 2)?;
        if expect(&mut rest, &['.']).is_some() {
            let digits = rest.len() - rest.trim_start_matches(|c: char| c.is_ascii_digit()).len();
            let fraction = rest.get(..digits).filter(|d| (1..=9).contains(&d.len()))?;
            nanosecond = format!("{fraction:0<9}").parse().ok()?;
            rest = rest.get(digits..)?;
        }
    }
    let east = offset(rest)?;
    Some(Written { date: [year, month, day], clock: [hour, minute, second], nanosecond, east })
}

/// `Some(None)` for no offset at all, `None` for a bad one.
fn offset(text: &str) -> Option<Option<Minutes>> {
    let sign = match text {
        "" => return Some(None),
        "Z" | "z" => return Some(Some(Minutes::ZERO)),
        _ if text.starts_with('-') => -1,
        _ if text.starts_with('+') => 1,
        _ => return None,
    };
    let mut rest = text.get(1..)?;
    let hours = number(&mut rest, 2)?;
    let minutes = expect(&mut rest, &[':']).and_then(|()| number(&mut rest, 2))?;
    (rest.is_empty() && hours <= 14 && minutes < 60)
        .then(|| Some(Minutes::new(sign * i64::from(hours * 60 + minutes))))
}

/// Exactly `digits` ASCII digits off the front of `rest`.
fn number(rest: &mut &str, digits: usize) -> Option<u32> {
    let (word, after) = rest.split_at_checked(digits)?;
    let value = word.bytes().all(|b| b.is_ascii_digit()).then(|| word.parse().ok())??;
    *rest = after;
    Some(value)
}

/// One of `marks` off the front of `rest`.
fn expect(rest: &mut &str, marks: &[char]) -> Option<()> {
    *rest = rest.strip_prefix(marks)?;
    Some(())
}
