//! The demo port's sailings, as a scratch calculation by hand settled them: pilots' duty, tide, tugs and channel.
//!
//! All invented (Quillhaven): berth to pilot station 1 h 30, a pilot's round 3 h 15 with 10 h duty and 10 h rest, a
//! tug's round 2 h 15, spacing 30 min, 45 min with a deep ship.

use crate::checker::violations;
use crate::instances::{empty, plain, task};
use snugdown::schedule::outcome::{Outcome, Schedule};
use snugdown::schedule::problem::{
    Direction, Duty, IfGivenUp, Lane, LaneUse, Link, LinkKind, Member, Need, Pool, Problem, Way,
};
use snugdown::schedule::search::{Effort, solve};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::span::Span;
use snugdown::time::windows::WindowSet;

/// Hours and minutes after Thursday 00:00.
fn at(hours: i64, minutes: i64) -> Moment {
    Moment::from_epoch_minutes(hours * 60 + minutes)
}

fn spans(spans: &[(Moment, Moment)]) -> WindowSet {
    WindowSet::from_spans(spans.iter().filter_map(|(start, end)| Span::new(*start, *end)))
}

fn member(duty_hours: Option<i64>) -> Member {
    let duty =
        duty_hours.map(|hours| Duty { at_most: Minutes::hours(hours), then_rest: Minutes::hours(hours) });
    Member { available: WindowSet::always(), duty, worked: vec![] }
}

const PILOTS: usize = 0;
const TUGS: usize = 1;
const LARGE: &[usize] = &[0, 1, 2];
const SMALL: &[usize] = &[3, 4, 0, 1, 2];
const STRONG: &[usize] = &[0, 1];
const ANY_TUG: &[usize] = &[2, 3, 0, 1];

fn need(pool: usize, count: usize, able: &[usize], after: i64) -> Need {
    Need { pool, count, able: able.to_vec(), before: Minutes::ZERO, after: Minutes::new(after) }
}

/// A ship: name, ready, deep, pilots who may, tugs (how many of which), windows for leaving.
struct Ship {
    name: &'static str,
    ready: Moment,
    deep: bool,
    pilots: &'static [usize],
    tugs: (usize, &'static [usize]),
    leaves_in: Option<usize>,
}

fn ship(name: &'static str, ready: Moment) -> Ship {
    Ship { name, ready, deep: false, pilots: LARGE, tugs: (2, STRONG), leaves_in: None }
}

/// When the ships with cargo still to work are ready: V01, V03, V05, and the ferry V08.
struct Ready {
    v01: Moment,
    v03: Moment,
    v05: Moment,
    v08: Moment,
}

fn ships(ready: &Ready) -> Vec<Ship> {
    vec![
        Ship { deep: true, leaves_in: Some(0), ..ship("V01", ready.v01) },
        Ship { pilots: SMALL, tugs: (1, ANY_TUG), ..ship("V02", at(16, 0)) },
        Ship { deep: true, ..ship("V03", ready.v03) },
        Ship { leaves_in: Some(2), ..ship("V04", at(10, 0)) },
        Ship { deep: true, leaves_in: Some(1), tugs: (2, ANY_TUG), ..ship("V05", ready.v05) },
        ship("V07", at(14, 0)),
        Ship { pilots: &[], tugs: (0, &[]), ..ship("V08", ready.v08) },
        ship("V09", at(18, 0)),
        Ship { pilots: SMALL, tugs: (1, ANY_TUG), ..ship("V10", at(12, 0)) },
        Ship { pilots: &[], tugs: (0, &[]), ..ship("V12", at(13, 0)) },
        Ship { pilots: SMALL, tugs: (0, &[]), ..ship("V14", at(15, 0)) },
    ]
}

fn sailings(ready: &Ready, now: Moment, clear_by: Moment, duty: Option<i64>) -> Problem {
    let mut problem = empty(at(60, 0));
    problem.now = now;
    problem.windows = vec![
        spans(&[(at(14, 10), at(17, 36)), (at(26, 40), at(29, 56))]),
        spans(&[(at(12, 30), at(19, 21)), (at(24, 50), at(31, 46))]),
        spans(&[(at(6, 0), at(18, 11)), (at(30, 0), at(42, 11))]),
    ];
    let mut tugs = vec![member(None); 4];
    // T3 and T4 tow the crane barge from 07:00 to 11:00.
    for tug in &mut tugs[2..] {
        tug.worked.extend(Span::new(at(7, 0), at(11, 0)));
    }
    problem.pools = vec![Pool { members: vec![member(duty); 5] }, Pool { members: tugs }];
    let (near, far) = (Minutes::new(30), Minutes::new(45));
    problem.lanes.push(Lane { spacing: vec![vec![near, far], vec![far, far]], clearance: Minutes::ZERO });
    for (rank, ship) in ships(ready).into_iter().enumerate() {
        let mut way = Way { start_in: ship.leaves_in.into_iter().collect(), ..plain(Minutes::new(90)) };
        if !ship.pilots.is_empty() {
            way.needs.push(need(PILOTS, 1, ship.pilots, 105));
        }
        if ship.tugs.0 > 0 {
            way.needs.push(need(TUGS, ship.tugs.0, ship.tugs.1, 45));
        }
        way.lane = Some(LaneUse {
            lane: 0,
            enter: Minutes::ZERO,
            leave: Minutes::new(90),
            direction: Direction::Out,
            class: usize::from(ship.deep),
        });
        let mut sail = task(way);
        sail.release = ship.ready;
        sail.deadline = Some(clear_by);
        sail.rank = rank as u32;
        problem.tasks.push(sail);
    }
    // V14 lies outside V10 and leaves after her.
    let lag = Minutes::new(-90);
    let if_given_up = IfGivenUp::GiveUpToo;
    problem.links.push(Link { before: 8, after: 10, kind: LinkKind::FinishStart, lag, if_given_up });
    problem
}

fn as_planned() -> Ready {
    Ready { v01: at(19, 0), v03: at(22, 0), v05: at(24, 0), v08: at(28, 0) }
}

fn given_up(schedule: &Schedule) -> Vec<&'static str> {
    let ships = ships(&as_planned());
    let outcomes = schedule.outcomes.iter().zip(ships);
    outcomes
        .filter(|(outcome, _)| matches!(outcome, Outcome::GivenUp(_)))
        .map(|(_, ship)| ship.name)
        .collect()
}

fn solved(problem: &Problem) -> Schedule {
    let schedule = solve(problem, Effort::usual(problem.tasks.len())).unwrap();
    assert_eq!(violations(problem, &schedule), Vec::<String>::new());
    schedule
}

#[test]
fn all_eleven_ships_sail_before_the_gale_of_advisory_9() {
    let schedule = solved(&sailings(&as_planned(), at(0, 0), at(34, 0), Some(10)));
    assert_eq!(given_up(&schedule), Vec::<&str>::new());
}

#[test]
fn sending_a_pilot_without_rest_looks_better_and_is_unlawful() {
    // One pilot for three ships: V09 at 18:00, V05 and V01 on the tides of the night after.
    let one_pilot = |duty: Option<i64>| {
        let mut problem = sailings(&as_planned(), at(0, 0), at(34, 0), duty);
        problem.pools[PILOTS].members.truncate(1);
        problem.links.clear();
        let kept = [0, 4, 7];
        problem.tasks = kept.iter().map(|ship| problem.tasks[*ship].clone()).collect();
        for task in &mut problem.tasks {
            task.ways[0].needs[0].able = vec![0];
        }
        problem.tasks[2].deadline = Some(at(19, 30));
        problem
    };
    let lawful = solved(&one_pilot(Some(10)));
    let tireless = solved(&one_pilot(None));
    assert_eq!(tireless.score.classes[0].given_up, 0);
    assert_eq!(lawful.score.classes[0].given_up, 1);
    let wrong = violations(&one_pilot(Some(10)), &tireless);
    assert!(wrong.iter().any(|words| words.contains("on duty")), "{wrong:?}");
}

#[test]
fn three_ships_cannot_sail_when_advisory_12_takes_eight_hours_away() {
    let schedule = solved(&sailings(&as_planned(), at(6, 0), at(26, 0), Some(10)));
    assert_eq!(given_up(&schedule), vec!["V01", "V05", "V08"]);
    assert!(schedule.is_proved());
}

#[test]
fn with_cargo_cut_all_eleven_sail_even_so() {
    let cut = Ready { v01: at(15, 0), v03: at(18, 0), v05: at(14, 0), v08: at(20, 0) };
    let schedule = solved(&sailings(&cut, at(6, 0), at(26, 0), Some(10)));
    assert_eq!(given_up(&schedule), Vec::<&str>::new());
}

#[test]
fn a_job_is_held_back_when_only_so_one_block_of_duty_serves_two() {
    let mut problem = empty(at(24, 0));
    problem.pools.push(Pool { members: vec![member(Some(10))] });
    problem.windows.push(spans(&[(at(8, 0), at(8, 31))]));
    let job = Way { needs: vec![need(0, 1, &[0], 105)], ..plain(Minutes::new(90)) };
    problem.tasks = vec![task(job.clone()), task(Way { start_in: vec![0], ..job })];
    for (rank, job) in problem.tasks.iter_mut().enumerate() {
        job.deadline = Some(at(10, 0));
        job.rank = rank as u32;
    }
    let schedule = solved(&problem);
    assert_eq!(schedule.score.classes[0].given_up, 0);
    assert!(schedule.placement(0).unwrap().start >= at(1, 15));
}
