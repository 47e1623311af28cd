//! What each task is to a plan: already settled, under way, to be placed, waiting for a stage, or not needed.

use crate::plan::adjust::Adjustments;
use crate::plan::sheet::{Plan, TaskState};
use crate::port::harbour::Port;
use crate::record::situation::{Outcome, Situation, TaskState as Recorded, Way};
use crate::rules::task::IfGivenUp;
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::{Edge, Task, TaskNeed, WorkGraph};
use crate::work::timed::Timed;
use petgraph::Direction;
use petgraph::algo::toposort;
use petgraph::graph::NodeIndex;
use petgraph::visit::EdgeRef;
use std::collections::BTreeMap;

/// What a task is to the plan that is being made.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Role {
    /// It stands where it is: done, begun, ordered for this time, or (when trying a later decision) carried out by then.
    Stands {
        /// Its start.
        start: Moment,
        /// Its finish, known or expected.
        finish: Moment,
        /// Done, begun, or only fixed.
        state: TaskState,
        /// Members named in the record, by id; empty if not said.
        members: Vec<String>,
    },
    /// To be placed.
    Free {
        /// How long it takes.
        takes: Minutes,
        /// Its start by order, if there is one.
        ordered: Option<Moment>,
        /// Its time in the plan before has passed and nobody has reported it.
        is_unreported: bool,
    },
    /// The stage that gates it, or a task that it waits for, is not due.
    Waiting,
    /// Not needed.
    NotNeeded,
    /// It cannot be done: why, in words.
    Cannot(String),
}

/// Everything that decides roles.
#[derive(Clone, Copy, Debug)]
pub struct RoleInputs<'a> {
    /// The port, for who belongs to which pool.
    pub port: &'a Port,
    /// The graph.
    pub work: &'a WorkGraph,
    /// Its times.
    pub timed: &'a Timed,
    /// The record.
    pub situation: &'a Situation,
    /// The plan before this one.
    pub before: Option<&'a Plan>,
    /// The choices.
    pub adjustments: &'a Adjustments,
    /// Nothing starts before this moment.
    pub now: Moment,
    /// When trying a decision later than the record reaches: the plan that is carried out until `now`.
    pub carried_out: Option<&'a Plan>,
}

/// The role of every task.
///
/// A task that waits for one that is waiting waits too; one whose predecessor cannot be done is given up or starts at the
/// decision, as the link says; one that a stand-in replaces takes its successors with it where the link says "give up
/// too", and they count as not needed.
#[must_use]
pub fn roles(inputs: RoleInputs<'_>) -> BTreeMap<NodeIndex, Role> {
    let mut roles: BTreeMap<NodeIndex, Role> = BTreeMap::new();
    // A circle has been refused before; should one remain, its tasks keep the roles that the files' order gives.
    let order = toposort(&inputs.work.graph, None)
        .unwrap_or_else(|_| inputs.work.graph.node_indices().collect::<Vec<NodeIndex>>());
    for index in order {
        let Some(task) = inputs.work.task_at(index) else { continue };
        let own = own_role(&inputs, index, task);
        let role = match own {
            Role::Free { takes, .. } => after_predecessors(&inputs, index, &roles)
                .or_else(|| beginning(&inputs, (index, task), takes, &roles))
                .unwrap_or(own),
            Role::Waiting => after_predecessors(&inputs, index, &roles).unwrap_or(own),
            Role::Stands { .. } | Role::NotNeeded | Role::Cannot(_) => own,
        };
        roles.insert(index, role);
    }
    free_where_held(&inputs, &mut roles);
    roles
}

/// One hold of one member, by name.
type Hold = (String, Moment, Moment);

/// A task that is just being begun, as planned, is placed anew if a report has shown since that one of its members is
/// still held by other work.
fn free_where_held(inputs: &RoleInputs<'_>, roles: &mut BTreeMap<NodeIndex, Role>) {
    let is_beginning = |role: &Role| matches!(role, Role::Stands { state: TaskState::Planned, .. });
    let mut taken: Vec<Hold> = Vec::new();
    for (index, role) in roles.iter().filter(|(_, role)| !is_beginning(role)) {
        taken.extend(holds(inputs, *index, role));
    }
    let beginning: Vec<NodeIndex> =
        roles.iter().filter(|(_, role)| is_beginning(role)).map(|(index, _)| *index).collect();
    for index in beginning.into_iter().filter(|_| inputs.carried_out.is_none()) {
        let Some(role @ Role::Stands { start, finish, .. }) = roles.get(&index) else { continue };
        let own = holds(inputs, index, role);
        let is_held = own.iter().any(|(name, from, to)| {
            taken.iter().any(|(other, begins, ends)| other == name && from < ends && begins < to)
        });
        if is_held {
            let takes = *finish - *start;
            roles.insert(index, Role::Free { takes, ordered: None, is_unreported: false });
        } else {
            taken.extend(own);
        }
    }
}

/// Whom a standing task holds, from when to when.
fn holds(inputs: &RoleInputs<'_>, index: NodeIndex, role: &Role) -> Vec<Hold> {
    let (Role::Stands { start, finish, members, .. }, Some(task)) = (role, inputs.work.task_at(index)) else {
        return Vec::new();
    };
    let planned = inputs.before.and_then(|plan| plan.task(&task.id));
    let of_plan = || planned.map(|line| line.members.iter().flat_map(|(_, names)| names.clone()).collect());
    let names: Vec<String> = if members.is_empty() { of_plan().unwrap_or_default() } else { members.clone() };
    let of_need = |need: &TaskNeed| {
        let pool = inputs.port.pools.get(need.pool);
        let is_in = |name: &&String| pool.is_some_and(|pool| pool.members.iter().any(|m| m.id == **name));
        let (from, to) = (*start - need.before, *finish + need.after);
        names.iter().filter(is_in).map(|name| (name.clone(), from, to)).collect::<Vec<Hold>>()
    };
    task.needs.iter().flat_map(of_need).collect()
}

fn own_role(inputs: &RoleInputs<'_>, index: NodeIndex, task: &Task) -> Role {
    let nothing = Recorded::default();
    let recorded = inputs.situation.tasks.get(&task.id).unwrap_or(&nothing);
    match &recorded.outcome {
        Some(Outcome::Done { at, .. }) => return done(inputs, task, recorded, Moment::at_or_after(*at)),
        Some(Outcome::Cannot { said }) => {
            return Role::Cannot(format!("{} reports that it cannot be done", said.by));
        }
        Some(Outcome::NotNeeded { .. }) => return Role::NotNeeded,
        None => {}
    }
    if is_substituted(inputs, &task.id) && recorded.started.is_none() {
        return Role::NotNeeded;
    }
    if !task.stands_in_for.is_empty() && !task.stands_in_for.iter().any(|main| is_substituted(inputs, main)) {
        return Role::NotNeeded;
    }
    let takes = takes(inputs, task, recorded);
    if let Some(started) = &recorded.started {
        return begun(inputs, task, Moment::at_or_before(started.at), &started.members);
    }
    if let Some(carried) = carried_out(inputs, task) {
        return carried;
    }
    let release = inputs.timed.tasks.get(&index).and_then(|times| times.release);
    if release.is_none() {
        return Role::Waiting;
    }
    let ordered = recorded
        .fixed
        .as_ref()
        .filter(|_| !inputs.adjustments.lifted.contains(&task.id))
        .map(|told| Moment::at_or_after(told.value));
    Role::Free { takes, ordered, is_unreported: is_unreported(inputs, index, task) }
}

/// How long after its planned start a task may still be taken to begin as planned. Our choice: people start work first
/// and report it then.
pub const GRACE: Minutes = Minutes::new(15);

/// A task whose planned start has passed by more than the grace, without a report, and which nothing kept from starting.
fn is_unreported(inputs: &RoleInputs<'_>, index: NodeIndex, task: &Task) -> bool {
    let planned = inputs.before.and_then(|plan| plan.task(&task.id));
    let has_passed = planned.is_some_and(|line| {
        line.state == TaskState::Planned && line.start.is_some_and(|start| start + GRACE < inputs.now)
    });
    has_passed && inputs.carried_out.is_none() && gate_is_open(inputs, index)
}

fn gate_is_open(inputs: &RoleInputs<'_>, index: NodeIndex) -> bool {
    inputs.timed.tasks.get(&index).is_some_and(|times| times.if_declared.is_none())
}

/// A task whose planned start is now, or passed within the grace, stands: it is just being begun. Only if its gate is
/// open, and all that it waits for is over.
fn beginning(
    inputs: &RoleInputs<'_>,
    (index, task): (NodeIndex, &Task),
    takes: Minutes,
    roles: &BTreeMap<NodeIndex, Role>,
) -> Option<Role> {
    let line = inputs.before?.task(&task.id)?;
    let start = line.start.filter(|start| *start < inputs.now && inputs.now <= *start + GRACE)?;
    let is_ready = line.state == TaskState::Planned
        && inputs.carried_out.is_none()
        && gate_is_open(inputs, index)
        && inputs.timed.tasks.get(&index).is_some_and(|times| times.release.is_some_and(|r| r <= inputs.now));
    let over =
        |edge: petgraph::graph::EdgeReference<'_, Edge>| match (edge.weight(), roles.get(&edge.source())) {
            (Edge::Link { .. }, Some(Role::Stands { finish, .. })) => *finish <= start,
            (Edge::Link { .. }, Some(Role::NotNeeded)) | (Edge::Gate | Edge::Counts | Edge::Before, _) => {
                true
            }
            (Edge::Link { .. }, _) => false,
        };
    if !is_ready || !inputs.work.graph.edges_directed(index, Direction::Incoming).all(over) {
        return None;
    }
    let members = line.members.iter().flat_map(|(_, members)| members.clone()).collect();
    Some(Role::Stands { start, finish: start + takes, state: TaskState::Planned, members })
}

fn done(inputs: &RoleInputs<'_>, task: &Task, recorded: &Recorded, finish: Moment) -> Role {
    let started = recorded.started.as_ref().map(|started| Moment::at_or_before(started.at));
    let planned = inputs.before.and_then(|plan| plan.task(&task.id)).and_then(|line| line.start);
    let start = started.or(planned).filter(|start| *start <= finish).unwrap_or(finish - task.takes);
    let members = recorded.started.as_ref().map(|started| started.members.clone()).unwrap_or_default();
    Role::Stands { start, finish, state: TaskState::Done, members }
}

/// A begun task is expected to finish after its usual time, but never before now.
fn begun(inputs: &RoleInputs<'_>, task: &Task, start: Moment, members: &[String]) -> Role {
    let nothing = Recorded::default();
    let recorded = inputs.situation.tasks.get(&task.id).unwrap_or(&nothing);
    let whole = recorded.takes.as_ref().map_or(task.takes, |told| told.value);
    let usual = (start + whole).max(inputs.now);
    let finish = match (&task.cut, cut_since(inputs, task, recorded)) {
        (Some(cut), Some(decided)) => (start + cut.to).max(decided).max(start).min(usual),
        (Some(_) | None, _) => usual,
    };
    Role::Stands { start, finish, state: TaskState::Started, members: members.to_vec() }
}

/// When the shorter way was decided: by order, or by this plan now.
fn cut_since(inputs: &RoleInputs<'_>, task: &Task, recorded: &Recorded) -> Option<Moment> {
    let ordered = recorded.way.as_ref().filter(|told| told.value == Way::Cut);
    if let Some(told) = ordered {
        return Some(Moment::at_or_after(told.said.known));
    }
    inputs.adjustments.cut.contains(&task.id).then_some(inputs.now)
}

fn takes(inputs: &RoleInputs<'_>, task: &Task, recorded: &Recorded) -> Minutes {
    let whole = recorded.takes.as_ref().map_or(task.takes, |told| told.value);
    match (&task.cut, cut_since(inputs, task, recorded)) {
        (Some(cut), Some(_)) => cut.to.min(whole),
        (Some(_) | None, _) => whole,
    }
}

/// When a later decision is tried: what the plan in hand has begun by then stands as planned.
fn carried_out(inputs: &RoleInputs<'_>, task: &Task) -> Option<Role> {
    let line = inputs.carried_out?.task(&task.id)?;
    let start = line.start.filter(|start| *start < inputs.now)?;
    if line.state != TaskState::Planned {
        return None;
    }
    let finish = line.finish?;
    let members: Vec<String> = line.members.iter().flat_map(|(_, members)| members.clone()).collect();
    if finish <= inputs.now {
        return Some(Role::Stands { start, finish, state: TaskState::Planned, members });
    }
    match begun(inputs, task, start, &members) {
        Role::Stands { start, finish, members, .. } => {
            Some(Role::Stands { start, finish, state: TaskState::Planned, members })
        }
        Role::Free { .. } | Role::Waiting | Role::NotNeeded | Role::Cannot(_) => None,
    }
}

fn is_substituted(inputs: &RoleInputs<'_>, task: &str) -> bool {
    let ordered = inputs
        .situation
        .tasks
        .get(task)
        .and_then(|state| state.way.as_ref())
        .is_some_and(|told| told.value == Way::Substitute);
    ordered || inputs.adjustments.substituted.contains(task)
}

/// What the roles of its predecessors make of a task that would otherwise be placed.
fn after_predecessors(
    inputs: &RoleInputs<'_>,
    index: NodeIndex,
    roles: &BTreeMap<NodeIndex, Role>,
) -> Option<Role> {
    let mut waits = false;
    for edge in inputs.work.graph.edges_directed(index, Direction::Incoming) {
        let Edge::Link { if_given_up, .. } = edge.weight() else { continue };
        let Some(before) = inputs.work.task_at(edge.source()) else { continue };
        match (roles.get(&edge.source()), if_given_up) {
            (Some(Role::Cannot(_)), IfGivenUp::GiveUpToo) => {
                return Some(Role::Cannot(format!("waits for {}, which cannot be done", before.id)));
            }
            (Some(Role::NotNeeded), IfGivenUp::GiveUpToo) if is_substituted(inputs, &before.id) => {
                return Some(Role::NotNeeded);
            }
            (Some(Role::Waiting), _) => waits = true,
            (Some(Role::Cannot(_) | Role::NotNeeded | Role::Stands { .. } | Role::Free { .. }) | None, _) => {
            }
        }
    }
    waits.then_some(Role::Waiting)
}
