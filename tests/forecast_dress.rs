//! The same forecast texts in other dress: flattened, mirrored, corrected, moved over the ends of months.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by panicking, in its own functions too")]

use chrono::{DateTime, Duration, NaiveDate, Utc};
use snugdown::advisory::forecast::{Advisory, Ending};
use snugdown::advisory::read::{Reading, read_forecast};
use snugdown::finding::fault::Place;
use std::fs;

const FOLDER: &str = "tests/data/forecast-advisory";

fn text(name: &str) -> String {
    fs::read_to_string(format!("{FOLDER}/{name}")).unwrap()
}

fn names() -> Vec<String> {
    let mut names: Vec<String> = fs::read_dir(FOLDER)
        .unwrap()
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .filter(|name| name.ends_with(".txt"))
        .collect();
    names.sort();
    assert_eq!(names.len(), 14);
    names
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

/// Without the places in the text, which change with its layout.
fn without_places(mut advisory: Advisory) -> Advisory {
    let nowhere = Place { file: String::new(), line: 1, column: 1, start: 0, end: 0 };
    advisory.points.iter_mut().for_each(|point| point.place = nowhere.clone());
    advisory
}

#[test]
fn every_point_of_every_text_has_a_place_that_shows_its_line() {
    for name in names() {
        let text = text(&name);
        for point in read(&text).points.iter().skip(1) {
            let line = &text[point.place.start..point.place.end];
            assert!(line.contains("VALID"), "{name}: {line}");
            assert!(line.contains(&point.valid.format("%d/%H%MZ").to_string()), "{name}: {line}");
        }
    }
}

#[test]
fn the_dress_of_a_text_does_not_change_what_it_says() {
    for name in names() {
        let plain = text(&name);
        let expected = without_places(read(&plain));
        let flattened = plain.split_whitespace().collect::<Vec<_>>().join(" ");
        let padded: String = plain.lines().map(|line| format!("{line:<68}\r\n")).collect();
        let dresses = [
            ("flattened", flattened.clone()),
            ("one word a line", flattened.replace(' ', "\n")),
            ("lower case", plain.to_lowercase()),
            ("padded, with carriage returns", padded),
            ("with a byte order mark", format!("\u{feff}{plain}")),
            ("with no-break spaces", plain.replace(' ', "\u{a0}")),
            ("with control characters", format!("\u{1}\r\r\n{}\u{3}", plain.replace('\n', "\r\r\n"))),
            ("in a web page", format!("<!DOCTYPE html><html><body><pre>\n{plain}</pre></body></html>")),
            ("in a web page with line tags", format!("<html><pre>{}</pre>", plain.replace('\n', "<br>\n"))),
            (
                "in a news feed",
                format!(
                    "<?xml version=\"1.0\"?><rss><item><![CDATA[ <pre> {flattened} </pre> ]]></item></rss>"
                ),
            ),
            ("below a mail's head", format!("From: office\nSubject: forecast\n\n{plain}")),
            ("with final stops lost", plain.replace(".\n", "\n")),
        ];
        for (dress, text) in dresses {
            assert_eq!(without_places(read(&text)), expected, "{name} {dress}");
        }
    }
}

#[test]
fn bytes_that_are_no_utf_8_are_read_as_western_text() {
    let plain = text("ep122024.fstadv.008.txt");
    let mut bytes = plain.replace("HURRICANE KRISTY", "HURRICANE~KRISTY").into_bytes();
    bytes.iter_mut().filter(|byte| **byte == b'~').for_each(|byte| *byte = 0xA0);
    let advisory = read_forecast("text", &bytes).advisory.unwrap();
    assert_eq!(without_places(advisory), without_places(read(&plain)));
}

#[test]
fn a_text_mirrored_to_the_south_reads_mirrored() {
    for name in names() {
        let plain = text(&name);
        let north = read(&plain);
        let south = read(&each_coordinate(&plain, 'N', |degrees| format!("{degrees:.1}S")));
        for (a, b) in north.points.iter().zip(&south.points) {
            assert!((a.position.latitude() + b.position.latitude()).abs() < 1e-9, "{name}");
            assert!((a.position.longitude() - b.position.longitude()).abs() < 1e-9, "{name}");
            assert_eq!(a.radii, b.radii, "{name}");
        }
        assert_eq!(north.points.len(), south.points.len(), "{name}");
    }
}

#[test]
fn a_track_across_the_date_line_reads_as_one_track() {
    // Shifted so that the second position lies just past 180 degrees.
    let plain = text("ep122024.fstadv.008.txt");
    let shifted = each_coordinate(&plain, 'W', |degrees| {
        let west = degrees + 65.0;
        if west > 180.0 { format!("{:.1}E", 360.0 - west) } else { format!("{west:.1}W") }
    });
    let advisory = read(&shifted);
    assert_eq!(codes(&shifted), Vec::<&str>::new());
    let longitudes: Vec<f64> = advisory.points.iter().map(|point| point.position.longitude()).collect();
    assert!((longitudes[0] + 178.9).abs() < 1e-9 && (longitudes[1] - 178.6).abs() < 1e-9, "{longitudes:?}");
}

/// The text with each "14.3N" (of the letter given) put through `change`.
fn each_coordinate(text: &str, letter: char, change: impl Fn(f64) -> String) -> String {
    text.split_inclusive([' ', '\n'])
        .map(|piece| {
            let word = piece.trim_end();
            let (coordinate, rest) = match word.find("...") {
                Some(dots) => word.split_at(dots),
                None => (word.trim_end_matches('.'), &word[word.trim_end_matches('.').len()..]),
            };
            let number = coordinate.strip_suffix(letter).filter(|number| number.contains('.'));
            match number.and_then(|number| number.parse().ok()) {
                Some(degrees) => format!("{}{rest}{}", change(degrees), &piece[word.len()..]),
                None => piece.to_owned(),
            }
        })
        .collect()
}

#[test]
fn the_end_of_the_month_of_the_year_and_of_february_are_passed_rightly() {
    // The text runs from the 23rd to the 28th; each case moves it to another date.
    let plain = text("ep122024.fstadv.008.txt");
    for issued in ["2023-12-30", "2024-02-26", "2023-02-26", "2024-04-28", "2023-01-29", "2099-12-31"] {
        let day = NaiveDate::parse_from_str(issued, "%Y-%m-%d").unwrap();
        let on = |offset: i64| day + Duration::days(offset);
        let dated = plain.replace("WED OCT 23 2024", &day.format("%a %b %d %Y").to_string().to_uppercase());
        let moved: String = dated
            .split_inclusive([' ', '\n'])
            .map(|piece| match piece.split_once('/') {
                Some((old, clock)) if clock.trim_end().ends_with('Z') => {
                    format!("{}/{clock}", on(old.parse::<i64>().unwrap() - 23).format("%d"))
                }
                _ => piece.to_owned(),
            })
            .collect();
        let advisory = read(&moved);
        assert_eq!(advisory.base.date_naive(), day);
        let days: Vec<NaiveDate> = advisory.points.iter().map(|point| point.valid.date_naive()).collect();
        assert_eq!(days, [0, 1, 1, 2, 2, 3, 3, 4, 5].map(on), "{issued}");
        assert_eq!(codes(&moved), Vec::<&str>::new(), "{issued}");
    }
}

#[test]
fn all_ways_of_saying_corrected_and_special_are_seen() {
    let plain = text("ep122024.fstadv.008.txt");
    let corrected = [
        plain.replace("KNHC 231441", "KNHC 231441 CCA"),
        plain.replace("KNHC 231441", "KNHC 231441 COR"),
        plain.replace("NUMBER   8", "NUMBER   8...CORRECTED"),
        plain.replace("NUMBER   8", "NUMBER\n8...CORRECTED"),
        plain.replace("EP122024\n", "EP122024\n...CORRECTION...EP9924 TO EP122024...\n"),
    ];
    for text in &corrected {
        assert!(read(text).is_corrected, "{text}");
        assert_eq!(read(text).storm.id.as_deref(), Some("EP122024"));
    }
    assert!(!read(&plain).is_corrected);
    for title in [
        "KRISTY SPECIAL FORECAST/ADVISORY",
        "KRISTY SP FORECAST/ADVISORY",
        "KRISTY \nSPECIAL FORECAST/ADVISORY",
    ] {
        let advisory = read(&plain.replace("KRISTY FORECAST/ADVISORY", title));
        assert!(advisory.is_special && advisory.storm.name == "KRISTY", "{title}");
    }
}

#[test]
fn classes_of_all_kinds_leave_the_name_alone() {
    let plain = text("ep122024.fstadv.008.txt");
    let classes = [
        ("TYPHOON MAYSAK", "TYPHOON", "MAYSAK"),
        ("SUPER TYPHOON MAYSAK", "SUPER TYPHOON", "MAYSAK"),
        ("TROPICAL CYCLONE FREDDY", "TROPICAL CYCLONE", "FREDDY"),
        ("REMNANTS OF KRISTY", "REMNANTS OF", "KRISTY"),
        ("TROPICAL DEPRESSION THIRTEEN-E", "TROPICAL DEPRESSION", "THIRTEEN-E"),
        ("POST-TROPICAL\nCYCLONE KRISTY", "POST-TROPICAL CYCLONE", "KRISTY"),
        ("VERY SEVERE STORM KRISTY", "VERY SEVERE STORM", "KRISTY"),
    ];
    for (title, class, name) in classes {
        let storm = read(&plain.replace("HURRICANE KRISTY", title)).storm;
        assert_eq!((storm.class.as_str(), storm.name.as_str()), (class, name));
    }
}

#[test]
fn seas_are_never_taken_for_wind() {
    let plain = text("ep122024.fstadv.008.txt");
    let expected = without_places(read(&plain));
    for seas in [
        "4 M SEAS....210NE 120SE  60SW 120NW.",
        "RADIUS IN NM OF 12 FT SEAS OR HIGHER  210NE 120SE 60SW 120NW.",
    ] {
        let text = plain.replace("12 FT SEAS..210NE 120SE  60SW 120NW.", seas);
        let mut found = without_places(read(&text));
        assert_eq!(found.points[0].seas.unwrap().reach, expected.points[0].seas.unwrap().reach, "{seas}");
        found.points[0].seas = expected.points[0].seas;
        assert_eq!(found, expected, "{seas}");
    }
}

#[test]
fn corrections_sort_after_what_they_replace_and_other_storms_apart() {
    let plain = text("ep122024.fstadv.008.txt");
    let first = read(&plain).key();
    let corrected = read(&plain.replace("KNHC 231441", "KNHC 231441 CCA")).key();
    let other = read(&text("ep102024.fstadv.006.txt")).key();
    assert!(first < corrected && other < first);
    assert_eq!(first, read(&plain.to_lowercase()).key());
    assert_eq!(read(&text("mal0191.001.txt")).key().storm, "ANA 1991");
}

#[test]
fn other_words_for_the_centre_are_understood() {
    let plain = text("ep122024.fstadv.008.txt");
    let expected = without_places(read(&plain));
    let free = plain.replace("EP122024\n", "EP122024\nA SQUALL IS DISSIPATING NEAR THE COAST.\n");
    for words in
        ["HURRICANE DISSIPATING NEAR", "CENTER LOCATED INLAND NEAR", "REMNANTS OF CENTER LOCATED NEAR"]
    {
        let text = free.replacen("HURRICANE CENTER LOCATED NEAR", words, 1);
        assert_eq!(without_places(read(&text)).points, expected.points, "{words}");
    }
}

#[test]
fn an_absorbed_storm_ends_and_unknown_words_are_kept() {
    let plain = text("ep122024.fstadv.008.txt");
    let absorbed = plain.replace(
        "OUTLOOK VALID 28/1200Z 21.0N 136.5W...POST-TROP/REMNT LOW\nMAX WIND  30 KT...GUSTS  40 KT.\n",
        "OUTLOOK VALID 28/1200Z...ABSORBED BY EXTRATROPICAL LOW\n",
    );
    let advisory = read(&absorbed);
    assert_eq!(advisory.ends, Some(Ending::Absorbed(at("2024-10-28T12:00"))));
    assert_eq!(advisory.points.len(), 8);
    let odd = plain.replace("136.5W...POST-TROP/REMNT LOW", "136.5W...NEARLY A WAVE");
    assert_eq!(read(&odd).points[8].qualifier, "NEARLY A WAVE");
}
