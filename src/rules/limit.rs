//! How a rule names a time: before a wind, relative to a stage, or by the clock.

use crate::time::moment::Minutes;
use crate::units::chance::Chance;
use crate::units::wind::WindLimit;
use chrono::{DateTime, Utc};
use std::fmt;

/// What must not be met.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Limit {
    /// A wind.
    Wind(WindLimit),
    /// High seas: those whose reach advisories give, of 12 ft (3.7 m) or 4 m significant height.
    Seas,
}

impl Limit {
    /// The wind, if it is one.
    #[must_use]
    pub fn wind(&self) -> Option<&WindLimit> {
        match self {
            Limit::Wind(wind) => Some(wind),
            Limit::Seas => None,
        }
    }
}

impl fmt::Display for Limit {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Limit::Wind(wind) => wind.fmt(f),
            Limit::Seas => f.write_str("high seas (12 ft)"),
        }
    }
}

/// A limit at a place.
#[derive(Clone, Debug, PartialEq)]
pub struct LimitAt {
    /// What must not be met.
    pub limit: Limit,
    /// The id of the place.
    pub place: String,
}

/// How the computed arrival of a wind is turned into one time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Reckoning {
    /// The first hour at which the chance that the wind has come reaches this; no time if it never does. The default.
    FirstReaching(Chance),
    /// The earliest reasonable arrival, provided that the wind comes at all with at least this chance.
    Earliest {
        /// The least chance.
        at_least: Chance,
    },
    /// The most likely arrival, provided that the wind comes at all with at least this chance.
    Likely {
        /// The least chance.
        at_least: Chance,
    },
}

/// A time that a rule counts from.
#[derive(Clone, Debug, PartialEq)]
pub enum Anchor {
    /// The arrival of a wind at a place: adopted if the port has adopted one, else computed.
    Wind(LimitAt),
    /// The due or declared time of a stage.
    Stage(String),
    /// A fixed instant.
    Clock(DateTime<Utc>),
}

/// "No later than `lead` before the anchor."
#[derive(Clone, Debug, PartialEq)]
pub struct Deadline {
    /// What it counts from.
    pub anchor: Anchor,
    /// How long before; negative for after.
    pub lead: Minutes,
    /// Whether missing it means that the task is given up, or only that it is late.
    pub binds: Binding,
}

/// What missing a deadline means.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Binding {
    /// Hard: a task that cannot meet it is given up and named.
    Hard,
    /// Soft: it is done all the same, and shown late.
    Soft,
}
