//! Damaged forecasts: no bytes bring the reader down, and nothing half-read comes out of it.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use proptest::prelude::{any, proptest};
use proptest::test_runner::Config;
use snugdown::advisory::choice::{Choice, parse_cycle};
use snugdown::advisory::read::{LONGEST, Reading, read_chosen, read_forecast};
use snugdown::finding::fault::has_error;
use std::fs;

fn texts() -> Vec<Vec<u8>> {
    let folders = [
        "tests/data/forecast-advisory",
        "tests/data/typed-forecast",
        "tests/data/joint-warning",
        "tests/data/deck",
        "tests/data/best-track",
    ];
    let mut paths: Vec<_> = folders
        .iter()
        .flat_map(|folder| fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()))
        .filter(|path| path.extension().is_some_and(|end| end == "txt" || end == "toml" || end == "dat"))
        .collect();
    paths.sort();
    assert!(paths.len() >= 15);
    let mut texts: Vec<Vec<u8>> = paths.iter().map(|path| fs::read(path).unwrap()).collect();
    texts.push(TOKYO.as_bytes().to_vec());
    texts
}

/// An invented advisory in the layout of RSMC Tokyo.
const TOKYO: &str = "WTPQ50 RJTD 301800\nRSMC TROPICAL CYCLONE ADVISORY\nNAME  TY 2611 ODA (2611)\nANALYSIS\n\
    PSTN  301800UTC 24.6N 131.2E GOOD\nMOVE  NNW 11KT\nPRES  950HPA\nMXWD  080KT\nGUST  115KT\n\
    50KT  110NM EAST 80NM WEST\n30KT  300NM NORTHEAST 240NM SOUTHWEST\nFORECAST\n\
    24HF  311800UTC 28.4N 129.9E 45NM 70%\nMOVE  N SLOWLY\nPRES  950HPA\nMXWD  080KT\nGUST  115KT\n\
    96HF  031800UTC 40.0N 143.0E 180NM 70% TROPICAL DEPRESSION=\n";

/// Choices under which each of the texts can be read, and none at all.
fn choices() -> Vec<Choice> {
    let cycle = |text: &str| Choice { cycle: parse_cycle(text), ..Choice::default() };
    let storm = |storm: &str, text: &str| Choice { storm: Some(storm.to_owned()), ..cycle(text) };
    vec![
        Choice::default(),
        cycle("2018090300"),
        cycle("2008082918"),
        cycle("2013060518"),
        storm("AL012014", "2014070300"),
        cycle("2026083018"),
        cycle("2026090206"),
        Choice::taken_at(parse_cycle("2026090306").unwrap()),
        Choice { technique: Some("CARQ".to_owned()), ..Choice::default() },
    ]
}

/// What must hold of any reading.
fn assert_sound(reading: &Reading) {
    let Reading { advisory, findings, source } = reading;
    assert_eq!(advisory.is_none(), has_error(findings), "{findings:?}");
    for finding in findings {
        assert!(finding.place.end <= source.text().len() && finding.place.start <= finding.place.end);
        assert!(!finding.found.is_empty() && !finding.to_do.is_empty(), "{finding}");
    }
    let Some(advisory) = advisory else { return };
    let first = advisory.points.first().unwrap().valid;
    assert!(advisory.base <= advisory.issued && (advisory.issued - advisory.base).num_hours() <= 24);
    assert!((first - advisory.issued).num_hours().abs() <= 24);
    assert!(advisory.points.windows(2).all(|pair| pair[0].valid < pair[1].valid));
    assert!((advisory.last_valid() - advisory.issued).num_hours() <= 240);
    assert!(!advisory.issuer.is_empty() || advisory.storm.id.is_some() || !advisory.storm.name.is_empty());
}

/// A small generator of its own, so that a failure can be repeated from its number.
struct Dice(u64);

impl Dice {
    fn below(&mut self, bound: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) as usize) % bound.max(1)
    }
}

fn damage(text: &[u8], dice: &mut Dice) -> Vec<u8> {
    let mut bytes = text.to_vec();
    let mut lines: Vec<&[u8]> = text.split_inclusive(|byte| *byte == b'\n').collect();
    match dice.below(9) {
        0 => bytes.truncate(dice.below(text.len())),
        1 => {
            let (a, b) = (dice.below(text.len()), dice.below(text.len()));
            bytes.swap(a, b);
        }
        2 => {
            lines.remove(dice.below(lines.len()));
            bytes = lines.concat();
        }
        3 => {
            let line = lines[dice.below(lines.len())];
            lines.insert(dice.below(lines.len()), line);
            bytes = lines.concat();
        }
        4 => bytes[dice.below(text.len())] = dice.below(256) as u8,
        5 => {
            let (a, b) = (dice.below(lines.len()), dice.below(lines.len()));
            lines.swap(a, b);
            bytes = lines.concat();
        }
        6 => {
            // One digit becomes another: the slip that hides best.
            let digits: Vec<usize> = (0..text.len()).filter(|at| text[*at].is_ascii_digit()).collect();
            if let Some(at) = digits.get(dice.below(digits.len())) {
                bytes[*at] = b'0' + dice.below(10) as u8;
            }
        }
        7 => {
            bytes.drain(..dice.below(text.len()));
        }
        _ => {
            let (a, b) = (dice.below(text.len()), dice.below(text.len()));
            bytes.drain(a.min(b)..a.max(b));
        }
    }
    bytes
}

#[test]
fn a_damaged_text_is_read_soundly_or_refused() {
    let (texts, choices) = (texts(), choices());
    for seed in 0..16_000_u64 {
        let mut dice = Dice(seed);
        let mut bytes = texts[dice.below(texts.len())].clone();
        for _ in 0..=dice.below(3) {
            if !bytes.is_empty() {
                bytes = damage(&bytes, &mut dice);
            }
        }
        assert_sound(&read_chosen("damaged", &bytes, &choices[dice.below(choices.len())]));
    }
}

#[test]
fn a_text_cut_anywhere_before_its_end_is_never_taken_for_a_whole_one() {
    let text = fs::read_to_string("tests/data/forecast-advisory/ep122024.fstadv.008.txt").unwrap();
    let end_mark = text.find("NEXT ADVISORY AT 23/2100Z").unwrap() + "NEXT ADVISORY AT 23/2100Z".len();
    for length in 0..end_mark {
        let reading = read_forecast("cut", &text.as_bytes()[..length]);
        assert!(reading.advisory.is_none(), "cut after {length} bytes: {}", &text[..length]);
    }
    assert!(read_forecast("whole", &text.as_bytes()[..end_mark]).advisory.is_some());
}

#[test]
fn a_line_of_wind_or_track_that_is_lost_is_never_lost_silently() {
    let text = fs::read_to_string("tests/data/forecast-advisory/ep122024.fstadv.008.txt").unwrap();
    let lines: Vec<&str> = text.split_inclusive('\n').collect();
    for (number, line) in lines.iter().enumerate() {
        let is_track = line.contains("VALID") || line.contains("CENTER LOCATED");
        if !(is_track || line.starts_with("MAX ")) || line.starts_with("REPEAT") {
            continue;
        }
        let kept: String =
            lines.iter().enumerate().filter(|(n, _)| *n != number).map(|(_, line)| *line).collect();
        let reading = read_forecast("lacking", kept.as_bytes());
        assert!(reading.advisory.is_none(), "without line {}: {line}", number + 1);
    }
}

#[test]
fn large_files_are_refused_or_read_in_time() {
    assert_eq!(read_forecast("big", &vec![b'x'; LONGEST + 1]).findings[0].code, "advisory-too-long");
    let fillers: [&[u8]; 10] = [
        b"x",
        b". ",
        b"...",
        b"<a",
        b"34 KT ",
        b"[a]\n",
        b"FORECAST/ADVISORY NUMBER 1 ",
        b"<pre>FORECAST VALID ",
        b"WARNING POSITION: 020600Z --- NEAR 1N 1E WARNING NR ",
        b"RSMC TROPICAL CYCLONE ADVISORY PSTN ",
    ];
    for filler in fillers {
        let mut bytes = filler.repeat(LONGEST / filler.len());
        assert_sound(&read_forecast("long", &bytes));
        bytes.splice(0..0, b"<html>".iter().copied());
        bytes.truncate(LONGEST);
        assert_sound(&read_forecast("long page", &bytes));
    }
}

proptest! {
    #![proptest_config(Config::with_cases(300))]
    #[test]
    fn any_bytes_are_read_soundly_or_refused(bytes in proptest::collection::vec(any::<u8>(), 0..600)) {
        assert_sound(&read_forecast("bytes", &bytes));
    }

    #[test]
    fn any_run_of_rows_and_fields_is_read_soundly_or_refused(
        picks in proptest::collection::vec(0_usize..22, 0..150),
        choice in 0_usize..9,
    ) {
        let words = [
            "AL, ", "06, ", "2018090300, ", "03, ", "OFCL, ", "BEST, ", "12, ", "0, ", "128N, ", "179W, ", "65, ", "997, ", "HU, ",
            "34, ", "NEQ, ", "AAA, ", "\n", "AL062018, FLORENCE, 2,\n", "20180903, 0000, , HU, 12.8N, 17.9W, 65, 997, ",
            "AL, 06, 2018090300, 03, OFCL, 0, 128N, 179W, 65, 997, HU, 34, NEQ, 30, 30, 20, 30, \n",
            "AL, 06, 2018090300, 03, OFCL, 24, 138N, 209W, 65, 997, HU, 50, NEQ, 30, 30, 20, 30, \n", "-999, ",
        ];
        let text: String = picks.iter().map(|pick| words[*pick]).collect();
        assert_sound(&read_chosen("rows", text.as_bytes(), &choices()[choice]));
    }

    #[test]
    fn any_run_of_the_words_of_warnings_is_read_soundly_or_refused(
        picks in proptest::collection::vec(0_usize..30, 0..120),
        choice in 0_usize..9,
    ) {
        let words = [
            "WARNING POSITION:", "WARNING NR 005", "22W (ODA)", "020600Z --- NEAR 23.1N 132.4E", "12 HRS, VALID AT:",
            "021800Z --- 24.7N 130.9E", "MAX SUSTAINED WINDS - 035 KT, GUSTS 045 KT", "RADIUS OF 034 KT WINDS -",
            "120 NM NORTHEAST QUADRANT", "090 NM SOUTHEAST QUADRANT", "SEMICIRCLE", "ELSEWHERE", "REMARKS:", "02SEP26.",
            "NEXT WARNINGS AT 021500Z", "NNNN", "RSMC TROPICAL CYCLONE ADVISORY", "NAME TY 2611 ODA", "PSTN",
            "301800UTC 24.6N 131.2E", "24HF", "311800UTC 28.4N 129.9E 45NM 70%", "MXWD 080KT", "50KT 110NM EAST 80NM WEST",
            "30KT 300NM", "MOVE N SLOWLY", "PRES 950HPA", "TROPICAL DEPRESSION=", "1.0N", "99",
        ];
        let text: Vec<&str> = picks.iter().map(|pick| words[*pick]).collect();
        assert_sound(&read_chosen("words", text.join(" ").as_bytes(), &choices()[choice]));
    }

    #[test]
    fn any_run_of_the_words_of_advisories_is_read_soundly_or_refused(
        picks in proptest::collection::vec(0_usize..40, 0..120),
    ) {
        let words = [
            "TROPICAL", "STORM", "ODA", "FORECAST/ADVISORY", "NUMBER", "1", "NWS", "AL122024",
            "2100", "UTC", "MON", "SEP", "23", "2024", "CENTER LOCATED NEAR 15.5N 98.5W AT 23/2100Z",
            "FORECAST VALID", "OUTLOOK VALID", "24/0600Z", "25/0600Z", "16.0N", "98.3W", "...INLAND", "...DISSIPATED",
            "MAX WIND", "65 KT", "...", "GUSTS", "80 KT", "34 KT", "50NE 50SE 50SW 50NW", "50NE", "REPEAT",
            "NEXT ADVISORY AT 24/0300Z", "$$", "EXTENDED OUTLOOK", "PRESENT MOVEMENT", "12 FT SEAS", "\n", "31/2400Z",
            "TROPICAL STORM ODA FORECAST/ADVISORY NUMBER 1 NWS AL122024 2100 UTC MON SEP 23 2024",
        ];
        let text: Vec<&str> = picks.iter().map(|pick| words[*pick]).collect();
        assert_sound(&read_forecast("words", text.join(" ").as_bytes()));
    }
}
