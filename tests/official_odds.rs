//! The official wind speed probabilities: read as they stand, matched to places, and shown beside ours.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use proptest::prelude::{any, proptest};
use proptest::test_runner::Config;
use serde_json::Value;
use snugdown::advisory::official_odds::{OfficialOdds, is_official_odds, read_official_odds};
use snugdown::advisory::official_rows::Percent;
use snugdown::finding::fault::has_error;
use snugdown::geo::position::Position;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};

const TEXT_6: &str = "tests/data/wind-probabilities/ep102024.wndprb.006.txt";
const TEXT_8: &str = "tests/data/wind-probabilities/ep102024.wndprb.008.txt";
const ADVISORY_6: &str = "tests/data/forecast-advisory/ep102024.fstadv.006.txt";
const ADVISORY_8: &str = "tests/data/forecast-advisory/ep102024.fstadv.008.txt";

fn odds(file: &str) -> OfficialOdds {
    let reading = read_official_odds(file, &fs::read(file).unwrap());
    reading.odds.unwrap_or_else(|| panic!("{:?}", reading.findings))
}

fn by_then(odds: &OfficialOdds, place: &str, wind: usize) -> Vec<u8> {
    let rows = odds.of_place(Some(place), "", Position::new(0.0, 0.0).unwrap());
    rows[wind].by_then.iter().map(|percent| percent.at_least()).collect()
}

#[test]
fn a_text_is_read_as_it_stands() {
    // Read off by eye.
    let odds = odds(TEXT_6);
    assert_eq!((odds.storm.as_deref(), odds.number), (Some("EP102024"), Some(6)));
    assert_eq!(odds.issued.to_rfc3339(), "2024-09-23T21:00:00+00:00");
    assert_eq!(odds.base.to_rfc3339(), "2024-09-23T18:00:00+00:00");
    assert_eq!(odds.hours, [12, 24, 36, 48, 72, 96, 120]);
    assert_eq!(odds.rows.len(), 11);
    assert_eq!(by_then(&odds, "P MALDONADO", 0), [88, 93, 93, 93, 93, 93, 93]);
    assert_eq!(by_then(&odds, "P MALDONADO", 2), [16, 35, 38, 38, 38, 38, 38]);
    assert_eq!(by_then(&odds, "Acapulco", 1), [0, 2, 3, 3, 3, 3, 3]);
    let acapulco = &odds.of_place(Some("ACAPULCO"), "", Position::new(0.0, 0.0).unwrap())[0];
    assert_eq!(
        acapulco.onset,
        [2, 11, 4].map(Percent::Of).into_iter().chain([Percent::BelowOne; 4]).collect::<Vec<_>>()
    );
    // Over midnight: issued 0900, counted from 0600 of the same day.
    assert_eq!(self::odds(TEXT_8).base.to_rfc3339(), "2024-09-24T06:00:00+00:00");
    assert_eq!(by_then(&self::odds(TEXT_8), "ACAPULCO", 0), [99; 7]);
}

#[test]
fn places_are_matched_by_the_ports_word_by_name_or_by_position() {
    let odds = odds(TEXT_6);
    let at = |latitude: f64, longitude: f64| Position::new(latitude, longitude).unwrap();
    let found = |listed: Option<&str>, name: &str, position: Position| {
        odds.of_place(listed, name, position).first().map(|row| row.place.clone())
    };
    assert_eq!(found(Some("P ANGEL"), "Acapulco", at(16.8, -99.9)).as_deref(), Some("P ANGEL"));
    assert_eq!(found(None, "Acapulco", at(0.0, 0.0)).as_deref(), Some("ACAPULCO"));
    assert_eq!(found(None, "Pilot station", at(15.1, -100.1)).as_deref(), Some("15N 100W"));
    assert_eq!(found(None, "Pilot station", at(15.5, -100.1)), None);
    // A listed place that this text does not list is not replaced by another.
    assert_eq!(found(Some("MANZANILLO"), "Acapulco", at(15.0, -100.0)), None);
}

#[test]
fn it_is_told_from_forecasts_and_forecasts_from_it() {
    assert!(is_official_odds(&fs::read(TEXT_6).unwrap()));
    assert!(!is_official_odds(&fs::read(ADVISORY_6).unwrap()));
    assert!(!is_official_odds(b""));
}

#[test]
fn a_text_cut_anywhere_is_not_taken_for_a_whole_one() {
    let text = fs::read_to_string(TEXT_6).unwrap();
    for length in 0..text.find("$$").unwrap() {
        assert!(read_official_odds("cut", &text.as_bytes()[..length]).odds.is_none(), "cut after {length}");
    }
}

#[test]
fn one_slipped_digit_is_noticed_or_lies_within_rounding() {
    let text = fs::read_to_string(TEXT_6).unwrap();
    let from = text.find("ZIHUATANEJO").unwrap();
    let whole = odds(TEXT_6);
    let (mut noticed, mut missed) = (0, 0);
    for (at, digit) in text.char_indices().filter(|(at, c)| *at > from && c.is_ascii_digit()) {
        let other = if digit == '9' { '1' } else { char::from(digit as u8 + 1) };
        let mut slipped = text.clone();
        slipped.replace_range(at..=at, &other.to_string());
        match read_official_odds("slip", slipped.as_bytes()).odds {
            None => noticed += 1,
            // A slip of the last digit by one, or in a name, cannot be seen.
            Some(odds) => {
                missed += 1;
                for (row, other) in odds.rows.iter().zip(&whole.rows) {
                    let apart = row.by_then.iter().zip(&other.by_then);
                    let most = apart.map(|(a, b)| a.at_least().abs_diff(b.at_least())).max().unwrap();
                    assert!(most <= 10, "{row:?}");
                }
            }
        }
    }
    assert!(noticed > missed, "{noticed} noticed, {missed} missed");
}

fn run(arguments: &[&str]) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.env_remove("COLUMNS").current_dir(env!("CARGO_MANIFEST_DIR")).args(arguments).output().unwrap()
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).unwrap()
}

// Positions from memory.
const MALDONADO: &str = "--at=P Maldonado=16.33,-98.57";
const ACAPULCO: &str = "--at=Acapulco=16.85,-99.88";

#[test]
fn official_and_own_odds_stand_side_by_side_and_ours_are_the_ones_used() {
    let output =
        run(&["arrivals", ADVISORY_6, MALDONADO, ACAPULCO, "--at=Far=40,-60", "--official-odds", TEXT_6]);
    let told = text(&output.stdout);
    assert_eq!(output.status.code(), Some(0), "{}", text(&output.stderr));
    assert!(told.contains("Official odds for P MALDONADO (text 6 issued Mon 21:00Z,"), "{told}");
    assert!(
        told.contains("rules\nuse ours, always") || told.contains("the rules use ours, always"),
        "{told}"
    );
    assert!(told.contains("34 kt official     88 %   93 %   93 %"), "{told}");
    assert!(
        told.contains("this place is not\nlisted") || told.contains("this place is not listed"),
        "{told}"
    );
    let json = run(&["arrivals", ADVISORY_6, MALDONADO, "--official-odds", TEXT_6, "--json"]);
    let out: Value = serde_json::from_slice(&json.stdout).unwrap();
    let official = &out["places"][0]["official"];
    assert_eq!(
        (&official["listed"], &official["rules_use"]),
        (&Value::from("P MALDONADO"), &Value::from("ours"))
    );
    assert_eq!(official["by"][0], Value::from("2024-09-24T06:00:00Z"));
    assert_eq!(official["winds"][0]["official"][0].as_f64(), Some(0.88));
    assert_eq!(official["winds"][0]["official"].as_array().unwrap().len(), 7);
}

#[test]
fn ours_and_the_official_odds_of_gales_are_near_each_other() {
    // The cheapest strong check of a whole advisory: the mean difference of 34-kt chances is at most 10 points at the
    // places and times that the official text lists (positions from memory, so a storm as small as this one allows more).
    let output = run(&[
        "arrivals",
        ADVISORY_6,
        MALDONADO,
        ACAPULCO,
        "--at=Sea=15,-100",
        "--at=East=15,-95",
        "--official-odds",
        TEXT_6,
        "--json",
    ]);
    let out: Value = serde_json::from_slice(&output.stdout).unwrap();
    let mut differences = Vec::new();
    for place in out["places"].as_array().unwrap() {
        let gale = &place["official"]["winds"][0];
        for (official, ours) in
            gale["official"].as_array().unwrap().iter().zip(gale["ours"].as_array().unwrap())
        {
            differences.push((official.as_f64().unwrap_or(0.005) - ours.as_f64().unwrap()).abs());
        }
    }
    let mean = differences.iter().sum::<f64>() / differences.len() as f64;
    assert!(differences.len() == 28 && mean < 0.10, "{mean}");
}

#[test]
fn odds_of_another_storm_or_another_advisory_are_called_that() {
    let other = run(&[
        "arrivals",
        "tests/data/forecast-advisory/ep122024.fstadv.008.txt",
        ACAPULCO,
        "--official-odds",
        TEXT_6,
        "--width",
        "300",
    ]);
    assert!(text(&other.stdout).contains("another storm: it is not shown"), "{}", text(&other.stdout));
    let older = run(&["arrivals", ADVISORY_8, ACAPULCO, "--official-odds", TEXT_6, "--width", "300"]);
    assert!(text(&older.stdout).contains("the two are not of the same forecast"), "{}", text(&older.stdout));
    let wrong = run(&["arrivals", ADVISORY_6, ACAPULCO, "--official-odds", ADVISORY_6]);
    assert_eq!(wrong.status.code(), Some(3));
    assert!(text(&wrong.stderr).contains("advisory-odds-head"));
    let as_forecast = run(&["arrivals", TEXT_6, ACAPULCO]);
    assert!(text(&as_forecast.stderr).contains("advisory-other-product"));
}

/// A copy of the small port with the advisories of John, its clock and its pilot station at Acapulco.
fn port(name: &str, events: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    for entry in fs::read_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/small-port")).unwrap() {
        let path = entry.unwrap().path();
        fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
    }
    let port = fs::read_to_string(folder.join("port.toml")).unwrap();
    let port =
        port.replace("22 24.0 N 040 54.0 W\"", "16 51.0 N 099 53.0 W\"\nofficial_place = \"ACAPULCO\"");
    let port = port.replace("2026-09-17T06:20-03:00", "2024-09-23T21:30Z");
    fs::write(folder.join("port.toml"), port).unwrap();
    for (from, to) in [(ADVISORY_6, "adv.txt"), (TEXT_6, "odds.txt")] {
        fs::copy(Path::new(env!("CARGO_MANIFEST_DIR")).join(from), folder.join(to)).unwrap();
    }
    fs::write(folder.join("events.toml"), events).unwrap();
    folder
}

#[test]
fn a_port_takes_official_odds_as_it_takes_an_advisory() {
    let took = |file: &str| {
        format!(
            "[[event]]\nat = \"2024-09-23T21:10Z\"\nby = \"Duty officer\"\ntook_advisory = {{ file = \"{file}\" }}\n"
        )
    };
    let folder = port("official-odds", &(took("adv.txt") + &took("odds.txt")));
    let check = run(&["check", folder.to_str().unwrap()]);
    assert!(text(&check.stdout).contains("0 errors"), "{}{}", text(&check.stdout), text(&check.stderr));
    let output = run(&["arrivals", folder.to_str().unwrap()]);
    let told = text(&output.stdout);
    assert!(told.contains("Official odds for ACAPULCO (text 6"), "{told}{}", text(&output.stderr));
    let plan = run(&["plan", folder.to_str().unwrap(), "--json"]);
    let out: Value = serde_json::from_slice(&plan.stdout).unwrap();
    assert_eq!(out["advisory"]["storm"], Value::from("JOHN"));
    // Odds alone are nothing to plan on.
    let alone = port("odds-alone", &took("odds.txt"));
    assert_eq!(run(&["arrivals", alone.to_str().unwrap()]).status.code(), Some(2));
}

proptest! {
    #![proptest_config(Config::with_cases(300))]
    #[test]
    fn any_bytes_are_read_soundly_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..400)) {
        let reading = read_official_odds("bytes", &bytes);
        assert_eq!(reading.odds.is_none(), has_error(&reading.findings));
    }

    #[test]
    fn a_text_with_bytes_changed_is_read_soundly_or_refused(
        places in proptest::collection::vec((any::<u16>(), any::<u8>()), 1..6),
    ) {
        let mut bytes = fs::read(TEXT_6).unwrap();
        for (place, byte) in places {
            let at = usize::from(place) % bytes.len();
            bytes[at] = byte;
        }
        let reading = read_official_odds("bytes", &bytes);
        assert_eq!(reading.odds.is_none(), has_error(&reading.findings));
        for finding in &reading.findings {
            assert!(finding.place.end <= reading.source.text().len());
        }
    }
}
