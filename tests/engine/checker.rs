//! An independent check of a schedule: every rule of the problem told again, pair by pair, sharing no code with the
//! engine.

use snugdown::schedule::outcome::{ClassScore, Outcome, Placement, Root, Schedule, Score};
use snugdown::schedule::problem::{IfGivenUp, LaneUse, LinkKind, Problem};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::time::span::Span;

/// A task that has its time: (task, way, start, finish, members).
#[derive(Clone)]
pub struct Stand {
    pub task: usize,
    pub way: usize,
    pub start: Moment,
    pub finish: Moment,
    pub members: Vec<Vec<usize>>,
}

impl Stand {
    fn of(task: usize, placement: &Placement) -> Stand {
        Stand {
            task,
            way: placement.way,
            start: placement.start,
            finish: placement.finish,
            members: placement.members.clone(),
        }
    }
}

/// Everything that is wrong with a schedule, in words.
pub fn violations(problem: &Problem, schedule: &Schedule) -> Vec<String> {
    let mut wrong = Vec::new();
    if schedule.outcomes.len() != problem.tasks.len() {
        return vec!["not one outcome for each task".to_string()];
    }
    let stands: Vec<Option<Stand>> = schedule
        .outcomes
        .iter()
        .enumerate()
        .map(|(task, outcome)| match outcome {
            Outcome::Placed(placement) => Some(Stand::of(task, placement)),
            Outcome::GivenUp(_) => None,
        })
        .collect();
    let placed: Vec<&Stand> = stands.iter().flatten().collect();
    for stand in &placed {
        wrong.extend(alone(problem, stand));
    }
    for (at, one) in placed.iter().enumerate() {
        for other in &placed[at + 1..] {
            wrong.extend(together(problem, one, other));
        }
    }
    wrong.extend(unlawful_duty(problem, &placed));
    wrong.extend(links(problem, &stands));
    wrong.extend(waits(problem, schedule));
    let score = rescore(problem, &stands);
    if score != schedule.score {
        wrong.push(format!("the score is {score:?}, not {:?}", schedule.score));
    }
    if (&schedule.score.classes, schedule.score.moved, schedule.score.cost)
        < (&schedule.bound.classes, schedule.bound.moved, schedule.bound.cost)
    {
        wrong.push(format!("the score {:?} beats its bound {:?}", schedule.score, schedule.bound));
    }
    wrong
}

/// What a task breaks by itself.
pub fn alone(problem: &Problem, stand: &Stand) -> Vec<String> {
    let task = &problem.tasks[stand.task];
    let name = format!("task {}", stand.task);
    if let Some(fixed) = &task.fixed {
        let is_there = (fixed.way, fixed.start, fixed.finish) == (stand.way, stand.start, stand.finish)
            && fixed.members == stand.members;
        return if is_there { vec![] } else { vec![format!("{name} is fixed and was moved")] };
    }
    let way = &task.ways[stand.way];
    let mut wrong = Vec::new();
    let mut claim = |holds: bool, what: &str| {
        if !holds {
            wrong.push(format!("{name} {what}"));
        }
    };
    claim(stand.finish == stand.start + way.takes, "does not take its time");
    claim(stand.start >= problem.now && stand.start >= task.release, "starts too soon");
    claim(stand.finish <= problem.horizon, "finishes beyond the horizon");
    claim(task.deadline.is_none_or(|deadline| stand.finish <= deadline), "misses its deadline");
    for window in &way.whole_in {
        let is_in = match Span::new(stand.start, stand.finish) {
            Some(span) => problem.windows[*window].spans().iter().any(|open| open.covers(span)),
            None => problem.windows[*window].contains(stand.start),
        };
        claim(is_in, "is not wholly in its window");
    }
    for window in &way.start_in {
        claim(problem.windows[*window].contains(stand.start), "does not start in its window");
    }
    claim(stand.members.len() == way.needs.len(), "has not members for each need");
    let mut seen = Vec::new();
    for (need, members) in way.needs.iter().zip(&stand.members) {
        claim(members.len() == need.count, "has not the members it needs");
        for member in members {
            claim(need.able.contains(member), "has a member that is not able");
            claim(!seen.contains(&(need.pool, *member)), "has one member twice");
            seen.push((need.pool, *member));
            let rules = &problem.pools[need.pool].members[*member];
            if let Some(hold) = Span::new(stand.start - need.before, stand.finish + need.after) {
                claim(rules.available.spans().iter().any(|shift| shift.covers(hold)), "is held off shift");
                claim(rules.worked.iter().all(|span| span.overlap(hold).is_none()), "holds a member at work");
            }
        }
    }
    wrong
}

/// What two tasks break together; two fixed ones may clash.
pub fn together(problem: &Problem, one: &Stand, other: &Stand) -> Vec<String> {
    let both = [one, other];
    if both.iter().all(|stand| problem.tasks[stand.task].fixed.is_some()) {
        return vec![];
    }
    let mut wrong = Vec::new();
    for (pool, member, hold) in holds(problem, one) {
        for (other_pool, other_member, other_hold) in holds(problem, other) {
            if (pool, member) == (other_pool, other_member) && hold.overlap(other_hold).is_some() {
                wrong.push(format!("tasks {} and {} hold {pool}/{member} at once", one.task, other.task));
            }
        }
    }
    let passage = |stand: &Stand| problem.tasks[stand.task].ways[stand.way].lane.map(|p| (p, stand.start));
    if let (Some(a), Some(b)) = (passage(one), passage(other))
        && a.0.lane == b.0.lane
        && !in_order(problem, a, b)
        && !in_order(problem, b, a)
    {
        wrong.push(format!("tasks {} and {} are too close in a lane", one.task, other.task));
    }
    wrong
}

fn in_order(problem: &Problem, first: (LaneUse, Moment), second: (LaneUse, Moment)) -> bool {
    let lane = &problem.lanes[first.0.lane];
    let enters = second.1 + second.0.enter;
    if first.0.direction == second.0.direction {
        first.1 + first.0.enter + lane.spacing[first.0.class][second.0.class] <= enters
    } else {
        first.1 + first.0.leave + lane.clearance <= enters
    }
}

/// The holds of a task: pool, member, span.
fn holds(problem: &Problem, stand: &Stand) -> Vec<(usize, usize, Span)> {
    let way = &problem.tasks[stand.task].ways[stand.way];
    let mut holds = Vec::new();
    for (need, members) in way.needs.iter().zip(&stand.members) {
        if let Some(span) = Span::new(stand.start - need.before, stand.finish + need.after) {
            holds.extend(members.iter().map(|member| (need.pool, *member, span)));
        }
    }
    holds
}

/// Blocks of duty that are too long and hold a task that is not fixed.
pub fn unlawful_duty(problem: &Problem, placed: &[&Stand]) -> Vec<String> {
    let mut wrong = Vec::new();
    for (pool, kind) in problem.pools.iter().enumerate() {
        for (number, member) in kind.members.iter().enumerate() {
            let Some(duty) = member.duty else { continue };
            let mut spans: Vec<(Span, bool)> = member.worked.iter().map(|span| (*span, true)).collect();
            for stand in placed {
                let is_fixed = problem.tasks[stand.task].fixed.is_some();
                let own = holds(problem, stand).into_iter().filter(|hold| (hold.0, hold.1) == (pool, number));
                spans.extend(own.map(|hold| (hold.2, is_fixed)));
            }
            spans.sort_unstable();
            let mut block: Option<(Moment, Moment, bool)> = None;
            for (span, is_fixed) in spans {
                let grown = match block {
                    Some((start, end, fixed)) if span.start() - end < duty.then_rest => {
                        (start, end.max(span.end()), fixed && is_fixed)
                    }
                    Some(_) | None => (span.start(), span.end(), is_fixed),
                };
                if grown.1 - grown.0 > duty.at_most && !grown.2 {
                    wrong.push(format!("member {pool}/{number} is on duty from {} to {}", grown.0, grown.1));
                }
                block = Some(grown);
            }
        }
    }
    wrong
}

fn links(problem: &Problem, stands: &[Option<Stand>]) -> Vec<String> {
    let mut wrong = Vec::new();
    for (number, link) in problem.links.iter().enumerate() {
        if problem.tasks[link.after].fixed.is_some() {
            continue;
        }
        let Some(after) = &stands[link.after] else { continue };
        let holds = match &stands[link.before] {
            None => link.if_given_up == IfGivenUp::StartAtDecision,
            Some(before) => link_holds(link.kind, link.lag, before, after),
        };
        if !holds {
            wrong.push(format!("link {number} from {} to {} is broken", link.before, link.after));
        }
    }
    wrong
}

/// Whether two tasks keep a link between them.
pub fn link_holds(kind: LinkKind, lag: Minutes, before: &Stand, after: &Stand) -> bool {
    match kind {
        LinkKind::FinishStart => before.finish + lag <= after.start,
        LinkKind::StartStart => before.start + lag <= after.start,
        LinkKind::FinishFinish => before.finish + lag <= after.finish,
        LinkKind::StartFinish => before.start + lag <= after.finish,
    }
}

/// Waits must sum to the start, and each must have a length.
fn waits(problem: &Problem, schedule: &Schedule) -> Vec<String> {
    let mut wrong = Vec::new();
    for (task, outcome) in schedule.outcomes.iter().enumerate() {
        let (root, steps, start) = match outcome {
            Outcome::Placed(placed) => (Some(placed.root), &placed.steps, Some(placed.start)),
            Outcome::GivenUp(given_up) => {
                let takes = problem.tasks[task].ways[given_up.way].takes;
                (given_up.root, &given_up.steps, given_up.would_finish.map(|finish| finish - takes))
            }
        };
        if steps.iter().any(|step| step.wait <= Minutes::ZERO) {
            wrong.push(format!("task {task} has an empty wait"));
        }
        let mut sum = Minutes::ZERO;
        steps.iter().for_each(|step| sum += step.wait);
        if root.map(Root::moment).map(|moment| moment + sum) != start {
            wrong.push(format!(
                "the waits of task {task} do not sum to its start: {root:?} {steps:?} {start:?}"
            ));
        }
    }
    wrong
}

/// The score, counted again.
pub fn rescore(problem: &Problem, stands: &[Option<Stand>]) -> Score {
    let classes = problem.tasks.iter().map(|task| usize::from(task.class) + 1).max().unwrap_or(0);
    let mut score = Score { classes: vec![ClassScore::default(); classes], ..Score::default() };
    for (task, stand) in problem.tasks.iter().zip(stands) {
        let class = &mut score.classes[usize::from(task.class)];
        let finish = stand.as_ref().map_or(problem.horizon, |stand| stand.finish);
        score.finishes += (finish - problem.now).get();
        match stand {
            None => class.given_up += u64::from(task.weight.max(1)),
            Some(stand) => {
                let dues = [task.due, task.deadline];
                let late = dues.iter().flatten().map(|due| (stand.finish - *due).get()).max().unwrap_or(0);
                class.late += u64::try_from(late).unwrap_or(0);
                score.cost += u64::from(task.ways[stand.way].cost);
            }
        }
        let Some(issued) = task.issued.as_ref().filter(|_| task.fixed.is_none()) else { continue };
        let near = match (issued.start - problem.now).get() {
            ..=360 => 4,
            361..=1440 => 2,
            _ => 1,
        };
        let same_time = stand.as_ref().filter(|s| s.start == issued.start && s.way == issued.way);
        score.moved += match same_time {
            None => 2 * near,
            Some(stand) => {
                let mut pairs = issued.members.iter().zip(&stand.members);
                let stays = pairs.all(|(told, now)| told.iter().all(|member| now.contains(member)));
                if stays { 0 } else { near }
            }
        };
    }
    score
}
