//! Plans of a small port, from its files to the finished sheet.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test that finds no plan must fail")]

mod common;

use common::Reading;
use snugdown::plan::changes::{Turn, changes_between};
use snugdown::plan::fold::plan_again;
use snugdown::plan::sheet::{DutyState, Plan, Point, StageStatus, TaskState};
use snugdown::time::moment::{Minutes, Moment};

const STORM: &str = include_str!("data/small-port/approach.txt");
const TAKEN: &str = "[[event]]\nat = \"2026-09-17T12:05-03:00\"\nby = \"Duty officer\"\ntook_advisory = { file = \"01.txt\" }\n";
const NOW: &str = "2026-09-17T12:10-03:00";

fn port_with(events: &str) -> Reading {
    let mut reading = Reading::folder("tests/data/small-port");
    reading.add_forecast("01.txt", STORM);
    reading.set_events(&format!("{TAKEN}\n{events}"));
    reading
}

fn plan_with(events: &str, now: &str) -> Plan {
    port_with(events).plans(now).plans.pop().unwrap()
}

fn event(at: &str, what: &str) -> String {
    format!("[[event]]\nat = \"{at}\"\nby = \"Harbour Master\"\nreason = \"test\"\n{what}\n\n")
}

#[test]
fn every_plan_of_a_record_passes_the_audit() {
    let events = [
        event("2026-09-17T12:30-03:00", "declares = { stage = \"S1\" }"),
        event("2026-09-17T12:40-03:00", "done = { task = \"H1\" }"),
        event("2026-09-17T13:00-03:00", "out = { member = \"T1\" }"),
        event("2026-09-17T14:00-03:00", "back = { member = \"T1\" }"),
        event("2026-09-17T15:00-03:00", "declares = { stage = \"S2\" }"),
    ];
    for plan in port_with(&events.concat()).plans("2026-09-17T16:00-03:00").plans {
        assert!(plan.breaches.is_empty(), "{}: {:?}", plan.now, plan.breaches);
    }
}

#[test]
fn the_same_folder_and_time_give_the_same_plan() {
    assert_eq!(plan_with("", NOW), plan_with("", NOW));
}

#[test]
fn a_later_event_does_not_change_an_earlier_plan() {
    let later = event("2026-09-17T13:00-03:00", "out = { member = \"T1\" }");
    assert_eq!(plan_with("", NOW), plan_with(&later, NOW));
}

#[test]
fn the_same_advisory_taken_twice_moves_nothing() {
    let once = plan_with("", "2026-09-17T13:00-03:00");
    let mut reading = port_with(&event("2026-09-17T12:50-03:00", "took_advisory = { file = \"02.txt\" }"));
    // The same forecast under the next number: draws are keyed by storm and lead, never by advisory.
    reading.add_forecast("02.txt", &STORM.replace("NUMBER   9", "NUMBER  10"));
    let twice = reading.plans("2026-09-17T13:00-03:00").plans.pop().unwrap();
    let starts = |plan: &Plan| plan.tasks.iter().map(|t| (t.id.clone(), t.start)).collect::<Vec<_>>();
    assert_eq!(starts(&once), starts(&twice));
}

#[test]
fn a_stage_is_recommended_and_never_declares_itself() {
    let plan = plan_with("", NOW);
    let stage = |id: &str| plan.stages.iter().find(|stage| stage.id == id).unwrap().clone();
    assert_eq!(stage("S1").status, StageStatus::Recommended);
    assert_eq!(stage("S1").declared, None);
    assert!(plan.stage_in_force().is_none());
}

#[test]
fn a_task_behind_an_undeclared_stage_is_planned_if_declared_and_not_called_unreported() {
    for now in [NOW, "2026-09-17T14:00-03:00"] {
        let plan = plan_with("", now);
        let task = plan.task("H1").unwrap();
        assert_eq!(task.if_declared.as_deref(), Some("S1"));
        assert!(!task.is_unreported, "at {now}");
    }
}

#[test]
fn a_task_whose_time_passed_without_a_report_is_unreported_and_placed_again() {
    let declared = event("2026-09-17T12:06-03:00", "declares = { stage = \"S1\" }");
    let plan = plan_with(&declared, "2026-09-17T13:30-03:00");
    let task = plan.task("H1").unwrap();
    assert!(task.is_unreported);
    assert!(task.start.unwrap() >= plan.now);
    // What waits for it waits on.
    assert!(plan.task("H2").unwrap().start.unwrap() >= task.finish.unwrap());
}

#[test]
fn a_done_task_stays_where_it_was_done() {
    let events = event("2026-09-17T12:06-03:00", "declares = { stage = \"S1\" }")
        + &event("2026-09-17T12:50-03:00", "done = { task = \"H1\", at = \"2026-09-17T12:41-03:00\" }");
    let reading = port_with(&events);
    let plan = reading.plans("2026-09-17T13:30-03:00").plans.pop().unwrap();
    let task = plan.task("H1").unwrap();
    assert_eq!((task.state, task.finish), (TaskState::Done, Some(reading.moment("2026-09-17T12:41-03:00"))));
}

#[test]
fn an_adopted_arrival_holds_whatever_the_next_advisory_says() {
    let adopted = "2026-09-18T09:00-03:00";
    let order = event(
        "2026-09-17T12:06-03:00",
        &format!("adopts_arrival = {{ place = \"pilot-station\", wind = \"34 kt\", time = \"{adopted}\" }}"),
    );
    let taken = event("2026-09-17T18:05-03:00", "took_advisory = { file = \"02.txt\" }");
    let mut reading = port_with(&(order + &taken));
    // The next advisory has the gale's reach grow by half.
    let wider = STORM
        .replace("140NE", "220NE")
        .replace("130NE", "210NE")
        .replace("130NW", "210NW")
        .replace("120NW", "200NW");
    reading
        .add_forecast("02.txt", &wider.replace("1500 UTC", "1800 UTC").replace("NUMBER   9", "NUMBER  10"));
    let history = reading.plans("2026-09-17T18:10-03:00");
    let (before, after) = (&history.plans[1], history.latest().unwrap());
    let deadline = |plan: &Plan, id: &str| plan.task(id).unwrap().deadline;
    for id in ["V01/sail", "K1/tie-down", "T1-moor"] {
        assert_eq!(deadline(before, id), deadline(after, id), "{id}");
    }
    assert_eq!(after.overtaken.len(), 1, "{:?}", after.arrivals[0]);
    assert_eq!(after.overtaken[0].adopted, reading.moment(adopted));
}

#[test]
fn one_more_tug_never_gives_more_up() {
    let given_up = |reading: &Reading| reading.plans(NOW).latest().unwrap().given_up().count();
    let mut reading = port_with("");
    let before = given_up(&reading);
    let pool = reading.port.pools.iter_mut().find(|pool| pool.id == "tug").unwrap();
    let mut more = pool.members[0].clone();
    more.id = String::from("T9");
    pool.members.push(more);
    reading.work = snugdown::work::expand::expand(&reading.port, &reading.rules).0;
    assert!(given_up(&reading) <= before);
}

/// A report that the deep ship is ready so late that she misses her deadline by three quarters of an hour, while two
/// hours less of securing would do; and when that is.
fn late_ship() -> (String, String) {
    let deadline = plan_with("", NOW).task("V01/sail").unwrap().deadline.unwrap();
    let ready = (deadline - Minutes::new(3 * 60 + 45)).to_string();
    (
        event(
            "2026-09-17T12:07-03:00",
            &format!("not_before = {{ task = \"V01/secure\", time = \"{ready}\" }}"),
        ),
        ready,
    )
}

#[test]
fn a_ship_that_cannot_go_in_time_is_given_up_with_a_chain_that_adds_up_and_a_relief() {
    let (late, _) = late_ship();
    let plan = plan_with(&late, NOW);
    let ship = plan.task("V01/sail").unwrap();
    assert_eq!(ship.state, TaskState::GivenUp);
    let why = ship.given_up.as_ref().unwrap();
    let minutes: i64 = why.chain.iter().map(|link| link.minutes.get()).sum();
    assert_eq!(why.chain_from + Minutes::new(minutes), why.would_finish.unwrap());
    assert!(ship.start.is_none() && ship.members.is_empty());
    let relieved =
        plan.reliefs.iter().find(|relief| relief.relieves.contains(&String::from("V01/sail"))).unwrap();
    assert!(relieved.decide_by >= plan.now);
    assert!(!plan.fits());
    assert_eq!(plan.duties[0].state, DutyState::Missed);
}

#[test]
fn a_relief_holds_until_its_last_minute_and_not_a_minute_longer() {
    let (late, ready) = late_ship();
    let plan = plan_with(&late, NOW);
    let relief = plan
        .reliefs
        .iter()
        .find(|r| r.steps.len() == 1 && r.relieves.contains(&String::from("V01/sail")))
        .unwrap();
    let ordered_at = |minutes: i64| {
        let at = (relief.decide_by + Minutes::new(minutes)).to_string();
        let begun = event(&ready, &format!("started = {{ task = \"V01/secure\", at = \"{ready}\" }}"));
        let order = event(&at, "cuts = { task = \"V01/secure\" }");
        plan_with(&[late.as_str(), &begun, &order].concat(), &at).task("V01/sail").unwrap().state
    };
    assert_eq!(relief.steps[0].about, "V01/secure");
    assert_ne!(ordered_at(0), TaskState::GivenUp);
    assert_eq!(ordered_at(1), TaskState::GivenUp);
}

#[test]
fn an_order_is_never_moved_and_a_clash_is_named() {
    let order = event(
        "2026-09-17T12:07-03:00",
        "fixes = { task = \"V01/sail\", start = \"2026-09-17T15:00-03:00\" }",
    );
    let plan = plan_with(&order, NOW);
    let ship = plan.task("V01/sail").unwrap();
    assert_eq!(ship.start.unwrap().to_string(), "2026-09-17T18:00Z");
    assert!(plan.clashes.iter().any(|clash| clash.task == "V01/sail"), "{:?}", plan.clashes);
}

#[test]
fn changes_name_what_moved_and_why() {
    let out = event("2026-09-17T12:30-03:00", "out = { member = \"P1\" }");
    let reading = port_with(&out);
    let history = reading.plans("2026-09-17T12:31-03:00");
    let earlier = &history.plans[0];
    let changes = changes_between(earlier, history.latest().unwrap(), &reading.events, &reading.port.clock);
    assert_eq!(changes.news.len(), 1);
    assert!(changes.moved.iter().all(|moved| !moved.cause.is_empty()));
    assert!(changes.moved.iter().all(|moved| moved.by().get().abs() >= 10), "{:?}", changes.moved);
    // P1 is the only pilot for the larger ship.
    let ship = changes.turned.iter().find(|turned| turned.id == "V01/sail").unwrap();
    assert_eq!(ship.turn, Turn::GivenUp);
    assert!(ship.cause.contains("P1 out of service"), "{}", ship.cause);
}

#[test]
fn quantiles_and_chance_come_together() {
    for arrival in plan_with("", NOW).arrivals {
        if arrival.chance.get() > 0.5 {
            assert!(matches!(arrival.earliest, Point::At(_)));
        }
    }
}

#[test]
fn a_longer_shift_never_gives_more_up() {
    let late = event(
        "2026-09-17T12:07-03:00",
        "not_before = { task = \"V01/secure\", time = \"2026-09-17T22:00-03:00\" }",
    );
    let given_up = |reading: &Reading| reading.plans(NOW).latest().unwrap().given_up().count();
    let mut reading = port_with(&late);
    let before = given_up(&reading);
    let gangs = reading.port.pools.iter_mut().find(|pool| pool.id == "gang").unwrap();
    for member in &mut gangs.members {
        member.shifts.clear();
    }
    assert!(given_up(&reading) <= before);
    assert!(before > 0, "the case must be tight enough to tell");
}

#[test]
fn other_names_for_the_same_ships_and_tasks_give_the_same_times() {
    let renamed = |text: String| {
        text.replace("V01", "Z91")
            .replace("V02", "Z92")
            .replace("tie-down", "make-fast")
            .replace("\"H1\"", "\"J1\"")
    };
    let reading = port_with("");
    let mut other = Reading::folder_with("tests/data/small-port", &renamed);
    other.add_forecast("01.txt", STORM);
    other.set_events(TAKEN);
    let times = |reading: &Reading| {
        let plan = reading.plans(NOW).plans.pop().unwrap();
        plan.tasks
            .iter()
            .map(|t| (renamed(t.id.clone() + "\"").replace("H1\"", "J1\""), t.start, t.finish))
            .collect::<std::collections::BTreeSet<_>>()
    };
    assert_eq!(times(&reading), times(&other));
}

#[test]
fn work_begun_before_its_stage_is_declared_is_said() {
    let begun = event("2026-09-17T12:08-03:00", "started = { task = \"H1\" }");
    let plan = plan_with(&begun, NOW);
    assert!(plan.clashes.iter().any(|clash| clash.task == "H1"), "{:?}", plan.clashes);
}

#[test]
fn what_adopting_the_computed_arrival_would_move_is_told_both_ways() {
    for (adopted, later) in [("2026-09-19T09:00-03:00", false), ("2026-09-18T03:00-03:00", true)] {
        let order = event(
            "2026-09-17T12:06-03:00",
            &format!(
                "adopts_arrival = {{ place = \"pilot-station\", wind = \"34 kt\", time = \"{adopted}\" }}"
            ),
        );
        let plan = plan_with(&order, NOW);
        assert_eq!(plan.if_adopted.len(), 1);
        assert_eq!(plan.if_adopted[0].by.get() > 0, later);
        assert_eq!(plan.overtaken.is_empty(), later);
    }
}

#[test]
fn a_pool_that_stops_takes_all_its_members_and_is_the_cause_of_what_no_longer_fits() {
    let stop =
        event("2026-09-17T12:30-03:00", "out = { member = \"pilot\", from = \"2026-09-17T13:00-03:00\" }");
    let reading = port_with(&stop);
    let history = reading.plans("2026-09-17T12:31-03:00");
    let plan = history.latest().unwrap();
    assert_eq!(plan.breaches, []);
    for ship in ["V01/sail", "V02/sail"] {
        assert_eq!(plan.task(ship).unwrap().state, TaskState::GivenUp, "{ship}");
    }
    let changes = changes_between(&history.plans[0], plan, &reading.events, &reading.port.clock);
    let ship = changes.turned.iter().find(|turned| turned.id == "V01/sail").unwrap();
    assert!(ship.cause.contains("pilot out of service from Thu 17 Sep 13:00"), "{}", ship.cause);
}

#[test]
fn nobody_passes_a_channel_while_it_is_out_of_use() {
    let shut = "unusable = { place = \"main\", from = \"2026-09-17T12:30-03:00\", until = \"2026-09-17T18:00-03:00\" }";
    let before = plan_with("", NOW);
    let is_within =
        |start: Moment| ("2026-09-17T15:30Z".."2026-09-17T21:00Z").contains(&start.to_string().as_str());
    assert!(["V01/sail", "V02/sail"].iter().any(|ship| is_within(before.task(ship).unwrap().start.unwrap())));
    let plan = plan_with(&event("2026-09-17T12:06-03:00", shut), NOW);
    assert_eq!(plan.breaches, []);
    for ship in ["V01/sail", "V02/sail"] {
        assert!(plan.task(ship).unwrap().start.is_none_or(|start| !is_within(start)), "{ship}");
    }
    assert!(
        plan.notes.iter().any(|note| note.starts_with("fact: main cannot be used from")),
        "{:?}",
        plan.notes
    );
}

#[test]
fn facts_and_rulings_stand_in_the_head_until_they_end() {
    let events =
        event("2026-09-17T12:06-03:00", "curfew = { area = \"town\", until = \"2026-09-17T12:09-03:00\" }")
            + &event("2026-09-17T12:06-03:00", "signal = { shown = \"two balls\" }")
            + &event("2026-09-17T12:07-03:00", "holds = { stage = \"S2\" }");
    let notes = plan_with(&events, NOW).notes;
    let heads: Vec<&str> = notes.iter().filter_map(|note| note.split(" from ").next()).collect();
    assert_eq!(heads, ["order: stage S2 held (Harbour Master)", "fact: signal two balls shown"]);
}

#[test]
fn a_plan_made_before_an_advisory_was_withdrawn_still_stands_on_it() {
    let reading = port_with(&event("2026-09-17T12:08-03:00", "withdraws = { event = 1 }"));
    let history = reading.plans(NOW);
    let [taken, withdrawn, now] = history.plans.as_slice() else { panic!("{} plans", history.plans.len()) };
    assert!(taken.advisory.is_some());
    assert!(withdrawn.advisory.is_none() && now.advisory.is_none());
    assert!(history.plans.iter().all(|plan| plan.breaches.is_empty()));
}

#[test]
fn a_plan_made_again_for_news_is_the_one_that_the_whole_record_gives() {
    let old = event("2026-09-17T12:06-03:00", "declares = { stage = \"S1\" }")
        + &event("2026-09-17T12:07-03:00", "done = { task = \"H1\" }")
        + &event("2026-09-17T12:10-03:00", "started = { task = \"V01/secure\" }");
    for news in [
        "out = { member = \"T1\" }",
        "withdraws = { event = 3 }",
        "withdraws = { event = 1 }",
        "adopts_arrival = { place = \"pilot-station\", wind = \"34 kt\", time = \"2026-09-18T09:00-03:00\" }",
        "left = { task = \"V01/secure\", still = \"5 h\" }",
    ] {
        let earlier = port_with(&old).plans(NOW);
        let reading = port_with(&(old.clone() + &event(NOW, news)));
        let again = plan_again(&reading.inputs(), &earlier, reading.moment(NOW));
        assert_eq!(again, reading.plans(NOW).plans.pop().unwrap(), "{news}");
    }
}
