//! The commands that record: each adds events, plans again and says what changed; nothing is lost, doubled or overwritten.
#![cfg(test)]

use serde_json::Value;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

const TEXT: &str = include_str!("data/small-port/approach.txt");

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).unwrap()
}

/// The small port without a record, under this name.
fn port(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("commands-{name}"));
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/small-port");
    for entry in fs::read_dir(source).unwrap() {
        let path = entry.unwrap().path();
        if path.file_name().unwrap() != "events.toml" {
            fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
        }
    }
    folder
}

fn run(folder: &Path, arguments: &[&str]) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.env_remove("COLUMNS").current_dir(folder).args(arguments).stdin(Stdio::null()).output().unwrap()
}

/// Records something at a time of Thursday, without planning again, and gives what was said.
fn record(folder: &Path, at: &str, arguments: &[&str]) -> Output {
    record_and_plan(folder, at, &[arguments, &["--record-only"]].concat())
}

/// Records something at a time of Thursday, plans again, and gives what was said.
fn record_and_plan(folder: &Path, at: &str, arguments: &[&str]) -> Output {
    let now = format!("2026-09-17 {at}");
    let by = ["--by", "Duty officer", "--now", &now];
    run(folder, &[&arguments[..1], &["."], &arguments[1..], &by].concat())
}

/// The same, which must be recorded; what was told on standard output and standard error.
fn recorded(folder: &Path, at: &str, arguments: &[&str]) -> (String, String) {
    let output = record(folder, at, arguments);
    let (out, told) = (text(&output.stdout), text(&output.stderr));
    assert_eq!(output.status.code(), Some(0), "{arguments:?}: {told}");
    assert!(out.starts_with("recorded: event "), "{arguments:?}: {out}{told}");
    (out, told)
}

fn list(folder: &Path) -> Vec<Value> {
    let output = run(folder, &["record", "list", ".", "--json"]);
    assert_eq!(output.status.code(), Some(0), "{}", text(&output.stderr));
    let list: Value = serde_json::from_slice(&output.stdout).unwrap();
    list["events"].as_array().unwrap().clone()
}

fn words(folder: &Path) -> Vec<String> {
    list(folder).iter().map(|event| event["words"].as_str().unwrap().to_owned()).collect()
}

fn plan(folder: &Path, at: &str) -> Value {
    let output = run(folder, &["plan", ".", "--json", "--now", &format!("2026-09-17 {at}")]);
    serde_json::from_slice(&output.stdout).unwrap()
}

fn task(plan: &Value, id: &str) -> Value {
    plan["tasks"].as_array().unwrap().iter().find(|task| task["id"] == id).unwrap().clone()
}

#[test]
fn an_advisory_taken_is_kept_in_the_record_and_planned_on() {
    let folder = port("take");
    let out = text(&record_and_plan(&folder, "12:10", &["take", "approach.txt"]).stdout);
    assert!(out.starts_with("recorded: event 1, chain "), "{out}");
    assert!(out.contains("news      approach.txt taken (Duty officer)") && out.contains("verdict"), "{out}");
    // The record alone holds it.
    fs::remove_file(folder.join("approach.txt")).unwrap();
    assert_eq!(plan(&folder, "12:20")["advisory"]["file"], "approach.txt");
}

#[test]
fn what_a_fact_changed_is_told_in_a_few_lines_with_what_no_longer_fits_first() {
    let folder = port("changes");
    recorded(&folder, "12:05", &["take", "approach.txt"]);
    // P1 is the only pilot for the larger ship.
    let told = record_and_plan(&folder, "12:30", &["tell", "out", "P1", "--reason", "ill"]);
    let out = text(&told.stdout);
    assert_eq!(told.status.code(), Some(0), "{out}");
    let at = |words: &str| out.find(words).unwrap_or_else(|| panic!("{words} is not in {out}"));
    assert!(at("news      P1 out of service (Duty officer: ill)") < at("NO LONGER FITS: "));
    assert!(at("V01/sail") < at("verdict   ") && out.contains("CANNOT BE DONE IN TIME"), "{out}");
    assert!(out.lines().count() <= 20, "{out}");
}

#[test]
fn the_same_bytes_taken_twice_are_recorded_once() {
    let folder = port("twice");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    fs::copy(folder.join("approach.txt"), folder.join("again.txt")).unwrap();
    let again = record(&folder, "12:20", &["take", "again.txt"]);
    assert_eq!((again.status.code(), text(&again.stdout)), (Some(0), String::new()));
    assert!(text(&again.stderr).contains("taken already, as event 1"), "{}", text(&again.stderr));
    assert_eq!(list(&folder).len(), 1);
}

/// The forecast six hours earlier.
fn older() -> String {
    let older = TEXT.replace("17/1500Z", "17/0900Z").replace("17/1200Z", "17/0600Z");
    older.replace("1500 UTC THU SEP 17", "0900 UTC THU SEP 17")
}

#[test]
fn a_late_advisory_is_told_and_does_not_come_into_force() {
    let folder = port("order");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    fs::write(folder.join("older.txt"), older()).unwrap();
    let (_, told) = recorded(&folder, "12:20", &["take", "older.txt"]);
    assert!(told.contains("issued before approach.txt, which stays in force"), "{told}");
    assert!(told.contains("it comes in 6 h 20 min after its issue"), "{told}");
    assert_eq!(plan(&folder, "12:30")["advisory"]["file"], "approach.txt");
}

#[test]
fn another_text_of_the_same_advisory_is_told_and_keeps_a_name_of_its_own() {
    let folder = port("same-number");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    fs::create_dir(folder.join("new")).unwrap();
    fs::write(folder.join("new/approach.txt"), TEXT.to_owned() + "\n").unwrap();
    let (_, told) = recorded(&folder, "12:20", &["take", "new/approach.txt"]);
    assert!(told.contains("has the same number and time of issue, and another text"), "{told}");
    assert_eq!(plan(&folder, "12:30")["advisory"]["file"], "approach-2.txt");
}

#[test]
fn an_advisory_of_another_storm_is_refused_until_it_is_meant() {
    let folder = port("other-storm");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    let id = TEXT.split_whitespace().find(|word| word.len() == 8 && word.ends_with("2026")).unwrap();
    let other = format!("{}31{}", &id[..2], &id[4..]);
    fs::write(folder.join("other.txt"), TEXT.replace(id, &other)).unwrap();
    let refused = record(&folder, "12:20", &["take", "other.txt"]);
    assert_eq!(refused.status.code(), Some(2), "{}", text(&refused.stderr));
    assert!(text(&refused.stderr).contains("--other-storm"), "{}", text(&refused.stderr));
    recorded(&folder, "12:20", &["take", "other.txt", "--other-storm"]);
}

#[test]
fn an_advisory_taken_by_mistake_is_withdrawn_and_can_be_taken_again() {
    let folder = port("mistake");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    recorded(&folder, "12:12", &["withdraw", "1", "--reason", "wrong file"]);
    assert_eq!(plan(&folder, "12:20")["advisory"], Value::Null);
    recorded(&folder, "12:12", &["take", "approach.txt"]);
    assert_eq!(plan(&folder, "12:20")["advisory"]["file"], "approach.txt");
    // What was planned before is still to be seen.
    assert_eq!(plan(&folder, "12:11")["advisory"]["file"], "approach.txt");
    assert_eq!(list(&folder)[0]["withdrawn"], true);
}

#[test]
fn half_a_forecast_is_refused_and_nothing_is_recorded() {
    let folder = port("half");
    fs::write(folder.join("half.txt"), &TEXT[..TEXT.len() / 3]).unwrap();
    let refused = record(&folder, "12:10", &["take", "half.txt"]);
    assert_eq!((refused.status.code(), refused.stdout.len()), (Some(3), 0));
    assert!(!folder.join("record.sqlite").exists());
}

#[test]
fn one_command_marks_many_tasks_in_one_piece() {
    let folder = port("mark");
    let (out, _) = recorded(&folder, "12:10", &["mark", "done", "H1", "H2", "--at", "2026-09-17 11:00"]);
    assert!(out.starts_with("recorded: event 2, chain "), "{out}");
    assert_eq!(task(&plan(&folder, "12:20"), "H2")["state"], "done");
    let wrong = record(&folder, "12:20", &["mark", "done", "V01/secure", "V01/sial"]);
    assert_eq!(wrong.status.code(), Some(3));
    assert!(text(&wrong.stderr).contains("did you mean \"V01/sail\"?"), "{}", text(&wrong.stderr));
    assert_eq!(list(&folder).len(), 2);
}

#[test]
fn every_kind_of_progress_is_recorded_with_who_when_and_evidence() {
    let folder = port("progress");
    fs::write(folder.join("photo.jpg"), b"abc").unwrap();
    let one = |arguments: &[&str]| recorded(&folder, "12:10", arguments);
    one(&["mark", "started", "V01/secure", "--with", "L1", "--name", "A. Quill"]);
    one(&["mark", "done", "H1", "--evidence", "signed", "--proof", "photo.jpg"]);
    one(&["mark", "cannot", "Q1/clear", "--reason", "no crane"]);
    one(&["mark", "not-needed", "Q2/clear"]);
    assert_eq!(
        words(&folder),
        [
            "V01/secure begun (A. Quill, Duty officer)",
            "H1 done (Duty officer)",
            "Q1/clear cannot be done (Duty officer: no crane)",
            "Q2/clear not needed (Duty officer)",
        ]
    );
    let review =
        text(&run(&folder, &["record", "review", ".", "--now", "2026-09-17 12:20", "--as", "csv"]).stdout);
    // The SHA-256 of "abc" is the example of FIPS 180-4.
    assert!(review.contains("SHA-256 ba7816bf8f01cfea"), "{review}");
    for lost in [
        ["mark", "started", "H1", "--evidence", "x"],
        ["mark", "done", "H1", "--with", "T1"],
        ["mark", "cannot", "H1", "--at", "2026-09-17 11:00"],
    ] {
        assert_eq!(record(&folder, "12:30", &lost).status.code(), Some(2), "{lost:?}");
    }
}

#[test]
fn every_fact_has_its_command() {
    let folder = port("tell");
    for fact in [
        &["out", "T1", "--until", "2026-09-17 20:00"][..],
        &["back", "T1"],
        &["out", "pilot", "--from", "2026-09-18 06:00"],
        &["stops", "tug", "--from", "2026-09-18 07:00"],
        &["resumes", "tug", "--from", "2026-09-18 08:00"],
        &["ready", "V01/sail", "2026-09-17 15:00"],
        &["takes", "V01/secure", "5 h"],
        &["left", "V02/secure", "2 h"],
        &["stops", "rail bridge", "--from", "2026-09-17 20:00"],
        &["resumes", "rail bridge", "--from", "2026-09-18 20:00"],
        &["unusable", "Q1"],
        &["usable", "Q1", "--from", "2026-09-17 14:00"],
        &["depth", "main", "11.5 m"],
        &["signal", "two balls"],
        &["evacuation", "low town", "--from", "2026-09-17 18:00"],
        &["curfew", "island"],
        &["wind", "pilot-station", "24 kt", "--over", "10 min"],
        &["sea", "pilot-station", "3.2 m", "--at", "2026-09-17 12:00"],
        &["anchorage", "quays", "full"],
    ] {
        recorded(&folder, "12:10", &[&["tell"], fact, &[]].concat());
    }
    let said: Vec<String> = words(&folder)
        .iter()
        .map(|words| words.strip_suffix(" (Duty officer)").unwrap().to_owned())
        .collect();
    let expected = [
        "T1 out of service until Thu 17 Sep 20:00 -03 (23:00Z)",
        "T1 back in service",
        "pilot out of service from Fri 18 Sep 06:00 -03 (09:00Z)",
        "tug out of service from Fri 18 Sep 07:00 -03 (10:00Z)",
        "tug back in service from Fri 18 Sep 08:00 -03 (11:00Z)",
        "V01/sail not before Thu 17 Sep 15:00 -03 (18:00Z)",
        "V01/secure takes 5 h",
        "V02/secure still takes 2 h",
        "rail bridge stops from Thu 17 Sep 20:00 -03 (23:00Z)",
        "rail bridge works again from Fri 18 Sep 20:00 -03 (23:00Z)",
        "Q1 cannot be used from Thu 17 Sep 12:10 -03 (15:10Z)",
        "Q1 can be used again from Thu 17 Sep 14:00 -03 (17:00Z)",
        "no draught over 11.5 m at main from Thu 17 Sep 12:10 -03 (15:10Z)",
        "signal two balls shown from Thu 17 Sep 12:10 -03 (15:10Z)",
        "low town evacuated from Thu 17 Sep 18:00 -03 (21:00Z)",
        "curfew in island from Thu 17 Sep 12:10 -03 (15:10Z)",
        "24 kt (10-min mean) observed at pilot-station",
        "sea of 3.2 m observed at pilot-station Thu 17 Sep 12:00 -03 (15:00Z)",
        "anchorage quays full from Thu 17 Sep 12:10 -03 (15:10Z)",
    ];
    assert_eq!(said, expected);
    let notes = plan(&folder, "12:20")["notes"].to_string();
    for standing in
        ["rail bridge stops from", "no draught over 11.5 m", "signal two balls", "anchorage quays full"]
    {
        assert!(notes.contains(standing), "{standing}: {notes}");
    }
}

#[test]
fn every_order_has_its_command() {
    let folder = port("order-kinds");
    for order in [
        &["adopt", "pilot-station", "34 kt", "2026-09-18 09:00"][..],
        &["unadopt", "pilot-station", "34 kt"],
        &["declare", "S1"],
        &["advance", "S2", "2026-09-17 18:00"],
        &["hold", "S2", "--until", "2026-09-17 20:00"],
        &["skip", "S2"],
        &["lift", "S1"],
        &["fix", "V02/sail", "2026-09-17 16:00"],
        &["release", "V02/sail"],
        &["cut", "V01/secure"],
        &["substitute", "V01/sail"],
        &["stay", "V02", "--conditions", "engines ready", "--until", "2026-09-20 06:00"],
        &["waive", "two tugs for V01", "--until", "2026-09-17 18:00", "--conditions", "daylight"],
        &["refuse", "V02 to shift"],
        &["issue"],
    ] {
        let who = ["--name", "A. Quill", "--for", "Harbour Master", "--reason", "test"];
        recorded(&folder, "12:10", &[&["order"], order, &who].concat());
    }
    let said: Vec<String> = words(&folder)
        .iter()
        .map(|words| {
            words.strip_suffix(" (A. Quill, Duty officer for Harbour Master: test)").unwrap().to_owned()
        })
        .collect();
    let expected = [
        "arrival of 34 kt at pilot-station adopted for Fri 18 Sep 09:00 -03 (12:00Z)",
        "adopted arrival of 34 kt at pilot-station withdrawn",
        "stage S1 declared",
        "stage S2 declared from Thu 17 Sep 18:00 -03 (21:00Z)",
        "stage S2 held until Thu 17 Sep 20:00 -03 (23:00Z)",
        "stage S2 skipped",
        "stage S1 lifted",
        "start of V02/sail fixed for Thu 17 Sep 16:00 -03 (19:00Z)",
        "fixed start of V02/sail released",
        "V01/secure to be cut short",
        "stand-ins ordered for V01/sail",
        "V02 may stay until Sun 20 Sep 06:00 -03 (09:00Z), on condition: engines ready",
        "two tugs for V01 waived until Thu 17 Sep 18:00 -03 (21:00Z), on condition: daylight",
        "V02 to shift refused",
        "plan issued",
    ];
    assert_eq!(said, expected);
}

#[test]
fn a_stage_for_two_persons_counts_from_the_second_ones_confirmation() {
    let folder = port("two-persons");
    let rules = fs::read_to_string(folder.join("rules.toml")).unwrap();
    fs::write(folder.join("rules.toml"), rules.replace("id = \"S2\"\n", "id = \"S2\"\ntwo_persons = true\n"))
        .unwrap();
    let named = |name| ["--name", name];
    recorded(&folder, "12:10", &[&["order", "declare", "S2"][..], &named("A. Quill")].concat());
    let waiting = plan(&folder, "12:11");
    assert_eq!(waiting["stage_in_force"], Value::Null);
    assert!(
        waiting["notes"][0].as_str().unwrap().starts_with("ORDER 1 WAITS FOR A SECOND PERSON"),
        "{waiting}"
    );
    let alone = record(&folder, "12:12", &[&["confirm", "1"][..], &named("a. quill")].concat());
    assert_eq!(alone.status.code(), Some(2));
    assert!(text(&alone.stderr).contains("another person has to confirm it"));
    recorded(&folder, "12:13", &[&["confirm", "1"][..], &named("B. Sallow")].concat());
    assert_eq!(plan(&folder, "12:14")["stage_in_force"], "S2");
    assert_eq!(record(&folder, "12:15", &["confirm", "1"]).status.code(), Some(2));
}

#[test]
fn a_stale_write_shows_both_versions_and_records_nothing() {
    let folder = port("stale");
    recorded(&folder, "12:10", &["mark", "done", "H1"]);
    recorded(&folder, "12:11", &["mark", "cannot", "H2", "--reason", "no launch"]);
    let stale = record(&folder, "12:12", &["mark", "done", "H2", "--seen", "1"]);
    let told = text(&stale.stderr);
    assert_eq!(stale.status.code(), Some(6), "{told}");
    for part in ["event 2: H2 cannot be done (Duty officer: no launch)", "yours: H2 done", "--seen 2"] {
        assert!(told.contains(part), "{told}");
    }
    assert_eq!(list(&folder).len(), 2);
    // What others said of something else is no reason to refuse.
    recorded(&folder, "12:12", &["mark", "done", "V01/secure", "--seen", "1"]);
    let (_, told) = recorded(&folder, "12:13", &["mark", "done", "H2", "--seen", "2"]);
    assert!(
        told.contains("event 2: H2 cannot be done (Duty officer: no launch); what you say now counts"),
        "{told}"
    );
}

#[test]
fn a_wrong_event_is_replaced_in_one_stroke() {
    let folder = port("replace");
    recorded(&folder, "12:10", &["mark", "done", "H1"]);
    recorded(&folder, "12:11", &["mark", "done", "H2", "--replaces", "1"]);
    let plan = plan(&folder, "12:12");
    assert_ne!(task(&plan, "H1")["state"], "done");
    assert_eq!(task(&plan, "H2")["state"], "done");
    for wrong in [["withdraw", "9"], ["withdraw", "0"]] {
        assert_eq!(record(&folder, "12:13", &wrong).status.code(), Some(2));
    }
    assert_eq!(record(&folder, "12:13", &["mark", "done", "H1", "--replaces", "9"]).status.code(), Some(2));
}

#[test]
fn nobody_and_impossible_values_are_refused_before_anything_is_written() {
    let folder = port("refused");
    assert_eq!(run(&folder, &["mark", ".", "done", "H1"]).status.code(), Some(2));
    for (wrong, code) in [
        (&["tell", "wind", "pilot-station", "24", "--over", "10 min"][..], "record-no-unit"),
        (
            &["tell", "out", "T1", "--from", "2026-09-17 14:00", "--until", "2026-09-17 13:00"],
            "record-ends-before",
        ),
        (&["mark", "done", "H1", "--at", "2026-09-17 23:00"], "record-not-yet"),
        (&["order", "fix", "V01/sail", "2027-09-17 10:00"], "record-far-off"),
        (&["tell", "anchorage", "quays", "crowded"], "record-unknown-word"),
    ] {
        let output = record(&folder, "12:10", wrong);
        assert_eq!(output.status.code(), Some(3), "{wrong:?}");
        assert!(text(&output.stderr).contains(code), "{wrong:?}: {}", text(&output.stderr));
    }
    assert!(!folder.join("record.sqlite").exists());
}

#[test]
fn a_text_goes_in_and_comes_out_the_same() {
    let folder = port("carry");
    let before = "[[event]]\nat = \"2026-09-17T12:05-03:00\"\nby = \"Duty officer\"\n\
        took_advisory = { file = \"approach.txt\" }\n\
        [[event]]\nat = \"2026-09-17T12:06-03:00\"\nby = \"Duty officer\"\ndone = { task = \"H1\" }\n\
        [[event]]\nat = \"2026-09-17T12:07-03:00\"\nby = \"Duty officer\"\nwithdraws = { event = 2 }\n";
    fs::write(folder.join("events.toml"), before).unwrap();
    // Nothing is added to a text, and no second record begins beside it.
    let refused = record(&folder, "12:10", &["mark", "done", "H1"]);
    assert_eq!(refused.status.code(), Some(2));
    assert!(text(&refused.stderr).contains("snugdown record import"), "{}", text(&refused.stderr));
    let with_text = plan(&folder, "12:10");
    assert_eq!(run(&folder, &["record", "import", "."]).status.code(), Some(0));
    let both = run(&folder, &["plan", ".", "--json", "--now", "2026-09-17 12:10"]);
    assert!(text(&both.stderr).contains("cli-two-records"), "{}", text(&both.stderr));
    let mut with_store: Value = serde_json::from_slice(&both.stdout).unwrap();
    assert!(with_store["port"].as_object_mut().unwrap().remove("record").is_some());
    // The texts of calls name the record's chain, which a text has not.
    let mut with_text = with_text;
    for plan in [&mut with_store, &mut with_text] {
        for call in plan["calls"].as_array_mut().unwrap() {
            assert!(call.as_object_mut().unwrap().remove("text").is_some());
        }
    }
    assert_eq!(with_store, with_text);
    assert_eq!(run(&folder, &["record", "import", "."]).status.code(), Some(2));
    assert_eq!(run(&folder, &["record", "export", ".", "out"]).status.code(), Some(0));
    let after = fs::read_to_string(folder.join("out/events.toml")).unwrap();
    assert!(after.contains("done = { at = \"2026-09-17T12:06-03:00\", task = \"H1\" }"), "{after}");
    assert_eq!(
        fs::read(folder.join("out/approach.txt")).unwrap(),
        fs::read(folder.join("approach.txt")).unwrap()
    );
    assert_eq!(run(&folder, &["record", "export", ".", "out"]).status.code(), Some(1));
    // Brought out, it stands for the same plans.
    let exported =
        run(&folder, &["plan", ".", "--record", "out/events.toml", "--json", "--now", "2026-09-17 12:10"]);
    let mut exported: Value = serde_json::from_slice(&exported.stdout).unwrap();
    for call in exported["calls"].as_array_mut().unwrap() {
        call.as_object_mut().unwrap().remove("text");
    }
    assert_eq!(exported, with_text);
}

#[test]
fn an_advisory_changed_after_it_was_taken_is_found() {
    let folder = port("changed-advisory");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    assert_eq!(run(&folder, &["record", "export", ".", "out"]).status.code(), Some(0));
    fs::copy(folder.join("out/events.toml"), folder.join("copy.toml")).unwrap();
    fs::write(folder.join("approach.txt"), TEXT.to_owned() + " ").unwrap();
    let found = run(&folder, &["check", ".", "--record", "copy.toml"]);
    assert_eq!(found.status.code(), Some(3));
    assert!(text(&found.stdout).contains("cli-advisory-changed"), "{}", text(&found.stdout));
}

#[test]
fn the_record_verifies_itself_and_against_what_stands_on_paper() {
    let folder = port("verify");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    recorded(&folder, "12:11", &["mark", "done", "H1"]);
    let head = plan(&folder, "12:12")["port"]["record"].as_str().unwrap().to_owned();
    let digits = head.strip_prefix("event 2, chain ").unwrap();
    recorded(&folder, "12:13", &["mark", "done", "H2"]);
    let good = run(&folder, &["record", "verify", ".", "--head", &format!("2:{digits}")]);
    assert_eq!(good.status.code(), Some(0), "{}", text(&good.stderr));
    assert!(text(&good.stdout).contains("3 events and 1 papers, all as they were written"));
    let bad = run(&folder, &["record", "verify", ".", "--head", "2:00000000"]);
    assert_eq!(bad.status.code(), Some(3));
    assert_eq!(run(&folder, &["record", "verify", ".", "--head", "two"]).status.code(), Some(2));
}

#[test]
fn python_finds_the_record_as_sound_as_the_program_does() {
    let folder = port("python");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    recorded(&folder, "12:11", &["mark", "done", "H1", "H2", "--reason", "Ærø \"<&>\" 港"]);
    let script = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/outside/record_chain.py");
    let check = |path: &Path| Command::new("python3").arg(&script).arg(path).output().unwrap();
    let sound = check(&folder.join("record.sqlite"));
    let own = text(&run(&folder, &["record", "verify", "."]).stdout);
    assert_eq!(text(&sound.stdout).trim(), own.lines().next().unwrap());
    let raw = rusqlite::Connection::open(folder.join("record.sqlite")).unwrap();
    raw.execute_batch(
        "DROP TRIGGER event_unchanged; UPDATE event SET text = replace(text, 'H2', 'H3') WHERE number = 3;",
    )
    .unwrap();
    let changed = check(&folder.join("record.sqlite"));
    assert_eq!(changed.status.code(), Some(1));
    assert!(text(&changed.stderr).contains("event 3 is not as it was written"));
    let own = run(&folder, &["plan", "."]);
    assert_eq!(own.status.code(), Some(3));
    assert!(text(&own.stderr).contains("event 3 is not as it was written"), "{}", text(&own.stderr));
}

#[test]
fn a_backup_is_a_record_of_its_own() {
    let folder = port("backup");
    recorded(&folder, "12:10", &["mark", "done", "H1"]);
    assert_eq!(run(&folder, &["record", "backup", ".", "copy.sqlite"]).status.code(), Some(0));
    let again = run(&folder, &["record", "backup", ".", "copy.sqlite"]);
    assert_eq!(again.status.code(), Some(1), "{}", text(&again.stderr));
    // A drill goes on in the copy, and the port's own record knows nothing of it.
    recorded(&folder, "12:11", &["mark", "done", "H2", "--record", "copy.sqlite"]);
    assert_eq!(list(&folder).len(), 1);
    let there = run(&folder, &["record", "list", ".", "--record", "copy.sqlite"]);
    assert!(text(&there.stdout).contains("H2 done"));
}

#[test]
fn a_clock_put_back_is_told_and_a_wrong_one_refused() {
    let folder = port("clock");
    // Known far in the future of any clock that runs this test.
    let ahead = run(&folder, &["tell", ".", "signal", "x", "--by", "A", "--now", "2190-01-01 00:00"]);
    assert_eq!(ahead.status.code(), Some(0), "{}", text(&ahead.stderr));
    let now = run(&folder, &["tell", ".", "signal", "y", "--by", "A"]);
    assert_eq!(now.status.code(), Some(2));
    assert!(text(&now.stderr).contains("set the clock, or give the time with --now"));
    // An hour back, as when clocks are changed: told as out of order, and recorded with its own time.
    let back = run(&folder, &["tell", ".", "signal", "z", "--by", "A", "--now", "2189-12-31 23:00"]);
    assert_eq!(back.status.code(), Some(0), "{}", text(&back.stderr));
    assert_eq!(list(&folder).len(), 2);
}

#[test]
fn asked_and_done_stand_side_by_side_afterwards() {
    let folder = port("review");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    recorded(&folder, "12:11", &["order", "declare", "S1"]);
    recorded(&folder, "12:30", &["mark", "started", "V01/secure"]);
    recorded(&folder, "15:00", &["mark", "done", "V01/secure", "--at", "2026-09-17 14:45"]);
    let call = ["record", "review", ".", "--now", "2026-09-17 15:10", "--as"];
    let form = |form: &str| text(&run(&folder, &[&call[..], &[form]].concat()).stdout);
    let json: Value = serde_json::from_str(&form("json")).unwrap();
    let line =
        json["tasks"].as_array().unwrap().iter().find(|task| task["id"] == "V01/secure").unwrap().clone();
    assert_eq!((&line["end"], &line["done"]), (&Value::from("done"), &Value::from("2026-09-17T17:45:00Z")));
    let asked = |key: &str| line[key].as_str().unwrap().parse::<chrono::DateTime<chrono::Utc>>().unwrap();
    let late = (asked("done") - asked("asked_finish")).num_minutes();
    assert_eq!(line["after_asked_min"], Value::from(late));
    let csv = form("csv");
    let tasks = json["tasks"].as_array().unwrap().len();
    assert_eq!(csv.lines().count(), tasks + 1);
    assert!(csv.contains("V01/secure,") && form("text").contains("V01/secure"));
}
