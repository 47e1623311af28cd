//! What is said about faults in the files of a port and of its rules.

use snugdown::finding::fault::Finding;
use snugdown::finding::source::SourceText;
use snugdown::port::folder::{Folder, read_port};
use snugdown::rules::folder::{read_folder, read_rules};

/// The files of the small port.
const FILES: [(&str, &str); 8] = [
    ("port.toml", include_str!("data/small-port/port.toml")),
    ("water.toml", include_str!("data/small-port/water.toml")),
    ("berths.toml", include_str!("data/small-port/berths.toml")),
    ("ships.toml", include_str!("data/small-port/ships.toml")),
    ("plant.toml", include_str!("data/small-port/plant.toml")),
    ("means.toml", include_str!("data/small-port/means.toml")),
    ("rules.toml", include_str!("data/small-port/rules.toml")),
    ("tasks.toml", include_str!("data/small-port/tasks.toml")),
];

fn small_port() -> Folder {
    FILES.iter().map(|(name, text)| ((*name).to_owned(), SourceText::new(*name, *text))).collect()
}

fn listed(findings: &[Finding]) -> String {
    findings.iter().map(|finding| format!("{finding}\n")).collect()
}

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
