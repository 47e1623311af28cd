//! The demo storm walked by commands only: every event of its text recorded by the command for it gives the same plan.
//! `SNUGDOWN_LONG=1` walks to the end of the exercise, else through its first two days.
#![cfg(test)]

use serde_json::Value;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};
use toml::Table;

const SECOND_DAY: &str = "2026-09-16 00:10";
const END: &str = "2026-09-18 16:30";

fn run(arguments: &[String]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_snugdown")).args(arguments).stdin(Stdio::null()).output().unwrap()
}

/// A copy of the demo port without its record.
fn port() -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join("demo-by-commands");
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(folder.join("advisories")).unwrap();
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-port");
    for part in ["", "advisories"] {
        for entry in fs::read_dir(source.join(part)).unwrap() {
            let path = entry.unwrap().path();
            if path.is_file() && path.file_name().unwrap() != "events.toml" {
                fs::copy(&path, folder.join(part).join(path.file_name().unwrap())).unwrap();
            }
        }
    }
    folder
}

/// The command for what an event says.
fn command(folder: &Path, kind: &str, said: &Table) -> Vec<String> {
    let text = |key: &str| said[key].as_str().unwrap().to_owned();
    let option = |key: &str| {
        let value = said.get(key).and_then(toml::Value::as_str).filter(|value| *value != "unknown");
        value.map_or_else(Vec::new, |value| vec![format!("--{key}"), value.to_owned()])
    };
    let (name, what): (&str, Vec<String>) = match kind {
        "took_advisory" => ("take", vec![folder.join(text("file")).display().to_string()]),
        "done" => ("mark", [vec!["done".into(), text("task")], option("at"), option("evidence")].concat()),
        "started" => {
            let members = said.get("members").and_then(toml::Value::as_array).into_iter().flatten();
            let with = members.flat_map(|member| ["--with".to_owned(), member.as_str().unwrap().to_owned()]);
            ("mark", [vec!["started".into(), text("task")], option("at"), with.collect()].concat())
        }
        "cannot" => ("mark", vec!["cannot".into(), text("task")]),
        "not_needed" => ("mark", vec!["not-needed".into(), text("task")]),
        "takes" => ("tell", vec!["takes".into(), text("task"), text("in_all")]),
        "out" => ("tell", [vec!["out".into(), text("member")], option("from"), option("until")].concat()),
        "back" => ("tell", [vec!["back".into(), text("member")], option("from")].concat()),
        "sea" => ("tell", [vec!["sea".into(), text("place"), text("height")], option("at")].concat()),
        "observed" => (
            "tell",
            [vec!["wind".into(), text("place"), text("wind")], option("over"), option("at")].concat(),
        ),
        "adopts_arrival" => ("order", vec!["adopt".into(), text("place"), text("wind"), text("time")]),
        "declares" => ("order", [vec!["declare".into(), text("stage")], option("from")].concat()),
        "lifts" => ("order", [vec!["lift".into(), text("stage")], option("from")].concat()),
        "cuts" => ("order", vec!["cut".into(), text("task")]),
        "substitutes" => ("order", vec!["substitute".into(), text("task")]),
        "fixes" => ("order", vec!["fix".into(), text("task"), text("start")]),
        "issued" => ("order", vec!["issue".into()]),
        other => panic!("no command here for {other}"),
    };
    [vec![name.to_owned(), folder.display().to_string()], what].concat()
}

#[test]
fn the_demo_storm_walked_by_commands_gives_the_plan_that_its_text_gives() {
    let is_long = std::env::var_os("SNUGDOWN_LONG").is_some();
    let end = if is_long { END } else { SECOND_DAY };
    let folder = port();
    let demo = Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-port");
    let text: Table = fs::read_to_string(demo.join("events.toml")).unwrap().parse().unwrap();
    let mut recorded = 0;
    for event in text["event"].as_array().unwrap() {
        let event = event.as_table().unwrap();
        let known = event["at"].as_str().unwrap();
        if known > end {
            break;
        }
        let (kind, said) = event.iter().find(|(_, value)| value.is_table()).unwrap();
        let mut arguments = command(&folder, kind, said.as_table().unwrap());
        for (option, key) in [("--by", "by"), ("--reason", "reason")] {
            if let Some(value) = event.get(key).and_then(toml::Value::as_str) {
                arguments.extend([option.to_owned(), value.to_owned()]);
            }
        }
        arguments.extend(["--now".to_owned(), known.to_owned(), "--record-only".to_owned()]);
        let output = run(&arguments);
        assert!(output.status.success(), "{arguments:?}: {}", String::from_utf8_lossy(&output.stderr));
        recorded += 1;
    }
    let plan = |folder: &Path| -> Value {
        let call = ["plan", &folder.display().to_string(), "--now", end, "--json"].map(str::to_owned);
        // An advisory is kept under its own name, not that of the folder it came from.
        let text = String::from_utf8(run(&call).stdout).unwrap().replace("\"advisories/", "\"");
        serde_json::from_str(&text).unwrap()
    };
    let (walked, told) = (plan(&folder), plan(&demo));
    for part in [
        "advisory",
        "arrivals",
        "stage_in_force",
        "stages",
        "tasks",
        "duties",
        "joint",
        "clashes",
        "breaches",
        "fits",
    ] {
        assert_eq!(walked[part], told[part], "{part}");
    }
    let list =
        run(&["record".to_owned(), "list".to_owned(), folder.display().to_string(), "--json".to_owned()]);
    let list: Value = serde_json::from_slice(&list.stdout).unwrap();
    assert_eq!(list["events"].as_array().unwrap().len(), recorded);
    assert!(recorded > 20, "{recorded}");
}
