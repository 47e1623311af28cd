//! Chains whose minutes add up, and earliest and latest times that schedules respect.

use crate::instances::random;
use snugdown::schedule::explain::{What, chain};
use snugdown::schedule::latest::{Latest, Limits, earliest, latest};
use snugdown::schedule::outcome::{ClassScore, Outcome};
use snugdown::schedule::search::{Effort, solve};
use snugdown::time::moment::Minutes;

#[test]
fn the_minutes_of_every_chain_sum_to_the_finish_and_to_the_lateness() {
    let (mut told, mut through_others) = (0, 0);
    for seed in 0..2_000 {
        let problem = random(seed, 12);
        let schedule = solve(&problem, Effort { seed, decodes: 20 }).unwrap();
        for (task, outcome) in schedule.outcomes.iter().enumerate() {
            let Some(chain) = chain(&problem, &schedule, task) else {
                assert!(matches!(outcome, Outcome::GivenUp(lost) if lost.would_finish.is_none()));
                continue;
            };
            let mut sum = Minutes::ZERO;
            chain.parts.iter().for_each(|part| sum += part.minutes);
            assert_eq!(problem.now + sum, chain.to, "seed {seed}, task {task}: {chain:?}");
            match outcome {
                Outcome::Placed(placed) => assert_eq!(chain.to, placed.finish),
                Outcome::GivenUp(lost) => {
                    let deadline = problem.tasks[task].deadline.unwrap();
                    assert_eq!(Some(sum - (deadline - problem.now)), lost.late_by);
                }
            }
            told += 1;
            let is_other = |what: &What| matches!(what, What::MemberFrom { .. } | What::Behind { .. });
            through_others += usize::from(chain.parts.iter().any(|part| is_other(&part.what)));
        }
    }
    assert!(told > 5_000 && through_others > 300, "{told} {through_others}");
}

#[test]
fn where_nothing_is_given_up_no_task_is_before_its_earliest_or_after_its_latest() {
    let mut told = 0;
    for seed in 0..3_000 {
        let problem = random(seed, 8);
        let schedule = solve(&problem, Effort { seed, decodes: 30 }).unwrap();
        if schedule.score.classes.iter().any(|class: &ClassScore| class.given_up > 0) {
            continue;
        }
        let placed = |task: usize| schedule.placement(task).unwrap();
        let ways: Vec<usize> = (0..problem.tasks.len()).map(|task| placed(task).way).collect();
        let (soonest, last) =
            (earliest(&problem).unwrap(), latest(&problem, Limits::Deadlines, &ways).unwrap());
        for task in 0..problem.tasks.len() {
            let at = placed(task);
            let soon = soonest[task].unwrap();
            assert!(soon.start <= at.start && soon.finish <= at.finish, "seed {seed}, task {task}");
            match last[task] {
                Latest::By(ends) => assert!(at.start <= ends.start, "seed {seed}, task {task}"),
                Latest::Unlimited => {}
                Latest::Never => panic!("seed {seed}, task {task} keeps its limits"),
            }
            told += 1;
        }
    }
    assert!(told > 1_500, "{told}");
}
