//! The house: imports run down the floors only, and files keep their shape.
#![allow(clippy::unwrap_used, reason = "a test that cannot read the source must fail")]

use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};

/// The floor of each room; a room may import from rooms on lower floors, and from itself.
const FLOORS: [(&str, u8); 20] = [
    ("units", 1),
    ("time", 1),
    ("finding", 1),
    ("geo", 2),
    ("text", 2),
    ("schedule", 2),
    ("tide", 2),
    ("advisory", 3),
    ("record", 3),
    ("wind", 4),
    ("port", 4),
    ("arrival", 5),
    ("rules", 5),
    ("work", 6),
    ("plan", 7),
    ("output", 8),
    ("store", 8),
    ("cli", 9),
    ("main", 10),
    ("lib", 0),
];

/// The longest file, in lines: more than that holds two things.
const LONGEST: usize = 450;

fn source_files() -> Vec<PathBuf> {
    let mut files = Vec::new();
    let mut folders = vec![Path::new(env!("CARGO_MANIFEST_DIR")).join("src")];
    while let Some(folder) = folders.pop() {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                folders.push(path);
            } else if path.extension().is_some_and(|extension| extension == "rs") {
                files.push(path);
            }
        }
    }
    files.sort();
    files
}

/// "arrival/odds" for src/arrival/odds.rs.
fn name_of(path: &Path) -> String {
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    path.strip_prefix(source).unwrap().with_extension("").to_string_lossy().replace('\\', "/")
}

fn room_of(name: &str) -> &str {
    name.split('/').next().unwrap_or(name)
}

/// The code of a file without comments: a path in prose is no import.
fn code_of(path: &Path) -> String {
    let text = std::fs::read_to_string(path).unwrap();
    let lines = text.lines().map(|line| line.split("//").next().unwrap_or_default());
    lines.collect::<Vec<&str>>().join("\n")
}

/// Every "room/file" that a file names by a `crate::` or `snugdown::` path, inline ones included. `super::` is refused
/// outside tests, so that no path escapes this reading.
fn imports_of(code: &str) -> BTreeSet<String> {
    let mut found = BTreeSet::new();
    for root in ["crate::", "snugdown::"] {
        for (at, _) in code.match_indices(root) {
            let rest = &code[at + root.len()..];
            let parts: Vec<&str> = rest
                .split("::")
                .map(|part| part.split(|c: char| !c.is_alphanumeric() && c != '_').next().unwrap_or_default())
                .take(2)
                .collect();
            if let [room, file] = parts[..]
                && !room.is_empty()
            {
                found.insert(format!("{room}/{file}"));
            }
        }
    }
    found
}

#[test]
fn imports_run_down_the_floors_only() {
    let floors: BTreeMap<&str, u8> = FLOORS.into_iter().collect();
    let mut wrong = Vec::new();
    for path in source_files() {
        let name = name_of(&path);
        let room = room_of(&name);
        let floor = floors.get(room).unwrap_or_else(|| panic!("{room} has no floor"));
        for import in imports_of(&code_of(&path)) {
            let other = room_of(&import);
            let other_floor =
                floors.get(other).unwrap_or_else(|| panic!("{name} imports {import}: no such room"));
            if other != room && other_floor >= floor {
                wrong.push(format!("{name} (floor {floor}) imports {import} (floor {other_floor})"));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn no_files_import_each_other_in_a_circle() {
    let mut edges: BTreeMap<String, BTreeSet<String>> = BTreeMap::new();
    for path in source_files() {
        let name = name_of(&path);
        let imports = imports_of(&code_of(&path)).into_iter().filter(|import| *import != name).collect();
        edges.insert(name, imports);
    }
    // Take away files that import nothing that is left; what remains is a circle.
    loop {
        let free: Vec<String> = edges
            .iter()
            .filter(|(_, imports)| imports.iter().all(|import| !edges.contains_key(import)))
            .map(|(name, _)| name.clone())
            .collect();
        if free.is_empty() {
            break;
        }
        for name in free {
            edges.remove(&name);
        }
    }
    assert!(edges.is_empty(), "in or above a circle: {:?}", edges.keys());
}

#[test]
fn every_file_says_first_what_it_holds_and_holds_one_thing() {
    let mut wrong = Vec::new();
    for path in source_files() {
        let text = std::fs::read_to_string(&path).unwrap();
        let name = name_of(&path);
        if !text.starts_with("//! ") {
            wrong.push(format!("{name} does not say in its first line what it holds"));
        }
        let lines = text.lines().count();
        if lines > LONGEST {
            wrong.push(format!("{name} has {lines} lines"));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn nothing_is_imported_whole_or_passed_on() {
    let mut wrong = Vec::new();
    for path in source_files() {
        let name = name_of(&path);
        let code = code_of(&path);
        let before_tests = code.split("#[cfg(test)]").next().unwrap_or_default();
        for (what, pattern) in [("a glob", "::*;"), ("a pub use", "pub use "), ("a super:: path", "super::")]
        {
            if before_tests.contains(pattern) {
                wrong.push(format!("{name} has {what}"));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn only_the_command_line_reads_clocks_files_or_prints() {
    let mut wrong = Vec::new();
    for path in source_files() {
        let name = name_of(&path);
        if matches!(room_of(&name), "cli" | "main") {
            continue;
        }
        let code = code_of(&path);
        for pattern in ["std::fs", "std::env", "Utc::now", "SystemTime", "println!", "print!", "eprintln!"] {
            // The store is the record's file; time is given to it.
            let is_allowed = room_of(&name) == "store" && pattern == "std::fs";
            if code.contains(pattern) && !is_allowed {
                wrong.push(format!("{name} uses {pattern}"));
            }
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}
