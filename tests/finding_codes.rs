//! Finding codes: each is documented, each is provoked by a test, and each belongs to the room that it names.
#![allow(clippy::unwrap_used, reason = "a test that cannot read the source must fail")]

use std::collections::{BTreeMap, BTreeSet};
use std::fs;
use std::path::{Path, PathBuf};

/// The words that codes begin with, and the room of each.
const ROOMS: [(&str, &str); 8] = [
    ("advisory", "advisory"),
    ("arrival", "arrival"),
    ("audit", "plan"),
    ("cli", "cli"),
    ("port", "port"),
    ("record", "record"),
    ("rules", "rules"),
    ("work", "work"),
];

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// All Rust files below a folder, with their texts.
fn texts_below(folder: &Path) -> Vec<(PathBuf, String)> {
    let mut texts = Vec::new();
    let mut folders = vec![folder.to_owned()];
    while let Some(folder) = folders.pop() {
        for entry in fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                folders.push(path);
            } else if path.extension().is_some_and(|extension| extension == "rs") {
                let text = fs::read_to_string(&path).unwrap();
                texts.push((path, text));
            }
        }
    }
    texts
}

/// Every code that stands between two `quotes` in a text.
fn codes_between(quote: char, text: &str) -> impl Iterator<Item = &str> {
    let is_code = |word: &&str| {
        let is_ours =
            ROOMS.iter().any(|(first, _)| word.strip_prefix(first).is_some_and(|rest| rest.starts_with('-')));
        is_ours
            && !word.ends_with('-')
            && word.chars().all(|letter| letter.is_ascii_lowercase() || letter == '-')
    };
    // Every other piece stands outside the quotes; none of those is a code and nothing else.
    text.split(quote).filter(is_code)
}

/// Every code in the source, with the rooms in which it stands.
fn codes_in_source() -> BTreeMap<String, BTreeSet<String>> {
    let source = root().join("src");
    let mut codes: BTreeMap<String, BTreeSet<String>> = BTreeMap::new();
    for (path, text) in texts_below(&source) {
        let room = path.strip_prefix(&source).unwrap().components().next().unwrap();
        for code in codes_between('"', &text) {
            codes.entry(code.to_owned()).or_default().insert(room.as_os_str().to_string_lossy().into_owned());
        }
    }
    codes
}

/// The codes that head a line of a table: the first cell of `| code | meaning |`, or of `| code, code | meaning |`.
fn documented_codes() -> Vec<String> {
    let mut codes = Vec::new();
    for page in ["rules/FINDINGS.md", "rules/README.md"] {
        let text = fs::read_to_string(root().join(page)).unwrap();
        for cell in text.lines().filter_map(|line| line.strip_prefix("| ")?.split(" | ").next()) {
            codes.extend(codes_between('`', cell).map(str::to_owned));
        }
    }
    codes
}

#[test]
fn every_code_is_documented_and_every_documented_code_exists() {
    let documented: BTreeSet<String> = documented_codes().into_iter().collect();
    let existing: BTreeSet<String> = codes_in_source().into_keys().collect();
    assert!(existing.len() > 200, "too few codes found: {}", existing.len());
    assert_eq!(existing.difference(&documented).collect::<Vec<_>>(), [""; 0], "not documented");
    assert_eq!(documented.difference(&existing).collect::<Vec<_>>(), [""; 0], "documented, and in no source");
}

#[test]
fn no_code_is_documented_twice() {
    let mut codes = documented_codes();
    codes.sort();
    let twice: Vec<_> = codes.windows(2).filter(|pair| pair[0] == pair[1]).map(|pair| &pair[0]).collect();
    assert_eq!(twice, [""; 0]);
}

#[test]
fn every_code_stands_in_the_room_that_it_names_and_in_no_other() {
    for (code, found) in codes_in_source() {
        let named = ROOMS.iter().find(|(first, _)| code.starts_with(&format!("{first}-"))).unwrap().1;
        assert_eq!(found.iter().collect::<Vec<_>>(), [named], "{code}");
    }
}

#[test]
fn every_code_is_provoked_by_a_test() {
    let this = root().join("tests/finding_codes.rs");
    let tests: String = texts_below(&root().join("tests"))
        .into_iter()
        .filter(|(path, _)| *path != this)
        .map(|(_, text)| text)
        .collect();
    let said: BTreeSet<&str> =
        tests.split(|letter: char| !letter.is_ascii_lowercase() && letter != '-').collect();
    let existing = codes_in_source();
    let unprovoked: Vec<&String> = existing.keys().filter(|code| !said.contains(code.as_str())).collect();
    assert_eq!(unprovoked, [""; 0]);
}
