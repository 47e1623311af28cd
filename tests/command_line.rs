//! The program as it is called: exit codes, what goes to which stream, and that it holds on bad input.
#![cfg(test)]

use serde_json::Value;
use std::fs;
use std::io::Write;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};

const PORT: &str = "tests/data/small-port";
const TEXT: &str = "tests/data/small-port/approach.txt";
const QUAY: &str = "--at=Quay=22.45,-40.96";

fn program() -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    command.env_remove("COLUMNS").current_dir(env!("CARGO_MANIFEST_DIR"));
    command
}

fn run(arguments: &[&str]) -> Output {
    program().args(arguments).stdin(Stdio::null()).output().unwrap()
}

fn code(arguments: &[&str]) -> Option<i32> {
    run(arguments).status.code()
}

fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).unwrap()
}

/// A copy of the small port under this name, with these events.
fn port_with(name: &str, events: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(name);
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    for entry in fs::read_dir(Path::new(env!("CARGO_MANIFEST_DIR")).join(PORT)).unwrap() {
        let path = entry.unwrap().path();
        fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
    }
    fs::write(folder.join("events.toml"), events).unwrap();
    folder
}

fn took(at: &str, file: &str) -> String {
    format!("[[event]]\nat = \"{at}\"\nby = \"Duty officer\"\ntook_advisory = {{ file = \"{file}\" }}\n")
}

#[test]
fn a_sound_folder_checks_with_code_0() {
    let folder = port_with("sound", "");
    let output = run(&["check", folder.to_str().unwrap()]);
    assert_eq!((output.status.code(), text(&output.stdout)), (Some(0), "0 errors, 0 warnings\n".to_owned()));
}

#[test]
fn faults_end_with_code_3_and_all_are_shown_at_once() {
    let folder = port_with("faulty", &took("2026-09-16 12:05", "aproach.txt"));
    fs::write(folder.join("ships.toml"), "[[ship]]\nid = 1\n").unwrap();
    let path = folder.to_str().unwrap();
    let check = run(&["check", path]);
    let shown = text(&check.stdout);
    assert_eq!(check.status.code(), Some(3));
    assert!(
        shown.contains("cli-advisory-missing") && shown.contains("did you mean approach.txt?"),
        "{shown}"
    );
    assert!(shown.contains("port-"), "{shown}");
    let plan = run(&["plan", path]);
    assert_eq!((plan.status.code(), plan.stdout.len()), (Some(3), 0));
    assert!(text(&plan.stderr).contains("cli-advisory-missing"));
}

#[test]
fn findings_as_json_say_file_line_and_code() {
    let folder = port_with("faulty-json", &took("2026-09-16 12:05", "none.txt"));
    let output = run(&["check", "--json", folder.to_str().unwrap()]);
    let findings: Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!((&findings["errors"], &findings["findings"][0]["line"]), (&Value::from(1), &Value::from(4)));
    assert_eq!(findings["findings"][0]["code"], "cli-advisory-missing");
}

#[test]
fn a_folder_that_is_not_there_ends_with_code_1() {
    let output = run(&["plan", "no/such/folder"]);
    assert_eq!(output.status.code(), Some(1));
    assert!(text(&output.stderr).starts_with("snugdown: cannot read no/such/folder: "));
}

#[test]
fn a_command_line_that_makes_no_sense_ends_with_code_2() {
    assert_eq!(code(&["plan"]), Some(2));
    assert_eq!(code(&["plan", PORT, "--now", "noon"]), Some(2));
    assert_eq!(code(&["arrivals", TEXT]), Some(2));
    assert_eq!(code(&["arrivals", TEXT, "--at", "Quay=91,0"]), Some(2));
    assert_eq!(code(&["arrivals", TEXT, QUAY, "--now", "2026-09-16 13:00"]), Some(2));
    assert_eq!(code(&["now", PORT, "--for", "nobody at all"]), Some(2));
    assert_eq!(code(&["changes", PORT]), Some(2));
}

#[test]
fn what_does_not_fit_goes_before_a_stale_forecast() {
    let folder = port_with("late", &took("2026-09-17 12:05", "approach.txt"));
    let path = folder.to_str().unwrap();
    for command in ["plan", "now"] {
        let output = run(&[command, path, "--now", "2026-09-18 06:20"]);
        assert_eq!(output.status.code(), Some(4), "{command}");
        assert!(text(&output.stdout).contains("NOT CURRENT"));
    }
    assert_eq!(code(&["changes", path, "--to", "2026-09-18 06:20"]), Some(4));
    assert_eq!(code(&["arrivals", path, "--now", "2026-09-18 06:20"]), Some(5));
}

#[test]
fn a_plan_in_which_all_fits_ends_with_code_0() {
    let folder = port_with("quiet", "");
    let output = run(&["plan", folder.to_str().unwrap(), "--now", "2026-09-10 08:00"]);
    assert_eq!(output.status.code(), Some(0), "{}", text(&output.stdout));
}

#[test]
fn a_forecast_is_stale_once_the_next_is_overdue() {
    assert_eq!(code(&["arrivals", TEXT, QUAY]), Some(0));
    assert_eq!(code(&["arrivals", TEXT, QUAY, "--now", "2026-09-16T15:10Z"]), Some(0));
    assert_eq!(code(&["arrivals", TEXT, QUAY, "--now", "2026-09-18T00:00Z"]), Some(5));
}

#[test]
fn an_advisory_older_than_the_last_is_found_and_ends_with_code_5() {
    let events = took("2026-09-17 12:05", "approach.txt") + &took("2026-09-17 12:30", "older.txt");
    let folder = port_with("out-of-order", &events);
    let older = fs::read_to_string(folder.join("approach.txt")).unwrap().replace("17/1500Z", "17/0900Z");
    let older = older.replace("1500 UTC THU SEP 17", "0900 UTC THU SEP 17").replace("17/1200Z", "17/0600Z");
    fs::write(folder.join("older.txt"), older).unwrap();
    let output = run(&["arrivals", folder.to_str().unwrap(), "--now", "2026-09-17 13:00"]);
    let told = text(&output.stderr);
    assert!(told.contains("cli-advisory-older"), "{told}");
    assert_eq!(output.status.code(), Some(5), "{told}");
}

#[test]
fn arrivals_as_json_keep_their_shape() {
    let output = run(&["arrivals", TEXT, QUAY, "--at", "Far=-40,100", "--json"]);
    let out: Value = serde_json::from_slice(&output.stdout).unwrap();
    let [quay, far] = out["places"].as_array().unwrap().as_slice() else { panic!("{out}") };
    assert_eq!((&quay["name"], quay["lat"].as_f64()), (&Value::from("Quay"), Some(22.45)));
    let winds: Vec<i64> =
        quay["thresholds"].as_array().unwrap().iter().filter_map(|t| t["wind_kt"].as_i64()).collect();
    assert_eq!(winds, [34, 50, 64]);
    let gale = &quay["thresholds"][0];
    let by_hour: Vec<f64> =
        gale["chance_by_hour"].as_array().unwrap().iter().filter_map(Value::as_f64).collect();
    assert_eq!(by_hour.len(), 121);
    assert!(by_hour.is_sorted() && by_hour.last().copied() <= gale["chance"].as_f64());
    assert_eq!(gale["already"], false);
    assert!(gale["earliest"].as_str().unwrap().ends_with(":00Z"));
    assert_eq!(
        (&far["thresholds"][0]["earliest"], &far["thresholds"][0]["chance"]),
        (&Value::Null, &Value::from(0.0))
    );
}

#[test]
fn a_forecast_comes_from_standard_input_too() {
    let mut child = program()
        .args(["arrivals", "-", QUAY])
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    let forecast = fs::read(Path::new(env!("CARGO_MANIFEST_DIR")).join(TEXT)).unwrap();
    child.stdin.take().unwrap().write_all(&forecast).unwrap();
    let piped = child.wait_with_output().unwrap();
    assert_eq!(piped.status.code(), Some(0));
    assert_eq!(text(&piped.stdout), text(&run(&["arrivals", TEXT, QUAY]).stdout));
}

#[test]
fn what_is_no_forecast_is_refused_with_code_3() {
    let output = run(&["arrivals", "Cargo.toml", QUAY]);
    assert_eq!((output.status.code(), output.stdout.len()), (Some(3), 0));
    assert!(text(&output.stderr).contains("advisory-"));
}

#[test]
fn a_reader_that_has_seen_enough_is_no_error() {
    let mut child = program().args(["man"]).stdout(Stdio::piped()).stderr(Stdio::piped()).spawn().unwrap();
    drop(child.stdout.take());
    let output = child.wait_with_output().unwrap();
    assert_eq!((output.status.code(), text(&output.stderr)), (Some(0), String::new()));
}

#[test]
fn the_same_call_gives_the_same_bytes() {
    let folder = port_with("twice", &took("2026-09-16 12:05", "approach.txt"));
    let call = ["plan", folder.to_str().unwrap(), "--now", "2026-09-16 13:00", "--json"];
    assert_eq!(run(&call).stdout, run(&call).stdout);
}

#[test]
fn bytes_that_are_no_text_are_found_and_not_planned_on() {
    let folder = port_with("binary", "");
    fs::write(
        folder.join("tasks.toml"),
        [b"# caf\xe9, ".to_vec(), fs::read(folder.join("tasks.toml")).unwrap()].concat(),
    )
    .unwrap();
    fs::write(folder.join("plant.toml"), vec![b'#'; 1024 * 1024 + 1]).unwrap();
    let shown = text(&run(&["check", folder.to_str().unwrap()]).stdout);
    assert!(shown.contains("cli-file-not-text") && shown.contains("tasks.toml:1:6"), "{shown}");
    assert!(shown.contains("cli-file-too-long"), "{shown}");
    assert!(shown.contains("\n2 errors, "), "{shown}");
}

#[test]
fn width_comes_from_the_option_or_from_columns() {
    let longest = |output: Output| text(&output.stdout).lines().map(|line| line.chars().count()).max();
    let usual = longest(run(&["arrivals", TEXT, QUAY]));
    let wide = longest(program().args(["arrivals", TEXT, QUAY]).env("COLUMNS", "120").output().unwrap());
    let narrow = longest(run(&["arrivals", TEXT, QUAY, "--width", "60"]));
    assert!(narrow <= Some(60) && Some(60) < usual && usual <= Some(80));
    assert!(Some(80) < wide && wide <= Some(120));
}

#[test]
fn help_reads_well() {
    let output = run(&["--help"]);
    assert_eq!(output.status.code(), Some(0));
    insta::assert_snapshot!(text(&output.stdout));
}

#[test]
fn the_manual_page_and_the_completions_name_every_command() {
    let page = text(&run(&["man"]).stdout);
    let script = text(&run(&["completions", "bash"]).stdout);
    let commands = [
        "check",
        "plan",
        "now",
        "changes",
        "arrivals",
        "take",
        "mark",
        "tell",
        "order",
        "withdraw",
        "confirm",
        "record",
        "completions",
        "man",
    ];
    for command in commands {
        assert!(page.contains(command) && script.contains(command), "{command}");
    }
    assert!(page.contains("\\-\\-hours"), "{page}");
}

#[test]
fn the_wind_at_a_place_is_told_in_words_and_as_json() {
    let place = |arguments: &[&str]| run(&[&["wind", "demo-port"], arguments].concat());
    let output = place(&["greywether", "--height", "50 m", "--over", "10 min", "--width", "80"]);
    let shown = text(&output.stdout);
    assert_eq!(output.status.code(), Some(0), "{}", text(&output.stderr));
    for words in [
        "INVENTED - EXERCISE",
        "10-min mean at 50 m",
        "RETURNS FROM THE OTHER SIDE",
        "LIMITS HERE",
        "CAUTIONS",
    ] {
        assert!(shown.contains(words), "{words} in\n{shown}");
    }
    assert!(shown.lines().all(|line| line.chars().count() <= 80), "{shown}");
    // A name serves as well as an id, and the JSON has every hour of the forecast.
    let json = place(&["Greywether Container Terminal", "--json"]);
    let wind: Value = serde_json::from_slice(&json.stdout).unwrap();
    assert_eq!(wind["kind"], "wind");
    assert!(wind["hours"].as_array().unwrap().len() > 100);
    let peak = &wind["peak_gust_kt"];
    assert!(peak[0].as_f64() <= peak[1].as_f64() && peak[1].as_f64() <= peak[2].as_f64(), "{peak}");
    assert!(wind["limits"][0]["met"]["chance"].as_f64().unwrap() > 0.5);
}

#[test]
fn a_misspelt_place_a_gust_as_mean_and_a_height_above_all_masts_are_refused() {
    let says = |arguments: &[&str]| {
        let output = run(&[&["wind", "demo-port"], arguments].concat());
        assert_eq!(output.status.code(), Some(2), "{arguments:?}");
        text(&output.stderr)
    };
    assert!(says(&["greywhether"]).contains("did you mean \"greywether\"?"));
    assert!(says(&["greywether", "--over", "3 s"]).contains("10 min"));
    assert!(says(&["greywether", "--height", "900 m"]).contains("1 to 250 m"));
    assert!(says(&["greywether", "--now", "2026-09-01T00:00Z"]).contains("no advisory has been taken"));
}
