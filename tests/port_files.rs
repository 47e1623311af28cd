//! The files of a port read as a whole: clean, all faults at once, and whatever bytes come.

mod small_port;

use small_port::{FILES, edited, listed, small_port};
use snugdown::finding::fault::{Finding, has_error};
use snugdown::finding::source::SourceText;
use snugdown::port::folder::{Folder, read_port};
use snugdown::rules::folder::{read_folder, read_rules};

#[test]
fn the_small_port_reads_without_a_finding() {
    let (read, findings) = read_folder(&small_port());
    assert_eq!(listed(&findings), "");
    let (port, rules) = read.unwrap();
    assert_eq!((port.ships.len(), port.plant.len(), port.channels.len()), (2, 1, 1));
    assert_eq!((rules.stages.len(), rules.tasks.len(), rules.duties.len()), (3, 12, 1));
}

#[test]
fn the_rules_read_the_same_against_the_checked_port() {
    let folder = small_port();
    let (port, findings) = read_port(&folder);
    assert_eq!(listed(&findings), "");
    let (rules, findings) = read_rules(&folder, &port.unwrap());
    assert_eq!(listed(&findings), "");
    assert_eq!(rules, read_folder(&folder).0.map(|(_, rules)| rules));
}

#[test]
fn files_that_are_missing_or_misnamed_are_named() {
    let mut folder = small_port();
    let ships = folder.remove("ships.toml").unwrap();
    folder.insert("ship.toml".to_owned(), SourceText::new("ship.toml", ships.text()));
    folder.remove("tasks.toml");
    let (_, findings) = read_folder(&folder);
    let text = listed(&findings);
    assert!(
        text.contains("ship.toml:1:1 port-unknown-file (warning): the file ship.toml is not read"),
        "{text}"
    );
    assert!(text.contains("did you mean ships.toml?"), "{text}");
    assert!(text.contains("tasks.toml:1:1 rules-missing-file: there is no tasks.toml"), "{text}");
    let (_, findings) = read_folder(&Folder::new());
    let codes: Vec<&str> = findings.iter().map(|finding| finding.code).collect();
    assert_eq!(codes, ["port-missing-file", "rules-missing-file", "rules-missing-file"]);
}

#[test]
fn eleven_faults_in_seven_files_are_all_found_at_once_each_in_its_place() {
    let mut folder = small_port();
    let edits = [
        ("port.toml", "authority = \"Harbour Master\"", "autority = \"Harbour Master\""),
        ("port.toml", "position = \"22 27.0 N 040 57.5 W\"", "position = \"22 67.0 N 040 57.5 W\""),
        ("water.toml", "depth = \"10.6 m\"", "depth = 10.6"),
        ("ships.toml", "berth = \"Q1\"", "berth = \"Q9\""),
        ("ships.toml", "draught = \"5.6 m\"", "draught = \"560 m\""),
        ("plant.toml", "id = \"K1\"", "id = \"v01\""),
        ("means.toml", "[[pool]]\nid = \"pilot\"", "[[pool]\nid = \"pilot\""),
        ("rules.toml", "reckoning = { chance = \"10 %\" }", "reckoning = { chance = \"110 %\" }"),
        ("rules.toml", "stage = \"S2\"", "stage = \"S9\""),
        ("tasks.toml", "gate = \"S2\"", "gate = \"S9\""),
        ("tasks.toml", "needs = { pool = \"tug\", count = 2 }", "needs = { pool = \"tug\", count = 0 }"),
    ];
    for (file, old, new) in edits {
        let text = folder.get(file).unwrap().text().replacen(old, new, 1);
        assert!(text.contains(new), "{old} must stand in {file}");
        folder.insert(file.to_owned(), SourceText::new(file, text));
    }
    let (read, findings) = read_folder(&folder);
    assert!(read.is_none());
    let heads: Vec<String> =
        findings.iter().map(|finding| format!("{} {}", finding.place, finding.code)).collect();
    insta::assert_snapshot!(heads.join("\n"), @r"
    means.toml:3:8 port-syntax
    plant.toml:4:6 port-duplicate-id
    port.toml:3:1 port-missing-key
    port.toml:7:1 port-unknown-key
    port.toml:27:12 port-bad-position
    rules.toml:6:24 rules-bad-value
    rules.toml:45:9 rules-unknown-stage
    ships.toml:7:9 port-unknown-berth
    ships.toml:24:11 port-bad-value
    tasks.toml:111:8 rules-unknown-stage
    tasks.toml:125:33 rules-zero-count
    water.toml:18:9 port-no-unit
    ");
}

#[test]
fn a_file_that_is_not_toml_does_not_make_what_it_lists_unknown() {
    let broken =
        [("ships.toml", "[[ship]]\nid = \"V01\"", "[[ship]\nid = \"V01\""), ("port.toml", "[port]", "[port")];
    for (file, old, new) in broken {
        let (_, findings) = read_folder(&edited(file, old, new).0);
        let others: Vec<&Finding> = findings.iter().filter(|finding| finding.code != "port-syntax").collect();
        assert!(others.is_empty() && !findings.is_empty(), "{}", listed(&findings));
    }
}

#[test]
fn every_code_is_explained_and_has_its_test() {
    let codes = [include_str!("../src/port/codes.rs"), include_str!("../src/rules/codes.rs")].join("\n");
    let tests = [
        include_str!("port_files.rs"),
        include_str!("port_file_faults.rs"),
        include_str!("rules_file_faults.rs"),
        include_str!("high_seas.rs"),
    ];
    let guide = include_str!("../rules/README.md");
    let words = codes.split('"').filter(|word| word.starts_with("port-") || word.starts_with("rules-"));
    let words: Vec<&str> =
        words.filter(|word| word.bytes().all(|c| c.is_ascii_lowercase() || c == b'-')).collect();
    assert!(words.len() > 50, "{}", words.len());
    for word in words {
        assert!(guide.contains(&format!("`{word}`")), "{word} is not explained in rules/README.md");
        assert!(tests.iter().any(|test| test.contains(word)), "{word} is not provoked by a test");
    }
}

/// Spoils a text in many ways, chosen by a small generator so that a failure can be repeated.
fn spoilt(text: &str, seed: usize) -> String {
    let mut state = (seed as u64).wrapping_mul(0x9E37_79B9_7F4A_7C15) | 1;
    let mut next = |below: usize| {
        state ^= state << 13;
        state ^= state >> 7;
        state ^= state << 17;
        (state % below as u64) as usize
    };
    let pieces = [
        "\"",
        "[",
        "]]",
        "{",
        "}",
        "=",
        "\n",
        "nan",
        "-",
        "0",
        "'''",
        "\u{202e}",
        "é",
        "\0",
        "#",
        ".",
        "[[task]]\n",
    ];
    let mut bytes = text.as_bytes().to_vec();
    for _ in 0..=next(4) {
        let at = next(bytes.len());
        match next(3) {
            0 => bytes[at] = next(256) as u8,
            1 => drop(bytes.splice(at..at, pieces[next(pieces.len())].bytes())),
            _ => drop(bytes.drain(at..(at + next(60)).min(bytes.len()))),
        }
    }
    String::from_utf8_lossy(&bytes).into_owned()
}

#[test]
fn whatever_the_bytes_the_readers_say_something_and_do_not_panic() {
    for seed in 0..1500 {
        let (file, text) = FILES[seed % FILES.len()];
        let mut folder = small_port();
        folder.insert(file.to_owned(), SourceText::new(file, spoilt(text, seed)));
        let (read, findings) = read_folder(&folder);
        assert_eq!(read.is_none(), has_error(&findings), "seed {seed}:\n{}", listed(&findings));
        assert!(findings.iter().all(|finding| finding.place.line >= 1 && finding.place.column >= 1));
    }
}

#[test]
fn a_mebibyte_of_anything_is_read_in_good_time() {
    let garbage: String = (0..1_u32 << 20).map(|i| char::from((i % 8191 * 7919 % 127) as u8)).collect();
    let one_line = format!("x = [{}]", "{a=1},".repeat(170_000));
    let deep = format!("x = {}", "[".repeat(1 << 20));
    let deep_tables = format!("x = {}", "{a=".repeat(300_000));
    let keys: String = (0..60_000).map(|i| format!("key_{i} = 1\n")).collect();
    let ships = "[[ship]]\n".repeat(100_000);
    for text in [garbage, one_line, deep, deep_tables, keys, ships, String::new()] {
        for file in ["port.toml", "ships.toml", "tasks.toml"] {
            let mut folder = small_port();
            folder.insert(file.to_owned(), SourceText::new(file, text.clone()));
            let (_, findings) = read_folder(&folder);
            assert!(findings.len() < 500, "{file}: {}", findings.len());
        }
    }
}
