//! Serial schedule building: tasks in a given order, each at the earliest start that all its constraints allow.
//!
//! Serial generation with insertion: R. Kolisch, "Serial and parallel resource-constrained project scheduling methods
//! revisited", European Journal of Operational Research 90 (1996) 320-333 (from memory).

use crate::schedule::lane::Traffic;
use crate::schedule::model::{Model, ModelWay, NEVER, Standing, Stretches, merged};
use crate::schedule::problem::IfGivenUp;
use crate::schedule::roster::hold;

/// What the search decides about a schedule; the builder does the rest.
#[derive(Clone)]
pub(crate) struct Choices {
    /// The tasks in the order in which they are placed; one that waits for another pulls it forward.
    pub order: Vec<usize>,
    /// Whether an issued task is first tried where it was issued.
    pub keep: Vec<bool>,
    /// The way that is tried first.
    pub way: Vec<usize>,
    /// From which of the able members on they are tried, in a circle.
    pub turn: Vec<usize>,
    /// The task is held back until this moment; `-NEVER` if it is not.
    pub not_before: Vec<i64>,
    /// The task is given up, so that one that waits for it need not.
    pub yields: Vec<bool>,
}

/// What stood in the way of a start.
#[derive(Clone, Copy)]
pub(crate) enum Holdup {
    /// No window is open.
    Windows,
    /// Another task's passage through the way's lane.
    Lane(usize),
    /// Too few members for a need; the member is the one that makes them enough again.
    Need(usize, usize),
    /// Enough members for each need, but not for all of them together.
    Together,
}

/// What became of a task so far.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum State {
    /// Its turn has not come.
    Open,
    /// It has its time.
    Placed,
    /// It waits for a task that is given up.
    Cut(usize),
    /// It is given up so that one that waits for it need not.
    Yields,
    /// It has no time before its deadline; `finish` says where it would have ended, [`NEVER`] if nowhere.
    Missed,
}

/// One task's place in a schedule.
#[derive(Clone, Copy)]
pub(crate) struct Slot {
    pub state: State,
    pub way: usize,
    pub start: i64,
    pub finish: i64,
    /// Where its pairs of need and member begin in [`Builder::people`], and how many there are.
    pub people: (usize, usize),
}

const OPEN: Slot = Slot { state: State::Open, way: 0, start: NEVER, finish: NEVER, people: (0, 0) };

/// A way and a start that a task could have.
#[derive(Clone, Copy)]
pub(crate) struct Bid {
    pub way: usize,
    pub start: i64,
    pub finish: i64,
}

/// Builds schedules one after another in the same memory.
pub(crate) struct Builder<'m> {
    pub model: &'m Model,
    /// By when each task should finish so that nothing after it is late; see [`crate::schedule::bound`].
    pub wanted: Vec<i64>,
    pub slots: Vec<Slot>,
    /// Pairs of need and member.
    pub people: Vec<(usize, usize)>,
    pub rosters: Vec<Stretches>,
    pub traffic: Vec<Traffic>,
    base_rosters: Vec<Stretches>,
    base_traffic: Vec<Traffic>,
    stack: Vec<usize>,
}

impl<'m> Builder<'m> {
    /// A builder with nothing placed but what is fixed.
    pub fn new(model: &'m Model) -> Builder<'m> {
        let mut rosters: Vec<Stretches> = model.members.iter().map(|member| member.worked.clone()).collect();
        let mut traffic = vec![Traffic::default(); model.lanes.len()];
        for (task, fixed) in fixed_tasks(model) {
            let way = &model.tasks[task].ways[fixed.way];
            for (need, member) in &fixed.members {
                let need = &way.needs[*need];
                let (start, end) = (fixed.start - need.before, fixed.finish + need.after);
                if start < end {
                    rosters[*member].push((start, end));
                }
            }
            if let Some(passage) = &way.lane {
                traffic[passage.lane].pass(passage, fixed.start, task);
            }
        }
        let base_rosters: Vec<Stretches> = rosters.into_iter().map(merged).collect();
        let mut builder = Builder {
            model,
            wanted: vec![NEVER; model.tasks.len()],
            slots: Vec::new(),
            people: Vec::new(),
            rosters: base_rosters.clone(),
            traffic: traffic.clone(),
            base_rosters,
            base_traffic: traffic,
            stack: Vec::new(),
        };
        builder.clear();
        builder
    }

    /// Takes everything away again but what is fixed.
    pub fn clear(&mut self) {
        self.slots.clear();
        self.slots.resize(self.model.tasks.len(), OPEN);
        self.people.clear();
        self.rosters.clone_from(&self.base_rosters);
        self.traffic.clone_from(&self.base_traffic);
        for (task, fixed) in fixed_tasks(self.model) {
            let people = (self.people.len(), fixed.members.len());
            self.people.extend_from_slice(&fixed.members);
            let (way, start, finish) = (fixed.way, fixed.start, fixed.finish);
            self.slots[task] = Slot { state: State::Placed, way, start, finish, people };
        }
    }

    /// Builds the schedule that follows from the choices; `before_settling` sees each task just before it is placed.
    pub fn build(&mut self, choices: &Choices, mut before_settling: impl FnMut(&Builder, usize, &Slot)) {
        self.clear();
        for first in &choices.order {
            self.stack.push(*first);
            while let Some(task) = self.stack.last().copied() {
                if self.slots[task].state != State::Open {
                    self.stack.pop();
                    continue;
                }
                let waits = &self.model.waits[task];
                match waits.iter().find(|link| self.slots[link.other].state == State::Open) {
                    Some(link) => self.stack.push(link.other),
                    None => self.place(choices, task, &mut before_settling),
                }
            }
        }
    }

    fn place(&mut self, choices: &Choices, task: usize, before: &mut impl FnMut(&Builder, usize, &Slot)) {
        let model = self.model;
        let cut = model.waits[task].iter().find(|link| {
            link.if_given_up == IfGivenUp::GiveUpToo && self.slots[link.other].state != State::Placed
        });
        let mut slot = OPEN;
        if let Some(link) = cut {
            slot.state = State::Cut(link.other);
        } else if choices.yields[task] {
            slot.state = State::Yields;
        } else {
            let kept = model.tasks[task].issued.as_ref().filter(|_| choices.keep[task]);
            let stands = kept.filter(|issued| self.root(task, issued.way).0 <= issued.start);
            let whole = stands.filter(|issued| self.stands(task, issued));
            let same_time = stands.filter(|issued| self.could_stand(task, issued));
            if let Some(issued) = whole {
                slot = self.slot_of(bid_of(issued));
                self.people.extend_from_slice(&issued.members);
            } else if let Some(issued) = same_time {
                slot = self.slot_of(bid_of(issued));
                self.choose_members(choices, task, &slot);
            } else if let Some(bid) = self.best_bid(choices, task) {
                slot = self.slot_of(bid);
                if bid.finish > model.tasks[task].deadline {
                    slot.state = State::Missed;
                } else {
                    self.choose_members(choices, task, &slot);
                }
            } else {
                slot.state = State::Missed;
            }
            slot.people.1 = self.people.len() - slot.people.0;
        }
        before(self, task, &slot);
        self.slots[task] = slot;
        if slot.state == State::Placed {
            self.take(task, &slot);
        }
    }

    /// The pairs of need and member of a task that is placed.
    pub fn people_of(&self, slot: &Slot) -> &[(usize, usize)] {
        &self.people[slot.people.0..slot.people.0 + slot.people.1]
    }

    fn slot_of(&self, bid: Bid) -> Slot {
        let people = (self.people.len(), 0);
        Slot { state: State::Placed, way: bid.way, start: bid.start, finish: bid.finish, people }
    }

    /// Holds the members and the lane of a task that is placed.
    fn take(&mut self, task: usize, slot: &Slot) {
        let way = &self.model.tasks[task].ways[slot.way];
        for at in slot.people.0..slot.people.0 + slot.people.1 {
            let (need, member) = &self.people[at];
            let need = &way.needs[*need];
            let (start, end) = (slot.start - need.before, slot.finish + need.after);
            if start < end {
                hold(&mut self.rosters[*member], start, end);
            }
        }
        if let Some(passage) = &way.lane {
            self.traffic[passage.lane].pass(passage, slot.start, task);
        }
    }

    /// The earliest start that release and links allow, and the link that says so.
    pub fn root(&self, task: usize, way: usize) -> (i64, Option<usize>) {
        let task_data = &self.model.tasks[task];
        let takes = task_data.ways[way].takes;
        let mut root = (task_data.release, None);
        for link in &self.model.waits[task] {
            let other = &self.slots[link.other];
            if other.state == State::Placed {
                let start = link.start_after(other.start, other.finish, takes);
                if start > root.0 {
                    root = (start, Some(link.number));
                }
            }
        }
        root
    }

    /// Whether a task can be exactly as it was issued, links aside.
    pub fn stands(&self, task: usize, issued: &Standing) -> bool {
        let way = &self.model.tasks[task].ways[issued.way];
        self.may_pass(task, issued)
            && issued.members.iter().all(|(need, member)| {
                let need = &way.needs[*need];
                need.able.contains(member) && self.is_free(need, way.takes, *member, issued.start)
            })
    }

    /// Whether a task can start when it was issued, links aside, with whatever members.
    pub fn could_stand(&self, task: usize, issued: &Standing) -> bool {
        let way = &self.model.tasks[task].ways[issued.way];
        self.may_pass(task, issued) && self.first_start(way, issued.start, |_, _, _| ()) == Some(issued.start)
    }

    fn may_pass(&self, task: usize, issued: &Standing) -> bool {
        let data = &self.model.tasks[task];
        let way = &data.ways[issued.way];
        issued.finish <= data.deadline
            && self.model.may_start(way, issued.start)
            && way.lane.is_none_or(|passage| {
                let traffic = &self.traffic[passage.lane];
                self.model.lanes[passage.lane].first_fit(traffic, &passage, issued.start).0 == issued.start
            })
    }

    /// The best of the task's ways: in time if it can be, else least late, else the one to finish first.
    pub fn best_bid(&self, choices: &Choices, task: usize) -> Option<Bid> {
        let data = &self.model.tasks[task];
        let first = choices.way[task];
        let others = (0..data.ways.len()).filter(|way| *way != first);
        let mut best: Option<((i64, i64, i64), Bid)> = None;
        for way in std::iter::once(first).chain(others) {
            let Some(bid) = self.bid(choices, task, way) else { continue };
            let missed = if bid.finish > data.deadline { bid.finish } else { 0 };
            let late = (bid.finish - data.due).max(0);
            let beyond = (bid.finish - self.wanted[task]).max(0);
            let key = (missed, late, beyond);
            if best.as_ref().is_none_or(|(least, _)| key < *least) {
                best = Some((key, bid));
            }
            if key == (0, 0, 0) {
                break;
            }
        }
        best.map(|(_, bid)| bid)
    }

    fn bid(&self, choices: &Choices, task: usize, number: usize) -> Option<Bid> {
        let data = &self.model.tasks[task];
        let way = &data.ways[number];
        let root = self.root(task, number).0.max(choices.not_before[task]);
        let mut start = self.first_start(way, root, |_, _, _| ())?;
        let issued = data.issued.as_ref().map_or(NEVER, |issued| issued.start);
        if start != issued && (start - issued).abs() < self.model.least_move {
            // A small move is a bother to people and gains little, unless staying or a larger one would be late.
            let in_time = data.deadline.min(data.due.max(start + way.takes)) - way.takes;
            let from = |from: i64| self.first_start(way, root.max(from), |_, _, _| ());
            let stay = from(issued).filter(|stay| *stay == issued);
            let later = stay.or_else(|| from(issued + self.model.least_move));
            start = later.filter(|later| *later <= in_time).unwrap_or(start);
        }
        Some(Bid { way: number, start, finish: start + way.takes })
    }

    /// The first start at or after `from` at which windows, lane and members let a way begin; `held_up` is told each
    /// stretch of waiting and what it was for.
    pub fn first_start(
        &self,
        way: &ModelWay,
        from: i64,
        mut held_up: impl FnMut(Holdup, i64, i64),
    ) -> Option<i64> {
        let mut start = from;
        'later: loop {
            let open = self.model.first_start(way, start)?;
            if open > start {
                held_up(Holdup::Windows, start, open);
                start = open;
            }
            if let Some(passage) = &way.lane {
                let traffic = &self.traffic[passage.lane];
                let (clear, other) = self.model.lanes[passage.lane].first_fit(traffic, passage, start);
                if let Some(other) = other {
                    held_up(Holdup::Lane(other), start, clear);
                    start = clear;
                    continue 'later;
                }
            }
            for (number, need) in way.needs.iter().enumerate() {
                let (ready, member) = self.first_ready(need, way.takes, start)?;
                if ready > start {
                    held_up(Holdup::Need(number, member), start, ready);
                    start = ready;
                    continue 'later;
                }
            }
            if way.shares && self.share_out(way, start, |need| need.able.clone()).is_none() {
                let next = self.next_change(way, start)?;
                held_up(Holdup::Together, start, next);
                start = next;
                continue 'later;
            }
            return Some(start);
        }
    }
}

fn bid_of(issued: &Standing) -> Bid {
    Bid { way: issued.way, start: issued.start, finish: issued.finish }
}

fn fixed_tasks(model: &Model) -> impl Iterator<Item = (usize, &Standing)> {
    model.tasks.iter().enumerate().filter_map(|(task, data)| Some((task, data.fixed.as_ref()?)))
}
