//! The official 34-kt odds at places with a known position.

use super::table::rows;
use serde::Deserialize;
use snugdown::geo::position::Position;
use std::collections::BTreeMap;
use std::path::Path;

/// Hours after the base time by which the official odds count.
pub const LEADS_H: [i64; 7] = [12, 24, 36, 48, 72, 96, 120];

/// A place of the official odds.
pub struct Site {
    /// Its name there.
    pub name: String,
    /// Where it is.
    pub position: Position,
}

/// The official chances of 34 kt at one place.
pub struct OfficialOdds {
    /// Index of the place.
    pub site: usize,
    /// Chance (0..1) by each of [`LEADS_H`].
    pub chances: [f64; 7],
}

#[derive(Deserialize)]
struct SiteRow {
    site: String,
    lat: f64,
    lon: f64,
}

#[derive(Deserialize)]
struct OddsRow {
    key: String,
    issued: String,
    site: String,
    kt: u32,
    p12: f64,
    p24: f64,
    p36: f64,
    p48: f64,
    p72: f64,
    p96: f64,
    p120: f64,
}

/// The places.
pub fn sites(folder: &Path) -> Vec<Site> {
    let place = |row: SiteRow| {
        let position =
            Position::new(row.lat, row.lon).unwrap_or_else(|error| panic!("{}: {error}", row.site));
        Site { name: row.site, position }
    };
    rows(folder, "sites").into_iter().map(place).collect()
}

/// The odds by storm and issue time, of Atlantic storms.
pub fn read(folder: &Path, sites: &[Site]) -> BTreeMap<(String, String), Vec<OfficialOdds>> {
    let numbers: BTreeMap<&str, usize> =
        sites.iter().enumerate().map(|(number, site)| (site.name.as_str(), number)).collect();
    let mut official: BTreeMap<(String, String), Vec<OfficialOdds>> = BTreeMap::new();
    for row in rows::<OddsRow>(folder, "wind-probabilities") {
        let Some(site) = numbers.get(row.site.as_str()).copied() else { continue };
        if row.kt == 34 && row.key.starts_with("AL") {
            let chances = [row.p12, row.p24, row.p36, row.p48, row.p72, row.p96, row.p120];
            let chances = chances.map(|percent| percent / 100.0);
            official.entry((row.key, row.issued)).or_default().push(OfficialOdds { site, chances });
        }
    }
    official
}
