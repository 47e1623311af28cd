//! Changes to a schedule's choices, drawn from what stands in the way of a task that fares badly.

use crate::schedule::bound::Bound;
use crate::schedule::model::{Model, NEVER};
use crate::schedule::place::{Builder, Choices, Slot, State};
use crate::schedule::problem::IfGivenUp;
use crate::schedule::random::Random;
use crate::schedule::score::{late, moved};

/// What fares badly in a schedule, and how the schedule stands.
pub(crate) struct Trouble {
    /// Tasks that fare worse than they must, the most important kind first: given up or late by class, then moved,
    /// then done in a dear way.
    tasks: Vec<usize>,
    /// How many of them are of the first kind.
    first_kind: usize,
    slots: Vec<Slot>,
}

impl Trouble {
    /// The trouble in what the builder holds.
    pub fn of(builder: &Builder, bound: &Bound) -> Trouble {
        let model = builder.model;
        let mut found = Vec::new();
        for (task, (data, slot)) in model.tasks.iter().zip(&builder.slots).enumerate() {
            if data.fixed.is_some() || bound.is_hopeless[task] {
                continue;
            }
            let least_late = (bound.finish[task] - data.due.min(data.deadline)).max(0).unsigned_abs();
            if slot.state != State::Placed || late(data, slot) > least_late {
                found.push((data.class, task));
            } else if moved(builder, data, slot) > 0 {
                found.push((model.classes, task));
            } else if data.ways[slot.way].cost > 0 {
                found.push((model.classes + 1, task));
            }
        }
        found.sort_unstable();
        let first = found.first().map(|(kind, _)| *kind);
        let first_kind = found.partition_point(|(kind, _)| Some(*kind) <= first);
        let tasks = found.into_iter().map(|(_, task)| task).collect();
        Trouble { tasks, first_kind, slots: builder.slots.clone() }
    }

    /// Mostly one that fares worst, sometimes another that fares badly.
    fn pick(&self, random: &mut Random) -> Option<usize> {
        let among = if random.is_so(2, 3) { self.first_kind } else { self.tasks.len() };
        self.tasks.get(random.below(among)).copied()
    }
}

/// Makes changes; it knows which tasks draw on the same members and lanes.
pub(crate) struct Changer<'m> {
    model: &'m Model,
    /// For each pool, and then for each lane, the tasks that can draw on it.
    users: Vec<Vec<usize>>,
    /// For each task, the entries of `users` that it can draw on.
    draws_on: Vec<Vec<usize>>,
    /// The tasks that are not fixed.
    free: Vec<usize>,
}

impl<'m> Changer<'m> {
    /// A maker of changes for a model.
    pub fn new(model: &'m Model) -> Changer<'m> {
        let pools = model.members.iter().map(|member| member.pool + 1).max().unwrap_or(0);
        let mut users = vec![Vec::new(); pools + model.lanes.len()];
        let mut draws_on = Vec::with_capacity(model.tasks.len());
        for (task, data) in model.tasks.iter().enumerate() {
            let needs = data.ways.iter().flat_map(|way| &way.needs).filter(|need| !need.able.is_empty());
            let lanes = data.ways.iter().filter_map(|way| way.lane).map(|passage| pools + passage.lane);
            let mut draws: Vec<usize> = needs.map(|need| need.pool).chain(lanes).collect();
            draws.sort_unstable();
            draws.dedup();
            if data.fixed.is_none() {
                draws.iter().for_each(|on| users[*on].push(task));
            }
            draws_on.push(draws);
        }
        let free = (0..model.tasks.len()).filter(|task| model.tasks[*task].fixed.is_none()).collect();
        Changer { model, users, draws_on, free }
    }

    /// Changes one thing.
    pub fn change(&self, choices: &mut Choices, trouble: &Trouble, random: &mut Random) {
        let troubled = if random.is_so(1, 12) { None } else { trouble.pick(random) };
        let Some(sufferer) = troubled.or_else(|| random.one_of(&self.free).copied()) else { return };
        let task = self.forebear(sufferer, trouble, random);
        let rival = self.rival(task, trouble, random);
        match random.below(11) {
            0 | 1 => advance(choices, task, random),
            2 | 3 => put_behind(choices, rival, task),
            4 => {
                choices.keep[rival] = false;
                put_behind(choices, rival, task);
            }
            5 => self.turn_way(choices, if random.is_so(1, 2) { task } else { rival }, random),
            6 => {
                let who = if random.is_so(1, 2) { task } else { rival };
                choices.turn[who] = random.below(16);
            }
            7 | 8 => self.hold_back(choices, (rival, task), trouble, random),
            9 => self.yield_to(choices, task, random),
            _ => {
                let who = if random.is_so(1, 2) { task } else { rival };
                choices.keep[who] = !choices.keep[who];
                choices.not_before[who] = -NEVER;
            }
        }
    }

    /// The task itself, or one that it waits for, some steps back: the trouble often begins there.
    fn forebear(&self, task: usize, trouble: &Trouble, random: &mut Random) -> usize {
        let mut at = task;
        loop {
            let waits = &self.model.waits[at];
            let cut = match trouble.slots[at].state {
                State::Cut(other) => Some(other),
                State::Open | State::Placed | State::Yields | State::Missed => None,
            };
            let back = match cut {
                Some(other) => Some(other),
                None if random.is_so(1, 3) => random.one_of(waits).map(|link| link.other),
                None => None,
            };
            match back {
                Some(other) if self.model.tasks[other].fixed.is_none() => at = other,
                Some(_) | None => return at,
            }
        }
    }

    /// Another task that draws on the same members or lane; rather one that is placed where it could be in the way.
    fn rival(&self, task: usize, trouble: &Trouble, random: &mut Random) -> usize {
        const TRIES: usize = 6;
        let mut rival = None;
        for _ in 0..TRIES {
            let on = random.one_of(&self.draws_on[task]);
            let Some(other) = on.and_then(|on| random.one_of(&self.users[*on])).copied() else { break };
            if other == task {
                continue;
            }
            rival = Some(other);
            let slot = &trouble.slots[other];
            let data = &self.model.tasks[task];
            if slot.state == State::Placed && slot.start < data.deadline && slot.finish > data.release {
                break;
            }
        }
        rival.or_else(|| random.one_of(&self.free).copied()).unwrap_or(task)
    }

    /// Gives up a task that another need not wait for then; or takes that back.
    fn yield_to(&self, choices: &mut Choices, task: usize, random: &mut Random) {
        let waits = self.model.waits[task].iter();
        let loose =
            waits.filter(|link| link.if_given_up == IfGivenUp::StartAtDecision).map(|link| link.other);
        let mut who: Vec<usize> = loose.filter(|other| self.model.tasks[*other].fixed.is_none()).collect();
        who.extend(Some(task).filter(|task| choices.yields[*task]));
        if let Some(who) = random.one_of(&who) {
            choices.yields[*who] = !choices.yields[*who];
        }
    }

    fn turn_way(&self, choices: &mut Choices, task: usize, random: &mut Random) {
        let ways = self.model.tasks[task].ways.len();
        choices.way[task] = if choices.way[task] == 0 { random.below(ways) } else { 0 };
    }

    /// Holds a task back, to make room or to let a block of duty begin later; or lets go one that is held back.
    fn hold_back(
        &self,
        choices: &mut Choices,
        (rival, task): (usize, usize),
        trouble: &Trouble,
        random: &mut Random,
    ) {
        let who = if random.is_so(1, 5) { task } else { rival };
        if choices.not_before[who] > -NEVER && random.is_so(1, 2) {
            choices.not_before[who] = -NEVER;
            return;
        }
        let slot = &trouble.slots[who];
        if slot.state != State::Placed {
            return;
        }
        let data = &self.model.tasks[who];
        let way = &data.ways[slot.way];
        let last = data.deadline.min(self.model.horizon) - way.takes;
        let other = &trouble.slots[if who == rival { task } else { rival }];
        // Right behind the other task, or anywhere up to its last start.
        let until = match random.below(3) {
            0 if other.finish < last => other.finish,
            1 => slot.start + self.step_to(slot.start, last.min(slot.start + 12 * 60), random),
            _ => slot.start + self.step_to(slot.start, last, random),
        };
        choices.keep[who] = false;
        choices.not_before[who] = until;
    }

    fn step_to(&self, from: i64, to: i64, random: &mut Random) -> i64 {
        let room = usize::try_from(to - from + 1).unwrap_or(0);
        i64::try_from(random.below(room)).unwrap_or(0)
    }
}

/// Moves a task to a random place before its own.
fn advance(choices: &mut Choices, task: usize, random: &mut Random) {
    let Some(at) = choices.order.iter().position(|other| *other == task) else { return };
    let to = random.below(at + 1);
    choices.order[to..=at].rotate_right(1);
    choices.keep[task] = choices.keep[task] && random.is_so(1, 2);
}

/// Moves a task to right behind another that stands behind it in the order.
fn put_behind(choices: &mut Choices, task: usize, other: usize) {
    let place = |wanted: usize| choices.order.iter().position(|task| *task == wanted);
    let (Some(at), Some(to)) = (place(task), place(other)) else { return };
    if at < to {
        choices.order[at..=to].rotate_left(1);
    }
}
