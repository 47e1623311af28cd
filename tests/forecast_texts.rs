//! Real Forecast/Advisory texts, 1991 to 2024, against what was read off them by eye.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use chrono::{DateTime, Utc};
use snugdown::advisory::forecast::{Advisory, Ending, Motion, Quadrants, Reach};
use snugdown::advisory::read::{Reading, read_forecast};
use std::fs;

const FOLDER: &str = "tests/data/forecast-advisory";

fn text(name: &str) -> String {
    fs::read_to_string(format!("{FOLDER}/{name}")).unwrap()
}

fn read(text: &str) -> Advisory {
    let Reading { advisory, findings, .. } = read_forecast("text", text.as_bytes());
    advisory.unwrap_or_else(|| panic!("{findings:?}\n{text}"))
}

fn codes(text: &str) -> Vec<&'static str> {
    read_forecast("text", text.as_bytes()).findings.iter().map(|finding| finding.code).collect()
}

fn at(text: &str) -> DateTime<Utc> {
    DateTime::parse_from_rfc3339(&format!("{text}:00Z")).unwrap().with_timezone(&Utc)
}

fn shown(reach: Reach) -> String {
    match reach {
        Reach::NotGiven => "not given".to_owned(),
        Reach::Given(quadrants) if quadrants == Quadrants::NONE => "none".to_owned(),
        Reach::Given(quadrants) => quadrants.clockwise().map(|miles| format!("{:.0}", miles.get())).join(" "),
    }
}

/// "when | latitude longitude | wind gust | reach of 34 | of 50 | of 64 kt | qualifier".
fn point(advisory: &Advisory, index: usize) -> String {
    let point = &advisory.points[index];
    let [gale, storm, hurricane] = point.radii.by_speed().map(|(_, reach)| shown(reach));
    format!(
        "{} | {:.1} {:.1} | {:.0} {:.0} | {gale} | {storm} | {hurricane} | {}",
        point.valid.format("%m-%dT%H:%M"),
        point.position.latitude(),
        point.position.longitude(),
        point.max_wind.get(),
        point.gust.unwrap().get(),
        point.qualifier,
    )
}

/// "issued, base, its position, motion, pressure, accuracy, next due".
fn clockwork(advisory: &Advisory) -> String {
    let base = advisory
        .base_position
        .map_or("-".to_owned(), |position| format!("{:.1} {:.1}", position.latitude(), position.longitude()));
    let motion = match advisory.motion {
        None => "-".to_owned(),
        Some(Motion::Stationary) => "stationary".to_owned(),
        Some(Motion::Towards(bearing, speed)) => format!("{:.0}/{:.0}", bearing.get(), speed.get()),
    };
    format!(
        "{} | {} at {base} | {motion} | {} | {} | {}",
        advisory.issued.format("%Y-%m-%dT%H:%M"),
        advisory.base.format("%dT%H:%M"),
        advisory.pressure.map_or("-".to_owned(), |pressure| format!("{:.0}", pressure.get())),
        advisory.accuracy.map_or("-".to_owned(), |miles| format!("{:.0}", miles.get())),
        advisory.next_due.map_or("-".to_owned(), |due| due.format("%dT%H:%M").to_string()),
    )
}

/// "id, class, name, number, flags, how many points, last valid".
fn identity(advisory: &Advisory) -> String {
    let flags = [
        (advisory.is_special, " special"),
        (advisory.is_corrected, " corrected"),
        (advisory.is_last, " last"),
    ];
    let flags: String = flags.iter().filter(|(is_set, _)| *is_set).map(|(_, word)| *word).collect();
    format!(
        "{} | {} | {} | {}{flags} | {} to {}",
        advisory.storm.id.as_deref().unwrap_or("-"),
        advisory.storm.class,
        advisory.storm.name,
        advisory.number.unwrap(),
        advisory.points.len(),
        advisory.last_valid().format("%Y-%m-%dT%H:%M"),
    )
}

fn quoted(advisory: &Advisory) -> Option<(f64, f64)> {
    advisory.quoted_track_errors.map(|(day_4, day_5)| (day_4.get(), day_5.get()))
}

#[test]
fn a_special_advisory_of_2001_reads_as_it_stands() {
    let advisory = read(&text("al012001.fstadv.001.txt"));
    assert_eq!(
        identity(&advisory),
        "AL012001 | TROPICAL STORM | ALLISON | 1 special | 5 to 2001-06-07T18:00"
    );
    assert_eq!(
        clockwork(&advisory),
        "2001-06-05T19:00 | 05T18:00 at 28.1 -94.7 | 0/11 | 1004 | 30 | 05T21:00"
    );
    assert_eq!(
        point(&advisory, 0),
        "06-05T19:00 | 28.3 -94.7 | 50 60 | 175 175 0 30 | 100 100 0 0 | none | "
    );
    assert_eq!(point(&advisory, 1), "06-06T06:00 | 30.1 -94.2 | 45 55 | 60 150 0 20 | none | none | INLAND");
    assert_eq!(
        point(&advisory, 4),
        "06-07T18:00 | 34.4 -92.0 | 20 25 | none | none | none | INLAND DISSIPATING"
    );
    assert_eq!((advisory.ends, advisory.issuer.as_str()), (None, "NATIONAL WEATHER SERVICE MIAMI FL"));
}

#[test]
fn a_forecast_line_after_the_outlook_can_end_the_track() {
    let advisory = read(&text("al012001.fstadv.004.txt"));
    assert_eq!(
        identity(&advisory),
        "AL012001 | TROPICAL DEPRESSION | ALLISON | 4 last | 5 to 2001-06-08T06:00"
    );
    assert_eq!(clockwork(&advisory), "2001-06-06T09:00 | 06T06:00 at 30.0 -95.3 | 0/5 | 1004 | 30 | -");
    assert_eq!(
        point(&advisory, 4),
        "06-08T06:00 | 30.5 -95.0 | 20 30 | none | none | none | INLAND...DISSIPATING"
    );
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2001-06-09T06:00"))));
}

#[test]
fn a_subtropical_storm_reads_with_its_seas_left_aside() {
    let advisory = read(&text("al012003.fstadv.001.txt"));
    assert_eq!(identity(&advisory), "AL012003 | SUBTROPICAL STORM | ANA | 1 | 6 to 2003-04-24T00:00");
    assert_eq!(
        clockwork(&advisory),
        "2003-04-21T03:00 | 21T00:00 at 31.4 -66.4 | 110/9 | 1002 | 45 | 21T09:00"
    );
    assert_eq!(point(&advisory, 0), "04-21T03:00 | 31.3 -66.0 | 35 45 | 60 60 60 60 | none | none | ");
    assert_eq!(point(&advisory, 4), "04-23T00:00 | 30.0 -56.5 | 35 45 | 60 60 60 60 | none | none | ");
    assert_eq!(point(&advisory, 5), "04-24T00:00 | 30.5 -50.0 | 25 35 | none | none | none | DISSIPATING");
}

#[test]
fn a_last_advisory_on_a_remnant_low_reads_to_its_end() {
    let advisory = read(&text("al012012.fstadv.012.txt"));
    assert_eq!(
        identity(&advisory),
        "AL012012 | POST-TROPICAL CYCLONE | ALBERTO | 12 last | 3 to 2012-05-23T12:00"
    );
    assert_eq!(clockwork(&advisory), "2012-05-22T15:00 | 22T12:00 at 32.6 -74.7 | 50/15 | 1008 | 25 | -");
    assert_eq!(
        point(&advisory, 2),
        "05-23T12:00 | 36.8 -69.0 | 30 40 | none | none | none | POST-TROP/REMNT LOW"
    );
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2012-05-24T00:00"))));
}

#[test]
fn a_potential_cyclone_near_the_equator_reads_with_the_offices_own_errors() {
    let advisory = read(&text("al022017.fstadv.001.txt"));
    assert_eq!(
        identity(&advisory),
        "AL022017 | POTENTIAL TROPICAL CYCLONE | TWO | 1 | 6 to 2017-06-21T18:00"
    );
    assert_eq!(
        clockwork(&advisory),
        "2017-06-18T21:00 | 18T18:00 at 7.3 -49.4 | 280/20 | 1008 | 40 | 19T03:00"
    );
    assert_eq!(
        point(&advisory, 2),
        "06-19T18:00 | 9.5 -57.0 | 35 45 | 60 0 0 60 | none | none | TROPICAL CYCLONE"
    );
    assert_eq!(point(&advisory, 3), "06-20T06:00 | 10.6 -60.5 | 45 55 | 80 0 0 80 | none | none | ");
    assert_eq!(quoted(&advisory), Some((150.0, 200.0)));
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2017-06-22T18:00"))));
}

#[test]
fn a_corrected_advisory_runs_over_the_end_of_the_month() {
    let advisory = read(&text("al102017.fstadv.004.txt"));
    assert_eq!(
        identity(&advisory),
        "AL102017 | POTENTIAL TROPICAL CYCLONE | TEN | 4 corrected | 8 to 2017-09-02T12:00"
    );
    assert_eq!(
        clockwork(&advisory),
        "2017-08-28T15:00 | 28T12:00 at 31.0 -80.5 | 25/8 | 1007 | 45 | 28T21:00"
    );
    assert_eq!(point(&advisory, 0), "08-28T15:00 | 31.4 -80.3 | 30 40 | none | none | none | ");
    assert_eq!(
        point(&advisory, 4),
        "08-30T12:00 | 38.5 -69.0 | 55 65 | 220 180 120 150 | 0 0 0 90 | none | POST-TROP/EXTRATROP"
    );
    assert_eq!(
        point(&advisory, 6),
        "09-01T12:00 | 46.0 -48.0 | 50 60 | not given | not given | none | POST-TROP/EXTRATROP"
    );
    assert_eq!(quoted(&advisory), Some((150.0, 200.0)));
}

#[test]
fn a_text_without_line_breaks_reads_as_any_other() {
    let advisory = read(&text("ep022013.fstadv.009.rss-flattened.txt"));
    assert_eq!(identity(&advisory), "EP022013 | TROPICAL DEPRESSION | BARBARA | 9 | 3 to 2013-05-31T12:00");
    assert_eq!(
        clockwork(&advisory),
        "2013-05-30T15:00 | 30T12:00 at 18.4 -94.9 | 310/3 | 1005 | 70 | 30T21:00"
    );
    assert_eq!(
        point(&advisory, 2),
        "05-31T12:00 | 18.8 -96.2 | 20 30 | none | none | none | POST-TROP/REMNT LOW"
    );
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2013-06-01T00:00"))));
    assert_eq!(advisory.issuer, "NWS NATIONAL HURRICANE CENTER MIAMI FL");
}

#[test]
fn office_and_basin_may_differ_and_the_id_decides() {
    let advisory = read(&text("ep032020.fstadv.015.txt"));
    assert_eq!(
        identity(&advisory),
        "EP032020 | POST-TROPICAL CYCLONE | BORIS | 15 last | 4 to 2020-06-29T12:00"
    );
    assert_eq!(clockwork(&advisory), "2020-06-28T03:00 | 28T00:00 at 12.2 -141.7 | 255/7 | 1008 | 30 | -");
    assert_eq!(advisory.issuer, "NWS CENTRAL PACIFIC HURRICANE CENTER HONOLULU HI");
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2020-06-30T00:00"))));
}

#[test]
fn a_hurricane_of_2024_that_goes_inland_keeps_its_single_quadrants() {
    let advisory = read(&text("ep102024.fstadv.006.txt"));
    assert_eq!(identity(&advisory), "EP102024 | HURRICANE | JOHN | 6 | 4 to 2024-09-25T06:00");
    assert_eq!(clockwork(&advisory), "2024-09-23T21:00 | 23T18:00 at 15.2 -98.4 | 0/5 | 973 | 20 | 24T03:00");
    assert_eq!(
        point(&advisory, 0),
        "09-23T21:00 | 15.5 -98.5 | 85 105 | 40 40 30 40 | 20 20 15 20 | 10 10 0 10 | "
    );
    assert_eq!(
        point(&advisory, 2),
        "09-24T18:00 | 16.5 -98.3 | 65 80 | 30 60 80 30 | 15 20 20 15 | 0 10 10 0 | INLAND"
    );
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2024-09-25T18:00"))));
}

#[test]
fn a_storm_that_hangs_over_the_coast_reads_with_its_turns() {
    let advisory = read(&text("ep102024.fstadv.008.txt"));
    assert_eq!(identity(&advisory), "EP102024 | TROPICAL STORM | JOHN | 8 | 7 to 2024-09-27T06:00");
    assert_eq!(
        clockwork(&advisory),
        "2024-09-24T09:00 | 24T06:00 at 16.9 -99.3 | 310/7 | 990 | 30 | 24T15:00"
    );
    assert_eq!(point(&advisory, 0), "09-24T09:00 | 17.3 -100.0 | 60 75 | 30 40 40 30 | 0 20 20 0 | none | ");
    assert_eq!(point(&advisory, 2), "09-25T06:00 | 17.0 -101.0 | 30 40 | none | none | none | OVER WATER");
    assert_eq!(quoted(&advisory), Some((100.0, 125.0)));
    assert_eq!(advisory.ends, Some(Ending::Dissipated(at("2024-09-28T06:00"))));
}

#[test]
fn radii_that_the_product_does_not_carry_are_not_given_and_not_none() {
    let advisory = read(&text("ep122024.fstadv.008.txt"));
    assert_eq!(identity(&advisory), "EP122024 | HURRICANE | KRISTY | 8 | 9 to 2024-10-28T12:00");
    assert_eq!(
        clockwork(&advisory),
        "2024-10-23T15:00 | 23T12:00 at 14.4 -113.0 | 265/17 | 954 | 20 | 23T21:00"
    );
    assert_eq!(
        point(&advisory, 4),
        "10-25T12:00 | 15.1 -125.1 | 115 140 | 100 70 70 90 | 50 40 40 50 | 30 20 20 30 | "
    );
    assert_eq!(
        point(&advisory, 5),
        "10-26T00:00 | 16.5 -127.3 | 105 130 | 110 80 70 100 | 50 40 40 50 | not given | "
    );
    assert_eq!(
        point(&advisory, 7),
        "10-27T12:00 | 20.5 -132.5 | 55 65 | 100 50 50 100 | 30 10 10 30 | none | "
    );
    assert_eq!(
        point(&advisory, 8),
        "10-28T12:00 | 21.0 -136.5 | 30 40 | none | none | none | POST-TROP/REMNT LOW"
    );
    assert_eq!(codes(&text("ep122024.fstadv.008.txt")), Vec::<&str>::new());
}

#[test]
fn the_layout_of_1991_reads() {
    let advisory = read(&text("mal0191.001.txt"));
    assert_eq!(identity(&advisory), "- | TROPICAL STORM | ANA | 1 | 6 to 1991-07-06T18:00");
    // It does not give the synoptic position; its forecasts count from 03/1800Z.
    assert_eq!(clockwork(&advisory), "1991-07-03T22:00 | 03T18:00 at - | 65/22 | - | 30 | 04T04:00");
    assert_eq!(point(&advisory, 0), "07-03T22:00 | 35.8 -71.8 | 35 45 | 50 50 50 50 | none | none | ");
    assert_eq!(point(&advisory, 3), "07-05T06:00 | 38.5 -57.9 | 40 50 | 50 50 50 50 | none | none | ");
    assert_eq!(point(&advisory, 4), "07-05T18:00 | 39.1 -52.2 | 40 50 | not given | none | none | ");
    assert_eq!(codes(&text("mal0191.001.txt")), ["advisory-no-storm-id", "advisory-reach-missing"]);
}

#[test]
fn an_id_with_two_digits_of_the_year_gets_its_century() {
    let advisory = read(&text("mal0198.001.txt"));
    assert_eq!(identity(&advisory), "AL011998 | TROPICAL DEPRESSION | ONE | 1 | 6 to 1998-07-30T12:00");
    assert_eq!(
        clockwork(&advisory),
        "1998-07-27T15:00 | 27T12:00 at 11.3 -25.9 | 280/20 | 1008 | 50 | 27T21:00"
    );
    assert_eq!(point(&advisory, 2), "07-28T12:00 | 12.8 -33.9 | 35 45 | 100 50 50 100 | none | none | ");
    assert_eq!(point(&advisory, 5), "07-30T12:00 | 14.0 -47.0 | 55 65 | not given | 50 25 25 50 | none | ");
}

#[test]
fn a_time_printed_twice_cuts_the_track_there() {
    let advisory = read(&text("mcp0394.001.txt"));
    assert_eq!(identity(&advisory), "- | TROPICAL DEPRESSION | THREE-C | 1 | 5 to 1994-10-24T18:00");
    assert_eq!(
        clockwork(&advisory),
        "1994-10-22T21:00 | 22T18:00 at 12.8 -157.3 | stationary | 1010 | 30 | 23T03:00"
    );
    assert_eq!(point(&advisory, 4), "10-24T18:00 | 12.9 -158.0 | 40 50 | not given | none | none | ");
    assert_eq!(advisory.ends, Some(Ending::CutShort(at("1994-10-24T18:00"))));
    assert!(codes(&text("mcp0394.001.txt")).contains(&"advisory-times-not-rising"));
}
