//! From the engine's schedule to the lines of a plan: one for each task.

use crate::arrival::odds::Answers;
use crate::plan::chain::ChainWords;
use crate::plan::draft::Draft;
use crate::plan::roles::Role;
use crate::plan::sheet::{GivenUp, Plan, TaskLine, TaskState};
use crate::port::harbour::Port;
use crate::rules::stage::Rules;
use crate::schedule::outcome::{GivenUp as EngineGivenUp, Outcome, Placement, Why};
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::work::graph::{Task, WorkGraph};
use crate::work::timed::{TaskTimes, Timed};
use petgraph::graph::NodeIndex;
use std::collections::BTreeMap;

/// What lines are made from.
#[derive(Clone, Copy, Debug)]
pub struct LineInputs<'a> {
    /// The port.
    pub port: &'a Port,
    /// Its rules.
    pub rules: &'a Rules,
    /// The graph.
    pub work: &'a WorkGraph,
    /// Its times.
    pub timed: &'a Timed,
    /// Answers for the advisory in force.
    pub answers: Option<&'a Answers>,
    /// The plan before this one.
    pub before: Option<&'a Plan>,
    /// The try that became the plan.
    pub draft: &'a Draft,
    /// The latest start of each task of the problem, without regard to people and craft.
    pub latest_starts: &'a [Option<Moment>],
    /// The time of the plan.
    pub now: Moment,
}

/// A line for every task: by start, then those without a time, ties by id.
#[must_use]
pub fn lines(inputs: LineInputs<'_>) -> Vec<TaskLine> {
    let positions: BTreeMap<NodeIndex, usize> =
        (0..).zip(&inputs.draft.stated.nodes).map(|(position, node)| (*node, position)).collect();
    let mut lines: Vec<TaskLine> = inputs
        .work
        .tasks()
        .filter_map(|(index, task)| {
            let role = inputs.draft.roles.get(&index)?;
            let times = inputs.timed.tasks.get(&index)?;
            let mut line = blank(&inputs, task, role, times);
            if let Some(position) = positions.get(&index) {
                fill(&inputs, &mut line, *position, role);
            }
            line.caught = caught(&inputs, times, &line);
            Some(line)
        })
        .collect();
    lines.sort_by(|a, b| {
        let key = |line: &TaskLine| (line.start.is_none(), line.start, line.state);
        key(a).cmp(&key(b)).then_with(|| a.id.cmp(&b.id))
    });
    lines
}

fn blank(inputs: &LineInputs<'_>, task: &Task, role: &Role, times: &TaskTimes) -> TaskLine {
    let state = match role {
        Role::Stands { state, .. } => *state,
        Role::Free { .. } => TaskState::Planned,
        Role::Waiting => TaskState::Waiting,
        Role::NotNeeded => TaskState::NotNeeded,
        Role::Cannot(_) => TaskState::GivenUp,
    };
    let is_cut = inputs.draft.adjustments.cut.contains(&task.id);
    let stage_id = |position: usize| inputs.rules.stages.get(position).map(|stage| stage.id.clone());
    TaskLine {
        id: task.id.clone(),
        name: task.name.clone(),
        state,
        start: None,
        finish: None,
        latest_start: None,
        deadline: times.deadline.as_ref().map(|bound| bound.at),
        due: times.due.as_ref().map(|bound| bound.at),
        takes: task.takes,
        members: Vec::new(),
        who: task.who.clone(),
        at: task.at.clone(),
        approvers: task.approvers.clone(),
        confirm: task.confirm.clone(),
        stake: task.stake,
        caught: None,
        if_declared: match role {
            Role::Free { .. } | Role::Waiting => times.if_declared.and_then(stage_id),
            Role::Stands { .. } | Role::NotNeeded | Role::Cannot(_) => None,
        },
        is_unreported: is_unreported(inputs, task, role),
        is_ordered: matches!(role, Role::Free { ordered: Some(_), .. }),
        cut: if is_cut { task.cut.as_ref().map(|cut| cut.price.clone()) } else { None },
        stands_in_for: match role {
            Role::NotNeeded | Role::Cannot(_) => None,
            Role::Stands { .. } | Role::Free { .. } | Role::Waiting => task.stands_in_for.first().cloned(),
        },
        late_by: Minutes::ZERO,
        chain: Vec::new(),
        chain_from: match role {
            Role::Stands { start, .. } => *start,
            Role::Free { .. } | Role::Waiting | Role::NotNeeded | Role::Cannot(_) => inputs.now,
        },
        given_up: match role {
            Role::Cannot(why) => Some(GivenUp {
                why: why.clone(),
                would_finish: None,
                late_by: None,
                is_proved: true,
                chain: Vec::new(),
                chain_from: inputs.now,
            }),
            Role::Stands { .. } | Role::Free { .. } | Role::Waiting | Role::NotNeeded => None,
        },
        basis: task.basis.clone(),
    }
}

/// A begun task past its planned finish is as silent as one that should have begun.
fn is_unreported(inputs: &LineInputs<'_>, task: &Task, role: &Role) -> bool {
    match role {
        Role::Free { is_unreported, .. } => *is_unreported,
        Role::Stands { start, state: TaskState::Started, .. } => {
            let planned = inputs.before.and_then(|plan| plan.task(&task.id)).and_then(|line| line.finish);
            *start + task.takes < inputs.now && planned.is_none_or(|finish| finish <= inputs.now)
        }
        Role::Stands { .. } | Role::Waiting | Role::NotNeeded | Role::Cannot(_) => false,
    }
}

fn fill(inputs: &LineInputs<'_>, line: &mut TaskLine, position: usize, role: &Role) {
    let stated = &inputs.draft.stated;
    let Some(engine_task) = stated.problem.tasks.get(position) else { return };
    if let Some(way) = engine_task.ways.first() {
        line.takes = way.takes;
    }
    match inputs.draft.schedule.outcomes.get(position) {
        Some(Outcome::Placed(placement)) => {
            line.start = Some(placement.start);
            line.finish = Some(placement.finish);
            line.members = member_names(inputs, position, placement);
            let bound = [engine_task.deadline, engine_task.due].into_iter().flatten().min();
            if line.state != TaskState::Done {
                line.late_by = bound.map_or(Minutes::ZERO, |at| (placement.finish - at).max(Minutes::ZERO));
            }
            if matches!(role, Role::Free { .. }) {
                line.latest_start = inputs.latest_starts.get(position).copied().flatten();
                (line.chain_from, line.chain) = words(inputs).to_start(position);
            }
        }
        Some(Outcome::GivenUp(given_up)) => {
            line.state = TaskState::GivenUp;
            line.given_up = Some(told(inputs, position, given_up, line.deadline));
        }
        None => {
            line.state = TaskState::GivenUp;
            line.given_up = Some(GivenUp {
                why: String::from("no plan could be made"),
                would_finish: None,
                late_by: None,
                is_proved: false,
                chain: Vec::new(),
                chain_from: inputs.now,
            });
        }
    }
}

fn told(
    inputs: &LineInputs<'_>,
    position: usize,
    given_up: &EngineGivenUp,
    deadline: Option<Moment>,
) -> GivenUp {
    let (chain_from, chain) = words(inputs).to_finish(position);
    let because = inputs
        .draft
        .stated
        .nodes
        .get(position)
        .and_then(|node| inputs.timed.tasks.get(node))
        .and_then(|times| times.deadline.as_ref())
        .map_or_else(String::new, |bound| format!(" ({})", bound.because));
    let why = match &given_up.why {
        Why::MissedDeadline => match deadline {
            Some(_) => format!("it would be finished after its deadline{because}"),
            None => String::from("it would be finished too late"),
        },
        Why::NoWindow => String::from("its windows (tide, daylight or ordered time) do not open long enough"),
        Why::NoMembers(pool) => {
            let name = inputs.port.pools.get(*pool).map_or("", |pool| pool.name.as_str());
            format!("{name}: fewer able members than it needs")
        }
        Why::YieldsTo(other) => {
            format!("it would fit only in place of {}, which weighs more", task_id(inputs, *other))
        }
        Why::NoTime => String::from("windows, people and craft never come together before the plan ends"),
        Why::Predecessor(other) => {
            let id = task_id(inputs, *other);
            format!("it waits for {id}, which is given up")
        }
    };
    GivenUp {
        why,
        would_finish: given_up.would_finish,
        late_by: given_up.late_by,
        is_proved: given_up.proved,
        chain,
        chain_from,
    }
}

fn words<'a>(inputs: &LineInputs<'a>) -> ChainWords<'a> {
    ChainWords { work: inputs.work, port: inputs.port, draft: inputs.draft }
}

fn task_id(inputs: &LineInputs<'_>, position: usize) -> String {
    let node = inputs.draft.stated.nodes.get(position);
    node.and_then(|node| inputs.work.task_at(*node)).map(|task| task.id.clone()).unwrap_or_default()
}

/// Members by pool; two needs of one pool are told together.
fn member_names(
    inputs: &LineInputs<'_>,
    position: usize,
    placement: &Placement,
) -> Vec<(String, Vec<String>)> {
    let Some(way) = inputs.draft.stated.problem.tasks.get(position).and_then(|task| task.ways.first()) else {
        return Vec::new();
    };
    let mut by_pool: Vec<(String, Vec<String>)> = Vec::new();
    for (need, members) in way.needs.iter().zip(&placement.members) {
        let Some(pool) = inputs.port.pools.get(need.pool) else { continue };
        let names = members.iter().map(|member| {
            let name = pool.members.get(*member).map(|member| member.id.clone());
            name.unwrap_or_else(|| format!("one more {}", pool.id))
        });
        match by_pool.iter_mut().find(|(id, _)| *id == pool.id) {
            Some((_, known)) => known.extend(names),
            None => by_pool.push((pool.id.clone(), names.collect())),
        }
    }
    by_pool
}

/// The greatest of the chances that a wind which limits the task comes before it is finished.
fn caught(inputs: &LineInputs<'_>, times: &TaskTimes, line: &TaskLine) -> Option<Chance> {
    if !matches!(line.state, TaskState::Planned | TaskState::Started) {
        return None;
    }
    let finish = line.finish?;
    let answers = inputs.answers?;
    let chances =
        times.risks.iter().filter_map(|key| answers.get(key)).map(|answer| answer.chance_by(finish));
    chances.fold(None, |worst: Option<Chance>, chance| match worst {
        Some(worst) if worst >= chance => Some(worst),
        Some(_) | None => Some(chance),
    })
}
