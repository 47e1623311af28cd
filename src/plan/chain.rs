//! Chains of causes: what a task waited for, back to where nothing held it, in minutes that add up.

use crate::plan::draft::Draft;
use crate::plan::sheet::ChainLink;
use crate::port::harbour::Port;
use crate::schedule::outcome::{Cause, Outcome, Root, Step};
use crate::schedule::problem::LinkKind;
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::WorkGraph;

/// Why a placed task starts when it starts: minutes from the returned moment to its start.
#[must_use]
pub fn chain_to_start(
    work: &WorkGraph,
    port: &Port,
    draft: &Draft,
    position: usize,
) -> (Moment, Vec<ChainLink>) {
    let mut walk = Walk { work, port, draft, links: Vec::new() };
    let from = walk.back_from(position);
    walk.links.reverse();
    (from, walk.links)
}

/// Why a given-up task would finish when it would: minutes from the returned moment to that finish.
#[must_use]
pub fn chain_to_finish(
    work: &WorkGraph,
    port: &Port,
    draft: &Draft,
    position: usize,
) -> (Moment, Vec<ChainLink>) {
    let mut walk = Walk { work, port, draft, links: Vec::new() };
    walk.takes(position);
    let from = walk.back_from(position);
    walk.links.reverse();
    (from, walk.links)
}

struct Walk<'a> {
    work: &'a WorkGraph,
    port: &'a Port,
    draft: &'a Draft,
    /// Latest first.
    links: Vec<ChainLink>,
}

impl Walk<'_> {
    /// Walks back from a task's start to where the waiting began; each round goes to an earlier task of an acyclic
    /// graph, so it ends.
    fn back_from(&mut self, position: usize) -> Moment {
        let mut position = position;
        loop {
            let Some((root, steps)) = self.root_and_steps(position) else { return self.now() };
            for step in steps.iter().rev() {
                let what = self.cause_words(&step.cause);
                self.push(what, step.wait);
            }
            let Root::Link(link, at) = root else {
                if let Root::Release(at) = root {
                    let wait = at - self.now();
                    let what = format!("not before {}", self.id(position));
                    self.push(what, wait);
                    return self.now();
                }
                return root.moment();
            };
            let Some(link) = self.draft.stated.problem.links.get(link).copied() else { return at };
            let Some(Outcome::Placed(before)) = self.draft.schedule.outcomes.get(link.before) else {
                return at;
            };
            let (anchor, is_finish) = match link.kind {
                LinkKind::FinishStart | LinkKind::FinishFinish => (before.finish, true),
                LinkKind::StartStart | LinkKind::StartFinish => (before.start, false),
            };
            let gap = at - anchor;
            let what = format!("after {}", self.id(link.before));
            self.push(what, gap);
            if is_finish {
                self.takes(link.before);
            }
            position = link.before;
        }
    }

    fn root_and_steps(&self, position: usize) -> Option<(Root, Vec<Step>)> {
        match self.draft.schedule.outcomes.get(position)? {
            Outcome::Placed(placement) => Some((placement.root, placement.steps.clone())),
            Outcome::GivenUp(given_up) => given_up.root.map(|root| (root, given_up.steps.clone())),
        }
    }

    fn takes(&mut self, position: usize) {
        let length = match self.draft.schedule.outcomes.get(position) {
            Some(Outcome::Placed(placement)) => placement.finish - placement.start,
            Some(Outcome::GivenUp(_)) | None => {
                let task = self.draft.stated.problem.tasks.get(position);
                task.and_then(|task| task.ways.first()).map(|way| way.takes).unwrap_or_default()
            }
        };
        let what = self.id(position);
        self.push(what, length);
    }

    fn push(&mut self, what: String, minutes: Minutes) {
        if minutes != Minutes::ZERO {
            self.links.push(ChainLink { what, minutes });
        }
    }

    fn now(&self) -> Moment {
        self.draft.stated.problem.now
    }

    fn id(&self, position: usize) -> String {
        let node = self.draft.stated.nodes.get(position);
        node.and_then(|node| self.work.task_at(*node)).map(|task| task.id.clone()).unwrap_or_default()
    }

    fn cause_words(&self, cause: &Cause) -> String {
        let window = |index: &usize| self.draft.stated.window_words.get(*index).cloned().unwrap_or_default();
        let pool = |index: &usize| self.port.pools.get(*index).map(|p| p.name.clone()).unwrap_or_default();
        match cause {
            Cause::Window(index) => format!("waits for {}", window(index)),
            Cause::Windows(indices) => {
                let words: Vec<String> = indices.iter().map(window).collect();
                format!("waits for {} together", words.join(" and "))
            }
            Cause::Pool { pool: index, holders } => {
                let holders: Vec<String> = holders.iter().map(|holder| self.id(*holder)).collect();
                let by = if holders.is_empty() {
                    String::new()
                } else {
                    format!(" (with {})", holders.join(", "))
                };
                format!("waits for {}{by}", pool(index))
            }
            Cause::Rest { pool: index, member } => {
                let member = self.port.pools.get(*index).and_then(|p| p.members.get(*member));
                format!(
                    "waits for {} to rest",
                    member.map_or_else(|| pool(index), |member| member.id.clone())
                )
            }
            Cause::Shift { pool: index } => format!("waits for {} to come on shift", pool(index)),
            Cause::Together => String::from("waits until all it needs are free together"),
            Cause::Lane { lane, other } => {
                let name = self.port.channels.get(*lane).map(|c| c.name.clone()).unwrap_or_default();
                format!("waits for {} in {name}", self.id(*other))
            }
            Cause::Issued => String::from("kept at its issued time"),
            Cause::LeastMove => String::from("moves by at least 10 min if at all"),
            Cause::HeldBack => String::from("held back for another task"),
        }
    }
}
