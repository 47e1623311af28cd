//! Times for people: local with its zone, and UTC; rounded to the safe side.

use crate::output::layout::glued;
use crate::time::clock::PortClock;
use crate::time::moment::{Minutes, Moment};
use chrono::{Datelike, NaiveDateTime};

/// Times are told to this grain within [`NEAR`] of now (issue text and conventions: 5 min near, 30 min beyond).
const NEAR_GRAIN: Minutes = Minutes::new(5);
/// And to this one beyond.
const FAR_GRAIN: Minutes = Minutes::new(30);
/// How far "near" goes.
const NEAR: Minutes = Minutes::hours(24);
/// So far from now a weekday alone names the day.
const WEEKDAY_IS_ENOUGH: Minutes = Minutes::hours(5 * 24);

/// Writes times for people as a port's clock shows them, seen from `now`.
#[derive(Clone, Copy, Debug)]
pub struct Times<'a> {
    clock: &'a PortClock,
    now: Moment,
}

impl<'a> Times<'a> {
    /// Times on this clock, seen from `now`.
    #[must_use]
    pub fn new(clock: &'a PortClock, now: Moment) -> Times<'a> {
        Times { clock, now }
    }

    /// The time from which the others are seen.
    #[must_use]
    pub fn now(&self) -> Moment {
        self.now
    }

    /// "Thu 17 Sep 2026 06:20 UTC-3 (09:20Z)".
    #[must_use]
    pub fn full(&self, at: Moment) -> String {
        let local = self.local(at).format("%a %-d %b %Y %H:%M");
        glued(&format!("{local} {} ({})", self.zone(at), self.utc(at)))
    }

    /// "Thu 06:20"; with its date too where the weekday alone would not name the day; with its zone where the clocks
    /// are changed between now and then.
    #[must_use]
    pub fn local_day(&self, at: Moment) -> String {
        let is_near = -WEEKDAY_IS_ENOUGH <= at - self.now && at - self.now <= WEEKDAY_IS_ENOUGH;
        let pattern = match (is_near, self.local(at).year() == self.local(self.now).year()) {
            (true, _) => "%a %H:%M",
            (false, true) => "%a %-d %b %H:%M",
            (false, false) => "%a %-d %b %Y %H:%M",
        };
        let text = self.local(at).format(pattern).to_string();
        glued(&if self.zone(at) == self.zone(self.now) { text } else { format!("{text} {}", self.zone(at)) })
    }

    /// "Thu 06:20 (09:20Z)"; "Thu 09:20Z" where the clock shows UTC.
    #[must_use]
    pub fn both(&self, at: Moment) -> String {
        if self.clock.offset_at(at).east == Minutes::ZERO {
            return format!("{}Z", self.local_day(at));
        }
        glued(&format!("{} ({})", self.local_day(at), self.utc(at)))
    }

    /// "06:20" within the local day of `day`, else "Thu 06:20".
    #[must_use]
    pub fn within(&self, day: Moment, at: Moment) -> String {
        if self.is_same_day(day, at) {
            self.local(at).format("%H:%M").to_string()
        } else {
            self.local_day(at)
        }
    }

    /// "09:20Z", or "Fri 02:20Z" where UTC has another day than the port.
    #[must_use]
    pub fn utc(&self, at: Moment) -> String {
        let utc = at.to_utc().naive_utc();
        let pattern = if utc.date() == self.local(at).date() { "%H:%MZ" } else { "%a %H:%MZ" };
        glued(&utc.format(pattern).to_string())
    }

    /// "Thursday 17 September 2026, local time UTC-3".
    #[must_use]
    pub fn day(&self, at: Moment) -> String {
        format!("{}, local time {}", self.local(at).format("%A %-d %B %Y"), self.zone(at))
    }

    /// Whether two times lie on the same local day under the same offset, so that one heading serves both.
    #[must_use]
    pub fn is_same_day(&self, a: Moment, b: Moment) -> bool {
        self.local(a).date() == self.local(b).date() && self.zone(a) == self.zone(b)
    }

    /// The offset of local time, after its letters where it has any: "UTC-3", "EDT, UTC-4", "UTC+5:45".
    #[must_use]
    pub fn zone(&self, at: Moment) -> String {
        let offset = self.clock.offset_at(at);
        let east = offset.east.get();
        let (sign, hours, minutes) = (if east < 0 { '-' } else { '+' }, east.abs() / 60, east.abs() % 60);
        let number = match (hours, minutes) {
            (0, 0) => "UTC".to_owned(),
            (hours, 0) => format!("UTC{sign}{hours}"),
            (hours, minutes) => format!("UTC{sign}{hours}:{minutes:02}"),
        };
        let letters = offset.abbreviation;
        let is_a_name = letters.starts_with(|c: char| c.is_ascii_alphabetic()) && !letters.starts_with("UTC");
        if is_a_name { format!("{letters}, {number}") } else { number }
    }

    /// A deadline, latest start or onset as people are told it: rounded down, to 5 min within 24 h of now and to
    /// 30 min beyond; never to before now where the exact time is not.
    #[must_use]
    pub fn told_down(&self, at: Moment) -> Moment {
        let rounded = self.floored(at);
        if at >= self.now { rounded.max(self.now) } else { at }
    }

    /// A time before which something must not begin, or at which it is over: rounded up.
    #[must_use]
    pub fn told_up(&self, at: Moment) -> Moment {
        if at < self.now {
            return at;
        }
        let floor = self.floored(at);
        if floor == at { at } else { floor + self.grain(at) }
    }

    /// A planned start as people are told it: rounded up, but to the exact minute where rounding would pass the latest
    /// start as they are told it.
    #[must_use]
    pub fn told_start(&self, start: Moment, latest: Option<Moment>) -> Moment {
        let up = self.told_up(start);
        if latest.is_some_and(|latest| up > self.told_latest(start, latest)) { start } else { up }
    }

    /// A latest start as people are told it: rounded down, but to the exact minute where that would pass the planned
    /// start.
    #[must_use]
    pub fn told_latest(&self, start: Moment, latest: Moment) -> Moment {
        let down = self.told_down(latest);
        if down < start { latest } else { down }
    }

    fn grain(&self, at: Moment) -> Minutes {
        if at - self.now <= NEAR { NEAR_GRAIN } else { FAR_GRAIN }
    }

    /// Rounded down on the local clock, as zones a quarter of an hour off would else show odd quarters.
    fn floored(&self, at: Moment) -> Moment {
        let east = self.clock.offset_at(at).east;
        (at + east).floor_to(self.grain(at)) - east
    }

    fn local(&self, at: Moment) -> NaiveDateTime {
        self.clock.local(at)
    }
}

/// How long, for people: "2 h 45 min", in one piece.
#[must_use]
pub fn lasting(minutes: Minutes) -> String {
    glued(&minutes.to_string())
}
