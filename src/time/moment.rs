//! A whole minute of UTC, and a whole number of minutes.

use chrono::{DateTime, Utc};
use std::fmt;
use std::ops::{Add, AddAssign, Neg, Sub};

/// The earliest and latest minute that can be written as a date here: the years 1900 and 2200.
const LEAST: i64 = -36_816_480;
const MOST: i64 = 120_968_640;

/// An instant in whole minutes UTC since 1970-01-01T00:00Z.
///
/// Plans are made in whole minutes, so that the same input gives the same plan on every machine. Seconds exist only in
/// readers and in the audit; [`Moment::at_or_before`] and [`Moment::at_or_after`] say to which side they were rounded.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Moment(i64);

impl Moment {
    /// The earliest moment that is used: 1900-01-01T00:00Z.
    pub const EARLIEST: Moment = Moment(LEAST);
    /// The latest moment that is used: 2200-01-01T00:00Z.
    pub const LATEST: Moment = Moment(MOST);

    /// The moment `minutes` after 1970-01-01T00:00Z, held within the years 1900 to 2200.
    #[must_use]
    pub fn from_epoch_minutes(minutes: i64) -> Moment {
        Moment(minutes.clamp(LEAST, MOST))
    }

    /// The last whole minute at or before an instant: for deadlines, window ends and onsets.
    #[must_use]
    pub fn at_or_before(instant: DateTime<Utc>) -> Moment {
        Moment::from_epoch_minutes(instant.timestamp().div_euclid(60))
    }

    /// The first whole minute at or after an instant: for releases and window starts.
    #[must_use]
    pub fn at_or_after(instant: DateTime<Utc>) -> Moment {
        let seconds = instant.timestamp();
        let up = i64::from(seconds.rem_euclid(60) != 0 || instant.timestamp_subsec_nanos() != 0);
        Moment::from_epoch_minutes(seconds.div_euclid(60) + up)
    }

    /// Minutes since 1970-01-01T00:00Z.
    #[must_use]
    pub fn epoch_minutes(self) -> i64 {
        self.0
    }

    /// The same instant as a chrono date and time.
    #[must_use]
    pub fn to_utc(self) -> DateTime<Utc> {
        DateTime::<Utc>::from_timestamp(self.0 * 60, 0).unwrap_or_default()
    }

    /// Rounded down to a multiple of `grain` (counted from midnight UTC): the safe side for a deadline told to people.
    #[must_use]
    pub fn floor_to(self, grain: Minutes) -> Moment {
        if grain.0 <= 1 { self } else { Moment(self.0 - self.0.rem_euclid(grain.0)) }
    }

    /// Rounded up to a multiple of `grain`: the safe side for a time before which something must not begin.
    #[must_use]
    pub fn ceil_to(self, grain: Minutes) -> Moment {
        if grain.0 <= 1 { self } else { Moment(self.0 + (-self.0).rem_euclid(grain.0)) }
    }
}

impl fmt::Display for Moment {
    /// ISO 8601 in UTC to the minute: `2026-09-17T09:20Z`.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}", self.to_utc().format("%Y-%m-%dT%H:%MZ"))
    }
}

/// A whole number of minutes; negative means earlier.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, Default)]
pub struct Minutes(i64);

impl Minutes {
    /// No time.
    pub const ZERO: Minutes = Minutes(0);

    /// A number of minutes, held within 300 years either way.
    #[must_use]
    pub const fn new(minutes: i64) -> Minutes {
        const BOUND: i64 = 157_788_000;
        if minutes > BOUND {
            Minutes(BOUND)
        } else if minutes < -BOUND {
            Minutes(-BOUND)
        } else {
            Minutes(minutes)
        }
    }

    /// A number of whole hours.
    #[must_use]
    pub const fn hours(hours: i64) -> Minutes {
        Minutes::new(hours.saturating_mul(60))
    }

    /// The number of minutes.
    #[must_use]
    pub const fn get(self) -> i64 {
        self.0
    }

    /// Reads "1 h 15 min", "45 min", "24 h", "2 d 6 h", "0.25 h" (must come to whole minutes) or "-6 h".
    ///
    /// Returns `None` for anything else, a bare number included.
    ///
    /// ```
    /// use snugdown::time::moment::Minutes;
    /// assert_eq!(Minutes::parse("1 h 15 min"), Some(Minutes::new(75)));
    /// assert_eq!(Minutes::parse("2.5 h"), Some(Minutes::new(150)));
    /// assert_eq!(Minutes::parse("90"), None);
    /// ```
    #[must_use]
    pub fn parse(text: &str) -> Option<Minutes> {
        let trimmed = text.trim();
        let (sign, rest) = match trimmed.strip_prefix('-') {
            Some(rest) => (-1.0, rest),
            None => (1.0, trimmed),
        };
        let spaced: String = rest
            .chars()
            .zip(rest.chars().skip(1).chain(std::iter::once(' ')))
            .flat_map(|(c, next)| {
                let split = c.is_ascii_digit() && next.is_ascii_alphabetic();
                [Some(c), split.then_some(' ')].into_iter().flatten()
            })
            .collect();
        let words: Vec<&str> = spaced.split_whitespace().collect();
        if words.is_empty() || !words.len().is_multiple_of(2) {
            return None;
        }
        let mut total = 0.0;
        for pair in words.chunks_exact(2) {
            let [number, unit] = pair else { return None };
            if !number.starts_with(|c: char| c.is_ascii_digit()) {
                return None;
            }
            let value: f64 = number.parse().ok()?;
            let factor = match *unit {
                "d" | "day" | "days" => 1440.0,
                "h" | "hour" | "hours" => 60.0,
                "min" => 1.0,
                _ => return None,
            };
            total += value * factor;
        }
        // Fractions of an hour are welcome, fractions of a minute are not: a plan has whole minutes.
        let whole = total.round();
        if !total.is_finite() || (total - whole).abs() > 1e-6 || whole > 10_000_000.0 {
            return None;
        }
        Some(Minutes::new((sign * whole) as i64))
    }
}

impl fmt::Display for Minutes {
    /// "1 h 15 min", "45 min", "24 h", "-6 h".
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let sign = if self.0 < 0 { "-" } else { "" };
        let (hours, minutes) = (self.0.abs() / 60, self.0.abs() % 60);
        match (hours, minutes) {
            (0, m) => write!(f, "{sign}{m} min"),
            (h, 0) => write!(f, "{sign}{h} h"),
            (h, m) => write!(f, "{sign}{h} h {m:02} min"),
        }
    }
}

impl Add<Minutes> for Moment {
    type Output = Moment;
    fn add(self, rhs: Minutes) -> Moment {
        Moment::from_epoch_minutes(self.0 + rhs.0)
    }
}

impl Sub<Minutes> for Moment {
    type Output = Moment;
    fn sub(self, rhs: Minutes) -> Moment {
        Moment::from_epoch_minutes(self.0 - rhs.0)
    }
}

impl Sub for Moment {
    type Output = Minutes;
    fn sub(self, rhs: Moment) -> Minutes {
        Minutes::new(self.0 - rhs.0)
    }
}

impl Add for Minutes {
    type Output = Minutes;
    fn add(self, rhs: Minutes) -> Minutes {
        Minutes::new(self.0 + rhs.0)
    }
}

impl AddAssign for Minutes {
    fn add_assign(&mut self, rhs: Minutes) {
        *self = *self + rhs;
    }
}

impl Sub for Minutes {
    type Output = Minutes;
    fn sub(self, rhs: Minutes) -> Minutes {
        Minutes::new(self.0 - rhs.0)
    }
}

impl Neg for Minutes {
    type Output = Minutes;
    fn neg(self) -> Minutes {
        Minutes::new(-self.0)
    }
}

#[cfg(test)]
mod tests {
    use super::{Minutes, Moment};
    use chrono::{TimeZone, Utc};

    #[test]
    fn a_deadline_rounds_down_and_a_release_rounds_up() {
        let instant = Utc.with_ymd_and_hms(2026, 9, 17, 9, 20, 1).unwrap();
        assert_eq!(Moment::at_or_before(instant).to_string(), "2026-09-17T09:20Z");
        assert_eq!(Moment::at_or_after(instant).to_string(), "2026-09-17T09:21Z");
    }

    #[test]
    fn moments_before_1970_round_the_same_way() {
        let instant = Utc.with_ymd_and_hms(1969, 12, 31, 23, 58, 30).unwrap();
        assert_eq!(Moment::at_or_before(instant).epoch_minutes(), -2);
        assert_eq!(Moment::at_or_after(instant).epoch_minutes(), -1);
    }

    #[test]
    fn durations_that_are_not_whole_minutes_or_lack_a_unit_are_refused() {
        for text in ["", "h", "5", "0.51 min", "nan h", "inf h", "1 h 15", "1e3 h", "--1 h", "1 fortnight"] {
            assert_eq!(Minutes::parse(text), None, "{text}");
        }
    }

    #[test]
    fn the_bounds_are_the_years_they_say() {
        assert_eq!(Moment::EARLIEST.to_string(), "1900-01-01T00:00Z");
        assert_eq!(Moment::LATEST.to_string(), "2200-01-01T00:00Z");
    }
}
