//! Best tracks, and when their 34-kt wind was at a place.
//!
//! Positions and radii of 00, 06, 12 and 18 UTC, linear in time; at a place the radius is linear in bearing between the
//! quadrant centres 45, 135, 225, 315. The wind is there when the distance is within that radius.

use super::table::{instant, rows_of};
use chrono::{DateTime, TimeDelta, Timelike, Utc};
use serde::Deserialize;
use snugdown::geo::position::{Position, wrap_longitude};
use snugdown::wind::profile::around;
use snugdown::wind::sphere::{Vector, bearing_degrees, distance_nmi, vector_of};
use std::collections::BTreeMap;
use std::path::Path;

/// The storm at one time.
#[derive(Clone, Copy, Debug)]
pub struct Fix {
    /// When.
    pub time: DateTime<Utc>,
    /// Degrees north.
    pub latitude: f64,
    /// Degrees east.
    pub longitude: f64,
    /// Greatest wind in kt.
    pub wind_kt: f64,
    /// Reach of 34, 50, 64 kt in NE, SE, SW, NW, n mi; `None` if missing.
    pub reach_nmi: [Option<[f64; 4]>; 3],
    /// Tropical, or subtropical.
    pub is_tropical: bool,
}

impl Fix {
    /// The centre.
    pub fn centre(&self) -> Vector {
        vector_of(self.latitude, self.longitude)
    }
}

/// One storm's best track: fixes at 00, 06, 12, 18 UTC, rising.
#[derive(Clone, Debug, Default)]
pub struct BestTrack {
    fixes: Vec<Fix>,
}

/// Whether the wind was at a place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum There {
    /// It was.
    Yes,
    /// It was not, or the track does not reach that time.
    No,
    /// The radii are missing.
    Unknown,
}

#[derive(Deserialize)]
struct Row {
    id: String,
    datetime_utc: String,
    status: String,
    lat: f64,
    lon: f64,
    max_wind_kt: f64,
    r34ne: Option<f64>,
    r34se: Option<f64>,
    r34sw: Option<f64>,
    r34nw: Option<f64>,
    r50ne: Option<f64>,
    r50se: Option<f64>,
    r50sw: Option<f64>,
    r50nw: Option<f64>,
    r64ne: Option<f64>,
    r64se: Option<f64>,
    r64sw: Option<f64>,
    r64nw: Option<f64>,
}

/// All best tracks of `folder/best-track-*.csv`; of a storm in two files the first one's fixes count.
pub fn read(folder: &Path) -> BTreeMap<String, BestTrack> {
    let listed = std::fs::read_dir(folder).unwrap_or_else(|error| panic!("{}: {error}", folder.display()));
    let mut files: Vec<_> = listed.filter_map(|entry| entry.ok().map(|entry| entry.path())).collect();
    files.retain(|path| {
        let name = path.file_name().map(|name| name.to_string_lossy().into_owned()).unwrap_or_default();
        name.starts_with("best-track-") && (name.ends_with(".csv") || name.ends_with(".csv.gz"))
    });
    files.sort();
    let mut fixes: BTreeMap<String, BTreeMap<DateTime<Utc>, Fix>> = BTreeMap::new();
    for row in files.iter().flat_map(|path| rows_of::<Row>(path)) {
        let fix = fix(&row);
        if fix.time.hour().is_multiple_of(6) && fix.time.minute() == 0 {
            fixes.entry(row.id).or_default().entry(fix.time).or_insert(fix);
        }
    }
    fixes.into_iter().map(|(id, fixes)| (id, BestTrack { fixes: fixes.into_values().collect() })).collect()
}

fn fix(row: &Row) -> Fix {
    let reach = |quadrants: [Option<f64>; 4]| match quadrants {
        [Some(ne), Some(se), Some(sw), Some(nw)] if ne.min(se).min(sw).min(nw) >= 0.0 => {
            Some([ne, se, sw, nw])
        }
        _ => None,
    };
    Fix {
        time: instant(&row.datetime_utc),
        latitude: row.lat,
        longitude: row.lon,
        wind_kt: row.max_wind_kt,
        reach_nmi: [
            reach([row.r34ne, row.r34se, row.r34sw, row.r34nw]),
            reach([row.r50ne, row.r50se, row.r50sw, row.r50nw]),
            reach([row.r64ne, row.r64se, row.r64sw, row.r64nw]),
        ],
        is_tropical: ["TD", "TS", "HU", "SD", "SS"].contains(&row.status.as_str()),
    }
}

impl BestTrack {
    /// Its fixes.
    pub fn fixes(&self) -> &[Fix] {
        &self.fixes
    }

    /// The storm at a time, linear between two fixes not more than 6 h apart; `None` outside.
    pub fn at(&self, time: DateTime<Utc>) -> Option<Fix> {
        let next = self.fixes.partition_point(|fix| fix.time <= time);
        let a = self.fixes.get(next.checked_sub(1)?)?;
        let Some(b) = self.fixes.get(next) else { return (a.time == time).then_some(*a) };
        if b.time - a.time > TimeDelta::hours(6) {
            return (a.time == time).then_some(*a);
        }
        let share = (time - a.time).num_seconds() as f64 / (b.time - a.time).num_seconds() as f64;
        let mix = |from: f64, to: f64| from + (to - from) * share;
        let mut reach_nmi = [None; 3];
        for ((out, from), to) in reach_nmi.iter_mut().zip(a.reach_nmi).zip(b.reach_nmi) {
            *out = from.zip(to).map(|(from, to)| std::array::from_fn(|i| mix(from[i], to[i])));
        }
        Some(Fix {
            time,
            latitude: mix(a.latitude, b.latitude),
            longitude: a.longitude + wrap_longitude(b.longitude - a.longitude) * share,
            wind_kt: mix(a.wind_kt, b.wind_kt),
            reach_nmi,
            is_tropical: a.is_tropical && b.is_tropical,
        })
    }

    /// Whether the 34-kt wind was at a place at a time.
    pub fn gale_at(&self, place: Vector, time: DateTime<Utc>) -> There {
        let Some(fix) = self.at(time) else { return There::No };
        let Some(quadrants) = fix.reach_nmi[0] else { return There::Unknown };
        let reach = around(quadrants, bearing_degrees(fix.centre(), place));
        if reach > 0.0 && distance_nmi(fix.centre(), place) <= reach { There::Yes } else { There::No }
    }

    /// The first half hour after `from` and by `to` at which the 34-kt wind was at a place. `Err` if that cannot be told
    /// because radii are missing before it.
    pub fn onset(
        &self,
        place: Position,
        from: DateTime<Utc>,
        to: DateTime<Utc>,
    ) -> Result<Option<DateTime<Utc>>, ()> {
        let place = snugdown::wind::sphere::vector(place);
        let mut time = from + TimeDelta::minutes(30 - i64::from(from.minute() % 30));
        while time <= to {
            match self.gale_at(place, time) {
                There::Yes => return Ok(Some(time)),
                There::Unknown => return Err(()),
                There::No => time += TimeDelta::minutes(30),
            }
        }
        Ok(None)
    }
}
