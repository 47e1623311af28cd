//! Calls: whoever a change, decision or order concerns is told once, by a time, in a text short enough to read out.
#![allow(clippy::unwrap_used, reason = "a test that finds no call must fail")]

mod common;

use common::Reading;
use proptest::prelude::{any, proptest};
use serde_json::Value;
use snugdown::finding::source::SourceText;
use snugdown::output::call_text::{LONGEST, ascii, call_text};
use snugdown::output::calls_text::calls_text;
use snugdown::output::now_lists::NowOptions;
use snugdown::output::now_text::now_text;
use snugdown::output::plan_text::plan_text;
use snugdown::output::setting::Setting;
use snugdown::output::wire::calls::calls_out;
use snugdown::plan::call::{Addressee, Call, Matter, Standing};
use snugdown::plan::call_book::CallInputs;
use snugdown::plan::calls::calls;
use snugdown::plan::changes::{Turn, changes_between};
use snugdown::plan::sheet::{Plan, TaskState};
use snugdown::record::call::{CallReport, CallStep, Substance};
use snugdown::record::event::{Event, What};
use snugdown::record::fold::situation;
use snugdown::rules::task::Stake;
use snugdown::time::moment::{Minutes, Moment};
use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};
use std::process::{Command, Output, Stdio};
use std::sync::OnceLock;

/// After advisory 16, the last of the demo.
const END: &str = "2026-09-18T12:10-03:00";

fn path() -> &'static (Reading, Vec<Plan>) {
    static PATH: OnceLock<(Reading, Vec<Plan>)> = OnceLock::new();
    PATH.get_or_init(|| {
        let reading = Reading::folder("demo-port");
        let plans = reading.plans(END).plans;
        (reading, plans)
    })
}

/// The calls if `issued` had been sent out, with these events beside the demo's.
fn calls_with(issued: &Plan, plan: &Plan, more: &[Event]) -> Vec<Call> {
    let (reading, _) = path();
    let is_other = |event: &&Event| event.what != What::PlanIssued;
    let events: Vec<Event> = reading.events.iter().filter(is_other).chain(more).cloned().collect();
    let situation = situation(&events, plan.now.to_utc());
    let inputs = CallInputs {
        port: &reading.port,
        situation: &situation,
        events: &events,
        issued: Some(issued),
        plan,
    };
    calls(&inputs)
}

/// The calls at each plan of the demo, had the plan before it been sent out.
fn steps() -> Vec<(&'static Plan, &'static Plan, Vec<Call>)> {
    let (_, plans) = path();
    plans.windows(2).map(|pair| (&pair[0], &pair[1], calls_with(&pair[0], &pair[1], &[]))).collect()
}

/// The plan after advisory 12, against the one of the noon before: the storm has become faster by eight hours since.
fn advisory_12() -> (&'static Plan, &'static Plan) {
    let (reading, plans) = path();
    let at = |text: &str| plans.iter().rev().find(|plan| plan.now <= reading.moment(text)).unwrap();
    (at("2026-09-16T12:20-03:00"), at("2026-09-17T06:20-03:00"))
}

fn report(number: usize, plan: &Plan, step: CallStep, call: &Call, substance: Substance) -> Event {
    Event {
        number,
        known: plan.now.to_utc(),
        by: "Traffic service".into(),
        name: if step == CallStep::Released { "A. Tern".into() } else { String::new() },
        on_behalf: String::new(),
        awaits_second: false,
        what: What::Call(CallReport {
            call: call.id.clone(),
            step,
            to: call.to.words(),
            about: call.about.clone(),
            substance: Some(substance),
            at: plan.now.to_utc(),
        }),
        reason: String::new(),
        place: SourceText::new("events.toml", "").line(1),
    }
}

#[test]
fn every_issued_task_that_moves_or_is_given_up_yields_one_call_to_whom_it_is_for() {
    let mut seen = 0;
    for (earlier, later, calls) in steps() {
        let (reading, _) = path();
        let changes = changes_between(earlier, later, &reading.events, &reading.port.clock);
        let given_up =
            changes.turned.iter().filter(|turned| turned.turn == Turn::GivenUp).map(|turned| &turned.id);
        let moved = changes.moved.iter().map(|moved| &moved.id);
        for id in given_up.chain(moved) {
            let task = later.task(id).unwrap();
            let mine = calls.iter().filter(|call| call.about == *id && call.to.who == task.who);
            assert_eq!(mine.count(), 1, "{id} at {}", later.now);
            seen += 1;
        }
    }
    assert!(seen > 50, "{seen}");
}

#[test]
fn a_task_that_stays_as_issued_yields_no_call() {
    for (earlier, later, calls) in steps() {
        for call in calls.iter().filter(|call| matches!(call.matter, Matter::Task { .. })) {
            let (old, new) = (earlier.task(&call.about).unwrap(), later.task(&call.about).unwrap());
            let is_same =
                (old.state, old.start, old.is_unreported) == (new.state, new.start, new.is_unreported);
            assert!(!is_same, "{} at {}", call.about, later.now);
            assert!(!matches!(new.state, TaskState::Done | TaskState::Started));
        }
    }
}

#[test]
fn nobody_is_called_twice_about_the_same_and_no_two_calls_share_an_id() {
    for (_, later, calls) in steps() {
        let matters: BTreeSet<(String, &str)> =
            calls.iter().map(|call| (call.to.words().to_lowercase(), call.about.as_str())).collect();
        let ids: BTreeSet<&str> = calls.iter().map(|call| call.id.as_str()).collect();
        assert_eq!((matters.len(), ids.len()), (calls.len(), calls.len()), "{}", later.now);
    }
}

#[test]
fn the_most_urgent_call_stands_first() {
    for (_, _, calls) in steps() {
        assert!(calls.is_sorted_by_key(|call| call.by));
    }
}

#[test]
fn every_text_of_the_demo_is_short_plain_and_a_draft() {
    let (reading, _) = path();
    let setting = Setting::of(&reading.port, &reading.rules).with_record("event 63, chain 0f1e2d3c4b5a");
    let mut longest = 0;
    for (_, later, calls) in steps() {
        for call in &calls {
            let text = call_text(call, later, &setting);
            assert!(
                text.len() <= LONGEST && text.bytes().all(|byte| (b' '..=b'~').contains(&byte)),
                "{text}"
            );
            let kind = if call.is_order { "DRAFT ORDER" } else { "DRAFT ADVICE" };
            assert!(
                text.starts_with(&format!("INVENTED - EXERCISE. {kind} {} from Quillhaven to ", call.id)),
                "{text}"
            );
            assert!(text.ends_with(&format!(" Please confirm {}.", call.id)), "{text}");
            assert!(
                text.contains("Plan of ") && text.contains("Z)") && text.contains("Valid until "),
                "{text}"
            );
            longest = longest.max(text.len());
        }
    }
    assert!(longest > 300, "{longest}");
}

#[test]
fn ids_stay_when_only_the_clock_advances() {
    let (before, plan) = advisory_12();
    let later = path().0.plans("2026-09-17T06:30-03:00").plans.pop().unwrap();
    let (early, late) = (calls_with(before, plan, &[]), calls_with(before, &later, &[]));
    let mut kept = 0;
    for call in &early {
        let same = late.iter().find(|other| (&other.to, &other.about) == (&call.to, &call.about));
        if let Some(same) = same.filter(|same| same.substance == call.substance) {
            assert_eq!(same.id, call.id);
            kept += 1;
        }
    }
    assert!(kept > early.len() / 2, "{kept} of {}", early.len());
}

#[test]
fn what_is_told_and_confirmed_is_remembered_until_the_plan_moves_on() {
    let (before, plan) = advisory_12();
    let all = calls_with(before, plan, &[]);
    let is_start = |call: &&Call| matches!(call.substance, Substance::Start(_));
    let call = all.iter().find(is_start).unwrap();
    let say = |steps: &[(CallStep, Substance)]| {
        let events: Vec<Event> = (900..)
            .zip(steps)
            .map(|(number, (step, said))| report(number, plan, *step, call, *said))
            .collect();
        let found = calls_with(before, plan, &events);
        let mine = found.iter().position(|one| one.to == call.to && one.about == call.about).unwrap();
        (mine, found[mine].clone(), found.len())
    };
    let said = call.substance;
    let Substance::Start(start) = said else { unreachable!() };
    let moved = |minutes| Substance::Start(start + chrono::TimeDelta::minutes(minutes));
    assert!(matches!(say(&[(CallStep::NoAnswer, said)]).1.standing, Standing::NoAnswer(_)));
    assert!(matches!(
        say(&[(CallStep::NoAnswer, said), (CallStep::Told, said)]).1.standing,
        Standing::Told(_)
    ));
    let (place, done, number) =
        say(&[(CallStep::Released, said), (CallStep::Told, said), (CallStep::Acknowledged, said)]);
    assert_eq!((place, number), (all.len() - 1, all.len()), "a confirmed call stands last");
    assert!(matches!(done.standing, Standing::Acknowledged(_)) && done.id == call.id);
    assert_eq!(done.released_by.as_deref(), Some("A. Tern, Traffic service"));
    // Nine minutes are the same to whoever was told; ten are another matter.
    assert!(matches!(say(&[(CallStep::Told, moved(9))]).1.standing, Standing::Told(_)));
    assert_eq!(say(&[(CallStep::Told, moved(9))]).1.id, call.id);
    let mut other = call.clone();
    other.id = "ZZZZZZ".into();
    let stale = report(900, plan, CallStep::Acknowledged, &other, moved(10));
    let found = calls_with(before, plan, std::slice::from_ref(&stale));
    let again = found.iter().find(|one| one.to == call.to && one.about == call.about).unwrap();
    assert_eq!((again.standing, &again.id), (Standing::Open, &call.id));
}

#[test]
fn whoever_was_told_of_a_move_is_told_again_when_the_plan_goes_back_to_what_was_issued() {
    let (before, plan) = advisory_12();
    let call = calls_with(before, plan, &[])
        .into_iter()
        .find(|call| matches!(call.substance, Substance::Start(_)))
        .unwrap();
    let told = report(900, plan, CallStep::Told, &call, call.substance);
    let mut back = before.clone();
    back.now = plan.now + Minutes::new(1);
    let about =
        |calls: Vec<Call>| calls.into_iter().filter(|one| one.about == call.about).collect::<Vec<_>>();
    assert_eq!(about(calls_with(before, &back, &[])), []);
    let again = about(calls_with(before, &back, &[told]));
    assert_eq!(again.len(), 1);
    assert!(again[0].to == call.to && again[0].id != call.id && again[0].standing == Standing::Open);
}

#[test]
fn a_call_unanswered_past_its_time_stands_in_the_head_of_the_plan_and_of_now() {
    let (reading, _) = path();
    let setting = Setting::of(&reading.port, &reading.rules);
    let (before, plan) = advisory_12();
    let mut plan = plan.clone();
    plan.calls = calls_with(before, &plan, &[]);
    let first = plan.calls.iter().map(|call| call.by).min().unwrap();
    let words = |plan: &Plan| {
        let options = NowOptions { concerning: None, ahead: Minutes::hours(6) };
        let (whole, now) = (plan_text(plan, &setting, 100), now_text(plan, &setting, &options));
        assert!(now.lines().count() <= 24);
        [whole, now].map(|text| text.lines().take(8).any(|line| line.contains("UNANSWERED past")))
    };
    plan.now = first + Minutes::new(1);
    assert_eq!(words(&plan), [true, true]);
    for call in &mut plan.calls {
        call.standing = Standing::Acknowledged(first);
    }
    assert_eq!(words(&plan), [false, false]);
}

#[test]
fn a_pool_is_reached_by_its_office_on_its_channel_in_time() {
    let (before, plan) = advisory_12();
    let calls = calls_with(before, plan, &[]);
    let tug = calls.iter().find(|call| call.to.who == "tug office" && call.about.ends_with("/sail")).unwrap();
    assert_eq!((tug.channel.as_deref(), tug.lead), (Some("VHF 12"), Minutes::hours(1)));
    let (old, new) = (before.task(&tug.about).unwrap().start.unwrap(), plan.task(&tug.about).unwrap().start);
    assert_eq!(tug.by, new.map_or(old, |new| new.min(old)) - Minutes::hours(1));
    assert!(calls.iter().all(|call| call.to.who != "tugs"));
}

#[test]
fn the_list_and_the_texts_read_well() {
    let (reading, _) = path();
    let setting = Setting::of(&reading.port, &reading.rules);
    let (before, plan) = advisory_12();
    let all = calls_with(before, plan, &[]);
    let few: Vec<&Call> = all.iter().take(4).collect();
    let texts: Vec<String> = few.iter().map(|call| call_text(call, plan, &setting)).collect();
    insta::assert_snapshot!(calls_text(&few, plan, &setting, 100) + "\n" + &texts.join("\n\n"));
}

#[test]
fn calls_as_json_keep_their_keys() {
    let (reading, _) = path();
    let setting = Setting::of(&reading.port, &reading.rules);
    let (before, plan) = advisory_12();
    let all = calls_with(before, plan, &[]);
    let out = serde_json::to_value(calls_out(&all.iter().collect::<Vec<_>>(), plan, &setting)).unwrap();
    let keys = |value: &Value| value.as_object().unwrap().keys().cloned().collect::<Vec<_>>().join(" ");
    assert_eq!(keys(&out), "calls kind now port schema");
    assert_eq!(
        keys(&out["calls"][0]),
        "about by channel id issued_start lead_min order overdue place reason released_by says ship since stake \
         standing start text who"
    );
}

fn call_named(name: &str) -> Call {
    let at = Moment::at_or_before(chrono::DateTime::UNIX_EPOCH);
    Call {
        id: "C3F9A1".into(),
        to: Addressee { who: name.into(), ship: name.into() },
        channel: Some(name.into()),
        by: at,
        lead: Minutes::new(30),
        is_order: false,
        about: name.into(),
        substance: Substance::Start(at.to_utc()),
        matter: Matter::Task { name: name.into(), issued: Some(at), latest: Some(at) },
        place: name.into(),
        reason: name.into(),
        stake: Stake::Harm,
        standing: Standing::Open,
        released_by: Some(name.into()),
    }
}

proptest! {
    #[test]
    fn whatever_the_names_a_text_is_short_plain_and_asks_to_be_confirmed(name in any::<String>(), times in 1_usize..40) {
        let (reading, plans) = path();
        let setting = Setting::of(&reading.port, &reading.rules);
        let text = call_text(&call_named(&name.repeat(times)), &plans[5], &setting);
        assert!(text.len() <= LONGEST && text.bytes().all(|byte| (b' '..=b'~').contains(&byte)), "{text}");
        assert!(text.ends_with(" Please confirm C3F9A1."), "{text}");
    }
}

#[test]
fn names_lose_their_marks_and_keep_their_letters() {
    assert_eq!(ascii("Ærøskøbing – Łódź, São Luís…"), "AEroskobing - Lodz, Sao Luis..");
    assert_eq!(ascii("港\u{202e}⚓"), "???");
}

fn port(name: &str) -> PathBuf {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR")).join(format!("calls-{name}"));
    let _ = fs::remove_dir_all(&folder);
    fs::create_dir_all(&folder).unwrap();
    let source = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/data/small-port");
    for entry in fs::read_dir(source).unwrap() {
        let path = entry.unwrap().path();
        fs::copy(&path, folder.join(path.file_name().unwrap())).unwrap();
    }
    folder
}

fn run(folder: &Path, at: &str, arguments: &[&str]) -> Output {
    let mut command = Command::new(env!("CARGO_BIN_EXE_snugdown"));
    let now = format!("2026-09-17 {at}");
    command.env_remove("COLUMNS").current_dir(folder).args(&arguments[..1]).arg(".").args(&arguments[1..]);
    command.args(["--now", &now]).stdin(Stdio::null()).output().unwrap()
}

fn recorded(folder: &Path, at: &str, arguments: &[&str]) {
    let output = run(folder, at, &[arguments, &["--by", "Duty officer", "--record-only"]].concat());
    let told = String::from_utf8_lossy(&output.stderr).into_owned();
    assert_eq!(output.status.code(), Some(0), "{arguments:?}: {told}");
}

fn listed(folder: &Path, at: &str) -> Vec<Value> {
    let output = run(folder, at, &["calls", "--json"]);
    let out: Value = serde_json::from_slice(&output.stdout).unwrap();
    out["calls"].as_array().unwrap().clone()
}

#[test]
fn calls_are_listed_released_told_and_confirmed_by_commands() {
    let folder = port("commands");
    recorded(&folder, "12:10", &["take", "approach.txt"]);
    recorded(&folder, "12:15", &["order", "issue"]);
    assert!(listed(&folder, "12:20").iter().all(|call| call["says"] == "decision"), "nothing has moved yet");
    recorded(&folder, "12:30", &["tell", "out", "P1", "--reason", "ill"]);
    let calls = listed(&folder, "12:31");
    let call =
        calls.iter().find(|call| call["about"] == "V01/sail" && call["who"] == "Pilot office").unwrap();
    assert_eq!((&call["standing"], &call["channel"]), (&Value::from("open"), &Value::from("telephone")));
    assert!(
        call["text"].as_str().unwrap().contains("DRAFT ") && call["reason"].as_str().unwrap().contains("ill")
    );
    let id = call["id"].as_str().unwrap();
    let of = |at: &str| listed(&folder, at).into_iter().find(|call| call["id"] == id).unwrap();
    let unnamed = run(&folder, "12:32", &["called", "released", id, "--by", "Harbour Master"]);
    assert_eq!(unnamed.status.code(), Some(2));
    recorded(&folder, "12:33", &["called", "released", id, "--name", "A. Tern"]);
    assert_eq!(of("12:34")["released_by"], "A. Tern, Duty officer");
    assert!(!of("12:34")["text"].as_str().unwrap().contains("DRAFT"));
    recorded(&folder, "12:35", &["called", "no-answer", &id.to_lowercase()]);
    assert_eq!(of("12:36")["standing"], "no_answer");
    recorded(&folder, "12:37", &["called", "told", id]);
    recorded(&folder, "12:40", &["called", "acknowledged", id, "--at", "2026-09-17 12:39"]);
    let done = of("12:41");
    assert_eq!(
        (&done["standing"], &done["since"]),
        (&Value::from("acknowledged"), &Value::from("2026-09-17T15:39:00Z"))
    );
    assert_eq!(run(&folder, "12:42", &["called", "told", "ZZZZZZ", "--by", "x"]).status.code(), Some(2));
    let pasted = run(&folder, "12:43", &["calls", id]);
    let text = String::from_utf8(pasted.stdout).unwrap();
    assert!(text.len() <= LONGEST + 1 && text.contains(id), "{text}");
    assert_eq!(run(&folder, "12:44", &["calls", "--for", "pilot ofice"]).status.code(), Some(2));
    // The mended pilot takes the move back: whoever was told must hear it.
    recorded(&folder, "12:50", &["tell", "back", "P1"]);
    let again = listed(&folder, "12:51");
    assert!(
        again
            .iter()
            .any(|call| call["about"] == "V01/sail" && call["who"] == "Pilot office" && call["id"] != id)
    );
}
