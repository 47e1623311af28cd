//! Why a task is when it is: the chain of work and waiting from now to its finish, whose minutes add up exactly.

use crate::schedule::outcome::{Cause, Outcome, Root, Schedule, Step};
use crate::schedule::problem::{LinkKind, Problem};
use crate::time::moment::{Minutes, Moment};

/// The chain that binds a task, in order of time.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Chain {
    /// Its parts; their minutes sum to `to` less the problem's `now`.
    pub parts: Vec<Part>,
    /// The task's finish; for one that is given up, where it would have finished.
    pub to: Moment,
}

/// One part of a chain.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Part {
    /// The task that it is about.
    pub task: usize,
    /// What passes.
    pub what: What,
    /// How long; below 0 where a link lets tasks overlap, or a fixed task started before now.
    pub minutes: Minutes,
}

/// What passes in a part of a chain.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum What {
    /// From now to the task's release.
    Release,
    /// From now to the start of a task that is fixed there.
    Fixed,
    /// From now to a time set by a task that the chain has named already.
    Before,
    /// From the end that a link names of the task before (the part above) to the earliest start it allows.
    Link(usize),
    /// The task waits for a cause that is no other task.
    Wait(Cause),
    /// From the finish of the task above, which held a member of the pool, to when the member can serve here.
    MemberFrom {
        /// The pool.
        pool: usize,
    },
    /// From the start of the task above to when this one may follow it through the lane.
    Behind {
        /// The lane.
        lane: usize,
    },
    /// The task is done, from its start to its finish.
    Done,
}

/// The chain of a task; `None` if it is given up without a time at which it would have finished.
#[must_use]
pub fn chain(problem: &Problem, schedule: &Schedule, task: usize) -> Option<Chain> {
    let (root, steps, start, to) = match schedule.outcomes.get(task)? {
        Outcome::Placed(placed) => (placed.root, &placed.steps, placed.start, placed.finish),
        Outcome::GivenUp(given_up) => {
            let (root, finish) = (given_up.root?, given_up.would_finish?);
            let takes = problem.tasks.get(task)?.ways.get(given_up.way)?.takes;
            (root, &given_up.steps, finish - takes, finish)
        }
    };
    let mut walk = Walk { problem, schedule, parts: Vec::new(), seen: vec![task] };
    walk.add(task, What::Done, to - start);
    let mut next = walk.back(task, root, steps, start);
    while let Some(end) = next {
        next = walk.follow(end);
    }
    walk.parts.reverse();
    Some(Chain { parts: walk.parts, to })
}

/// An end of a task, at which a chain goes on.
enum End {
    Start(usize),
    Finish(usize),
}

/// A walk back along a chain; its parts are in reverse order of time.
struct Walk<'a> {
    problem: &'a Problem,
    schedule: &'a Schedule,
    parts: Vec<Part>,
    seen: Vec<usize>,
}

impl Walk<'_> {
    fn add(&mut self, task: usize, what: What, minutes: Minutes) {
        self.parts.push(Part { task, what, minutes });
    }

    fn follow(&mut self, end: End) -> Option<End> {
        let schedule = self.schedule;
        let (End::Start(task) | End::Finish(task)) = end;
        let placed = schedule.placement(task)?;
        self.seen.push(task);
        if let End::Finish(_) = end {
            self.add(task, What::Done, placed.finish - placed.start);
        }
        self.back(task, placed.root, &placed.steps, placed.start)
    }

    /// From a task's start back to its root, or to another task that it waited for.
    fn back(&mut self, task: usize, root: Root, steps: &[Step], start: Moment) -> Option<End> {
        let mut at = start;
        for step in steps.iter().rev() {
            if let Some(end) = self.hop(task, step, at) {
                return Some(end);
            }
            self.add(task, What::Wait(step.cause.clone()), step.wait);
            at = at - step.wait;
        }
        match root {
            Root::Now(_) => {}
            Root::Release(moment) => self.add(task, What::Release, moment - self.problem.now),
            Root::Fixed(moment) => self.add(task, What::Fixed, moment - self.problem.now),
            Root::Link(link, moment) => return self.along(task, link, moment),
        }
        None
    }

    /// To the task whose members or passage a step waited for, if one is named and new to the chain.
    fn hop(&mut self, task: usize, step: &Step, at: Moment) -> Option<End> {
        match &step.cause {
            Cause::Pool { pool, holders } => {
                let finishes =
                    holders.iter().filter(|holder| !self.seen.contains(holder)).filter_map(|holder| {
                        let finish = self.schedule.placement(*holder)?.finish;
                        (finish <= at).then_some((finish, *holder))
                    });
                let (finish, holder) = finishes.max()?;
                self.add(task, What::MemberFrom { pool: *pool }, at - finish);
                Some(End::Finish(holder))
            }
            Cause::Lane { lane, other } => {
                let start = self.schedule.placement(*other)?.start;
                if self.seen.contains(other) || start > at {
                    return None;
                }
                self.add(task, What::Behind { lane: *lane }, at - start);
                Some(End::Start(*other))
            }
            Cause::Window(_)
            | Cause::Windows(_)
            | Cause::Rest { .. }
            | Cause::Shift { .. }
            | Cause::Together
            | Cause::Issued
            | Cause::LeastMove
            | Cause::HeldBack => None,
        }
    }

    /// Along a link to the task before.
    fn along(&mut self, task: usize, number: usize, moment: Moment) -> Option<End> {
        let link = self.problem.links.get(number)?;
        let before = self.schedule.placement(link.before)?;
        if self.seen.contains(&link.before) {
            self.add(task, What::Before, moment - self.problem.now);
            return None;
        }
        let (end, left) = match link.kind {
            LinkKind::FinishStart | LinkKind::FinishFinish => (End::Finish(link.before), before.finish),
            LinkKind::StartStart | LinkKind::StartFinish => (End::Start(link.before), before.start),
        };
        self.add(task, What::Link(number), moment - left);
        Some(end)
    }
}
