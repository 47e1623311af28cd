//! The scheduling problem: tasks, links, people and craft, lanes and windows, in whole minutes and indices.
//!
//! The engine knows no port. Whoever states a problem turns berths, tides and stages into what stands here; every
//! `usize` is an index into the list that its name says, counted from zero. [`crate::schedule::check::faults`] tells
//! whether a problem is well formed; the solver refuses one that is not.

use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;

/// Everything that is to be placed, and everything that stands in its way.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Problem {
    /// Nothing that is not fixed starts before this moment.
    pub now: Moment,
    /// Nothing that is not fixed finishes after this moment.
    pub horizon: Moment,
    /// An issued start that must move, moves by at least this, unless the task would then miss; 10 min is usual.
    pub least_move: Minutes,
    /// What is to be done.
    pub tasks: Vec<Task>,
    /// Which task waits for which.
    pub links: Vec<Link>,
    /// People and craft by kind.
    pub pools: Vec<Pool>,
    /// Stretches that are passed one after another, such as a one-way channel.
    pub lanes: Vec<Lane>,
    /// Times at which something is allowed: tide, daylight, wind, opening hours.
    pub windows: Vec<WindowSet>,
}

/// One piece of work.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Task {
    /// How it may be done, in order of preference: first the task as stated, then the cuts that are permitted.
    pub ways: Vec<Way>,
    /// It starts no earlier than this.
    pub release: Moment,
    /// It should be finished by this; minutes beyond it are counted as late.
    pub due: Option<Moment>,
    /// It must be finished by this; a task that cannot is given up.
    pub deadline: Option<Moment>,
    /// 0 is life safety, the most important; a lower class outweighs all higher ones together.
    pub class: u8,
    /// What it costs to give the task up, against others of its class; 0 is counted as 1, so that it is never free.
    pub weight: u32,
    /// Done, started, called out or ordered: it stands where it is, whatever it clashes with.
    pub fixed: Option<Fixed>,
    /// Where the issued plan has it; kept unless it cannot stand there or safety gains.
    pub issued: Option<Issued>,
    /// The caller's own order, such as the place of the task's name in the alphabet: it breaks every tie. Where ranks
    /// differ, the result does not depend on how the tasks are numbered.
    pub rank: u32,
}

/// One way of doing a task.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Way {
    /// From start to finish; 0 or more.
    pub takes: Minutes,
    /// Window sets of which each must hold the whole of [start, finish) in one span.
    pub whole_in: Vec<usize>,
    /// Window sets of which each must hold the start.
    pub start_in: Vec<usize>,
    /// Who and what it takes.
    pub needs: Vec<Need>,
    /// The lane it passes, if any.
    pub lane: Option<LaneUse>,
    /// The price of taking this way; weighed after all safety, and after issued tasks that move.
    pub cost: u32,
}

/// Members of one pool that a task holds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Need {
    /// The pool.
    pub pool: usize,
    /// How many of its members.
    pub count: usize,
    /// Members that may serve, in order of preference, each at most once. Fewer than `count` means that the task is
    /// given up for want of members.
    pub able: Vec<usize>,
    /// Held this long before the start; 0 or more.
    pub before: Minutes,
    /// Held this long after the finish; 0 or more.
    pub after: Minutes,
}

/// People or craft of one kind.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct Pool {
    /// The members, each of whom serves one task at a time.
    pub members: Vec<Member>,
}

/// One person, gang or craft.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Member {
    /// When the member can be held; each hold lies in one span of it.
    pub available: WindowSet,
    /// Its hours of duty, if they are limited.
    pub duty: Option<Duty>,
    /// Time already worked, or taken outside the tasks.
    pub worked: Vec<Span>,
}

/// How long a member may be on duty before resting.
///
/// A block of duty runs from its first hold to the end of its last; gaps shorter than `then_rest` lie inside it. A
/// block longer than `at_most` is unlawful.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Duty {
    /// The longest block; more than 0.
    pub at_most: Minutes,
    /// The gap that ends a block; 0 or more.
    pub then_rest: Minutes,
}

/// A stretch passed one after another.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub struct Lane {
    /// From one entry to the next in the same direction, by class of the first and then class of the second; square.
    pub spacing: Vec<Vec<Minutes>>,
    /// In opposite directions the second enters no sooner than this after the first has left.
    pub clearance: Minutes,
}

/// A passage through a lane.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct LaneUse {
    /// The lane.
    pub lane: usize,
    /// From the task's start to entering; 0 or more.
    pub enter: Minutes,
    /// From the task's start to leaving; not before entering.
    pub leave: Minutes,
    /// Which way.
    pub direction: Direction,
    /// The class that spacing goes by.
    pub class: usize,
}

/// Which way a lane is passed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Direction {
    /// Outward.
    Out,
    /// Inward.
    In,
}

/// One task waits for another.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Link {
    /// The task that comes before.
    pub before: usize,
    /// The task that waits.
    pub after: usize,
    /// From which end to which end.
    pub kind: LinkKind,
    /// Least time between the two ends; negative lets them overlap.
    pub lag: Minutes,
    /// What becomes of the waiting task when the other is given up.
    pub if_given_up: IfGivenUp,
}

/// The two ends that a link joins.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum LinkKind {
    /// It starts after the other finishes.
    FinishStart,
    /// It starts after the other starts.
    StartStart,
    /// It finishes after the other finishes.
    FinishFinish,
    /// It finishes after the other starts.
    StartFinish,
}

/// What becomes of a task when one that it waits for is given up.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum IfGivenUp {
    /// It is given up too.
    GiveUpToo,
    /// The link falls away: it need not wait.
    StartAtDecision,
}

/// Where a task stands that nothing moves.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Fixed {
    /// The way it is done.
    pub way: usize,
    /// Its start.
    pub start: Moment,
    /// Its finish, known or expected; it need not be `takes` after the start.
    pub finish: Moment,
    /// The members of each need of the way, in the order of its needs.
    pub members: Vec<Vec<usize>>,
}

/// Where the issued plan has a task.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Issued {
    /// The way it was to be done.
    pub way: usize,
    /// Its start.
    pub start: Moment,
    /// The members of each need of the way, in the order of its needs.
    pub members: Vec<Vec<usize>>,
}
