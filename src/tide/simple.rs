//! A made-up tide for exercises: each constituent by its amplitude and the time of one of its high waters.

use crate::tide::constituent::Constituent;
use crate::tide::error::TideError;
use crate::tide::harmonic::{check_amplitude, check_distinct};
use crate::units::length::Metres;
use chrono::{DateTime, Utc};

/// One constituent of a simple tide.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SimpleTerm {
    /// Which constituent; only its speed is used.
    pub constituent: Constituent,
    /// Its amplitude, 0 to 12 m.
    pub amplitude: Metres,
    /// The instant of one of its high waters.
    pub high_water: DateTime<Utc>,
}

/// A tide of pure cosines: right near the high waters given, for an exercise, not for a real port.
#[derive(Clone, Debug, PartialEq)]
pub struct SimpleTide {
    mean_level: Metres,
    terms: Vec<SimpleTerm>,
}

impl SimpleTide {
    /// A tide about `mean_level` (Z0, metres above chart datum).
    ///
    /// # Errors
    /// No term, a constituent twice, an amplitude outside 0 to 12 m.
    pub fn new(mean_level: Metres, terms: Vec<SimpleTerm>) -> Result<SimpleTide, TideError> {
        for term in &terms {
            check_amplitude(term.constituent, term.amplitude)?;
        }
        check_distinct(terms.iter().map(|term| term.constituent))?;
        Ok(SimpleTide { mean_level, terms })
    }

    /// The level above chart datum at an instant: Z0 + sum H cos(speed (t - high water)).
    #[must_use]
    pub fn height_at(&self, at: DateTime<Utc>) -> Metres {
        let mut level = self.mean_level.get();
        for term in &self.terms {
            let hours = (at - term.high_water).num_milliseconds() as f64 / 3_600_000.0;
            level += term.amplitude.get() * libm::cos((term.constituent.speed() * hours).to_radians());
        }
        Metres::clamped(level)
    }

    /// A level never exceeded: every constituent at its crest, Z0 + sum H.
    #[must_use]
    pub fn ceiling(&self) -> Metres {
        Metres::clamped(
            self.terms.iter().fold(self.mean_level.get(), |level, term| level + term.amplitude.get()),
        )
    }
}
