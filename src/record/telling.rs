//! The values an event is told with: names, winds, and times judged by when the event was known.

use crate::finding::table::{Item, Keys};
use crate::record::codes;
use crate::text::quantity::{id, instant, speed};
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use crate::units::speed::Knots;
use chrono::{DateTime, TimeDelta, Utc};

/// Orders and reports lie within 30 days of when they are known (our choice): what is further off is a slip of the pen.
const NEAR: TimeDelta = TimeDelta::days(30);

/// No wind above this is taken, in knots: the strongest gust measured outside a tornado was 113.2 m/s = 220 kt (WMO archive
/// of weather extremes, Barrow Island, 10 April 1996; from memory).
const STRONGEST_KT: f64 = 220.0;

/// The longest task id, in characters (our choice): two ids of 40 and a slash.
const LONGEST_TASK: usize = 81;

/// The longest file name, in characters (our choice).
const LONGEST_FILE: usize = 200;

/// The highest number of an event (our choice): a hundred storms of ten thousand.
const MOST_EVENTS: u32 = 1_000_000;

/// When an event was known, and the port's clock; without one of them times are read but not compared.
#[derive(Clone, Copy, Debug)]
pub struct Telling<'a> {
    /// When the port knew it; `None` if that could not be read, or not without a clock.
    pub known: Option<DateTime<Utc>>,
    /// The port's clock.
    pub clock: Option<&'a PortClock>,
}

impl Telling<'_> {
    /// A time that must be given, at most 30 days from when it is known.
    #[must_use]
    pub fn near(&self, keys: &mut Keys<'_>, key: &'static str) -> Option<DateTime<Utc>> {
        self.checked_near(&keys.required(key)?)
    }

    /// A time at most 30 days from when it is known; when it is known, if not given.
    #[must_use]
    pub fn near_or_known(&self, keys: &mut Keys<'_>, key: &'static str) -> Option<DateTime<Utc>> {
        keys.optional(key).map_or(self.known, |item| self.checked_near(&item))
    }

    /// A time at or before, and at most 30 days before, when it is known; when it is known, if not given.
    #[must_use]
    pub fn past_or_known(&self, keys: &mut Keys<'_>, key: &'static str) -> Option<DateTime<Utc>> {
        let Some(item) = keys.optional(key) else { return self.known };
        let time = self.checked_near(&item)?;
        if self.known.is_some_and(|known| known < time) {
            item.fault(
                codes::NOT_YET,
                format!("{} is {}, but it is told before that", item.key(), self.show(time)),
                "what was done or seen lies at or before the time at which it is known",
                "correct one of the two times",
            );
            return None;
        }
        Some(time)
    }

    /// Any time; when it is known, if not given.
    #[must_use]
    pub fn any_or_known(&self, keys: &mut Keys<'_>, key: &'static str) -> Option<DateTime<Utc>> {
        keys.optional(key).map_or(self.known, |item| instant(&item, self.clock))
    }

    /// The end of something that begins at `start`.
    #[must_use]
    pub fn end_after(&self, item: &Item<'_>, start: Option<DateTime<Utc>>) -> Option<DateTime<Utc>> {
        let end = instant(item, self.clock)?;
        let Some(start) = start.filter(|start| self.clock.is_some() && end <= *start) else {
            return Some(end);
        };
        item.fault(
            codes::ENDS_FIRST,
            format!("it ends {}, but begins {}", self.show(end), self.show(start)),
            "the end lies after the beginning",
            "correct one of the two times",
        );
        None
    }

    /// When something begins ("from"; when it is known if not given) and ends ("until"; `None` within if not given, or
    /// "unknown").
    #[must_use]
    pub fn from_until(&self, keys: &mut Keys<'_>) -> (Option<DateTime<Utc>>, Option<Option<DateTime<Utc>>>) {
        let from = self.any_or_known(keys, "from");
        let until = match keys.optional("until") {
            Some(item) if item.as_text() != Some("unknown") => self.end_after(&item, from).map(Some),
            _ => Some(None),
        };
        (from, until)
    }

    /// A time for a finding: as on the port's clock, or in UTC if that is not known.
    #[must_use]
    pub fn show(&self, time: DateTime<Utc>) -> String {
        show(self.clock, time)
    }

    fn checked_near(&self, item: &Item<'_>) -> Option<DateTime<Utc>> {
        let time = instant(item, self.clock)?;
        if self.known.is_some_and(|known| (time - known).abs() > NEAR) {
            item.fault(
                codes::FAR_OFF,
                format!("{} is {}, more than 30 days from when it is known", item.key(), self.show(time)),
                "times within 30 days of it",
                "correct the day, month or year of one of the two times",
            );
            return None;
        }
        Some(time)
    }
}

/// A time for a finding: as on the port's clock with the year, or in UTC if there is no clock.
#[must_use]
pub fn show(clock: Option<&PortClock>, time: DateTime<Utc>) -> String {
    let utc = PortClock::utc();
    let clock = clock.unwrap_or(&utc);
    let at = Moment::at_or_before(time);
    format!("{} {}", clock.local(at).format("%Y-%m-%d %H:%M"), clock.offset_at(at).abbreviation)
}

/// The id under a key that must be given.
#[must_use]
pub fn named(keys: &mut Keys<'_>, key: &'static str) -> Option<String> {
    keys.required(key).and_then(|item| id(&item)).map(str::to_owned)
}

/// The wind under "wind", no stronger than was ever measured.
#[must_use]
pub fn wind(keys: &mut Keys<'_>) -> Option<Knots> {
    let item = keys.required("wind")?;
    let wind = speed(&item)?;
    if wind.get() > STRONGEST_KT {
        item.fault(
            codes::ABSURD_WIND,
            format!("{wind} is stronger than any wind measured outside a tornado"),
            format!("at most {STRONGEST_KT} kt"),
            "correct the speed or its unit",
        );
        return None;
    }
    Some(wind)
}

/// A full task id: "H05", or "V01/sail" for the task of a thing.
#[must_use]
pub fn task_id(item: &Item<'_>) -> Option<String> {
    let text = item.text()?;
    let is_good = |part: &str| {
        !part.is_empty() && part.chars().all(|c| c.is_alphanumeric() || matches!(c, '-' | '_' | '.'))
    };
    if text.split('/').count() > 2 || !text.split('/').all(is_good) || text.chars().count() > LONGEST_TASK {
        item.bad_value(
            "this cannot be a task",
            "an id such as \"H05\", or thing and task such as \"V01/sail\"",
        );
        return None;
    }
    Some(text.to_owned())
}

/// The name of a file within the port's folder, with forward slashes.
#[must_use]
pub fn file_name(item: &Item<'_>) -> Option<String> {
    let text = item.text()?;
    let is_inside = |part: &str| !matches!(part.trim(), "" | "." | "..");
    let is_plain = !text.contains(|c: char| c.is_control() || matches!(c, '\\' | ':'));
    if !is_plain || !text.split('/').all(is_inside) || text.chars().count() > LONGEST_FILE {
        item.fault(
            codes::FILE_OUTSIDE,
            format!("{} = {} is not a file within the port's folder", item.key(), item.written()),
            "a name from that folder on, with forward slashes: \"advisories/12.txt\"",
            "put the file into the folder and name it so",
        );
        return None;
    }
    Some(text.to_owned())
}

/// The number of an event under "event".
#[must_use]
pub fn event_number(keys: &mut Keys<'_>) -> Option<usize> {
    let number = keys.required("event")?.count(1, MOST_EVENTS)?;
    usize::try_from(number).ok()
}

/// The SHA-256 of a file in 64 lower-case hexadecimal digits.
#[must_use]
pub fn file_digest(item: &Item<'_>) -> Option<String> {
    let text = item.text()?;
    if text.len() != 64 || !text.chars().all(|c| matches!(c, '0'..='9' | 'a'..='f')) {
        item.bad_value("this cannot be a SHA-256", "64 digits 0 to 9 and a to f");
        return None;
    }
    Some(text.to_owned())
}
