//! The tide from a port's harmonic constants.

use crate::tide::astronomy::{Astronomy, NodeTrig};
use crate::tide::constituent::Constituent;
use crate::tide::error::TideError;
use crate::units::length::Metres;
use chrono::{DateTime, Utc};
use std::collections::BTreeSet;

/// One constituent's constants at a port.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Term {
    /// Which constituent.
    pub constituent: Constituent,
    /// Its amplitude H, 0 to 12 m.
    pub amplitude: Metres,
    /// Its phase lag g on Greenwich, in degrees, 0 to 360.
    pub lag: f64,
}

/// A tide of harmonic constants: unofficial, good to what the constants are good to, weather not included.
///
/// For official predictions see [`TideTable`](crate::tide::table::TideTable).
///
/// ```
/// use snugdown::tide::{constituent::Constituent, harmonic::{HarmonicTide, Term}};
/// use snugdown::{time::clock::PortClock, units::length::Metres};
/// let m2 = Term { constituent: Constituent::named("M2")?, amplitude: Metres::new(0.85)?, lag: 120.0 };
/// let tide = HarmonicTide::new(Metres::new(1.85)?, vec![m2])?;
/// let level = tide.height_at(PortClock::utc().read("2026-09-17T09:20Z")?);
/// assert!(level.get() > 1.0 && level.get() < 2.7);
/// assert!(HarmonicTide::new(Metres::ZERO, vec![]).is_err());
/// # Ok::<(), Box<dyn std::error::Error>>(())
/// ```
#[derive(Clone, Debug, PartialEq)]
pub struct HarmonicTide {
    mean_level: Metres,
    terms: Vec<Term>,
}

impl HarmonicTide {
    /// A tide about `mean_level` (Z0, metres above chart datum).
    ///
    /// # Errors
    /// No term, a constituent twice, an amplitude outside 0 to 12 m, a lag outside 0 to 360 degrees.
    pub fn new(mean_level: Metres, terms: Vec<Term>) -> Result<HarmonicTide, TideError> {
        for term in &terms {
            check_amplitude(term.constituent, term.amplitude)?;
            if !(0.0..=360.0).contains(&term.lag) {
                return Err(TideError::Lag { name: term.constituent.name(), degrees: term.lag });
            }
        }
        check_distinct(terms.iter().map(|term| term.constituent))?;
        Ok(HarmonicTide { mean_level, terms })
    }

    /// The level above chart datum at an instant.
    #[must_use]
    pub fn height_at(&self, at: DateTime<Utc>) -> Metres {
        // h(t) = Z0 + sum f H cos(V + u - g): V argument at t, f and u factor and angle of the moon's node,
        // H amplitude, g phase lag on Greenwich (Schureman 1940; IHO).
        let astronomy = Astronomy::at(at);
        let node = NodeTrig::of(&astronomy);
        let mut level = self.mean_level.get();
        for term in &self.terms {
            let (f, u) = node.factor_angle(term.constituent.nodal());
            let phase = term.constituent.argument(&astronomy) + u - term.lag;
            level += f * term.amplitude.get() * libm::cos(phase.to_radians());
        }
        Metres::clamped(level)
    }

    /// A level never exceeded: every constituent at its crest and raised by the node, Z0 + sum f H.
    #[must_use]
    pub fn ceiling(&self) -> Metres {
        let crest = |term: &Term| term.constituent.nodal().greatest_factor() * term.amplitude.get();
        Metres::clamped(self.mean_level.get() + self.terms.iter().map(crest).sum::<f64>())
    }
}

/// Refuses amplitudes that no tide on earth has; the greatest tidal range is some 16 m.
///
/// # Errors
/// [`TideError::Amplitude`].
pub fn check_amplitude(constituent: Constituent, amplitude: Metres) -> Result<(), TideError> {
    let metres = amplitude.get();
    if (0.0..=12.0).contains(&metres) {
        return Ok(());
    }
    Err(TideError::Amplitude { name: constituent.name(), metres })
}

/// Refuses an empty list, and one that names a constituent twice.
///
/// # Errors
/// [`TideError::NoConstituent`], [`TideError::Twice`].
pub fn check_distinct(constituents: impl Iterator<Item = Constituent>) -> Result<(), TideError> {
    let mut seen = BTreeSet::new();
    for constituent in constituents {
        if !seen.insert(constituent) {
            return Err(TideError::Twice(constituent.name()));
        }
    }
    if seen.is_empty() { Err(TideError::NoConstituent) } else { Ok(()) }
}
