//! What a description of a port's tide may have wrong.

use crate::time::moment::Minutes;
use chrono::{DateTime, Utc};

/// A tide that cannot be computed as described.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum TideError {
    /// No constituent has this name, or it is not one of those known here.
    #[error("\"{name}\" is not a tidal constituent known here; known are {known}")]
    UnknownConstituent {
        /// The name as found.
        name: String,
        /// The names known.
        known: String,
    },
    /// A constituent is given twice.
    #[error("{0} is given twice")]
    Twice(&'static str),
    /// No constituent at all.
    #[error("a tide needs at least one constituent")]
    NoConstituent,
    /// An amplitude below zero or beyond any tide on earth.
    #[error("an amplitude of {metres} m for {name} is outside 0 to 12 m")]
    Amplitude {
        /// The constituent.
        name: &'static str,
        /// The amplitude as found.
        metres: f64,
    },
    /// A phase lag outside a full circle.
    #[error("a phase lag of {degrees} degrees for {name} is outside 0 to 360")]
    Lag {
        /// The constituent.
        name: &'static str,
        /// The lag as found.
        degrees: f64,
    },
    /// A table with fewer than two waters.
    #[error("a tide table needs at least one high and one low water")]
    ShortTable,
    /// Two rows of a table that are not in order of time.
    #[error("the water at {0} does not come after the row before it")]
    Order(DateTime<Utc>),
    /// Two waters of the same kind in turn.
    #[error("two {kind} waters follow each other, the later at {at}; is the row between them missing?")]
    SameKind {
        /// The later water.
        at: DateTime<Utc>,
        /// "high" or "low".
        kind: &'static str,
    },
    /// A high water that is not above the low water beside it.
    #[error("the high water at {0} is not above the low water beside it")]
    HighNotAboveLow(DateTime<Utc>),
    /// Two rows too far apart to be a high water and the next low water.
    #[error(
        "{length} lie between the waters up to {at}, more than any tide takes from one to the next; are rows missing?"
    )]
    Gap {
        /// The later water.
        at: DateTime<Utc>,
        /// The time between the two.
        length: Minutes,
    },
}
