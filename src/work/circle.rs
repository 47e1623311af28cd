//! Circles in the work graph, each named whole.

use crate::finding::fault::{Finding, Place};
use crate::rules::stage::Rules;
use crate::work::graph::{Node, WorkGraph};
use petgraph::algo::tarjan_scc;
use petgraph::graph::NodeIndex;
use std::collections::{BTreeMap, BTreeSet};

/// One finding for each knot of tasks and stages that wait for each other, naming one whole circle in it.
#[must_use]
pub fn circles(work: &WorkGraph, rules: &Rules) -> Vec<Finding> {
    let mut knots: Vec<Vec<NodeIndex>> = tarjan_scc(&work.graph)
        .into_iter()
        .filter(|knot| knot.len() > 1 || knot.iter().any(|node| work.graph.find_edge(*node, *node).is_some()))
        .collect();
    knots.sort_by_key(|knot| knot.iter().min().copied());
    knots.iter().map(|knot| finding(work, rules, &shortest_circle(work, knot))).collect()
}

fn finding(work: &WorkGraph, rules: &Rules, circle: &[NodeIndex]) -> Finding {
    let names: Vec<String> =
        circle.iter().chain(circle.first()).map(|node| name(work, rules, *node)).collect();
    let place = circle.first().map_or_else(nowhere, |node| written(work, rules, *node));
    Finding::error(
        "work-circle",
        place,
        format!("these wait for each other: {}", names.join(" -> ")),
        "a task can never wait for itself, not even through a stage",
        "take out one of these links",
    )
}

/// A shortest circle through the first node of a knot: breadth first, so that people see no detour.
fn shortest_circle(work: &WorkGraph, knot: &[NodeIndex]) -> Vec<NodeIndex> {
    let inside: BTreeSet<NodeIndex> = knot.iter().copied().collect();
    let Some(start) = inside.first().copied() else { return Vec::new() };
    let mut came_from: BTreeMap<NodeIndex, NodeIndex> = BTreeMap::new();
    let mut queue = std::collections::VecDeque::from([start]);
    while let Some(node) = queue.pop_front() {
        let mut next: Vec<NodeIndex> = work.graph.neighbors(node).collect();
        next.sort_unstable();
        for neighbour in next {
            if neighbour == start {
                return path_back(&came_from, start, node);
            }
            if inside.contains(&neighbour) && !came_from.contains_key(&neighbour) {
                came_from.insert(neighbour, node);
                queue.push_back(neighbour);
            }
        }
    }
    vec![start]
}

fn path_back(
    came_from: &BTreeMap<NodeIndex, NodeIndex>,
    start: NodeIndex,
    last: NodeIndex,
) -> Vec<NodeIndex> {
    let mut path = vec![last];
    let mut node = last;
    while node != start {
        let Some(previous) = came_from.get(&node) else { break };
        node = *previous;
        path.push(node);
    }
    path.reverse();
    path
}

fn name(work: &WorkGraph, rules: &Rules, node: NodeIndex) -> String {
    match work.graph.node_weight(node) {
        Some(Node::Task(task)) => task.id.clone(),
        Some(Node::Stage(position)) => {
            rules.stages.get(*position).map_or_else(String::new, |stage| format!("stage {}", stage.id))
        }
        None => String::new(),
    }
}

fn written(work: &WorkGraph, rules: &Rules, node: NodeIndex) -> Place {
    let place = match work.graph.node_weight(node) {
        Some(Node::Task(task)) => {
            let template = task.id.rsplit('/').next().unwrap_or(&task.id);
            rules.tasks.iter().find(|spec| spec.id == template).map(|spec| spec.written.clone())
        }
        Some(Node::Stage(position)) => rules.stages.get(*position).map(|stage| stage.written.clone()),
        None => None,
    };
    place.unwrap_or_else(nowhere)
}

fn nowhere() -> Place {
    Place { file: String::from("tasks.toml"), line: 1, column: 1, start: 0, end: 0 }
}
