//! The demo's record from its first event to its last: one plan after the other, and what each changes.
#![allow(clippy::unwrap_used, reason = "a test that finds no plan must fail")]

mod common;

use common::Reading;
use snugdown::plan::changes::{Changes, changes_between};
use snugdown::plan::sheet::{Plan, TaskState};
use snugdown::record::fold::situation;
use std::sync::OnceLock;

/// Just after the demo's last event.
const END: &str = "2026-09-21T12:00-03:00";

fn path() -> &'static (Reading, Vec<Plan>) {
    static PATH: OnceLock<(Reading, Vec<Plan>)> = OnceLock::new();
    PATH.get_or_init(|| {
        let reading = Reading::folder("demo-port");
        let plans = reading.plans(END).plans;
        (reading, plans)
    })
}

fn steps() -> Vec<(&'static Plan, &'static Plan, Changes)> {
    let (reading, plans) = path();
    plans
        .windows(2)
        .map(|pair| {
            (&pair[0], &pair[1], changes_between(&pair[0], &pair[1], &reading.events, &reading.port.clock))
        })
        .collect()
}

#[test]
fn every_plan_on_the_way_passes_the_audit() {
    for plan in &path().1 {
        assert!(plan.breaches.is_empty(), "{}: {:?}", plan.now, plan.breaches);
    }
}

#[test]
fn what_is_done_or_ordered_never_moves() {
    let (reading, plans) = path();
    for plan in plans {
        let then = situation(&reading.events, plan.now.to_utc());
        for (id, state) in &then.tasks {
            let line = plan.task(id).unwrap();
            if state.done_at().is_some() {
                assert_eq!(line.state, TaskState::Done, "{id} at {}", plan.now);
            }
        }
    }
}

#[test]
fn every_move_has_a_cause_and_none_is_under_ten_minutes() {
    for (_, later, changes) in steps() {
        for moved in &changes.moved {
            assert!(!moved.cause.is_empty(), "{} at {}", moved.id, later.now);
            assert!(
                moved.by().get().abs() >= 10,
                "{} at {}: {} because {}",
                moved.id,
                later.now,
                moved.by(),
                moved.cause
            );
        }
        for turned in &changes.turned {
            assert!(!turned.cause.is_empty(), "{} at {}", turned.id, later.now);
        }
    }
}

#[test]
fn a_report_that_work_went_as_planned_moves_nothing_else() {
    for (earlier, later, changes) in steps() {
        let is_plain = changes.news.iter().all(|news| news.contains(" begun (") || news.contains(" done ("));
        if is_plain && !changes.news.is_empty() && earlier.advisory == later.advisory {
            assert!(changes.moved.is_empty(), "{}: {:?}", later.now, changes.moved);
        }
    }
}
