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

#[cfg(test)]
mod tests {
    use super::Tide;
    use crate::tide::constituent::Constituent;
    use crate::tide::harmonic::{HarmonicTide, Term};
    use crate::time::clock::PortClock;
    use crate::units::length::Metres;
    use chrono::TimeDelta;

    #[test]
    fn no_level_of_a_whole_node_cycle_passes_the_ceiling_and_some_come_near() {
        let term = |name: &str, metres: f64, lag: f64| Term {
            constituent: Constituent::named(name).unwrap(),
            amplitude: Metres::new(metres).unwrap(),
            lag,
        };
        let terms = vec![term("M2", 0.5, 120.0), term("K2", 0.2, 30.0), term("O1", 0.3, 200.0)];
        let tide = Tide::Harmonic(HarmonicTide::new(Metres::new(1.0).unwrap(), terms).unwrap());
        let start = PortClock::utc().read("2006-01-01T00:00Z").unwrap();
        let levels = (0..19 * 8766).filter_map(|hour| tide.height_at(start + TimeDelta::hours(hour)));
        let highest = levels.map(Metres::get).fold(0.0, f64::max);
        let ceiling = tide.ceiling().get();
        assert!(highest <= ceiling && highest > ceiling - 0.15, "{highest} {ceiling}");
    }
}
