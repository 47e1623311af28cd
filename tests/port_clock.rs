//! The port's clock: right in every zone, and never a silent choice when clocks change.

#![expect(clippy::unwrap_used, reason = "a helper of these tests fails by panicking, as a test does")]

use chrono::{DateTime, NaiveDateTime, Utc};
use proptest::prelude::proptest;
use snugdown::time::clock::PortClock;
use snugdown::time::local::{LocalTime, TimeTextError};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::zone::release;

fn local(text: &str) -> NaiveDateTime {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%d %H:%M").unwrap()
}

fn utc(text: &str) -> DateTime<Utc> {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%dT%H:%MZ").unwrap().and_utc()
}

fn moment(text: &str) -> Moment {
    Moment::at_or_before(utc(text))
}

#[test]
fn every_zone_agrees_with_the_newest_release_from_2026_to_2028() {
    let (mut zones, end) = (0, moment("2029-01-01T00:00Z"));
    for line in include_str!("data/tzdata/transitions-2026-2028.txt").lines() {
        let (names, stretches) = line.split_once(' ').unwrap();
        let expected: Vec<(Moment, String)> = stretches
            .split(' ')
            .map(|word| word.split_once('=').unwrap())
            .map(|(start, state)| (moment(start), state.to_owned()))
            .collect();
        for name in names.split(',').filter(|name| *name != "Factory") {
            zones += 1;
            let clock = PortClock::of(name).unwrap();
            let state = |at: Moment| {
                let offset = clock.offset_at(at);
                format!("{}/{}", offset.east.get(), offset.abbreviation)
            };
            let mut found = vec![(expected[0].0, state(expected[0].0))];
            let mut from = expected[0].0;
            while let Some(change) = clock.change_between(from, end - Minutes::new(1)) {
                found.push((change.at, state(change.at)));
                from = change.at;
            }
            assert_eq!(found, expected, "{name}");
        }
    }
    assert_eq!((zones, release()), (597, Some("2026f")));
}

#[test]
fn havana_stays_four_hours_behind_in_the_winter_of_2026() {
    let clock = PortClock::of("America/Havana").unwrap();
    assert_eq!(clock.show(moment("2026-11-20T15:00Z")), "Fri 20 Nov 11:00 CDT (15:00Z)");
    assert_eq!(clock.read("2026-11-01 00:30").unwrap(), utc("2026-11-01T04:30Z"));
}

#[test]
fn the_day_in_utc_is_named_where_it_differs() {
    let clock = PortClock::of("America/Sao_Paulo").unwrap();
    assert_eq!(clock.show(moment("2026-09-18T01:20Z")), "Thu 17 Sep 22:20 -03 (Fri 01:20Z)");
    assert_eq!(clock.show_local(moment("2026-09-17T09:20Z")), "Thu 17 Sep 06:20 -03");
    assert_eq!(clock.show_utc(moment("2026-09-18T01:20Z")), "Fri 18 Sep 01:20Z");
    assert_eq!(PortClock::utc().show(moment("2026-09-17T09:20Z")), "Thu 17 Sep 09:20 UTC (09:20Z)");
}

#[test]
fn a_local_time_that_comes_twice_is_answered_with_both_instants() {
    let clock = PortClock::of("America/New_York").unwrap();
    let (first, second) = (utc("2026-11-01T05:30Z"), utc("2026-11-01T06:30Z"));
    assert_eq!(clock.local_at(local("2026-11-01 01:30")), LocalTime::Twice { first, second });
    let error = clock.read("2026-11-01 01:30").unwrap_err();
    assert_eq!(
        error.to_string(),
        "\"2026-11-01 01:30\" comes twice in America/New_York, where clocks are put back: \
         write 2026-11-01T01:30-04:00 or 2026-11-01T01:30-05:00"
    );
    assert_eq!(clock.read("2026-11-01T01:30-05:00").unwrap(), second);
    assert_eq!(clock.local_at(local("2026-11-01 02:00")), LocalTime::Once(utc("2026-11-01T07:00Z")));
    assert_eq!(clock.local_at(local("2026-11-01 00:59")), LocalTime::Once(utc("2026-11-01T04:59Z")));
}

#[test]
fn a_local_time_that_never_comes_is_answered_with_the_jump() {
    let clock = PortClock::of("America/New_York").unwrap();
    let (begins, ends) = (local("2026-03-08 02:00"), local("2026-03-08 03:00"));
    let never = LocalTime::Never { begins, ends, at: utc("2026-03-08T07:00Z") };
    for text in ["2026-03-08 02:00", "2026-03-08 02:30", "2026-03-08 02:59"] {
        assert_eq!(clock.local_at(local(text)), never, "{text}");
    }
    assert_eq!(
        clock.read("2026-03-08T02:30").unwrap_err().to_string(),
        "\"2026-03-08T02:30\" never comes in America/New_York, where clocks go from 2026-03-08 02:00 straight to 03:00 \
         (2026-03-08T07:00Z)"
    );
    assert_eq!(clock.local_at(ends), LocalTime::Once(utc("2026-03-08T07:00Z")));
    assert_eq!(clock.local_at(local("2026-03-08 01:59")), LocalTime::Once(utc("2026-03-08T06:59Z")));
}

#[test]
fn half_hour_changes_and_far_east_zones_have_their_gaps_and_folds() {
    let lord_howe = PortClock::of("Australia/Lord_Howe").unwrap();
    assert!(matches!(lord_howe.local_at(local("2026-10-04 02:15")), LocalTime::Never { .. }));
    assert!(matches!(lord_howe.local_at(local("2026-04-05 01:45")), LocalTime::Twice { .. }));
    let chatham = PortClock::of("Pacific/Chatham").unwrap();
    assert!(matches!(chatham.local_at(local("2026-09-27 03:00")), LocalTime::Never { .. }));
    let kiritimati = PortClock::of("Pacific/Kiritimati").unwrap();
    assert_eq!(kiritimati.local_at(local("2026-09-17 06:00")), LocalTime::Once(utc("2026-09-16T16:00Z")));
}

#[test]
fn times_with_an_offset_are_read_whatever_the_zone() {
    let clock = PortClock::of("Asia/Manila").unwrap();
    for text in [
        "2026-09-17T06:20-03:00",
        "2026-09-17 06:20-03:00",
        "2026-09-17T09:20Z",
        "2026-09-17t09:20:00z",
        "2026-09-17T09:20:00.000Z",
        "2026-09-17 17:20",
        " 2026-09-17T17:20:00 ",
        "2026-09-17T14:50+05:30",
    ] {
        assert_eq!(clock.read(text).unwrap(), utc("2026-09-17T09:20Z"), "{text}");
    }
    assert_eq!(clock.read("2026-09-17T09:20:30.5Z").unwrap().timestamp_millis() % 60_000, 30_500);
}

#[test]
fn other_texts_are_refused() {
    let clock = PortClock::utc();
    for text in [
        "",
        "now",
        "17 Sep 06:20",
        "2026-9-17 06:20",
        "2026-09-17",
        "2026-09-17T06",
        "2026-09-17T06:20-0300",
        "2026-09-17T06:20-03",
        "2026-09-17T06:20 AST",
        "2026-09-17T06:20+15:00",
        "2026-09-17T06:20+05:60",
        "2026-09-17T06:20:00.Z",
        "2026-09-17T06:20:00.1234567890Z",
        "+026-09-17T06:20Z",
        "2026-09-17T06:2\u{e9}",
        "2026-09-17  06:20",
        "２026-09-17T06:20Z",
    ] {
        assert_eq!(clock.read(text), Err(TimeTextError::Unreadable(text.to_owned())), "{text}");
    }
    for text in ["2026-02-29T00:00Z", "2026-13-01T00:00Z", "2026-09-17T24:00Z", "2026-09-17T23:59:60Z"] {
        assert_eq!(clock.read(text), Err(TimeTextError::NoSuchDay(text.to_owned())), "{text}");
    }
    for text in ["0000-01-01 00:00", "1899-12-31T23:59Z", "2200-01-01T00:00Z", "9999-12-31 23:59"] {
        assert_eq!(clock.read(text), Err(TimeTextError::FarOff(text.to_owned())), "{text}");
    }
}

#[test]
fn beyond_the_checked_years_there_is_doubt_and_before_none() {
    let clock = PortClock::of("America/Puerto_Rico").unwrap();
    assert_eq!(clock.doubt_at(moment("2026-12-01T00:00Z")), None);
    let doubt = clock.doubt_at(moment("2029-06-01T00:00Z")).unwrap();
    assert!(doubt.contains("America/Puerto_Rico") && doubt.contains("2026f"), "{doubt}");
    let fixed = PortClock::with_offset(Minutes::new(-240)).unwrap();
    assert_eq!(fixed.doubt_at(moment("2029-06-01T00:00Z")), None);
    assert_eq!(fixed.show_local(moment("2026-09-17T09:20Z")), "Thu 17 Sep 05:20 -04");
}

proptest! {
    #[test]
    fn what_the_clock_shows_it_reads_back(zone in 0_usize..597, minute in 29_453_760_i64..31_032_000) {
        let clock = PortClock::of(chrono_tz::TZ_VARIANTS[zone].name()).unwrap();
        let at = Moment::from_epoch_minutes(minute);
        match clock.local_at(clock.local(at)) {
            LocalTime::Once(instant) => assert_eq!(instant, at.to_utc()),
            LocalTime::Twice { first, second } => assert!(at.to_utc() == first || at.to_utc() == second),
            never @ LocalTime::Never { .. } => panic!("{at}: {never:?}"),
        }
    }

    #[test]
    fn no_text_makes_the_reader_panic(text in "[0-9]{4}-[0-9]{2}-[0-9]{2}[T ][0-9]{2}:[0-9]{2}.{0,8}|.{0,30}") {
        let _ = PortClock::of("America/New_York").unwrap().read(&text);
    }
}
