//! One try at a plan: roles, problem and schedule under given choices.

use crate::plan::adjust::Adjustments;
use crate::plan::calendar::Calendar;
use crate::plan::problem::{Hints, LEAST_MOVE, ProblemInputs, Stated, state};
use crate::plan::roles::{Role, RoleInputs, roles};
use crate::plan::sheet::{Clash, Plan, TaskState};
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::schedule::latest::{Limits, latest};
use crate::schedule::outcome::{Cause, Outcome, Placement, Schedule, Score};
use crate::schedule::problem::{Fixed, Issued, Problem};
use crate::schedule::search::{Effort, solve};
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::WorkGraph;
use crate::work::timed::Timed;
use petgraph::graph::NodeIndex;
use std::collections::{BTreeMap, BTreeSet};

/// Everything that one try is made from.
#[derive(Clone, Copy, Debug)]
pub struct DraftInputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its tide, daylight and shifts.
    pub calendar: &'a Calendar,
    /// The graph.
    pub work: &'a WorkGraph,
    /// Its times.
    pub timed: &'a Timed,
    /// The record.
    pub situation: &'a Situation,
    /// The plan before this one.
    pub before: Option<&'a Plan>,
    /// Nothing starts before this moment.
    pub now: Moment,
    /// When trying a later decision: the plan that is carried out until then.
    pub carried_out: Option<&'a Plan>,
    /// When trying a later decision: where an earlier try with the same choices put each task.
    pub hints: Option<&'a Hints>,
    /// The last time that the forecast speaks of.
    pub forecast_end: Option<Moment>,
    /// How long to search.
    pub effort: Effort,
}

/// A try at a plan.
#[derive(Clone, Debug)]
pub struct Draft {
    /// What each task is.
    pub roles: BTreeMap<NodeIndex, Role>,
    /// The problem and what its indices stand for.
    pub stated: Stated,
    /// What the engine made of it.
    pub schedule: Schedule,
    /// The choices.
    pub adjustments: Adjustments,
    /// Orders that clash.
    pub clashes: Vec<Clash>,
}

/// Tries a plan under the given choices.
///
/// The engine refuses only problems that are not well formed; the work graph never makes one, so such a refusal comes
/// out as a plan in which nothing is placed and the refusal is named as a clash: shown, not hidden.
#[must_use]
pub fn draft(inputs: DraftInputs<'_>, adjustments: &Adjustments) -> Draft {
    let DraftInputs {
        port,
        calendar,
        work,
        timed,
        situation,
        before,
        now,
        carried_out,
        hints,
        forecast_end,
        effort,
    } = inputs;
    let roles = roles(RoleInputs { port, work, timed, situation, before, adjustments, now, carried_out });
    let before = carried_out.or(before);
    let problem_inputs = ProblemInputs {
        port,
        calendar,
        work,
        timed,
        situation,
        before,
        hints,
        adjustments,
        now,
        forecast_end,
    };
    let mut stated = state(problem_inputs, &roles);
    let mut clashes = Vec::new();
    let mut schedule = solved(&stated.problem, effort, &mut clashes);
    // An ordered start that cannot be met stands all the same: the clash is reported, the order is never dropped.
    let refused = refused_orders(work, &stated, &roles, &schedule);
    if !refused.is_empty() {
        for (position, start, id) in refused {
            fix(&mut stated.problem, position, start);
            let what =
                format!("its ordered start {start} cannot be met with what it needs; the order stands");
            clashes.push(Clash { task: id, what });
        }
        schedule = solved(&stated.problem, effort, &mut clashes);
    }
    let schedule = with_spare(&mut stated.problem, schedule, effort);
    Draft { roles, stated, schedule, adjustments: adjustments.clone(), clashes }
}

/// An issued time that leaves less than this before the latest start is given up for an earlier one, if there is one.
/// Our choice: in a gale's last hours nothing should hang on a single hour.
pub const LEAST_SPARE: Minutes = Minutes::hours(1);

/// Lets issued tasks that have hardly any spare left, and could go earlier, go earlier; nothing else may move, be given
/// up or be late for it.
fn with_spare(problem: &mut Problem, schedule: Schedule, effort: Effort) -> Schedule {
    let latest = latest(problem, Limits::Deadlines, &[]).unwrap_or_default();
    let is_tight = |position: usize, placement: &Placement| {
        let kept = placement.steps.iter().filter(|step| step.cause == Cause::Issued).map(|step| step.wait);
        let could_gain = kept.fold(Minutes::ZERO, |sum, wait| sum + wait) >= LEAST_MOVE;
        let spare = latest.get(position).and_then(|latest| latest.spare(placement.start));
        could_gain && spare.is_some_and(|spare| spare < LEAST_SPARE)
    };
    let tight: Vec<usize> = (0..problem.tasks.len())
        .filter(|position| schedule.placement(*position).is_some_and(|placed| is_tight(*position, placed)))
        .collect();
    if tight.is_empty() {
        return schedule;
    }
    let mut freed = problem.clone();
    for position in &tight {
        if let Some(task) = freed.tasks.get_mut(*position) {
            task.issued = None;
        }
    }
    let start = |schedule: &Schedule, position| schedule.placement(position).map(|placed| placed.start);
    let keeps_the_rest = |earlier: &Schedule| {
        (0..freed.tasks.len())
            .filter(|position| !tight.contains(position))
            .all(|position| start(earlier, position) == start(&schedule, position))
    };
    match solve(&freed, effort) {
        Ok(earlier) if earlier.score.classes <= schedule.score.classes && keeps_the_rest(&earlier) => {
            *problem = freed;
            earlier
        }
        Ok(_) | Err(_) => schedule,
    }
}

fn solved(problem: &Problem, effort: Effort, clashes: &mut Vec<Clash>) -> Schedule {
    match solve(problem, effort) {
        Ok(schedule) => schedule,
        Err(error) => {
            clashes.push(Clash { task: String::new(), what: format!("no plan could be made: {error}") });
            Schedule { outcomes: Vec::new(), score: Score::default(), bound: Score::default(), decodes: 0 }
        }
    }
}

fn refused_orders(
    work: &WorkGraph,
    stated: &Stated,
    roles: &BTreeMap<NodeIndex, Role>,
    schedule: &Schedule,
) -> Vec<(usize, Moment, String)> {
    (0..)
        .zip(&stated.nodes)
        .filter_map(|(position, node)| {
            let Some(Role::Free { ordered: Some(start), .. }) = roles.get(node) else { return None };
            let is_placed = schedule.placement(position).is_some();
            let id = work.task_at(*node)?.id.clone();
            (!is_placed).then_some((position, *start, id))
        })
        .collect()
}

/// Lets a task stand at its ordered start with the first able members.
fn fix(problem: &mut Problem, position: usize, start: Moment) {
    let Some(task) = problem.tasks.get_mut(position) else { return };
    let Some(way) = task.ways.first_mut() else { return };
    let mut used: BTreeSet<(usize, usize)> = BTreeSet::new();
    let mut members = Vec::new();
    for need in &mut way.needs {
        let chosen: Vec<usize> =
            need.able.iter().copied().filter(|m| !used.contains(&(need.pool, *m))).take(need.count).collect();
        used.extend(chosen.iter().map(|member| (need.pool, *member)));
        need.count = chosen.len();
        members.push(chosen);
    }
    task.fixed = Some(Fixed { way: 0, start, finish: start + way.takes, members });
}

impl Draft {
    /// Where this try puts the tasks that it was free to place.
    #[must_use]
    pub fn hints(&self) -> Hints {
        let placed = self.stated.nodes.iter().zip(&self.schedule.outcomes).filter_map(|(node, outcome)| {
            let Outcome::Placed(placement) = outcome else { return None };
            let issued = Issued { way: 0, start: placement.start, members: placement.members.clone() };
            matches!(self.roles.get(node), Some(Role::Free { .. })).then_some((*node, issued))
        });
        placed.collect()
    }

    /// Ids of the tasks that this try does not do in time: given up, or under way past their hard deadline.
    #[must_use]
    pub fn misses(&self, work: &WorkGraph) -> BTreeSet<String> {
        let tasks = self.stated.problem.tasks.iter().zip(&self.schedule.outcomes);
        self.stated
            .nodes
            .iter()
            .zip(tasks)
            .filter(|(node, (task, outcome))| match outcome {
                Outcome::GivenUp(_) => true,
                Outcome::Placed(placement) => {
                    let is_done =
                        matches!(self.roles.get(node), Some(Role::Stands { state: TaskState::Done, .. }));
                    !is_done && task.deadline.is_some_and(|deadline| placement.finish > deadline)
                }
            })
            .filter_map(|(node, _)| work.task_at(*node).map(|task| task.id.clone()))
            .collect()
    }
}
