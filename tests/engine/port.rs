//! An invented port of any size: ships that secure, clear and sail on tide, daylight, pilots and tugs through one
//! channel, and the crane of each berth pinned once she has gone. All numbers are ours, chosen to load the pools.

use crate::instances::{Dice, empty, plain, task};
use snugdown::schedule::problem::{
    Direction, Duty, IfGivenUp, Lane, LaneUse, Link, LinkKind, Member, Need, Pool, Problem, Task, Way,
};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::span::Span;
use snugdown::time::windows::WindowSet;

const CRANES: usize = 40;
const MEMBERS: usize = 10;
const TIDE: usize = 0;
const DAYLIGHT: usize = 1;
const BEFORE_GALE: usize = 2;
/// Ships for which one set of pilots, tugs and gangs is there.
const SHIPS_OF_A_SET: usize = 50;

fn at(hours: i64) -> Moment {
    Moment::from_epoch_minutes(hours * 60)
}

fn every(period: i64, first: i64, length: i64, until: i64) -> WindowSet {
    let starts = (0..).map(|number| first + number * period).take_while(|start| *start < until);
    WindowSet::from_spans(starts.filter_map(|start| {
        Span::new(Moment::from_epoch_minutes(start), Moment::from_epoch_minutes(start + length))
    }))
}

fn pool(hours_of_duty: Option<i64>) -> Pool {
    let duty =
        hours_of_duty.map(|hours| Duty { at_most: Minutes::hours(hours), then_rest: Minutes::hours(hours) });
    Pool { members: vec![Member { available: WindowSet::always(), duty, worked: vec![] }; MEMBERS] }
}

fn need(pool: usize, count: usize, before: i64, after: i64) -> Need {
    let (before, after) = (Minutes::new(before), Minutes::new(after));
    Need { pool, count, able: (0..MEMBERS).collect(), before, after }
}

fn way(takes: i64, needs: Vec<Need>) -> Way {
    Way { needs, ..plain(Minutes::new(takes)) }
}

/// A port with so many ships, four tasks each, that must all be done within so many hours.
pub fn port(ships: usize, hours: i64, seed: u64) -> Problem {
    let dice = &mut Dice::new(seed);
    let mut problem = empty(at(hours + 12));
    problem.least_move = Minutes::new(10);
    let until = (hours + 12) * 60;
    problem.windows =
        vec![every(745, 120, 300, until), every(1440, -360, 730, until), WindowSet::before(at(hours))];
    let sets = ships.div_ceil(SHIPS_OF_A_SET);
    for _ in 0..sets {
        problem.pools.extend([pool(Some(10)), pool(None), pool(Some(12))]);
    }
    let crane =
        |_| Pool { members: vec![Member { available: WindowSet::always(), duty: None, worked: vec![] }] };
    problem.pools.extend((0..CRANES).map(crane));
    let spacing = |minutes: i64| Minutes::new(minutes);
    problem.lanes.push(Lane {
        spacing: vec![vec![spacing(5), spacing(5)], vec![spacing(5), spacing(7)]],
        clearance: Minutes::new(10),
    });
    for ship in 0..ships {
        add_ship(&mut problem, dice, (ship, ship % sets * 3, sets * 3 + ship % CRANES), hours);
    }
    for (rank, task) in problem.tasks.iter_mut().enumerate() {
        task.rank = rank as u32;
    }
    problem
}

fn add_ship(problem: &mut Problem, dice: &mut Dice, (ship, set, crane): (usize, usize, usize), hours: i64) {
    let ready = Moment::from_epoch_minutes(dice.between(0, hours * 60 * 2 / 3));
    let first = problem.tasks.len();
    let mut secure = way(dice.between(6, 16) * 15, vec![need(set + 2, 1, 0, 0)]);
    let mut cut = secure.clone();
    cut.takes = Minutes::new(60);
    cut.cost = 5;
    secure.cost = 0;
    let is_deep = dice.is_so(1, 3);
    let mut sail = way(90, vec![need(set, 1, 45, 60), need(set + 1, if is_deep { 2 } else { 1 }, 30, 15)]);
    sail.lane = Some(LaneUse {
        lane: 0,
        enter: Minutes::new(20),
        leave: Minutes::new(80),
        direction: Direction::Out,
        class: usize::from(is_deep),
    });
    sail.whole_in.push(BEFORE_GALE);
    if is_deep {
        sail.start_in.push(TIDE);
    } else if dice.is_so(1, 4) {
        sail.start_in.push(DAYLIGHT);
    }
    let mut pin = way(75, vec![need(set + 2, 1, 15, 15), Need { able: vec![0], ..need(crane, 1, 0, 0) }]);
    pin.whole_in.push(BEFORE_GALE);
    let end = Some(at(hours));
    let class = u8::from(ship % 4 != 0);
    let weight = dice.between(1, 20) as u32;
    let base = |ways: Vec<Way>| Task { release: ready, class, weight, ..task(ways[0].clone()) };
    problem.tasks.extend([
        Task { ways: vec![secure.clone(), cut.clone()], ..base(vec![secure]) },
        base(vec![way(60, vec![])]),
        Task { deadline: end, ..base(vec![sail]) },
        Task { deadline: end, class: 2, ..base(vec![pin]) },
    ]);
    for step in 0..3 {
        problem.links.push(Link {
            before: first + step,
            after: first + step + 1,
            kind: LinkKind::FinishStart,
            lag: Minutes::ZERO,
            if_given_up: if step == 2 { IfGivenUp::StartAtDecision } else { IfGivenUp::GiveUpToo },
        });
    }
}
