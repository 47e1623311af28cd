//! What the engine hands back: where each task went, what it waited for, what is given up and why, and the score.

use crate::time::moment::{Minutes, Moment};

/// A schedule: one outcome for each task of the problem, in the same order.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Schedule {
    /// What became of each task.
    pub outcomes: Vec<Outcome>,
    /// How good it is.
    pub score: Score,
    /// A score that no schedule can beat in `classes`, `moved` and `cost`; its `finishes` is not a bound.
    pub bound: Score,
    /// How many schedules were built to find it.
    pub decodes: u64,
}

impl Schedule {
    /// Whether no schedule gives up less, is less late, moves less that was issued, or costs less.
    #[must_use]
    pub fn is_proved(&self) -> bool {
        (&self.score.classes, self.score.moved, self.score.cost)
            == (&self.bound.classes, self.bound.moved, self.bound.cost)
    }

    /// The placement of a task, if it has one.
    #[must_use]
    pub fn placement(&self, task: usize) -> Option<&Placement> {
        match self.outcomes.get(task)? {
            Outcome::Placed(placement) => Some(placement),
            Outcome::GivenUp(_) => None,
        }
    }
}

/// How good a schedule is; smaller is better, and an earlier field outweighs all later ones.
///
/// In plain words: first nothing of the most important class may be given up, then nothing of it may be late, then the
/// same for the next class, and so on. Only among plans that are equal in all that does it count how many issued tasks
/// move; then what the permitted cuts cost; and last how early everything is done.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Default)]
pub struct Score {
    /// One entry a class, from class 0 on.
    pub classes: Vec<ClassScore>,
    /// Issued tasks that move, each weighted by how near its issued start is; see [`crate::schedule::score`].
    pub moved: u64,
    /// Sum of the costs of the ways taken.
    pub cost: u64,
    /// Sum over all tasks of the minutes from now to the finish; a task given up counts as finished at the horizon.
    pub finishes: i64,
}

/// What a schedule does to the tasks of one class.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Default)]
pub struct ClassScore {
    /// Sum of the weights of the tasks given up.
    pub given_up: u64,
    /// Sum of the minutes by which tasks finish after they are due.
    pub late: u64,
}

/// What became of a task.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// It has a time and its members.
    Placed(Placement),
    /// It does not fit: no time, no members.
    GivenUp(GivenUp),
}

/// Where a task went.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Placement {
    /// Which of its ways.
    pub way: usize,
    /// Its start.
    pub start: Moment,
    /// Its finish.
    pub finish: Moment,
    /// The members of each need of the way, in the order of its needs.
    pub members: Vec<Vec<usize>>,
    /// What its earliest thinkable start came from.
    pub root: Root,
    /// What made it wait from there on, in order of time; the waits sum to the start less the root's moment.
    pub steps: Vec<Step>,
}

/// Where the waiting of a task begins, with the moment.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Root {
    /// Nothing held it before now.
    Now(Moment),
    /// Its release.
    Release(Moment),
    /// The link (an index into the problem's links) that let it start no sooner.
    Link(usize, Moment),
    /// It is fixed there.
    Fixed(Moment),
}

impl Root {
    /// The moment at which the waiting begins.
    #[must_use]
    pub fn moment(self) -> Moment {
        match self {
            Root::Now(moment) | Root::Release(moment) | Root::Link(_, moment) | Root::Fixed(moment) => moment,
        }
    }
}

/// One stretch of waiting.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Step {
    /// What it waited for.
    pub cause: Cause,
    /// How long; at least one minute.
    pub wait: Minutes,
}

/// What a task waits for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Cause {
    /// A window set of the problem to open.
    Window(usize),
    /// Several window sets, each open at some time, to be open together.
    Windows(Vec<usize>),
    /// Members of a pool that are held by other tasks; nobody is named where they are held outside the tasks.
    Pool {
        /// The pool.
        pool: usize,
        /// Tasks that hold able members over the time asked for, in order of their numbers.
        holders: Vec<usize>,
    },
    /// A member to rest: its block of duty would otherwise be too long.
    Rest {
        /// The pool.
        pool: usize,
        /// The member whose rest ends first.
        member: usize,
    },
    /// Members of a pool to come on shift, or a shift long enough.
    Shift {
        /// The pool.
        pool: usize,
    },
    /// The members of several needs that together are too few: one member cannot serve two needs at once.
    Together,
    /// A lane: spacing or clearance to another task's passage.
    Lane {
        /// The lane.
        lane: usize,
        /// The task whose passage is in the way.
        other: usize,
    },
    /// Kept where the issued plan has it, though it could go earlier.
    Issued,
    /// An issued start that must move, moves by a least amount.
    LeastMove,
    /// Held back by the search, so that a member's block of duty, or a slot, serves another task.
    HeldBack,
}

/// Why a task has no place.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct GivenUp {
    /// The cause.
    pub why: Why,
    /// Where it would have finished, had it no deadline and all else stood as placed.
    pub would_finish: Option<Moment>,
    /// By how much that misses its deadline.
    pub late_by: Option<Minutes>,
    /// Whether no schedule at all can place it; otherwise none was found.
    pub proved: bool,
    /// The way that would have finished first.
    pub way: usize,
    /// Where the waiting begins; none where nothing lets it start.
    pub root: Option<Root>,
    /// What would have made it wait from there to its start.
    pub steps: Vec<Step>,
}

/// The cause of giving a task up.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Why {
    /// It would finish after its deadline.
    MissedDeadline,
    /// Its windows are never open, or never long enough, between its earliest start and the horizon.
    NoWindow,
    /// Fewer able members than it needs in the pool, whatever the time.
    NoMembers(usize),
    /// Windows, members and lanes never come together before the horizon.
    NoTime,
    /// A task that it waits for is given up.
    Predecessor(usize),
    /// The task that waits for it would be given up or late, and weighs more: with this one given up it need not wait.
    YieldsTo(usize),
}
