//! Chains of causes in words: what a task waited for, from now to its start or finish, in minutes that add up.

use crate::plan::draft::Draft;
use crate::plan::sheet::ChainLink;
use crate::port::harbour::Port;
use crate::schedule::explain::{What, chain};
use crate::schedule::outcome::Cause;
use crate::time::moment::{Minutes, Moment};
use crate::work::graph::WorkGraph;

/// What the words of a chain are made from.
#[derive(Clone, Copy, Debug)]
pub struct ChainWords<'a> {
    /// The graph, for ids.
    pub work: &'a WorkGraph,
    /// The port, for names.
    pub port: &'a Port,
    /// The try that became the plan.
    pub draft: &'a Draft,
}

impl ChainWords<'_> {
    /// Why a placed task starts when it starts: minutes from the returned moment to its start.
    #[must_use]
    pub fn to_start(&self, position: usize) -> (Moment, Vec<ChainLink>) {
        let (from, mut links) = self.to_finish(position);
        links.pop();
        (from, links)
    }

    /// Why a task is, or would be, finished when it is: minutes from the returned moment to that finish. The last link
    /// is the task itself.
    #[must_use]
    pub fn to_finish(&self, position: usize) -> (Moment, Vec<ChainLink>) {
        let problem = &self.draft.stated.problem;
        let parts =
            chain(problem, &self.draft.schedule, position).map(|chain| chain.parts).unwrap_or_default();
        let last = parts.len().saturating_sub(1);
        let mut from = problem.now;
        // A chain that begins with work already under way is told from when that began.
        let begun = parts.first().filter(|part| part.what == What::Fixed).map(|part| part.minutes);
        if let Some(minutes) = begun {
            from = from + minutes;
        }
        let skipped = usize::from(begun.is_some());
        let links = (0..)
            .zip(parts)
            .skip(skipped)
            .filter(|(number, part)| part.minutes != Minutes::ZERO || *number == last)
            .map(|(_, part)| ChainLink { what: self.words(part.task, &part.what), minutes: part.minutes })
            .collect();
        (from, links)
    }

    fn words(&self, task: usize, what: &What) -> String {
        let id = self.id(task);
        match what {
            What::Release => format!("not before ({id})"),
            What::Fixed => format!("until {id} begins"),
            What::Before => format!("up to {id}"),
            What::Link(_) => format!("gap before {id}"),
            What::Wait(cause) => self.cause_words(cause),
            What::MemberFrom { pool } => format!("until {} is free for {id}", self.pool(*pool)),
            What::Behind { lane } => {
                let name = self.port.channels.get(*lane).map(|channel| channel.name.as_str());
                format!("spacing in {}", name.unwrap_or_default())
            }
            What::Done => id,
        }
    }

    fn cause_words(&self, cause: &Cause) -> String {
        let window = |index: &usize| self.draft.stated.window_words.get(*index).cloned().unwrap_or_default();
        match cause {
            Cause::Window(index) => format!("waits for {}", window(index)),
            Cause::Windows(indices) => {
                let words: Vec<String> = indices.iter().map(window).collect();
                format!("waits for {} together", words.join(" and "))
            }
            Cause::Pool { pool, holders } => {
                let holders: Vec<String> = holders.iter().map(|holder| self.id(*holder)).collect();
                let by = if holders.is_empty() {
                    String::new()
                } else {
                    format!(" (with {})", holders.join(", "))
                };
                format!("waits for {}{by}", self.pool(*pool))
            }
            Cause::Rest { pool, member } => {
                let member = self.port.pools.get(*pool).and_then(|pool| pool.members.get(*member));
                format!(
                    "waits for {} to rest",
                    member.map_or_else(|| self.pool(*pool), |member| member.id.clone())
                )
            }
            Cause::Shift { pool } => format!("waits for {} to come on call", self.pool(*pool)),
            Cause::Together => String::from("waits until all it needs are free together"),
            Cause::Lane { lane, other } => {
                let name = self.port.channels.get(*lane).map(|channel| channel.name.as_str());
                format!("waits for {} in {}", self.id(*other), name.unwrap_or_default())
            }
            Cause::Issued => String::from("kept at its issued time"),
            Cause::LeastMove => String::from("moves by at least 10 min if at all"),
            Cause::HeldBack => String::from("held back for another task"),
        }
    }

    fn pool(&self, pool: usize) -> String {
        self.port.pools.get(pool).map(|pool| pool.name.clone()).unwrap_or_default()
    }

    fn id(&self, position: usize) -> String {
        let node = self.draft.stated.nodes.get(position);
        node.and_then(|node| self.work.task_at(*node)).map(|task| task.id.clone()).unwrap_or_default()
    }
}
