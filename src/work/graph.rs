//! The graph of tasks and stages: nodes, edges, and finding one by its id.

use crate::port::harbour::Port;
use crate::rules::limit::{Deadline, LimitAt};
use crate::rules::task::{DaylightNeed, IfGivenUp, Leave, LinkKind, NotBefore, Passage, Stake, TideNeed};
use crate::time::moment::Minutes;
use crate::units::length::Metres;
use petgraph::graph::{DiGraph, NodeIndex};
use std::collections::BTreeMap;

/// All tasks and stages of a port and what ties them, without any time yet. It holds no circle.
#[derive(Clone, Debug, Default)]
pub struct WorkGraph {
    /// Nodes in the order of the files; an edge points from what comes first to what waits.
    pub graph: DiGraph<Node, Edge>,
    index: BTreeMap<String, NodeIndex>,
}

/// A stage or a task.
#[derive(Clone, Debug, PartialEq)]
pub enum Node {
    /// A stage, by its place in the rules.
    Stage(usize),
    /// A task.
    Task(Box<Task>),
}

/// What ties two nodes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Edge {
    /// The later task waits for the earlier one.
    Link {
        /// Which ends are tied.
        kind: LinkKind,
        /// At least this long between them.
        lag: Minutes,
        /// What becomes of the later one if the earlier one is given up.
        if_given_up: IfGivenUp,
    },
    /// The task may start only when the stage is declared.
    Gate,
    /// The later stage's due time counts from the earlier stage's.
    Counts,
    /// A task that has to be done before a stage, or a task that a stage's declaration waits for.
    Before,
}

/// A ship, piece of plant or berth, by its place in the port's lists.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Thing {
    /// None: a single task.
    Port,
    /// A ship.
    Ship(usize),
    /// A piece of plant.
    Plant(usize),
    /// A berth.
    Berth(usize),
}

/// One task, with everything a template left to the thing filled in.
#[derive(Clone, Debug, PartialEq)]
pub struct Task {
    /// "V01/sail", "H05".
    pub id: String,
    /// What is done, names filled in.
    pub name: String,
    /// What it is done to.
    pub thing: Thing,
    /// How long it takes.
    pub takes: Minutes,
    /// A shorter way.
    pub cut: Option<TaskCut>,
    /// Tasks that stand in for it.
    pub or_else: Option<TaskSubstitute>,
    /// The tasks that it stands in for; while one of them is in the plan it is not needed.
    pub stands_in_for: Vec<String>,
    /// The stage that gates it, by its place in the rules.
    pub gate: Option<usize>,
    /// Times before which it may not start; the thing's own times filled in.
    pub not_before: Vec<NotBefore>,
    /// Deadlines.
    pub done_before: Vec<Deadline>,
    /// Winds that stop it.
    pub stops_at: Vec<LimitAt>,
    /// Tide needed, with the draught for which.
    pub tide: Option<(TideNeed, Metres)>,
    /// Daylight needed.
    pub daylight: Option<DaylightNeed>,
    /// Passage through a channel, with the ship's class in it.
    pub passage: Option<(Passage, usize)>,
    /// Members of pools it holds.
    pub needs: Vec<TaskNeed>,
    /// Who does it.
    pub who: String,
    /// Who approves.
    pub approvers: Vec<String>,
    /// How it is confirmed.
    pub confirm: String,
    /// Where, in words.
    pub at: String,
    /// What is at stake.
    pub stake: Stake,
    /// Consequence within its stake.
    pub weight: u32,
    /// Where its numbers come from.
    pub basis: String,
}

/// A shorter way to do a task.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct TaskCut {
    /// How long it then takes in all.
    pub to: Minutes,
    /// What is lost, in words.
    pub price: String,
    /// Whether the plan may take it by itself.
    pub leave: Leave,
}

/// Tasks that stand in for another.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct TaskSubstitute {
    /// Their full ids.
    pub tasks: Vec<String>,
    /// What it costs, in words.
    pub price: String,
    /// Whether the plan may take it by itself.
    pub leave: Leave,
}

/// Members of a pool that a task holds.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct TaskNeed {
    /// The pool, by its place in the port's list.
    pub pool: usize,
    /// How many.
    pub count: usize,
    /// Members that may serve, by their place in the pool, in the order in which they are called.
    pub able: Vec<usize>,
    /// Held this long before the start.
    pub before: Minutes,
    /// And this long after the finish.
    pub after: Minutes,
}

impl Task {
    /// The berths, places and channels without which it cannot be done: those of its plant or berth, and the channel that
    /// it passes. A ship may do whatever it must at a berth that can no longer be used, since it has to get away from it.
    #[must_use]
    pub fn spots<'a>(&'a self, port: &'a Port) -> Vec<&'a str> {
        let berth = match self.thing {
            Thing::Port | Thing::Ship(_) => None,
            Thing::Plant(plant) => port.plant.get(plant).and_then(|plant| port.berth(&plant.berth)),
            Thing::Berth(berth) => port.berths.get(berth),
        };
        let at = berth.into_iter().flat_map(|berth| [berth.id.as_str(), berth.place.as_str()]);
        at.chain(self.passage.as_ref().map(|(passage, _)| passage.channel.as_str())).collect()
    }
}

impl WorkGraph {
    /// Adds a node under an id; the first one keeps the id.
    pub fn add(&mut self, id: &str, node: Node) -> NodeIndex {
        let index = self.graph.add_node(node);
        self.index.entry(id.to_owned()).or_insert(index);
        index
    }

    /// The node with this id; stages are known as "stage S3".
    #[must_use]
    pub fn find(&self, id: &str) -> Option<NodeIndex> {
        self.index.get(id).copied()
    }

    /// The task with this id.
    #[must_use]
    pub fn task(&self, id: &str) -> Option<&Task> {
        self.find(id).and_then(|index| self.task_at(index))
    }

    /// The task at a node.
    #[must_use]
    pub fn task_at(&self, index: NodeIndex) -> Option<&Task> {
        match self.graph.node_weight(index) {
            Some(Node::Task(task)) => Some(task),
            Some(Node::Stage(_)) | None => None,
        }
    }

    /// All tasks in the order of the files.
    pub fn tasks(&self) -> impl Iterator<Item = (NodeIndex, &Task)> {
        self.graph.node_indices().filter_map(|index| self.task_at(index).map(|task| (index, task)))
    }

    /// The ids of all tasks, for "did you mean".
    pub fn task_ids(&self) -> impl Iterator<Item = &str> {
        self.tasks().map(|(_, task)| task.id.as_str())
    }
}

/// The id under which a stage stands in the graph.
#[must_use]
pub fn stage_key(stage: &str) -> String {
    format!("stage {stage}")
}
