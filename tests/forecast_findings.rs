//! What the reader says about texts at fault: every code is provoked here, and other products are named for what they are.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use snugdown::advisory::choice::{Choice, parse_cycle};
use snugdown::advisory::codes::CODES;
use snugdown::advisory::forecast::{Ending, Quadrants, Reach};
use snugdown::advisory::official_odds::read_official_odds;
use snugdown::advisory::read::{LONGEST, Reading, read_chosen, read_forecast};
use snugdown::finding::fault::{Finding, Severity};
use std::collections::BTreeSet;
use std::fs;

fn kristy() -> String {
    fs::read_to_string("tests/data/forecast-advisory/ep122024.fstadv.008.txt").unwrap()
}

fn typed() -> String {
    fs::read_to_string("tests/data/typed-forecast/example.toml").unwrap()
}

fn swap(text: &str, old: &str, new: &str) -> String {
    assert!(text.contains(old), "{old} is not in the text");
    text.replacen(old, new, 1)
}

/// What stands from `first` up to `end`, without `end`, cut out.
fn without(text: &str, first: &str, end: &str) -> String {
    let start = text.find(first).unwrap();
    let length = text[start..].find(end).unwrap();
    format!("{}{}", &text[..start], &text[start + length..])
}

/// Each case: the code, whether it refuses the advisory, and a text that provokes it.
fn cases() -> Vec<(&'static str, Severity, String)> {
    let mut cases = refusals();
    cases.extend(damaged());
    cases.extend(implausible());
    cases.extend(mistyped());
    cases.extend(of_other_products());
    cases
}

fn of_other_products() -> Vec<(&'static str, Severity, String)> {
    let (error, warning) = (Severity::Error, Severity::Warning);
    let deck = fs::read_to_string("tests/data/deck/al062018.a.dat").unwrap();
    let deck: String = deck
        .lines()
        .filter(|row| row.contains("2018090300, 03, OFCL"))
        .map(|row| format!("{row}\n"))
        .collect();
    let best = fs::read_to_string("tests/data/best-track/al072008.b.dat").unwrap();
    let change = |old: &str, new: &str| swap(&deck, old, new);
    let row = |start: &str| deck.lines().find(|row| row.starts_with(start)).unwrap().to_owned();
    let at_36 = row("AL, 06, 2018090300, 03, OFCL,  36");
    vec![
        ("advisory-choose-cycle", error, best),
        ("advisory-choose-storm", error, format!("{deck}{}", deck.replace("AL, 06", "AL, 07"))),
        ("advisory-choose-technique", error, deck.replace("OFCL", "CARQ")),
        ("advisory-deck-differs", error, format!("{deck}{}\n", at_36.replacen("N, ", "S, ", 1))),
        (
            "advisory-deck-gap",
            warning,
            swap(&deck, &at_36, &format!("{} 0N, 0W{}", &at_36[..34], &at_36[46..])),
        ),
        ("advisory-deck-row", error, change("OFCL,  36", "OFCL, abc")),
        (
            "advisory-deck-short",
            warning,
            deck.lines().take_while(|row| !row.contains("OFCL,  72")).map(|row| format!("{row}\n")).collect(),
        ),
        ("advisory-radius-code", warning, deck.replace("NEQ", "NNS")),
    ]
}

/// Findings that come of what was chosen beside the text: code, whether it refuses, text, choice.
fn chosen() -> Vec<(&'static str, Severity, String, Choice)> {
    let (error, warning) = (Severity::Error, Severity::Warning);
    let deck = fs::read_to_string("tests/data/deck/al062018.a.dat").unwrap();
    let hurdat = fs::read_to_string("tests/data/best-track/atlantic.hurdat2.txt").unwrap();
    let best = Choice { storm: Some("AL012014".to_owned()), ..cycle("2014070300") };
    let row = hurdat.lines().find(|row| row.starts_with("20140703, 1200")).unwrap();
    let calm = hurdat.replace(row, &row.replacen(&row[37..41], " -99", 1));
    let aid = Choice { technique: Some("AVNI".to_owned()), ..cycle("2018090300") };
    let tokyo = "RSMC TROPICAL CYCLONE ADVISORY\nNAME TS 2611 ODA (2611)\nPSTN 301800UTC 24.6N 131.2E GOOD\nMXWD 040KT\n\
                 24HF 311800UTC 25.6N 130.2E\nMXWD 040KT=";
    vec![
        ("advisory-best-track-gap", warning, calm, best),
        ("advisory-not-chosen", error, kristy(), cycle("2024102306")),
        ("advisory-not-official", warning, deck.replace("OFCL", "AVNI"), aid),
        ("advisory-no-circle", warning, tokyo.to_owned(), cycle("2026083018")),
        ("advisory-season", warning, tokyo.to_owned(), cycle("2024083018")),
    ]
}

fn cycle(text: &str) -> Choice {
    Choice { cycle: parse_cycle(text), ..Choice::default() }
}

fn refusals() -> Vec<(&'static str, Severity, String)> {
    let error = Severity::Error;
    let data = |name: &str| fs::read_to_string(format!("tests/data/not-a-forecast/{name}")).unwrap();
    vec![
        ("advisory-too-long", error, "x".repeat(LONGEST + 1)),
        ("advisory-empty", error, " \r\n\u{feff}\t".to_owned()),
        ("advisory-binary", error, "%PDF-1.7\n...".to_owned()),
        ("advisory-web-page", error, "<!DOCTYPE html><html><body>A storm</body></html>".to_owned()),
        ("advisory-data-format", error, "{\"storm\": 1}".to_owned()),
        ("advisory-other-product", error, data("al092008.discus.001.txt")),
        (
            "advisory-other-centre",
            error,
            "WTPQ20 RCTP 080000\nRSMC TROPICAL CYCLONE BULLETIN\nMXWD 085KT".to_owned(),
        ),
        ("advisory-unknown-text", error, "Dear all, a storm is coming.".to_owned()),
        ("advisory-two-in-one", error, format!("{}\n{}", kristy(), kristy())),
    ]
}

fn damaged() -> Vec<(&'static str, Severity, String)> {
    let (error, warning) = (Severity::Error, Severity::Warning);
    let text = kristy();
    let change = |old: &str, new: &str| swap(&text, old, new);
    vec![
        ("advisory-title", error, change("NUMBER   8", "NUMBER   8A")),
        ("advisory-issue-time", error, change("WED OCT 23 2024", "WED OCT 2024")),
        ("advisory-weekday", warning, change("WED OCT", "SUN OCT")),
        ("advisory-no-storm-id", warning, change("EP122024", "")),
        ("advisory-centre", error, change("14.3N 113.9W AT", "14.3 113.9W AT")),
        ("advisory-centre-time", error, text.replace("AT 23/1500Z", "AT 22/1500Z")),
        (
            "advisory-repeat-differs",
            warning,
            change("REPEAT...CENTER LOCATED NEAR 14.3N", "REPEAT...CENTER LOCATED NEAR 14.8N"),
        ),
        ("advisory-no-motion", warning, change("265 DEGREES AT", "DEGREES AT")),
        ("advisory-pressure", warning, change(" 954 MB", " 95 MB")),
        ("advisory-wind", error, change("MAX WIND 130 KT", "MAX WIND 1E0 KT")),
        ("advisory-radii", error, change("34 KT... 80NE  60SE  50SW", "34 KT... 80NE  60SE  50SE")),
        ("advisory-seas", warning, change("12 FT SEAS..210NE 120SE", "12 FT SEAS..210NE 120NE")),
        ("advisory-radius-speed", warning, change("34 KT... 80NE", "35 KT... 80NE")),
        ("advisory-valid-time", error, change("VALID 25/0000Z", "VALID 25/00Z")),
        ("advisory-position", error, change("14.2N 116.4W", "14.2N 11x.4W")),
        ("advisory-unread-figures", error, change("FORECAST VALID 25/0000Z", "FORECAST VALD 25/0000Z")),
        ("advisory-unread-words", warning, change("EXTENDED OUTLOOK", "HAVE A GOOD DAY. EXTENDED OUTLOOK")),
        ("advisory-next-due", warning, change("NEXT ADVISORY AT 23/2100Z", "NEXT ADVISORY SOON")),
        ("advisory-truncated", error, text[..text.find("REQUEST").unwrap()].to_owned()),
        ("advisory-times-not-rising", warning, change("VALID 26/1200Z", "VALID 25/1200Z")),
        ("advisory-cut-too-short", error, change("VALID 24/1200Z", "VALID 24/0000Z")),
        (
            "advisory-after-the-end",
            warning,
            change(
                "27/1200Z 20.5N 132.5W\nMAX WIND  55 KT...GUSTS  65 KT.\n50 KT... 30NE  10SE  10SW  30NW.\n34 KT...100NE  50SE  50SW 100NW.",
                "27/1200Z...DISSIPATED",
            ),
        ),
        (
            "advisory-track-ends",
            warning,
            change(
                "28/1200Z 21.0N 136.5W...POST-TROP/REMNT LOW\nMAX WIND  30 KT...GUSTS  40 KT.",
                "28/1200Z...MERGED WITH A FRONT",
            ),
        ),
        ("advisory-no-forecast", error, without(&text, "FORECAST VALID", "REQUEST")),
        (
            "advisory-zero-radii",
            warning,
            change("34 KT...100NE  50SE  50SW 100NW.", "34 KT...  0NE   0SE   0SW   0NW."),
        ),
        (
            "advisory-radii-above-wind",
            warning,
            change("MAX WIND  55 KT...GUSTS  65 KT.", "MAX WIND  45 KT...GUSTS  65 KT."),
        ),
    ]
}

fn implausible() -> Vec<(&'static str, Severity, String)> {
    let (error, warning) = (Severity::Error, Severity::Warning);
    let text = kristy();
    let change = |old: &str, new: &str| swap(&text, old, new);
    let low = |latitude: &str| text.replace("14.3N 113.9W", &format!("{latitude} 113.9W"));
    let track = |latitude: &str, longitude: &str| {
        let position = format!("{latitude} {longitude}");
        text.replace("14.2N 116.4W", &position)
    };
    vec![
        ("advisory-latitude", error, low(" 0.3N")),
        (
            "advisory-near-equator",
            warning,
            low(" 3.9N").replace("14.2N 116.4W", "4.5N 116.4W").replace("14.1N 119.7W", "9.1N 119.7W"),
        ),
        (
            "advisory-wind-range",
            error,
            change("SUSTAINED WINDS 110 KT WITH GUSTS TO 135", "SUSTAINED WINDS 210 KT WITH GUSTS TO 235"),
        ),
        ("advisory-gust-below-wind", warning, change("130 KT...GUSTS 160", "130 KT...GUSTS 110")),
        ("advisory-reach-range", warning, change("34 KT...110NE", "34 KT...910NE")),
        ("advisory-reach-large", warning, change("34 KT...110NE", "34 KT...320NE")),
        ("advisory-reach-order", warning, change("50 KT... 40NE  30SE", "50 KT... 40NE  90SE")),
        ("advisory-speed", error, track("14.2N", "126.4W")),
        (
            "advisory-speed-tropical",
            warning,
            track("14.2N", "121.4W").replace("14.1N 119.7W", "14.1N 124.7W"),
        ),
        (
            "advisory-wind-change",
            warning,
            change("MAX WIND 125 KT...GUSTS 150", "MAX WIND 150 KT...GUSTS 180"),
        ),
        (
            "advisory-rising-inland",
            warning,
            text.replace("14.2N 116.4W", "14.2N 116.4W...INLAND")
                .replace("14.1N 119.7W", "14.1N 119.7W...INLAND"),
        ),
        (
            "advisory-sharp-turn",
            warning,
            change("14.1N 119.7W", "14.2N 114.0W")
                .replace("14.3N 122.5W", "14.3N 116.5W")
                .replace("15.1N 125.1W", "15.1N 119.1W")
                .replace("16.5N 127.3W", "16.5N 122.3W")
                .replace("18.0N 129.3W", "18.0N 125.3W"),
        ),
        ("advisory-reach-missing", warning, change("34 KT...110NE  80SE  70SW 100NW.\n", "")),
        ("advisory-pressure-range", error, change(" 954 MB", " 854 MB")),
        ("advisory-wind-and-pressure", warning, change(" 954 MB", "1004 MB")),
        ("advisory-hemisphere", warning, change("EP122024", "SH122024")),
    ]
}

fn mistyped() -> Vec<(&'static str, Severity, String)> {
    let error = Severity::Error;
    let text = typed();
    let change = |old: &str, new: &str| swap(&text, old, new);
    vec![
        ("advisory-toml-syntax", error, change("\n[now]", "\n[now")),
        ("advisory-unknown-key", error, change("motion =", "moton =")),
        ("advisory-missing-key", error, change("averaging =", "# averaging =")),
        ("advisory-wrong-type", error, change("\"65 kt\"", "65")),
        ("advisory-quantity", error, change("\"65 kt\"", "\"65\"")),
        (
            "advisory-time-text",
            error,
            change("base_time = \"2026-09-17T06:00Z\"", "base_time = \"2026-09-17 06:00\""),
        ),
        ("advisory-position-text", error, change("22 18.0 N 040 48.0 W", "22 18.0 040 48.0")),
        ("advisory-time-order", error, change("after = \"48 h\"", "after = \"12 h\"")),
        ("advisory-gust-below-wind", error, change("gust = \"90 kt\"", "gust = \"50 kt\"")),
        ("advisory-reach-order", error, change("reach_64kt = \"20 n mi\"", "reach_64kt = \"70 n mi\"")),
        ("advisory-zero-radii", error, change("reach_50kt = \"60 n mi\"", "reach_50kt = \"none\"")),
        ("advisory-reach-range", error, change("120NE 90SE", "720NE 90SE")),
    ]
}

#[test]
fn every_fault_is_found_under_its_code_and_only_errors_refuse() {
    for (code, severity, text) in cases() {
        let Reading { advisory, findings, source } = read_forecast("text", text.as_bytes());
        let shown: Vec<String> = findings.iter().map(Finding::to_string).collect();
        let found = findings.iter().find(|finding| finding.code == code);
        let found = found.unwrap_or_else(|| panic!("{code} not among {shown:#?}"));
        assert_eq!(found.severity, severity, "{code}: {shown:#?}");
        assert_eq!(advisory.is_some(), severity == Severity::Warning, "{code}: {shown:#?}");
        assert!(found.place.end <= source.text().len(), "{code}");
    }
}

#[test]
fn what_was_chosen_beside_the_text_is_judged_too() {
    for (code, severity, text, choice) in chosen() {
        let Reading { advisory, findings, .. } = read_chosen("text", text.as_bytes(), &choice);
        let found = findings.iter().find(|finding| finding.code == code);
        assert_eq!(found.unwrap_or_else(|| panic!("{code} not among {findings:#?}")).severity, severity);
        assert_eq!(advisory.is_some(), severity == Severity::Warning, "{code}: {findings:#?}");
    }
}

/// Faults of official odds: code and text; both refuse.
fn of_odds() -> [(&'static str, String); 2] {
    let text = fs::read_to_string("tests/data/wind-probabilities/ep102024.wndprb.006.txt").unwrap();
    [
        ("advisory-odds-head", swap(&text, "2100 UTC MON", "2100 MON")),
        (
            "advisory-odds-row",
            swap(&text, "4(17)   X(17)   X(17)   X(17)   X(17)", "4(71)   X(17)   X(17)   X(17)   X(17)"),
        ),
    ]
}

#[test]
fn faults_of_official_odds_are_found_under_their_codes() {
    for (code, text) in of_odds() {
        let reading = read_official_odds("odds", text.as_bytes());
        assert!(
            reading.odds.is_none() && reading.findings.iter().any(|finding| finding.code == code),
            "{code}"
        );
    }
}

#[test]
fn every_code_in_the_source_is_listed_and_every_listed_code_is_provoked() {
    let mut in_source = BTreeSet::new();
    for entry in fs::read_dir("src/advisory").unwrap() {
        let path = entry.unwrap().path();
        if path.ends_with("codes.rs") {
            continue;
        }
        let text = fs::read_to_string(&path).unwrap();
        for part in text.split("\"advisory-").skip(1) {
            in_source.insert(format!("advisory-{}", part.split('"').next().unwrap()));
        }
    }
    let listed: BTreeSet<String> = CODES.iter().map(|(code, _)| (*code).to_owned()).collect();
    let provoked: BTreeSet<String> = cases()
        .iter()
        .map(|(code, ..)| (*code).to_owned())
        .chain(chosen().iter().map(|(code, ..)| (*code).to_owned()))
        .chain(of_odds().iter().map(|(code, _)| (*code).to_owned()))
        .collect();
    assert_eq!(in_source, listed);
    assert_eq!(provoked, listed);
    assert!(CODES.windows(2).all(|pair| pair[0].0 < pair[1].0));
}

#[test]
fn other_products_are_named_for_what_they_are() {
    let expected = [
        ("discus", "a forecaster's discussion"),
        ("public", "a public advisory"),
        ("tca", "an advisory for aviation"),
    ];
    let mut seen = 0;
    for entry in fs::read_dir("tests/data/not-a-forecast").unwrap() {
        let path = entry.unwrap().path();
        let name = path.file_name().unwrap().to_str().unwrap().to_owned();
        let Some((_, looks_like)) = expected.iter().find(|(part, _)| name.contains(part)) else { continue };
        seen += 1;
        let reading = read_forecast(&name, &fs::read(&path).unwrap());
        assert!(reading.advisory.is_none() && reading.findings.len() == 1, "{name}: {:?}", reading.findings);
        assert!(reading.findings[0].found.contains(looks_like), "{name}: {}", reading.findings[0]);
        assert!(reading.findings[0].to_do.contains("FORECAST/ADVISORY NUMBER"), "{name}");
    }
    assert_eq!(seen, 13);
}

#[test]
fn more_that_is_no_forecast_is_named_too() {
    let cases = [
        (
            "WTIO31 PGTW 270300\nAS THE SYSTEM APPROACHES THE COAST.//\n// END PART 02/02 //",
            "a part of a joint warning",
        ),
        (
            "WDPN31 PGTW 230300\nPROGNOSTIC REASONING FOR TROPICAL DEPRESSION 20W (ODA) WARNING NR 003//",
            "a forecaster's discussion",
        ),
        ("HURRICANE ODA WIND SPEED PROBABILITIES NUMBER  12", "wind speed probabilities"),
        ("TROPICAL WEATHER OUTLOOK\nFOR THE NORTH ATLANTIC", "an outlook"),
        ("ODA TROPICAL CYCLONE UPDATE", "an update between advisories"),
        ("<?xml version=\"1.0\"?><cxml/>", "an XML document"),
        ("[{\"a\": 1}]", "a JSON document"),
        ("PK\u{3}\u{4}\u{14}\u{0}", "a packed archive"),
        ("\u{89}PNG\r\n", "a picture"),
        ("a\u{0}b\u{0}c\u{0}", "a file that is no text"),
    ];
    for (text, looks_like) in cases {
        let reading = read_forecast("text", text.as_bytes());
        assert!(reading.advisory.is_none() && reading.findings.len() == 1, "{text}");
        assert!(reading.findings[0].found.contains(looks_like), "{}", reading.findings[0]);
    }
}

#[test]
fn all_faults_of_a_text_come_out_at_once() {
    let text = swap(&kristy(), "WED OCT 23 2024", "");
    let text = swap(&text, "MAX WIND 130 KT", "MAX WIND KT");
    let text = swap(&text, "34 KT... 90NE  60SE", "34 KT... 90NE");
    let codes: Vec<&str> = read_forecast("text", text.as_bytes()).findings.iter().map(|f| f.code).collect();
    assert_eq!(codes, ["advisory-issue-time", "advisory-wind", "advisory-radii"]);
}

#[test]
fn a_finding_names_the_line_and_standard_input_by_its_name() {
    let text = swap(&kristy(), "MAX WIND 130 KT", "MAX WIND KT");
    let reading = read_forecast("-", text.as_bytes());
    let line = text.lines().position(|line| line.starts_with("MAX WIND KT")).unwrap() + 1;
    assert!(reading.findings[0].to_string().starts_with(&format!("standard input:{line}:1 advisory-wind: ")));
}

#[test]
fn a_weaker_winds_reach_is_raised_to_a_stronger_ones() {
    let text = swap(&kristy(), "50 KT... 40NE  30SE", "50 KT... 40NE  90SE");
    let advisory = read_forecast("text", text.as_bytes()).advisory.unwrap();
    let Reach::Given(Quadrants { southeast, .. }) = advisory.points[1].radii.gale else {
        panic!("not given")
    };
    assert!((southeast.get() - 90.0).abs() < 1e-9);
}

#[test]
fn four_zeros_below_a_strong_wind_are_not_given() {
    let text = swap(&kristy(), "34 KT...100NE  50SE  50SW 100NW.", "34 KT...  0NE   0SE   0SW   0NW.");
    let advisory = read_forecast("text", text.as_bytes()).advisory.unwrap();
    assert_eq!(advisory.points[7].radii.gale, Reach::NotGiven);
}

#[test]
fn a_cut_track_says_where_it_was_cut() {
    let text = swap(&kristy(), "VALID 26/1200Z", "VALID 25/1200Z");
    let advisory = read_forecast("text", text.as_bytes()).advisory.unwrap();
    assert_eq!(advisory.points.len(), 6);
    assert_eq!(advisory.ends, Some(Ending::CutShort(advisory.last_valid())));
}
