//! Every advisory of three storms, text against numbers: each position, wind and radius.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use snugdown::advisory::forecast::{Advisory, ForecastPoint, Motion, Reach};
use snugdown::advisory::read::read_forecast;
use std::collections::BTreeMap;
use std::fs;

const FOLDER: &str = "tests/data/forecast-sequences";
const STORMS: [(&str, usize); 3] = [("al092017", 43), ("al112017", 52), ("al152017", 59)];

/// The rows of a table without its head, split at the commas.
fn rows(storm: &str, table: &str) -> Vec<Vec<String>> {
    let text = fs::read_to_string(format!("{FOLDER}/{storm}/{table}.csv")).unwrap();
    text.lines().skip(1).map(|line| line.split(',').map(str::to_owned).collect()).collect()
}

fn advisories(storm: &str) -> BTreeMap<u32, Advisory> {
    let texts = fs::read_to_string(format!("{FOLDER}/{storm}/texts.txt")).unwrap();
    let mut found = BTreeMap::new();
    for text in texts.split_inclusive("NNNN\n").filter(|text| text.contains("ADVISORY NUMBER")) {
        let reading = read_forecast("text", text.as_bytes());
        let advisory = reading.advisory.unwrap_or_else(|| panic!("{:?}\n{text}", reading.findings));
        found.insert(advisory.number.unwrap(), advisory);
    }
    found
}

fn number(field: &str) -> f64 {
    field.parse().unwrap()
}

fn assert_near(found: f64, field: &str, what: &str) {
    assert!((found - number(field)).abs() < 1e-9, "{what}: read {found}, table {field}");
}

/// Numbers stand in `fields` as latitude, longitude, wind, gust.
fn assert_state(point: &ForecastPoint, fields: &[String], what: &str) {
    assert_near(point.position.latitude(), &fields[0], what);
    assert_near(point.position.longitude(), &fields[1], what);
    assert_near(point.max_wind.get(), &fields[2], what);
    match point.gust {
        Some(gust) => assert_near(gust.get(), &fields[3], what),
        // The office's slip: gusts below the mean wind are dropped.
        None => assert!(number(&fields[3]) < number(&fields[2]), "{what}: no gust"),
    }
}

fn iso(point: &ForecastPoint) -> String {
    point.valid.format("%Y-%m-%dT%H:%MZ").to_string()
}

#[test]
fn every_present_state_is_that_of_the_table() {
    for (storm, count) in STORMS {
        let advisories = advisories(storm);
        let rows = rows(storm, "advisories");
        assert_eq!((advisories.len(), rows.len()), (count, count), "{storm}");
        for row in rows {
            let what = format!("{storm} no. {}", row[0]);
            let advisory = &advisories[&row[0].parse().unwrap()];
            assert_eq!(advisory.issued.format("%Y-%m-%dT%H:%MZ").to_string(), row[1], "{what}");
            assert_eq!(advisory.storm.id.as_deref(), Some(storm.to_uppercase().as_str()), "{what}");
            assert_eq!(advisory.storm.class, row[2].to_uppercase(), "{what}");
            assert_state(&advisory.points[0], &row[3..7], &what);
            assert_near(advisory.pressure.unwrap().get(), &row[7], &what);
            assert_near(advisory.accuracy.unwrap().get(), &row[8], &what);
            match advisory.motion.unwrap() {
                Motion::Stationary => assert_near(0.0, &row[10], &what),
                Motion::Towards(bearing, speed) => {
                    assert_near(bearing.get(), if row[9] == "360" { "0" } else { &row[9] }, &what);
                    assert_near(speed.get(), &row[10], &what);
                }
            }
        }
    }
}

#[test]
fn every_forecast_position_and_wind_is_that_of_the_table() {
    for (storm, _) in STORMS {
        let advisories = advisories(storm);
        let rows = rows(storm, "forecasts");
        let read: usize = advisories.values().map(|advisory| advisory.points.len() - 1).sum();
        assert_eq!(read, rows.len(), "{storm}");
        for row in rows {
            let what = format!("{storm} no. {} for {}", row[0], row[2]);
            let advisory = &advisories[&row[0].parse().unwrap()];
            let point = advisory.points.iter().skip(1).find(|point| iso(point) == row[2]);
            assert_state(point.unwrap_or_else(|| panic!("{what} is missing")), &row[4..8], &what);
        }
    }
}

#[test]
fn every_radius_is_that_of_the_table_and_no_other_is_read() {
    for (storm, _) in STORMS {
        let mut table: BTreeMap<(u32, String, u32), Vec<String>> = BTreeMap::new();
        for row in rows(storm, "radii") {
            table.insert(
                (row[0].parse().unwrap(), row[2].clone(), row[3].parse().unwrap()),
                row[4..8].to_vec(),
            );
        }
        for (number, advisory) in advisories(storm) {
            for point in &advisory.points {
                for (speed, reach) in point.radii.by_speed() {
                    let what = format!("{storm} no. {number} for {} {speed}", iso(point));
                    let row = table.remove(&(number, iso(point), speed.get() as u32));
                    match (reach, row) {
                        (Reach::Given(quadrants), Some(row)) => {
                            for (found, field) in quadrants.clockwise().iter().zip(&row) {
                                assert_near(found.get(), field, &what);
                            }
                        }
                        (Reach::Given(quadrants), None) => {
                            assert!(quadrants.greatest().get() < 1e-9 && point.max_wind < speed, "{what}");
                        }
                        (Reach::NotGiven, None) => assert!(point.max_wind >= speed, "{what}"),
                        (Reach::NotGiven, Some(row)) => panic!("{what}: {row:?} was not read"),
                    }
                }
            }
        }
        assert!(table.is_empty(), "{storm}: not read: {table:?}");
    }
}

#[test]
fn the_advisories_of_a_storm_sort_by_their_keys_as_they_were_issued() {
    for (storm, _) in STORMS {
        let advisories = advisories(storm);
        let keys: Vec<_> = advisories.values().map(Advisory::key).collect();
        assert!(keys.windows(2).all(|pair| pair[0] < pair[1]), "{storm}");
    }
}
