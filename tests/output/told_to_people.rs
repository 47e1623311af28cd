//! Times as people are told them: local with the zone, UTC, and rounded to the safe side.

use crate::fixture::{at, clock};
use proptest::prelude::proptest;
use snugdown::output::clock_text::Times;
use snugdown::time::clock::PortClock;
use snugdown::time::moment::{Minutes, Moment};

fn words(text: &str) -> String {
    text.replace('\u{a0}', " ")
}

#[test]
fn a_deadline_is_told_early_and_a_release_late() {
    let clock = clock();
    let times = Times::new(&clock, at(17, 6, 20));
    assert_eq!(times.told_down(at(17, 12, 4)), at(17, 12, 0));
    assert_eq!(times.told_up(at(17, 12, 1)), at(17, 12, 5));
    assert_eq!(times.told_down(at(18, 14, 29)), at(18, 14, 0));
    assert_eq!(times.told_up(at(18, 14, 1)), at(18, 14, 30));
}

#[test]
fn a_deadline_still_ahead_is_never_told_as_past() {
    let clock = clock();
    let times = Times::new(&clock, at(17, 6, 23));
    assert_eq!(times.told_down(at(17, 6, 24)), at(17, 6, 23));
    assert_eq!(times.told_down(at(17, 6, 22)), at(17, 6, 22));
}

#[test]
fn far_times_are_rounded_on_the_local_clock() {
    let kathmandu = PortClock::of("Asia/Kathmandu").unwrap();
    let times = Times::new(&kathmandu, at(1, 0, 0));
    let noon = Moment::at_or_before(kathmandu.read("2026-09-17 12:10").unwrap());
    assert_eq!(words(&times.local_day(times.told_down(noon))), "Thu 17 Sep 12:00");
    assert_eq!(times.zone(noon), "UTC+5:45");
}

#[test]
fn utc_names_its_day_where_it_is_not_the_local_one() {
    let clock = clock();
    let times = Times::new(&clock, at(17, 6, 20));
    assert_eq!(words(&times.both(at(17, 23, 0))), "Thu 23:00 (Fri 02:00Z)");
    assert_eq!(words(&times.full(at(17, 6, 20))), "Thu 17 Sep 2026 06:20 UTC-3 (09:20Z)");
}

#[test]
fn when_clocks_are_changed_the_later_time_names_its_zone() {
    let miami = PortClock::of("America/New_York").unwrap();
    let read = |text| Moment::at_or_before(miami.read(text).unwrap());
    let times = Times::new(&miami, read("2026-10-31 20:00"));
    assert_eq!(words(&times.local_day(read("2026-11-01 08:00"))), "Sun 08:00 EST, UTC-5");
    assert!(!times.is_same_day(read("2026-11-01 00:30"), read("2026-11-01 08:00")));
}

proptest! {
    #[test]
    fn the_start_told_is_never_after_the_latest_start_told(start in 0_i64..4000, spare in 0_i64..100) {
        let clock = clock();
        let now = at(17, 6, 20);
        let times = Times::new(&clock, now);
        let start = now + Minutes::new(start);
        let latest = start + Minutes::new(spare);
        let (told, told_latest) = (times.told_start(start, Some(latest)), times.told_latest(start, latest));
        assert!(start <= told && told <= told_latest && told_latest <= latest);
    }

    #[test]
    fn rounding_errs_to_the_safe_side(minutes in -3000_i64..6000) {
        let clock = clock();
        let times = Times::new(&clock, at(17, 6, 20));
        let exact = at(17, 6, 20) + Minutes::new(minutes);
        assert!(times.told_down(exact) <= exact && exact <= times.told_up(exact));
    }
}
