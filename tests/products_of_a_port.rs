//! Every product that a port's record may take: decks with what picks from them, drills, second centres.
#![cfg(test)]

use serde_json::Value;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output};

fn run(arguments: &[&str]) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.env_remove("COLUMNS").current_dir(env!("CARGO_MANIFEST_DIR")).args(arguments).output().unwrap()
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).unwrap()
}

/// A copy of the small port with its clock at `clock`, its pilot station at `position`, these files beside it and these
/// events.
fn port(name: &str, (clock, position): (&str, &str), files: &[(&str, &str)], events: &str) -> PathBuf {
    let root = Path::new(env!("CARGO_MANIFEST_DIR"));
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    for entry in fs::read_dir(root.join("tests/data/small-port")).unwrap() {
        let path = entry.unwrap().path();
        fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
    }
    for (from, to) in files {
        fs::copy(root.join("tests/data").join(from), folder.join(to)).unwrap();
    }
    let port = fs::read_to_string(folder.join("port.toml")).unwrap();
    let port = port.replace("2026-09-17T06:20-03:00", clock).replace("22 24.0 N 040 54.0 W", position);
    fs::write(folder.join("port.toml"), port).unwrap();
    fs::write(folder.join("events.toml"), events).unwrap();
    folder
}

fn took(at: &str, said: &str) -> String {
    format!("[[event]]\nat = \"{at}\"\nby = \"Duty officer\"\ntook_advisory = {{ {said} }}\n\n")
}

const FLORENCE: (&str, &str) = ("2018-09-03T10:00Z", "22 00.0 N 050 00.0 W");
const GUSTAV: (&str, &str) = ("2008-08-29T19:00Z", "29 54.0 N 090 05.0 W");

#[test]
fn a_deck_gives_the_latest_forecast_that_had_come_or_the_one_that_is_named() {
    let files = [("deck/al062018.a.dat", "deck.dat")];
    let plain = took("2018-09-03T09:30Z", "file = \"deck.dat\"");
    let named = took("2018-09-03T09:40Z", "file = \"deck.dat\", cycle = \"2018090300\"");
    let told = |name: &str, events: &str| {
        let folder = port(name, FLORENCE, &files, events);
        let output = run(&["arrivals", folder.to_str().unwrap(), "--json"]);
        let out: Value =
            serde_json::from_slice(&output.stdout).unwrap_or_else(|_| panic!("{}", text(&output.stderr)));
        (
            out["forecast"]["file"].as_str().unwrap().to_owned(),
            out["forecast"]["base"].as_str().unwrap().to_owned(),
        )
    };
    assert_eq!(told("deck-plain", &plain), ("deck.dat".to_owned(), "2018-09-03T06:00:00Z".to_owned()));
    assert_eq!(
        told("deck-named", &named),
        ("deck.dat (2018090300)".to_owned(), "2018-09-03T00:00:00Z".to_owned())
    );
    // Of both the newer issue counts, whichever was taken later.
    assert_eq!(told("deck-both", &(plain + &named)).1, "2018-09-03T06:00:00Z");
}

#[test]
fn a_deck_without_the_forecast_that_is_named_says_what_it_holds() {
    let files = [("deck/al062018.a.dat", "deck.dat")];
    let event = took("2018-09-03T09:30Z", "file = \"deck.dat\", technique = \"JTWC\"");
    let folder = port("deck-lacks", FLORENCE, &files, &event);
    let output = run(&["check", folder.to_str().unwrap()]);
    assert_eq!(output.status.code(), Some(3));
    let told = text(&output.stdout) + &text(&output.stderr);
    assert!(told.contains("the deck holds no forecast by JTWC; it holds CARQ, OFCL"), "{told}");
    let picked = run(&["arrivals", folder.to_str().unwrap(), "--technique", "OFCL"]);
    assert_eq!(picked.status.code(), Some(2));
}

#[test]
fn a_drill_is_planned_on_and_says_that_it_is_no_forecast() {
    let files = [("best-track/al072008.b.dat", "gustav.dat")];
    let event = took("2008-08-29T18:30Z", "file = \"gustav.dat\", cycle = \"2008082918\"");
    let folder = port("drill", GUSTAV, &files, &event);
    let path = folder.to_str().unwrap();
    let plan = text(&run(&["plan", path]).stdout);
    assert!(plan.contains("DRILL - not a forecast: made from the best"), "{plan}");
    let now = text(&run(&["now", path]).stdout);
    assert!(now.contains("DRILL - not a forecast"), "{now}");
    let arrivals = text(&run(&["arrivals", path, "--width", "200"]).stdout);
    assert!(arrivals.contains("THIS IS NO FORECAST: it tells what happened"), "{arrivals}");
    let json = run(&["arrivals", path, "--json"]);
    let out: Value = serde_json::from_slice(&json.stdout).unwrap();
    assert_eq!(out["forecast"]["drill"], Value::from(true));
    // The drill comes true: on its own track gales come when the best track brought them, on 31 August or 1 September.
    let single = out["places"][0]["thresholds"][0]["single_track"].as_str().unwrap();
    assert!(single.starts_with("2008-08-31") || single.starts_with("2008-09-01"), "{single}");
    // And it has the doubts of a forecast.
    let chance = out["places"][0]["thresholds"][0]["chance"].as_f64().unwrap();
    assert!(chance > 0.4 && chance < 1.0, "{chance}");
}

#[test]
fn a_port_that_holds_no_drill_never_plans_on_a_best_track() {
    let files = [("best-track/al072008.b.dat", "gustav.dat")];
    let event = took("2008-08-29T18:30Z", "file = \"gustav.dat\", cycle = \"2008082918\"");
    let folder = port("drill-in-earnest", GUSTAV, &files, &event);
    let file = folder.join("port.toml");
    let earnest =
        fs::read_to_string(&file).unwrap().replace("[exercise]", "").replace("clock = \"2008", "#\"2008");
    fs::write(&file, earnest).unwrap();
    let output = run(&["plan", folder.to_str().unwrap(), "--now", "2008-08-29 16:00"]);
    assert_eq!(output.status.code(), Some(3));
    assert!(text(&output.stderr).contains("cli-drill-in-earnest"), "{}", text(&output.stderr));
}

#[test]
fn a_second_centre_is_warned_of_when_its_advisory_is_taken() {
    let files = [("deck/al062018.a.dat", "deck.dat")];
    let events = took("2018-09-03T09:30Z", "file = \"deck.dat\"");
    let ordered = took("2018-09-03T09:30Z", "file = \"deck.dat\", by_order = true");
    let with_issuer = |name: &str, events: &str| {
        let folder = port(name, FLORENCE, &files, events);
        let file = folder.join("port.toml");
        let text = fs::read_to_string(&file).unwrap();
        fs::write(&file, text.replacen("authority =", "official_issuer = [\"RSMC TOKYO\"]\nauthority =", 1))
            .unwrap();
        run(&["plan", folder.to_str().unwrap()])
    };
    let second = with_issuer("second-centre", &events);
    assert!(text(&second.stderr).contains("cli-second-centre"), "{}", text(&second.stderr));
    assert!(text(&second.stdout).contains("NONE TAKEN"), "{}", text(&second.stdout));
    assert!(
        text(&second.stdout).contains("YOUR OFFICIAL SOURCE HAS NOT TOLD OF THIS"),
        "{}",
        text(&second.stdout)
    );
    let by_order = with_issuer("second-by-order", &ordered);
    assert!(!text(&by_order.stderr).contains("cli-second-centre"));
    assert!(text(&by_order.stdout).contains("on FLORENCE"), "{}", text(&by_order.stdout));
}

#[test]
fn a_joint_warning_is_taken_like_any_other_advisory() {
    let files = [("joint-warning/wp222026.warning.005.txt", "w.txt")];
    let position = ("2026-09-02T10:00Z", "26 00.0 N 128 00.0 E");
    let folder = port("joint", position, &files, &took("2026-09-02T09:30Z", "file = \"w.txt\""));
    let output = run(&["arrivals", folder.to_str().unwrap(), "--json"]);
    let out: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(out["forecast"]["issuer"], Value::from("JOINT TYPHOON WARNING CENTER"));
    assert_eq!(out["forecast"]["averaging_s"], Value::from(60));
}

#[test]
fn two_storms_are_told_together_and_by_name() {
    let storm = fs::read_to_string("tests/data/small-port/approach.txt").unwrap();
    let mut other = storm.replace("OSKELA", "PERIL").replace("AL992026", "AL982026");
    for (from, to) in [
        ("20.0N  34.5W", "13.0N  37.0W"),
        ("19.8N  34.0W", "12.8N  36.7W"),
        ("20.5N  36.1W", "14.5N  38.0W"),
        ("21.1N  38.0W", "16.5N  39.0W"),
        ("21.8N  39.7W", "18.5N  40.0W"),
        ("22.8N  41.2W", "20.5N  41.0W"),
        ("25.5N  42.5W", "25.0N  42.0W"),
        ("29.0N  41.5W", "30.0N  41.0W"),
    ] {
        other = other.replace(from, to);
    }
    let events = took("2026-09-17T12:05-03:00", "file = \"approach.txt\"")
        + &took("2026-09-17T12:30-03:00", "file = \"other.txt\"");
    let clock = ("2026-09-17T13:00-03:00", "22 24.0 N 040 54.0 W");
    let folder = port("two-storms", clock, &[], &events);
    fs::write(folder.join("other.txt"), other).unwrap();
    let path = folder.to_str().unwrap();
    let plan = text(&run(&["plan", path, "--width", "200"]).stdout);
    assert!(plan.contains("9 on OSKELA") && plan.contains("9 on PERIL"), "{plan}");
    assert!(plan.contains("OSKELA brings it first"), "{plan}");
    let now = text(&run(&["now", path]).stdout);
    assert!(now.contains("on OSKELA, PERIL"), "{now}");
    let arrivals = text(&run(&["arrivals", path, "--width", "200"]).stdout);
    let arrivals = arrivals.split_whitespace().collect::<Vec<&str>>().join(" ");
    assert!(arrivals.contains("what stands below is of all storms together"), "{arrivals}");
    assert!(arrivals.contains("OSKELA brings it first in"), "{arrivals}");
    let out: Value = serde_json::from_slice(&run(&["plan", path, "--json"]).stdout).unwrap();
    assert_eq!(out["other_advisories"][0]["storm"], Value::from("PERIL"));
    assert_eq!(out["arrivals"][0]["storm"], Value::from("OSKELA"));
    assert_eq!(out["breaches"].as_array().unwrap().len(), 0);
}
