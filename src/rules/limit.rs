//! How a rule names a time: before a wind, relative to a stage, or by the clock.

use crate::time::moment::Minutes;
use crate::units::chance::Chance;
use crate::units::wind::WindLimit;
use chrono::{DateTime, Utc};

/// A wind at a place.
#[derive(Clone, Debug, PartialEq)]
pub struct WindAt {
    /// The wind that must not be met.
    pub limit: WindLimit,
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
    Wind(WindAt),
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
