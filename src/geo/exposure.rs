//! How open a place lies to the wind, by direction.

use crate::units::bearing::Bearing;
use std::fmt;

/// The four exposure classes for which WMO/TD-No. 1555 (Harper, Kepert and Ginger 2010) tabulates gust factors.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum ExposureClass {
    /// Roughly open terrain inland.
    InLand,
    /// Offshore wind at a coast.
    OffLand,
    /// Onshore wind at a coast.
    OffSea,
    /// More than 20 km offshore, or as open as that.
    AtSea,
}

impl ExposureClass {
    /// All four, least to most open.
    pub const ALL: [ExposureClass; 4] =
        [ExposureClass::InLand, ExposureClass::OffLand, ExposureClass::OffSea, ExposureClass::AtSea];

    /// Reads "in-land", "off-land", "off-sea" or "at-sea".
    #[must_use]
    pub fn parse(text: &str) -> Option<ExposureClass> {
        ExposureClass::ALL.into_iter().find(|class| class.word() == text.trim())
    }

    /// The word that files use.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            ExposureClass::InLand => "in-land",
            ExposureClass::OffLand => "off-land",
            ExposureClass::OffSea => "off-sea",
            ExposureClass::AtSea => "at-sea",
        }
    }
}

impl fmt::Display for ExposureClass {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.word())
    }
}

/// A place's exposure: one class, or another for winds from some directions.
#[derive(Clone, Debug, PartialEq)]
pub struct Exposure {
    /// The class for every direction that no sector names.
    pub otherwise: ExposureClass,
    /// Winds from `from` clockwise to `to` (degrees true, the end excluded) meet `class`; the first match counts.
    pub sectors: Vec<ExposureSector>,
}

/// A range of wind directions and the exposure to them.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ExposureSector {
    /// First direction the wind comes from.
    pub from: Bearing,
    /// The direction at which the sector ends, clockwise from `from`.
    pub to: Bearing,
    /// The class for these winds.
    pub class: ExposureClass,
}

impl fmt::Display for Exposure {
    /// "off-land, off-sea for winds from 045 to 180".
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        self.otherwise.fmt(f)?;
        self.sectors.iter().try_for_each(|sector| {
            write!(f, ", {} for winds from {} to {}", sector.class, sector.from, sector.to)
        })
    }
}

impl Exposure {
    /// The same class for all winds.
    #[must_use]
    pub fn all_round(class: ExposureClass) -> Exposure {
        Exposure { otherwise: class, sectors: Vec::new() }
    }

    /// The class for a wind from `direction`.
    #[must_use]
    pub fn to_wind_from(&self, direction: Bearing) -> ExposureClass {
        let clockwise = |a: Bearing, b: Bearing| (b.get() - a.get()).rem_euclid(360.0);
        self.sectors
            .iter()
            .find(|sector| clockwise(sector.from, direction) < clockwise(sector.from, sector.to))
            .map_or(self.otherwise, |sector| sector.class)
    }

    /// Every class that some wind direction meets, without repeats.
    #[must_use]
    pub fn classes(&self) -> Vec<ExposureClass> {
        let mut classes: Vec<ExposureClass> =
            std::iter::once(self.otherwise).chain(self.sectors.iter().map(|sector| sector.class)).collect();
        classes.sort_unstable();
        classes.dedup();
        classes
    }
}
