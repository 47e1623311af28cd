//! What is found wrong only once tasks, stages and the record are seen together: circles, unknown names, orders that no
//! task provides for.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test that cannot read its port must fail")]

mod small_port;

use small_port::{edited, listed, small_port};
use snugdown::finding::fault::Finding;
use snugdown::finding::source::SourceText;
use snugdown::port::folder::Folder;
use snugdown::port::harbour::Port;
use snugdown::record::event::Event;
use snugdown::record::reader::read_events;
use snugdown::rules::folder::read_folder;
use snugdown::rules::stage::Rules;
use snugdown::work::expand::expand;
use snugdown::work::strangers::strangers;

fn read(folder: &Folder) -> (Port, Rules) {
    let (read, findings) = read_folder(folder);
    read.unwrap_or_else(|| panic!("{}", listed(&findings)))
}

/// The only finding, which must have this code and say these words; its text.
fn only(findings: &[Finding], code: &str, words: &[&str]) -> String {
    let [finding] = findings else { panic!("one finding, not\n{}", listed(findings)) };
    let text = finding.to_string();
    assert_eq!(finding.code, code, "{text}");
    for word in words {
        assert!(text.contains(word), "\"{word}\" is not said in {text}");
    }
    text
}

/// Replaces `old` by `new` in `file`: the work graph has exactly one finding, with this code, and at `^` if that is in
/// the new text.
fn provokes(file: &str, (old, new): (&str, &str), code: &str, words: &[&str]) {
    let (folder, line, column) = edited(file, old, new);
    let (port, rules) = read(&folder);
    let (work, mut findings) = expand(&port, &rules);
    findings.extend(strangers(&port, &rules, &work, &[]));
    let text = only(&findings, code, words);
    let place = &findings[0].place;
    if new.contains('^') {
        assert_eq!((place.file.as_str(), place.line, place.column), (file, line, column), "{text}");
    }
}

/// What an event is found to name that the port does not have.
fn found_in(event: &str) -> Vec<Finding> {
    let (port, rules) = read(&small_port());
    let work = expand(&port, &rules).0;
    let text = format!(
        "[[event]]\nat = \"2026-09-17 12:00\"\nby = \"Harbour Master\"\nreason = \"test\"\n{event}\n"
    );
    let (events, findings) = read_events(&SourceText::new("events.toml", text), Some(&port.clock));
    assert_eq!((events.len(), listed(&findings)), (1, String::new()));
    strangers(&port, &rules, &work, &events)
}

#[test]
fn a_circle_is_named_whole_with_the_stage_in_it() {
    provokes(
        "rules.toml",
        ("[[stage]]\nid = \"S1\"", "^[[stage]]\nid = \"S1\"\nafter = [\"H2\"]"),
        "work-circle",
        &["these wait for each other: stage S1 -> H1 -> H2 -> stage S1;"],
    );
}

#[test]
fn a_circle_through_ships_is_named_by_their_own_tasks() {
    provokes(
        "tasks.toml",
        ("id = \"H1\" ", "after = [\"V01/sail\"]\nid = \"H1\" "),
        "work-circle",
        &["H1 -> V01/secure -> V01/sail -> H1"],
    );
}

#[test]
fn stages_that_count_from_each_other_are_a_circle() {
    provokes(
        "rules.toml",
        (
            "any = [                                        # any of these makes the stage due; none: by order only",
            "any = [ { stage = { id = \"S2\", after = \"1 h\" } },",
        ),
        "work-circle",
        &["stage S1 -> stage S2 -> stage S1"],
    );
}

#[test]
fn two_knots_are_two_findings() {
    let (mut folder, ..) =
        edited("tasks.toml", "after = [{ same = \"tie-down\" }]", "after = [\"K1/check-ties\"]");
    let rules =
        folder.get("rules.toml").unwrap().text().replacen("id = \"S1\"", "id = \"S1\"\nafter = [\"H1\"]", 1);
    folder.insert(String::from("rules.toml"), SourceText::new("rules.toml", rules));
    let (port, rules) = read(&folder);
    let findings = expand(&port, &rules).1;
    assert_eq!(findings.iter().map(|finding| finding.code).collect::<Vec<_>>(), ["work-circle"; 2]);
    assert!(listed(&findings).contains("K1/check-ties -> K1/check-ties"), "{}", listed(&findings));
}

#[test]
fn waiting_for_a_task_that_does_not_exist_is_named() {
    provokes(
        "tasks.toml",
        ("after = [{ task = \"H3\", if", "after = [^{ task = \"H33\", if"),
        "work-unknown-task",
        &["\"H33\"", "did you mean \"H3\"?"],
    );
    provokes(
        "tasks.toml",
        (
            "after = [{ every = \"sail\", if_given_up = \"start-at-decision\" }]   #",
            "after = [^{ every = \"sails\" }] #",
        ),
        "work-unknown-task",
        &["\"sails\"", "did you mean \"sail\"?"],
    );
    provokes("rules.toml", ("after = [\"H1\"]", "after = [^\"H0\"]"), "work-unknown-task", &["\"H0\""]);
}

#[test]
fn a_stand_in_that_does_not_exist_is_named() {
    let (folder, ..) =
        edited("tasks.toml", "or_else = { tasks = [\"stay\"]", "or_else = { tasks = [\"moor\"]");
    let (port, rules) = read(&folder);
    let findings = expand(&port, &rules).1;
    // Once for each ship: she may have other stand-ins of her own.
    assert_eq!(
        findings.iter().map(|finding| finding.code).collect::<Vec<_>>(),
        ["work-unknown-substitute"; 2]
    );
    assert!(findings[0].to_string().contains("\"V01/moor\" is to stand in for \"V01/sail\""));
}

#[test]
fn a_duty_that_an_unknown_task_fulfils_is_named() {
    provokes(
        "rules.toml",
        ("fulfilled_by = [\"sail\"]", "fulfilled_by = [\"sial\"]"),
        "work-unknown-duty-task",
        &["duty \"clear-out\"", "did you mean \"sail\"?"],
    );
}

#[test]
fn a_task_that_comes_twice_is_named() {
    let (port, mut rules) = read(&small_port());
    let again = rules.tasks.iter().find(|spec| spec.id == "T1-moor").unwrap().clone();
    rules.tasks.push(again);
    only(&expand(&port, &rules).1, "work-double-task", &["\"T1-moor\""]);
}

#[test]
fn an_own_value_that_is_lacking_is_named() {
    let (mut port, rules) = read(&small_port());
    port.ships.iter_mut().find(|ship| ship.id == "V02").unwrap().own.remove("tugs");
    only(&expand(&port, &rules).1, "work-own-value-missing", &["\"sail\" asks \"V02\"", "\"tugs\""]);
}

#[test]
fn names_in_the_record_that_the_port_does_not_have_are_found() {
    for (event, code, words) in [
        (
            "adopts_arrival = { place = \"quay\", wind = \"34 kt\", time = \"2026-09-18 09:00\" }",
            "work-unknown-event-place",
            "did you mean \"quays\"?",
        ),
        ("declares = { stage = \"S3\" }", "work-unknown-event-stage", "\"S3\""),
        ("done = { task = \"V01/sial\" }", "work-unknown-event-task", "V01/sail"),
        ("out = { member = \"T3\" }", "work-unknown-event-member", "\"T3\""),
        ("unusable = { place = \"Q9\" }", "work-unknown-event-spot", "did you mean \"Q1\"?"),
        ("permits_stay = { ship = \"V03\" }", "work-unknown-event-ship", "did you mean \"V01\"?"),
    ] {
        only(&found_in(event), code, &[words]);
    }
}

#[test]
fn an_order_that_no_task_provides_for_is_found() {
    only(&found_in("cuts = { task = \"V01/sail\" }"), "work-no-cut", &["V01/sail has no shorter way"]);
    only(
        &found_in("substitutes = { task = \"H1\" }"),
        "work-no-substitute",
        &["H1 has no tasks that stand in"],
    );
    assert_eq!(listed(&found_in("cuts = { task = \"V01/secure\" }")), "");
}

#[test]
fn a_name_in_an_event_that_was_withdrawn_is_no_fault() {
    let (port, rules) = read(&small_port());
    let work = expand(&port, &rules).0;
    let text = "[[event]]\nat = \"2026-09-17 12:00\"\nby = \"A\"\ndone = { task = \"V09/sail\" }\n\
        [[event]]\nat = \"2026-09-17 12:01\"\nby = \"A\"\nwithdraws = { event = 1 }\n";
    let events = read_events(&SourceText::new("events.toml", text), Some(&port.clock)).0;
    assert_eq!(events.len(), 2);
    assert_eq!(listed(&strangers(&port, &rules, &work, &events)), "");
    assert!(listed(&strangers(&port, &rules, &work, &events[..1])).contains("work-unknown-event-task"));
}

#[test]
fn a_stage_that_takes_two_persons_ordered_by_one_is_told() {
    let (mut port, mut rules) = read(&small_port());
    port.ships.clear();
    rules.stages[1].needs_second = true;
    let work = expand(&port, &rules).0;
    let event = |more: &str| {
        let text = format!(
            "[[event]]\nat = \"2026-09-17 12:00\"\nby = \"Harbour Master\"\n{more}declares = {{ stage = \"S2\" }}\n"
        );
        read_events(&SourceText::new("events.toml", text), Some(&port.clock)).0
    };
    let found = |events: Vec<Event>| {
        let found = strangers(&port, &rules, &work, &events).into_iter();
        found.filter(|finding| finding.code == "work-ordered-alone").count()
    };
    assert_eq!((found(event("")), found(event("awaits_second = true\n"))), (1, 0));
}
