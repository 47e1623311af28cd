//! The port's clock: local time at the edges, UTC inside.

use crate::time::local::{LocalTime, TimeTextError, find_local, read_time};
use crate::time::moment::{Minutes, Moment};
use crate::time::zone::{Zone, ZoneError, ZoneOffset};
use chrono::{DateTime, NaiveDateTime, Utc};

/// The clock on the port's wall: turns instants into local time and back.
///
/// Local time appears in readers and outputs only, always with its zone. For arithmetic use [`Moment`].
///
/// ```
/// use snugdown::time::{clock::PortClock, moment::Moment};
/// let clock = PortClock::of("America/Sao_Paulo")?;
/// let sailing = clock.read("2026-09-17 06:20")?;
/// assert_eq!(clock.show(Moment::at_or_before(sailing)), "Thu 17 Sep 06:20 -03 (09:20Z)");
/// assert!(PortClock::of("America/San_Paulo").is_err());
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Debug)]
pub struct PortClock {
    zone: Zone,
}

/// A change of the port's clocks, such as the beginning of summer time.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ClockChange {
    /// The first minute under the new offset.
    pub at: Moment,
    /// The offset before it.
    pub before: ZoneOffset,
    /// The offset from it on.
    pub after: ZoneOffset,
}

impl PortClock {
    /// The clock of a zone by its IANA name, such as "America/Puerto_Rico".
    ///
    /// # Errors
    /// [`ZoneError::Unknown`] for any other name, with the nearest names.
    pub fn of(zone: &str) -> Result<PortClock, ZoneError> {
        Ok(PortClock { zone: Zone::named(zone)? })
    }

    /// A clock that shows UTC.
    #[must_use]
    pub fn utc() -> PortClock {
        PortClock { zone: Zone::utc() }
    }

    /// A clock always `east` of UTC, for a port whose law has changed since this program was made.
    ///
    /// # Errors
    /// [`ZoneError::Offset`] beyond 14 hours either way.
    pub fn with_offset(east: Minutes) -> Result<PortClock, ZoneError> {
        Ok(PortClock { zone: Zone::fixed(east)? })
    }

    /// The zone's name; "UTC-03" for a fixed offset.
    #[must_use]
    pub fn zone_name(&self) -> &str {
        self.zone.name()
    }

    /// How far the port's clocks are ahead of UTC at `at`.
    #[must_use]
    pub fn offset_at(&self, at: Moment) -> ZoneOffset {
        self.zone.offset_at(at.to_utc())
    }

    /// The instants at which the port's clocks show `local`: one; two when clocks are put back; none when put forward.
    #[must_use]
    pub fn local_at(&self, local: NaiveDateTime) -> LocalTime {
        find_local(&self.zone, local)
    }

    /// The first change of the port's clocks after `from`, up to and with `to`.
    #[must_use]
    pub fn change_between(&self, from: Moment, to: Moment) -> Option<ClockChange> {
        // No zone changes its offset twice within three hours.
        let step = Minutes::hours(3);
        let mut low = from;
        while low < to {
            let mut high = (low + step).min(to);
            let before = self.offset_at(low);
            if self.offset_at(high) == before {
                low = high;
                continue;
            }
            while high - low > Minutes::new(1) {
                let middle = low + Minutes::new((high - low).get() / 2);
                *(if self.offset_at(middle) == before { &mut low } else { &mut high }) = middle;
            }
            return Some(ClockChange { at: high, before, after: self.offset_at(high) });
        }
        None
    }

    /// Reads a time: RFC 3339 with an offset or Z, or the port's local time; to the minute or finer.
    ///
    /// "2026-09-17T06:20-03:00", "2026-09-17T09:20:30Z", "2026-09-17 06:20".
    ///
    /// # Errors
    /// Any other text; a day that the calendar lacks; a year outside 1900 to 2199; a local time that the port's clocks
    /// show twice or never: never a silent choice.
    pub fn read(&self, text: &str) -> Result<DateTime<Utc>, TimeTextError> {
        read_time(&self.zone, text)
    }

    /// Local time with its zone, and UTC: "Thu 17 Sep 06:20 -03 (09:20Z)"; the day of UTC too where it differs.
    #[must_use]
    pub fn show(&self, at: Moment) -> String {
        let local_day = self.local(at).date();
        let utc = if local_day == at.to_utc().date_naive() { "%H:%MZ" } else { "%a %H:%MZ" };
        format!("{} ({})", self.show_local(at), at.to_utc().format(utc))
    }

    /// Local time with its zone: "Thu 17 Sep 06:20 -03".
    #[must_use]
    pub fn show_local(&self, at: Moment) -> String {
        format!("{} {}", self.local(at).format("%a %d %b %H:%M"), self.offset_at(at).abbreviation)
    }

    /// UTC: "Thu 17 Sep 09:20Z", as wide at all times.
    #[must_use]
    pub fn show_utc(&self, at: Moment) -> String {
        at.to_utc().format("%a %d %b %H:%MZ").to_string()
    }

    /// Local day and time without a zone, for columns whose head names the zone; see [`PortClock::show_local`].
    #[must_use]
    pub fn local(&self, at: Moment) -> NaiveDateTime {
        (at + self.offset_at(at).east).to_utc().naive_utc()
    }

    /// What may be wrong about local times at `at`, in words for people; `None` while the zone data covers it.
    #[must_use]
    pub fn doubt_at(&self, at: Moment) -> Option<String> {
        self.zone.doubt_at(at)
    }
}
