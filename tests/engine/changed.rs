//! Changes to a problem whose effect on the score is known beforehand.

use crate::instances::{Dice, issued, random, slots};
use snugdown::schedule::outcome::{Outcome, Schedule};
use snugdown::schedule::problem::{Member, Problem};
use snugdown::schedule::search::{Effort, solve};
use snugdown::time::span::Span;
use snugdown::time::windows::WindowSet;

fn solved(problem: &Problem) -> Schedule {
    solve(problem, Effort { seed: 1, decodes: 1_500 }).unwrap()
}

#[test]
fn the_same_problem_and_effort_give_the_same_schedule() {
    for seed in 0..100 {
        let problem = random(seed, 10);
        let effort = Effort { seed, decodes: 200 };
        assert_eq!(solve(&problem, effort), solve(&problem, effort));
    }
}

#[test]
fn one_more_member_never_makes_it_less_safe() {
    for seed in 0..300 {
        let problem = random(seed, 7);
        let mut more = problem.clone();
        let new = more.pools[0].members.len();
        more.pools[0].members.push(Member { available: WindowSet::always(), duty: None, worked: vec![] });
        for way in more.tasks.iter_mut().flat_map(|task| &mut task.ways) {
            way.needs.iter_mut().filter(|need| need.pool == 0).for_each(|need| need.able.push(new));
        }
        assert!(solved(&more).score.classes <= solved(&problem).score.classes, "seed {seed}");
    }
}

#[test]
fn a_wider_window_never_makes_it_less_safe() {
    for seed in 0..300 {
        let problem = random(seed, 7);
        let mut wider = problem.clone();
        for window in &mut wider.windows {
            let one = slots(1);
            let spans = window.spans().iter();
            *window = WindowSet::from_spans(
                spans.filter_map(|span| Span::new(span.start() - one, span.end() + one)),
            );
        }
        assert!(solved(&wider).score.classes <= solved(&problem).score.classes, "seed {seed}");
    }
}

#[test]
fn the_numbering_of_tasks_does_not_matter() {
    for seed in 0..300 {
        let problem = random(seed, 10);
        let dice = &mut Dice::new(seed + 1);
        let count = problem.tasks.len();
        let mut order: Vec<usize> = (0..count).collect();
        (1..count).for_each(|at| order.swap(at, dice.below(at + 1)));
        let mut other = problem.clone();
        other.tasks = order.iter().map(|task| problem.tasks[*task].clone()).collect();
        let place = |task: usize| order.iter().position(|other| *other == task).unwrap();
        for link in &mut other.links {
            (link.before, link.after) = (place(link.before), place(link.after));
        }
        let effort = Effort { seed: 1, decodes: 100 };
        let (one, two) = (solve(&problem, effort).unwrap(), solve(&other, effort).unwrap());
        assert_eq!(one.score, two.score, "seed {seed}");
        for task in 0..count {
            let start = |schedule: &Schedule, task| schedule.placement(task).map(|placed| placed.start);
            assert_eq!(start(&one, task), start(&two, place(task)), "seed {seed}, task {task}");
        }
    }
}

#[test]
fn a_plan_that_is_issued_and_made_again_moves_nothing_but_for_safety() {
    let mut same = 0;
    for seed in 0..500 {
        let problem = random(seed, 10);
        let first = solved(&problem);
        let again = solved(&issued(&problem, &first));
        assert!(again.score.classes <= first.score.classes, "seed {seed}");
        if again.score.classes == first.score.classes {
            same += 1;
            assert_eq!(again.score.moved, 0, "seed {seed}");
            for (was, is) in first.outcomes.iter().zip(&again.outcomes) {
                if let (Outcome::Placed(was), Outcome::Placed(is)) = (was, is) {
                    assert_eq!((was.start, was.way, &was.members), (is.start, is.way, &is.members));
                }
            }
        }
    }
    assert!(same >= 490, "{same}");
}
