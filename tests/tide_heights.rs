//! The tide: published arguments, a reference library, tables, windows and the exercise port's own waters.

#![expect(clippy::unwrap_used, reason = "a helper of these tests fails by panicking, as a test does")]

use approx::assert_abs_diff_eq;
use chrono::{DateTime, NaiveDateTime, Utc};
use proptest::prelude::proptest;
use snugdown::tide::astronomy::{Astronomy, NodeTrig};
use snugdown::tide::constituent::Constituent;
use snugdown::tide::error::TideError;
use snugdown::tide::harmonic::{HarmonicTide, Term};
use snugdown::tide::heights::Tide;
use snugdown::tide::simple::{SimpleTerm, SimpleTide};
use snugdown::tide::table::{TideTable, Water, WaterKind};
use snugdown::tide::under_keel::{UnderKeelRule, needed_level};
use snugdown::tide::window::{LevelCurve, windows_above};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::length::Metres;

fn utc(text: &str) -> DateTime<Utc> {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%dT%H:%MZ").unwrap().and_utc()
}

fn moment(text: &str) -> Moment {
    Moment::at_or_before(utc(text))
}

fn m(metres: f64) -> Metres {
    Metres::new(metres).unwrap()
}

fn term(name: &str, amplitude: f64, lag: f64) -> Term {
    Term { constituent: Constituent::named(name).unwrap(), amplitude: m(amplitude), lag }
}

fn five_terms() -> HarmonicTide {
    let terms = [
        ("M2", 0.5, 120.0),
        ("S2", 0.15, 140.0),
        ("N2", 0.1, 100.0),
        ("K1", 0.2, 200.0),
        ("O1", 0.15, 190.0),
    ];
    HarmonicTide::new(Metres::ZERO, terms.map(|(name, h, g)| term(name, h, g)).to_vec()).unwrap()
}

/// Mean level 1.85 m; high waters of M2 and S2 on Wednesday 16 September 2026 at 04:10 and 02:00, three hours behind UTC.
fn exercise_port() -> Tide {
    let simple =
        |constituent, amplitude, at| SimpleTerm { constituent, amplitude: m(amplitude), high_water: utc(at) };
    let terms = vec![
        simple(Constituent::M2, 0.85, "2026-09-16T07:10Z"),
        simple(Constituent::S2, 0.25, "2026-09-16T05:00Z"),
    ];
    Tide::Simple(SimpleTide::new(m(1.85), terms).unwrap())
}

fn table(rows: &[(WaterKind, &str, f64)]) -> Result<TideTable, TideError> {
    TideTable::new(
        rows.iter().map(|(kind, at, level)| Water { kind: *kind, at: utc(at), level: m(*level) }).collect(),
    )
}

const LOW: (WaterKind, &str, f64) = (WaterKind::Low, "2026-09-17T01:00Z", 0.4);
const HIGH: (WaterKind, &str, f64) = (WaterKind::High, "2026-09-17T07:00Z", 2.8);

#[test]
fn speeds_are_those_of_the_iho_list() {
    let published = [
        ("M2", 28.984_104_2),
        ("S2", 30.0),
        ("N2", 28.439_729_5),
        ("K2", 30.082_137_3),
        ("K1", 15.041_068_6),
        ("O1", 13.943_035_6),
        ("P1", 14.958_931_4),
        ("Q1", 13.398_660_9),
        ("M4", 57.968_208_5),
        ("MS4", 58.984_104_2),
        ("MN4", 57.423_833_8),
        ("M6", 86.952_312_7),
        ("NU2", 28.512_583_2),
        ("MU2", 27.968_208_5),
        ("2N2", 27.895_354_8),
        ("L2", 29.528_479_0),
        ("T2", 29.958_933_3),
        ("S1", 15.0),
        ("MM", 0.544_374_7),
        ("MF", 1.098_033_0),
        ("MSF", 1.015_895_8),
        ("SSA", 0.082_137_3),
        ("SA", 0.041_068_6),
    ];
    assert_eq!(published.len(), Constituent::ALL.len());
    for (name, speed) in published {
        assert_abs_diff_eq!(Constituent::named(name).unwrap().speed(), speed, epsilon = 2e-7);
    }
}

#[test]
fn arguments_and_node_factors_at_an_instant_are_the_published_ones() {
    // utide 0.4.0 and a second library agree on these within 0.03 degrees; f and u are Schureman's.
    let astronomy = Astronomy::at(utc("2024-09-22T00:00Z"));
    let arguments = [
        ("M2", 267.18),
        ("S2", 0.0),
        ("N2", 228.80),
        ("K1", 271.35),
        ("O1", 355.83),
        ("P1", 88.65),
        ("L2", 125.562),
        ("NU2", 212.742),
        ("MU2", 174.360),
        ("T2", 102.011),
        ("MM", 38.382),
        ("MF", 95.529),
        ("K2", 2.709),
    ];
    for (name, degrees) in arguments {
        let found = Constituent::named(name).unwrap().argument(&astronomy).rem_euclid(360.0);
        assert_abs_diff_eq!(found, degrees, epsilon = 0.03);
    }
    let node = NodeTrig::of(&astronomy);
    for (name, f, u) in
        [("M2", 0.9636, -0.26), ("K1", 1.1122, -0.92), ("O1", 1.1817, 1.04), ("L2", 0.6167, -9.996)]
    {
        let (factor, angle) = node.factor_angle(Constituent::named(name).unwrap().nodal());
        assert_abs_diff_eq!(factor, f, epsilon = 0.005);
        assert_abs_diff_eq!(angle, u, epsilon = 0.3);
    }
}

#[test]
fn check_heights_of_five_constituents_hold() {
    let heights = [(0, -0.677), (3, -0.519), (6, 0.266), (9, 0.182), (12, -0.400), (18, 0.738), (21, 0.561)];
    for (hour, height) in heights {
        let at = moment("2024-09-22T00:00Z") + Minutes::hours(hour);
        assert_abs_diff_eq!(five_terms().height_at(at.to_utc()).get(), height, epsilon = 0.001);
    }
}

#[test]
fn hourly_heights_agree_with_the_reference_library() {
    let lines: Vec<Vec<&str>> =
        include_str!("data/utide/heights.txt").lines().map(|line| line.split(' ').collect()).collect();
    for (set, tolerance) in [("five", 0.010), ("many", 0.016)] {
        let of_set =
            |kind: &str| lines.iter().filter(|w| w[0] == kind && w[1] == set).cloned().collect::<Vec<_>>();
        let terms: Vec<Term> = of_set("constants")
            .iter()
            .map(|w| term(w[2], w[3].parse().unwrap(), w[4].parse().unwrap()))
            .collect();
        let tide = HarmonicTide::new(Metres::ZERO, terms).unwrap();
        let heights = of_set("height");
        assert_eq!(heights.len(), 216);
        for words in heights {
            let expected: f64 = words[3].parse().unwrap();
            assert_abs_diff_eq!(tide.height_at(utc(words[2])).get(), expected, epsilon = tolerance);
        }
    }
}

#[test]
fn the_exercise_port_has_its_high_waters() {
    let curve = LevelCurve::of(&exercise_port(), moment("2026-09-17T03:00Z"), moment("2026-09-19T03:00Z"));
    let highs: Vec<_> = curve.turns().into_iter().filter(|turn| turn.kind == WaterKind::High).collect();
    let expected = [
        ("2026-09-17T07:24Z", 2.74),
        ("2026-09-17T19:48Z", 2.68),
        ("2026-09-18T08:15Z", 2.63),
        ("2026-09-18T20:42Z", 2.58),
    ];
    assert_eq!(highs.len(), expected.len());
    for (turn, (at, level)) in highs.iter().zip(expected) {
        assert!((turn.at - moment(at)).get().abs() <= 2, "{} for {at}", turn.at);
        assert_abs_diff_eq!(turn.level.get(), level, epsilon = 0.01);
    }
    assert_eq!(curve.turns().len(), 8);
}

#[test]
fn a_table_follows_a_cosine_and_knows_nothing_outside() {
    let tide = table(&[LOW, HIGH, (WaterKind::Low, "2026-09-17T13:00Z", 0.6)]).unwrap();
    let at = |text| tide.height_at(utc(text)).map(|level| (level.get() * 1000.0).round() as i64);
    assert_eq!(at("2026-09-17T01:00Z"), Some(400));
    assert_eq!(at("2026-09-17T04:00Z"), Some(1600));
    assert_eq!(at("2026-09-17T07:00Z"), Some(2800));
    assert_eq!(at("2026-09-17T11:00Z"), Some(1150)); // 1.7 + 1.1 cos 120 degrees
    assert_eq!(at("2026-09-17T13:00Z"), Some(600));
    assert_eq!(at("2026-09-17T00:59Z"), None);
    assert_eq!(at("2026-09-17T13:01Z"), None);
}

#[test]
fn a_table_with_rows_missing_or_muddled_is_refused() {
    assert_eq!(table(&[LOW]), Err(TideError::ShortTable));
    assert_eq!(table(&[HIGH, LOW]), Err(TideError::Order(utc(LOW.1))));
    let later = "2026-09-17T19:30Z";
    let same = Err(TideError::SameKind { at: utc(later), kind: "high" });
    assert_eq!(table(&[LOW, HIGH, (WaterKind::High, later, 2.7)]), same);
    assert_eq!(
        table(&[LOW, HIGH, (WaterKind::Low, later, 2.8)]),
        Err(TideError::HighNotAboveLow(utc(HIGH.1)))
    );
    let next_day = "2026-09-18T01:36Z";
    let gap = Err(TideError::Gap { at: utc(next_day), length: Minutes::new(1116) });
    assert_eq!(table(&[LOW, HIGH, (WaterKind::Low, next_day, 0.5)]), gap);
}

#[test]
fn tides_that_cannot_be_meant_are_refused() {
    let tide = |terms| HarmonicTide::new(m(1.0), terms).unwrap_err();
    assert_eq!(tide(vec![]), TideError::NoConstituent);
    assert_eq!(tide(vec![term("M2", 1.0, 0.0), term("m2", 1.0, 0.0)]), TideError::Twice("M2"));
    assert_eq!(tide(vec![term("S2", -0.1, 0.0)]), TideError::Amplitude { name: "S2", metres: -0.1 });
    assert!(matches!(tide(vec![term("S2", 0.1, f64::NAN)]), TideError::Lag { name: "S2", .. }));
    assert!(matches!(tide(vec![term("S2", 0.1, 361.0)]), TideError::Lag { name: "S2", .. }));
    assert!(matches!(Constituent::named("M99"), Err(TideError::UnknownConstituent { .. })));
    assert_eq!(Constituent::named(" 2n2 "), Ok(Constituent::TwoN2));
}

#[test]
fn an_unknown_level_is_not_enough_water() {
    let tide = Tide::Table(table(&[LOW, HIGH]).unwrap());
    let windows = windows_above(&tide, m(-5.0), moment("2026-09-16T00:00Z"), moment("2026-09-18T00:00Z"));
    let [span] = windows.spans() else { panic!("{windows:?}") };
    assert_eq!((span.start(), span.end()), (moment("2026-09-17T01:00Z"), moment("2026-09-17T07:00Z")));
}

#[test]
fn a_deeper_ship_has_a_shorter_window_and_a_very_deep_one_none() {
    let curve = LevelCurve::of(&exercise_port(), moment("2026-09-17T03:00Z"), moment("2026-09-17T15:00Z"));
    let rule = UnderKeelRule::new(0.10, m(1.0)).unwrap();
    let length = |draught| -> i64 {
        let needed = needed_level(m(draught), m(12.5), rule, m(0.3));
        curve.windows_above(needed).spans().iter().map(|span| span.length().get()).sum()
    };
    assert!(length(12.9) > length(13.0) && length(13.0) > 0, "{} {}", length(12.9), length(13.0));
    assert_eq!((length(9.0), length(14.0)), (720, 0));
}

#[test]
fn the_clearance_is_the_greater_of_share_and_least() {
    let rule = UnderKeelRule::new(0.10, m(1.0)).unwrap();
    assert_abs_diff_eq!(rule.clearance(m(8.0)).get(), 1.0, epsilon = 1e-12);
    assert_abs_diff_eq!(rule.clearance(m(15.0)).get(), 1.5, epsilon = 1e-12);
    assert!(UnderKeelRule::new(1.5, m(1.0)).is_err() && UnderKeelRule::new(0.1, m(-1.0)).is_err());
}

proptest! {
    #[test]
    fn a_minute_is_in_a_window_only_if_the_water_suffices_at_every_second_of_it(
        needed in 0.7..3.0_f64, start in 29_453_760_i64..31_032_000, length in 0_i64..1500
    ) {
        let (tide, from) = (exercise_port(), Moment::from_epoch_minutes(start));
        let windows = windows_above(&tide, m(needed), from, from + Minutes::new(length));
        for minute in -1..=length {
            let at = from + Minutes::new(minute);
            let suffices = |second: i64| {
                let instant = at.to_utc() + chrono::TimeDelta::seconds(second);
                tide.height_at(instant).is_some_and(|level| level.get() >= needed)
            };
            let is_in_time = (0..length).contains(&minute);
            assert_eq!(windows.contains(at), is_in_time && [0, 20, 40, 60].into_iter().all(suffices), "{at}");
        }
    }
}
