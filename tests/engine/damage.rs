//! Damage done to valid schedules, which the independent check must name: a checker that finds nothing proves nothing.

use crate::checker::violations;
use crate::instances::{random, slots};
use snugdown::schedule::outcome::{Outcome, Placement, Schedule};
use snugdown::schedule::problem::{Problem, Way};
use snugdown::schedule::search::{Effort, solve};

/// Damages a placed task and tells the words that must be found, or `None` if this damage does not apply to it.
type Damage = fn(&Problem, &mut Placement, &Way) -> Option<&'static str>;

const DAMAGES: [Damage; 7] = [
    |_, at, _| {
        at.finish = at.finish + slots(1);
        Some("does not take its time")
    },
    |problem, at, _| {
        let back = at.start - problem.now + slots(1);
        (at.start, at.finish) = (at.start - back, at.finish - back);
        Some("starts too soon")
    },
    |problem, at, _| {
        let far = problem.horizon - at.finish + slots(1);
        (at.start, at.finish) = (at.start + far, at.finish + far);
        Some("finishes beyond the horizon")
    },
    |_, at, _| {
        at.members.first_mut().filter(|members| !members.is_empty())?.clear();
        Some("has not the members it needs")
    },
    |_, at, way| {
        let need = way.needs.first()?;
        let outsider = (0..9).find(|member| !need.able.contains(member)).filter(|member| *member < 1)?;
        *at.members.first_mut()?.first_mut()? = outsider;
        Some("has a member that is not able")
    },
    |_, at, way| {
        let first = way.needs.first()?.pool;
        if way.needs.get(1)?.pool != first {
            return None;
        }
        at.members[1] = at.members[0].clone();
        Some("has one member twice")
    },
    |_, at, _| {
        at.steps.pop()?;
        Some("do not sum to its start")
    },
];

#[test]
fn every_kind_of_damage_is_named() {
    let mut named = [0; DAMAGES.len()];
    for seed in 0..400 {
        let problem = random(seed, 8);
        let schedule = solve(&problem, Effort { seed, decodes: 10 }).unwrap();
        for task in (0..problem.tasks.len()).filter(|task| problem.tasks[*task].fixed.is_none()) {
            for (number, damage) in DAMAGES.iter().enumerate() {
                let mut damaged = schedule.clone();
                let Outcome::Placed(at) = &mut damaged.outcomes[task] else { continue };
                let way = &problem.tasks[task].ways[at.way];
                let Some(words) = damage(&problem, at, way) else { continue };
                let wrong = violations(&problem, &damaged);
                assert!(wrong.iter().any(|found| found.contains(words)), "{words}: {wrong:?}");
                named[number] += 1;
            }
        }
    }
    assert!(named.iter().all(|count| *count > 0), "{named:?}");
}

#[test]
fn tasks_moved_onto_each_other_are_named() {
    let mut named = [false; 3];
    for seed in 0..400 {
        let problem = random(seed, 10);
        let schedule = solve(&problem, Effort { seed, decodes: 10 }).unwrap();
        for task in 0..problem.tasks.len() {
            for other in 0..problem.tasks.len() {
                for words in violations(&problem, &moved_onto(&schedule, task, other)) {
                    named[0] |= words.contains("at once");
                    named[1] |= words.contains("too close in a lane");
                    named[2] |= words.contains("on duty");
                }
            }
        }
    }
    assert_eq!(named, [true; 3]);
}

fn moved_onto(schedule: &Schedule, task: usize, other: usize) -> Schedule {
    let mut moved = schedule.clone();
    let Some(start) = schedule.placement(other).map(|placed| placed.start) else { return moved };
    if let Outcome::Placed(placed) = &mut moved.outcomes[task] {
        let takes = placed.finish - placed.start;
        (placed.start, placed.finish) = (start, start + takes);
    }
    moved
}
