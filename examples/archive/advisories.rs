//! Advisories as the archive holds them, number by number.
//!
//! A wind's radii are "none" where the greatest wind is below it, and "not given" where it is not and the archive has no row
//! or a row of four zeros; they are never zero by accident.

use super::table::{instant, rows};
use chrono::{DateTime, TimeDelta, Timelike, Utc};
use serde::Deserialize;
use snugdown::advisory::forecast::{
    Advisory, Ending, ForecastPoint, Motion, Quadrants, Reach, Storm, WindRadii,
};
use snugdown::finding::fault::Place;
use snugdown::geo::position::Position;
use snugdown::units::bearing::Bearing;
use snugdown::units::length::NauticalMiles;
use snugdown::units::pressure::HectoPascals;
use snugdown::units::speed::Knots;
use snugdown::units::wind::Averaging;
use std::collections::BTreeMap;
use std::path::Path;

/// One advisory of the archive.
pub struct Entry {
    /// The storm's number, "AL092008".
    pub key: String,
    /// Issue time as the archive writes it.
    pub issued: String,
    /// The advisory.
    pub advisory: Advisory,
}

impl Entry {
    /// "2008".
    pub fn season(&self) -> &str {
        self.key.get(4..).unwrap_or_default()
    }
}

#[derive(Deserialize)]
struct AdvisoryRow {
    key: String,
    adv: Option<String>,
    issued: String,
    status: String,
    lat: f64,
    lon: f64,
    wind_kt: f64,
    gust_kt: Option<f64>,
    pressure_hpa: Option<f64>,
    motion_deg: Option<f64>,
    motion_kt: Option<f64>,
    position_accuracy_nm: Option<f64>,
}

#[derive(Deserialize)]
struct ForecastRow {
    key: String,
    issued: String,
    valid: String,
    lat: f64,
    lon: f64,
    wind_kt: f64,
    gust_kt: Option<f64>,
}

#[derive(Deserialize)]
struct RadiiRow {
    key: String,
    issued: String,
    valid: String,
    kt: u32,
    ne_nm: Option<f64>,
    se_nm: Option<f64>,
    sw_nm: Option<f64>,
    nw_nm: Option<f64>,
}

/// The reach in the four quadrants by (storm, issue time, valid time, wind in kt).
type Radii = BTreeMap<(String, String, DateTime<Utc>, u32), Quadrants>;

/// All advisories of `folder`, by storm and issue time.
pub fn read(folder: &Path) -> Vec<Entry> {
    let mut radii = Radii::new();
    for row in rows::<RadiiRow>(folder, "radii") {
        let quadrants = [row.ne_nm, row.se_nm, row.sw_nm, row.nw_nm];
        if let [Some(ne), Some(se), Some(sw), Some(nw)] = quadrants.map(|reach| reach.and_then(miles)) {
            let quadrants = Quadrants { northeast: ne, southeast: se, southwest: sw, northwest: nw };
            radii.insert((row.key, row.issued, instant(&row.valid), row.kt), quadrants);
        }
    }
    let mut forecasts: BTreeMap<(String, String), Vec<ForecastRow>> = BTreeMap::new();
    for row in rows::<ForecastRow>(folder, "forecasts") {
        forecasts.entry((row.key.clone(), row.issued.clone())).or_default().push(row);
    }
    let none = Vec::new();
    let mut entries: Vec<Entry> = rows::<AdvisoryRow>(folder, "advisories")
        .into_iter()
        .filter_map(|row| {
            let points = forecasts.get(&(row.key.clone(), row.issued.clone())).unwrap_or(&none);
            entry(row, points, &radii)
        })
        .collect();
    entries.sort_by(|a, b| (&a.key, a.advisory.issued).cmp(&(&b.key, b.advisory.issued)));
    entries
}

fn miles(reach: f64) -> Option<NauticalMiles> {
    NauticalMiles::new(reach).ok()
}

fn entry(row: AdvisoryRow, forecasts: &[ForecastRow], radii: &Radii) -> Option<Entry> {
    let issued = instant(&row.issued);
    let point = |valid: DateTime<Utc>, lat: f64, lon: f64, wind: f64, gust: Option<f64>| {
        let max_wind = Knots::new(wind).ok()?;
        let reach = |kt: u32, speed: Knots| {
            let given = radii.get(&(row.key.clone(), row.issued.clone(), valid, kt)).copied();
            reach(given, max_wind >= speed)
        };
        Some(ForecastPoint {
            valid,
            position: Position::new(lat, lon).ok()?,
            max_wind,
            gust: gust.and_then(|gust| Knots::new(gust).ok()),
            radii: WindRadii {
                gale: reach(34, Knots::GALE),
                storm: reach(50, Knots::STORM),
                hurricane: reach(64, Knots::HURRICANE),
            },
            seas: None,
            qualifier: String::new(),
            place: Place { file: "archive".to_owned(), line: 1, column: 1, start: 0, end: 0 },
        })
    };
    let mut points = vec![point(issued, row.lat, row.lon, row.wind_kt, row.gust_kt)?];
    for forecast in forecasts {
        let valid = instant(&forecast.valid);
        // Times that do not rise are faults of the archive.
        if points.last().is_some_and(|last| valid > last.valid) {
            points.extend(point(valid, forecast.lat, forecast.lon, forecast.wind_kt, forecast.gust_kt));
        }
    }
    let base = base(issued, points.get(1));
    let advisory = Advisory {
        storm: Storm { id: Some(row.key.clone()), name: row.key.clone(), class: row.status.to_uppercase() },
        issuer: "NWS NATIONAL HURRICANE CENTER MIAMI FL".to_owned(),
        number: row.adv.as_deref().and_then(|number| number.trim_end_matches(".0").parse().ok()),
        is_special: false,
        is_corrected: false,
        issued,
        base,
        base_position: None,
        averaging: Averaging::Minute1,
        accuracy: row.position_accuracy_nm.and_then(miles),
        motion: motion(row.motion_deg, row.motion_kt),
        pressure: row.pressure_hpa.and_then(|pressure| HectoPascals::new(pressure).ok()),
        next_due: None,
        is_last: false,
        ends: ending(base, &points),
        points,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: false,
        assumed: Vec::new(),
    };
    Some(Entry { key: row.key, issued: row.issued, advisory })
}

/// As the reader of the texts does.
fn reach(given: Option<Quadrants>, blows: bool) -> Reach {
    match given {
        Some(quadrants) if quadrants != Quadrants::NONE => Reach::Given(quadrants),
        _ if blows => Reach::NotGiven,
        _ => Reach::Given(Quadrants::NONE),
    }
}

/// 12 h before the first forecast time, as the reader of the texts takes it; else the last of 00, 06, 12, 18 UTC.
fn base(issued: DateTime<Utc>, first: Option<&ForecastPoint>) -> DateTime<Utc> {
    let past = i64::from(issued.hour() % 6) * 60 + i64::from(issued.minute());
    first
        .map(|point| point.valid - TimeDelta::hours(12))
        .filter(|base| *base <= issued && issued - *base <= TimeDelta::hours(12))
        .unwrap_or(issued - TimeDelta::minutes(past))
}

/// A text that stops before 120 h says "dissipated" or "absorbed" at the next of its hours; the archive keeps neither word.
/// The first is far more frequent.
fn ending(base: DateTime<Utc>, points: &[ForecastPoint]) -> Option<Ending> {
    let last = points.last().map_or(0, |point| (point.valid - base).num_hours());
    let next = [12, 24, 36, 48, 72, 96, 120].into_iter().find(|lead| *lead > last)?;
    Some(Ending::Dissipated(base + TimeDelta::hours(next)))
}

fn motion(towards: Option<f64>, speed: Option<f64>) -> Option<Motion> {
    let (towards, speed) = (towards?, speed?);
    if speed > 0.0 {
        Some(Motion::Towards(Bearing::wrapped(towards), Knots::new(speed).ok()?))
    } else {
        Some(Motion::Stationary)
    }
}
