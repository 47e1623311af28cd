//! Decks and best tracks: what was read off them by eye, what has to be chosen, and drills that come true.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use snugdown::advisory::best_track::DRILL;
use snugdown::advisory::choice::{Choice, parse_cycle};
use snugdown::advisory::forecast::{Advisory, Ending, ForecastPoint, Motion, Quadrants, Reach};
use snugdown::advisory::read::{Reading, read_chosen};
use snugdown::finding::fault::Severity;
use std::fs;

fn florence() -> String {
    fs::read_to_string("tests/data/deck/al062018.a.dat").unwrap()
}

fn gustav() -> String {
    fs::read_to_string("tests/data/best-track/al072008.b.dat").unwrap()
}

fn hurdat() -> String {
    fs::read_to_string("tests/data/best-track/atlantic.hurdat2.txt").unwrap()
}

fn cycle(text: &str) -> Choice {
    Choice { cycle: parse_cycle(text), ..Choice::default() }
}

fn read(text: &str, choice: &Choice) -> Reading {
    read_chosen("deck.dat", text.as_bytes(), choice)
}

fn advisory(text: &str, choice: &Choice) -> Advisory {
    let reading = read(text, choice);
    reading.advisory.unwrap_or_else(|| panic!("{:?}", reading.findings))
}

/// The one error of a text that is refused.
fn refused(text: &str, choice: &Choice) -> (String, String) {
    let reading = read(text, choice);
    assert!(reading.advisory.is_none());
    let errors: Vec<_> = reading.findings.iter().filter(|f| f.severity == Severity::Error).collect();
    assert_eq!(errors.len(), 1, "{errors:?}");
    (errors[0].code.to_owned(), errors[0].found.clone())
}

fn at(advisory: &Advisory, time: &str) -> ForecastPoint {
    let found = advisory.points.iter().find(|point| point.valid.format("%Y%m%d%H").to_string() == time);
    found.unwrap_or_else(|| panic!("nothing at {time}")).clone()
}

fn miles(reach: Reach) -> Option<[f64; 4]> {
    match reach {
        Reach::Given(quadrants) => Some(quadrants.clockwise().map(|miles| miles.get())),
        Reach::NotGiven => None,
    }
}

fn assert_near(found: [f64; 4], expected: [f64; 4]) {
    assert!(found.iter().zip(expected).all(|(a, b)| (a - b).abs() < 1e-9), "{found:?} for {expected:?}");
}

#[test]
fn the_offices_forecast_of_a_deck_is_read_as_it_stands() {
    // Read off by eye: AL, 06, 2018090300, 03, OFCL.
    let advisory = advisory(&florence(), &cycle("2018090300"));
    assert_eq!(advisory.storm.id.as_deref(), Some("AL062018"));
    assert_eq!((advisory.storm.name.as_str(), advisory.storm.class.as_str()), ("FLORENCE", "TS"));
    assert_eq!(advisory.base.to_rfc3339(), "2018-09-03T00:00:00+00:00");
    // A routine advisory goes out three hours after its base time; that is an assumption, and told.
    assert_eq!(advisory.issued.to_rfc3339(), "2018-09-03T03:00:00+00:00");
    assert!(advisory.assumed[0].what.starts_with("issue time"));
    let leads: Vec<i64> =
        advisory.points.iter().map(|point| (point.valid - advisory.base).num_hours()).collect();
    assert_eq!(leads, [3, 12, 24, 36, 48, 72, 96, 120, 144, 168]);
    assert!(advisory.ends.is_none() && !advisory.is_drill && advisory.next_due.is_none());
    let row = florence()
        .lines()
        .find(|row| row.starts_with("AL, 06, 2018090300, 03, OFCL,  24"))
        .unwrap()
        .to_owned();
    let fields: Vec<&str> = row.split(',').map(str::trim).collect();
    let point = at(&advisory, "2018090400");
    assert!(
        (point.position.latitude() * 10.0 - fields[6].trim_end_matches('N').parse::<f64>().unwrap()).abs()
            < 1e-9
    );
    assert!(
        (point.position.longitude() * 10.0 + fields[7].trim_end_matches('W').parse::<f64>().unwrap()).abs()
            < 1e-9
    );
    assert!((point.max_wind.get() - fields[8].parse::<f64>().unwrap()).abs() < 1e-9);
    assert!((point.gust.unwrap().get() - fields[20].parse::<f64>().unwrap()).abs() < 1e-9);
}

#[test]
fn every_row_of_the_office_is_read_and_no_zero_becomes_a_calm() {
    let text = florence();
    let speeds = ["34", "50", "64"];
    let mut zeros_beside_a_gale = 0;
    for time in ["2018083012", "2018090300", "2018090306"] {
        let advisory = advisory(&text, &cycle(time));
        for row in text.lines().filter(|row| row.contains(&format!("{time}, 03, OFCL"))) {
            let fields: Vec<&str> = row.split(',').map(str::trim).collect();
            let lead: i64 = fields[5].parse().unwrap();
            if lead == 0 {
                continue;
            }
            let point =
                advisory.points.iter().find(|p| (p.valid - advisory.base).num_hours() == lead).unwrap();
            let index = speeds.iter().position(|speed| *speed == fields[11]).unwrap();
            let (speed, reach) = point.radii.by_speed()[index];
            let written: Vec<f64> = fields[13..17].iter().map(|field| field.parse().unwrap()).collect();
            let is_zero = written.iter().all(|miles| *miles < 0.5);
            if is_zero && point.max_wind >= speed {
                // A hurricane without gales: how a deck writes "not forecast".
                assert_eq!(reach, Reach::NotGiven, "{row}");
                zeros_beside_a_gale += 1;
            } else {
                assert_eq!(miles(reach).unwrap().to_vec(), written, "{row}");
            }
        }
        // No row of 50 or 64 kt: none where the wind is weaker, not given where it is not.
        for point in &advisory.points {
            let weak = point.max_wind.get() < 50.0;
            assert!(!weak || point.radii.storm == Reach::Given(Quadrants::NONE));
        }
    }
    assert!(zeros_beside_a_gale >= 6, "{zeros_beside_a_gale}");
}

#[test]
fn the_latest_base_time_that_had_come_when_the_deck_was_taken_is_read() {
    let taken = |text: &str| Choice::taken_at(parse_cycle(text).unwrap());
    let whole = florence().lines().filter(|row| !row.contains("2018090312")).collect::<Vec<_>>().join("\n");
    assert_eq!(advisory(&whole, &Choice::default()).base, parse_cycle("2018090306").unwrap());
    assert_eq!(advisory(&florence(), &taken("2018090309")).base, parse_cycle("2018090306").unwrap());
    assert_eq!(advisory(&florence(), &taken("2018090305")).base, parse_cycle("2018090300").unwrap());
    let (code, found) = refused(&florence(), &taken("2018083011"));
    assert_eq!(code, "advisory-choose-cycle");
    assert!(found.contains("holds 4 of OFCL, from 2018083012 to 2018090312"), "{found}");
}

#[test]
fn half_a_deck_is_no_forecast() {
    // The sample's last base time is cut after the present positions.
    let (code, found) = refused(&florence(), &Choice::default());
    assert_eq!(
        (code.as_str(), found.as_str()),
        ("advisory-cut-too-short", "OFCL of 2018090312 reaches 3 h ahead")
    );
    // Cut within a row.
    let text = florence();
    let at = text.find("2018090306, 03, OFCL,  72").unwrap();
    let (code, _) = refused(&text[..at + 40], &cycle("2018090306"));
    assert_eq!(code, "advisory-deck-row");
    // Cut between two rows, two days ahead: usable, and said.
    let from = text[..at].rfind('\n').unwrap();
    let reading = read(&text[..from], &cycle("2018090306"));
    assert!(reading.findings.iter().any(|finding| finding.code == "advisory-deck-short"));
    assert!(matches!(reading.advisory.unwrap().ends, Some(Ending::CutShort(_))));
}

#[test]
fn what_a_deck_holds_is_listed_where_the_choice_is_missing() {
    let only = florence().lines().filter(|row| row.contains("CARQ")).collect::<Vec<_>>().join("\n");
    let (code, found) = refused(&only, &Choice::default());
    assert_eq!(
        (code.as_str(), found.as_str()),
        ("advisory-choose-technique", "the deck holds no forecast by OFCL; it holds CARQ")
    );
    let mixed = format!("{}{}", florence(), florence().replace("AL, 06", "AL, 07"));
    let (code, found) = refused(&mixed, &cycle("2018090300"));
    assert_eq!(code, "advisory-choose-storm");
    assert!(found.contains("mixes 2 storms: AL062018 FLORENCE, AL072018 FLORENCE"), "{found}");
    for wanted in ["AL072018", "al07", "07L"] {
        let choice = Choice { storm: Some(wanted.to_owned()), ..cycle("2018090300") };
        assert_eq!(advisory(&mixed, &choice).storm.id.as_deref(), Some("AL072018"), "{wanted}");
    }
    let (code, found) = refused(&florence(), &cycle("2018090301"));
    assert_eq!(code, "advisory-choose-cycle");
    assert!(found.contains("no forecast by OFCL has the base time 2018090301"), "{found}");
}

#[test]
fn other_techniques_are_read_by_name_and_an_aid_is_called_one() {
    let choice = |technique: &str| Choice { technique: Some(technique.to_owned()), ..cycle("2018090300") };
    let joint = florence().replace("OFCL", "JTWC").replace("AL, 06", "WP, 22");
    let advisory = advisory(&joint, &choice("jtwc"));
    assert_eq!(advisory.issuer, "JOINT TYPHOON WARNING CENTER (JTWC)");
    assert_eq!(advisory.storm.id.as_deref(), Some("WP222018"));
    let aid = read(&florence().replace("OFCL", "AVNI"), &choice("AVNI"));
    assert!(aid.findings.iter().any(|finding| finding.code == "advisory-not-official"));
    assert_eq!(aid.advisory.unwrap().issuer, "technique AVNI, no office");
    // What the techniques start from is no forecast.
    assert_eq!(refused(&florence(), &choice("CARQ")).0, "advisory-cut-too-short");
}

#[test]
fn two_forecasts_mixed_in_one_are_refused() {
    let text = florence();
    let row = text.lines().find(|row| row.contains("2018090300, 03, OFCL,  36,")).unwrap();
    let other = row.replacen("N, ", "S, ", 1);
    assert_eq!(refused(&format!("{text}{other}\n"), &cycle("2018090300")).0, "advisory-deck-differs");
    let fields: Vec<&str> = row.split(',').collect();
    let mut radii = fields.clone();
    radii[13] = "  333";
    assert_eq!(refused(&format!("{text}{}\n", radii.join(",")), &cycle("2018090300")).0, "advisory-radii");
    // The very same row twice is only that.
    assert!(read(&format!("{text}{row}\n"), &cycle("2018090300")).advisory.is_some());
}

#[test]
fn radii_of_other_winds_and_codes_are_never_taken_for_ours() {
    let text = florence();
    let gone = |finding: &str, text: &str| {
        let reading = read(text, &cycle("2018090300"));
        assert!(reading.findings.iter().any(|f| f.code == finding), "{finding}: {:?}", reading.findings);
        let advisory = reading.advisory.unwrap();
        assert!(
            advisory.points.iter().all(|p| p.max_wind.get() < 34.0 || p.radii.gale == Reach::NotGiven),
            "{finding}"
        );
    };
    gone("advisory-radius-speed", &text.replace(",  34, NEQ", ",  35, NEQ"));
    gone("advisory-radius-code", &text.replace(",  34, NEQ", ",  34, NNS"));
    // A circle, and quadrants that begin elsewhere.
    let circle = advisory(&text.replace("NEQ", "AAA"), &cycle("2018090300"));
    let turned = advisory(&text.replace("NEQ", "SEQ"), &cycle("2018090300"));
    let plain = advisory(&text, &cycle("2018090300"));
    let given = |advisory: &Advisory| miles(advisory.points[1].radii.gale).unwrap();
    let [ne, se, sw, nw] = given(&plain);
    assert_near(given(&circle), [ne; 4]);
    assert_near(given(&turned), [nw, ne, se, sw]);
}

#[test]
fn the_wrong_hemisphere_and_an_impossible_speed_are_noticed() {
    let south = florence().replace("N,  ", "S,  ");
    let reading = read(&south, &cycle("2018090300"));
    assert!(
        reading.findings.iter().any(|finding| finding.code == "advisory-hemisphere"),
        "{:?}",
        reading.findings
    );
    let east = florence().replace("03, OFCL,  24, 135N,  220W", "03, OFCL,  24, 135N,  220E");
    assert_ne!(east, florence());
    assert!(read(&east, &cycle("2018083012")).advisory.is_none());
}

#[test]
fn a_best_track_is_a_drill_that_comes_true_and_says_so() {
    let advisory = advisory(&gustav(), &cycle("2008082918"));
    assert_eq!(advisory.issuer, DRILL);
    assert!(advisory.is_drill && DRILL.starts_with("DRILL - not a forecast"));
    assert_eq!((advisory.storm.id.as_deref(), advisory.storm.name.as_str()), (Some("AL072008"), "GUSTAV"));
    assert_eq!((advisory.issued, advisory.base), (advisory.points[0].valid, advisory.points[0].valid));
    assert_eq!((advisory.last_valid() - advisory.issued).num_hours(), 120);
    assert!(matches!(advisory.motion, Some(Motion::Towards(..))));
    assert!(advisory.assumed.is_empty() && advisory.quoted_track_errors.is_none());
}

#[test]
fn a_drill_needs_its_time_and_its_storm() {
    let (code, found) = refused(&gustav(), &Choice::default());
    assert_eq!(code, "advisory-choose-cycle");
    assert!(
        found.ends_with("the file holds the best track of AL072008 from 2008082500 to 2008090512"),
        "{found}"
    );
    assert_eq!(refused(&gustav(), &cycle("2008082901")).0, "advisory-choose-cycle");
    assert_eq!(refused(&gustav(), &cycle("2008090512")).0, "advisory-no-forecast");
    let (code, found) = refused(&hurdat(), &cycle("2014070100"));
    assert_eq!(
        (code.as_str(), found.as_str()),
        ("advisory-choose-storm", "no storm is chosen; the file holds AL012014 ARTHUR, AL022015 BILL")
    );
    let other = Choice { storm: Some("AL032014".to_owned()), ..cycle("2014070100") };
    assert_eq!(refused(&hurdat(), &other).0, "advisory-choose-storm");
    let half = hurdat().lines().take(20).collect::<Vec<_>>().join("\n");
    assert_eq!(refused(&half, &cycle("2014070100")).0, "advisory-deck-row");
}

#[test]
fn a_final_best_track_is_read_with_its_landfall_and_its_blanks() {
    // Rows read off by eye: 20140704, 0315, L, HU, 34.7N, 76.6W, 85, 973 (landfall), 34 kt 130 130 60 90.
    let choice = Choice { storm: Some("Arthur".to_owned()), ..cycle("2014070300") };
    let advisory = advisory(&hurdat(), &choice);
    let landfall =
        advisory.points.iter().find(|point| point.valid.to_rfc3339() == "2014-07-04T03:15:00+00:00").unwrap();
    let row = hurdat().lines().find(|row| row.starts_with("20140704, 0315, L")).unwrap().to_owned();
    let fields: Vec<&str> = row.split(',').map(str::trim).collect();
    assert_eq!(format!("{:.1}N", landfall.position.latitude()), fields[4]);
    assert_eq!(format!("{:.1}W", -landfall.position.longitude()), fields[5]);
    assert_eq!(format!("{:.0}", landfall.max_wind.get()), fields[6]);
    let written: Vec<f64> = fields[8..12].iter().map(|field| field.parse().unwrap()).collect();
    assert_eq!(miles(landfall.radii.gale).unwrap().to_vec(), written);
    // The same file in the later form: one more figure instead of the last comma, and unknown figures.
    let whole = hurdat();
    let later = whole.lines().map(|row| if row.len() > 60 { format!("{row}  -999") } else { row.to_owned() });
    let later = later.collect::<Vec<_>>().join("\n");
    let unknown = later.replacen(
        "20140703, 1200,  , HU, 31.8N,  78.7W,  80,",
        "20140703, 1200,  , HU, 31.8N,  78.7W, -99,",
        1,
    );
    let again = read(&later, &choice);
    assert_eq!(again.advisory.unwrap().points.len(), advisory.points.len());
    if unknown != later {
        let reading = read(&unknown, &choice);
        assert!(reading.findings.iter().any(|finding| finding.code == "advisory-best-track-gap"));
        assert_eq!(reading.advisory.unwrap().points.len(), advisory.points.len() - 1);
    }
}

#[test]
fn a_working_best_track_agrees_with_the_final_one() {
    // HURDAT2 as a table against the deck of the same storms. The final track may differ from the working one: rows of
    // these two storms differ by at most 0.3 degrees and 10 kt, and most of them not at all.
    let table = fs::read_to_string("tests/data/best-track/best-track.csv").unwrap();
    for (file, id, begins) in
        [("al072008.b.dat", "AL072008", "2008082512"), ("al012013.b.dat", "AL012013", "2013060518")]
    {
        let text = fs::read_to_string(format!("tests/data/best-track/{file}")).unwrap();
        let advisory = advisory(&text, &cycle(begins));
        let (mut same, mut compared, mut radii) = (0, 0, 0);
        for row in table.lines().filter(|row| row.starts_with(id)) {
            let fields: Vec<&str> = row.split(',').collect();
            let Some(point) =
                advisory.points.iter().find(|p| p.valid.format("%Y-%m-%dT%H:%MZ").to_string() == fields[1])
            else {
                continue;
            };
            let number = |index: usize| fields[index].parse::<f64>().unwrap();
            let apart = (point.position.latitude() - number(4))
                .abs()
                .max((point.position.longitude() - number(5)).abs());
            let wind = (point.max_wind.get() - number(6)).abs();
            assert!(apart < 0.31 && wind < 10.1, "{row}: {point:?}");
            compared += 1;
            let is_same = apart < 0.05 && wind < 0.5;
            same += usize::from(is_same);
            if let (true, Some(gale)) = (is_same, miles(point.radii.gale)) {
                radii += usize::from((0..4).all(|q| (gale[q] - number(8 + q)).abs() < 0.5));
            }
        }
        assert!(
            compared >= 12 && same * 10 >= compared * 8 && radii * 10 >= same * 8,
            "{id}: {compared} {same} {radii}"
        );
    }
}

#[test]
fn high_seas_of_a_deck_are_read_and_never_taken_for_a_wind() {
    // Read off by eye: 2013060606, 12, NEQ, 120, 120, 0, 75; rows after 2013060906 end before the seas.
    let text = fs::read_to_string("tests/data/best-track/al012013.b.dat").unwrap();
    let advisory = advisory(&text, &cycle("2013060600"));
    let seas = at(&advisory, "2013060606").seas.unwrap();
    assert!((seas.height.get() - 12.0 * 0.3048).abs() < 1e-9);
    assert_near(seas.reach.clockwise().map(|miles| miles.get()), [120.0, 120.0, 0.0, 75.0]);
    assert!(at(&advisory, "2013060912").seas.is_none());
}
