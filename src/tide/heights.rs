//! A port's tide, however it is described.

use crate::tide::harmonic::HarmonicTide;
use crate::tide::simple::SimpleTide;
use crate::tide::table::TideTable;
use crate::units::length::Metres;
use chrono::{DateTime, Utc};

/// A port's tide.
#[derive(Clone, Debug, PartialEq)]
pub enum Tide {
    /// An official table of high and low waters.
    Table(TideTable),
    /// Harmonic constants.
    Harmonic(HarmonicTide),
    /// A made-up tide for an exercise.
    Simple(SimpleTide),
}

impl Tide {
    /// The level above chart datum at an instant, weather not included; `None` where a table does not reach.
    #[must_use]
    pub fn height_at(&self, at: DateTime<Utc>) -> Option<Metres> {
        match self {
            Tide::Table(table) => table.height_at(at),
            Tide::Harmonic(harmonic) => Some(harmonic.height_at(at)),
            Tide::Simple(simple) => Some(simple.height_at(at)),
        }
    }

    /// A level that this tide never exceeds, weather not included: to tell what can never float.
    #[must_use]
    pub fn ceiling(&self) -> Metres {
        match self {
            Tide::Table(table) => table.ceiling(),
            Tide::Harmonic(harmonic) => harmonic.ceiling(),
            Tide::Simple(simple) => simple.ceiling(),
        }
    }
}
