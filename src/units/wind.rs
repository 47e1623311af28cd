//! What a wind speed means: its averaging period and its height.

use crate::units::length::Metres;
use crate::units::speed::Knots;
use std::fmt;

/// The time over which a wind speed is averaged.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Averaging {
    /// A 3-second gust.
    Gust3s,
    /// A 1-minute mean, as United States centres give it.
    Minute1,
    /// A 2-minute mean.
    Minute2,
    /// A 3-minute mean.
    Minute3,
    /// A 10-minute mean, the WMO standard.
    Minute10,
}

impl Averaging {
    /// All periods, shortest first.
    pub const ALL: [Averaging; 5] =
        [Averaging::Gust3s, Averaging::Minute1, Averaging::Minute2, Averaging::Minute3, Averaging::Minute10];

    /// The period in seconds.
    #[must_use]
    pub fn seconds(self) -> u32 {
        match self {
            Averaging::Gust3s => 3,
            Averaging::Minute1 => 60,
            Averaging::Minute2 => 120,
            Averaging::Minute3 => 180,
            Averaging::Minute10 => 600,
        }
    }

    /// Reads "3 s", "1 min", "2 min", "3 min" or "10 min".
    ///
    /// ```
    /// use snugdown::units::wind::Averaging;
    /// assert_eq!(Averaging::parse("10 min"), Some(Averaging::Minute10));
    /// assert_eq!(Averaging::parse("5 min"), None);
    /// ```
    #[must_use]
    pub fn parse(text: &str) -> Option<Averaging> {
        match text.trim() {
            "3 s" => Some(Averaging::Gust3s),
            "1 min" => Some(Averaging::Minute1),
            "2 min" => Some(Averaging::Minute2),
            "3 min" => Some(Averaging::Minute3),
            "10 min" => Some(Averaging::Minute10),
            _ => None,
        }
    }
}

impl fmt::Display for Averaging {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Averaging::Gust3s => "3-s gust",
            Averaging::Minute1 => "1-min mean",
            Averaging::Minute2 => "2-min mean",
            Averaging::Minute3 => "3-min mean",
            Averaging::Minute10 => "10-min mean",
        })
    }
}

/// The height at which winds are given unless another is named: 10 m (WMO standard).
pub fn standard_height() -> Metres {
    Metres::clamped(10.0)
}

/// A wind that something must not meet: speed, averaging period and height above ground or sea.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WindLimit {
    /// The speed.
    pub speed: Knots,
    /// Over which time it is averaged.
    pub averaging: Averaging,
    /// At which height it is measured.
    pub height: Metres,
}

impl fmt::Display for WindLimit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} ({} at {:.0} m)", self.speed, self.averaging, self.height.get())
    }
}
