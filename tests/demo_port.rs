//! The invented port of the demonstration: its files, its storms, and what its plans promise on screen.
#![allow(clippy::unwrap_used, reason = "a test that cannot read the demo must fail")]
#![expect(clippy::unwrap_used, reason = "helpers of a test file")]

mod common;

#[path = "../examples/demo_storms/bulletin.rs"]
mod bulletin;
#[path = "../examples/demo_storms/storms.rs"]
mod storms;

use common::Reading;
use snugdown::advisory::read::read_forecast;
use snugdown::arrival::odds::{Draw, ask};
use snugdown::finding::source::SourceText;
use snugdown::plan::fold::{History, plan_at};
use snugdown::plan::sheet::{Plan, TaskState};
use snugdown::record::reader::read_events;
use snugdown::rules::folder::read_folder;
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::chance::Chance;
use snugdown::work::expand::expand;
use snugdown::work::questions::questions;
use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};

/// After advisory 9 and its adopted arrival, and after advisory 12 and its.
const AT_NINE: (&str, &str) = ("2026-09-16 12:20", "2026-09-18 22:00");
const AT_TWELVE: (&str, &str) = ("2026-09-17 06:20", "2026-09-18 14:00");

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-port")
}

fn text(file: &str) -> String {
    std::fs::read_to_string(root().join(file)).unwrap()
}

fn files_below(folder: &Path) -> Vec<PathBuf> {
    let mut files = Vec::new();
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() { files.extend(files_below(&path)) } else { files.push(path) }
    }
    files.sort();
    files
}

fn ids(tasks: impl Iterator<Item = String>) -> BTreeSet<String> {
    tasks.collect()
}

fn given_up(plan: &Plan) -> BTreeSet<String> {
    ids(plan.tasks.iter().filter(|task| task.given_up.is_some()).map(|task| task.id.clone()))
}

/// The plan for `now` with the record as it is, but for the adopted arrival `time`, which is moved.
fn plan_with_arrival_moved(reading: &mut Reading, (now, time): (&str, &str), by: Minutes) -> Plan {
    let moved = reading.port.clock.local(reading.moment(time) + by).format("%Y-%m-%d %H:%M");
    let record = text("events.toml");
    let changed = record.replace(&format!("time = \"{time}\""), &format!("time = \"{moved}\""));
    assert!(by == Minutes::ZERO || changed != record);
    reading.set_events(&changed);
    quick_plans(reading, now).plans.pop().unwrap()
}

/// Plans on fewer scenarios: the adopted arrival is what counts in these tests.
fn quick_plans(reading: &Reading, now: &str) -> History {
    let mut inputs = reading.inputs();
    inputs.draw = Draw { scenarios: 200, most: 200 };
    plan_at(&inputs, reading.moment(now))
}

/// An hour and a half earlier, as it is, and as much later; in a long run every quarter of an hour between.
fn up_to_ninety_minutes_off() -> impl Iterator<Item = Minutes> {
    let step = if std::env::var_os("SNUGDOWN_LONG").is_some() { 15 } else { 90 };
    (-90..=90).step_by(step).map(Minutes::new)
}

#[test]
fn every_file_reads_without_a_finding() {
    let names = ["port", "water", "berths", "ships", "plant", "means", "rules", "tasks"];
    let folder = names.map(|name| {
        let name = format!("{name}.toml");
        (name.clone(), SourceText::new(name.clone(), text(&name)))
    });
    let (read, findings) = read_folder(&BTreeMap::from(folder));
    assert_eq!(findings, []);
    let (port, rules) = read.unwrap();
    assert_eq!(expand(&port, &rules).1, []);
    for path in files_below(&root()) {
        let name = path.display().to_string();
        let bytes = std::fs::read(&path).unwrap();
        if name.ends_with(".txt") {
            assert_eq!(read_forecast(&name, &bytes).findings, [], "{name}");
        } else if name.ends_with("events.toml") {
            let source = SourceText::new(name, String::from_utf8(bytes).unwrap());
            assert_eq!(read_events(&source, Some(&port.clock)).1, []);
        }
    }
}

#[test]
fn every_file_says_that_it_is_invented() {
    for path in files_below(&root()) {
        let text = std::fs::read_to_string(&path).unwrap();
        let head = text.lines().next().unwrap_or_default();
        assert!(head.contains("INVENTED - EXERCISE"), "{}", path.display());
    }
    let reading = Reading::folder("demo-port");
    assert_eq!(reading.port.invented, "INVENTED - EXERCISE");
    assert!(reading.work.tasks().all(|(_, task)| task.basis.starts_with("DEMO")));
}

#[test]
fn the_advisories_are_what_the_table_of_storms_makes() {
    let written: BTreeMap<String, String> = storms::STORMS.iter().flat_map(bulletin::texts).collect();
    let there = files_below(&root()).into_iter().filter(|path| path.extension().is_some_and(|e| e == "txt"));
    let there: BTreeSet<PathBuf> = there.collect();
    assert_eq!(there, written.keys().map(|name| root().join(name)).collect::<BTreeSet<_>>());
    for (name, made) in written {
        assert!(text(&name) == made, "{name} differs: cargo run --example demo_storms writes it again");
    }
}

#[test]
fn the_computed_gale_follows_the_story() {
    let reading = Reading::folder("demo-port");
    let story = [
        ("01", "2026-09-18 18:00"),
        ("05", "2026-09-18 20:00"),
        ("09", "2026-09-18 22:00"),
        ("11", "2026-09-18 20:00"),
        ("12", "2026-09-18 14:00"),
        ("14", "2026-09-18 13:00"),
        ("16", "2026-09-18 13:30"),
    ];
    for (number, expected) in story {
        let advisory = &reading.forecasts[&format!("advisories/{number}.txt")];
        let mut asked = questions(&reading.port, &reading.rules, &reading.work, advisory.averaging);
        asked.retain(|question| question.key == "pilot-station 34 kt open sea");
        let answers = ask(advisory, &reading.tables.for_advisory(advisory), &asked, Draw::default());
        let reached = answers.answers[0].first_reaching(Chance::share(1, 10)).unwrap();
        let off = reached - reading.moment(expected);
        assert!(off.get().abs() <= 20, "advisory {number}: {reached}, {off} off");
    }
}

#[test]
fn after_advisory_nine_all_eleven_ships_get_away_all_along_the_range_of_arrivals() {
    let mut reading = Reading::folder("demo-port");
    for by in up_to_ninety_minutes_off() {
        let plan = plan_with_arrival_moved(&mut reading, AT_NINE, by);
        assert_eq!(given_up(&plan), BTreeSet::new(), "{by}");
        assert_eq!(plan.breaches, [], "{by}");
        let sailings = plan.tasks.iter().filter(|task| task.id.ends_with("/sail"));
        assert_eq!(sailings.filter(|task| task.state == TaskState::Planned).count(), 11, "{by}");
    }
}

#[test]
fn after_advisory_twelve_three_ships_do_not_fit_and_cuts_by_noon_free_them_all_along_the_range_of_arrivals() {
    let mut reading = Reading::folder("demo-port");
    let cuts = ["V01/cargo", "V05/cargo", "V08/cargo"];
    for by in up_to_ninety_minutes_off() {
        let plan = plan_with_arrival_moved(&mut reading, AT_TWELVE, by);
        let ships = ["V01/sail", "V05/sail", "V08/sail"].map(String::from);
        assert_eq!(given_up(&plan), BTreeSet::from(ships.clone()), "{by}");
        assert_eq!(plan.breaches, [], "{by}");
        let all = plan.reliefs.iter().find(|relief| relief.leaves.is_empty()).unwrap();
        assert_eq!(all.steps.iter().map(|step| step.about.as_str()).collect::<Vec<_>>(), cuts, "{by}");
        assert_eq!(all.relieves, ships, "{by}");
        let off = all.decide_by - reading.moment("2026-09-17 12:00");
        assert!(off.get().abs() <= 45, "{by}: to be decided by {}", all.decide_by);
    }
}

/// Sailings placed by hand, and checked on paper against tide, spacing, tugs and pilots' hours.
const BY_HAND_AT_NINE: [(&str, &str); 11] = [
    ("V04", "2026-09-17 10:00"),
    ("V10", "2026-09-17 12:00"),
    ("V12", "2026-09-17 13:00"),
    ("V07", "2026-09-17 14:00"),
    ("V14", "2026-09-17 15:15"),
    ("V02", "2026-09-17 16:00"),
    ("V09", "2026-09-17 18:00"),
    ("V03", "2026-09-18 00:00"),
    ("V05", "2026-09-18 02:30"),
    ("V01", "2026-09-18 04:15"),
    ("V08", "2026-09-18 05:00"),
];

const BY_HAND_AT_TWELVE: [(&str, &str); 11] = [
    ("V04", "2026-09-17 10:00"),
    ("V10", "2026-09-17 12:00"),
    ("V12", "2026-09-17 13:00"),
    ("V05", "2026-09-17 14:00"),
    ("V01", "2026-09-17 15:00"),
    ("V14", "2026-09-17 15:45"),
    ("V07", "2026-09-17 17:15"),
    ("V03", "2026-09-17 18:15"),
    ("V02", "2026-09-17 19:30"),
    ("V09", "2026-09-17 20:30"),
    ("V08", "2026-09-17 21:15"),
];

fn by_order(now: &str, orders: impl Iterator<Item = String>) -> Plan {
    let mut reading = Reading::folder("demo-port");
    let until_now = reading.moment(now);
    let record = text("events.toml");
    let mut kept: Vec<&str> = record.split("[[event]]").collect();
    kept.retain(|event| match event.split('"').nth(1).filter(|_| event.contains("at = ")) {
        Some(at) => reading.moment(at) <= until_now,
        None => true,
    });
    let mut changed = kept.join("[[event]]");
    for order in orders {
        changed += &format!("\n[[event]]\nat = \"{now}\"\nby = \"Harbour Master\"\n{order}\n");
    }
    reading.set_events(&changed);
    quick_plans(&reading, now).plans.pop().unwrap()
}

fn fixed(sailings: [(&'static str, &'static str); 11]) -> impl Iterator<Item = String> {
    sailings.into_iter().map(|(ship, at)| format!("fixes = {{ task = \"{ship}/sail\", start = \"{at}\" }}"))
}

#[test]
fn the_sailings_worked_out_by_hand_pass_the_audit_too() {
    let nine = by_order(AT_NINE.0, fixed(BY_HAND_AT_NINE));
    let cuts = ["V01", "V03", "V05", "V08"].map(|ship| format!("cuts = {{ task = \"{ship}/cargo\" }}"));
    let twelve = by_order(AT_TWELVE.0, cuts.into_iter().chain(fixed(BY_HAND_AT_TWELVE)));
    for plan in [nine, twelve] {
        assert_eq!(plan.clashes, []);
        assert_eq!(plan.breaches, []);
        assert_eq!(given_up(&plan), BTreeSet::new());
    }
}

/// Stretches in which each pilot is held, with the day's work before and after each job.
fn pilots_at_work(plan: &Plan) -> BTreeMap<String, Vec<(Moment, Moment)>> {
    let mut work: BTreeMap<String, Vec<(Moment, Moment)>> = BTreeMap::new();
    for task in plan.tasks.iter().filter(|task| task.id.ends_with("/sail")) {
        let (Some(start), Some(finish)) = (task.start, task.finish) else { continue };
        for (_, members) in task.members.iter().filter(|(pool, _)| pool == "pilot") {
            for member in members {
                let held = (start - Minutes::new(45), finish + Minutes::hours(1));
                work.entry(member.clone()).or_default().push(held);
            }
        }
    }
    work.values_mut().for_each(|held| held.sort());
    work
}

#[test]
fn every_plan_of_the_exercise_passes_the_audit_and_keeps_pilots_rested() {
    let reading = Reading::folder("demo-port");
    let history = reading.plans("2026-09-18 16:30");
    let clock = Moment::at_or_after(reading.port.exercise.unwrap());
    let advisories: BTreeSet<_> =
        history.plans.iter().filter_map(|plan| plan.advisory.as_ref()?.number).collect();
    assert_eq!(advisories, (1..=16).collect());
    for plan in &history.plans {
        assert_eq!(plan.breaches, [], "{}", plan.now);
        assert_eq!(plan.clashes, [], "{}", plan.now);
        // Later reports follow the plans of their time; another planner may have planned otherwise.
        if plan.now <= clock {
            let unreported = plan.tasks.iter().filter(|task| task.is_unreported);
            assert_eq!(ids(unreported.map(|task| task.id.clone())), BTreeSet::new(), "{}", plan.now);
        }
        for (pilot, held) in pilots_at_work(plan) {
            let mut began = held[0].0;
            for pair in held.windows(2) {
                if pair[1].0 - pair[0].1 >= Minutes::hours(10) {
                    began = pair[1].0;
                }
                assert!(pair[1].1 - began <= Minutes::hours(10), "{pilot} works too long at {}", plan.now);
            }
        }
    }
    let last = history.latest().unwrap();
    let sailings: Vec<_> = last.tasks.iter().filter(|task| task.id.ends_with("/sail")).collect();
    assert!(sailings.iter().all(|task| task.state == TaskState::Done) && sailings.len() == 11);
}

fn another_storm(name: &str) -> Plan {
    let mut reading = Reading::folder("demo-port");
    for path in files_below(&root().join("storms").join(name)) {
        let file = path.strip_prefix(root()).unwrap().to_string_lossy().replace('\\', "/");
        if file.ends_with(".txt") {
            reading.add_forecast(&file, &text(&file));
        }
    }
    reading.set_events(&text(&format!("storms/{name}/events.toml")));
    quick_plans(&reading, AT_TWELVE.0).plans.pop().unwrap()
}

#[test]
fn a_near_miss_and_a_stalled_storm_relax_nothing_by_themselves() {
    for (name, storm) in [("near-miss", "TILVASK"), ("stall", "MURGELA")] {
        let plan = another_storm(name);
        assert_eq!(plan.advisory.as_ref().map(|advisory| advisory.storm.as_str()), Some(storm));
        assert_eq!(plan.breaches, [], "{name}");
        let gale = &plan.arrivals[0];
        let adopted = gale.adopted.unwrap();
        assert!(gale.computed.is_none_or(|computed| computed - adopted > Minutes::hours(12)), "{name}");
        let closed = plan.stages.iter().find(|stage| stage.id == "S4").unwrap();
        assert_eq!(closed.due, Some(adopted - Minutes::hours(12)), "{name}");
    }
}

#[test]
fn of_a_storm_named_late_much_is_given_up_but_nobody_is_left_on_the_quay() {
    let plan = another_storm("late-named");
    assert_eq!(plan.breaches, []);
    let given_up = given_up(&plan);
    assert!(given_up.len() >= 8, "{given_up:?}");
    for people in ["G14", "S08", "Q01", "H10"] {
        assert!(!given_up.contains(people), "{people}");
    }
}
