//! The audit: a sound plan passes, and every kind of damage to it is named.
#![allow(clippy::unwrap_used, reason = "a test that finds no plan must fail")]

mod common;

use common::Reading;
use snugdown::plan::fold::audit_plan;
use snugdown::plan::sheet::{Plan, StageStatus, TaskLine, TaskState};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::chance::Chance;
use std::sync::OnceLock;

const EVENTS: &str = r#"
[[event]]
at = "2026-09-17T12:05-03:00"
by = "Duty officer"
took_advisory = { file = "01.txt" }

[[event]]
at = "2026-09-17T12:06-03:00"
by = "Harbour Master"
declares = { stage = "S1" }

[[event]]
at = "2026-09-17T12:07-03:00"
by = "Duty officer"
done = { task = "H1", at = "2026-09-17T12:06-03:00" }

[[event]]
at = "2026-09-17T12:08-03:00"
by = "Harbour Master"
fixes = { task = "V02/sail", start = "2026-09-17T16:00-03:00" }

[[event]]
at = "2026-09-17T12:08-03:00"
by = "Harbour Master"
adopts_arrival = { place = "pilot-station", wind = "34 kt", time = "2026-09-18T09:00-03:00" }

[[event]]
at = "2026-09-17T12:09-03:00"
by = "Duty officer"
started = { task = "V02/secure", at = "2026-09-17T12:08-03:00" }

[[event]]
at = "2026-09-17T12:09-03:00"
by = "Tug office"
out = { member = "T2", from = "2026-09-18T06:00-03:00" }

[[event]]
at = "2026-09-17T12:09-03:00"
by = "Traffic service"
unusable = { place = "main", from = "2026-09-19T12:00-03:00" }

[[event]]
at = "2026-09-17T12:09-03:00"
by = "Berth foreman"
not_needed = { task = "Q2/clear" }

[[event]]
at = "2026-09-17T12:09-03:00"
by = "Master"
cannot = { task = "V02/stay" }
"#;

fn sound() -> &'static (Reading, Plan) {
    static SOUND: OnceLock<(Reading, Plan)> = OnceLock::new();
    SOUND.get_or_init(|| {
        let mut reading = Reading::folder("tests/data/small-port");
        reading.add_forecast("01.txt", include_str!("data/small-port/approach.txt"));
        reading.set_events(EVENTS);
        let plan = reading.plans("2026-09-17T12:10-03:00").plans.pop().unwrap();
        (reading, plan)
    })
}

/// The codes that the audit finds in the plan after some damage.
fn codes(damage: impl Fn(&mut Plan)) -> Vec<&'static str> {
    let (reading, plan) = sound();
    let mut damaged = plan.clone();
    damage(&mut damaged);
    assert_ne!(*plan, damaged, "the damage changed nothing");
    let mut codes: Vec<&str> =
        audit_plan(&reading.inputs(), &damaged).iter().map(|breach| breach.code).collect();
    codes.dedup();
    codes
}

fn line<'a>(plan: &'a mut Plan, id: &str) -> &'a mut TaskLine {
    plan.tasks.iter_mut().find(|line| line.id == id).unwrap()
}

/// Moves a task, and what is told of its chain with it, so that only the move itself is wrong.
fn move_to(plan: &mut Plan, id: &str, start: Moment) {
    let line = line(plan, id);
    let by = start - line.start.unwrap();
    line.start = Some(start);
    line.finish = line.finish.map(|finish| finish + by);
    line.chain_from = line.chain_from + by;
    line.latest_start = None;
}

fn at(text: &str) -> Moment {
    sound().0.moment(text)
}

#[test]
fn a_sound_plan_passes() {
    let (reading, plan) = sound();
    assert_eq!(audit_plan(&reading.inputs(), plan), []);
    assert_eq!(
        plan.task("V01/sail").unwrap().state,
        TaskState::Planned,
        "the base plan must sail the deep ship"
    );
}

macro_rules! names {
    ($($test:ident: $code:literal, $damage:expr;)*) => {$(
        #[test]
        fn $test() {
            let found = codes($damage);
            assert!(found.contains(&$code), "{found:?}");
        }
    )*};
}

names! {
    a_dropped_task_is_named: "audit-task-dropped", |plan| { plan.tasks.pop(); };
    a_doubled_task_is_named: "audit-task-twice", |plan| { let copy = plan.tasks[0].clone(); plan.tasks.push(copy); };
    an_unknown_task_is_named: "audit-unknown-task", |plan| line(plan, "V01/sail").id = String::from("V77/sail");
    a_task_without_a_time_is_named: "audit-no-time", |plan| {
        let line = line(plan, "V01/sail");
        (line.start, line.finish) = (None, None);
    };
    half_a_time_is_named: "audit-half-a-time", |plan| line(plan, "V01/sail").finish = None;
    a_given_up_task_that_holds_a_time_is_named: "audit-given-up-holds-time", |plan| {
        line(plan, "V01/sail").state = TaskState::GivenUp;
    };
    a_given_up_task_that_holds_people_is_named: "audit-given-up-holds-people", |plan| {
        line(plan, "V01/sail").state = TaskState::GivenUp;
    };
    giving_up_without_a_reason_is_named: "audit-no-reason", |plan| line(plan, "V01/sail").state = TaskState::GivenUp;
    a_wrong_duration_is_named: "audit-duration", |plan| {
        let line = line(plan, "V01/sail");
        line.finish = line.finish.map(|finish| finish - Minutes::new(1));
    };
    a_task_made_shorter_than_it_is_is_named: "audit-too-short", |plan| {
        let line = line(plan, "V01/secure");
        line.takes = line.takes - Minutes::new(1);
        line.finish = line.finish.map(|finish| finish - Minutes::new(1));
    };
    a_start_in_the_past_is_named: "audit-in-the-past", |plan| move_to(plan, "K1/tie-down", at("2026-09-17T11:00-03:00"));
    a_link_cut_short_by_a_minute_is_named: "audit-link", |plan| {
        let start = line(plan, "V01/secure").finish.unwrap() - Minutes::new(1);
        move_to(plan, "V01/sail", start);
    };
    a_task_planned_after_one_that_is_given_up_is_named: "audit-predecessor-given-up", |plan| {
        line(plan, "V01/secure").state = TaskState::GivenUp;
    };
    a_task_planned_after_one_that_waits_for_a_stage_is_named: "audit-predecessor-waits", |plan| {
        line(plan, "V01/secure").state = TaskState::Waiting;
    };
    a_chain_that_does_not_add_up_is_named: "audit-chain", |plan| {
        let line = line(plan, "V01/sail");
        line.chain_from = line.chain_from + Minutes::new(1);
    };
    a_missed_hard_deadline_is_named: "audit-deadline", |plan| {
        move_to(plan, "T1-moor", at("2026-09-18T06:31-03:00"));
    };
    a_latest_start_that_is_too_late_is_named: "audit-latest-start", |plan| {
        let line = line(plan, "T1-moor");
        line.latest_start = line.latest_start.map(|latest| latest + Minutes::hours(3));
    };
    a_start_after_the_latest_is_named: "audit-after-latest-start", |plan| {
        let line = line(plan, "T1-moor");
        line.latest_start = line.start.map(|start| start - Minutes::new(1));
    };
    a_start_before_its_own_time_is_named: "audit-released-later", |plan| {
        move_to(plan, "V01/secure", at("2026-09-17T13:59-03:00"));
    };
    a_start_before_its_stage_is_due_is_named: "audit-gate", |plan| move_to(plan, "R1", at("2026-09-18T12:00-03:00"));
    an_undeclared_gate_left_unsaid_is_named: "audit-gate-unsaid", |plan| line(plan, "R1").if_declared = None;
    sailing_without_water_is_named: "audit-tide", |plan| move_to(plan, "V01/sail", at("2026-09-17T20:00-03:00"));
    working_in_the_dark_is_named: "audit-daylight", |plan| move_to(plan, "R1", at("2026-09-20T23:00-03:00"));
    ships_too_close_in_the_channel_are_named: "audit-channel", |plan| {
        let start = line(plan, "V02/sail").start.unwrap() + Minutes::new(5);
        move_to(plan, "V01/sail", start);
    };
    a_member_that_does_not_exist_is_named: "audit-unknown-member", |plan| {
        line(plan, "V01/sail").members[0].1[0] = String::from("P9");
    };
    a_missing_member_is_named: "audit-member-count", |plan| { line(plan, "V01/sail").members[0].1.pop(); };
    a_member_that_may_not_serve_is_named: "audit-member-unable", |plan| {
        line(plan, "V01/sail").members[0].1[0] = String::from("P2");
    };
    a_member_in_two_places_is_named: "audit-held-twice", |plan| {
        let other = line(plan, "V02/sail").clone();
        let tugs = other.members.iter().find(|(pool, _)| pool == "tug").unwrap().clone();
        let start = other.start.unwrap();
        let line = line(plan, "T1-moor");
        line.members = vec![(String::from("tug"), vec![tugs.1[0].clone(), String::from("T2")])];
        move_to(plan, "T1-moor", start);
    };
    a_member_out_of_service_is_named: "audit-out-of-service", |plan| {
        line(plan, "T1-moor").members = vec![(String::from("tug"), vec![String::from("T1"), String::from("T2")])];
        move_to(plan, "T1-moor", at("2026-09-18T05:30-03:00"));
    };
    a_passage_through_a_channel_out_of_use_is_named: "audit-unusable", |plan| {
        move_to(plan, "V01/sail", at("2026-09-19T13:00-03:00"));
    };
    a_gang_off_shift_is_named: "audit-off-shift", |plan| move_to(plan, "K1/tie-down", at("2026-09-18T03:00-03:00"));
    a_pilot_kept_too_long_on_duty_is_named: "audit-duty", |plan| {
        line(plan, "V02/sail").members.iter_mut().find(|(pool, _)| pool == "pilot").unwrap().1 = vec![String::from("P1")];
        move_to(plan, "V01/sail", at("2026-09-18T02:45-03:00"));
    };
    a_done_task_moved_is_named: "audit-done-changed", |plan| {
        let line = line(plan, "H1");
        line.finish = line.finish.map(|finish| finish + Minutes::new(5));
    };
    a_begun_task_moved_is_named: "audit-started-changed", |plan| {
        let line = line(plan, "V02/secure");
        line.start = line.start.map(|start| start + Minutes::new(5));
    };
    an_order_moved_is_named: "audit-order-moved", |plan| move_to(plan, "V02/sail", at("2026-09-17T16:10-03:00"));
    a_needless_task_planned_all_the_same_is_named: "audit-report-ignored", |plan| {
        line(plan, "Q2/clear").state = TaskState::Planned;
    };
    an_impossible_task_planned_all_the_same_is_named: "audit-report-ignored", |plan| {
        line(plan, "V02/stay").state = TaskState::Planned;
    };
    doneness_that_nobody_reported_is_named: "audit-not-reported", |plan| line(plan, "Q1/clear").state = TaskState::Done;
    an_adopted_arrival_changed_is_named: "audit-adopted-changed", |plan| {
        plan.arrivals[0].adopted = plan.arrivals[0].adopted.map(|at| at + Minutes::new(30));
    };
    an_arrival_nobody_adopted_is_named: "audit-not-adopted", |plan| {
        let place = plan.arrivals.iter_mut().find(|arrival| arrival.place == "quays").unwrap();
        place.adopted = Some(place.computed.unwrap());
    };
    a_stage_that_declares_itself_is_named: "audit-undeclared", |plan| {
        plan.stages.iter_mut().find(|stage| stage.id == "S2").unwrap().status = StageStatus::Declared;
    };
    a_stage_that_lifts_itself_is_named: "audit-unlifted", |plan| {
        plan.stages.iter_mut().find(|stage| stage.id == "S1").unwrap().status = StageStatus::Lifted;
    };
    a_declared_stage_hidden_is_named: "audit-order-dropped", |plan| {
        plan.stages.iter_mut().find(|stage| stage.id == "S1").unwrap().status = StageStatus::Recommended;
    };
    a_stage_due_at_another_time_is_named: "audit-stage-due", |plan| {
        let stage = plan.stages.iter_mut().find(|stage| stage.id == "S2").unwrap();
        stage.due = stage.due.map(|due| due + Minutes::new(1));
    };
    an_unknown_stage_is_named: "audit-unknown-stage", |plan| plan.stages[0].id = String::from("S9");
    a_chance_made_smaller_is_named: "audit-chance", |plan| {
        line(plan, "V01/sail").caught = Some(Chance::new(0.5).unwrap());
    };
    a_cut_without_leave_is_named: "audit-cut-without-leave", |plan| {
        line(plan, "V01/secure").cut = Some(String::from("price"));
    };
    a_stand_in_that_nobody_asked_for_is_named: "audit-stand-in-without-leave", |plan| {
        line(plan, "V01/stay").state = TaskState::Planned;
    };
}
