//! What is fixed and what was issued: the one never moves, the other only for a reason and never by a little.

use crate::checker::violations;
use crate::instances::{empty, plain, slot, slots, task};
use snugdown::schedule::outcome::{Outcome, Schedule, Why};
use snugdown::schedule::problem::{
    Fixed, IfGivenUp, Issued, Link, LinkKind, Member, Need, Pool, Problem, Task, Way,
};
use snugdown::schedule::search::{Effort, solve};
use snugdown::time::moment::Minutes;
use snugdown::time::windows::WindowSet;

fn crew(members: usize) -> Pool {
    Pool { members: vec![Member { available: WindowSet::always(), duty: None, worked: vec![] }; members] }
}

fn job(takes: i64, able: &[usize]) -> Way {
    let zero = Minutes::ZERO;
    let need = Need { pool: 0, count: 1, able: able.to_vec(), before: zero, after: zero };
    Way { needs: vec![need], ..plain(slots(takes)) }
}

fn issued_at(start: i64, member: usize) -> Option<Issued> {
    Some(Issued { way: 0, start: slot(start), members: vec![vec![member]] })
}

fn with_tasks(tasks: Vec<Task>, members: usize) -> Problem {
    let mut problem = empty(slot(100));
    problem.pools.push(crew(members));
    problem.tasks = tasks;
    problem.tasks.iter_mut().enumerate().for_each(|(rank, task)| task.rank = rank as u32);
    problem
}

fn solved(problem: &Problem) -> Schedule {
    let schedule = solve(problem, Effort::usual(problem.tasks.len())).unwrap();
    assert_eq!(violations(problem, &schedule), Vec::<String>::new());
    schedule
}

#[test]
fn an_issued_task_stays_though_it_could_go_earlier() {
    let problem = with_tasks(vec![Task { issued: issued_at(8, 1), ..task(job(3, &[0, 1])) }], 2);
    let placed = solved(&problem);
    assert_eq!(placed.placement(0).map(|at| (at.start, at.members.clone())), Some((slot(8), vec![vec![1]])));
}

#[test]
fn an_issued_task_gives_way_when_a_more_important_one_would_be_given_up() {
    let urgent = Task { deadline: Some(slot(10)), ..task(job(5, &[0])) };
    let calm = Task { class: 1, issued: issued_at(4, 0), ..task(job(4, &[0])) };
    let problem = with_tasks(vec![calm, Task { release: slot(3), ..urgent }], 1);
    let schedule = solved(&problem);
    assert_eq!(schedule.score.classes[0].given_up, 0);
    assert_eq!(schedule.score.classes[1].given_up, 0);
    assert_ne!(schedule.placement(0).unwrap().start, slot(4));
}

#[test]
fn another_member_takes_over_sooner_than_the_time_is_moved() {
    let mut problem = with_tasks(vec![Task { issued: issued_at(8, 0), ..task(job(3, &[0, 1])) }], 2);
    problem.pools[0].members[0].available = WindowSet::never();
    let placed = solved(&problem);
    assert_eq!(placed.placement(0).map(|at| (at.start, at.members.clone())), Some((slot(8), vec![vec![1]])));
}

#[test]
fn an_issued_task_that_must_move_moves_by_the_least_amount_or_more() {
    let mut problem = with_tasks(vec![Task { issued: issued_at(8, 0), ..task(job(3, &[0])) }], 1);
    problem.least_move = Minutes::new(30);
    problem.tasks[0].release = slot(9);
    assert_eq!(solved(&problem).placement(0).unwrap().start, slot(11));
    problem.tasks[0].deadline = Some(slot(13));
    assert_eq!(solved(&problem).placement(0).unwrap().start, slot(9));
}

#[test]
fn a_fixed_task_stands_where_it_is_and_others_go_round_it() {
    let fixed = Fixed { way: 0, start: slot(-2), finish: slot(6), members: vec![vec![0]] };
    let problem = with_tasks(vec![Task { fixed: Some(fixed), ..task(job(3, &[0])) }, task(job(2, &[0]))], 1);
    let schedule = solved(&problem);
    assert_eq!(schedule.placement(0).unwrap().finish, slot(6));
    assert_eq!(schedule.placement(1).unwrap().start, slot(6));
}

#[test]
fn each_link_says_what_becomes_of_the_task_that_waits_for_one_given_up() {
    for (if_given_up, is_placed) in [(IfGivenUp::GiveUpToo, false), (IfGivenUp::StartAtDecision, true)] {
        let lost = Task { deadline: Some(slot(2)), ..task(plain(slots(3))) };
        let mut problem = with_tasks(vec![lost, task(plain(slots(1)))], 0);
        let (kind, lag) = (LinkKind::FinishStart, Minutes::ZERO);
        problem.links.push(Link { before: 0, after: 1, kind, lag, if_given_up });
        let schedule = solved(&problem);
        let Outcome::GivenUp(lost) = &schedule.outcomes[0] else { panic!("it cannot fit") };
        assert_eq!((lost.why, lost.late_by, lost.proved), (Why::MissedDeadline, Some(slots(1)), true));
        assert_eq!(schedule.placement(1).is_some(), is_placed);
        if let Outcome::GivenUp(after) = &schedule.outcomes[1] {
            assert_eq!((after.why, after.proved), (Why::Predecessor(0), true));
        }
    }
}

#[test]
fn each_cause_of_giving_up_is_named() {
    let mut problem = with_tasks(vec![task(job(3, &[])), task(job(3, &[0])), task(plain(slots(3)))], 1);
    problem.pools[0].members[0].available = WindowSet::never();
    problem.windows.push(WindowSet::never());
    problem.tasks[2].ways[0].start_in.push(0);
    let causes: Vec<Option<Why>> = solved(&problem)
        .outcomes
        .iter()
        .map(|outcome| match outcome {
            Outcome::GivenUp(lost) if lost.proved => Some(lost.why),
            Outcome::GivenUp(_) | Outcome::Placed(_) => None,
        })
        .collect();
    assert_eq!(causes, vec![Some(Why::NoMembers(0)), Some(Why::NoTime), Some(Why::NoWindow)]);
}

#[test]
fn a_cut_is_taken_only_where_the_task_as_stated_would_make_something_late() {
    let cut = Way { cost: 3, ..plain(slots(2)) };
    let cargo = Task { ways: vec![plain(slots(6)), cut], ..task(plain(slots(6))) };
    let sail = Task { deadline: Some(slot(10)), ..task(plain(slots(3))) };
    let mut problem = with_tasks(vec![cargo, sail], 0);
    let (kind, lag, if_given_up) = (LinkKind::FinishStart, Minutes::ZERO, IfGivenUp::GiveUpToo);
    problem.links.push(Link { before: 0, after: 1, kind, lag, if_given_up });
    assert_eq!(solved(&problem).placement(0).unwrap().way, 0);
    problem.tasks[1].deadline = Some(slot(8));
    assert_eq!(solved(&problem).placement(0).unwrap().way, 1);
}
