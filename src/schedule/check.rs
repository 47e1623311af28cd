//! Whether a problem is well formed: every fault of its structure, as data.
//!
//! A demand that cannot be met, a window that never opens or a deadline before now is no fault here: such a task is
//! given up, and the rest is placed.

use crate::schedule::problem::{Lane, Link, Need, Problem, Task, Way};
use crate::time::moment::Minutes;
use std::collections::{BTreeMap, BTreeSet, VecDeque};
use thiserror::Error;

/// Why the engine does not take a problem.
#[derive(Clone, Debug, PartialEq, Eq, Error)]
pub enum Refused {
    /// It is not well formed; all faults are told.
    #[error("the scheduling problem has {} structural faults, the first {:?}", .0.len(), .0.first())]
    Malformed(Vec<Fault>),
}

/// A fault in the structure of a problem; numbers are indices into its lists.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Fault {
    /// The horizon lies before now.
    HorizonBeforeNow,
    /// The least move is below 0.
    NegativeLeastMove,
    /// A task has no way of being done.
    NoWays {
        /// The task.
        task: usize,
    },
    /// Something names an entry that is not there.
    NotThere {
        /// Who names it.
        by: Place,
        /// What kind of entry.
        what: Kind,
        /// The index that it names.
        index: usize,
    },
    /// A length of time that must not be negative is.
    Negative {
        /// Where.
        at: Place,
        /// Which length.
        length: Length,
    },
    /// A member is named more than once where it may serve only once.
    Repeated {
        /// Where.
        at: Place,
        /// The member.
        member: usize,
    },
    /// A fixed or issued task names members that its way's needs do not ask for, in number of needs or of members.
    MembersDoNotMatch {
        /// Where.
        at: Place,
    },
    /// A fixed task finishes before it starts.
    FixedBackwards {
        /// The task.
        task: usize,
    },
    /// A lane's table of spacing is not square.
    SpacingNotSquare {
        /// The lane.
        lane: usize,
    },
    /// Tasks wait for each other in a circle: each for the one before it, the first for the last.
    Circle {
        /// The tasks, in order.
        tasks: Vec<usize>,
    },
}

/// A place in a problem.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// A way of a task: task, way.
    Way(usize, usize),
    /// A need of a way: task, way, need.
    Need(usize, usize, usize),
    /// Where a task is fixed.
    Fixed(usize),
    /// Where the issued plan has a task.
    Issued(usize),
    /// A link.
    Link(usize),
    /// A lane.
    Lane(usize),
    /// A member: pool, member.
    Member(usize, usize),
}

/// A kind of entry that can be named.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A task.
    Task,
    /// A way of the task.
    Way,
    /// A window set.
    Window,
    /// A pool.
    Pool,
    /// A member of the pool.
    Member,
    /// A lane.
    Lane,
    /// A class of a lane's spacing.
    LaneClass,
}

/// A length of time that has a least value.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Length {
    /// What a way takes.
    Takes,
    /// Held before the start.
    Before,
    /// Held after the finish.
    After,
    /// From the start to entering a lane.
    Enter,
    /// From entering a lane to leaving it.
    Passage,
    /// The spacing of a lane.
    Spacing,
    /// The clearance of a lane.
    Clearance,
    /// The longest block of duty, which must be more than 0.
    Duty,
    /// The rest after a block of duty.
    Rest,
}

/// All faults of a problem's structure, in the order of its lists; none means that it can be solved.
#[must_use]
pub fn faults(problem: &Problem) -> Vec<Fault> {
    let mut found = Vec::new();
    if problem.horizon < problem.now {
        found.push(Fault::HorizonBeforeNow);
    }
    if problem.least_move < Minutes::ZERO {
        found.push(Fault::NegativeLeastMove);
    }
    for (index, task) in problem.tasks.iter().enumerate() {
        if task.ways.is_empty() {
            found.push(Fault::NoWays { task: index });
        }
        for (number, way) in task.ways.iter().enumerate() {
            way_faults(problem, (index, number), way, &mut found);
        }
        standing_faults(problem, index, task, &mut found);
    }
    for (index, lane) in problem.lanes.iter().enumerate() {
        lane_faults(index, lane, &mut found);
    }
    for (pool, members) in problem.pools.iter().enumerate() {
        for (index, member) in members.members.iter().enumerate() {
            let at = Place::Member(pool, index);
            let Some(duty) = member.duty else { continue };
            if duty.at_most <= Minutes::ZERO {
                found.push(Fault::Negative { at, length: Length::Duty });
            }
            below_zero(at, Length::Rest, duty.then_rest, &mut found);
        }
    }
    for (index, link) in problem.links.iter().enumerate() {
        for task in [link.before, link.after] {
            not_there(Place::Link(index), Kind::Task, task, problem.tasks.len(), &mut found);
        }
    }
    found.extend(
        circles(problem.tasks.len(), &problem.links).into_iter().map(|tasks| Fault::Circle { tasks }),
    );
    found
}

fn not_there(by: Place, what: Kind, index: usize, count: usize, found: &mut Vec<Fault>) {
    if index >= count {
        found.push(Fault::NotThere { by, what, index });
    }
}

fn below_zero(at: Place, length: Length, minutes: Minutes, found: &mut Vec<Fault>) {
    if minutes < Minutes::ZERO {
        found.push(Fault::Negative { at, length });
    }
}

fn way_faults(problem: &Problem, (task, number): (usize, usize), way: &Way, found: &mut Vec<Fault>) {
    let at = Place::Way(task, number);
    below_zero(at, Length::Takes, way.takes, found);
    for window in way.whole_in.iter().chain(&way.start_in) {
        not_there(at, Kind::Window, *window, problem.windows.len(), found);
    }
    for (index, need) in way.needs.iter().enumerate() {
        need_faults(problem, Place::Need(task, number, index), need, found);
    }
    let Some(passage) = &way.lane else { return };
    below_zero(at, Length::Enter, passage.enter, found);
    below_zero(at, Length::Passage, passage.leave - passage.enter, found);
    match problem.lanes.get(passage.lane) {
        Some(lane) => not_there(at, Kind::LaneClass, passage.class, lane.spacing.len(), found),
        None => found.push(Fault::NotThere { by: at, what: Kind::Lane, index: passage.lane }),
    }
}

fn need_faults(problem: &Problem, at: Place, need: &Need, found: &mut Vec<Fault>) {
    below_zero(at, Length::Before, need.before, found);
    below_zero(at, Length::After, need.after, found);
    let Some(pool) = problem.pools.get(need.pool) else {
        found.push(Fault::NotThere { by: at, what: Kind::Pool, index: need.pool });
        return;
    };
    let mut seen = BTreeSet::new();
    for member in &need.able {
        not_there(at, Kind::Member, *member, pool.members.len(), found);
        if !seen.insert(*member) {
            found.push(Fault::Repeated { at, member: *member });
        }
    }
}

fn standing_faults(problem: &Problem, index: usize, task: &Task, found: &mut Vec<Fault>) {
    if let Some(fixed) = &task.fixed {
        if fixed.finish < fixed.start {
            found.push(Fault::FixedBackwards { task: index });
        }
        named_members(problem, task, (Place::Fixed(index), fixed.way, &fixed.members), found);
    }
    if let Some(issued) = &task.issued {
        named_members(problem, task, (Place::Issued(index), issued.way, &issued.members), found);
    }
}

fn named_members(
    problem: &Problem,
    task: &Task,
    (at, number, members): (Place, usize, &[Vec<usize>]),
    found: &mut Vec<Fault>,
) {
    let Some(way) = task.ways.get(number) else {
        found.push(Fault::NotThere { by: at, what: Kind::Way, index: number });
        return;
    };
    let is_matched = members.len() == way.needs.len()
        && members.iter().zip(&way.needs).all(|(named, need)| named.len() == need.count);
    // A fixed task may have been done with fewer or more people than its need says; only the needs must pair up.
    let is_paired = task.fixed.is_some() && members.len() == way.needs.len();
    if !is_matched && !is_paired {
        found.push(Fault::MembersDoNotMatch { at });
    }
    let mut seen = BTreeSet::new();
    for (named, need) in members.iter().zip(&way.needs) {
        for member in named {
            let count = problem.pools.get(need.pool).map_or(0, |pool| pool.members.len());
            not_there(at, Kind::Member, *member, count, found);
            if !seen.insert((need.pool, *member)) {
                found.push(Fault::Repeated { at, member: *member });
            }
        }
    }
}

fn lane_faults(index: usize, lane: &Lane, found: &mut Vec<Fault>) {
    let at = Place::Lane(index);
    if lane.spacing.iter().any(|row| row.len() != lane.spacing.len()) {
        found.push(Fault::SpacingNotSquare { lane: index });
    }
    if lane.spacing.iter().flatten().any(|minutes| *minutes < Minutes::ZERO) {
        found.push(Fault::Negative { at, length: Length::Spacing });
    }
    below_zero(at, Length::Clearance, lane.clearance, found);
}

/// One circle, as short as can be, for each knot of tasks that wait for each other.
fn circles(count: usize, links: &[Link]) -> Vec<Vec<usize>> {
    let mut followers = vec![Vec::new(); count];
    let mut waiting_for = vec![0_usize; count];
    for link in links.iter().filter(|link| link.before < count && link.after < count) {
        followers[link.before].push(link.after);
        waiting_for[link.after] += 1;
    }
    // What can be done one after another is no part of a circle.
    let mut ready: VecDeque<usize> = (0..count).filter(|task| waiting_for[*task] == 0).collect();
    let mut is_free = vec![false; count];
    while let Some(task) = ready.pop_front() {
        is_free[task] = true;
        for follower in &followers[task] {
            waiting_for[*follower] -= 1;
            if waiting_for[*follower] == 0 {
                ready.push_back(*follower);
            }
        }
    }
    let mut told = BTreeSet::new();
    let mut circles = Vec::new();
    for task in (0..count).filter(|task| !is_free[*task]) {
        if told.contains(&task) {
            continue;
        }
        if let Some(circle) = shortest_circle(task, &followers, &is_free) {
            // Tasks that only share a knot with a circle already told are not told again.
            if circle.iter().all(|member| !told.contains(member)) {
                told.extend(circle.iter().copied());
                circles.push(circle);
            }
        }
    }
    circles
}

/// The shortest circle through `from`, beginning with it.
fn shortest_circle(from: usize, followers: &[Vec<usize>], is_free: &[bool]) -> Option<Vec<usize>> {
    let mut came_from = BTreeMap::new();
    let mut queue = VecDeque::from([from]);
    while let Some(task) = queue.pop_front() {
        for follower in followers[task].iter().filter(|follower| !is_free[**follower]) {
            if *follower == from {
                let mut circle = vec![task];
                let mut at = task;
                while at != from {
                    at = *came_from.get(&at)?;
                    circle.push(at);
                }
                circle.reverse();
                return Some(circle);
            }
            came_from.entry(*follower).or_insert_with(|| {
                queue.push_back(*follower);
                task
            });
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::circles;
    use crate::schedule::problem::{IfGivenUp, Link, LinkKind};
    use crate::time::moment::Minutes;

    fn link(before: usize, after: usize) -> Link {
        Link {
            before,
            after,
            kind: LinkKind::FinishStart,
            lag: Minutes::ZERO,
            if_given_up: IfGivenUp::GiveUpToo,
        }
    }

    #[test]
    fn each_circle_is_told_whole_and_once() {
        let links = [link(0, 1), link(1, 2), link(2, 1), link(3, 4), link(4, 5), link(5, 3), link(5, 0)];
        assert_eq!(circles(6, &links), vec![vec![1, 2], vec![3, 4, 5]]);
    }

    #[test]
    fn a_task_that_waits_for_itself_is_a_circle_of_one() {
        assert_eq!(circles(2, &[link(1, 1)]), vec![vec![1]]);
    }

    #[test]
    fn a_chain_with_a_short_cut_is_no_circle() {
        assert_eq!(circles(3, &[link(0, 1), link(1, 2), link(0, 2)]), Vec::<Vec<usize>>::new());
    }
}
