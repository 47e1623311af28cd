//! The seas in which forecast errors are kept apart.

use crate::advisory::forecast::Advisory;
use crate::geo::position::Position;
use std::fmt;

/// A sea in which one office's forecast errors are kept apart.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Basin {
    /// North Atlantic, Caribbean, Gulf of Mexico.
    Atlantic,
    /// Eastern North Pacific to 140 W.
    EastPacific,
    /// Central North Pacific, 140 W to 180.
    CentralPacific,
    /// Western North Pacific.
    WestPacific,
    /// North Indian Ocean.
    NorthIndian,
    /// All seas south of the equator.
    Southern,
}

impl Basin {
    /// All basins.
    pub const ALL: [Basin; 6] = [
        Basin::Atlantic,
        Basin::EastPacific,
        Basin::CentralPacific,
        Basin::WestPacific,
        Basin::NorthIndian,
        Basin::Southern,
    ];

    /// The two letters by which storm numbers name it (AL122024); the Indian Ocean's and the southern seas'
    /// other letters are read too.
    #[must_use]
    pub fn from_letters(letters: &str) -> Option<Basin> {
        match letters.to_ascii_uppercase().as_str() {
            "AL" => Some(Basin::Atlantic),
            "EP" => Some(Basin::EastPacific),
            "CP" => Some(Basin::CentralPacific),
            "WP" => Some(Basin::WestPacific),
            "IO" | "NI" => Some(Basin::NorthIndian),
            "SH" | "SP" | "SI" => Some(Basin::Southern),
            _ => None,
        }
    }

    /// The letters used in error tables.
    #[must_use]
    pub fn letters(self) -> &'static str {
        match self {
            Basin::Atlantic => "AL",
            Basin::EastPacific => "EP",
            Basin::CentralPacific => "CP",
            Basin::WestPacific => "WP",
            Basin::NorthIndian => "IO",
            Basin::Southern => "SH",
        }
    }

    /// The basin of an advisory: by its storm number, else by where the storm is.
    #[must_use]
    pub fn of(advisory: &Advisory) -> Option<Basin> {
        let by_number = advisory.storm.id.as_deref().and_then(|id| Basin::from_letters(id.trim().get(..2)?));
        by_number.or_else(|| advisory.points.first().map(|point| Basin::at(point.position)))
    }

    /// The basin of a position. The line between Atlantic and East Pacific follows Central America in three
    /// steps: our reading of the map.
    #[must_use]
    pub fn at(position: Position) -> Basin {
        let (latitude, longitude) = (position.latitude(), position.longitude());
        if latitude < 0.0 {
            return Basin::Southern;
        }
        let isthmus = match latitude {
            ..9.0 => -77.0,
            ..15.0 => -84.5,
            ..18.0 => -92.0,
            _ => -100.0,
        };
        match longitude {
            ..-140.0 => Basin::CentralPacific,
            l if l < isthmus => Basin::EastPacific,
            ..25.0 => Basin::Atlantic,
            ..100.0 => Basin::NorthIndian,
            _ => Basin::WestPacific,
        }
    }
}

impl fmt::Display for Basin {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Basin::Atlantic => "Atlantic",
            Basin::EastPacific => "East Pacific",
            Basin::CentralPacific => "Central Pacific",
            Basin::WestPacific => "West Pacific",
            Basin::NorthIndian => "North Indian Ocean",
            Basin::Southern => "southern hemisphere",
        })
    }
}

#[cfg(test)]
mod tests {
    use super::Basin;
    use crate::geo::position::Position;

    #[test]
    fn a_position_without_a_storm_number_still_has_a_basin() {
        let cases = [
            (25.0, -80.0, Basin::Atlantic),
            (22.0, -97.0, Basin::Atlantic),
            (14.0, -95.0, Basin::EastPacific),
            (16.0, -110.0, Basin::EastPacific),
            (20.0, -155.0, Basin::CentralPacific),
            (22.0, 120.0, Basin::WestPacific),
            (15.0, 88.0, Basin::NorthIndian),
            (-18.0, 150.0, Basin::Southern),
        ];
        for (latitude, longitude, basin) in cases {
            assert_eq!(Basin::at(Position::new(latitude, longitude).unwrap()), basin);
        }
    }
}
