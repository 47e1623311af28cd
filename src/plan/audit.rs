//! The audit: re-derives everything that a plan claims from the graph, the port, the record and the odds.
//!
//! It shares no code with the engine and never sees the engine's problem. Every plan passes it before it is shown; a
//! plan that does not pass is shown with what was found.

use crate::plan::audit_case::{AuditInputs, breach, holds_time};
use crate::plan::audit_people::people;
use crate::plan::audit_record::record;
use crate::plan::audit_times::times;
use crate::plan::audit_water::water;
use crate::plan::roles::GRACE;
use crate::plan::sheet::{Breach, Plan, TaskLine, TaskState};
use crate::rules::task::{IfGivenUp, LinkKind};
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::Edge;
use petgraph::visit::EdgeRef;
use std::collections::BTreeMap;

/// Everything wrong with a plan, sorted; empty for a sound one.
#[must_use]
pub fn audit(inputs: AuditInputs<'_>, plan: &Plan) -> Vec<Breach> {
    let mut breaches = Vec::new();
    roll_call(inputs, plan, &mut breaches);
    for line in &plan.tasks {
        shape(line, plan.now, &mut breaches);
    }
    links(inputs, plan, &mut breaches);
    times(inputs, plan, &mut breaches);
    water(inputs, plan, &mut breaches);
    people(inputs, plan, &mut breaches);
    record(inputs, plan, &mut breaches);
    breaches.sort();
    breaches.dedup();
    breaches
}

/// Every task of the graph stands in the plan once, and nothing else does.
fn roll_call(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    let mut seen: BTreeMap<&str, usize> = BTreeMap::new();
    for line in &plan.tasks {
        *seen.entry(line.id.as_str()).or_insert(0) += 1;
        if inputs.work.task(&line.id).is_none() {
            breaches.push(breach("audit-unknown-task", &line.id, String::from("the port has no such task")));
        }
    }
    for id in inputs.work.task_ids() {
        match seen.get(id) {
            None => {
                breaches.push(breach("audit-task-dropped", id, String::from("the plan does not speak of it")))
            }
            Some(1) => {}
            Some(times) => {
                breaches.push(breach("audit-task-twice", id, format!("it stands in the plan {times} times")));
            }
        }
    }
}

/// What must hold for one line by itself.
fn shape(line: &TaskLine, now: Moment, breaches: &mut Vec<Breach>) {
    let mut say = |code, what: String| breaches.push(breach(code, &line.id, what));
    match (line.start, line.finish) {
        (Some(start), Some(finish)) => {
            if !holds_time(line.state) {
                say("audit-given-up-holds-time", String::from("it has no place in the plan and yet a time"));
            }
            if finish - start != line.takes {
                say(
                    "audit-duration",
                    format!("from start to finish it takes {}, not {}", finish - start, line.takes),
                );
            }
            if line.state == TaskState::Planned && start + GRACE < now {
                say(
                    "audit-in-the-past",
                    format!("it is planned to start at {start}, before the plan's own time"),
                );
            }
        }
        (None, None) if holds_time(line.state) => {
            say("audit-no-time", String::from("it is in the plan and has no time"));
        }
        (None, None) => {}
        (Some(_), None) | (None, Some(_)) => {
            say("audit-half-a-time", String::from("it has only a start or a finish"))
        }
    }
    if !holds_time(line.state) && line.members.iter().any(|(_, members)| !members.is_empty()) {
        say(
            "audit-given-up-holds-people",
            String::from("it has no place in the plan and yet people or craft"),
        );
    }
    if line.state == TaskState::GivenUp && line.given_up.is_none() {
        say("audit-no-reason", String::from("it is given up without a reason"));
    }
    if let (TaskState::Planned, Some(start)) = (line.state, line.start)
        && sum(line.chain.iter().map(|link| link.minutes)) != start - line.chain_from
    {
        say("audit-chain", String::from("the minutes of its chain do not add up to its start"));
    }
    if let Some(given_up) = &line.given_up
        && let Some(would_finish) = given_up.would_finish
        && sum(given_up.chain.iter().map(|link| link.minutes)) != would_finish - given_up.chain_from
    {
        say("audit-chain", String::from("the minutes of its chain do not add up to its would-be finish"));
    }
}

fn sum(minutes: impl Iterator<Item = Minutes>) -> Minutes {
    minutes.fold(Minutes::ZERO, |total, part| total + part)
}

/// Every link is kept between tasks that are still to start; what is given up takes with it what the link says.
fn links(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    let by_id: BTreeMap<&str, &TaskLine> = plan.tasks.iter().map(|line| (line.id.as_str(), line)).collect();
    for edge in inputs.work.graph.edge_references() {
        let Edge::Link { kind, lag, if_given_up } = edge.weight() else { continue };
        let line = |node| inputs.work.task_at(node).and_then(|task| by_id.get(task.id.as_str()));
        let (Some(before), Some(after)) = (line(edge.source()), line(edge.target())) else { continue };
        if after.state != TaskState::Planned {
            continue;
        }
        if before.state == TaskState::GivenUp && *if_given_up == IfGivenUp::GiveUpToo {
            let what = format!("{} is given up and takes it with it, yet it is planned", before.id);
            breaches.push(breach("audit-predecessor-given-up", &after.id, what));
        }
        if before.state == TaskState::Waiting {
            let what = format!("{} waits for a stage, yet it is planned", before.id);
            breaches.push(breach("audit-predecessor-waits", &after.id, what));
        }
        let (anchor, end) = match kind {
            LinkKind::FinishStart => (before.finish, after.start),
            LinkKind::StartStart => (before.start, after.start),
            LinkKind::FinishFinish => (before.finish, after.finish),
            LinkKind::StartFinish => (before.start, after.finish),
        };
        if let (Some(anchor), Some(end)) = (anchor, end)
            && holds_time(before.state)
            && end < anchor + *lag
        {
            let what = format!("it comes {} too soon after {}", anchor + *lag - end, before.id);
            breaches.push(breach("audit-link", &after.id, what));
        }
    }
}
