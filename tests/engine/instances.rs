//! Small random problems with every kind of constraint, all times multiples of ten minutes.

use snugdown::schedule::outcome::{Outcome, Schedule};
use snugdown::schedule::problem::{
    Direction, Duty, Fixed, IfGivenUp, Issued, Lane, LaneUse, Link, LinkKind, Member, Need, Pool, Problem,
    Task, Way,
};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::span::Span;
use snugdown::time::windows::WindowSet;

/// The grain of all times here.
pub const GRAIN: i64 = 10;
/// The horizon of the small problems, in grains.
pub const SLOTS: i64 = 18;

/// A source of numbers for tests: a linear congruence with Knuth's MMIX constants, high bits taken.
pub struct Dice(u64);

impl Dice {
    pub fn new(seed: u64) -> Dice {
        let mut dice = Dice(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) ^ 0xD1CE);
        (0..4).for_each(|_| {
            dice.below(2);
        });
        dice
    }

    pub fn below(&mut self, count: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) as usize) % count.max(1)
    }

    pub fn between(&mut self, from: i64, to: i64) -> i64 {
        from + self.below(usize::try_from(to - from + 1).unwrap_or(1)) as i64
    }

    pub fn is_so(&mut self, chances: usize, out_of: usize) -> bool {
        self.below(out_of) < chances
    }
}

pub fn slot(number: i64) -> Moment {
    Moment::from_epoch_minutes(number * GRAIN)
}

pub fn slots(number: i64) -> Minutes {
    Minutes::new(number * GRAIN)
}

/// A plain way that takes so long and needs nothing.
pub fn plain(takes: Minutes) -> Way {
    Way { takes, whole_in: vec![], start_in: vec![], needs: vec![], lane: None, cost: 0 }
}

/// A plain task that can be done in one way.
pub fn task(way: Way) -> Task {
    Task {
        ways: vec![way],
        release: slot(0),
        due: None,
        deadline: None,
        class: 0,
        weight: 1,
        fixed: None,
        issued: None,
        rank: 0,
    }
}

/// A problem with nothing in it.
pub fn empty(horizon: Moment) -> Problem {
    Problem {
        now: slot(0),
        horizon,
        least_move: slots(1),
        tasks: vec![],
        links: vec![],
        pools: vec![],
        lanes: vec![],
        windows: vec![],
    }
}

/// A random problem with at most so many tasks.
pub fn random(seed: u64, most_tasks: usize) -> Problem {
    let dice = &mut Dice::new(seed);
    let mut problem = empty(slot(SLOTS));
    for _ in 0..dice.between(1, 2) {
        problem.windows.push(some_window(dice));
    }
    for _ in 0..dice.between(1, 2) {
        let members = (0..dice.between(1, 3)).map(|_| some_member(dice)).collect();
        problem.pools.push(Pool { members });
    }
    let spacing = (0..2).map(|_| (0..2).map(|_| slots(dice.between(0, 3))).collect()).collect();
    problem.lanes.push(Lane { spacing, clearance: slots(dice.between(0, 1)) });
    let count = dice.between(2, most_tasks as i64) as usize;
    for rank in 0..count {
        let mut new = some_task(dice, &problem);
        new.rank = rank as u32;
        problem.tasks.push(new);
    }
    for after in 1..count {
        if dice.is_so(2, 5) {
            problem.links.push(some_link(dice, after));
        }
    }
    if dice.is_so(1, 3) {
        some_fixed(dice, &mut problem);
    }
    if dice.is_so(1, 3) {
        some_issued(dice, &mut problem);
    }
    problem
}

fn some_window(dice: &mut Dice) -> WindowSet {
    let spans = (0..dice.between(1, 2)).filter_map(|_| {
        let start = dice.between(0, SLOTS - 4);
        Span::new(slot(start), slot(start + dice.between(3, SLOTS - 2)))
    });
    WindowSet::from_spans(spans.collect::<Vec<_>>())
}

fn some_member(dice: &mut Dice) -> Member {
    let available = if dice.is_so(2, 3) { WindowSet::always() } else { some_window(dice) };
    let duty = dice
        .is_so(1, 2)
        .then(|| Duty { at_most: slots(dice.between(3, 7)), then_rest: slots(dice.between(1, 6)) });
    let worked = if dice.is_so(1, 5) {
        let start = dice.between(-6, 3);
        Span::new(slot(start), slot(start + dice.between(1, 4))).into_iter().collect()
    } else {
        vec![]
    };
    Member { available, duty, worked }
}

fn some_way(dice: &mut Dice, problem: &Problem, takes: i64) -> Way {
    let mut way = plain(slots(takes));
    for window in 0..problem.windows.len() {
        if dice.is_so(1, 4) {
            way.whole_in.push(window);
        } else if dice.is_so(1, 6) {
            way.start_in.push(window);
        }
    }
    for _ in 0..dice.between(0, 2) {
        let pool = dice.below(problem.pools.len());
        let members = problem.pools[pool].members.len();
        let mut able: Vec<usize> = (0..members).filter(|_| dice.is_so(4, 5)).collect();
        if dice.is_so(1, 3) {
            able.reverse();
        }
        let count = if able.len() > 1 && dice.is_so(1, 4) { 2 } else { 1 };
        let (before, after) = (slots(dice.between(0, 1)), slots(dice.between(0, 1)));
        way.needs.push(Need { pool, count, able, before, after });
    }
    if dice.is_so(1, 3) {
        let enter = dice.between(0, 1);
        way.lane = Some(LaneUse {
            lane: 0,
            enter: slots(enter),
            leave: slots(enter + dice.between(0, 2)),
            direction: if dice.is_so(3, 4) { Direction::Out } else { Direction::In },
            class: dice.below(2),
        });
    }
    way
}

fn some_task(dice: &mut Dice, problem: &Problem) -> Task {
    let takes = dice.between(0, 5);
    let mut new = task(some_way(dice, problem, takes));
    if dice.is_so(1, 4) {
        let mut cut = some_way(dice, problem, (takes - 2).max(0));
        cut.cost = dice.between(1, 9) as u32;
        new.ways.push(cut);
    }
    new.release = slot(dice.between(-2, 5));
    new.deadline = dice.is_so(4, 5).then(|| slot(dice.between(takes + 1, SLOTS)));
    new.due = dice.is_so(1, 3).then(|| slot(dice.between(takes, SLOTS)));
    new.class = dice.below(2) as u8;
    new.weight = dice.between(0, 5) as u32;
    new
}

fn some_link(dice: &mut Dice, after: usize) -> Link {
    let kinds = [
        LinkKind::FinishStart,
        LinkKind::FinishStart,
        LinkKind::StartStart,
        LinkKind::FinishFinish,
        LinkKind::StartFinish,
    ];
    Link {
        before: dice.below(after),
        after,
        kind: kinds[dice.below(kinds.len())],
        lag: slots(dice.between(-1, 2)),
        if_given_up: if dice.is_so(1, 2) { IfGivenUp::GiveUpToo } else { IfGivenUp::StartAtDecision },
    }
}

fn first_members(way: &Way) -> Vec<Vec<usize>> {
    let mut taken: Vec<(usize, usize)> = Vec::new();
    let mut members = Vec::new();
    for need in &way.needs {
        let able = need.able.iter().filter(|member| !taken.contains(&(need.pool, **member)));
        let chosen: Vec<usize> = able.take(need.count).copied().collect();
        taken.extend(chosen.iter().map(|member| (need.pool, *member)));
        members.push(chosen);
    }
    members
}

fn some_fixed(dice: &mut Dice, problem: &mut Problem) {
    let which = dice.below(problem.tasks.len());
    let fixed = &mut problem.tasks[which];
    let start = dice.between(-2, 8);
    let finish = slot(start) + fixed.ways[0].takes + slots(dice.between(0, 1));
    fixed.fixed = Some(Fixed { way: 0, start: slot(start), finish, members: first_members(&fixed.ways[0]) });
}

fn some_issued(dice: &mut Dice, problem: &mut Problem) {
    for issued in &mut problem.tasks {
        let members = first_members(&issued.ways[0]);
        let is_whole =
            members.iter().zip(&issued.ways[0].needs).all(|(named, need)| named.len() == need.count);
        if is_whole && dice.is_so(2, 3) {
            issued.issued = Some(Issued { way: 0, start: slot(dice.between(-1, SLOTS - 4)), members });
        }
    }
}

/// The same problem with what the schedule placed issued.
pub fn issued(problem: &Problem, schedule: &Schedule) -> Problem {
    let mut next = problem.clone();
    for (task, outcome) in next.tasks.iter_mut().zip(&schedule.outcomes) {
        task.issued = match outcome {
            Outcome::Placed(at) => Some(Issued { way: at.way, start: at.start, members: at.members.clone() }),
            Outcome::GivenUp(_) => None,
        };
    }
    next
}
