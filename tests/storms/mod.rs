//! Advisories and error tables made by hand for the tests of the arrival odds.
#![allow(
    dead_code,
    clippy::unwrap_used,
    reason = "shared by tests and a bench, each of which uses its own part"
)]

use chrono::{DateTime, TimeDelta, TimeZone, Utc};
use snugdown::advisory::forecast::{Advisory, ForecastPoint, Quadrants, Reach, Storm, WindRadii};
use snugdown::arrival::errors::{ErrorRow, ErrorTable, ErrorTables, Settings};
use snugdown::arrival::errors_reader::read_error_tables;
use snugdown::arrival::question::{Question, Sought};
use snugdown::finding::fault::Place;
use snugdown::finding::source::SourceText;
use snugdown::geo::position::Position;
use snugdown::units::length::NauticalMiles;
use snugdown::units::speed::Knots;
use snugdown::units::wind::Averaging;

/// Degrees of arc in one nautical mile on the sphere that the odds use.
pub fn degrees(miles: f64) -> f64 {
    (miles / snugdown::wind::sphere::EARTH_RADIUS_NMI).to_degrees()
}

pub fn issue_time() -> DateTime<Utc> {
    Utc.with_ymd_and_hms(2026, 9, 17, 9, 0, 0).unwrap()
}

pub fn at(latitude: f64, longitude: f64) -> Position {
    Position::new(latitude, longitude).unwrap()
}

pub fn reach(clockwise: [f64; 4]) -> Reach {
    let [northeast, southeast, southwest, northwest] = clockwise.map(|r| NauticalMiles::new(r).unwrap());
    Reach::Given(Quadrants { northeast, southeast, southwest, northwest })
}

/// A point of a forecast with a gale radius that is the same all round; no hurricane or storm radii given.
pub fn point(hour: f64, position: Position, wind_kt: f64, gale_nmi: f64) -> ForecastPoint {
    let radii = WindRadii { gale: reach([gale_nmi; 4]), ..WindRadii::NOT_GIVEN };
    ForecastPoint {
        valid: issue_time() + TimeDelta::seconds((hour * 3600.0).round() as i64),
        position,
        max_wind: Knots::new(wind_kt).unwrap(),
        gust: None,
        radii,
        seas: None,
        qualifier: String::new(),
        place: Place { file: "made by hand".to_owned(), line: 1, column: 1, start: 0, end: 0 },
    }
}

pub fn advisory(points: Vec<ForecastPoint>) -> Advisory {
    Advisory {
        storm: Storm {
            id: Some("AL992026".to_owned()),
            name: "NOBODY".to_owned(),
            class: "HURRICANE".to_owned(),
        },
        issuer: "MADE BY HAND".to_owned(),
        number: Some(12),
        is_special: false,
        is_corrected: false,
        issued: issue_time(),
        base: issue_time(),
        base_position: None,
        averaging: Averaging::Minute1,
        accuracy: None,
        motion: None,
        pressure: None,
        next_due: None,
        is_last: false,
        points,
        ends: None,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: false,
        assumed: Vec::new(),
    }
}

/// A storm of 60 kt going east along the equator from longitude 0: it is `start_nmi` west of longitude 0 at
/// issue.
pub fn along_the_equator(speed_kt: f64, gale_nmi: f64, start_nmi: f64, hours: u32) -> Advisory {
    let points = (0..=hours / 12)
        .map(|i| {
            let hour = f64::from(i) * 12.0;
            point(hour, at(0.0, degrees(speed_kt * hour - start_nmi)), 60.0, gale_nmi)
        })
        .collect();
    advisory(points)
}

pub const SETTINGS: Settings = Settings {
    intensity_with_size: 0.0,
    size_follows_intensity: 0.5,
    radii_relaxation_h: 36.0,
    accuracy_usual_nmi: 15.0,
    accuracy_power: 1.0,
    accuracy_fades_h: 12.0,
    scaling: [0.0; 4],
};

/// A table whose errors are constant in time and, with a serial correlation of one, frozen.
pub fn constant(along: f64, cross: f64) -> ErrorTable {
    let row = ErrorRow { lead_h: 0.0, deviation: [along, cross, 0.0, 0.0], bias: [0.0; 4], serial: [1.0; 4] };
    ErrorTable::new("constant", Vec::new(), vec![row], SETTINGS).unwrap()
}

/// The tables as shipped.
pub fn shipped() -> ErrorTables {
    let text = include_str!("../../rules/forecast-errors.toml");
    read_error_tables(&SourceText::new("rules/forecast-errors.toml", text)).unwrap()
}

pub fn ask_about(key: &str, position: Position, limit_kt: f64) -> Question {
    Question { key: key.to_owned(), position, sought: Sought::Wind(Knots::new(limit_kt).unwrap()) }
}

/// A hurricane that comes from the east-south-east and passes a coast: made up, in the manner of a full
/// official forecast.
pub fn full_forecast() -> Advisory {
    // Hour, latitude, longitude, greatest wind, reach of 34, 50 and 64 kt.
    type Row = (f64, f64, f64, f64, [f64; 4], [f64; 4], [f64; 4]);
    let rows: [Row; 9] = [
        (
            0.0,
            19.0,
            -60.0,
            75.0,
            [130.0, 110.0, 60.0, 110.0],
            [60.0, 50.0, 25.0, 50.0],
            [25.0, 20.0, 0.0, 20.0],
        ),
        (
            9.0,
            19.5,
            -61.9,
            80.0,
            [130.0, 110.0, 60.0, 110.0],
            [60.0, 50.0, 30.0, 50.0],
            [30.0, 25.0, 0.0, 20.0],
        ),
        (
            21.0,
            20.2,
            -64.4,
            85.0,
            [140.0, 110.0, 70.0, 120.0],
            [70.0, 50.0, 30.0, 60.0],
            [30.0, 25.0, 15.0, 25.0],
        ),
        (
            33.0,
            21.0,
            -66.9,
            95.0,
            [140.0, 120.0, 80.0, 130.0],
            [70.0, 60.0, 40.0, 60.0],
            [35.0, 30.0, 20.0, 30.0],
        ),
        (
            45.0,
            22.0,
            -69.2,
            100.0,
            [150.0, 120.0, 80.0, 130.0],
            [75.0, 60.0, 40.0, 60.0],
            [40.0, 30.0, 20.0, 30.0],
        ),
        (
            57.0,
            23.3,
            -71.2,
            105.0,
            [150.0, 130.0, 80.0, 140.0],
            [80.0, 60.0, 40.0, 70.0],
            [40.0, 35.0, 25.0, 35.0],
        ),
        (
            69.0,
            24.8,
            -72.8,
            105.0,
            [160.0, 130.0, 90.0, 140.0],
            [80.0, 70.0, 50.0, 70.0],
            [45.0, 35.0, 25.0, 35.0],
        ),
        (93.0, 28.5, -74.5, 95.0, [0.0; 4], [0.0; 4], [0.0; 4]),
        (117.0, 33.0, -73.5, 80.0, [0.0; 4], [0.0; 4], [0.0; 4]),
    ];
    let points = rows
        .into_iter()
        .map(|(hour, latitude, longitude, wind, gale, storm, hurricane)| {
            let mut made = point(hour, at(latitude, longitude), wind, 0.0);
            // Radii are given for three days, as in the official texts.
            made.radii = if hour > 70.0 {
                WindRadii::NOT_GIVEN
            } else {
                WindRadii { gale: reach(gale), storm: reach(storm), hurricane: reach(hurricane) }
            };
            made
        })
        .collect();
    let mut made = advisory(points);
    made.base = issue_time() - TimeDelta::hours(3);
    made.accuracy = Some(NauticalMiles::new(15.0).unwrap());
    made
}
