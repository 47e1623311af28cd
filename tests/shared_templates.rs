//! Templates that share an id: one task of a ship in several forms.

mod common;

use common::Reading;
use snugdown::finding::fault::Finding;
use snugdown::finding::source::SourceText;
use snugdown::rules::folder::read_rules;
use snugdown::work::expand::expand;
use std::collections::BTreeMap;

/// The findings on two templates named "wash", for these ships, in the small port.
fn findings(first: &str, second: &str) -> Vec<Finding> {
    let reading = Reading::folder("tests/data/small-port");
    let rules = include_str!("data/small-port/rules.toml").split("[[duty]]").next().unwrap_or_default();
    let template = |pick: &str| {
        format!(
            "[[task]]\nid = \"wash\"\nname = \"Wash {{name}}\"\nfor_each = {pick}\ntakes = \"1 h\"\nwho = \"Master\"\nstake = \"order\"\n"
        )
    };
    let first_task = "[[task]]\nid = \"H1\"\nname = \"Tell agents\"\ntakes = \"1 h\"\nwho = \"Office\"\nstake = \"order\"\n";
    let tasks = format!("{first_task}{}{}", template(first), template(second));
    let files = [("rules.toml", rules.to_owned()), ("tasks.toml", tasks)];
    let folder: BTreeMap<String, SourceText> =
        files.into_iter().map(|(name, text)| (name.to_owned(), SourceText::new(name, text))).collect();
    let (read, mut findings) = read_rules(&folder, &reading.port);
    findings.extend(read.map(|rules| expand(&reading.port, &rules).1).unwrap_or_default());
    findings
}

#[test]
fn templates_for_different_ships_may_share_an_id() {
    assert_eq!(findings("{ ships = { ids = [\"V01\"] } }", "{ ships = { ids = [\"V02\"] } }"), []);
}

#[test]
fn two_templates_of_one_id_for_the_same_ship_are_found() {
    let found = findings("{ ships = { ids = [\"V01\"] } }", "{ ships = {} }");
    let codes: Vec<&str> = found.iter().map(|finding| finding.code).collect();
    assert_eq!(codes, ["work-double-task"]);
}
