//! Warnings of the joint typhoon warning centre and advisories of RSMC Tokyo: what was read off them by eye, and their
//! traps.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use snugdown::advisory::choice::{Choice, parse_cycle};
use snugdown::advisory::forecast::{Advisory, Ending, Motion, Quadrants, Reach};
use snugdown::advisory::read::{Reading, read_chosen, read_forecast};
use snugdown::finding::fault::Severity;
use snugdown::units::wind::Averaging;
use std::fs;

fn krovanh() -> String {
    fs::read_to_string("tests/data/joint-warning/wp222026.warning.005.txt").unwrap()
}

fn dujuan() -> String {
    fs::read_to_string("tests/data/joint-warning/wp242026.warning.022.txt").unwrap()
}

/// An invented advisory in the layout of RSMC Tokyo: figures and storm are ours, the layout that of the centre's notes on
/// its tropical cyclone information. No text of the centre is kept here, as its terms are its own.
const TOKYO: &str = "\
WTPQ50 RJTD 301800
RSMC TROPICAL CYCLONE ADVISORY
NAME  TY 2611 ODA (2611)
ANALYSIS
PSTN  301800UTC 24.6N 131.2E GOOD
MOVE  NNW 11KT
PRES  950HPA
MXWD  080KT
GUST  115KT
50KT  110NM EAST 80NM WEST
30KT  300NM NORTHEAST 240NM SOUTHWEST
FORECAST
12HF  310600UTC 26.5N 130.4E 30NM 70%
MOVE  NNW 10KT
PRES  945HPA
MXWD  085KT
GUST  120KT
24HF  311800UTC 28.4N 129.9E 45NM 70%
MOVE  N SLOWLY
PRES  950HPA
MXWD  080KT
GUST  115KT
48HF  011800UTC 31.9N 131.0E 80NM 70%
MOVE  NNE 10KT
PRES  970HPA
MXWD  065KT
GUST  095KT
72HF  021800UTC 36.5N 136.0E 130NM 70%
MOVE  NE 15KT
PRES  990HPA
MXWD  045KT
GUST  065KT
96HF  031800UTC 40.0N 143.0E 180NM 70% TROPICAL DEPRESSION=
";

fn august() -> Choice {
    Choice { cycle: parse_cycle("2026083018"), ..Choice::default() }
}

fn swap(text: &str, old: &str, new: &str) -> String {
    assert!(text.contains(old), "{old} is not in the text");
    text.replacen(old, new, 1)
}

fn whole(reading: Reading) -> Advisory {
    reading.advisory.unwrap_or_else(|| panic!("{:?}", reading.findings))
}

fn codes(reading: &Reading) -> Vec<&'static str> {
    reading.findings.iter().map(|finding| finding.code).collect()
}

fn miles(reach: Reach) -> [f64; 4] {
    let Reach::Given(quadrants) = reach else { panic!("not given") };
    quadrants.clockwise().map(|miles| miles.get())
}

fn assert_same(found: [f64; 4], expected: [f64; 4]) {
    assert!(found.iter().zip(expected).all(|(a, b)| (a - b).abs() < 1e-9), "{found:?} for {expected:?}");
}

#[test]
fn a_joint_warning_is_read_as_it_stands() {
    // All figures read off by eye.
    let reading = read_forecast("w", krovanh().as_bytes());
    assert_eq!(codes(&reading), [""; 0]);
    let advisory = whole(reading);
    assert_eq!(advisory.storm.id.as_deref(), Some("WP222026"));
    assert_eq!((advisory.storm.name.as_str(), advisory.storm.class.as_str()), ("KROVANH", "TROPICAL STORM"));
    assert_eq!((advisory.number, advisory.is_corrected, advisory.is_last), (Some(5), false, false));
    assert_eq!(advisory.issuer, "JOINT TYPHOON WARNING CENTER");
    assert_eq!(advisory.base.to_rfc3339(), "2026-09-02T06:00:00+00:00");
    assert_eq!(advisory.issued.to_rfc3339(), "2026-09-02T09:00:00+00:00");
    assert_eq!(advisory.next_due.unwrap().to_rfc3339(), "2026-09-02T15:00:00+00:00");
    assert_eq!(advisory.averaging, Averaging::Minute1);
    assert!((advisory.accuracy.unwrap().get() - 30.0).abs() < 1e-9);
    assert!((advisory.pressure.unwrap().get() - 994.0).abs() < 1e-9);
    let Some(Motion::Towards(bearing, speed)) = advisory.motion else { panic!("no motion") };
    assert!((bearing.get() - 310.0).abs() < 1e-9 && (speed.get() - 6.0).abs() < 1e-9);
    let leads: Vec<i64> = advisory.points.iter().map(|p| (p.valid - advisory.base).num_hours()).collect();
    assert_eq!(leads, [0, 12, 24, 36, 48, 60, 72, 96, 120]);
    assert_same(miles(advisory.points[0].radii.gale), [120.0, 90.0, 80.0, 100.0]);
    let last = advisory.points.last().unwrap();
    assert!(
        (last.position.latitude() - 26.0).abs() < 1e-9 && (last.position.longitude() - 130.2).abs() < 1e-9
    );
    assert_same(miles(last.radii.gale), [190.0, 80.0, 80.0, 150.0]);
    assert!((last.max_wind.get() - 35.0).abs() < 1e-9 && (last.gust.unwrap().get() - 45.0).abs() < 1e-9);
    assert!(advisory.points.iter().all(|point| point.radii.storm == Reach::Given(Quadrants::NONE)));
}

#[test]
fn three_sets_of_radii_and_what_becomes_of_the_storm_are_read() {
    let reading = read_forecast("w", dujuan().as_bytes());
    let advisory = whole(reading);
    assert_eq!(advisory.storm.id.as_deref(), Some("WP242026"));
    assert_eq!(advisory.points.len(), 6);
    let point = &advisory.points[1];
    assert_same(miles(point.radii.hurricane), [20.0, 30.0, 20.0, 0.0]);
    assert_same(miles(point.radii.storm), [50.0, 50.0, 40.0, 40.0]);
    assert_same(miles(point.radii.gale), [170.0, 170.0, 160.0, 150.0]);
    let said: Vec<&str> = advisory.points.iter().map(|point| point.qualifier.as_str()).collect();
    assert_eq!(said, ["", "", "", "", "BECOMING EXTRATROPICAL", "EXTRATROPICAL"]);
    // A storm that turns extratropical still blows: its gales stay in the forecast.
    assert_same(miles(advisory.points[5].radii.gale), [50.0, 120.0, 180.0, 110.0]);
}

#[test]
fn a_warning_without_its_month_is_refused_unless_its_base_time_is_chosen() {
    let text = swap(&krovanh(), " 02SEP26.", "");
    assert_eq!(codes(&read_forecast("w", text.as_bytes())), ["advisory-issue-time"]);
    let chosen = |cycle: &str| Choice { cycle: parse_cycle(cycle), ..Choice::default() };
    let advisory = whole(read_chosen("w", text.as_bytes(), &chosen("2026090206")));
    assert_eq!(advisory.base.to_rfc3339(), "2026-09-02T06:00:00+00:00");
    assert_eq!(codes(&read_chosen("w", text.as_bytes(), &chosen("2026090306"))), ["advisory-issue-time"]);
    // A date of another week is of another text.
    let text = swap(&krovanh(), "02SEP26", "22SEP26");
    assert_eq!(codes(&read_forecast("w", text.as_bytes())), ["advisory-issue-time"]);
}

#[test]
fn the_turn_of_a_year_is_read_right() {
    let mut text = krovanh().replace("02SEP26", "31DEC26").replace("0209", "3109").replace("0206", "3106");
    for (old, new) in [
        ("021800Z --- 24", "311800Z --- 24"),
        ("030600Z --- 26", "010600Z --- 26"),
        ("031800Z --- 28", "011800Z --- 28"),
        ("040600Z --- 28", "020600Z --- 28"),
        ("041800Z --- 28", "021800Z --- 28"),
        ("050600Z --- 27", "030600Z --- 27"),
        ("060600Z --- 26", "040600Z --- 26"),
        ("070600Z --- 26", "050600Z --- 26"),
    ] {
        text = swap(&text, old, new);
    }
    let advisory = whole(read_forecast("w", text.as_bytes()));
    assert_eq!(advisory.last_valid().to_rfc3339(), "2027-01-05T06:00:00+00:00");
    assert_eq!(advisory.storm.id.as_deref(), Some("WP222026"));
}

#[test]
fn radii_of_35_50_and_100_kt_are_never_taken_for_34_and_64() {
    let text = dujuan()
        .replace("RADIUS OF 034 KT", "RADIUS OF 035 KT")
        .replace("RADIUS OF 064 KT", "RADIUS OF 100 KT");
    let reading = read_forecast("w", text.as_bytes());
    assert!(codes(&reading).contains(&"advisory-radius-speed"));
    assert!(codes(&reading).contains(&"advisory-reach-missing"));
    let advisory = whole(reading);
    assert!(advisory.points.iter().all(|point| point.radii.gale == Reach::NotGiven));
    assert_eq!(advisory.points[1].radii.hurricane, Reach::NotGiven);
    assert_same(miles(advisory.points[1].radii.storm), [50.0, 50.0, 40.0, 40.0]);
}

#[test]
fn circles_and_semicircles_become_quadrants() {
    let lines = "120 NM NORTHEAST QUADRANT\n                            090 NM SOUTHEAST QUADRANT\n                            \
                 080 NM SOUTHWEST QUADRANT\n                            100 NM NORTHWEST QUADRANT";
    let gale = |words: &str| {
        let text = swap(&krovanh(), lines, words);
        miles(whole(read_forecast("w", text.as_bytes())).points[0].radii.gale)
    };
    assert_same(gale("090 NM"), [90.0; 4]);
    assert_same(
        gale("140 NM EAST SEMICIRCLE OVER WATER\n 110 NM ELSEWHERE OVER WATER"),
        [140.0, 140.0, 110.0, 110.0],
    );
    assert_same(gale("140 NM NORTHEAST SEMICIRCLE\n 110 NM ELSEWHERE"), [140.0, 140.0, 110.0, 140.0]);
    let three = swap(&krovanh(), "                            080 NM SOUTHWEST QUADRANT\n", "");
    assert!(codes(&read_forecast("w", three.as_bytes())).contains(&"advisory-radii"));
}

#[test]
fn two_storms_in_one_message_are_told_apart_by_choice() {
    let second = dujuan();
    let second = &second[second.find("1. TROPICAL STORM").unwrap()..];
    let both =
        swap(&krovanh(), "REMARKS:", &format!("{}REMARKS:", &second[..second.find("REMARKS:").unwrap()]));
    let reading = read_forecast("w", both.as_bytes());
    assert_eq!(codes(&reading), ["advisory-choose-storm"]);
    assert!(reading.findings[0].found.ends_with("the message holds 2 storms: 22W KROVANH, 24W DUJUAN"));
    let storm = |wanted: &str| Choice { storm: Some(wanted.to_owned()), ..Choice::default() };
    // With remarks of its own each is read; the message above has the first one's date, which is not near the second's.
    let apart = format!("{}{}", krovanh(), dujuan());
    for (wanted, id, next) in [
        ("22W", "WP222026", "2026-09-02T15:00:00+00:00"),
        ("WP242026", "WP242026", "2026-09-21T03:00:00+00:00"),
        ("dujuan", "WP242026", "2026-09-21T03:00:00+00:00"),
    ] {
        let advisory = whole(read_chosen("w", apart.as_bytes(), &storm(wanted)));
        assert_eq!(advisory.storm.id.as_deref(), Some(id), "{wanted}");
        assert_eq!(advisory.next_due.unwrap().to_rfc3339(), next, "{wanted}");
    }
    assert_eq!(codes(&read_chosen("w", both.as_bytes(), &storm("24W"))), ["advisory-issue-time"]);
    assert!(read_chosen("w", both.as_bytes(), &storm("22W")).advisory.is_some());
    assert_eq!(codes(&read_chosen("w", both.as_bytes(), &storm("25W"))), ["advisory-choose-storm"]);
}

#[test]
fn a_storm_that_dissipates_ends_and_a_final_warning_is_the_last() {
    let text =
        swap(&dujuan(), "   EXTRATROPICAL\n", "   DISSIPATED AS A SIGNIFICANT TROPICAL CYCLONE OVER WATER\n");
    let text = swap(
        &text,
        "NEXT WARNINGS AT 210300Z, 210900Z, 211500Z AND 212100Z.",
        "THIS IS THE FINAL WARNING ON THIS SYSTEM.",
    );
    let advisory = whole(read_forecast("w", text.as_bytes()));
    assert_eq!(advisory.ends, Some(Ending::Dissipated(advisory.last_valid())));
    assert!(advisory.is_last && advisory.next_due.is_none());
}

#[test]
fn a_cut_or_slipped_warning_is_refused() {
    let text = dujuan();
    let end = text.find("NEXT WARNINGS AT").unwrap() + "NEXT WARNINGS AT".len();
    for length in (0..end).filter(|length| text.is_char_boundary(*length)) {
        assert!(
            read_forecast("cut", &text.as_bytes()[..length]).advisory.is_none(),
            "cut after {length} bytes"
        );
    }
    let cases = [
        ("201800Z --- NEAR 31.3N 137.9E", "201800Z --- NEAR 31.3N 137.9", "advisory-centre"),
        ("211800Z --- 36.0N", "211800Z --- 36.x", "advisory-position"),
        ("211800Z --- 36.0N", "221800Z --- 36.0N", "advisory-valid-time"),
        ("MAX SUSTAINED WINDS - 070 KT", "MAX SUSTAINED WINDS - 07O KT", "advisory-wind"),
        ("24 HRS, VALID AT:", "24 HR, VALID AT", "advisory-unread-figures"),
        ("24W (DUJUAN) WARNING NR 022\n   01", "24Y (DUJUAN) WARNING NR 022\n   01", "advisory-title"),
        ("REPEAT POSIT: 31.3N", "REPEAT POSIT: 31.8N", "advisory-repeat-differs"),
    ];
    for (old, new, code) in cases {
        let reading = read_forecast("w", swap(&text, old, new).as_bytes());
        assert!(codes(&reading).contains(&code), "{code}: {:?}", reading.findings);
        assert_eq!(reading.advisory.is_some(), code == "advisory-repeat-differs", "{code}");
    }
}

#[test]
fn a_tokyo_advisory_is_read_with_its_ten_minute_winds_and_its_circles() {
    let reading = read_chosen("t", TOKYO.as_bytes(), &august());
    let errors: Vec<_> = reading.findings.iter().filter(|f| f.severity == Severity::Error).collect();
    assert!(errors.is_empty(), "{errors:?}");
    let advisory = whole(reading);
    assert_eq!((advisory.storm.id.as_deref(), advisory.storm.name.as_str()), (Some("T2611"), "ODA"));
    assert_eq!((advisory.storm.class.as_str(), advisory.issuer.as_str()), ("TY", "RSMC TOKYO"));
    assert_eq!(advisory.averaging, Averaging::Minute10);
    assert_eq!(
        (advisory.issued, advisory.base),
        (parse_cycle("2026083018").unwrap(), parse_cycle("2026083018").unwrap())
    );
    assert_eq!(advisory.last_valid().to_rfc3339(), "2026-09-03T18:00:00+00:00");
    let Some(Motion::Towards(bearing, speed)) = advisory.motion else { panic!("no motion") };
    assert!((bearing.get() - 337.5).abs() < 1e-9 && (speed.get() - 11.0).abs() < 1e-9);
    let circles: Vec<(i64, f64)> =
        advisory.circles.iter().map(|c| ((c.valid - advisory.base).num_hours(), c.radius.get())).collect();
    assert_eq!(circles, [(12, 30.0), (24, 45.0), (48, 80.0), (72, 130.0), (96, 180.0)]);
    // sigma = r70 / sqrt(-2 ln 0.30) = r70 / 1.5518
    let own = advisory.own_track_deviations();
    assert!((own[2].lead_h - 48.0).abs() < 1e-9 && (own[2].deviation_nmi - 80.0 / 1.5518).abs() < 0.01);
    let last = advisory.points.last().unwrap();
    assert_eq!(last.qualifier, "TROPICAL DEPRESSION");
    assert!((last.max_wind.get() - 30.0).abs() < 1e-9);
    assert!(advisory.assumed.iter().any(|one| one.what.contains("tropical depression")));
}

#[test]
fn no_radii_are_invented_for_a_tokyo_advisory() {
    let reading = read_chosen("t", TOKYO.as_bytes(), &august());
    assert!(codes(&reading).contains(&"advisory-radius-speed"), "30 kt is not 34");
    assert!(codes(&reading).contains(&"advisory-reach-missing"));
    let advisory = whole(reading);
    for point in advisory.points.iter().filter(|point| point.max_wind.get() >= 34.0) {
        assert_eq!(point.radii.gale, Reach::NotGiven);
    }
    assert_same(miles(advisory.points[0].radii.storm), [110.0, 110.0, 80.0, 80.0]);
    assert!(
        advisory.points[1..4]
            .iter()
            .all(|point| point.max_wind.get() < 50.0 || point.radii.storm == Reach::NotGiven)
    );
    assert_eq!(advisory.points[0].radii.hurricane, Reach::NotGiven);
}

#[test]
fn the_month_of_a_tokyo_advisory_is_that_in_which_it_was_taken() {
    let taken = |text: &str| Choice::taken_at(parse_cycle(text).unwrap());
    let base = |choice: &Choice| whole(read_chosen("t", TOKYO.as_bytes(), choice)).base.to_rfc3339();
    assert_eq!(base(&taken("2026083019")), "2026-08-30T18:00:00+00:00");
    assert_eq!(base(&taken("2026090206")), "2026-08-30T18:00:00+00:00");
    // Taken in early March, when there was no 30 February: the last day of that number is meant, and its age tells.
    assert_eq!(base(&taken("2026030212")), "2026-01-30T18:00:00+00:00");
    let codes_of = |choice: &Choice| codes(&read_chosen("t", TOKYO.as_bytes(), choice));
    assert!(codes_of(&Choice::default()).contains(&"advisory-issue-time"));
    assert!(codes_of(&taken("2024083019")).contains(&"advisory-season"));
}

#[test]
fn a_slipped_or_cut_tokyo_advisory_is_refused() {
    let end = TOKYO.find('=').unwrap();
    for length in 0..end {
        assert!(
            read_chosen("cut", &TOKYO.as_bytes()[..length], &august()).advisory.is_none(),
            "cut after {length}"
        );
    }
    let cases = [
        ("24.6N 131.2E GOOD", "24.6N 131.2 GOOD", "advisory-centre"),
        ("28.4N 129.9E", "28.4 129.9E", "advisory-position"),
        ("48HF  011800UTC", "48HF  021800UTC", "advisory-valid-time"),
        ("MXWD  085KT", "MXWD  08SKT", "advisory-wind"),
        ("MXWD  085KT\n", "", "advisory-wind"),
        ("110NM EAST 80NM WEST", "110NM EAST", "advisory-radii"),
        ("NAME  TY 2611 ODA (2611)", "NAME", "advisory-title"),
        ("48HF", "48H", "advisory-unread-figures"),
        ("FORECAST\n", "FORECAST\nANALYSIS\nPSTN 301800UTC 24.6N 131.2E GOOD\n", "advisory-two-in-one"),
    ];
    for (old, new, code) in cases {
        let reading = read_chosen("t", swap(TOKYO, old, new).as_bytes(), &august());
        assert!(codes(&reading).contains(&code), "{code}: {:?}", reading.findings);
        assert!(reading.advisory.is_none(), "{code}");
    }
    let reading = read_chosen("t", swap(TOKYO, "45NM 70%", "45NM").as_bytes(), &august());
    assert!(codes(&reading).contains(&"advisory-no-circle") || reading.advisory.is_none());
}
