//! An archive of advisories, official odds and best tracks: what the odds are fitted to and scored on.
//!
//! Layout: `nhc-archive/{advisories,forecasts,radii,wind-probabilities}.csv.gz`, `nhc-archive/sites.csv`, and
//! `hurdat2/best-track-*.csv`. Each may be packed (`.csv.gz`) or plain (`.csv`).
#![allow(
    dead_code,
    clippy::unwrap_used,
    clippy::panic,
    reason = "shared by programs that cannot go on with a faulty archive, each of which uses its own part"
)]

pub mod advisories;
pub mod best_track;
pub mod cases;
pub mod fitted;
pub mod matched;
pub mod official;
pub mod table;

use advisories::Entry;
use best_track::BestTrack;
use official::{OfficialOdds, Site};
use std::collections::BTreeMap;
use std::path::Path;

/// Everything that an archive holds.
pub struct Archive {
    /// Its advisories, by storm and issue time.
    pub entries: Vec<Entry>,
    /// Best tracks by the number that the advisories bear ("AL092008").
    pub tracks: BTreeMap<String, BestTrack>,
    /// Numbers of storms whose best track bears another number, with that one.
    pub renumbered: Vec<(String, String)>,
    /// Places with a known position.
    pub sites: Vec<Site>,
    /// Official 34-kt odds at those places, by storm and issue time as written.
    pub official: BTreeMap<(String, String), Vec<OfficialOdds>>,
}

impl Archive {
    /// Reads a folder.
    pub fn read(folder: &Path) -> Archive {
        let sites = official::sites(&folder.join("nhc-archive"));
        let entries = advisories::read(&folder.join("nhc-archive"));
        let (tracks, renumbered) = matched::tracks(&entries, &best_track::read(&folder.join("hurdat2")));
        Archive {
            entries,
            tracks,
            renumbered,
            official: official::read(&folder.join("nhc-archive"), &sites),
            sites,
        }
    }

    /// Its seasons, rising.
    pub fn seasons(&self) -> Vec<String> {
        let mut seasons: Vec<String> = self.entries.iter().map(|entry| entry.season().to_owned()).collect();
        seasons.sort();
        seasons.dedup();
        seasons
    }
}
