//! A checked problem made ready for speed: plain minutes, links both ways, and one set of allowed starts for each way.
//!
//! Tasks stand in the order of their ranks here, so that nothing that follows depends on how the problem numbers them.
//! Every index in a model was checked by [`crate::schedule::check::faults`] before it was built; that is why the files
//! that work on it index without asking.

use crate::schedule::check::{Refused, faults};
use crate::schedule::problem::{Direction, IfGivenUp, Lane, LinkKind, Member, Problem, Task, Way};
use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use std::collections::BTreeMap;

/// Later than any moment, and room to add to it.
pub(crate) const NEVER: i64 = i64::MAX / 4;

/// Sorted stretches [start, end) of minutes that do not overlap.
pub(crate) type Stretches = Vec<(i64, i64)>;

/// A problem made ready.
pub(crate) struct Model {
    /// Nothing that is not fixed starts before it.
    pub now: i64,
    /// Nothing that is not fixed finishes after it.
    pub horizon: i64,
    /// The least by which an issued start moves.
    pub least_move: i64,
    /// The tasks by rank.
    pub tasks: Vec<ModelTask>,
    /// The number in the problem of each task of the model.
    pub number: Vec<usize>,
    /// The place in the model of each task of the problem.
    pub place: Vec<usize>,
    /// What each task waits for.
    pub waits: Vec<Vec<ModelLink>>,
    /// What waits for each task.
    pub leads: Vec<Vec<ModelLink>>,
    /// Every task after all that it waits for.
    pub in_turn: Vec<usize>,
    /// All members of all pools, pool by pool.
    pub members: Vec<ModelMember>,
    /// The lanes.
    pub lanes: Vec<ModelLane>,
    /// Sets of allowed starts, shared by the ways.
    pub starts: Vec<Stretches>,
    /// The number of classes.
    pub classes: usize,
}

/// A task made ready.
pub(crate) struct ModelTask {
    pub ways: Vec<ModelWay>,
    /// Release, or now if that is later.
    pub release: i64,
    /// [`NEVER`] if there is none.
    pub due: i64,
    /// [`NEVER`] if there is none.
    pub deadline: i64,
    pub class: usize,
    pub weight: u64,
    pub fixed: Option<Standing>,
    pub issued: Option<Standing>,
}

/// A way made ready.
pub(crate) struct ModelWay {
    pub takes: i64,
    /// Which set of allowed starts.
    pub starts: usize,
    pub needs: Vec<ModelNeed>,
    /// Whether two needs draw on one pool, so that they must share out its members.
    pub shares: bool,
    pub lane: Option<Passage>,
    pub cost: u64,
}

/// A need made ready; members are numbered through all pools.
pub(crate) struct ModelNeed {
    pub pool: usize,
    pub count: usize,
    pub able: Vec<usize>,
    pub before: i64,
    pub after: i64,
}

/// A member's rules.
pub(crate) struct ModelMember {
    pub pool: usize,
    /// Its number within its pool.
    pub number: usize,
    pub available: Stretches,
    /// The longest block of duty; [`NEVER`] if it has no limit.
    pub at_most: i64,
    /// The gap that ends a block; 0 if blocks have no limit.
    pub rest: i64,
    /// Held outside the tasks.
    pub worked: Stretches,
}

/// A lane's rules.
pub(crate) struct ModelLane {
    pub spacing: Vec<Vec<i64>>,
    pub clearance: i64,
    /// Passages in the same direction that enter this far apart do not touch.
    pub reach: i64,
    /// Passages in opposite directions that enter this far apart do not touch.
    pub reach_against: i64,
}

/// A passage through a lane, from the start of its task.
#[derive(Clone, Copy)]
pub(crate) struct Passage {
    pub lane: usize,
    pub enter: i64,
    pub leave: i64,
    pub direction: Direction,
    pub class: usize,
}

/// Where a task stands or was to stand.
pub(crate) struct Standing {
    pub way: usize,
    pub start: i64,
    pub finish: i64,
    /// Pairs of need and member.
    pub members: Vec<(usize, usize)>,
}

/// A link, seen from either end.
#[derive(Clone, Copy)]
pub(crate) struct ModelLink {
    /// Its number in the problem.
    pub number: usize,
    /// The task at the other end.
    pub other: usize,
    pub kind: LinkKind,
    pub lag: i64,
    pub if_given_up: IfGivenUp,
}

impl ModelLink {
    /// The earliest start of a waiting task that takes `takes`, when the other has this start and finish.
    pub fn start_after(&self, start: i64, finish: i64, takes: i64) -> i64 {
        match self.kind {
            LinkKind::FinishStart => finish + self.lag,
            LinkKind::StartStart => start + self.lag,
            LinkKind::FinishFinish => finish + self.lag - takes,
            LinkKind::StartFinish => start + self.lag - takes,
        }
    }
}

impl Model {
    /// Checks a problem and makes it ready.
    ///
    /// # Errors
    /// When the problem has a structural fault.
    pub fn new(problem: &Problem) -> Result<Model, Refused> {
        let found = faults(problem);
        if !found.is_empty() {
            return Err(Refused::Malformed(found));
        }
        let mut number: Vec<usize> = (0..problem.tasks.len()).collect();
        number.sort_by_key(|index| (problem.tasks[*index].rank, *index));
        let mut place = vec![0; number.len()];
        for (at, index) in number.iter().enumerate() {
            place[*index] = at;
        }
        let mut shared = SharedStarts::new(problem);
        let first_of_pool = first_of_pools(problem);
        let tasks: Vec<ModelTask> = number
            .iter()
            .map(|index| ready_task(&problem.tasks[*index], problem, &first_of_pool, &mut shared))
            .collect();
        let (waits, leads) = ready_links(problem, &place);
        let in_turn = in_turn(&waits, &leads);
        Ok(Model {
            now: problem.now.epoch_minutes(),
            horizon: problem.horizon.epoch_minutes(),
            least_move: problem.least_move.get(),
            classes: tasks.iter().map(|task| task.class + 1).max().unwrap_or(0),
            lanes: problem.lanes.iter().enumerate().map(|(at, lane)| ready_lane(at, lane, &tasks)).collect(),
            members: ready_members(problem),
            starts: shared.sets,
            tasks,
            number,
            place,
            waits,
            leads,
            in_turn,
        })
    }

    /// The first allowed start of a way at or after `from`.
    pub fn first_start(&self, way: &ModelWay, from: i64) -> Option<i64> {
        first_in(&self.starts[way.starts], from)
    }

    /// Whether a way may start at a moment.
    pub fn may_start(&self, way: &ModelWay, at: i64) -> bool {
        self.first_start(way, at) == Some(at)
    }
}

/// The first minute of the stretches at or after `from`.
pub(crate) fn first_in(stretches: &[(i64, i64)], from: i64) -> Option<i64> {
    let next = stretches.partition_point(|(_, end)| *end <= from);
    stretches.get(next).map(|(start, _)| (*start).max(from))
}

/// The last minute of the stretches at or before `to`.
pub(crate) fn last_in(stretches: &[(i64, i64)], to: i64) -> Option<i64> {
    let after = stretches.partition_point(|(start, _)| *start <= to);
    stretches.get(after.checked_sub(1)?).map(|(_, end)| (*end - 1).min(to))
}

fn plain(spans: &[Span]) -> Stretches {
    spans.iter().map(|span| (span.start().epoch_minutes(), span.end().epoch_minutes())).collect()
}

/// Sets of allowed starts, each made once for all ways that have the same windows and take the same time.
struct SharedStarts<'a> {
    problem: &'a Problem,
    known: BTreeMap<(Vec<usize>, Vec<usize>, Minutes), usize>,
    sets: Vec<Stretches>,
}

impl SharedStarts<'_> {
    fn new(problem: &Problem) -> SharedStarts<'_> {
        SharedStarts { problem, known: BTreeMap::new(), sets: Vec::new() }
    }

    fn of(&mut self, way: &Way) -> usize {
        let key = (sorted(&way.whole_in), sorted(&way.start_in), way.takes);
        if let Some(known) = self.known.get(&key) {
            return *known;
        }
        let set = plain(allowed_starts(self.problem, way).spans());
        self.sets.push(set);
        self.known.insert(key, self.sets.len() - 1);
        self.sets.len() - 1
    }
}

fn sorted(indices: &[usize]) -> Vec<usize> {
    let mut sorted = indices.to_vec();
    sorted.sort_unstable();
    sorted.dedup();
    sorted
}

/// Every start from now on at which the way's windows and the horizon let it be done.
pub(crate) fn allowed_starts(problem: &Problem, way: &Way) -> WindowSet {
    let one = Minutes::new(1);
    let last = problem.horizon - way.takes;
    let mut starts = WindowSet::from_spans(Span::new(problem.now, last + one));
    for window in &way.whole_in {
        starts = starts.overlap(&whole_starts(&problem.windows[*window], way.takes));
    }
    for window in &way.start_in {
        starts = starts.overlap(&problem.windows[*window]);
    }
    starts
}

/// Every start from which `takes` minutes lie in one span of the set.
pub(crate) fn whole_starts(set: &WindowSet, takes: Minutes) -> WindowSet {
    if takes == Minutes::ZERO {
        return set.clone();
    }
    let starts = set.spans().iter().filter_map(|span| {
        // A set that is open for ever ends at the last moment there is; it is not shortened there.
        let is_endless = span.end() == Moment::LATEST;
        let end = if is_endless { span.end() } else { span.end() - takes + Minutes::new(1) };
        Span::new(span.start(), end)
    });
    WindowSet::from_spans(starts)
}

fn first_of_pools(problem: &Problem) -> Vec<usize> {
    let mut next = 0;
    let members = problem.pools.iter().map(|pool| pool.members.len());
    members
        .map(|count| {
            next += count;
            next - count
        })
        .collect()
}

fn ready_task(task: &Task, problem: &Problem, first: &[usize], shared: &mut SharedStarts) -> ModelTask {
    let minute = |moment: Option<Moment>| moment.map_or(NEVER, Moment::epoch_minutes);
    let named = |way: usize, members: &[Vec<usize>]| -> Vec<(usize, usize)> {
        let needs = task.ways[way].needs.iter().zip(members).enumerate();
        needs
            .flat_map(|(at, (need, named))| named.iter().map(move |member| (at, first[need.pool] + member)))
            .collect()
    };
    ModelTask {
        ways: task.ways.iter().map(|way| ready_way(way, first, shared)).collect(),
        release: task.release.max(problem.now).epoch_minutes(),
        due: minute(task.due),
        deadline: minute(task.deadline),
        class: usize::from(task.class),
        weight: u64::from(task.weight.max(1)),
        fixed: task.fixed.as_ref().map(|fixed| Standing {
            way: fixed.way,
            start: fixed.start.epoch_minutes(),
            finish: fixed.finish.epoch_minutes(),
            members: named(fixed.way, &fixed.members),
        }),
        issued: task.issued.as_ref().map(|issued| Standing {
            way: issued.way,
            start: issued.start.epoch_minutes(),
            finish: (issued.start + task.ways[issued.way].takes).epoch_minutes(),
            members: named(issued.way, &issued.members),
        }),
    }
}

fn ready_way(way: &Way, first: &[usize], shared: &mut SharedStarts) -> ModelWay {
    let needs: Vec<ModelNeed> = way
        .needs
        .iter()
        .map(|need| ModelNeed {
            pool: need.pool,
            count: need.count,
            able: need.able.iter().map(|member| first[need.pool] + member).collect(),
            before: need.before.get(),
            after: need.after.get(),
        })
        .collect();
    let shares = needs.iter().enumerate().any(|(at, need)| needs[..at].iter().any(|n| n.pool == need.pool));
    ModelWay {
        takes: way.takes.get(),
        starts: shared.of(way),
        shares,
        needs,
        lane: way.lane.map(|passage| Passage {
            lane: passage.lane,
            enter: passage.enter.get(),
            leave: passage.leave.get(),
            direction: passage.direction,
            class: passage.class,
        }),
        cost: u64::from(way.cost),
    }
}

fn ready_links(problem: &Problem, place: &[usize]) -> (Vec<Vec<ModelLink>>, Vec<Vec<ModelLink>>) {
    let mut waits = vec![Vec::new(); place.len()];
    let mut leads = vec![Vec::new(); place.len()];
    for (number, link) in problem.links.iter().enumerate() {
        let (before, after) = (place[link.before], place[link.after]);
        let seen = |other| ModelLink {
            number,
            other,
            kind: link.kind,
            lag: link.lag.get(),
            if_given_up: link.if_given_up,
        };
        waits[after].push(seen(before));
        leads[before].push(seen(after));
    }
    for list in waits.iter_mut().chain(leads.iter_mut()) {
        list.sort_by_key(|link: &ModelLink| (link.other, link.kind, link.lag, link.number));
    }
    (waits, leads)
}

fn in_turn(waits: &[Vec<ModelLink>], leads: &[Vec<ModelLink>]) -> Vec<usize> {
    let mut open: Vec<usize> = waits.iter().map(Vec::len).collect();
    let mut turn: Vec<usize> = (0..waits.len()).filter(|task| open[*task] == 0).collect();
    let mut next = 0;
    while let Some(task) = turn.get(next).copied() {
        next += 1;
        for link in &leads[task] {
            open[link.other] -= 1;
            if open[link.other] == 0 {
                turn.push(link.other);
            }
        }
    }
    turn
}

fn ready_members(problem: &Problem) -> Vec<ModelMember> {
    let ready = |pool: usize, number: usize, member: &Member| ModelMember {
        pool,
        number,
        available: plain(member.available.spans()),
        at_most: member.duty.map_or(NEVER, |duty| duty.at_most.get()),
        rest: member.duty.map_or(0, |duty| duty.then_rest.get()),
        worked: merged(plain(&member.worked)),
    };
    let pools = problem.pools.iter().enumerate();
    pools
        .flat_map(|(pool, kind)| {
            kind.members.iter().enumerate().map(move |(number, m)| ready(pool, number, m))
        })
        .collect()
}

/// The same minutes as stretches that do not overlap; those that touch stay apart.
pub(crate) fn merged(mut stretches: Stretches) -> Stretches {
    stretches.sort_unstable();
    let mut merged: Stretches = Vec::with_capacity(stretches.len());
    for (start, end) in stretches {
        match merged.last_mut() {
            Some(last) if start < last.1 => last.1 = last.1.max(end),
            _ => merged.push((start, end)),
        }
    }
    merged
}

fn ready_lane(at: usize, lane: &Lane, tasks: &[ModelTask]) -> ModelLane {
    let spacing: Vec<Vec<i64>> =
        lane.spacing.iter().map(|row| row.iter().map(|minutes| minutes.get()).collect()).collect();
    let ways = tasks.iter().flat_map(|task| &task.ways);
    let passages = ways.filter_map(|way| way.lane).filter(|passage| passage.lane == at);
    let longest = passages.map(|passage| passage.leave - passage.enter).max().unwrap_or(0);
    let widest = spacing.iter().flatten().copied().max().unwrap_or(0);
    let clearance = lane.clearance.get();
    ModelLane { spacing, clearance, reach: widest, reach_against: longest + clearance }
}
