//! Forecasts typed in as TOML: what is needed, what is welcome, and what is assumed for the rest.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use snugdown::advisory::forecast::{Advisory, Motion, Quadrants, Reach};
use snugdown::advisory::read::read_forecast;
use snugdown::units::wind::Averaging;
use std::fs;

const LEAST: &str = r#"
[forecast]
issuer = "Invented Exercise Office"
base_time = "2026-09-17T03:00-03:00"
[storm]
name = "Oda"
[now]
centre = "22.3 N 179.5 W"
motion = "W at 15 kt"
max_wind = "55 kt"
averaging = "10 min"
reach_34kt = "120 n mi"
"#;

fn read(text: &str) -> Advisory {
    let reading = read_forecast("typed.toml", text.as_bytes());
    assert!(reading.findings.is_empty(), "{:?}", reading.findings);
    reading.advisory.unwrap()
}

fn codes(text: &str) -> Vec<&'static str> {
    read_forecast("typed.toml", text.as_bytes()).findings.iter().map(|finding| finding.code).collect()
}

fn miles(reach: Reach) -> Option<[f64; 4]> {
    match reach {
        Reach::NotGiven => None,
        Reach::Given(quadrants) => Some(quadrants.clockwise().map(|miles| miles.get())),
    }
}

#[test]
fn the_least_forecast_goes_straight_on_for_three_days_and_says_so() {
    let advisory = read(LEAST);
    assert_eq!(advisory.points.len(), 7);
    assert_eq!((advisory.last_valid() - advisory.base).num_hours(), 72);
    assert_eq!(advisory.issued, advisory.base);
    assert_eq!(advisory.averaging, Averaging::Minute10);
    assert_eq!(advisory.storm.name, "ODA");
    assert!(matches!(advisory.motion, Some(Motion::Towards(_, _))));
    // 15 kt for 12 h westwards, 180 n mi along the parallel of 22.3 degrees, is 3.24 degrees: across the date line.
    let second = advisory.points[1].position;
    assert!((second.longitude() - 177.26).abs() < 0.03, "{second}");
    assert!((second.latitude() - 22.3).abs() < 0.1, "{second}");
    for point in &advisory.points {
        assert_eq!(miles(point.radii.gale), Some([120.0; 4]));
        assert_eq!(miles(point.radii.storm), None);
        assert_eq!(miles(point.radii.hurricane), Some([0.0; 4]));
        assert!((point.max_wind.get() - 55.0).abs() < 1e-9);
    }
    let assumed: Vec<&str> = advisory.assumed.iter().map(|assumption| assumption.what.as_str()).collect();
    assert_eq!(
        assumed,
        [
            "issue time: not given, the base time taken",
            "positions after the present one: straight on at the present speed for 72 h",
            "greatest wind at 6 times: the one before it kept",
            "wind radii at 1 time: the one distance given taken in every quadrant",
            "wind radii at 6 times: the ones before kept",
        ]
    );
    let all = advisory.widening();
    assert!((all.track - 3.0).abs() < 1e-9 && (all.intensity - 1.5).abs() < 1e-9);
    assert!((all.size - 1.875).abs() < 1e-9);
}

#[test]
fn the_example_reads_without_a_finding() {
    let advisory = read(&fs::read_to_string("tests/data/typed-forecast/example.toml").unwrap());
    assert_eq!((advisory.points.len(), advisory.number), (5, Some(7)));
    assert_eq!(miles(advisory.points[1].radii.storm), Some([70.0, 60.0, 30.0, 60.0]));
    assert_eq!(advisory.points[2].qualifier, "BECOMING EXTRATROPICAL");
    // Carried on from 48 h to 72 h at the speed of the last leg.
    let [.., a, b, c] = advisory.points.as_slice() else { panic!("too few") };
    let step = |p: f64, q: f64| q - p;
    let first = step(a.position.latitude(), b.position.latitude());
    let second = step(b.position.latitude(), c.position.latitude());
    assert!((first - second).abs() < 0.05, "{first} {second}");
}

#[test]
fn a_full_forecast_assumes_nothing() {
    let full = LEAST
        .replace("[storm]", "issued = \"2026-09-17T06:00Z\"\n[storm]")
        .replace("\"120 n mi\"", "\"120NE 120SE 90SW 90NW n mi\"\nreach_50kt = \"none\"")
        .replace("55 kt", "45 kt")
        + "[[later]]\nafter = \"24 h\"\ncentre = \"23 N 175 E\"\nmax_wind = \"30 kt\"\n";
    let advisory = read(&full);
    assert!(advisory.assumed.is_empty(), "{:?}", advisory.assumed);
    assert_eq!(advisory.points[1].radii.gale, Reach::Given(Quadrants::NONE));
}

#[test]
fn a_stationary_storm_stays_where_it_is() {
    let advisory = read(&LEAST.replace("W at 15 kt", "stationary"));
    assert_eq!(advisory.points.last().unwrap().position, advisory.points[0].position);
}

#[test]
fn a_depression_needs_no_gale_reach_but_a_gale_does() {
    let without = LEAST.replace("reach_34kt", "# reach_34kt");
    assert_eq!(codes(&without), ["advisory-missing-key"]);
    let depression = read(&without.replace("55 kt", "30 kt"));
    assert_eq!(depression.points[0].radii.gale, Reach::Given(Quadrants::NONE));
}

#[test]
fn a_gale_to_come_without_a_reach_is_not_given_and_warned_of() {
    let text = LEAST.replace("reach_34kt", "# reach_34kt").replace("55 kt", "30 kt")
        + "[[later]]\nafter = \"24 h\"\ncentre = \"23 N 175 E\"\nmax_wind = \"40 kt\"\n";
    let reading = read_forecast("typed.toml", text.as_bytes());
    assert_eq!(reading.findings[0].code, "advisory-reach-missing");
    assert_eq!(reading.advisory.unwrap().points[1].radii.gale, Reach::NotGiven);
}

#[test]
fn all_slips_of_one_file_are_found_at_once_with_what_was_meant() {
    let text = LEAST
        .replace("issuer", "isuer")
        .replace("W at 15 kt", "W at 15")
        .replace("22.3 N 179.5 W", "22.3 179.5")
        .replace("averaging = \"10 min\"", "averaging = 10\ncolour = \"red\"")
        + "[[later]]\ncentre = \"23 N 175 E\"\n";
    let reading = read_forecast("typed.toml", text.as_bytes());
    let found: Vec<String> =
        reading.findings.iter().map(|finding| format!("{}:{}", finding.place.line, finding.code)).collect();
    assert_eq!(
        found,
        [
            "2:advisory-missing-key",
            "3:advisory-unknown-key",
            "8:advisory-position-text",
            "9:advisory-quantity",
            "11:advisory-wrong-type",
            "12:advisory-unknown-key",
            "14:advisory-missing-key",
        ]
    );
    assert_eq!(reading.findings[1].to_do, "did you mean \"issuer\"?");
}

#[test]
fn an_unquoted_time_is_told_to_stand_in_quotation_marks() {
    let text = LEAST.replace("\"2026-09-17T03:00-03:00\"", "2026-09-17T03:00:00-03:00");
    let reading = read_forecast("typed.toml", text.as_bytes());
    assert_eq!(reading.findings[0].code, "advisory-wrong-type");
    assert!(reading.findings[0].found.contains("a bare time"), "{}", reading.findings[0]);
}

#[test]
fn a_storm_without_name_and_id_is_warned_of() {
    let text = LEAST.replace("[storm]\nname = \"Oda\"\n", "");
    assert_eq!(codes(&text), ["advisory-no-storm-id"]);
}

#[test]
fn winds_in_other_units_are_converted() {
    let advisory = read(&LEAST.replace("55 kt", "28 m/s").replace("120 n mi", "222.24 km"));
    assert!((advisory.points[0].max_wind.get() - 54.43).abs() < 0.01);
    assert!(miles(advisory.points[0].radii.gale).unwrap().iter().all(|reach| (reach - 120.0).abs() < 1e-9));
}
