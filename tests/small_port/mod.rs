//! The small invented port of tests/data/small-port, as it is or with one piece changed.
#![allow(dead_code, reason = "each test file uses its own share of these")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "test helpers fail by panicking")]

use snugdown::finding::fault::{Finding, Severity};
use snugdown::finding::source::SourceText;
use snugdown::port::folder::Folder;
use snugdown::rules::folder::read_folder;

/// The files of the small port.
pub const FILES: [(&str, &str); 8] = [
    ("port.toml", include_str!("../data/small-port/port.toml")),
    ("water.toml", include_str!("../data/small-port/water.toml")),
    ("berths.toml", include_str!("../data/small-port/berths.toml")),
    ("ships.toml", include_str!("../data/small-port/ships.toml")),
    ("plant.toml", include_str!("../data/small-port/plant.toml")),
    ("means.toml", include_str!("../data/small-port/means.toml")),
    ("rules.toml", include_str!("../data/small-port/rules.toml")),
    ("tasks.toml", include_str!("../data/small-port/tasks.toml")),
];

/// The small port's folder.
pub fn small_port() -> Folder {
    FILES.iter().map(|(name, text)| ((*name).to_owned(), SourceText::new(*name, *text))).collect()
}

/// All findings, one a line.
pub fn listed(findings: &[Finding]) -> String {
    findings.iter().map(|finding| format!("{finding}\n")).collect()
}

/// The small port with one piece of one file replaced; `^` in the new text marks where the finding must stand.
pub fn edited(file: &str, old: &str, new: &str) -> (Folder, usize, usize) {
    let mut folder = small_port();
    let text = folder.get(file).unwrap().text().to_owned();
    assert_eq!(text.matches(old).count(), 1, "{old} must stand once in {file}");
    let marked = text.replacen(old, new, 1);
    let before = marked.split('^').next().unwrap();
    let line = before.matches('\n').count() + 1;
    let column = before.rsplit('\n').next().unwrap().chars().count() + 1;
    folder.insert(file.to_owned(), SourceText::new(file, marked.replacen('^', "", 1)));
    (folder, line, column)
}

/// Replaces `old` by `new` in `file`: exactly one finding, with this code, at the mark, saying these words.
pub fn provokes(file: &str, (old, new): (&str, &str), code: &str, words: &[&str]) {
    let (folder, line, column) = edited(file, old, new);
    let (read, findings) = read_folder(&folder);
    let [finding] = findings.as_slice() else { panic!("one finding, not\n{}", listed(&findings)) };
    let text = finding.to_string();
    assert_eq!((finding.code, finding.place.file.as_str()), (code, file), "{text}");
    assert_eq!((finding.place.line, finding.place.column), (line, column), "{text}");
    for word in words {
        assert!(text.contains(word), "\"{word}\" is not said in {text}");
    }
    assert_eq!(read.is_some(), finding.severity == Severity::Warning, "{text}");
}
