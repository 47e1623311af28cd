//! From the timed work graph to the engine's whole-minute problem.

use crate::plan::adjust::Adjustments;
use crate::plan::calendar::Calendar;
use crate::plan::roles::Role;
use crate::plan::sheet::{Plan, TaskState};
use crate::port::harbour::Port;
use crate::port::means::Member as PortMember;
use crate::record::situation::Situation;
use crate::rules::task::{DaylightNeed, IfGivenUp, LinkKind, Stake, TideNeed};
use crate::schedule::problem as engine;
use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use crate::units::length::Metres;
use crate::work::graph::{Edge, Task, TaskNeed, WorkGraph};
use crate::work::timed::Timed;
use petgraph::graph::NodeIndex;
use petgraph::visit::EdgeRef;
use std::collections::BTreeMap;

/// Nothing issued moves by less than this: a change that small is not worth a telephone call. Our choice.
pub const LEAST_MOVE: Minutes = Minutes::new(10);

/// How far past the later of now and the end of the forecast a plan reaches. Our choice: two tides and a night of rest
/// after the last forecast time, so that re-opening work has room.
const BEYOND: Minutes = Minutes::hours(48);

/// What the engine's indices stand for.
#[derive(Clone, Debug)]
pub struct Stated {
    /// The problem.
    pub problem: engine::Problem,
    /// The node of each task of the problem.
    pub nodes: Vec<NodeIndex>,
    /// What each window set is, in words: "the tide in Main channel for 11.8 m".
    pub window_words: Vec<String>,
}

/// Where to try tasks first.
pub type Hints = BTreeMap<NodeIndex, engine::Issued>;

/// Everything that a problem is stated from.
#[derive(Clone, Copy, Debug)]
pub struct ProblemInputs<'a> {
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
    /// Where to try tasks first, instead of where the plan before has them.
    pub hints: Option<&'a Hints>,
    /// The choices.
    pub adjustments: &'a Adjustments,
    /// Nothing starts before this moment.
    pub now: Moment,
    /// The last time that the forecast speaks of.
    pub forecast_end: Option<Moment>,
}

/// States the problem of placing every task that `roles` calls free among those that stand.
#[must_use]
pub fn state(inputs: ProblemInputs<'_>, roles: &BTreeMap<NodeIndex, Role>) -> Stated {
    let horizon = inputs.forecast_end.unwrap_or(inputs.now).max(inputs.now + Minutes::hours(72)) + BEYOND;
    let mut stater = Stater { inputs, windows: Vec::new(), window_words: Vec::new(), keys: BTreeMap::new() };
    let mut tasks = Vec::new();
    let mut nodes = Vec::new();
    for (rank, (index, task)) in (0..).zip(inputs.work.tasks()) {
        if let Some(role) = roles.get(&index)
            && let Some(stated) = stater.task(index, task, role, rank)
        {
            tasks.push(stated);
            nodes.push(index);
        }
    }
    let problem = engine::Problem {
        now: inputs.now,
        horizon,
        least_move: LEAST_MOVE,
        links: links(inputs.work, &nodes),
        tasks,
        pools: stater.pools(),
        lanes: stater.lanes(),
        windows: stater.windows,
    };
    Stated { problem, nodes, window_words: stater.window_words }
}

struct Stater<'a> {
    inputs: ProblemInputs<'a>,
    windows: Vec<WindowSet>,
    window_words: Vec<String>,
    /// Window sets by what they are, so that tasks share them.
    keys: BTreeMap<String, usize>,
}

impl Stater<'_> {
    fn task(&mut self, index: NodeIndex, task: &Task, role: &Role, rank: u32) -> Option<engine::Task> {
        let times = self.inputs.timed.tasks.get(&index)?;
        let base = engine::Task {
            ways: Vec::new(),
            release: self.inputs.now,
            due: times.due.as_ref().map(|bound| bound.at),
            deadline: times.deadline.as_ref().map(|bound| bound.at),
            class: class(task.stake),
            weight: task.weight,
            fixed: None,
            issued: None,
            rank,
        };
        match role {
            Role::Stands { start, finish, members, .. } => {
                let (needs, named) = self.named_needs(task, members);
                let way = engine::Way {
                    takes: *finish - *start,
                    whole_in: Vec::new(),
                    start_in: Vec::new(),
                    needs,
                    lane: self.lane_use(task),
                    cost: 0,
                };
                let fixed = engine::Fixed { way: 0, start: *start, finish: *finish, members: named };
                Some(engine::Task { ways: vec![way], fixed: Some(fixed), ..base })
            }
            Role::Free { takes, ordered, is_unreported } => {
                let way = self.way(task, *takes, *ordered);
                let issued =
                    if *is_unreported || ordered.is_some() { None } else { self.issued(index, task, &way) };
                let soonest = self.soonest(task, *is_unreported);
                let release = times.release.unwrap_or(soonest).max(soonest);
                Some(engine::Task { ways: vec![way], release, issued, ..base })
            }
            Role::Waiting | Role::NotNeeded | Role::Cannot(_) => None,
        }
    }

    /// Before this a task is not placed anew: not within a least move of the time at which it was to start, and in whole
    /// steps where nobody has reported.
    fn soonest(&self, task: &Task, is_unreported: bool) -> Moment {
        let now = self.inputs.now;
        if is_unreported {
            return now.ceil_to(LEAST_MOVE);
        }
        let line = self.inputs.before.and_then(|plan| plan.task(&task.id));
        let passed = line.filter(|line| line.state == TaskState::Planned).and_then(|line| line.start);
        passed.filter(|start| *start < now).map_or(now, |start| now.max(start + LEAST_MOVE))
    }

    fn way(&mut self, task: &Task, takes: Minutes, ordered: Option<Moment>) -> engine::Way {
        let mut start_in = Vec::new();
        let mut whole_in = Vec::new();
        if let Some((need, draught)) = &task.tide {
            start_in.push(self.tide_window(need, *draught));
        }
        match task.daylight {
            Some(DaylightNeed::Start) => start_in.push(self.daylight_window()),
            Some(DaylightNeed::Whole) => whole_in.push(self.daylight_window()),
            None => {}
        }
        let port = self.inputs.port;
        for spot in task.spots(port) {
            whole_in.extend(self.usable_window(spot));
        }
        if let Some(start) = ordered {
            let minute = WindowSet::from_spans(Span::new(start, start + Minutes::new(1)));
            start_in.push(self.window(
                format!("order {start}"),
                format!("its ordered start {start}"),
                || minute,
            ));
        }
        let needs = task.needs.iter().map(|need| self.need(need)).collect();
        engine::Way { takes, whole_in, start_in, needs, lane: self.lane_use(task), cost: 0 }
    }

    fn need(&self, need: &TaskNeed) -> engine::Need {
        let members = self.inputs.port.pools.get(need.pool).map_or(0, |pool| pool.members.len());
        let more = self.inputs.adjustments.more.get(&need.pool).copied().unwrap_or(0);
        // A member that is only supposed can do whatever is asked.
        let able = need.able.iter().copied().chain(members..members + more).collect();
        engine::Need { pool: need.pool, count: need.count, able, before: need.before, after: need.after }
    }

    /// The needs of a standing task for which the record or the plan before names the members.
    fn named_needs(&self, task: &Task, members: &[String]) -> (Vec<engine::Need>, Vec<Vec<usize>>) {
        let planned: Vec<String> = self
            .inputs
            .before
            .and_then(|plan| plan.task(&task.id))
            .map(|line| line.members.iter().flat_map(|(_, names)| names.clone()).collect())
            .unwrap_or_default();
        let names = if members.is_empty() { &planned } else { members };
        let mut needs = Vec::new();
        let mut named = Vec::new();
        let mut used: Vec<(usize, usize)> = Vec::new();
        for need in &task.needs {
            let chosen: Vec<usize> = self
                .positions(need.pool, names)
                .into_iter()
                .filter(|position| !used.contains(&(need.pool, *position)))
                .take(need.count)
                .collect();
            if chosen.is_empty() {
                continue;
            }
            used.extend(chosen.iter().map(|position| (need.pool, *position)));
            let able = chosen.clone();
            let count = chosen.len();
            needs.push(engine::Need { pool: need.pool, count, able, before: need.before, after: need.after });
            named.push(chosen);
        }
        (needs, named)
    }

    fn positions(&self, pool: usize, names: &[String]) -> Vec<usize> {
        let members =
            self.inputs.port.pools.get(pool).map(|pool| pool.members.as_slice()).unwrap_or_default();
        names.iter().filter_map(|name| members.iter().position(|member| member.id == *name)).collect()
    }

    /// Where the plan before has the task, if that is still ahead and its members are still able.
    fn issued(&self, index: NodeIndex, task: &Task, way: &engine::Way) -> Option<engine::Issued> {
        if let Some(hints) = self.inputs.hints {
            return hints.get(&index).filter(|hint| hint.start >= self.inputs.now).cloned();
        }
        let line = self.inputs.before?.task(&task.id)?;
        let start = line.start.filter(|start| *start >= self.inputs.now)?;
        if line.state != TaskState::Planned {
            return None;
        }
        let names: Vec<String> = line.members.iter().flat_map(|(_, names)| names.clone()).collect();
        let mut used: Vec<(usize, usize)> = Vec::new();
        let mut members = Vec::new();
        for need in &way.needs {
            let chosen: Vec<usize> = self
                .positions(need.pool, &names)
                .into_iter()
                .filter(|position| need.able.contains(position) && !used.contains(&(need.pool, *position)))
                .take(need.count)
                .collect();
            if chosen.len() != need.count {
                return None;
            }
            used.extend(chosen.iter().map(|position| (need.pool, *position)));
            members.push(chosen);
        }
        Some(engine::Issued { way: 0, start, members })
    }

    fn lane_use(&self, task: &Task) -> Option<engine::LaneUse> {
        let (passage, class) = task.passage.as_ref()?;
        let lane = self.inputs.port.channels.iter().position(|channel| channel.id == passage.channel)?;
        let direction = if passage.outbound { engine::Direction::Out } else { engine::Direction::In };
        Some(engine::LaneUse { lane, enter: passage.enters, leave: passage.leaves, direction, class: *class })
    }

    fn tide_window(&mut self, need: &TideNeed, draught: Metres) -> usize {
        let ProblemInputs { port, calendar, .. } = self.inputs;
        let words = format!("the tide in {} for {draught}", need.channel);
        let key = format!("{words} {} {}", need.from.get(), need.until.get());
        self.window(key, words, || calendar.starts_afloat(port, need, draught))
    }

    fn daylight_window(&mut self) -> usize {
        let calendar = self.inputs.calendar;
        self.window(String::from("daylight"), String::from("daylight"), || calendar.daylight().clone())
    }

    /// When a place can be used; `None` if nobody has said that it cannot.
    fn usable_window(&mut self, spot: &str) -> Option<usize> {
        let (from, until) = self.inputs.situation.unusable(spot)?;
        let until = until.map_or(Moment::LATEST, Moment::at_or_after);
        let closed = WindowSet::from_spans(Span::new(Moment::at_or_before(from), until));
        Some(self.window(format!("use of {spot}"), format!("{spot} can be used"), || closed.gaps()))
    }

    fn window(&mut self, key: String, words: String, make: impl FnOnce() -> WindowSet) -> usize {
        if let Some(known) = self.keys.get(&key) {
            return *known;
        }
        let position = self.windows.len();
        self.windows.push(make());
        self.window_words.push(words);
        self.keys.insert(key, position);
        position
    }

    fn pools(&self) -> Vec<engine::Pool> {
        let port = self.inputs.port;
        (0..)
            .zip(&port.pools)
            .map(|(position, pool)| {
                let duty = pool
                    .duty
                    .map(|hours| engine::Duty { at_most: hours.at_most, then_rest: hours.then_rest });
                let own = pool.members.iter().map(|member| engine::Member {
                    available: self.available(member, &pool.id),
                    duty,
                    worked: worked(member),
                });
                let more = self.inputs.adjustments.more.get(&position).copied().unwrap_or(0);
                let supposed = (0..more).map(|_| engine::Member {
                    available: WindowSet::always(),
                    duty,
                    worked: Vec::new(),
                });
                engine::Pool { members: own.chain(supposed).collect() }
            })
            .collect()
    }

    /// When a member is on call and in service.
    fn available(&self, member: &PortMember, pool: &str) -> WindowSet {
        let shifts = self.inputs.calendar.on_call(&member.id);
        let outages = self.inputs.situation.outages(&member.id, pool);
        let out = WindowSet::from_spans(outages.filter_map(|outage| {
            let until = outage.until.map_or(Moment::LATEST, Moment::at_or_after);
            Span::new(Moment::at_or_before(outage.from), until)
        }));
        shifts.overlap(&out.gaps())
    }

    fn lanes(&self) -> Vec<engine::Lane> {
        let channels = self.inputs.port.channels.iter();
        channels
            .map(|channel| engine::Lane { spacing: channel.spacing.clone(), clearance: channel.clearance })
            .collect()
    }
}

fn worked(member: &PortMember) -> Vec<Span> {
    let spans = member.worked.iter();
    spans.filter_map(|(from, to)| Span::new(Moment::at_or_before(*from), Moment::at_or_after(*to))).collect()
}

/// The engine's class of a stake: the gravest first.
#[must_use]
pub fn class(stake: Stake) -> u8 {
    match stake {
        Stake::Life => 0,
        Stake::Harm => 1,
        Stake::Loss => 2,
        Stake::Order => 3,
    }
}

fn links(work: &WorkGraph, nodes: &[NodeIndex]) -> Vec<engine::Link> {
    let positions: BTreeMap<NodeIndex, usize> =
        (0..).zip(nodes).map(|(position, index)| (*index, position)).collect();
    work.graph
        .edge_references()
        .filter_map(|edge| {
            let Edge::Link { kind, lag, if_given_up } = edge.weight() else { return None };
            Some(engine::Link {
                before: *positions.get(&edge.source())?,
                after: *positions.get(&edge.target())?,
                kind: match kind {
                    LinkKind::FinishStart => engine::LinkKind::FinishStart,
                    LinkKind::StartStart => engine::LinkKind::StartStart,
                    LinkKind::FinishFinish => engine::LinkKind::FinishFinish,
                    LinkKind::StartFinish => engine::LinkKind::StartFinish,
                },
                lag: *lag,
                if_given_up: match if_given_up {
                    IfGivenUp::GiveUpToo => engine::IfGivenUp::GiveUpToo,
                    IfGivenUp::StartAtDecision => engine::IfGivenUp::StartAtDecision,
                },
            })
        })
        .collect()
}
