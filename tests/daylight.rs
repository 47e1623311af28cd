//! The sun's rise, set and twilight: published check values, a reference library, and the other way to compute them.

#![expect(clippy::unwrap_used, reason = "a helper of these tests fails by panicking, as a test does")]

use chrono::{DateTime, NaiveDate, NaiveDateTime, Utc};
use proptest::prelude::proptest;
use snugdown::geo::daylight::{SunDay, SunLimit, daylight, sun_altitude, sun_day};
use snugdown::geo::position::Position;
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::windows::WindowSet;

/// The low-precision sun is good to 0.01 degrees (Meeus, ch. 25), 3 s of the earth's turning; where the sun rises at a
/// slant, three times that.
const TOLERANCE_S: i64 = 10;

fn utc(text: &str) -> DateTime<Utc> {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%dT%H:%M:%SZ").unwrap().and_utc()
}

fn day(text: &str) -> NaiveDate {
    text.parse().unwrap()
}

fn place(latitude: f64, longitude: f64) -> Position {
    Position::new(latitude, longitude).unwrap()
}

fn near(found: DateTime<Utc>, expected: &str) {
    let off = (found - utc(expected)).num_seconds();
    assert!(off.abs() <= TOLERANCE_S, "{found} is {off} s off {expected}");
}

#[test]
fn check_values_of_three_ports_hold() {
    // Own computation confirmed by skyfield within 3 s; see SOURCE.md in tests/data/skyfield for the library.
    let cases = [
        (25.7743, -80.1937, "2024-12-21", SunLimit::Sunrise, "2024-12-21T12:03:18Z", "2024-12-21T22:35:03Z"),
        (25.7743, -80.1937, "2024-12-21", SunLimit::Civil, "2024-12-21T11:38:04Z", "2024-12-21T23:00:17Z"),
        (25.7743, -80.1937, "2024-09-22", SunLimit::Sunrise, "2024-09-22T11:09:34Z", "2024-09-22T23:16:30Z"),
        (-19.25, 146.83, "2024-09-22", SunLimit::Sunrise, "2024-09-21T20:02:19Z", "2024-09-22T08:08:43Z"),
    ];
    for (latitude, longitude, date, limit, rises, sets) in cases {
        let SunDay::Between { rise, set } = sun_day(place(latitude, longitude), day(date), limit) else {
            panic!("no sunrise at {latitude}");
        };
        near(rise, rises);
        near(set, sets);
    }
    let hong_kong = place(22.2855, 114.1577);
    for (limit, sets) in
        [(SunLimit::Sunrise, "2024-09-22T10:19:34Z"), (SunLimit::Civil, "2024-09-22T10:41:54Z")]
    {
        let SunDay::Between { set, .. } = sun_day(hong_kong, day("2024-09-22"), limit) else {
            panic!("no set")
        };
        near(set, sets);
    }
}

#[test]
fn sixty_places_and_days_agree_with_the_reference_library() {
    let (mut compared, mut constant) = (0, 0);
    for line in include_str!("data/skyfield/sun-60.txt").lines() {
        let cells: Vec<&str> = line.split(' ').collect();
        let at = place(cells[0].parse().unwrap(), cells[1].parse().unwrap());
        for (limit, up, down) in
            [(SunLimit::Sunrise, cells[3], cells[4]), (SunLimit::Civil, cells[5], cells[6])]
        {
            match sun_day(at, day(cells[2]), limit) {
                SunDay::Between { rise, set } => {
                    compared += 1;
                    near(rise, up);
                    near(set, down);
                }
                SunDay::UpAllDay => {
                    constant += 1;
                    assert_eq!((up, down), ("up", "up"), "{line}");
                }
                SunDay::DownAllDay => {
                    constant += 1;
                    assert_eq!((up, down), ("down", "down"), "{line}");
                }
            }
        }
    }
    assert_eq!((compared, constant), (116, 4));
}

#[test]
fn a_polar_day_is_always_light_and_a_polar_night_never() {
    let tromso = place(69.65, 18.96);
    let span = |from: &str, days: i64| {
        let from = Moment::at_or_before(utc(from));
        (from, from + Minutes::hours(24 * days))
    };
    let (from, to) = span("2026-06-10T00:00:00Z", 20);
    let light = daylight(tromso, from, to, SunLimit::Sunrise);
    assert_eq!(light.gaps().gaps().spans().len(), 1);
    assert!(light.contains(from) && light.contains(to - Minutes::new(1)) && !light.contains(to));
    let (from, to) = span("2026-12-10T00:00:00Z", 20);
    assert_eq!(daylight(tromso, from, to, SunLimit::Sunrise), WindowSet::never());
    assert!(!daylight(tromso, from, to, SunLimit::Civil).is_never());
}

#[test]
fn windows_start_late_and_end_early() {
    let miami = place(25.7743, -80.1937);
    let (from, to) = (utc("2024-12-21T06:00:00Z"), utc("2024-12-22T06:00:00Z"));
    let light = daylight(miami, Moment::at_or_before(from), Moment::at_or_before(to), SunLimit::Sunrise);
    let [span] = light.spans() else { panic!("{light:?}") };
    assert_eq!(span.start().to_string(), "2024-12-21T12:04Z");
    assert_eq!(span.end().to_string(), "2024-12-21T22:35Z");
}

proptest! {
    #[test]
    fn windows_agree_with_the_altitude_at_every_minute_asked(
        latitude in -65.0..65.0_f64, longitude in -180.0..180.0_f64, start in 29_453_760_i64..31_032_000,
        minute in 0_i64..2880, is_civil in proptest::bool::ANY
    ) {
        // Both ways use the same place of the sun, so that only the geometry and the bookkeeping of days are compared.
        const ALTITUDE_TOLERANCE: f64 = 0.01;
        let limit = if is_civil { SunLimit::Civil } else { SunLimit::Sunrise };
        let from = Moment::from_epoch_minutes(start);
        let light = daylight(place(latitude, longitude), from, from + Minutes::hours(48), limit);
        let at = from + Minutes::new(minute);
        let above = sun_altitude(place(latitude, longitude), at.to_utc()) - limit.altitude();
        if light.contains(at) {
            assert!(above > -ALTITUDE_TOLERANCE, "{at} is called light at {above} over the limit");
        } else {
            // A minute of rounding: the sun climbs at most a quarter of a degree in it.
            assert!(above < 0.25 + ALTITUDE_TOLERANCE, "{at} is called dark at {above} over the limit");
        }
    }
}
