//! What would make given-up tasks fit: found by planning again with it, with the last minute for deciding it.

use crate::arrival::threads::each;
use crate::plan::adjust::Adjustments;
use crate::plan::draft::{Draft, DraftInputs, draft};
use crate::plan::problem::class;
use crate::plan::sheet::{Plan, Relief, ReliefKind, ReliefStep};
use crate::rules::task::Leave;
use crate::schedule::search::Effort;
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::{Edge, Task, WorkGraph};
use petgraph::Direction;
use petgraph::graph::NodeIndex;
use petgraph::visit::EdgeRef;
use std::cmp::Reverse;
use std::collections::BTreeSet;

/// The choices that the files permit and that make something fit which otherwise does not; none if nothing is missed.
#[must_use]
pub fn permitted(inputs: DraftInputs<'_>, plain: &Draft) -> Adjustments {
    let missed = plain.misses(inputs.work);
    if missed.is_empty() {
        return plain.adjustments.clone();
    }
    let cuts = cuttable(inputs, plain, &missed, Leave::Permitted);
    let with_cuts = fewest(inputs, plain, cuts);
    let mut chosen = with_cuts.adjustments.clone();
    for id in &with_cuts.misses(inputs.work) {
        let is_permitted = inputs
            .work
            .task(id)
            .and_then(|task| task.or_else.as_ref())
            .is_some_and(|substitute| substitute.leave == Leave::Permitted);
        if is_permitted {
            chosen.substituted.insert(id.clone());
        }
    }
    chosen
}

/// At most so many reliefs are told, those that help most. Our choice: nobody weighs more of them in a night, and for each
/// its last minute has to be found.
const MOST_TOLD: usize = 8;

/// Of at most so many tasks the stand-ins are tried, missed ones and weighty ones first. Our choice: where more is missed,
/// single stand-ins no longer save the plan.
const MOST_STAND_INS: usize = 24;

/// At most so many tries are made to do with fewer cuts. Our choice: enough to find the few that matter among hundreds;
/// where dozens matter, some that do not may stay among them.
const MOST_FEWER: usize = 60;

/// Up to so many tasks all of these tries are made; in a larger port fewer, in proportion, for each costs more. Our
/// choice: reliefs for an overloaded port of 2,000 tasks should come in about a second.
const ALL_TRIES_UP_TO: usize = 200;

/// How many of `most` tries are made in a port of so many tasks; at least one.
fn tries(most: usize, tasks: usize) -> usize {
    (most * ALL_TRIES_UP_TO / tasks.max(ALL_TRIES_UP_TO)).max(1)
}

/// Schedules for each try, times tasks. Our choice: up to 100 tasks a try is searched as long as the plan itself, in a
/// large port shorter, so that hundreds of tries take seconds. A relief may be missed by it, never invented.
const TRY_DECODES: u64 = 20_000;

/// The reliefs that were found for the tasks that `plan` gives up, the one to be decided first before the others.
#[must_use]
pub fn reliefs(inputs: DraftInputs<'_>, base: &Draft, plan: &Plan) -> Vec<Relief> {
    let missed = base.misses(inputs.work);
    if missed.is_empty() {
        return Vec::new();
    }
    let tasks = u64::try_from(base.stated.nodes.len()).unwrap_or(u64::MAX);
    let decodes = inputs.effort.decodes.min((TRY_DECODES / tasks.max(1)).max(1));
    let inputs = DraftInputs { effort: Effort { decodes, ..inputs.effort }, ..inputs };
    let finder = Finder { inputs, base, plan, missed: &missed };
    let cuts = cuttable(inputs, base, &missed, Leave::ByOrder);
    let with_cuts = fewest(inputs, base, cuts);
    let choices = (with_cuts.adjustments != base.adjustments).then_some(with_cuts.adjustments);
    let choices: Vec<Adjustments> = choices.into_iter().chain(finder.single_choices()).collect();
    let mut helpful: Vec<Draft> =
        each(&choices, |choice| finder.helpful(choice)).into_iter().flatten().collect();
    helpful.sort_by(|a, b| {
        (&a.schedule.score.classes, &a.adjustments).cmp(&(&b.schedule.score.classes, &b.adjustments))
    });
    helpful.truncate(tries(MOST_TOLD, base.stated.nodes.len()));
    let mut found: Vec<Relief> = each(&helpful, |tried| finder.relief(tried));
    found.sort_by(|a, b| (a.decide_by, &a.relieves, &a.steps).cmp(&(b.decide_by, &b.relieves, &b.steps)));
    found.dedup();
    found
}

/// Tasks whose shorter way could help the missed ones: everything that is not done yet and may be cut.
fn cuttable(inputs: DraftInputs<'_>, base: &Draft, missed: &BTreeSet<String>, leave: Leave) -> Vec<String> {
    // Those that a missed task waits for come last: the filter below drops the others first.
    let upstream = upstream(inputs.work, missed);
    let mut cuts: Vec<(bool, String)> = inputs
        .work
        .tasks()
        .filter(|(index, task)| {
            let is_offered = task.cut.as_ref().is_some_and(|cut| cut.leave == leave);
            is_offered && base.stated.nodes.contains(index) && !base.adjustments.cut.contains(&task.id)
        })
        .map(|(index, task)| (upstream.contains(&index), task.id.clone()))
        .collect();
    cuts.sort();
    cuts.into_iter().map(|(_, id)| id).collect()
}

/// The plan with all of `cuts`, and then with fewer that give up and delay no more than all do; the plan in hand if they
/// do not help.
fn fewest(inputs: DraftInputs<'_>, base: &Draft, cuts: Vec<String>) -> Draft {
    let mut adjustments = base.adjustments.clone();
    adjustments.cut.extend(cuts.iter().cloned());
    if cuts.is_empty() {
        return base.clone();
    }
    let mut best = draft(inputs, &adjustments);
    if best.schedule.score.classes >= base.schedule.score.classes {
        return base.clone();
    }
    // Halves, their halves and so on: where few cuts matter, few tries find them among many.
    let mut groups = halves(&cuts);
    for _ in 0..tries(MOST_FEWER, base.stated.nodes.len()) {
        let Some(group) = groups.pop() else { break };
        let mut fewer = best.adjustments.clone();
        fewer.cut.retain(|cut| !group.contains(cut));
        let tried = draft(inputs, &fewer);
        if tried.schedule.score.classes <= best.schedule.score.classes {
            best = tried;
        } else if group.len() > 1 {
            groups.extend(halves(group));
        }
    }
    best
}

/// The two halves of a list, the first one last: it is taken first.
fn halves(cuts: &[String]) -> Vec<&[String]> {
    let (first, second) = cuts.split_at(cuts.len().div_ceil(2));
    [second, first].into_iter().filter(|half| !half.is_empty()).collect()
}

/// The missed tasks and everything they wait for.
fn upstream(work: &WorkGraph, missed: &BTreeSet<String>) -> BTreeSet<NodeIndex> {
    let mut stack: Vec<NodeIndex> = missed.iter().filter_map(|id| work.find(id)).collect();
    let mut seen: BTreeSet<NodeIndex> = stack.iter().copied().collect();
    while let Some(node) = stack.pop() {
        for edge in work.graph.edges_directed(node, Direction::Incoming) {
            if matches!(edge.weight(), Edge::Link { .. }) && seen.insert(edge.source()) {
                stack.push(edge.source());
            }
        }
    }
    seen
}

struct Finder<'a> {
    inputs: DraftInputs<'a>,
    base: &'a Draft,
    plan: &'a Plan,
    missed: &'a BTreeSet<String>,
}

impl Finder<'_> {
    /// One more member of a pool that the missed tasks or those before them need, a stand-in for one of these, or an
    /// order lifted.
    fn single_choices(&self) -> Vec<Adjustments> {
        let mut choices = Vec::new();
        let nodes = upstream(self.inputs.work, self.missed);
        let pools: BTreeSet<usize> = nodes
            .iter()
            .filter_map(|node| self.inputs.work.task_at(*node))
            .flat_map(|task| task.needs.iter().map(|need| need.pool))
            .collect();
        for pool in pools {
            let mut choice = self.base.adjustments.clone();
            *choice.more.entry(pool).or_insert(0) += 1;
            choices.push(choice);
        }
        let mut replaceable: Vec<&Task> = nodes
            .iter()
            .filter_map(|node| self.inputs.work.task_at(*node))
            .filter(|task| task.or_else.is_some() && !self.base.adjustments.substituted.contains(&task.id))
            .collect();
        replaceable
            .sort_by_key(|task| (!self.missed.contains(&task.id), class(task.stake), Reverse(task.weight)));
        for task in replaceable.into_iter().take(tries(MOST_STAND_INS, self.base.stated.nodes.len())) {
            let mut choice = self.base.adjustments.clone();
            choice.substituted.insert(task.id.clone());
            choices.push(choice);
        }
        for (task, state) in &self.inputs.situation.tasks {
            if state.fixed.is_some() {
                let mut choice = self.base.adjustments.clone();
                choice.lifted.insert(task.clone());
                choices.push(choice);
            }
        }
        choices
    }

    /// The try with a choice, if with it less is given up or late, by weight, than without.
    fn helpful(&self, choice: &Adjustments) -> Option<Draft> {
        let tried = draft(self.inputs, choice);
        let is_order_lost = tried.clashes.len() > self.base.clashes.len();
        if is_order_lost || tried.schedule.score.classes >= self.base.schedule.score.classes {
            return None;
        }
        let missed = tried.misses(self.inputs.work);
        let leans_on_missed = self.stand_ins(choice).iter().any(|id| missed.contains(id));
        (!self.missed.is_subset(&missed) && !leans_on_missed).then_some(tried)
    }

    /// The relief that a helpful try is, with its last minute.
    fn relief(&self, tried: &Draft) -> Relief {
        let missed = tried.misses(self.inputs.work);
        let relieves: BTreeSet<String> = self.missed.difference(&missed).cloned().collect();
        let decide_by = self.decide_by(tried, &relieves, &missed);
        Relief {
            steps: self.steps(&tried.adjustments),
            relieves: relieves.into_iter().collect(),
            leaves: missed.intersection(self.missed).cloned().collect(),
            gives_up: missed.difference(self.missed).cloned().collect(),
            decide_by,
        }
    }

    /// The stand-ins of the tasks that a choice substitutes: a relief must not lean on one that does not fit itself.
    fn stand_ins(&self, choice: &Adjustments) -> Vec<String> {
        let substituted = choice.substituted.difference(&self.base.adjustments.substituted);
        let tasks = substituted.filter_map(|id| self.inputs.work.task(id)?.or_else.as_ref());
        tasks.flat_map(|substitute| substitute.tasks.iter().cloned()).collect()
    }

    /// The last minute at which the choice still relieves as much and gives up no more, the plan in hand being carried
    /// out until then: steps of an hour until it does not, then halving.
    ///
    /// Tides and rest can make a later decision help where an earlier one does not; people are told the end of the first
    /// unbroken stretch, the safe side. Each try starts from where the one before put the tasks.
    fn decide_by(&self, first: &Draft, relieves: &BTreeSet<String>, missed: &BTreeSet<String>) -> Moment {
        let mut hints = first.hints();
        let mut helps = |when: Moment| {
            let inputs =
                DraftInputs { now: when, carried_out: Some(self.plan), hints: Some(&hints), ..self.inputs };
            let tried = draft(inputs, &first.adjustments);
            let then = tried.misses(self.inputs.work);
            let is_order_lost = tried.clashes.len() > self.base.clashes.len();
            let does = !is_order_lost
                && relieves.is_disjoint(&then)
                && then.iter().all(|id| self.missed.contains(id) || missed.contains(id));
            if does {
                hints = tried.hints();
            }
            does
        };
        let mut good = self.inputs.now;
        let mut bad = good + Minutes::hours(72);
        let mut probe = good + Minutes::hours(1);
        while probe < bad {
            if helps(probe) {
                good = probe;
                probe = probe + Minutes::hours(1);
            } else {
                bad = probe;
            }
        }
        while (bad - good).get() > 1 {
            let middle = good + Minutes::new((bad - good).get() / 2);
            if helps(middle) { good = middle } else { bad = middle }
        }
        good
    }

    fn steps(&self, choice: &Adjustments) -> Vec<ReliefStep> {
        let work = self.inputs.work;
        let base = &self.base.adjustments;
        let task_step = |id: &String, kind: ReliefKind, words: &dyn Fn(&Task) -> (String, String)| {
            let (what, price) = work.task(id).map(words).unwrap_or_default();
            ReliefStep { kind, about: id.clone(), what, price }
        };
        let cuts = choice.cut.difference(&base.cut).map(|id| {
            task_step(id, ReliefKind::Cut, &|task| {
                let cut = task.cut.as_ref();
                let to = cut.map_or(task.takes, |cut| cut.to);
                (
                    format!("cut short to {to} in all: {}", task.name),
                    cut.map(|c| c.price.clone()).unwrap_or_default(),
                )
            })
        });
        let stand_ins = choice.substituted.difference(&base.substituted).map(|id| {
            task_step(id, ReliefKind::Substitute, &|task| {
                let substitute = task.or_else.as_ref();
                let names: Vec<&str> = substitute
                    .map(|s| s.tasks.iter().filter_map(|id| work.task(id)).map(|t| t.name.as_str()).collect())
                    .unwrap_or_default();
                (
                    format!("instead of \"{}\": {}", task.name, names.join(", ")),
                    substitute.map(|s| s.price.clone()).unwrap_or_default(),
                )
            })
        });
        let more =
            choice.more.iter().filter(|(pool, count)| base.more.get(pool) != Some(count)).map(|(pool, _)| {
                let name = self.inputs.port.pools.get(*pool).map(|pool| (pool.id.clone(), pool.name.clone()));
                let (about, name) = name.unwrap_or_default();
                ReliefStep {
                    kind: ReliefKind::OneMore,
                    about,
                    what: format!("one more: {name}"),
                    price: String::new(),
                }
            });
        let lifted = choice.lifted.difference(&base.lifted).map(|id| {
            task_step(id, ReliefKind::LiftOrder, &|task| {
                (format!("lift the order that fixes \"{}\"", task.name), String::new())
            })
        });
        cuts.chain(stand_ins).chain(more).chain(lifted).collect()
    }
}
